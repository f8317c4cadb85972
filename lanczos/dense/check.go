package dense

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
)

// Asymmetry is the largest |a_ij - conj(a_ji)|, in units of the largest element
// magnitude, that is taken for rounding and averaged away. More is an error.
const Asymmetry = 1e-12

var (
	// ErrShape says that a slice does not hold the number of elements that the
	// stated dimensions ask for, or that a dimension is negative.
	ErrShape = errors.New("slice does not fit the dimensions")
	// ErrNotFinite says that an element is NaN or infinite.
	ErrNotFinite = errors.New("element is not finite")
	// ErrNotHermitian says that a_ij and conj(a_ji) differ by more than rounding.
	ErrNotHermitian = errors.New("matrix is not Hermitian")
	// ErrIteration says that the iteration for a tridiagonal or bidiagonal matrix
	// did not end. It is not expected for finite input.
	ErrIteration = errors.New("iteration did not end")
)

func checkShape(length, rows, cols int) error {
	if rows < 0 || cols < 0 {
		return fmt.Errorf("dense: %d×%d matrix; expected dimensions of at least 0: %w", rows, cols, ErrShape)
	}
	if cols > 0 && rows > math.MaxInt/cols || length != rows*cols {
		return fmt.Errorf("dense: %d elements given for a %d×%d matrix; pass rows*cols elements, row after row: %w", length, rows, cols, ErrShape)
	}
	return nil
}

// largestReal returns the largest magnitude in a.
func largestReal(a []float64, cols int) (float64, error) {
	top := 0.0
	for i, x := range a {
		if x = math.Abs(x); x > top {
			top = x
		}
		if x-x != 0 {
			return 0, notFinite(i, cols, a[i])
		}
	}
	return top, nil
}

// largestPart returns the largest magnitude of a real or imaginary part in a.
func largestPart(a []complex128, cols int) (float64, error) {
	top := 0.0
	for i, z := range a {
		x, y := math.Abs(real(z)), math.Abs(imag(z))
		if x-x != 0 || y-y != 0 {
			return 0, notFinite(i, cols, z)
		}
		top = max(top, x, y)
	}
	return top, nil
}

func notFinite(i, cols int, value any) error {
	return fmt.Errorf("dense: element (%d,%d) is %v; expected finite numbers; look where the matrix is filled: %w", i/cols, i%cols, value, ErrNotFinite)
}

func checkSymmetric(a []float64, n int, top float64) error {
	for i := range n {
		for j := range i {
			if math.Abs(a[i*n+j]/top-a[j*n+i]/top) > Asymmetry {
				return notHermitian(i, j, a[i*n+j], a[j*n+i])
			}
		}
	}
	return nil
}

func checkHermitian(a []complex128, n int, top float64) error {
	unit := complex(1/top, 0)
	for i := range n {
		for j := range i + 1 {
			if cmplx.Abs(a[i*n+j]*unit-cmplx.Conj(a[j*n+i]*unit)) > Asymmetry {
				return notHermitian(i, j, a[i*n+j], a[j*n+i])
			}
		}
	}
	return nil
}

func notHermitian(i, j int, lower, upper any) error {
	return fmt.Errorf("dense: element (%d,%d) is %v but element (%d,%d) is %v; expected complex conjugates; add the adjoint of every term: %w", i, j, lower, j, i, upper, ErrNotHermitian)
}

// balance returns the exponent e for which 2^-e times the largest element is
// of order one, or 0 where the elements are already far from overflow and underflow.
func balance(top float64) int {
	if top == 0 || top > 1e-100 && top < 1e100 {
		return 0
	}
	_, e := math.Frexp(top)
	return e
}

func rescale(values []float64, exponent int) {
	if exponent == 0 {
		return
	}
	for i := range values {
		values[i] = math.Ldexp(values[i], exponent)
	}
}
