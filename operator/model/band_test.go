package model

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"

	"ketloom/basis/lattice"
)

// randomBands returns a model with random hoppings on n orbitals.
func randomBands(r *rand.Rand, n int) TightBinding {
	m := TightBinding{Name: "random", Lattice: lattice.Square()}
	m.Lattice.Sites = nil
	for i := range n {
		m.Lattice.Sites = append(m.Lattice.Sites, [2]float64{float64(i) / float64(n), 0})
	}
	for range 3 * n {
		h := Hopping{r.IntN(n), r.IntN(n), [2]int{r.IntN(5) - 2, r.IntN(5) - 2}, complex(r.NormFloat64(), r.NormFloat64())}
		if h.onSite() {
			h.Amplitude = complex(real(h.Amplitude), 0)
		}
		m.Hoppings = append(m.Hoppings, h)
		if v := (Interaction{h.From, h.To, h.Cells, r.NormFloat64()}); !h.onSite() {
			m.Interactions = append(m.Interactions, v)
		}
	}
	return m
}

func TestBandsDiagonaliseTheBlochHamiltonian(t *testing.T) {
	r := rand.New(rand.NewPCG(21, 22))
	for range 200 {
		n := 1 + r.IntN(6)
		m := randomBands(r, n)
		k1, k2 := 4*r.Float64()-2, 4*r.Float64()-2
		h := m.Bloch(k1, k2)
		states, err := m.Bands(k1, k2)
		if err != nil {
			t.Fatal(err)
		}
		trace := 0.0
		for i := range n {
			trace += real(h[i*n+i])
			for j := range n {
				if h[i*n+j] != cmplx.Conj(h[j*n+i]) {
					t.Fatalf("h is not Hermitian at %d, %d", i, j)
				}
			}
		}
		for b, s := range states {
			trace -= s.Energy
			for i := range n {
				residual := -complex(s.Energy, 0) * s.Amplitudes[i]
				for j := range n {
					residual += h[i*n+j] * s.Amplitudes[j]
				}
				if cmplx.Abs(residual) > 1e-12 {
					t.Fatalf("band %d of %d: residual %v", b, n, residual)
				}
			}
			for c := range states {
				want := map[bool]float64{true: 1}[b == c]
				if got := overlap(s.Amplitudes, states[c].Amplitudes); cmplx.Abs(got-complex(want, 0)) > 1e-13 {
					t.Fatalf("⟨%d|%d⟩ = %v", b, c, got)
				}
			}
			if b > 0 && s.Energy < states[b-1].Energy {
				t.Fatal("bands do not ascend")
			}
		}
		if math.Abs(trace) > 1e-11 {
			t.Fatalf("the energies miss the trace by %v", trace)
		}
		whole := m.Bloch(k1+3, k2-2)
		for i := range whole {
			if cmplx.Abs(whole[i]-h[i]) > 1e-10 {
				t.Fatal("h is not periodic in whole turns")
			}
		}
	}
}

func TestStockBandsAreTheirFormulas(t *testing.T) {
	r := rand.New(rand.NewPCG(23, 24))
	e := func(x float64) complex128 { return cmplx.Exp(complex(0, x)) }
	for range 100 {
		k1, k2 := r.Float64(), r.Float64()
		x, y := 2*math.Pi*k1, 2*math.Pi*k2
		t1, t2, t3, phi, mass := r.NormFloat64(), r.NormFloat64(), r.NormFloat64(), r.NormFloat64(), r.NormFloat64()
		g := complex(t1, 0) * (e(-math.Pi/4)*(1+e(y-x)) + e(math.Pi/4)*(e(-x)+e(y)))
		z, shift := 2*t2*(math.Cos(x)-math.Cos(y)), 4*t3*math.Cos(x)*math.Cos(y)
		compare(t, "checkerboard", Checkerboard(t1, t2, t3, 1).Bloch(k1, k2), []complex128{complex(shift+z, 0), g, cmplx.Conj(g), complex(shift-z, 0)})
		ab := complex(t1, 0) * (1 + e(-x) + e(-y))
		even := 2 * t2 * math.Cos(phi) * (math.Cos(x) + math.Cos(y) + math.Cos(x-y))
		odd := mass - 2*t2*math.Sin(phi)*(math.Sin(x)-math.Sin(y)-math.Sin(x-y))
		compare(t, "Haldane", Haldane(t1, t2, phi, mass, 1).Bloch(k1, k2), []complex128{complex(even+odd, 0), ab, cmplx.Conj(ab), complex(even-odd, 0)})
	}
}

func compare(t *testing.T, name string, got, want []complex128) {
	t.Helper()
	for i := range want {
		if cmplx.Abs(got[i]-want[i]) > 1e-12 {
			t.Errorf("%s: h is %v, want %v", name, got, want)
			return
		}
	}
}

