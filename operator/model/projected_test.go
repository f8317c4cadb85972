package model

import (
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"sort"
	"strings"
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

func project(t *testing.T, m TightBinding, l1, l2 int, opts *ProjectOptions) *Projection {
	t.Helper()
	return built[*Projection](t)(m.Projected(l1, l2, opts))
}

// sectors returns the energies by total momentum, at n2 + l2·n1; nothing for
// a momentum without states.
func sectors(t *testing.T, p *Projection, particles int) [][]float64 {
	t.Helper()
	list := make([][]float64, p.L1*p.L2)
	for j := range list {
		if holds(p, particles, j/p.L2, j%p.L2) {
			list[j] = spectrum(t, p.Operator, p.Sector(particles, j/p.L2, j%p.L2))
		}
	}
	return list
}

// holds reports whether a sector of few particles has a state.
func holds(p *Projection, particles, n1, n2 int) bool {
	var try func(from, left, n1, n2 int) bool
	try = func(from, left, n1, n2 int) bool {
		if left == 0 {
			return p.Orbital(n1, n2) == 0
		}
		for j := from; j < p.L1*p.L2; j++ {
			if try(j+1, left-1, n1-j/p.L2, n2-j%p.L2) {
				return true
			}
		}
		return false
	}
	return try(0, particles, n1, n2)
}

func checkerboard(name string) TightBinding {
	return Checkerboard(1, map[string]float64{"sun": SunSecond, "neupert": NeupertSecond}[name], 0, 1)
}

func TestCompleteProjectedSpectra(t *testing.T) {
	for _, c := range []struct {
		name      string
		l1, l2, n int
	}{{"sun", 6, 4, 2}, {"neupert", 6, 4, 2}, {"sun", 5, 3, 3}, {"sun", 3, 3, 3}} {
		p := project(t, checkerboard(c.name), c.l1, c.l2, nil)
		type spectral struct {
			Zero    int `json:"n_zero"`
			E       []float64
			Momenta [][2]int
			Highest float64
			Sumsq   float64
		}
		want, r := value[spectral](t, fmt.Sprintf("F2b-FCI-%s-%dx%d-N%d", c.name, c.l1, c.l2, c.n))
		levels := sectors(t, p, c.n)
		zero, square := 0, 0.0
		var rest []float64
		for _, e := range merged(levels) {
			square += e * e
			if math.Abs(e) < 1e-10 {
				zero++
			} else {
				rest = append(rest, e)
			}
		}
		if zero != want.Zero {
			t.Errorf("%s: %d states of zero energy, want %d", r.ID, zero, want.Zero)
		}
		expect(t, r, "lowest", rest, want.E)
		expect(t, r, "highest, ΣE²", []float64{rest[len(rest)-1], square}, []float64{want.Highest, want.Sumsq})
		for i, k := range want.Momenta {
			found := false
			for _, e := range levels[p.Orbital(k[0], k[1])] {
				found = found || math.Abs(e-want.E[i]) < r.Tolerance
			}
			if !found {
				t.Errorf("%s: no level %v at momentum %v", r.ID, want.E[i], k)
			}
		}
	}
}

func TestProjectedTraces(t *testing.T) {
	for _, c := range []struct {
		name      string
		l1, l2, n int
	}{{"sun", 4, 3, 4}, {"neupert", 6, 3, 6}, {"sun", 6, 3, 6}, {"neupert", 6, 4, 8}} {
		p := project(t, checkerboard(c.name), c.l1, c.l2, nil)
		sum := 0.0
		for i := range p.Operator.Len() {
			if term := p.Operator.At(i); len(term.Factors) == 2 {
				sum += real(term.Coefficient)
			}
		}
		// Each n_p n_q holds in C(orbitals-2, N-2) of the configurations.
		for i := 1; i <= c.n-2; i++ {
			sum *= float64(c.l1*c.l2-2-c.n+2+i) / float64(i)
		}
		want, r := value[float64](t, fmt.Sprintf("F2-FCI-%s-%dx%d-N%d-trace", c.name, c.l1, c.l2, c.n))
		expect(t, r, "trace", []float64{sum}, []float64{want})
	}
}

func TestFluxThroughTheTorus(t *testing.T) {
	want, r := value[map[string]any](t, "F4b-fluxy-sun-4x3-N4")
	bands := checkerboard("sun")
	start := project(t, bands, 4, 3, nil)
	atZero := sectors(t, start, 4)
	for _, theta := range []float64{0, 0.25, 0.5, 1, 2, 3} {
		p := project(t, bands, 4, 3, &ProjectOptions{Twist: [2]float64{0, theta}})
		list := sectors(t, p, 4)
		entry := want[fmt.Sprintf("%.1fx2pi", theta)]
		if theta == 0.25 {
			entry = want["0.25x2pi"]
		}
		energies := numbers(entry.(map[string]any)["E"])
		expect(t, r, fmt.Sprintf("flux %v", theta), merged(list), energies)
		for i, k := range entry.(map[string]any)["K"].([]any) {
			index := numbers(k)
			if e := list[p.Orbital(int(index[0]), int(index[1]))]; theta != 0 && !near(e, energies[i]) {
				t.Errorf("flux %v: no level %v at momentum %v", theta, energies[i], index)
			}
		}
		// A whole turn carries the sector (Kx, Ky) to (Kx, Ky + N).
		if theta == math.Trunc(theta) {
			for j := range list {
				moved := atZero[p.Orbital(j/3, j%3+4*int(theta))]
				expect(t, r, fmt.Sprintf("flux %v, sector %d", theta, j), list[j], moved)
			}
		}
	}
}

func near(list []float64, e float64) bool {
	for _, x := range list {
		if math.Abs(x-e) < 1e-8 {
			return true
		}
	}
	return false
}

func numbers(v any) []float64 {
	var list []float64
	for _, x := range v.([]any) {
		list = append(list, x.(float64))
	}
	return list
}

// The matrix element between two pairs, from wave functions of two particles
// on the lattice: ⟨pq|V|st⟩ = Σ over interacting sites x, y of Φ_pq(x,y)* Φ_st(x,y),
// with Φ_pq(x,y) = φ_p(x)φ_q(y) - φ_q(x)φ_p(y).
func TestProjectedElementsAreIntegralsOverTheLattice(t *testing.T) {
	r := rand.New(rand.NewPCG(31, 32))
	for range 6 {
		m := randomBands(r, 2+r.IntN(2))
		l1, l2 := 3+r.IntN(2), 3
		opts := &ProjectOptions{Band: r.IntN(m.Orbitals()), Twist: [2]float64{r.Float64(), r.Float64()}, Dispersion: true}
		p, err := m.Projected(l1, l2, opts)
		if err != nil {
			if strings.Contains(err.Error(), "to itself") {
				continue
			}
			t.Fatal(err)
		}
		c := built[*lattice.Cluster](t)(lattice.Torus(m.Lattice, l1, l2))
		wave := func(orbital, site int) complex128 {
			cell, a := c.CellOf(site)
			k1 := (float64(orbital/l2) + opts.Twist[0]) / float64(l1)
			k2 := (float64(orbital%l2) + opts.Twist[1]) / float64(l2)
			return p.States[orbital].Amplitudes[a] * cmplx.Exp(complex(0, 2*math.Pi*(k1*float64(cell[0])+k2*float64(cell[1])))) / complex(math.Sqrt(float64(l1*l2)), 0)
		}
		element := func(a, b, s, u int) complex128 {
			sum := complex128(0)
			for _, v := range m.Interactions {
				for x := v.From; x < c.Sites(); x += c.Orbitals() {
					cell, _ := c.CellOf(x)
					y := c.SiteAt([2]int{cell[0] + v.Cells[0], cell[1] + v.Cells[1]}, v.To)
					left := wave(a, x)*wave(b, y) - wave(b, x)*wave(a, y)
					right := wave(s, x)*wave(u, y) - wave(u, x)*wave(s, y)
					sum += complex(v.Strength, 0) * cmplx.Conj(left) * right
				}
			}
			return sum
		}
		// With the algebra: build Σ over all pairs of pairs, whatever their momenta.
		o := operator.On(p.Space)
		var terms []operator.Operator
		n := l1 * l2
		for a := range n {
			terms = append(terms, o.Number(a).Scale(complex(p.States[a].Energy, 0)))
			for b := a + 1; b < n; b++ {
				for s := range n {
					for u := s + 1; u < n; u++ {
						z := element(a, b, s, u)
						if p.Orbital(a/l2+b/l2-s/l2-u/l2, a%l2+b%l2-s%l2-u%l2) != 0 {
							if cmplx.Abs(z) > 1e-10 {
								t.Fatalf("momentum is not conserved: ⟨%d,%d|V|%d,%d⟩ = %v", a, b, s, u, z)
							}
							continue
						}
						terms = append(terms, o.Create(a).Times(o.Create(b)).Times(o.Annihilate(u)).Times(o.Annihilate(s)).Scale(z))
					}
				}
			}
		}
		difference := operator.Sum(terms).NormalOrdered().Minus(p.Operator)
		rest := map[string]complex128{}
		for i := range difference.Len() {
			term := difference.At(i)
			rest[fmt.Sprint(term.Factors)] += term.Coefficient
		}
		for key, z := range rest {
			if cmplx.Abs(z) > 1e-10 {
				t.Fatalf("the coefficient of %s differs by %v", key, z)
			}
		}
	}
}

func TestProjectionsAreExactlyHermitianAndSymmetric(t *testing.T) {
	p := project(t, checkerboard("sun"), 6, 4, &ProjectOptions{Twist: [2]float64{0.3, 0.1}, Dispersion: true})
	coefficients := map[string]complex128{}
	for i := range p.Operator.Len() {
		coefficients[fmt.Sprint(p.Operator.At(i).Factors)] = p.Operator.At(i).Coefficient
	}
	adjoint := p.Operator.Adjoint().NormalOrdered()
	for i := range adjoint.Len() {
		term := adjoint.At(i)
		if z, ok := coefficients[fmt.Sprint(term.Factors)]; !ok || z != term.Coefficient {
			t.Fatalf("%v has the coefficient %v, its adjoint %v", term.Factors, z, term.Coefficient)
		}
	}
	if canonical := p.Operator.NormalOrdered(); canonical.Len() != p.Operator.Len() || adjoint.Len() != p.Operator.Len() {
		t.Errorf("%d terms, %d of the canonical form, %d of the adjoint", p.Operator.Len(), canonical.Len(), adjoint.Len())
	}
	for _, q := range []basis.Charge{p.Number, p.KX, p.KY} {
		if err := p.Operator.Conserves(q); err != nil {
			t.Error(err)
		}
	}
	if p.KX.Name != "kx" || p.KX.Modulus != 6 || p.KY.Name != "ky" || p.KY.Modulus != 4 {
		t.Errorf("charges %q modulo %d, %q modulo %d", p.KX.Name, p.KX.Modulus, p.KY.Name, p.KY.Modulus)
	}
	// At most one term for each process between pairs of equal momentum (10
	// pairs at 6 of the 24 momenta, 12 at the others), and one for each orbital.
	if n := p.Operator.Len(); n > 6*10*10+18*12*12+24 || n < 2700 {
		t.Errorf("%d terms", n)
	}
}

// The configurations with at most one particle in three consecutive orbitals
// carry the total momenta of the ground states (Regnault and Bernevig 2011);
// momenta of the independent program.
func TestOrbitalOrderFollowsTheExclusionRule(t *testing.T) {
	for _, c := range []struct {
		l1, l2, n int
		want      string
	}{{6, 4, 8, "[0 0] [2 0] [4 0]"}, {4, 3, 4, "[2 0] [2 1] [2 2]"}, {6, 3, 6, "[3 0] [3 0] [3 0]"}} {
		p := project(t, checkerboard("sun"), c.l1, c.l2, nil)
		var found []string
		for first := range 3 {
			levels := make([]int, c.l1*c.l2)
			for i := first; i < len(levels); i += 3 {
				levels[i] = 1
			}
			conf := built[basis.Configuration](t)(p.Space.Configuration(levels))
			if p.Number.Of(p.Space, conf) != c.n {
				t.Errorf("%s holds %d particles", p.Space.Format(conf), p.Number.Of(p.Space, conf))
			}
			found = append(found, fmt.Sprint([2]int{p.KX.Of(p.Space, conf), p.KY.Of(p.Space, conf)}))
		}
		sort.Strings(found)
		if got := strings.Join(found, " "); got != c.want {
			t.Errorf("%d×%d, N = %d: momenta %s, want %s", c.l1, c.l2, c.n, got, c.want)
		}
	}
}

func TestImpossibleProjectionsAreRefused(t *testing.T) {
	ok := checkerboard("sun")
	wide := checkerboard("sun")
	wide.Interactions = append(wide.Interactions, Interaction{0, 0, [2]int{4, 0}, 1})
	broken := checkerboard("sun")
	broken.Hoppings[0].From = 5
	for name, c := range map[string]struct {
		m      TightBinding
		l1, l2 int
		opts   ProjectOptions
		says   string
	}{
		"one orbital":   {ok, 1, 1, ProjectOptions{}, "2 … 64 orbitals"},
		"too many":      {ok, 9, 8, ProjectOptions{}, "2 … 64 orbitals"},
		"negative":      {ok, -3, -3, ProjectOptions{}, "2 … 64 orbitals"},
		"huge":          {ok, math.MaxInt, 3, ProjectOptions{}, "2 … 64 orbitals"},
		"band":          {ok, 4, 3, ProjectOptions{Band: 2}, "bands 0 … 1"},
		"negative band": {ok, 4, 3, ProjectOptions{Band: -1}, "bands 0 … 1"},
		"twist":         {ok, 4, 3, ProjectOptions{Twist: [2]float64{math.NaN(), 0}}, "twist"},
		"touching":      {Checkerboard(1, 0, 0, 1), 4, 4, ProjectOptions{}, "touches"},
		"itself":        {wide, 4, 3, ProjectOptions{}, "to itself"},
		"broken":        {broken, 4, 3, ProjectOptions{}, "orbital 5"},
	} {
		if _, err := c.m.Projected(c.l1, c.l2, &c.opts); err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: error %v, want one that says %q", name, err, c.says)
		}
	}
}

func ExampleTightBinding_Projected() {
	p, err := Checkerboard(1, SunSecond, 0, 1).Projected(4, 3, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(p.Space.Sites(), "orbitals,", p.Operator.Len(), "terms")
	fmt.Println("momentum conserved:", p.Operator.Conserves(p.KX) == nil && p.Operator.Conserves(p.KY) == nil)
	// Output:
	// 12 orbitals, 352 terms
	// momentum conserved: true
}
