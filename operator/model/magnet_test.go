package model

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// ring returns the periodic chain with its space.
func ring(t *testing.T, n int, site basis.Site) (*lattice.Cluster, *basis.Space) {
	t.Helper()
	c := built[*lattice.Cluster](t)(lattice.Ring(n))
	return c, onSites(t, c, site)
}

func TestHeisenbergRings(t *testing.T) {
	e0 := map[int]float64{}
	triplets, singlets := map[int][][]float64{}, map[int][][]float64{} // by momentum
	for _, n := range []int{4, 6, 8, 10, 12, 14} {
		c, space := ring(t, n, basis.SpinHalf())
		h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
		levels := byMomentum(t, h, c, charges(space.TwiceSz().Is(0)))
		e0[n] = merged(levels)[0]
		// The ground state has momentum 0 or π, and is the first there.
		want := (n / 2 % 2) * n / 2
		if math.Abs(levels[want][0]-e0[n]) > 1e-12 {
			t.Errorf("N = %d: the ground state is not at momentum index %d", n, want)
		}
		triplets[n] = byMomentum(t, h, c, charges(space.TwiceSz().Is(2)))
		for k := range levels {
			singlets[n] = append(singlets[n], without(t, levels[k], triplets[n][k]))
		}
	}
	want, r := value[float64](t, "A1-heis-ring-N6-E0")
	expect(t, r, "E0", []float64{e0[6]}, []float64{want})
	for _, n := range []int{4, 6, 10, 12, 14} {
		gap, r := value[float64](t, fmt.Sprintf("A1-heis-ring-N%d-triplet-gap", n))
		e := merged(triplets[n])[0]
		expect(t, r, "gap, triplet", []float64{e - e0[n], e, triplets[n][r.Data.Momentum][0]}, []float64{gap, r.Data.Triplet, r.Data.Triplet})
	}
	for _, n := range []int{6, 8, 10, 12, 14} {
		gap, r := value[float64](t, fmt.Sprintf("A1-heis-ring-N%d-singlet-gap", n))
		expect(t, r, "gap", []float64{merged(singlets[n])[1] - e0[n]}, []float64{gap})
		if !near(singlets[n][r.Data.Momentum], e0[n]+gap) {
			t.Errorf("%s: not at momentum index %d", r.ID, r.Data.Momentum)
		}
	}
	for _, n := range []int{7, 11} {
		c, space := ring(t, n, basis.SpinHalf())
		h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
		levels := byMomentum(t, h, c, charges(space.TwiceSz().Is(1)))
		want, r := value[float64](t, fmt.Sprintf("A1-heis-ring-N%d-E0", n))
		expect(t, r, "E0 twice", merged(levels), []float64{want, want})
		for _, k := range r.Data.Momenta {
			expect(t, r, fmt.Sprintf("momentum index %d", k), levels[k], []float64{want})
		}
	}
}

func TestOpenHeisenbergChains(t *testing.T) {
	for _, n := range []int{4, 12} {
		c := built[*lattice.Cluster](t)(lattice.Open(lattice.Chain(), n, 1))
		space := onSites(t, c, basis.SpinHalf())
		h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
		e := spectrum(t, h, charges(space.TwiceSz().Is(0)))
		want, r := value[[]float64](t, fmt.Sprintf("A1-heis-open-N%d", n))
		expect(t, r, "E0, gap", []float64{e[0], e[1] - e[0]}, want)
	}
}

func TestXXZRings(t *testing.T) {
	for id, c := range map[string]struct {
		n     int
		delta float64
	}{"A2-xxz-D0.5-N12": {12, 0.5}, "A2-xxz-D2.0-N8": {8, 2}} {
		cluster, space := ring(t, c.n, basis.SpinHalf())
		h := built[operator.Operator](t)(XXZ(space, cluster, []float64{1}, []float64{c.delta}, nil))
		zero := merged(byMomentum(t, h, cluster, charges(space.TwiceSz().Is(0))))
		one := merged(byMomentum(t, h, cluster, charges(space.TwiceSz().Is(2))))
		want, r := value[[]float64](t, id)
		expect(t, r, "E0, E(Sz=1), E1", []float64{zero[0], one[0], zero[1]}, want)
	}
	for _, n := range []int{8, 12} {
		cluster, space := ring(t, n, basis.SpinHalf())
		h := built[operator.Operator](t)(XXZ(space, cluster, []float64{1}, []float64{0}, nil))
		e := merged(byMomentum(t, h, cluster, charges(space.TwiceSz().Is(0))))
		want, r := value[float64](t, fmt.Sprintf("A2-xx-N%d", n))
		expect(t, r, "E0", e, []float64{want})
		expect(t, r, "closed form", e, []float64{-1 / math.Sin(math.Pi/float64(n))})
	}
}