func TestChernNumbers(t *testing.T) {
	// Haldane's values: independent NumPy program by link variables, and the
	// condition |M| < 3√3 t2 |sin φ| (Haldane 1988).
	for _, c := range []struct {
		t2, phi, mass float64
		want          int
	}{
		{0.2, math.Pi / 2, 0, 1}, {0.2, -math.Pi / 2, 0, -1}, {0.1, math.Pi / 2, 0.5, 1},
		{0.1, math.Pi / 2, 0.7, 0}, {0.1, math.Pi / 2, -0.7, 0}, {0.1, -math.Pi / 2, -0.5, -1}, {-0.2, math.Pi / 2, 0, -1},
	} {
		m := Haldane(1, c.t2, c.phi, c.mass, 0)
		lower, err := m.Chern(0, 40, 40)
		if err != nil {
			t.Fatal(err)
		}
		upper, err := m.Chern(1, 40, 40)
		if err != nil {
			t.Fatal(err)
		}
		if lower.Chern != c.want || upper.Chern != -c.want {
			t.Errorf("t2 = %v, φ = %v, M = %v: Chern numbers %d and %d, want %d and %d", c.t2, c.phi, c.mass, lower.Chern, upper.Chern, c.want, -c.want)
		}
	}
	for size := 3; size < 20; size++ {
		c, err := Haldane(1, 0.1, math.Pi/2, 0.5, 0).Chern(0, size, size)
		if err != nil || c.Chern != 1 || c.LargestFlux > 0.3 || c.Grid[0]%size != 0 {
			t.Errorf("from a grid of %d×%d momenta: %+v, %v", size, size, c, err)
		}
	}
	for _, t2 := range []float64{SunSecond, NeupertSecond} {
		m := Checkerboard(1, t2, 0, 1)
		lower, err := m.Chern(0, 24, 24)
		if err != nil {
			t.Fatal(err)
		}
		if lower.Chern != -1 {
			t.Errorf("checkerboard, t2 = %v: Chern number %d", t2, lower.Chern)
		}
		reversed, err := Checkerboard(1, -t2, 0, 1).Chern(0, 24, 24)
		if err != nil || reversed.Chern != -lower.Chern {
			t.Errorf("checkerboard, t2 = %v: Chern number %d and, with t2 reversed, %d (%v)", t2, lower.Chern, reversed.Chern, err)
		}
	}
}

func TestChernNumbersOfAllBandsAddUpToZero(t *testing.T) {
	r := rand.New(rand.NewPCG(25, 26))
	done, nonzero := 0, 0
	for done < 3 {
		m := randomBands(r, 2+r.IntN(2))
		sum, ok := 0, true
		for b := range m.Orbitals() {
			c, err := m.Chern(b, 30, 30)
			ok = ok && err == nil
			sum += c.Chern
			if c.Chern != 0 {
				nonzero++
			}
		}
		if !ok {
			continue
		}
		if done++; sum != 0 {
			t.Errorf("the Chern numbers of %+v add up to %d", m, sum)
		}
	}
	if nonzero == 0 {
		t.Error("no band with a Chern number was met")
	}
}

func TestFlatBands(t *testing.T) {
	sun, err := Checkerboard(1, SunSecond, SunThird, 1).Dispersion(0, 120, 120)
	if err != nil {
		t.Fatal(err)
	}
	// Sun et al. report a gap about 30 times the width (from memory).
	if f := sun.Flatness(); f < 26 || f > 33 || !math.IsInf(sun.GapBelow, 1) {
		t.Errorf("flatness %v, %+v", f, sun)
	}
	plain, err := Checkerboard(1, SunSecond, 0, 1).Dispersion(0, 120, 120)
	if err != nil || plain.Flatness() > 3 {
		t.Errorf("without the third neighbours: flatness %v, %v", plain.Flatness(), err)
	}
	wrong, err := Checkerboard(1, SunSecond, -SunThird, 1).Dispersion(0, 120, 120)
	if err != nil || wrong.Flatness() > 1 {
		t.Errorf("with the third neighbours reversed: flatness %v, %v", wrong.Flatness(), err)
	}
}

func TestImpossibleBandModelsAreRefused(t *testing.T) {
	ok := func() TightBinding { return Checkerboard(1, 1, 0, 1) }
	for name, c := range map[string]struct {
		change func(*TightBinding)
		says   string
	}{
		"no such orbital":     {func(m *TightBinding) { m.Hoppings[0].To = 2 }, "orbitals 0 … 1"},
		"complex energy":      {func(m *TightBinding) { m.Hoppings[0] = Hopping{0, 0, [2]int{}, 1i} }, "real number"},
		"not a number":        {func(m *TightBinding) { m.Hoppings[1].Amplitude = complex(math.NaN(), 0) }, "finite"},
		"too far":             {func(m *TightBinding) { m.Hoppings[1].Cells[0] = math.MinInt }, "cells away"},
		"with itself":         {func(m *TightBinding) { m.Interactions[0] = Interaction{1, 1, [2]int{}, 1} }, "to itself"},
		"infinite":            {func(m *TightBinding) { m.Interactions[0].Strength = math.Inf(1) }, "finite"},
		"no lattice":          {func(m *TightBinding) { m.Lattice.Sites = nil }, "sites in its cell"},
		"negative orbital":    {func(m *TightBinding) { m.Interactions[3].From = -1 }, "orbitals 0 … 1"},
		"second dimension":    {func(m *TightBinding) { m.Lattice.Dimension = 1 }, "one dimension"},
		"interaction too far": {func(m *TightBinding) { m.Interactions[3].Cells[1] = 1 << 20 }, "cells away"},
	} {
		m := ok()
		c.change(&m)
		_, err := m.Bands(0, 0)
		if err == nil || !strings.Contains(err.Error(), c.says) || !strings.HasPrefix(err.Error(), "model: ") {
			t.Errorf("%s: error %v, want one that says %q", name, err, c.says)
		}
	}
	for name, err := range map[string]error{
		"band":     second(ok().Chern(2, 10, 10)),
		"grid":     second(ok().Chern(0, 0, 10)),
		"touching": second(Checkerboard(1, 0, 0, 1).Chern(0, 10, 10)),
		"too near": second(Haldane(1, 0.1, math.Pi/2, 0.3*math.Sqrt(3)-1e-5, 0).Chern(0, 8, 8)),
		"momentum": secondOf(ok().Bands(math.NaN(), 0)),
	} {
		if err == nil {
			t.Errorf("%s: accepted", name)
		}
	}
}

func second(_ Topology, err error) error      { return err }
func secondOf(_ []BandState, err error) error { return err }
