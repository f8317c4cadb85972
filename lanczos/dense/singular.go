package dense

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/lapack"
	"gonum.org/v1/gonum/lapack/gonum"
)

// SingularReal returns the min(rows,cols) singular values, descending and not
// negative, of the real matrix a (row after row, not modified).
//
// Absolute error: a small multiple of 2⁻⁵²·s_max for each value, so values far
// below s_max lose relative accuracy (see the package comment). A matrix without
// rows or columns has none. Costs about 4/3 n²(3m-n) multiplications for m >= n, or
// n²(m+n) and more where m >> n, and one copy of a.
// Errors: ErrShape, ErrNotFinite, ErrIteration.
func SingularReal(a []float64, rows, cols int) ([]float64, error) {
	if err := checkShape(len(a), rows, cols); err != nil {
		return nil, err
	}
	top, err := largestReal(a, cols)
	if err != nil {
		return nil, err
	}
	s := make([]float64, min(rows, cols))
	if top == 0 {
		return s, nil
	}
	exponent := balance(top)
	m := make([]float64, len(a))
	for i, x := range a {
		m[i] = x
		if exponent != 0 {
			m[i] = math.Ldexp(x, -exponent)
		}
	}
	impl := gonum.Implementation{}
	var size [1]float64
	impl.Dgesvd(lapack.SVDNone, lapack.SVDNone, rows, cols, m, cols, s, nil, 1, nil, 1, size[:], -1)
	work := make([]float64, int(size[0]))
	if !impl.Dgesvd(lapack.SVDNone, lapack.SVDNone, rows, cols, m, cols, s, nil, 1, nil, 1, work, len(work)) {
		return nil, noSingular(rows, cols)
	}
	rescale(s, exponent)
	return s, nil
}

// SingularComplex does for a complex matrix what SingularReal does for a real one,
// with the same accuracy. The matrix is reduced by reflections to a real
// bidiagonal one; a†a is never formed.
func SingularComplex(a []complex128, rows, cols int) ([]float64, error) {
	if err := checkShape(len(a), rows, cols); err != nil {
		return nil, err
	}
	top, err := largestPart(a, cols)
	if err != nil {
		return nil, err
	}
	d := make([]float64, min(rows, cols))
	if top == 0 {
		return d, nil
	}
	exponent := balance(top)
	m := tallCopy(a, rows, cols, exponent)
	if 2*m.rows > 3*m.cols {
		m.triangularise()
	}
	e := make([]float64, max(0, m.cols-1))
	m.bidiagonalise(d, e)
	work := make([]float64, 4*m.cols)
	if !(gonum.Implementation{}).Dbdsqr(blas.Upper, m.cols, 0, 0, 0, d, e, nil, 1, nil, 1, nil, 1, work) {
		return nil, noSingular(rows, cols)
	}
	rescale(d, exponent)
	return d, nil
}

func noSingular(rows, cols int) error {
	return fmt.Errorf("dense: singular values of a %d×%d matrix: %w", rows, cols, ErrIteration)
}
