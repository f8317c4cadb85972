package entangle_test

import (
	"context"
	"math"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/lanczos/entangle"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

// must ends a test that cannot go on.
func must[T any](t testing.TB) func(T, error) T {
	return func(v T, err error) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

// lowest returns the lowest states of a sector.
func lowest(t testing.TB, h operator.Operator, sector basis.Sector, k int) (states []entangle.State, energies []float64) {
	t.Helper()
	ctx := context.Background()
	b := must[*basis.Basis](t)(basis.New(ctx, h.Space(), sector, nil))
	m := must[*matrix.Matrix](t)(matrix.New(ctx, h, b, nil))
	r := must[*lanczos.Result](t)(lanczos.Lowest(ctx, m, k, &lanczos.Options{Tolerance: 1e-12}))
	for i, v := range r.Vectors {
		states = append(states, must[entangle.State](t)(entangle.ComplexState(b, v.AsComplex())))
		energies = append(energies, r.Levels[i].Energy)
	}
	return states, energies
}

func space(t testing.TB, states []entangle.State, sites ...int) *entangle.Spectrum {
	t.Helper()
	return must[*entangle.Spectrum](t)(entangle.SpaceCut(context.Background(), states, sites, nil))
}

func agree(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %.13g, want %.13g", what, got, want)
	}
}

// siteList lists from, from+step, … below to.
func siteList(from, to, step int) []int {
	var list []int
	for i := from; i < to; i += step {
		list = append(list, i)
	}
	return list
}

// Ground states of Heisenberg rings in their momentum sectors. Values: independent
// NumPy program, two routes (the entropies of {0, N/2} and of the even sites:
// one). Half ring: entropy, Rényi entropy of order 2, the six largest weights; then
// one site, sites 0 and 1, sites 0 and N/2, even sites.
func TestHeisenbergRings(t *testing.T) {
	for _, c := range []struct {
		n, k     int // total momentum 2πk/n
		s, s2    float64
		weights  []float64
		entropy1 float64
		entropy2 float64
		far      float64
		even     float64
	}{
		{8, 0, 1.0511658766147, 0.73701438197568,
			[]float64{0.66576537205555, 0.10844398372193, 0.10844398372193, 0.10844398372193, 0.0022160741340463, 0.0022160741340463},
			0.69314718055995, 0.92792257318816, 1.3147930509959, 2.1715029346167},
		{12, 0, 1.1842237418013, 0.85108047614686,
			[]float64{0.61984532684343, 0.11922884524647, 0.11922884524646, 0.11922884524646, 0.0053054873059288, 0.0053054873059288},
			0.69314718055995, 0.94249004009544, 1.3518912923134, 3.2469545033666},
		{16, 0, 1.279649453877, 0.93062418206736,
			[]float64{0.58915027060932, 0.12513920444661, 0.12513920444661, 0.12513920444661, 0.0080235240975726, 0.0080235240975726},
			0.69314718055995, 0.94743497181733, 1.365833623141, 4.3238261779907},
	} {
		ring := must[*lattice.Cluster](t)(lattice.Ring(c.n))
		sites := must[*basis.Space](t)(basis.Uniform(c.n, basis.SpinHalf()))
		h := must[operator.Operator](t)(model.Heisenberg(sites, ring, []float64{1}))
		states, _ := lowest(t, h, basis.Sector{
			Charges:    []basis.ChargeValue{sites.TwiceSz().Is(0)},
			Symmetries: ring.Sector(ring.Momentum(c.k, 0)),
		}, 1)
		half := space(t, states, siteList(0, c.n/2, 1)...)
		agree(t, "half ring", half.Entropy(), c.s, 1e-8)
		agree(t, "order 2", must[float64](t)(half.Renyi(2)), c.s2, 1e-8)
		for i, w := range c.weights {
			agree(t, "weight", half.Levels()[i].Weight, w, 1e-8)
		}
		agree(t, "one site", space(t, states, 3).Entropy(), c.entropy1, 1e-8)
		agree(t, "two sites", space(t, states, 0, 1).Entropy(), c.entropy2, 1e-8)
		agree(t, "far sites", space(t, states, 0, c.n/2).Entropy(), c.far, 1e-8)
		agree(t, "even sites", space(t, states, siteList(0, c.n, 2)...).Entropy(), c.even, 1e-8)
		agree(t, "odd sites", space(t, states, siteList(1, c.n, 2)...).Entropy(), c.even, 1e-8)
		multiplets(t, half)
	}
}

// multiplets checks that the blocks of a singlet's part at 2Sz and -2Sz agree, and
// that the levels of a block are among those of the next smaller |2Sz|.
func multiplets(t *testing.T, s *entangle.Spectrum) {
	t.Helper()
	if len(s.Names) != 1 || s.Names[0] != "2Sz" {
		t.Fatalf("labels %v", s.Names)
	}
	of := map[int][]float64{}
	for _, b := range s.Blocks {
		of[b.Charges[0]] = b.Weights
	}
	for q, w := range of {
		for i, x := range w {
			agree(t, "opposite block", of[-q][i], x, 1e-10)
			if q >= 2 && !slices.ContainsFunc(of[q-2], func(y float64) bool { return math.Abs(y-x) < 1e-10 }) {
				t.Errorf("weight %v of 2Sz = %d is not at %d", x, q, q-2)
			}
		}
	}
}

// Spin-1 rings of Affleck, Kennedy, Lieb and Tasaki, half ring. Values: closed form
// of the matrix product, checked by an independent NumPy program.
func TestSpinOneRings(t *testing.T) {
	for _, c := range []struct {
		n       int
		s       float64
		weights []float64
	}{
		{6, 1.3783153025317, []float64{0.26775956284153, 0.26775956284153, 0.26775956284153, 0.19672131147541}},
		{8, 1.3853729456899, []float64{0.26873857404022, 0.24375380865326, 0.24375380865326, 0.24375380865326}},
	} {
		ring := must[*lattice.Cluster](t)(lattice.Ring(c.n))
		sites := must[*basis.Space](t)(basis.Uniform(c.n, basis.Spin(2)))
		h := must[operator.Operator](t)(model.BilinearBiquadratic(sites, ring, 1, 1.0/3))
		states, _ := lowest(t, h, basis.Sector{
			Charges:    []basis.ChargeValue{sites.TwiceSz().Is(0)},
			Symmetries: ring.Sector(ring.Momentum(0, 0)),
		}, 1)
		half := space(t, states, siteList(0, c.n/2, 1)...)
		agree(t, "entropy", half.Entropy(), c.s, 1e-9)
		for i, w := range c.weights {
			agree(t, "weight", half.Levels()[i].Weight, w, 1e-9)
		}
	}
}

// The 4×4 square lattice: half torus and plaquette. Values: independent NumPy
// program, once.
func TestHeisenbergSquare(t *testing.T) {
	c := must[*lattice.Cluster](t)(lattice.Torus(lattice.Square(), 4, 4))
	sites := must[*basis.Space](t)(basis.Uniform(16, basis.SpinHalf()))
	h := must[operator.Operator](t)(model.Heisenberg(sites, c, []float64{1}))
	states, _ := lowest(t, h, basis.Sector{
		Charges:    []basis.ChargeValue{sites.TwiceSz().Is(0)},
		Symmetries: c.Sector(c.Momentum(0, 0)),
	}, 1)
	agree(t, "half torus", space(t, states, 0, 4, 8, 12, 1, 5, 9, 13).Entropy(), 1.8209350816193, 1e-8)
	agree(t, "rows", space(t, states, 0, 1, 2, 3, 4, 5, 6, 7).Entropy(), 1.8209350816193, 1e-8)
	agree(t, "plaquette", space(t, states, 0, 1, 4, 5).Entropy(), 1.577212299391, 1e-8)
}

// The t-V ring of 8 sites, t = 1, V = 2, four fermions, antiperiodic. Values:
// independent NumPy program, once.
func TestNaturalOccupationsOfRepelledFermions(t *testing.T) {
	ring := must[*lattice.Cluster](t)(lattice.Ring(8))
	sites := must[*basis.Space](t)(basis.Uniform(8, basis.Fermion()))
	h := must[operator.Operator](t)(model.TV(sites, ring, []float64{1}, []float64{2}, &model.Options{Twist: [2]float64{0.5}, Gauge: lattice.Boundary}))
	states, _ := lowest(t, h, basis.Sector{Charges: []basis.ChargeValue{sites.ParticleNumber().Is(4)}}, 1)
	occupations := must[[]float64](t)(entangle.NaturalOccupations(context.Background(), states, nil))
	for i, want := range []float64{0.97897487482944, 0.97897487482944, 0.933780170958, 0.933780170958, 0.066219829042001, 0.066219829042001, 0.021025125170562, 0.021025125170562} {
		agree(t, "occupation", occupations[i], want, 1e-8)
	}
	cut := must[*entangle.Spectrum](t)(entangle.ParticleCut(context.Background(), states, 1, nil))
	agree(t, "entropy", cut.Entropy(), 1.5591701283433, 1e-8)
}

// bandStates are the three ground states of a fractional Chern insulator on the
// checkerboard lattice at one third filling.
func bandStates(t testing.TB, second float64, l1, l2 int) []entangle.State {
	t.Helper()
	p := must[*model.Projection](t)(model.Checkerboard(1, second, 0, 1).Projected(l1, l2, nil))
	type level struct {
		energy float64
		state  entangle.State
	}
	var all []level
	for n1 := range l1 {
		for n2 := range l2 {
			states, energies := lowest(t, p.Operator, p.Sector(l1*l2/3, n1, n2), 3)
			for i, s := range states {
				all = append(all, level{energies[i], s})
			}
		}
	}
	slices.SortStableFunc(all, func(a, b level) int {
		if a.energy < b.energy {
			return -1
		}
		return 1
	})
	return []entangle.State{all[0].state, all[1].state, all[2].state}
}

// Particle entanglement of the mixture of three ground states. Values: independent
// NumPy program, once; the counts are closed formulas, and by momentum those of the
// exclusion rule.
func TestParticleCutOfChernBands(t *testing.T) {
	states := map[int][]entangle.State{12: bandStates(t, model.SunSecond, 4, 3), 18: bandStates(t, model.SunSecond, 6, 3)}
	for _, c := range []struct {
		l1, l2, part     int
		below, levels    int
		xi, below1, next float64
	}{
		{4, 3, 2, 42, 66, 3.3770205347996, 4.3957077725813, 7.668513538391},
		{6, 3, 2, 117, 153, 4.2833079761101, 5.3721921667239, 8.7013739583818},
		{6, 3, 3, 330, 816, 4.607038475011, 7.3298786962011, 9.6255503050884},
	} {
		cut := must[*entangle.Spectrum](t)(entangle.ParticleCut(context.Background(), states[c.l1*c.l2], c.part, nil))
		gap, levels := cut.LargestGap(), cut.Levels()
		if gap.Below != c.below || len(levels)+cut.Zeros() != c.levels {
			t.Errorf("%+v: gap %+v of %d levels", c, gap, len(levels))
		}
		agree(t, "lowest level", levels[0].Xi, c.xi, 1e-5)
		agree(t, "below the gap", gap.XiBelow, c.below1, 1e-5)
		agree(t, "above the gap", gap.XiAbove, c.next, 1e-5)
		rule := entangle.Exclusion{Most: 1, Range: 3, Orbitals: c.l1 * c.l2}
		expected := must[[]entangle.SectorCount](t)(rule.OnTorus(c.part, c.l1, c.l2))
		found := cut.BelowGap()
		for i, b := range cut.Blocks {
			at := slices.IndexFunc(expected, func(s entangle.SectorCount) bool { return slices.Equal(s.Charges, b.Charges) })
			if at < 0 || int(expected[at].Count) != found[i] {
				t.Errorf("%+v: %d levels at %v below the gap, expected %+v", c, found[i], b.Charges, expected)
			}
		}
	}
}