func TestTwistedRingsInBothGauges(t *testing.T) {
	for id, c := range map[string]struct {
		n     int
		twist float64
	}{"A2-twist-N8-phi0.3333pi": {8, 1. / 6}, "A2-twist-N10-phi0.5000pi": {10, 0.25}} {
		cluster, space := ring(t, c.n, basis.SpinHalf())
		want, r := value[[]float64](t, id)
		opts := &Options{Twist: [2]float64{c.twist, 0}, Gauge: lattice.Boundary}
		h := built[operator.Operator](t)(XXZ(space, cluster, []float64{1}, []float64{1}, opts))
		expect(t, r, "boundary gauge", spectrum(t, h, charges(space.TwiceSz().Is(0))), want)
		opts.Gauge = lattice.Uniform
		h = built[operator.Operator](t)(XXZ(space, cluster, []float64{1}, []float64{1}, opts))
		expect(t, r, "uniform gauge", merged(byMomentum(t, h, cluster, charges(space.TwiceSz().Is(0)))), want)
	}
}

func TestFrustratedRings(t *testing.T) {
	for _, n := range []int{8, 10, 14} {
		c, space := ring(t, n, basis.SpinHalf())
		h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1, 0.5}))
		e := merged(byMomentum(t, h, c, charges(space.TwiceSz().Is(0))))
		want, r := value[[]float64](t, fmt.Sprintf("A3-MG-N%d", n))
		expect(t, r, "E0 twice, gap", []float64{e[0], e[1], e[2] - e[0]}, []float64{want[0], want[0], want[1]})
		expect(t, r, "-3N/8 (Majumdar and Ghosh 1969)", e, []float64{-3 * float64(n) / 8})
	}
	for _, j2 := range []float64{0.2411, 0.4} {
		c, space := ring(t, 12, basis.SpinHalf())
		h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1, j2}))
		zero := merged(byMomentum(t, h, c, charges(space.TwiceSz().Is(0))))
		one := merged(byMomentum(t, h, c, charges(space.TwiceSz().Is(2))))
		want, r := value[[]float64](t, fmt.Sprintf("A3-J1J2-%v-N12", j2))
		expect(t, r, "E0, triplet, excited singlet", []float64{zero[0], one[0], without(t, zero, one)[1]}, want)
	}
}

func TestLongerSpins(t *testing.T) {
	c, space := ring(t, 8, basis.Spin(2))
	h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
	sector := charges(space.TwiceSz().Is(0))
	sector.Symmetries = c.Sector(c.Momentum(0, 0))
	e0 := spectrum(t, h, sector)[0]
	sector = charges(space.TwiceSz().Is(2))
	sector.Symmetries = c.Sector(c.Momentum(4, 0))
	e1 := spectrum(t, h, sector)[0]
	want, r := value[[]float64](t, "A4-spin1-ring-N8")
	expect(t, r, "E0, E(S=1), gap", []float64{e0, e1, e1 - e0}, want)

	for _, n := range []int{4, 6} {
		c, space := ring(t, n, basis.Spin(2))
		h := built[operator.Operator](t)(BilinearBiquadratic(space, c, 1, 1./3))
		e := spectrum(t, h, charges(space.TwiceSz().Is(0)))
		want, r := value[[]float64](t, fmt.Sprintf("A5-AKLT-ring-N%d", n))
		expect(t, r, "E0, gap", []float64{e[0], e[1] - e[0]}, want)
	}
	open := built[*lattice.Cluster](t)(lattice.Open(lattice.Chain(), 4, 1))
	h = built[operator.Operator](t)(BilinearBiquadratic(onSites(t, open, basis.Spin(2)), open, 1, 1./3))
	e := spectrum(t, h, basis.Sector{})
	want, r = value[[]float64](t, "A5-AKLT-open-N4")
	expect(t, r, "E0 four times, gap", []float64{e[0], e[3], e[4] - e[0]}, []float64{want[0], want[0], want[1]})
}

