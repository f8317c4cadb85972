package entangle

import (
	"context"
	"math"
	"strings"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/lanczos/dense"
)

// Closed formulas: product, Bell and GHZ states.
func TestSpaceCutOfKnownStates(t *testing.T) {
	space := makeSpace(t, repeated(4, basis.SpinHalf())...)
	b := makeBasis(t, space, basis.Sector{})
	half := complex(math.Sqrt2/2, 0)
	product := stateOf(t, b, [][]int{{1, 0, 0, 1}}, []complex128{1})
	// a singlet of 0 and 2 times a triplet of 1 and 3
	bell := stateOf(t, b, [][]int{{1, 1, 0, 0}, {1, 0, 0, 1}, {0, 1, 1, 0}, {0, 0, 1, 1}}, []complex128{0.5, 0.5, -0.5, -0.5})
	ghz := stateOf(t, b, [][]int{{0, 0, 0, 0}, {1, 1, 1, 1}}, []complex128{half, half * 1i})
	for _, c := range []struct {
		name   string
		states []State
		sites  []int
		want   float64
	}{
		{"product", []State{product}, []int{0, 2}, 0},
		{"Bell pair inside", []State{bell}, []int{0, 2}, 0},
		{"Bell pair cut", []State{bell}, []int{3}, math.Ln2},
		{"both Bell pairs cut", []State{bell}, []int{1, 0}, 2 * math.Ln2},
		{"GHZ", []State{ghz}, []int{2}, math.Ln2},
		{"GHZ", []State{ghz}, []int{0, 1, 3}, math.Ln2},
		{"nothing", []State{ghz}, nil, 0},
		{"everything", []State{ghz}, []int{0, 1, 2, 3}, 0},
		{"nothing of a mixture", []State{ghz, product}, nil, 0},
		{"all of a mixture", []State{ghz, product}, []int{0, 1, 2, 3}, math.Ln2},
		{"all of a pure mixture", []State{ghz, ghz}, []int{0, 1, 2, 3}, 0},
	} {
		cut := spaceCut(t, c.states, c.sites...)
		near(t, c.name, cut.Entropy(), c.want, 1e-14)
		near(t, "trace", cut.Trace(), 1, 1e-14)
	}
	// 2Sz is conserved by the pairs, though no sector fixes it, but not by GHZ
	if names := spaceCut(t, []State{bell}, 0, 1).Names; len(names) != 1 || names[0] != "2Sz" {
		t.Errorf("labels %v", names)
	}
	if names := spaceCut(t, []State{ghz}, 0, 1).Names; len(names) != 0 {
		t.Errorf("labels %v", names)
	}
	if names := spaceCut(t, []State{bell, ghz}, 0, 1).Names; len(names) != 0 {
		t.Errorf("labels %v", names)
	}
}

// The part and the rest have the same weights, for every kind of site.
func TestSpaceCutOfTheRest(t *testing.T) {
	r := rng(7)
	for _, c := range bruteSpaces {
		space := makeSpace(t, c.sites...)
		q := space.ParticleNumber()
		s := []State{randomState(t, r, makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{q.Is(q.Of(space, middle(space)))}}))}
		order := r.Perm(len(c.sites))
		n := 1 + r.IntN(len(c.sites)-1)
		a, b := spaceCut(t, s, order[:n]...), spaceCut(t, s, order[n:]...)
		nearAll(t, c.name, weights(a), weights(b), 1e-13)
		near(t, c.name, a.Entropy(), b.Entropy(), 1e-12)
	}
}

