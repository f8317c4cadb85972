package model

import (
	"context"
	"fmt"
	"math"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// All numbers in this file are from an independent NumPy program (two routes agree
// unless noted), to the tolerance that stands beside them; spins S = σ/2, each bond
// once, J = 1.

// agree compares the first levels with a list.
func agree(t *testing.T, what string, got, want []float64, tolerance float64) {
	t.Helper()
	if len(got) < len(want) {
		t.Errorf("%s: %v, want %v", what, got, want)
		return
	}
	for i, w := range want {
		if !(math.Abs(got[i]-w) <= tolerance) {
			t.Errorf("%s: %.12f, want %.12f", what, got[:len(want)], want)
			return
		}
	}
}

// heisenbergRing returns the ring of n spins S = twoS/2.
func heisenbergRing(t *testing.T, n, twoS int) (*lattice.Cluster, operator.Operator) {
	t.Helper()
	c := built[*lattice.Cluster](t)(lattice.Ring(n))
	return c, built[operator.Operator](t)(Heisenberg(onSites(t, c, basis.Spin(twoS)), c, []float64{1}))
}

func TestLargerSpinsOnRings(t *testing.T) {
	for _, c := range []struct {
		n, twoS   int
		ground    float64
		triplet   float64 // at the momentum π, 2·S_z = 2
		tolerance float64
	}{
		{10, 2, -14.094129954933, -13.569322004519, 1e-8},
		{12, 2, -16.869556139478, -16.385359669566, 1e-8}, // computed once
	} {
		if c.n > 10 && testing.Short() {
			continue
		}
		ring, h := heisenbergRing(t, c.n, c.twoS)
		sector := charges(h.Space().TwiceSz().Is(0))
		sector.Symmetries = ring.Sector(ring.Momentum(0, 0))
		agree(t, fmt.Sprintf("spin 1, %d sites", c.n), lowest(t, h, sector, 1), []float64{c.ground}, c.tolerance)
		sector = charges(h.Space().TwiceSz().Is(2))
		sector.Symmetries = ring.Sector(ring.Momentum(c.n/2, 0))
		agree(t, fmt.Sprintf("spin 1, %d sites, triplet", c.n), lowest(t, h, sector, 1), []float64{c.triplet}, c.tolerance)
	}
	for n, want := range map[int][]float64{4: {-12, -11}, 6: {-17.392845137534, -16.687355915291}} {
		_, h := heisenbergRing(t, n, 3)
		agree(t, fmt.Sprintf("spin 3/2, %d sites", n), lowest(t, h, charges(h.Space().TwiceSz().Is(0)), 2), want, 1e-9)
	}
}

// The parity of the transverse field model is spin inversion in the basis of σᶻ …
// read along σˣ: Π σˣ exchanges up and down.
func TestTransverseIsingParities(t *testing.T) {
	for _, c := range []struct {
		n           int
		field       float64
		plus, minus float64 // closed formula, Pfeuty
	}{
		{12, 1, -15.322595151081, -15.19150822545},
		{16, 2, -34.033424992695, -32.03341724556},
		{20, 0.5, -21.270888306919, -21.270888092015},
	} {
		if c.n > 16 && testing.Short() {
			continue
		}
		ring := built[*lattice.Cluster](t)(lattice.Ring(c.n))
		space := onSites(t, ring, basis.SpinHalf())
		h := built[operator.Operator](t)(TransverseIsing(space, ring, 1, c.field))
		for turn, want := range map[group.Turn]float64{group.NewTurn(0, 1): c.plus, group.NewTurn(1, 2): c.minus} {
			parity := group.Eigenvalue{Generator: group.Relabel(c.n, []int{1, 0}), Turn: turn}
			sector := basis.Sector{Symmetries: append(ring.Sector(ring.Momentum(0, 0)), parity)}
			agree(t, fmt.Sprintf("%d sites, field %v, parity %v", c.n, c.field, turn), lowest(t, h, sector, 1), []float64{want}, 1e-9)
		}
	}
}

// distinct drops levels that repeat the one before.
func distinct(levels []float64) []float64 {
	slices.Sort(levels)
	return slices.CompactFunc(levels, func(a, b float64) bool { return math.Abs(a-b) < 1e-7 })
}

// The orthogonal dimer model of Shastry and Sutherland (Physica B+C 108, 1069, 1981):
// at J' = 0.6 the product of dimer singlets is exact.
func TestOrthogonalDimers(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.Torus(lattice.Square(), 4, 4))
	space := onSites(t, c, basis.SpinHalf())
	h := built[operator.Operator](t)(Heisenberg(space, c, []float64{0.6}))
	o := operator.On(space)
	for _, d := range [][2]int{{0, 5}, {6, 9}, {8, 13}, {14, 1}, {2, 7}, {4, 11}, {10, 15}, {12, 3}} {
		h = h.Plus(o.Dot(d[0], d[1]))
	}
	agree(t, "levels", lowest(t, h, charges(space.TwiceSz().Is(0)), 2), []float64{-6, -5.6145521222529}, 1e-8)
}