func TestFieldsAndIsing(t *testing.T) {
	for _, g := range []float64{1, 2} {
		c, space := ring(t, 8, basis.SpinHalf())
		h := built[operator.Operator](t)(TransverseIsing(space, c, 1, g))
		e := spectrum(t, h, basis.Sector{})
		want, r := value[[]float64](t, fmt.Sprintf("A7-tfim-g%.1f-N8", g))
		expect(t, r, "E0, E1", e, want[:2])
	}
	c, space := ring(t, 10, basis.SpinHalf())
	want, r := value[[]float64](t, "A8-field-N10-W1.0")
	fields := make([][3]float64, 10)
	for i, w := range r.Data.Fields {
		fields[i][2] = -w
	}
	exchange := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
	field := built[operator.Operator](t)(Field(space, fields))
	e := spectrum(t, exchange.Plus(field), charges(space.TwiceSz().Is(0)))
	square := 0.0
	for _, x := range e {
		square += x * x
	}
	ratio := gapRatio(e[len(e)/3 : 2*len(e)/3])
	expect(t, r, "E0, E1, Emax, ΣE², gap ratio", []float64{e[0], e[1], e[len(e)-1], square, ratio}, want)

	// One spin in a field along any direction: ±|h|/2.
	one := built[*basis.Space](t)(basis.Uniform(1, basis.SpinHalf()))
	tilted := built[operator.Operator](t)(Field(one, [][3]float64{{1, 2, -2}}))
	if e := spectrum(t, tilted, basis.Sector{}); math.Abs(e[0]+1.5) > 1e-14 || math.Abs(e[1]-1.5) > 1e-14 {
		t.Errorf("one spin in a field of 3: %v", e)
	}
	up := built[operator.Operator](t)(Field(one, [][3]float64{{0, 0, 1}}))
	if !up.Equal(operator.On(one).Sz(0).Scale(-1)) {
		t.Errorf("the field along z is %v", up)
	}
}

func TestTwoDimensionalMagnets(t *testing.T) {
	for id, c := range map[string]struct {
		l      lattice.Lattice
		t1, t2 [2]int
	}{
		"B1-square-sqrt8":  {lattice.Square(), [2]int{2, 2}, [2]int{-2, 2}},
		"B1-triangular-12": {lattice.Triangular(), [2]int{2, 2}, [2]int{-2, 4}},
		"B1-kagome-12":     {lattice.Kagome(), [2]int{2, 0}, [2]int{0, 2}},
	} {
		cluster := built[*lattice.Cluster](t)(lattice.New(c.l, c.t1, c.t2))
		space := onSites(t, cluster, basis.SpinHalf())
		h := built[operator.Operator](t)(Heisenberg(space, cluster, []float64{1}))
		want, r := value[map[string]float64](t, id)
		zero := byMomentum(t, h, cluster, charges(space.TwiceSz().Is(0)))
		one := merged(byMomentum(t, h, cluster, charges(space.TwiceSz().Is(2))))
		expect(t, r, "E0, E(Sz=1)", []float64{merged(zero)[0], one[0]}, []float64{want["E0"], want["lowest_Sz1"]})
		for i, k := range cluster.Momenta() {
			expect(t, r, "momentum "+k.String(), zero[i], r.Data.LowestByMomentum[momentumKey(k)])
		}
	}
}

func TestFourByFourSquare(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.Torus(lattice.Square(), 4, 4))
	space := onSites(t, c, basis.SpinHalf())
	sector := charges(space.TwiceSz().Is(0))
	sector.Symmetries = c.Sector(c.Momentum(0, 0))
	h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
	want, r := value[map[string]float64](t, "B1-square-4x4")
	expect(t, r, "E0", spectrum(t, h, sector), []float64{want["E0"]})
	for i, e := range lowestByMomentum(t, h, c, charges(space.TwiceSz().Is(0)), 2) {
		k := c.Momenta()[i]
		expect(t, r, "momentum "+k.String(), e, r.Data.LowestByMomentum[momentumKey(k)])
	}
	one := merged(lowestByMomentum(t, h, c, charges(space.TwiceSz().Is(2)), 1))
	expect(t, r, "E(Sz=1)", one, []float64{want["lowest_Sz1"]})
	xy := built[operator.Operator](t)(XXZ(space, c, []float64{1}, []float64{0}, nil))
	planar, r := value[float64](t, "B2-XY-4x4")
	expect(t, r, "E0", spectrum(t, xy, sector), []float64{planar})
}

// momentumKey writes a momentum as the check values do, such as (0,1/2).
func momentumKey(k lattice.Momentum) string {
	var text []string
	for _, turn := range k.Turns {
		text = append(text, strings.TrimSuffix(turn.String(), "0/1")+map[bool]string{true: "0"}[turn.IsZero()])
	}
	return "(" + strings.Join(text, ",") + ")"
}

