package model

import (
	"context"
	"fmt"
	"math"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator"
	"ketloom/operator/matrix"
)

// lowest returns the lowest k energies of a sector, found by Lanczos.
func lowest(t *testing.T, h operator.Operator, sector basis.Sector, k int) []float64 {
	t.Helper()
	ctx := context.Background()
	b, err := basis.New(ctx, h.Space(), sector, nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		t.Fatal(err)
	}
	result, err := lanczos.Lowest(ctx, m, k, &lanczos.Options{EnergiesOnly: true})
	if err != nil {
		t.Fatal(err)
	}
	var energies []float64
	for _, level := range result.Levels {
		energies = append(energies, level.Energy)
	}
	return energies
}

func TestFractionalChernInsulatorOn18Orbitals(t *testing.T) {
	for _, name := range []string{"sun", "neupert"} {
		p := project(t, checkerboard(name), 6, 3, nil)
		type levels struct {
			E       []float64
			E4, Gap float64
		}
		want, r := value[levels](t, fmt.Sprintf("F2-FCI-%s-6x3-N6", name))
		list := make([][]float64, 18)
		for n1 := range 6 {
			for n2 := range 3 {
				k := p.Orbital(n1, n2)
				list[k] = lowest(t, p.Operator, p.Sector(6, n1, n2), 3)
				expect(t, r, fmt.Sprintf("momentum (%d, %d)", n1, n2), list[k], r.Data.LowestByMomentum[fmt.Sprintf("(%d, %d)", n1, n2)])
			}
		}
		e := merged(list)
		expect(t, r, "lowest four", e, append(want.E, want.E4))
		if math.Abs(e[3]-e[2]-want.Gap) > r.Tolerance {
			t.Errorf("%s: gap %v, want %v", r.ID, e[3]-e[2], want.Gap)
		}
	}
}

func TestFractionalChernInsulatorOn24Orbitals(t *testing.T) {
	p := project(t, checkerboard("neupert"), 6, 4, nil)
	_, r := value[map[string]any](t, "F2-FCI-neupert-6x4-N8")
	e := lowest(t, p.Operator, p.Sector(8, 2, 0), 2)
	expect(t, r, "momentum (2, 0)", e, r.Data.LowestByMomentum["(2, 0)"])
}

func TestFluxThroughTheLongerTorus(t *testing.T) {
	want, r := value[map[string]map[string]any](t, "F4-flux-neupert-6x3-N6")
	for _, theta := range []float64{0.25, 0.5, 1} {
		p := project(t, checkerboard("neupert"), 6, 3, &ProjectOptions{Twist: [2]float64{theta, 0}})
		entry, ok := want[fmt.Sprintf("%vx2pi", theta)]
		if !ok {
			entry = want[fmt.Sprintf("%.1fx2pi", theta)]
		}
		var list [][]float64
		for _, k := range [][2]int{{0, 0}, {3, 0}, {3, 1}} {
			list = append(list, lowest(t, p.Operator, p.Sector(6, k[0], k[1]), 2))
		}
		expect(t, r, fmt.Sprintf("flux %v", theta), merged(list), numbers(entry["E"]))
	}
}

func TestLargerMagnets(t *testing.T) {
	kagome := built[*lattice.Cluster](t)(lattice.Torus(lattice.Kagome(), 3, 2))
	space := onSites(t, kagome, basis.SpinHalf())
	h := built[operator.Operator](t)(Heisenberg(space, kagome, []float64{1}))
	want, r := value[map[string]float64](t, "B1-kagome-18-3x2")
	sector := charges(space.TwiceSz().Is(0))
	for _, k := range kagome.Momenta() {
		sector.Symmetries = kagome.Sector(k)
		e := lowest(t, h, sector, 2)
		expect(t, r, "momentum "+k.String(), e, r.Data.LowestByMomentum[momentumKey(k)])
		if k.Index == [2]int{0, 1} {
			expect(t, r, "E0", e, []float64{want["E0"]})
		}
	}
	honeycomb := built[*lattice.Cluster](t)(lattice.New(lattice.Honeycomb(), [2]int{2, 2}, [2]int{-2, 4}))
	space = onSites(t, honeycomb, basis.SpinHalf())
	h = built[operator.Operator](t)(Heisenberg(space, honeycomb, []float64{1}))
	sector = charges(space.TwiceSz().Is(0))
	inversion := group.Eigenvalue{Generator: group.Relabel(24, []int{1, 0})}
	sector.Symmetries = append(honeycomb.Sector(honeycomb.Momentum(0, 0)), inversion)
	want, r = value[map[string]float64](t, "B1-honeycomb-24")
	expect(t, r, "E0", lowest(t, h, sector, 1), []float64{want["E0"]})
}

func TestHubbardLadder(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.Cylinder(lattice.Square(), 4, 2))
	space := onSites(t, c, basis.Electron())
	h := built[operator.Operator](t)(Hubbard(space, c, []float64{1}, 4, nil))
	want, r := value[float64](t, "C3-hubbard-ladder2x4-U4.0")
	best := math.Inf(1)
	for _, k := range c.Momenta() {
		sector := charges(space.ParticleNumber().Is(8), space.TwiceSz().Is(0))
		sector.Symmetries = c.Sector(k)
		best = min(best, lowest(t, h, sector, 1)[0])
	}
	expect(t, r, "E0", []float64{best}, []float64{want})
}
