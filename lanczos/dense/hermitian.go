package dense

import "slices"

// EigenComplex returns all eigenvalues, ascending, of the complex Hermitian n×n
// matrix a (row after row, not modified), and with vectors set the orthonormal
// eigenvectors, vecs[j*n:(j+1)*n] for values[j]; vecs is nil otherwise.
//
// The matrix is reduced by reflections to a real tridiagonal one of the same
// dimension, a = Q T Q†, so multiplicities are those of a.
//
// Phase: the first component whose magnitude is within the factor
// 1-PhaseTolerance of the largest is real and positive. Vectors of equal
// eigenvalues are an orthonormal basis of their space and no more.
//
// Each eigenvalue is good to a small multiple of 2⁻⁵²‖a‖. Costs about 5n³ (values)
// or 16n³ (vectors) real multiplications and 5 complex n×n matrices. n = 0 gives
// empty results. Errors: ErrShape, ErrNotFinite, ErrNotHermitian (beyond
// Asymmetry, diagonal included; names the element), each wrapped with what was given.
func EigenComplex(a []complex128, n int, vectors bool) (values []float64, vecs []complex128, err error) {
	if err := checkShape(len(a), n, n); err != nil {
		return nil, nil, err
	}
	top, err := largestPart(a, n)
	if err != nil {
		return nil, nil, err
	}
	values = make([]float64, n)
	if n == 0 || top == 0 {
		return values, identityComplex(n, vectors), nil
	}
	if err := checkHermitian(a, n, top); err != nil {
		return nil, nil, err
	}
	exponent := balance(top)
	m := newHermitian(a, n, exponent)
	panels := m.reduce(vectors)
	d, e := m.diagonal, m.off
	if !vectors {
		if err := diagonalise(d, e, nil); err != nil {
			return nil, nil, err
		}
		rescale(d, exponent)
		slices.Sort(d)
		return d, nil, nil
	}
	z := identityReal(n, true)
	if err := diagonalise(d, e, z); err != nil {
		return nil, nil, err
	}
	rescale(d, exponent)
	order := ascending(d)
	both := backTransform(panels, z, n)
	vecs = make([]complex128, n*n)
	complexColumnsInOrder(vecs, both, n, order)
	share(n, 16, func(from, to int) {
		for j := from; j < to; j++ {
			positivePhase(vecs[j*n : (j+1)*n])
		}
	})
	return pick(d, order), vecs, nil
}

func identityComplex(n int, wanted bool) []complex128 {
	if !wanted {
		return nil
	}
	m := make([]complex128, n*n)
	for i := range n {
		m[i*n+i] = 1
	}
	return m
}

// complexColumnsInOrder writes column order[j] of z, whose rows hold n real parts
// and then n imaginary parts, as row j of dst.
func complexColumnsInOrder(dst []complex128, z []float64, n int, order []int) {
	const tile = 32
	share((n+tile-1)/tile, 2, func(from, to int) {
		for tj := from * tile; tj < min(to*tile, n); tj += tile {
			for ti := 0; ti < n; ti += tile {
				for j := tj; j < min(tj+tile, n); j++ {
					k := order[j]
					for i := ti; i < min(ti+tile, n); i++ {
						dst[j*n+i] = complex(z[i*2*n+k], z[i*2*n+n+k])
					}
				}
			}
		}
	})
}