func TestThreeSpinChirality(t *testing.T) {
	c := built[*lattice.Cluster](t)(lattice.New(lattice.Triangular(), [2]int{2, 2}, [2]int{-2, 4}))
	space := onSites(t, c, basis.SpinHalf())
	h := built[operator.Operator](t)(Heisenberg(space, c, []float64{1}))
	want, r := value[[]float64](t, "B2-chiral-tri12-Jc1.0")
	terms := []operator.Operator{h}
	for _, triangle := range r.Data.Triangles {
		// S_i·(S_j×S_k) = -i/2 Σ over cyclic (a,b,c) of Sᶻ_a (S⁻_b S⁺_c - S⁺_b S⁻_c), by expansion.
		o := operator.On(space)
		for n := range 3 {
			a, b, d := triangle[n], triangle[(n+1)%3], triangle[(n+2)%3]
			cross := o.Sx(b).Times(o.Sy(d)).Minus(o.Sy(b).Times(o.Sx(d)))
			terms = append(terms, o.Sz(a).Times(cross))
		}
	}
	e := merged(byMomentum(t, operator.Sum(terms), c, charges(space.TwiceSz().Is(0))))
	expect(t, r, "lowest three", e, want)
}

func TestImpossibleMagnetsAreRefused(t *testing.T) {
	c, space := ring(t, 4, basis.SpinHalf())
	fermions := onSites(t, c, basis.Fermion())
	other := built[*basis.Space](t)(basis.Uniform(5, basis.SpinHalf()))
	two := []lattice.Bond{{From: 0, To: 1}, {From: 1, To: 9}}
	for name, f := range map[string]struct {
		make func() (operator.Operator, error)
		says string
	}{
		"sites":        {func() (operator.Operator, error) { return Heisenberg(other, c, []float64{1}) }, "5 sites for a cluster of 4"},
		"no space":     {func() (operator.Operator, error) { return Heisenberg(nil, c, []float64{1}) }, "no space"},
		"no cluster":   {func() (operator.Operator, error) { return Heisenberg(space, nil, []float64{1}) }, "no cluster"},
		"far shell":    {func() (operator.Operator, error) { return Heisenberg(space, c, []float64{1, 0, 1}) }, "reaches too far"},
		"not a number": {func() (operator.Operator, error) { return Heisenberg(space, c, []float64{math.NaN()}) }, "finite"},
		"lengths":      {func() (operator.Operator, error) { return XXZ(space, c, []float64{1}, nil, nil) }, "one of each"},
		"wrong kind":   {func() (operator.Operator, error) { return Heisenberg(fermions, c, []float64{1}) }, "fermion"},
		"wrong site":   {func() (operator.Operator, error) { return Exchange(space, two, 1, 1, nil) }, "site 9"},
		"phases":       {func() (operator.Operator, error) { return Exchange(space, two, 1, 1, []complex128{1}) }, "1 phases for 2 bonds"},
		"fields":       {func() (operator.Operator, error) { return Field(space, make([][3]float64, 3)) }, "3 sites of 4"},
		"no gauge": {func() (operator.Operator, error) {
			return XXZ(space, c, []float64{1}, []float64{1}, &Options{Twist: [2]float64{0.1}, Gauge: 9})
		}, "finite"},
		"long Ising":    {func() (operator.Operator, error) { return TransverseIsing(onSites(t, c, basis.Spin(2)), c, 1, 1) }, "spins 1/2"},
		"hops of spins": {func() (operator.Operator, error) { return TV(space, c, []float64{1}, nil, nil) }, "spin"},
		"hops, nil":     {func() (operator.Operator, error) { return Hops(nil, two, 1, nil) }, "no space"},
		"electrons":     {func() (operator.Operator, error) { return Hubbard(fermions, c, []float64{1}, 1, nil) }, "electron"},
	} {
		if _, err := f.make(); err == nil || !strings.Contains(err.Error(), f.says) {
			t.Errorf("%s: error %v, want one that says %q", name, err, f.says)
		}
	}
}

func ExampleHeisenberg() {
	c, err := lattice.Torus(lattice.Square(), 4, 4)
	if err != nil {
		fmt.Println(err)
		return
	}
	space, err := basis.Uniform(c.Sites(), basis.SpinHalf())
	if err != nil {
		fmt.Println(err)
		return
	}
	h, err := Heisenberg(space, c, []float64{1, 0.5})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(h.Len(), "terms; conserves S_z:", h.Conserves(space.TwiceSz()) == nil)
	// Output:
	// 192 terms; conserves S_z: true
}
