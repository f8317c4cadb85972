package model

import (
	"context"
	"fmt"
	"maps"
	"math"
	"math/cmplx"
	"slices"
	"strconv"
	"strings"
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
	type levels struct {
		E               []float64
		E4, Gap, Spread float64
	}
	want, r := value[levels](t, "F2-FCI-neupert-6x4-N8")
	sectors := map[string][2]int{"(0, 0)": {0, 0}, "(2, 0)": {2, 0}, "(4, 0)": {4, 0}}
	var list [][]float64
	for name, k := range sectors {
		list = append(list, lowest(t, p.Operator, p.Sector(8, k[0], k[1]), 2))
		expect(t, r, "momentum "+name, list[len(list)-1], r.Data.LowestByMomentum[name])
	}
	e := merged(list)
	expect(t, r, "lowest four, gap, spread", append(e[:4:4], e[3]-e[2], e[2]-e[0]), append(want.E, want.E4, want.Gap, want.Spread))
}

// The list of the two lowest levels at each momentum names each doublet of nine sectors
// of 24 orbitals once. They are doublets: two vectors without overlap, each with a
// residual that explicit products confirm. One such sector stands for all.
func TestDoubletsOfOneMomentumAreFoundTwice(t *testing.T) {
	if testing.Short() {
		t.Skip("dimension 30624, four levels with vectors")
	}
	ctx := context.Background()
	p := project(t, checkerboard("neupert"), 6, 4, nil)
	_, r := value[map[string]any](t, "F2-FCI-neupert-6x4-N8")
	b := built[*basis.Basis](t)(basis.New(ctx, p.Space, p.Sector(8, 3, 1), nil))
	m := built[*matrix.Matrix](t)(matrix.New(ctx, p.Operator, b, nil))
	result := built[*lanczos.Result](t)(lanczos.Lowest(ctx, m, 4, nil))
	var e []float64
	for i, v := range result.Vectors {
		e = append(e, result.Levels[i].Energy)
		psi, image := v.AsComplex(), make([]complex128, b.Len())
		m.ApplyComplex(image, psi)
		for j := range image {
			image[j] -= complex(e[i], 0) * psi[j]
		}
		if residual := math.Sqrt(real(overlap(image, image))); residual > 1e-9 {
			t.Errorf("level %d: residual %v", i, residual)
		}
		for j, w := range result.Vectors[:i+1] {
			want := map[bool]float64{true: 1}[i == j]
			if z := overlap(w.AsComplex(), psi); cmplx.Abs(z-complex(want, 0)) > 1e-12 {
				t.Errorf("⟨%d|%d⟩ = %v", j, i, z)
			}
		}
	}
	expect(t, r, "two doublets", []float64{e[0], e[2]}, r.Data.LowestByMomentum["(3, 1)"])
	if e[1]-e[0] > 1e-11 || e[3]-e[2] > 1e-11 {
		t.Errorf("levels %v, want two doublets", e)
	}
}

func TestFluxThroughTheLongerTorus(t *testing.T) {
	want, r := value[map[string]map[string]any](t, "F4-flux-neupert-6x3-N6")
	for name, entry := range want {
		theta := built[float64](t)(strconv.ParseFloat(strings.TrimSuffix(name, "x2pi"), 64))
		p := project(t, checkerboard("neupert"), 6, 3, &ProjectOptions{Twist: [2]float64{theta, 0}})
		list := map[string][]float64{}
		for _, k := range [][2]int{{0, 0}, {3, 0}, {3, 1}, {3, 2}} {
			list[fmt.Sprint(k)] = lowest(t, p.Operator, p.Sector(6, k[0], k[1]), 2)
		}
		energies := numbers(entry["E"])
		expect(t, r, "flux "+name, merged(slices.Collect(maps.Values(list))), energies)
		for i, k := range entry["K"].([]any) {
			if !near(list[fmt.Sprint(k)], energies[i]) {
				t.Errorf("flux %s: no level %v at momentum %v", name, energies[i], k)
			}
		}
	}
	if len(want) != 7 {
		t.Errorf("%d fluxes, want 7", len(want))
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
	one := merged(lowestByMomentum(t, h, kagome, charges(space.TwiceSz().Is(2)), 1))
	expect(t, r, "E(Sz=1)", one, []float64{want["lowest_Sz1"]})
	honeycomb := built[*lattice.Cluster](t)(lattice.New(lattice.Honeycomb(), [2]int{2, 2}, [2]int{-2, 4}))
	space = onSites(t, honeycomb, basis.SpinHalf())
	h = built[operator.Operator](t)(Heisenberg(space, honeycomb, []float64{1}))
	sector = charges(space.TwiceSz().Is(0))
	inversion := group.Eigenvalue{Generator: group.Relabel(24, []int{1, 0})}
	sector.Symmetries = append(honeycomb.Sector(honeycomb.Momentum(0, 0)), inversion)
	want, r = value[map[string]float64](t, "B1-honeycomb-24")
	expect(t, r, "E0", lowest(t, h, sector, 1), []float64{want["E0"]})
}

// Spins 1/2 on the tilted square of 26. By the sign rule of Marshall (Proc. R. Soc. A
// 232, 48, 1955), with 13 sites on each sublattice, the ground state is odd under spin
// inversion and under translations by one site, so that its momentum is (π, π); the
// record has its energy and names the momentum in the rotated basis, where it vanishes.
func TestTiltedSquareOf26(t *testing.T) {
	if testing.Short() {
		t.Skip("dimension 200170")
	}
	c := built[*lattice.Cluster](t)(lattice.New(lattice.Square(), [2]int{5, 1}, [2]int{-1, 5}))
	space := onSites(t, c, basis.SpinHalf())
	h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
	want, r := value[map[string]float64](t, "B1-square-sqrt26")
	half := group.NewTurn(1, 2)
	for _, k := range c.Momenta() {
		if k.Turns[0] != half || k.Turns[1] != half {
			continue
		}
		sector := charges(space.TwiceSz().Is(0))
		inversion := group.Eigenvalue{Generator: group.Relabel(26, []int{1, 0}), Turn: half}
		sector.Symmetries = append(c.Sector(k), inversion)
		e := lowest(t, h, sector, 1)[0]
		expect(t, r, "E0, per site, per bond", []float64{e, e / 26, e / 52}, []float64{want["E0"], want["E0_per_site"], want["E0_per_bond"]})
		return
	}
	t.Error("the momentum (π, π) is not allowed")
}