// The lowest energy at each S_z: a tower of states.
func TestTowersOfStates(t *testing.T) {
	for _, c := range []struct {
		cluster *lattice.Cluster
		want    []float64
	}{
		{built[*lattice.Cluster](t)(lattice.Torus(lattice.Square(), 4, 4)), []float64{-11.228483208429, -10.649884872663, -9.5176879839373, -7.8365375734798, -5.6172795032966, -2.866198262509, 0.35424868893541, 4, 8}},
		{built[*lattice.Cluster](t)(lattice.Torus(lattice.Kagome(), 2, 2)), []float64{-5.4448752169719, -5.0622068508473, -4.3686737921787, -2.631353818674, 0, 3, 6}},
	} {
		space := onSites(t, c.cluster, basis.SpinHalf())
		h := built[operator.Operator](t)(Heisenberg(space, c.cluster, []float64{1}))
		for s, want := range c.want {
			agree(t, fmt.Sprintf("%v, S_z = %d", c.cluster, s), lowest(t, h, charges(space.TwiceSz().Is(2*s)), 1), []float64{want}, 1e-8)
		}
	}
}

// All pairs coupled: the energies are [S(S+1) - 3N/4]/2, closed formula, with as many
// multiplets as six spins 1/2 form.
func TestCompleteGraph(t *testing.T) {
	space := built[*basis.Space](t)(basis.Uniform(6, basis.SpinHalf()))
	o := operator.On(space)
	h := o.Zero()
	for i := range 6 {
		for j := range i {
			h = h.Plus(o.Dot(i, j))
		}
	}
	counts := map[float64]int{}
	for _, e := range spectrum(t, h, charges(space.TwiceSz().Is(0))) {
		counts[math.Round(e*1e9)/1e9]++
	}
	want := map[float64]int{-2.25: 5, -1.25: 9, 0.75: 5, 3.75: 1}
	if fmt.Sprint(counts) != fmt.Sprint(want) {
		t.Errorf("levels %v, want %v", counts, want)
	}
}

// The numbers of multiplets of six spins 1 are differences of sector dimensions.
func TestMultipletsOfSpinsOne(t *testing.T) {
	_, h := heisenbergRing(t, 6, 2)
	dim := func(s int) int { return len(spectrum(t, h, charges(h.Space().TwiceSz().Is(2*s)))) }
	for s, want := range []int{15, 36, 40, 29, 15, 5, 1} {
		above := 0
		if s < 6 {
			above = dim(s + 1)
		}
		if got := dim(s) - above; got != want {
			t.Errorf("S = %d: %d multiplets, want %d", s, got, want)
		}
	}
}

// Sector dimensions at zero momentum, alone and with spin inversion even and odd, by
// Burnside's formula.
func TestDimensionsAtZeroMomentum(t *testing.T) {
	for _, c := range []struct {
		cluster           *lattice.Cluster
		zero, even, odd   int
		longerThanASecond bool
	}{
		{built[*lattice.Cluster](t)(lattice.Torus(lattice.Kagome(), 2, 2)), 246, 147, 99, false},
		{built[*lattice.Cluster](t)(lattice.New(lattice.Honeycomb(), [2]int{2, 2}, [2]int{-2, 4})), 225592, 113312, 112280, true},
		{built[*lattice.Cluster](t)(lattice.New(lattice.Square(), [2]int{5, 1}, [2]int{-1, 5})), 400024, 200170, 199854, true},
	} {
		if c.longerThanASecond && testing.Short() {
			continue
		}
		space := onSites(t, c.cluster, basis.SpinHalf())
		sector := charges(space.TwiceSz().Is(0))
		sector.Symmetries = c.cluster.Sector(c.cluster.Momentum(0, 0))
		flip := group.Relabel(c.cluster.Sites(), []int{1, 0})
		for turn, want := range map[group.Turn]int{group.NewTurn(0, 1): c.even, group.NewTurn(1, 2): c.odd} {
			s := sector
			s.Symmetries = append(sector.Symmetries[:2:2], group.Eigenvalue{Generator: flip, Turn: turn})
			b := built[*basis.Basis](t)(basis.New(context.Background(), space, s, nil))
			if b.Len() != want {
				t.Errorf("%v, spin inversion %v: %d states, want %d", c.cluster, turn, b.Len(), want)
			}
		}
		b := built[*basis.Basis](t)(basis.New(context.Background(), space, sector, nil))
		if b.Len() != c.zero {
			t.Errorf("%v: %d states, want %d", c.cluster, b.Len(), c.zero)
		}
	}
}