// A state of a symmetry sector is the same state without symmetries, for spins,
// bosons, fermions and electrons, with translations, reflections and particle-hole
// or spin inversion.
func TestCutsOfSymmetricStates(t *testing.T) {
	r := rng(8)
	flip := group.Action{Sites: group.Identity(6)}
	for range 6 {
		flip.Levels = append(flip.Levels, []int{1, 0})
	}
	for _, c := range []struct {
		name    string
		sites   []basis.Site
		number  int
		momenta []int
	}{
		{"spins", repeated(6, basis.SpinHalf()), 0, []int{0, 1, 3}},
		{"spins 1", repeated(4, basis.Spin(2)), 0, []int{0, 1}},
		{"bosons", repeated(5, basis.Boson(2)), 4, []int{0, 2}},
		{"hard-core bosons", repeated(6, basis.HardCoreBoson()), 3, []int{0, 1}},
		{"fermions", repeated(6, basis.Fermion()), 3, []int{0, 1, 2}},
		{"fermions, even", repeated(7, basis.Fermion()), 4, []int{0, 3}},
		{"electrons", repeated(4, basis.Electron()), 3, []int{1, 2}},
	} {
		space := makeSpace(t, c.sites...)
		q := space.ParticleNumber()
		if c.number == 0 {
			q = space.TwiceSz()
		}
		var folded, plain, bare []State
		for _, k := range c.momenta {
			sector := basis.Sector{Charges: []basis.ChargeValue{q.Is(c.number)}, Symmetries: rotation(len(c.sites), k)}
			if c.name == "spins" && k != 1 {
				sector.Symmetries = append(sector.Symmetries, group.Eigenvalue{Generator: flip, Turn: group.NewTurn(1, 2)})
			}
			s := randomState(t, r, makeBasis(t, space, sector))
			folded, plain, bare = append(folded, s), append(plain, unfolded(t, s, true)), append(bare, unfolded(t, s, false))
		}
		for n := range len(folded) {
			sites := r.Perm(len(c.sites))[:len(c.sites)/2]
			want := spaceCut(t, bare[n:], sites...)
			for _, states := range [][]State{folded[n:], plain[n:]} {
				got := spaceCut(t, states, sites...)
				nearAll(t, c.name, weights(got), weights(want), 1e-13)
				if len(got.Blocks) != len(want.Blocks) || got.Names[0] != want.Names[0] {
					t.Errorf("%s: blocks %v and %v", c.name, got.Names, want.Names)
				}
			}
			if c.number > 0 {
				nearAll(t, c.name, weights(particleCut(t, folded[n:], 2)), weights(particleCut(t, bare[n:], 2)), 1e-13)
			}
		}
	}
}

// Free fermions: the weights of a part are products of the eigenvalues of its
// correlation matrix C_ij = ⟨c†_i c_j⟩ and of 1 minus them (Peschel, J. Phys. A 36,
// L205, 2003), for parts that are not contiguous, in the charge sector and in the
// momentum sector of the closed shell.
func TestSpaceCutOfFreeFermions(t *testing.T) {
	for _, c := range []struct {
		sites, filled int
		part          []int
	}{
		{8, 4, []int{0, 1, 2, 3}}, {10, 5, []int{0, 2, 3, 7}}, {10, 4, []int{9, 1, 4, 6}},
		{12, 6, []int{0, 1, 2, 3, 4, 5}}, {12, 7, []int{0, 2, 4, 6, 8, 10}}, {14, 7, []int{0, 1, 2, 3, 4, 5, 6}},
	} {
		space := makeSpace(t, repeated(c.sites, basis.Fermion())...)
		orbitals := planeWaves(c.sites, c.filled)
		sector := basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(c.filled)}}
		b := makeBasis(t, space, sector)
		states := []State{makeState(t, b, determinants(b, orbitals))}
		if c.filled%2 == 1 { // periodic: total momentum 0
			sector.Symmetries = rotation(c.sites, 0)
			b = makeBasis(t, space, sector)
			states = append(states, makeState(t, b, determinants(b, orbitals)))
		}
		entropy, largest := peschel(t, orbitals, c.part)
		for _, s := range states {
			cut := spaceCut(t, []State{s}, c.part...)
			near(t, "entropy", cut.Entropy(), entropy, 1e-11)
			near(t, "largest weight", cut.Levels()[0].Weight, largest, 1e-13)
		}
	}
}

