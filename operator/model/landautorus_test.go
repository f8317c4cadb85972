package model

import (
	"fmt"
	"math"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/operator"
)

// landauTorus is the lowest Landau level on a rectangular torus of area 2π·flux, in
// magnetic lengths: orbital j carries the momentum 2πj/Ly (Yoshioka, Halperin and Lee,
// Phys. Rev. Lett. 50, 1219, 1983).
type landauTorus struct {
	flux   int
	lx, ly float64
	space  *basis.Space
}

func onLandauTorus(t *testing.T, flux int, aspect float64) landauTorus {
	t.Helper()
	area := 2 * math.Pi * float64(flux)
	space := built[*basis.Space](t)(basis.Uniform(flux, basis.Fermion()))
	return landauTorus{flux, math.Sqrt(area * aspect), math.Sqrt(area / aspect), space}
}

// momentum is Σ j modulo the number of orbitals.
func (l landauTorus) momentum() basis.Charge {
	weights := make([]int, l.flux)
	for j := range weights {
		weights[j] = j
	}
	return l.space.Weighted("K", l.flux, weights)
}

// interaction returns ½ Σ V(j1-j4, j1-j3) c†_j1 c†_j2 c_j3 c_j4 with j1+j2 = j3+j4 modulo
// the number of orbitals,
//
//	V(m, n) = A⁻¹ Σ_q V(q) exp(-q²/2) exp(2πi·s·n/flux),   q = 2π(s/Lx, t/Ly), t ≡ m,
//
// for a V(q) that depends on q² alone; q = 0 is left to v.
func (l landauTorus) interaction(v func(square float64) float64) operator.Operator {
	const far = 100 // exp(-far/2) is rounding
	element := make([]float64, l.flux*l.flux)
	reach := func(length float64) int { return int(math.Sqrt(far)*length/(2*math.Pi)) + 1 }
	for t := -reach(l.ly); t <= reach(l.ly); t++ {
		for s := -reach(l.lx); s <= reach(l.lx); s++ {
			x, y := 2*math.Pi*float64(s)/l.lx, 2*math.Pi*float64(t)/l.ly
			square := x*x + y*y
			weight := v(square) * math.Exp(-square/2) / (l.lx * l.ly)
			m := (t%l.flux + l.flux) % l.flux
			for n := range l.flux {
				element[m*l.flux+n] += weight * math.Cos(2*math.Pi*float64(s*n%l.flux)/float64(l.flux))
			}
		}
	}
	o := operator.On(l.space)
	mod := func(j int) int { return (j + 2*l.flux) % l.flux }
	var terms []operator.Operator
	for j1 := range l.flux {
		for j2 := range l.flux {
			for j3 := range l.flux {
				j4 := mod(j1 + j2 - j3)
				if j1 == j2 || j3 == j4 {
					continue
				}
				z := complex(element[mod(j1-j4)*l.flux+mod(j1-j3)]/2, 0)
				terms = append(terms, o.Create(j1).Times(o.Create(j2)).Times(o.Annihilate(j3)).Times(o.Annihilate(j4)).Scale(z))
			}
		}
	}
	h := operator.Sum(terms)
	return h.Plus(h.Adjoint()).Scale(0.5).NormalOrdered() // equal but for rounding
}

// madelung returns the energy of an electron in its own images and the background, on a
// square torus of a given area (Yoshioka, Halperin and Lee 1983, by Ewald's sums).
func madelung(area float64) float64 {
	sum := 2.0
	for x := -6; x <= 6; x++ {
		for y := -6; y <= 6; y++ {
			if z := math.Pi * float64(x*x+y*y); z > 0 {
				sum -= math.Sqrt(math.Pi/z) * math.Erfc(math.Sqrt(z))
			}
		}
	}
	return -sum / math.Sqrt(area)
}

func TestFractionalHallStatesOnTheTorus(t *testing.T) {
	shortRange := func(square float64) float64 { return 4 * math.Pi * (1 - square) }
	coulomb := func(square float64) float64 {
		if square == 0 {
			return 0 // the background
		}
		return 2 * math.Pi / math.Sqrt(square)
	}
	for _, c := range []struct {
		id     string
		n      int
		aspect float64
		v      func(float64) float64
	}{
		{"G6-torus-V1-N3-asp1.0", 3, 1, shortRange},
		{"G6-torus-V1-N4-asp1.0", 4, 1, shortRange},
		{"G6-torus-V1-N4-asp0.7", 4, 0.7, shortRange},
		{"G6-torus-V1-N5-asp1.0", 5, 1, shortRange},
		{"G6-torus-V1-N6-asp1.0", 6, 1, shortRange},
		{"G6-torus-coulomb-N3-asp1.0", 3, 1, coulomb},
		{"G6-torus-coulomb-N6-asp1.0", 6, 1, coulomb},
	} {
		type levels struct {
			E0, Gap  float64
			Momenta  []int    `json:"ground_momenta"`
			Next     float64  `json:"next_level"`
			Madelung *float64 `json:"madelung_per_electron"`
			Electron float64  `json:"E_per_electron_with_background"`
		}
		want, r := value[levels](t, c.id)
		l := onLandauTorus(t, 3*c.n, c.aspect)
		h := l.interaction(c.v)
		var list [][]float64
		for k := range l.flux {
			list = append(list, lowest(t, h, charges(l.space.ParticleNumber().Is(c.n), l.momentum().Is(k)), 2))
			// The record of six electrons names one momentum of each class.
			if e, ok := r.Data.Lowest[fmt.Sprint(k)]; ok {
				expect(t, r, fmt.Sprintf("momentum %d", k), list[k], []float64{e})
			}
		}
		e := merged(list)
		expect(t, r, "E0 three times, next level, gap", []float64{e[0], e[1], e[2], e[3], e[3] - e[0]}, []float64{want.E0, want.E0, want.E0, want.Next, want.Gap})
		var ground []int
		for k, levels := range list {
			if levels[0] < e[0]+want.Gap/2 {
				ground = append(ground, k)
			}
		}
		slices.Sort(want.Momenta)
		if !slices.Equal(ground, want.Momenta) {
			t.Errorf("%s: ground states at momenta %v, want %v", c.id, ground, want.Momenta)
		}
		if want.Madelung != nil {
			background := madelung(l.lx * l.ly)
			expect(t, r, "Madelung energy, per electron", []float64{background, e[0]/float64(c.n) + background}, []float64{*want.Madelung, want.Electron})
		}
	}
}
