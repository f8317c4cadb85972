package matrix_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/lanczos/dense"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/operatortest"
)

// spectrum returns all eigenvalues of h on a basis.
func spectrum(t *testing.T, h operator.Operator, b *basis.Basis) []float64 {
	t.Helper()
	m, err := matrix.New(background, h, b, nil)
	if err != nil {
		t.Fatal(err)
	}
	values, _, err := dense.EigenComplex(m.Dense(), b.Len(), false)
	if err != nil {
		t.Fatal(err)
	}
	return values
}

// compareSpectra compares two lists of levels, sorted.
func compareSpectra(t *testing.T, what string, got, want []float64) {
	t.Helper()
	if len(got) != len(want) {
		t.Fatalf("%s: %d levels, want %d", what, len(got), len(want))
	}
	slices.Sort(got)
	slices.Sort(want)
	for i := range got {
		if math.Abs(got[i]-want[i]) > 1e-9 {
			t.Fatalf("%s: level %d is %v, want %v", what, i, got[i], want[i])
		}
	}
}

// The sectors of charge and momentum together have the spectrum of the whole
// space, for random invariant Hamiltonians on rings of every kind of site.
func TestSectorsHoldTheWholeSpectrum(t *testing.T) {
	r := rand.New(rand.NewPCG(31, 1))
	for _, c := range []struct {
		site basis.Site
		n    int
	}{{basis.SpinHalf(), 8}, {basis.HardCoreBoson(), 7}, {basis.Fermion(), 8}, {basis.Fermion(), 7}, {basis.Electron(), 4}, {basis.Spin(2), 5}, {basis.Boson(2), 5}} {
		space, err := basis.Uniform(c.n, c.site)
		if err != nil {
			t.Fatal(err)
		}
		q := space.ParticleNumber()
		if c.site.Kind == basis.KindSpin {
			q = space.TwiceSz()
		}
		local := operatortest.Random(r, space, 6, 4).Changing(q, 0)
		local = local.Plus(local.Adjoint())
		var images []operator.Operator
		for range c.n {
			images = append(images, local)
			local = local.Transformed(shift(c.n))
		}
		h := operator.Sum(images).NormalOrdered()
		whole, err := basis.New(background, space, basis.Sector{}, nil)
		if err != nil {
			t.Fatal(err)
		}
		var union []float64
		values := map[int]bool{}
		for _, state := range operatortest.States(space) {
			values[q.Of(space, state)] = true
		}
		for v := range values {
			for k := range c.n {
				b, err := basis.New(background, space, basis.Sector{Charges: []basis.ChargeValue{q.Is(v)}, Symmetries: momentum(c.n, k)}, nil)
				if err != nil {
					continue // an empty sector; the count of levels below would miss it otherwise
				}
				union = append(union, spectrum(t, h, b)...)
			}
		}
		compareSpectra(t, fmt.Sprintf("%v ring of %d", c.site, c.n), union, spectrum(t, h, whole))
	}
}

// A ring of spins 1/2 with N up spins is, by the transformation of Jordan and
// Wigner (Z. Phys. 47, 631, 1928), a ring of N fermions whose bond across the
// boundary has the sign -(-1)^N, momentum sector by momentum sector once the
// boundary sign is spread evenly.
func TestJordanWignerTwins(t *testing.T) {
	const n = 8
	spins, _ := basis.Uniform(n, basis.SpinHalf())
	fermions, _ := basis.Uniform(n, basis.Fermion())
	s, f := operator.On(spins), operator.On(fermions)
	for up := 1; up < n; up++ {
		boundary := complex(1, 0)
		if up%2 == 0 {
			boundary = -1
		}
		var hs, hf []operator.Operator
		for i := range n {
			j := (i + 1) % n
			hs = append(hs, s.Raise(i).Times(s.Lower(j)).Plus(s.Lower(i).Times(s.Raise(j))).Scale(0.5), s.Sz(i).Times(s.Sz(j)).Scale(0.7))
			hop := f.Create(i).Times(f.Annihilate(j)).Plus(f.Create(j).Times(f.Annihilate(i))).Scale(0.5)
			if j == 0 {
				hop = hop.Scale(boundary)
			}
			half := f.One().Scale(0.5)
			hf = append(hf, hop, f.Number(i).Minus(half).Times(f.Number(j).Minus(half)).Scale(0.7))
		}
		bs, err := basis.New(background, spins, basis.Sector{Charges: []basis.ChargeValue{spins.TwiceSz().Is(2*up - n)}}, nil)
		if err != nil {
			t.Fatal(err)
		}
		bf, err := basis.New(background, fermions, basis.Sector{Charges: []basis.ChargeValue{fermions.ParticleNumber().Is(up)}}, nil)
		if err != nil {
			t.Fatal(err)
		}
		compareSpectra(t, fmt.Sprintf("%d up spins", up), spectrum(t, operator.Sum(hs), bs), spectrum(t, operator.Sum(hf), bf))

		// The same by sectors: an odd number of fermions keeps the translation;
		// an even one has it with a phase, c_i -> exp(iπ/n) c_{i+1} and the sign
		// moved into a gauge.
		gauge := make([]group.Turn, n)
		shiftWithSign := shift(n)
		if up%2 == 0 {
			gauge[n-1] = group.NewTurn(1, 2) // site n-1 goes to site 0 with a sign
			shiftWithSign = shift(n).Compose(group.Gauge(gauge, 2))
		}
		var all []float64
		order, err := shiftWithSign.Order()
		if err != nil {
			t.Fatal(err)
		}
		for k := range order {
			b, err := basis.New(background, fermions, basis.Sector{
				Charges:    []basis.ChargeValue{fermions.ParticleNumber().Is(up)},
				Symmetries: []group.Eigenvalue{{Generator: shiftWithSign, Turn: group.NewTurn(int64(k), int64(order))}},
			}, nil)
			if err != nil {
				continue
			}
			all = append(all, spectrum(t, operator.Sum(hf), b)...)
		}
		compareSpectra(t, fmt.Sprintf("%d fermions by sectors", up), all, spectrum(t, operator.Sum(hf), bf))
	}
}
