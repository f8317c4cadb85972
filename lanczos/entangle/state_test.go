package entangle

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
)

// rng makes the random numbers of a test.
func rng(seed uint64) *rand.Rand { return rand.New(rand.NewPCG(seed, 17)) }

// makeBasis makes a basis or fails.
func makeBasis(t testing.TB, space *basis.Space, sector basis.Sector) *basis.Basis {
	t.Helper()
	b, err := basis.New(context.Background(), space, sector, nil)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func makeSpace(t testing.TB, sites ...basis.Site) *basis.Space {
	t.Helper()
	space, err := basis.NewSpace(sites)
	if err != nil {
		t.Fatal(err)
	}
	return space
}

// repeated is a list of equal sites.
func repeated(n int, site basis.Site) []basis.Site {
	return slices.Repeat([]basis.Site{site}, n)
}

// randomAmplitudes are normalised.
func randomAmplitudes(r *rand.Rand, n int, isReal bool) []complex128 {
	psi := make([]complex128, n)
	sum := 0.0
	for i := range psi {
		psi[i] = complex(r.NormFloat64(), r.NormFloat64())
		if isReal {
			psi[i] = complex(real(psi[i]), 0)
		}
		sum += real(psi[i])*real(psi[i]) + imag(psi[i])*imag(psi[i])
	}
	for i := range psi {
		psi[i] /= complex(math.Sqrt(sum), 0)
	}
	return psi
}

func makeState(t testing.TB, b *basis.Basis, psi []complex128) State {
	t.Helper()
	s, err := ComplexState(b, psi)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func randomState(t testing.TB, r *rand.Rand, b *basis.Basis) State {
	t.Helper()
	return makeState(t, b, randomAmplitudes(r, b.Len(), false))
}

// stateOf makes a state of some product states, given by their levels.
func stateOf(t testing.TB, b *basis.Basis, levels [][]int, amplitudes []complex128) State {
	t.Helper()
	psi := make([]complex128, b.Len())
	for i, l := range levels {
		c, err := b.Space().Configuration(l)
		if err != nil {
			t.Fatal(err)
		}
		at, ok := b.Index(c)
		if !ok {
			t.Fatalf("%v is not in the basis", l)
		}
		psi[at] = amplitudes[i]
	}
	return makeState(t, b, psi)
}

// unfolded is the same state in the basis of the charges alone, or of nothing.
func unfolded(t testing.TB, s State, charges bool) State {
	t.Helper()
	var sector basis.Sector
	if charges {
		sector.Charges = s.basis.Sector().Charges
	}
	b := makeBasis(t, s.basis.Space(), sector)
	psi := make([]complex128, b.Len())
	for i := range psi {
		if j, factor, ok := s.basis.Component(b.At(i)); ok {
			psi[i] = factor * s.amplitude(j)
		}
	}
	return makeState(t, b, psi)
}

func spaceCut(t testing.TB, states []State, sites ...int) *Spectrum {
	t.Helper()
	s, err := SpaceCut(context.Background(), states, sites, nil)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func particleCut(t testing.TB, states []State, part int) *Spectrum {
	t.Helper()
	s, err := ParticleCut(context.Background(), states, part, nil)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// weights of all blocks, descending, without those below 1e-20.
func weights(s *Spectrum) []float64 {
	var list []float64
	for _, l := range s.all() {
		if l.Weight > 1e-20 {
			list = append(list, l.Weight)
		}
	}
	return list
}

func near(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %.15g, want %.15g", what, got, want)
	}
}

func nearAll(t testing.TB, what string, got, want []float64, tolerance float64) {
	t.Helper()
	if len(got) != len(want) {
		t.Errorf("%s: %d values, want %d: %v and %v", what, len(got), len(want), got, want)
		return
	}
	for i := range want {
		if !(math.Abs(got[i]-want[i]) <= tolerance) {
			t.Errorf("%s: value %d is %.15g, want %.15g", what, i, got[i], want[i])
			return
		}
	}
}

// rotation is the translation i -> i+1 of a ring with an eigenvalue.
func rotation(n, k int) []group.Eigenvalue {
	p := make(group.Permutation, n)
	for i := range p {
		p[i] = (i + 1) % n
	}
	return []group.Eigenvalue{{Generator: group.Translate(p), Turn: group.NewTurn(int64(k), int64(n))}}
}
