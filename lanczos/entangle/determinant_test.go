package entangle

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"ketloom/basis"
)

// slater is the determinant of random orthonormal orbitals, in a basis that fixes
// the number of fermions.
func slater(t testing.TB, b *basis.Basis, r *rand.Rand) []complex128 {
	t.Helper()
	number := 0
	for _, n := range b.Space().Levels(b.At(0)) {
		number += n
	}
	return determinants(b, randomFrame(r, b.Space().Sites())[:number])
}

func inner(a, b []complex128) complex128 {
	z := 0i
	for i := range a {
		z += cmplx.Conj(a[i]) * b[i]
	}
	return z
}

// determinants are the amplitudes of the product of orbitals in a basis: the
// minors of the orbital matrix on the occupied sites.
func determinants(b *basis.Basis, orbitals [][]complex128) []complex128 {
	psi := make([]complex128, b.Len())
	n := len(orbitals)
	for at := range psi {
		m := make([][]complex128, 0, n)
		for site, level := range b.Space().Levels(b.At(at)) {
			if level == 1 {
				row := make([]complex128, n)
				for k := range row {
					row[k] = orbitals[k][site]
				}
				m = append(m, row)
			}
		}
		// the amplitude on the representative is factor·ψ with this factor
		_, factor, _ := b.Component(b.At(at))
		psi[at] = determinant(m) / factor
	}
	return psi
}

// determinant by elimination with row pivots.
func determinant(m [][]complex128) complex128 {
	d := complex128(1)
	for k := range m {
		best := k
		for i := k; i < len(m); i++ {
			if cmplx.Abs(m[i][k]) > cmplx.Abs(m[best][k]) {
				best = i
			}
		}
		if best != k {
			m[k], m[best] = m[best], m[k]
			d = -d
		}
		if m[k][k] == 0 {
			return 0
		}
		d *= m[k][k]
		for i := k + 1; i < len(m); i++ {
			f := m[i][k] / m[k][k]
			for j := k; j < len(m); j++ {
				m[i][j] -= f * m[k][j]
			}
		}
	}
	return d
}

// planeWaves are the lowest orbitals of -Σ (c†_i c_{i+1} + h.c.) on a ring,
// periodic or antiperiodic; filled makes a closed shell.
func planeWaves(sites, filled int) [][]complex128 {
	shift := 0.0
	if filled%2 == 0 {
		shift = 0.5
	}
	var orbitals [][]complex128
	for k := range filled {
		q := 2 * math.Pi * (float64(k-filled/2) + shift) / float64(sites)
		u := make([]complex128, sites)
		for i := range u {
			u[i] = cmplx.Exp(complex(0, q*float64(i))) / complex(math.Sqrt(float64(sites)), 0)
		}
		orbitals = append(orbitals, u)
	}
	return orbitals
}

// randomFrame is n orthonormal vectors of n components.
func randomFrame(r *rand.Rand, n int) [][]complex128 {
	frame := make([][]complex128, n)
	for k := range frame {
		frame[k] = randomAmplitudes(r, n, false)
		for range 2 {
			for _, u := range frame[:k] {
				z := inner(u, frame[k])
				for i := range u {
					frame[k][i] -= z * u[i]
				}
			}
		}
		norm := cmplx.Sqrt(inner(frame[k], frame[k]))
		for i := range frame[k] {
			frame[k][i] /= norm
		}
	}
	return frame
}
