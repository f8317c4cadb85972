package dense

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/lapack/gonum"
)

// EigenReal returns all eigenvalues, ascending, of the real symmetric n×n matrix
// a (row after row, not modified), and with vectors set the orthonormal
// eigenvectors, vecs[j*n:(j+1)*n] for values[j]; vecs is nil otherwise.
//
// Sign: the first component whose magnitude is within the factor 1-PhaseTolerance
// of the largest is positive. Vectors of equal eigenvalues are an orthonormal
// basis of their space and no more.
//
// Each eigenvalue is good to a small multiple of 2⁻⁵²‖a‖. Costs about n³ (values)
// or 6n³ (vectors) multiplications and 2 n×n matrices. n = 0 gives empty results.
// Errors: ErrShape, ErrNotFinite, ErrNotHermitian (beyond Asymmetry; names the
// element), each wrapped with what was given.
func EigenReal(a []float64, n int, vectors bool) (values []float64, vecs []float64, err error) {
	if err := checkShape(len(a), n, n); err != nil {
		return nil, nil, err
	}
	top, err := largestReal(a, n)
	if err != nil {
		return nil, nil, err
	}
	values = make([]float64, n)
	if n == 0 || top == 0 {
		return values, identityReal(n, vectors), nil
	}
	if err := checkSymmetric(a, n, top); err != nil {
		return nil, nil, err
	}
	exponent := balance(top)
	m := symmetricCopy(a, n, exponent)
	e := make([]float64, n)
	if err := eigenSymmetric(m, n, values, e[:n-1], vectors); err != nil {
		return nil, nil, err
	}
	rescale(values, exponent)
	if !vectors {
		slices.Sort(values)
		return values, nil, nil
	}
	order := ascending(values)
	vecs = make([]float64, n*n)
	columnsInOrder(vecs, m, n, order)
	for j := range n {
		positive(vecs[j*n : (j+1)*n])
	}
	return pick(values, order), vecs, nil
}

// eigenSymmetric puts the eigenvalues of m into d, in no order; vectors, if wanted,
// replace m as columns.
func eigenSymmetric(m []float64, n int, d, e []float64, vectors bool) error {
	impl := gonum.Implementation{}
	tau := make([]float64, n-1)
	var size [1]float64
	impl.Dsytrd(blas.Lower, n, m, n, d, e, tau, size[:], -1)
	work := make([]float64, max(int(size[0]), 64*n))
	impl.Dsytrd(blas.Lower, n, m, n, d, e, tau, work, len(work))
	if !vectors {
		return diagonalise(d, e, nil)
	}
	impl.Dorgtr(blas.Lower, n, m, n, tau, work, len(work))
	return diagonalise(d, e, m)
}

func symmetricCopy(a []float64, n, exponent int) []float64 {
	m := make([]float64, n*n)
	for i := range n {
		for j := range i + 1 {
			x := a[i*n+j]/2 + a[j*n+i]/2
			if exponent != 0 {
				x = math.Ldexp(a[i*n+j], -exponent)/2 + math.Ldexp(a[j*n+i], -exponent)/2
			}
			m[i*n+j], m[j*n+i] = x, x
		}
	}
	return m
}

func identityReal(n int, wanted bool) []float64 {
	if !wanted {
		return nil
	}
	m := make([]float64, n*n)
	for i := range n {
		m[i*n+i] = 1
	}
	return m
}

// ascending returns the order in which values ascend; equal ones keep their order.
func ascending(values []float64) []int {
	order := make([]int, len(values))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(i, j int) int {
		switch {
		case values[i] < values[j]:
			return -1
		case values[i] > values[j]:
			return 1
		}
		return 0
	})
	return order
}

func pick(values []float64, order []int) []float64 {
	sorted := make([]float64, len(values))
	for j, k := range order {
		sorted[j] = values[k]
	}
	return sorted
}

// columnsInOrder writes column order[j] of the n×n matrix z as row j of dst.
func columnsInOrder(dst, z []float64, n int, order []int) {
	const tile = 32
	share((n+tile-1)/tile, 2, func(from, to int) {
		for tj := from * tile; tj < min(to*tile, n); tj += tile {
			for ti := 0; ti < n; ti += tile {
				for j := tj; j < min(tj+tile, n); j++ {
					k := order[j]
					for i := ti; i < min(ti+tile, n); i++ {
						dst[j*n+i] = z[i*n+k]
					}
				}
			}
		}
	})
}