// Values: independent NumPy program, two routes (correlation matrix of Peschel and
// the XX spin ring). Half rings, periodic for odd numbers and antiperiodic for
// even ones, then the first 1, 2, 4 and 5 sites of 12.
func TestSpaceCutOfFreeRings(t *testing.T) {
	for _, c := range []struct {
		sites, filled, part int
		entropy             float64
	}{
		{8, 4, 4, 1.0437380304709}, {12, 6, 6, 1.1754758215305}, {14, 7, 7, 1.226143807842},
		{12, 6, 1, 0.69314718055995}, {12, 6, 2, 0.93677005546127}, {12, 6, 4, 1.1270447891776}, {12, 6, 5, 1.1638262732089},
	} {
		space := makeSpace(t, repeated(c.sites, basis.Fermion())...)
		b := makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(c.filled)}})
		s := makeState(t, b, determinants(b, planeWaves(c.sites, c.filled)))
		near(t, "entropy", spaceCut(t, []State{s}, firstSites(c.part)...).Entropy(), c.entropy, 1e-9)
	}
}

func firstSites(n int) []int {
	list := make([]int, n)
	for i := range list {
		list[i] = i
	}
	return list
}

// peschel returns the entropy and the largest weight of a part of a determinant.
func peschel(t *testing.T, orbitals [][]complex128, part []int) (entropy, largest float64) {
	t.Helper()
	n := len(part)
	c := make([]complex128, n*n)
	for i, x := range part {
		for j, y := range part {
			for _, u := range orbitals {
				c[i*n+j] += complex(real(u[x]), -imag(u[x])) * u[y]
			}
		}
	}
	values, _, err := dense.EigenComplex(c, n, false)
	if err != nil {
		t.Fatal(err)
	}
	largest = 1
	for _, x := range values {
		for _, p := range []float64{x, 1 - x} {
			if p > 1e-300 {
				entropy -= p * math.Log(p)
			}
		}
		largest *= max(x, 1-x)
	}
	return entropy, largest
}

// Closed formula, independent of the size of the weights: a state with Schmidt
// values that fall by 1e3 each, down to weights of 1e-24, which a density matrix
// in float64 would lose.
func TestSmallWeights(t *testing.T) {
	space := makeSpace(t, basis.Spin(4), basis.Spin(4))
	b := makeBasis(t, space, basis.Sector{})
	r := rng(9)
	psi := make([]complex128, 25)
	u, v := randomFrame(r, 5), randomFrame(r, 5)
	norm := 0.0
	for k := range 5 {
		norm += math.Pow(10, -6*float64(k))
		for i := range 5 {
			for j := range 5 {
				at, _ := b.Index(configuration(t, space, i, j))
				psi[at] += complex(math.Pow(10, -3*float64(k)), 0) * u[k][i] * v[k][j]
			}
		}
	}
	for i := range psi {
		psi[i] /= complex(math.Sqrt(norm), 0)
	}
	cut := spaceCut(t, []State{makeState(t, b, psi)}, 1)
	levels := cut.Levels()
	if len(levels) != 5 || cut.Zeros() != 0 {
		t.Fatalf("%d levels, %d zeros", len(levels), cut.Zeros())
	}
	for k, l := range levels {
		want := 6*float64(k)*math.Ln10 + math.Log(norm)
		near(t, "level", l.Xi, want, 2e-15*math.Exp(want/2)+1e-13)
	}
	if levels[4].Xi > cut.Trust || cut.Trust < 60 || cut.Trust > 72 {
		t.Errorf("trust %v, highest level %v", cut.Trust, levels[4].Xi)
	}
}

