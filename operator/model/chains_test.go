package model

import (
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// Rings of sixteen spins, by momentum.
func TestRingsOfSixteen(t *testing.T) {
	c, space := ring(t, 16, basis.SpinHalf())
	zero, one := charges(space.TwiceSz().Is(0)), charges(space.TwiceSz().Is(2))

	h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
	ground := merged(lowestByMomentum(t, h, c, zero, 1))[0]
	triplets := lowestByMomentum(t, h, c, one, 1)
	gap, r := value[float64](t, "A1-heis-ring-N16-triplet-gap")
	e := merged(triplets)[0]
	expect(t, r, "gap, triplet", []float64{e - ground, e, triplets[r.Data.Momentum][0]}, []float64{gap, r.Data.Triplet, r.Data.Triplet})

	h = built[operator.Operator](t)(XXZ(space, c, []float64{1}, []float64{0.5}, nil))
	levels := merged(lowestByMomentum(t, h, c, zero, 2))
	want, r := value[[]float64](t, "A2-xxz-D0.5-N16")
	expect(t, r, "E0, E(Sz=1), E1", []float64{levels[0], merged(lowestByMomentum(t, h, c, one, 1))[0], levels[1]}, want)

	h = built[operator.Operator](t)(Heisenberg(space, c, []float64{1, 0.5}))
	dimers := lowestByMomentum(t, h, c, zero, 2)
	want, r = value[[]float64](t, "A3-MG-N16")
	levels = merged(dimers)
	expect(t, r, "E0 twice, gap", []float64{levels[0], levels[1], levels[2] - levels[0]}, []float64{want[0], want[0], want[1]})
	expect(t, r, "one singlet at k = 0, one at k = π", []float64{dimers[0][0], dimers[8][0]}, []float64{want[0], want[0]})
}

// The model of Affleck, Kennedy, Lieb and Tasaki on eight sites: one ground state on
// the ring, four on the open chain.
func TestValenceBondSolidsOfEight(t *testing.T) {
	closed, space := ring(t, 8, basis.Spin(2))
	h := built[operator.Operator](t)(BilinearBiquadratic(space, closed, 1, 1./3))
	e := lowest(t, h, charges(space.TwiceSz().Is(0)), 2)
	want, r := value[[]float64](t, "A5-AKLT-ring-N8")
	expect(t, r, "E0, gap", []float64{e[0], e[1] - e[0]}, want)

	open := built[*lattice.Cluster](t)(lattice.Open(lattice.Chain(), 8, 1))
	h = built[operator.Operator](t)(BilinearBiquadratic(onSites(t, open, basis.Spin(2)), open, 1, 1./3))
	e = lowest(t, h, basis.Sector{}, 5)
	want, r = value[[]float64](t, "A5-AKLT-open-N8")
	expect(t, r, "E0 four times, gap", []float64{e[0], e[1], e[2], e[3], e[4] - e[0]}, []float64{want[0], want[0], want[0], want[0], want[1]})
}

// Pfeuty's closed formula far from the transition, with the gap.
func TestGapOfTheTransverseIsingRing(t *testing.T) {
	if testing.Short() {
		t.Skip("two sectors of 26 thousand states")
	}
	c, space := ring(t, 20, basis.SpinHalf())
	h := built[operator.Operator](t)(TransverseIsing(space, c, 1, 2))
	want, r := value[[]float64](t, "A7-tfim-g2.0-N20")
	var e []float64
	for turn := range int64(2) {
		e = append(e, lowest(t, h, basis.Sector{Symmetries: append(c.Sector(c.Momentum(0, 0)), spinInversion(20, turn))}, 1)...)
	}
	expect(t, r, "both parities, gap", []float64{e[0], e[1], e[1] - e[0]}, want)
}
