package basis

import (
	"errors"
	"math/rand/v2"
	"testing"

	"ketloom/basis/group"
)

// The formula counts what enumeration lists: random monomial symmetries, momentum
// sectors of every kind of site with and without charges.
func TestDimensionsByFormula(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 50))
	compared := 0
	compare := func(s *Space, sector Sector) {
		t.Helper()
		want := 0
		b, err := New(background, s, sector, nil)
		switch {
		case err == nil:
			want = b.Len()
		case !errors.Is(err, ErrEmpty):
			return // no representation
		}
		got, err := Dimension(s, sector)
		if errors.Is(err, ErrNoFormula) {
			return
		}
		if err != nil || got != int64(want) {
			t.Fatalf("%d (%v) states with%s, want %d", got, err, sector.describe(), want)
		}
		compared++
	}
	for _, site := range []Site{SpinHalf(), Spin(2), HardCoreBoson(), Boson(3), Fermion(), Electron()} {
		for n := 1; n <= 6; n++ {
			s, err := Uniform(n, site)
			if err != nil {
				t.Fatal(err)
			}
			if s.Bits() > 12 {
				continue
			}
			for k := range n {
				symmetries := []group.Eigenvalue{{Generator: ringShift(n), Turn: group.NewTurn(int64(k), int64(n))}}
				compare(s, Sector{Symmetries: symmetries})
				for q := 0; q <= n; q++ {
					compare(s, Sector{Symmetries: symmetries, Charges: []ChargeValue{s.TwiceSz().Is(2*q - n)}})
					compare(s, Sector{Symmetries: symmetries, Charges: []ChargeValue{s.ParticleNumber().Is(q)}})
				}
			}
		}
	}
	for range 200 {
		s, a := randomSymmetry(r)
		order, err := a.Order()
		if err != nil {
			t.Fatal(err)
		}
		for k := range min(order, 6) {
			compare(s, Sector{Symmetries: []group.Eigenvalue{{Generator: a, Turn: group.NewTurn(int64(k), int64(order))}}})
		}
	}
	if compared < 500 {
		t.Errorf("%d sectors compared; the test means little", compared)
	}
}

func TestDimensionRefusesWhatItCannotCount(t *testing.T) {
	s, _ := Uniform(4, HardCoreBoson())
	if _, err := Dimension(s, Sector{Constraints: []Constraint{AtMost(1, []int{0, 1})}}); !errors.Is(err, ErrNoFormula) {
		t.Errorf("constraints: %v, want that there is no formula", err)
	}
	if _, err := Dimension(nil, Sector{}); err == nil {
		t.Error("no space is counted")
	}
	long, _ := Uniform(60, SpinHalf())
	if n, err := Dimension(long, Sector{}); err == nil {
		t.Errorf("2^60 states are counted as %d", n)
	}
}