func configuration(t testing.TB, space *basis.Space, levels ...int) basis.Configuration {
	t.Helper()
	c, err := space.Configuration(levels)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// Random states have the entropy Σ_{k=n+1}^{mn} 1/k - (m-1)/(2n) in the mean (Page,
// Phys. Rev. Lett. 71, 1291, 1993; proved by Foong and Kanno, Phys. Rev. Lett. 72,
// 1148, 1994) for m × n dimensions.
func TestEntropyOfRandomStates(t *testing.T) {
	r := rng(10)
	for _, c := range []struct {
		spins   int
		sites   []int
		samples int
		want    float64
	}{
		{2, []int{1}, 2000, 0.33333333333333},
		{10, []int{1, 4, 6, 9}, 40, 2.6480972685724},
		{12, []int{0, 2, 4, 6, 8, 10}, 10, 3.6590254932606},
	} {
		b := makeBasis(t, makeSpace(t, repeated(c.spins, basis.SpinHalf())...), basis.Sector{})
		n := float64(c.samples)
		mean, square := 0.0, 0.0
		for range c.samples {
			s := spaceCut(t, []State{randomState(t, r, b)}, c.sites...).Entropy()
			mean += s / n
			square += s * s / n
		}
		deviation := math.Sqrt((square - mean*mean) / (n - 1))
		if deviation > 0.01 {
			t.Errorf("standard error %v", deviation)
		}
		near(t, "mean entropy", mean, c.want, 5*deviation)
	}
}

// A space with forbidden configurations: the t-J model's and a blockade's.
func TestSpaceCutOfConstrainedStates(t *testing.T) {
	r := rng(14)
	for _, c := range []struct {
		site     basis.Site
		blockade bool
	}{{basis.Electron(), false}, {basis.HardCoreBoson(), true}} {
		space := makeSpace(t, repeated(6, c.site)...)
		sector := basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(2)}, Symmetries: rotation(6, 1), Constraints: space.NoDoubleOccupancy()}
		if c.blockade {
			for i := range 6 {
				sector.Constraints = append(sector.Constraints, basis.AtMost(1, []int{i, (i + 1) % 6}))
			}
		}
		s := randomState(t, r, makeBasis(t, space, sector))
		bare := unfolded(t, s, false)
		nearAll(t, "sites", weights(spaceCut(t, []State{s}, 0, 3, 4)), weights(spaceCut(t, []State{bare}, 0, 3, 4)), 1e-13)
		nearAll(t, "particles", weights(particleCut(t, []State{s}, 1)), weights(particleCut(t, []State{bare}, 1)), 1e-13)
	}
}

func TestSpaceCutRefuses(t *testing.T) {
	r := rng(11)
	spins := makeBasis(t, makeSpace(t, repeated(4, basis.SpinHalf())...), basis.Sector{})
	others := makeBasis(t, makeSpace(t, repeated(4, basis.HardCoreBoson())...), basis.Sector{})
	s := randomState(t, r, spins)
	for _, c := range []struct {
		states []State
		sites  []int
		opts   *Options
		says   string
	}{
		{nil, nil, nil, "no state"},
		{[]State{s, {}}, nil, nil, "state 1 is empty"},
		{[]State{s, randomState(t, r, others)}, nil, nil, "different spaces"},
		{[]State{s}, []int{4}, nil, "names site 4"},
		{[]State{s}, []int{-1}, nil, "names site -1"},
		{[]State{s}, []int{2, 0, 2}, nil, "site 2 twice"},
		{[]State{s}, []int{0}, &Options{Error: -1}, "Options.Error"},
		{[]State{s}, []int{0}, &Options{Error: math.NaN()}, "Options.Error"},
		{[]State{s}, []int{0, 1}, &Options{Memory: 300}, "too many for the limit"},
	} {
		_, err := SpaceCut(context.Background(), c.states, c.sites, c.opts)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("error %v, want one that says %q", err, c.says)
		}
	}
}

func TestStateRefuses(t *testing.T) {
	b := makeBasis(t, makeSpace(t, repeated(2, basis.SpinHalf())...), basis.Sector{})
	nan := math.NaN()
	for _, c := range []struct {
		basis *basis.Basis
		psi   []float64
		says  string
	}{
		{nil, []float64{1}, "without a basis"},
		{b, []float64{1}, "1 amplitudes in a basis of 4"},
		{b, []float64{1, 1, 0, 0}, "norm"},
		{b, []float64{0, 0, 0, 0}, "norm 0"},
		{b, []float64{1, nan, 0, 0}, "norm NaN"},
		{b, []float64{math.Inf(1), 0, 0, 0}, "norm +Inf"},
	} {
		z := make([]complex128, len(c.psi))
		for i, x := range c.psi {
			z[i] = complex(x, 0)
		}
		_, first := RealState(c.basis, c.psi)
		_, second := ComplexState(c.basis, z)
		for _, err := range []error{first, second} {
			if err == nil || !strings.Contains(err.Error(), c.says) {
				t.Errorf("error %v, want one that says %q", err, c.says)
			}
		}
	}
}
