package model

import (
	"math"
	"math/cmplx"
	"sort"
)

// eigenHermitian returns the eigenvalues of the n×n Hermitian matrix a
// (row-major, overwritten), ascending, and the eigenvectors, by cyclic Jacobi
// rotations (Jacobi, J. reine angew. Math. 30, 51, 1846, in the complex form);
// meant for the few orbitals of a cell.
func eigenHermitian(a []complex128, n int) ([]float64, [][]complex128) {
	v := make([][]complex128, n) // v[j] is eigenvector j
	for j := range v {
		v[j] = make([]complex128, n)
		v[j][j] = 1
	}
	const sweeps = 60
	for range sweeps {
		off, all := 0.0, 0.0
		for i, z := range a {
			square := real(z)*real(z) + imag(z)*imag(z)
			if all += square; i/n != i%n {
				off += square
			}
		}
		if off <= 1e-34*all {
			break
		}
		for p := range n {
			for q := p + 1; q < n; q++ {
				rotate(a, v, n, p, q)
			}
		}
	}
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(i, j int) bool { return real(a[order[i]*(n+1)]) < real(a[order[j]*(n+1)]) })
	values, vectors := make([]float64, n), make([][]complex128, n)
	for i, j := range order {
		values[i], vectors[i] = real(a[j*(n+1)]), v[j]
	}
	return values, vectors
}

// rotate makes a[p,q] vanish by a unitary rotation of the states p and q.
func rotate(a []complex128, v [][]complex128, n, p, q int) {
	size := cmplx.Abs(a[p*n+q])
	if size == 0 {
		return
	}
	phase := a[p*n+q] / complex(size, 0)
	tau := (real(a[q*n+q]) - real(a[p*n+p])) / (2 * size)
	t := 1 / (math.Abs(tau) + math.Hypot(1, tau))
	if tau < 0 {
		t = -t
	}
	c := 1 / math.Hypot(1, t)
	// New states: p' = c·p - s*·q, q' = s·p + c·q with s = t·c·phase.
	s := complex(t*c, 0) * phase
	cc := complex(c, 0)
	for i := range n {
		x, y := a[i*n+p], a[i*n+q]
		a[i*n+p], a[i*n+q] = cc*x-cmplx.Conj(s)*y, s*x+cc*y
	}
	for i := range n {
		x, y := a[p*n+i], a[q*n+i]
		a[p*n+i], a[q*n+i] = cc*x-s*y, cmplx.Conj(s)*x+cc*y
	}
	a[p*n+q], a[q*n+p] = 0, 0
	a[p*n+p], a[q*n+q] = complex(real(a[p*n+p]), 0), complex(real(a[q*n+q]), 0)
	for i := range n {
		x, y := v[p][i], v[q][i]
		v[p][i], v[q][i] = cc*x-cmplx.Conj(s)*y, s*x+cc*y
	}
}
