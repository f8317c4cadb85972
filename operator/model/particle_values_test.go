package model

import (
	"fmt"
	"math"
	"math/cmplx"
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// All numbers in this file are from an independent NumPy program (two routes agree).

func TestHubbardRingOfEight(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.Ring(8))
	space := onSites(t, c, basis.Electron())
	h := built[operator.Operator](t)(Hubbard(space, c, []float64{1}, 4, nil))
	sector := charges(space.ParticleNumber().Is(8), space.TwiceSz().Is(0))
	agree(t, "levels", lowest(t, h, sector, 4), []float64{-4.6035262999892, -4.2999927584331, -4.010153957644, -3.7057642394839}, 1e-8)
}

func TestBosonsOnATorus(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.Torus(lattice.Square(), 3, 3))
	space := onSites(t, c, basis.Boson(4))
	h := built[operator.Operator](t)(BoseHubbard(space, c, 1, 5, nil))
	agree(t, "level", lowest(t, h, charges(space.ParticleNumber().Is(4)), 1), []float64{-13.803741687997}, 1e-8)
}

// Pairing on an open chain (Kitaev, Phys.-Usp. 44, 131, 2001): only the parity of the
// number is conserved.
func TestPairingChain(t *testing.T) {
	const n, mu = 10, 2.5
	space := built[*basis.Space](t)(basis.Uniform(n, basis.Fermion()))
	o := operator.On(space)
	var terms []operator.Operator
	for i := range n {
		terms = append(terms, o.Number(i).Minus(o.One().Scale(0.5)).Scale(-mu))
		if i+1 < n {
			bond := o.Annihilate(i).Times(o.Annihilate(i + 1)).Minus(o.Create(i).Times(o.Annihilate(i + 1)))
			terms = append(terms, bond, bond.Adjoint())
		}
	}
	h := operator.Sum(terms)
	weights := make([]int, n)
	for i := range weights {
		weights[i] = 1
	}
	parity := space.Weighted("parity", 2, weights)
	if h.Conserves(space.ParticleNumber()) == nil || h.Conserves(parity) != nil {
		t.Error("pairing conserves the parity of the number, not the number")
	}
	for p, want := range []float64{-14.363329535856, -13.656573382088} {
		agree(t, fmt.Sprintf("parity %d", p), lowest(t, h, charges(parity.Is(p)), 1), []float64{want}, 1e-9)
	}
}

// Hard-core bosons in a magnetic field on a torus (Hofstadter, Phys. Rev. B 14, 2239,
// 1976): the hop along y at column x carries 2πx·p/q, and that across the boundary
// along x what makes the flux uniform.
func TestBosonsInAMagneticField(t *testing.T) {
	for _, c := range []struct {
		lx, ly, n, q int
		want         []float64
	}{
		{4, 4, 2, 4, []float64{-5.6288165075977, -5.6288165075977, -5.3524863979905, -5.3524863979905, -5.0486755979243}},
		{4, 3, 2, 3, []float64{-5.1626908763835, -5.1488976048589, -4.951473073405, -4.951473073405, -4.739159355121}},
		{8, 4, 4, 4, []float64{-11.106762805371, -11.097362903697, -10.854090906324, -10.823811407718, -10.823811407718}},
	} {
		if c.n > 2 && testing.Short() {
			continue
		}
		space := built[*basis.Space](t)(basis.Uniform(c.lx*c.ly, basis.HardCoreBoson()))
		o := operator.On(space)
		var terms []operator.Operator
		turn := func(f float64) complex128 { return cmplx.Exp(complex(0, 2*math.Pi*f)) }
		for x := range c.lx {
			for y := range c.ly {
				site := x + c.lx*y
				phase := complex128(1)
				if x == c.lx-1 {
					phase = turn(-float64(c.lx*y) / float64(c.q))
				}
				right := o.Create((x+1)%c.lx + c.lx*y).Times(o.Annihilate(site)).Scale(-phase)
				up := o.Create(x + c.lx*((y+1)%c.ly)).Times(o.Annihilate(site)).Scale(-turn(float64(x) / float64(c.q)))
				terms = append(terms, right, right.Adjoint(), up, up.Adjoint())
			}
		}
		h := operator.Sum(terms).NormalOrdered()
		agree(t, fmt.Sprintf("%d×%d", c.lx, c.ly), lowest(t, h, charges(space.ParticleNumber().Is(c.n)), 5), c.want, 1e-8)
	}
}

// blockaded returns Σ P σˣ P on a chain without neighbouring excitations and its
// sector; a projected operator needs no projectors of its own.
func blockaded(t *testing.T, n int, periodic bool) (operator.Operator, basis.Sector) {
	t.Helper()
	space := built[*basis.Space](t)(basis.Uniform(n, basis.SpinHalf()))
	o := operator.On(space)
	h := o.Zero()
	var sector basis.Sector
	for i := range n {
		h = h.Plus(o.Sx(i).Scale(2))
		if i+1 < n || periodic {
			sector.Constraints = append(sector.Constraints, basis.AtMost(1, []int{i, (i + 1) % n}))
		}
	}
	return h, sector
}

func TestBlockadedChains(t *testing.T) {
	for _, c := range []struct {
		n        int
		periodic bool
		want     []float64
	}{
		{12, true, []float64{-7.2429405547184, -6.2743708570648, -5.9421255231533}},
		{12, false, []float64{-7.5289628656518, -6.4854183175152, -6.3012152241986}},
		{16, true, []float64{-9.6569893037525, -8.6887657252629, -8.4861909509091}},
	} {
		h, sector := blockaded(t, c.n, c.periodic)
		agree(t, fmt.Sprintf("%d sites, periodic %v", c.n, c.periodic), distinct(lowest(t, h, sector, 5)), c.want, 1e-8)
	}
	for n, want := range map[int]int{12: 22, 14: 37} { // computed once
		h, sector := blockaded(t, n, true)
		zero := 0
		for _, e := range spectrum(t, h, sector) {
			if math.Abs(e) < 1e-9 {
				zero++
			}
		}
		if zero != want {
			t.Errorf("%d sites: %d levels at zero, want %d", n, zero, want)
		}
	}
}
