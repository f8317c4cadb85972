package archive

import (
	"context"
	"encoding/json"
	"errors"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/lanczos"
)

// Witnesses are amplitudes by the formula of the symmetrised states: ψ(c) from
// the sum over the group, written out here for a ring of spins 1/2.
func TestWitnessByDefinition(t *testing.T) {
	const n, m = 6, 1
	b := ring(t, n, basis.SpinHalf(), m, nil)
	v := randomVector(b.Len(), true, rand.New(rand.NewPCG(21, 22)))
	psi := make([]complex128, 1<<n)
	rotate := func(c uint64) uint64 { return (c<<1 | c>>(n-1)) & (1<<n - 1) }
	for i := range b.Len() {
		sum := map[uint64]complex128{}
		c, squares := uint64(b.At(i)), 0.0
		for a := range n { // χ of the translation by a is exp(-ika)
			sum[c] += cmplx.Exp(complex(0, 2*math.Pi*float64(m*a)/n))
			c = rotate(c)
		}
		for _, z := range sum {
			squares += real(z)*real(z) + imag(z)*imag(z)
		}
		for c, z := range sum {
			psi[c] += v.Complex[i] * z / complex(math.Sqrt(squares), 0)
		}
	}
	list := witnessesOf(b, v)
	if len(list) != mostWitnesses {
		t.Fatalf("%d witnesses", len(list))
	}
	moved := 0
	for _, w := range list {
		c, err := b.Space().Configuration(w.Levels)
		if err != nil {
			t.Fatal(err)
		}
		if cmplx.Abs(psi[c]-complex(w.Re, w.Im)) > 1e-14 {
			t.Errorf("ψ%v = %v, the witness says %v", w.Levels, psi[c], complex(w.Re, w.Im))
		}
		if r := b.Representative(c); r != c {
			moved++
		}
	}
	if moved < 6 {
		t.Errorf("only %d witnesses are no representatives; signs of momenta would pass", moved)
	}
}

// A basis with another meaning is refused: the momentum reversed, the order of
// sites, the sign of fermions.
func TestWitnessesRefuse(t *testing.T) {
	b := ring(t, 9, basis.Fermion(), 1, func(s *basis.Space) basis.ChargeValue { return s.ParticleNumber().Is(4) })
	result := invented(b, 1, true, rand.New(rand.NewPCG(23, 24)))
	f := opened(t, write(t, Sector{Basis: b, Operator: hopping(b.Space()), Result: result}))
	s, _ := f.Sector(0)
	if err := s.CheckWitnesses(b, 0); err != nil {
		t.Fatal(err)
	}
	reversed := ring(t, 9, basis.Fermion(), -1, func(s *basis.Space) basis.ChargeValue { return s.ParticleNumber().Is(4) })
	if err := s.CheckWitnesses(reversed, 0); err == nil {
		t.Error("another basis was accepted")
	}
	if err := s.CheckWitnesses(nil, 0); err == nil {
		t.Error("no basis was accepted")
	}
	if err := s.CheckWitnesses(b, 1); err == nil {
		t.Error("there is a vector 1")
	}
	// The same, with a file that claims the other basis: its fingerprint agrees, its
	// amplitudes do not.
	lies := s.form
	lies.Fingerprint = reversed.Fingerprint()
	if err := (&Stored{f, lies}).CheckWitnesses(reversed, 0); !errors.Is(err, ErrDamaged) {
		t.Errorf("a reversed momentum was accepted: %v", err)
	}
}

// A basis that comes out differently is refused.
func TestBasisRefused(t *testing.T) {
	b := ring(t, 8, basis.SpinHalf(), 0, nil)
	f := opened(t, write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: invented(b, 1, false, rand.New(rand.NewPCG(25, 26)))}))
	s, _ := f.Sector(0)
	other := ring(t, 8, basis.SpinHalf(), 4, nil)
	text, err := other.MarshalJSON()
	if err != nil {
		t.Fatal(err)
	}
	ctx := context.Background()
	cases := map[string]func(*sectorForm){
		"dimension":   func(s *sectorForm) { s.Dimension++ },
		"fingerprint": func(s *sectorForm) { s.Fingerprint = other.Fingerprint() },
		"order":       func(s *sectorForm) { s.GroupOrder *= 2 },
		"states":      func(s *sectorForm) { s.States = s.Fingerprint },
		"sector":      func(s *sectorForm) { s.Basis = text },
		"text":        func(s *sectorForm) { s.Basis = json.RawMessage(`{"sites":[{"count":77}]}`) },
	}
	for name, change := range cases {
		form := s.form
		change(&form)
		if _, err := (&Stored{f, form}).Basis(ctx, nil); err == nil {
			t.Errorf("%s: another basis was accepted", name)
		}
	}
	if _, err := s.Basis(ctx, &basis.Options{Memory: 1}); err == nil {
		t.Error("the limit on memory has no effect")
	}
}

// The sample of the states is all of a small basis, and spread over a large one.
func TestStatesDigest(t *testing.T) {
	b := product(t, 3)
	want := digestOf([]byte{
		0, 0, 0, 0, 0, 0, 0, 0, 1, 0, 0, 0, 0, 0, 0, 0, 2, 0, 0, 0, 0, 0, 0, 0, 3, 0, 0, 0, 0, 0, 0, 0,
		4, 0, 0, 0, 0, 0, 0, 0, 5, 0, 0, 0, 0, 0, 0, 0, 6, 0, 0, 0, 0, 0, 0, 0, 7, 0, 0, 0, 0, 0, 0, 0})
	if got := statesDigest(b); got != want {
		t.Errorf("%s, expected %s", got, want)
	}
	var words []byte
	for k := range mostSampled { // D = 2^18: every fourth state
		words = append(words, byte(4*k), byte(4*k>>8), byte(4*k>>16), 0, 0, 0, 0, 0)
	}
	if got := statesDigest(product(t, 18)); got != digestOf(words) {
		t.Error("the sample of 2^18 states is not every fourth one")
	}
}

func TestWitnessesOfSmallVectors(t *testing.T) {
	b := made(t, product(t, 1).Space(), basis.Sector{Symmetries: []group.Eigenvalue{}})
	list := witnessesOf(b, lanczos.Vector{Real: []float64{0, -0.5}})
	if len(list) != 2 || !slices.Equal(list[0].Levels, []int{0}) || list[0].Re != 0 || !slices.Equal(list[1].Levels, []int{1}) || list[1].Re != -0.5 {
		t.Errorf("%+v", list)
	}
}
