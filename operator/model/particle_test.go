package model

import (
	"fmt"
	"math"
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

func TestSpinlessFermionRings(t *testing.T) {
	for id, c := range map[string]struct {
		l, n int
		v    float64
	}{"C5-tV-ring8-n3-V2.0": {8, 3, 2}, "C5-tV-ring12-n5-V2.0": {12, 5, 2}, "C5-tV-ring10-n5-V4.0": {10, 5, 4}} {
		cluster, space := ring(t, c.l, basis.Fermion())
		want, r := value[map[string][]float64](t, id)
		sector := charges(space.ParticleNumber().Is(c.n))
		h := built[operator.Operator](t)(TV(space, cluster, []float64{1}, []float64{c.v}, nil))
		expect(t, r, "periodic", merged(byMomentum(t, h, cluster, sector)), want["periodic"])
		opts := &Options{Twist: [2]float64{0.5, 0}}
		h = built[operator.Operator](t)(TV(space, cluster, []float64{1}, []float64{c.v}, opts))
		expect(t, r, "antiperiodic, uniform gauge", merged(byMomentum(t, h, cluster, sector)), want["antiperiodic"])
		opts.Gauge = lattice.Boundary
		h = built[operator.Operator](t)(TV(space, cluster, []float64{1}, []float64{c.v}, opts))
		if !h.Real() {
			t.Errorf("%s: antiperiodic fermions are not real", id)
		}
		expect(t, r, "antiperiodic, boundary gauge", spectrum(t, h, sector), want["antiperiodic"])
	}
}

func TestFreeFermions(t *testing.T) {
	for id, c := range map[string]struct {
		l      lattice.Lattice
		l1, l2 int
		n      int
	}{
		"C6-free-square4x4-n5":  {lattice.Square(), 4, 4, 5},
		"C6-free-kagome12-n5":   {lattice.Kagome(), 2, 2, 5},
		"C6-free-honeycomb8-n3": {lattice.Honeycomb(), 2, 2, 3},
	} {
		cluster := built[*lattice.Cluster](t)(lattice.Torus(c.l, c.l1, c.l2))
		space := onSites(t, cluster, basis.Fermion())
		h := built[operator.Operator](t)(TV(space, cluster, []float64{1}, nil, nil))
		type free struct {
			E0     float64
			Levels []float64
		}
		want, r := value[free](t, id)
		expect(t, r, "one-body levels", spectrum(t, h, charges(space.ParticleNumber().Is(1))), want.Levels)
		expect(t, r, "E0", merged(byMomentum(t, h, cluster, charges(space.ParticleNumber().Is(c.n)))), []float64{want.E0})
	}
}

func TestHubbardModels(t *testing.T) {
	dimer := built[*lattice.Cluster](t)(lattice.Open(lattice.Chain(), 2, 1))
	for _, u := range []float64{1, 4, 8} {
		space := onSites(t, dimer, basis.Electron())
		h := built[operator.Operator](t)(Hubbard(space, dimer, []float64{1}, u, nil))
		want, r := value[[]float64](t, fmt.Sprintf("C1-dimer-U%.1f", u))
		expect(t, r, "spectrum", spectrum(t, h, charges(space.ParticleNumber().Is(2), space.TwiceSz().Is(0))), want)
	}
	for id, c := range map[string]struct {
		l, n, sz int
		u, twist float64
	}{
		"C2-hubbard-ring6-33-U1.0":    {6, 6, 0, 1, 0},
		"C2-hubbard-ring6-22-U4.0":    {6, 4, 0, 4, 0},
		"C2-hubbard-ring6-33-U4-flux": {6, 6, 0, 4, 0.125},
		"C3-hubbard-triangle-11":      {3, 2, 0, 4, 0},
		"C3-hubbard-triangle-21":      {3, 3, 1, 4, 0},
	} {
		cluster, space := ring(t, c.l, basis.Electron())
		h := built[operator.Operator](t)(Hubbard(space, cluster, []float64{1}, c.u, &Options{Twist: [2]float64{c.twist}}))
		want, r := value[[]float64](t, id)
		levels := byMomentum(t, h, cluster, charges(space.ParticleNumber().Is(c.n), space.TwiceSz().Is(c.sz)))
		expect(t, r, "energies", merged(levels), want)
	}
}

func TestTJModels(t *testing.T) {
	sqrt8 := built[*lattice.Cluster](t)(lattice.New(lattice.Square(), [2]int{2, 2}, [2]int{-2, 2}))
	six := built[*lattice.Cluster](t)(lattice.Ring(6))
	eight := built[*lattice.Cluster](t)(lattice.Ring(8))
	for id, c := range map[string]struct {
		cluster *lattice.Cluster
		n, sz   int
		j       float64
	}{
		"C4-tJ-ring6-1hole-J2.0": {six, 5, 1, 2},
		"C4-tJ-ring6-2hole-J0.4": {six, 4, 0, 0.4},
		"C4-tJ-ring8-2hole-J0.4": {eight, 6, 0, 0.4},
		"C4-tJ-sqrt8-1hole-J0.4": {sqrt8, 7, 1, 0.4},
		"C4-tJ-sqrt8-2hole-J0.4": {sqrt8, 6, 0, 0.4},
	} {
		space := onSites(t, c.cluster, basis.Electron())
		h := built[operator.Operator](t)(TJ(space, c.cluster, 1, c.j, nil))
		sector := charges(space.ParticleNumber().Is(c.n), space.TwiceSz().Is(c.sz))
		sector.Constraints = space.NoDoubleOccupancy()
		want, r := value[[]float64](t, id)
		expect(t, r, "lowest three", merged(byMomentum(t, h, c.cluster, sector)), want)
	}
}

func TestBosons(t *testing.T) {
	for _, n := range []int{3, 6} {
		for _, u := range []float64{1, 4, 10} {
			cluster, space := ring(t, 6, basis.Boson(n))
			h := built[operator.Operator](t)(BoseHubbard(space, cluster, 1, u, nil))
			want, r := value[[]float64](t, fmt.Sprintf("D1-BH-ring6-n%d-U%.1f", n, u))
			expect(t, r, "lowest three", merged(byMomentum(t, h, cluster, charges(space.ParticleNumber().Is(n)))), want)
		}
	}
	five, space := ring(t, 5, basis.Boson(5))
	commensurate := built[operator.Operator](t)(BoseHubbard(space, five, 1, 10, nil))
	levels, r := value[[]float64](t, "D1-BH-ring5-n5-U10.0")
	expect(t, r, "lowest three", merged(byMomentum(t, commensurate, five, charges(space.ParticleNumber().Is(5)))), levels)
	cluster, space := ring(t, 6, basis.Boson(4))
	opts := &Options{Twist: [2]float64{1. / 6, 0}}
	hubbard := built[operator.Operator](t)(BoseHubbard(space, cluster, 1, 3, opts))
	repulsion := built[operator.Operator](t)(TV(space, cluster, []float64{0}, []float64{0.5}, opts))
	want, r := value[[]float64](t, "D1-EBH-ring6-n4-flux")
	expect(t, r, "lowest three", merged(byMomentum(t, hubbard.Plus(repulsion), cluster, charges(space.ParticleNumber().Is(4)))), want)
}

func TestHardCoreBosons(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.Torus(lattice.Square(), 4, 4))
	space := onSites(t, c, basis.HardCoreBoson())
	h := built[operator.Operator](t)(TV(space, c, []float64{1}, nil, nil))
	want, r := value[[]float64](t, "D3-hardcore-4x4-n4")
	expect(t, r, "two lowest", merged(byMomentum(t, h, c, charges(space.ParticleNumber().Is(4)))), want)
	want, r = value[[]float64](t, "D3-hardcore-4x4-n8")
	expect(t, r, "two lowest", merged(lowestByMomentum(t, h, c, charges(space.ParticleNumber().Is(8)), 2)), want)
}

// A pair of sites of a two-site ring is joined by two bonds: the hopping
// doubles, and a twist makes the two interfere.
func TestBothBondsOfASmallRingCount(t *testing.T) {
	c, space := ring(t, 2, basis.Fermion())
	for _, twist := range []float64{0, 0.1, 0.25, 0.5} {
		for _, gauge := range []lattice.Gauge{lattice.Uniform, lattice.Boundary} {
			h := built[operator.Operator](t)(TV(space, c, []float64{1}, nil, &Options{Twist: [2]float64{twist, 0}, Gauge: gauge}))
			e := spectrum(t, h, charges(space.ParticleNumber().Is(1)))
			want := 2 * math.Cos(math.Pi*twist) // -2cos k at k = 2π(n+twist)/2
			if math.Abs(e[0]+want) > 1e-14 || math.Abs(e[1]-want) > 1e-14 {
				t.Errorf("twist %v: levels %v, want ±%v", twist, e, want)
			}
		}
	}
}
