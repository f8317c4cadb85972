package entangle

import (
	"math/big"
	"slices"
	"strings"
	"testing"
)

// Closed formula of the rule (1,r): N_φ (N_φ-(r-1)n-1)! / (n! (N_φ-rn)!)
// (Regnault and Bernevig, Phys. Rev. X 1, 021014, 2011, for r = 3).
func TestCountByFormula(t *testing.T) {
	for r := 1; r <= 5; r++ {
		for orbitals := r; orbitals <= 40; orbitals++ {
			for n := 1; r*n <= orbitals && n <= 12; n++ {
				got, err := Exclusion{Most: 1, Range: r, Orbitals: orbitals}.Count(n)
				if err != nil {
					t.Fatal(err)
				}
				want := new(big.Int).MulRange(int64(orbitals-r*n+1), int64(orbitals-(r-1)*n-1))
				want.Mul(want, big.NewInt(int64(orbitals)))
				want.Div(want, new(big.Int).MulRange(1, int64(n)))
				if want.Cmp(new(big.Int).SetUint64(got)) != 0 {
					t.Errorf("(1,%d), %d in %d orbitals: %d, want %v", r, n, orbitals, got, want)
				}
			}
		}
	}
	// closed formula and enumeration by an independent program
	for _, c := range []struct {
		orbitals, n int
		want        uint64
	}{{12, 2, 42}, {12, 4, 3}, {15, 5, 3}, {18, 2, 117}, {18, 3, 330}, {24, 3, 1088}, {24, 4, 2730}, {30, 5, 23256}, {9, 4, 0}, {9, 0, 1}} {
		got, err := Exclusion{Most: 1, Range: 3, Orbitals: c.orbitals}.Count(c.n)
		if err != nil || got != c.want {
			t.Errorf("%d in %d orbitals: %d, want %d, %v", c.n, c.orbitals, got, c.want, err)
		}
	}
}

// enumerated visits every filling of the ring and looks at every stretch of Range
// orbitals.
func enumerated(e Exclusion, particles int) [][]int {
	var list [][]int
	filled := make([]int, e.Orbitals)
	for {
		if sum(filled) == particles && allowed(e, filled) {
			list = append(list, slices.Clone(filled))
		}
		i := e.Orbitals - 1
		for ; i >= 0 && filled[i] == e.highest(); i-- {
			filled[i] = 0
		}
		if i < 0 {
			return list
		}
		filled[i]++
	}
}

func allowed(e Exclusion, filled []int) bool {
	for i := range filled {
		n := 0
		for j := range e.Range {
			n += filled[(i+j)%len(filled)]
		}
		if n > e.Most {
			return false
		}
	}
	return true
}

func TestCountByEnumeration(t *testing.T) {
	for _, e := range []Exclusion{
		{1, 3, 9, false}, {1, 2, 8, true}, {2, 4, 9, false}, {2, 2, 7, true}, {2, 3, 8, true}, {3, 5, 10, false},
		{3, 2, 6, true}, {2, 1, 5, true}, {1, 1, 6, false}, {5, 3, 6, false}, {2, 6, 6, true}, {1, 5, 7, false}, {1, 1, 1, true},
	} {
		x, y := OrbitalCharge{Modulus: 3}, OrbitalCharge{}
		for j := range e.Orbitals {
			x.Values = append(x.Values, j-2)
			y.Values = append(y.Values, j%2)
		}
		charges := []OrbitalCharge{x, y}
		for n := range 8 {
			want := enumerated(e, n)
			list, err := e.Configurations(n)
			if err != nil {
				t.Fatal(err)
			}
			if !slices.EqualFunc(list, want, slices.Equal) {
				t.Errorf("%+v, %d particles: %v, want %v", e, n, list, want)
			}
			total, err := e.Count(n)
			if err != nil || total != uint64(len(want)) {
				t.Errorf("%+v, %d particles: %d of %d, %v", e, n, total, len(want), err)
			}
			counts, err := e.BySector(n, charges)
			if err != nil {
				t.Fatal(err)
			}
			for _, filled := range want {
				qx, qy := 0, 0
				for j, k := range filled {
					qx += k * (j - 2)
					qy += k * (j % 2)
				}
				i := slices.IndexFunc(counts, func(c SectorCount) bool { return slices.Equal(c.Charges, []int{(qx%3 + 3) % 3, qy}) })
				if i < 0 {
					t.Fatalf("%+v, %d particles: no sector of %v", e, n, filled)
				}
				counts[i].Count--
			}
			for i, c := range counts {
				if c.Count != 0 || i > 0 && slices.Compare(counts[i-1].Charges, c.Charges) >= 0 {
					t.Errorf("%+v, %d particles: %+v left in %v", e, n, c, counts)
				}
			}
		}
	}
}

// Random rules, fillings and charges.
func TestCountOfRandomRules(t *testing.T) {
	r := rng(51)
	for range 60 {
		e := Exclusion{Most: 1 + r.IntN(3), Orbitals: 1 + r.IntN(7), Bosons: r.IntN(2) == 1}
		e.Range = 1 + r.IntN(e.Orbitals)
		q := OrbitalCharge{Modulus: r.IntN(4)}
		for range e.Orbitals {
			q.Values = append(q.Values, r.IntN(9)-4)
		}
		n := r.IntN(6)
		want := map[int]uint64{}
		for _, filled := range enumerated(e, n) {
			value := 0
			for j, k := range filled {
				value += k * q.Values[j]
			}
			if q.Modulus > 0 {
				value = (value%q.Modulus + q.Modulus) % q.Modulus
			}
			want[value]++
		}
		counts, err := e.BySector(n, []OrbitalCharge{q})
		if err != nil || len(counts) != len(want) {
			t.Errorf("%+v, %d particles: %v, want %v, %v", e, n, counts, want, err)
		}
		for _, c := range counts {
			if want[c.Charges[0]] != c.Count {
				t.Errorf("%+v, %d particles: %+v, want %v", e, n, c, want)
			}
		}
	}
}

// Few configurations are found among many beginnings that do not close: those of
// a full ring are one pattern in all places.
func TestConfigurationsOfFullRings(t *testing.T) {
	list, err := Exclusion{Most: 1, Range: 20, Orbitals: 300}.Configurations(15)
	if err != nil || len(list) != 20 {
		t.Fatalf("%d configurations, %v", len(list), err)
	}
	for i, filled := range list {
		for j, n := range filled {
			if (n == 1) != (j%20 == 19-i) {
				t.Fatalf("configuration %d is %v", i, filled)
			}
		}
	}
	list, err = Exclusion{Most: 1, Range: 20, Orbitals: 300}.Configurations(16)
	if err != nil || len(list) != 0 {
		t.Errorf("%d configurations of too many particles, %v", len(list), err)
	}
}

// The limit on steps counts every filling that is tried.
func TestMostSteps(t *testing.T) {
	e := Exclusion{Most: 3, Range: 1, Orbitals: 5, Bosons: true}
	windows, err := e.windows()
	if err != nil {
		t.Fatal(err)
	}
	c := newCounter(e, 4, nil, windows)
	if err := c.around(0); err != nil || c.steps != 4*(1+4+5+5+5) {
		t.Errorf("%v steps, %v", c.steps, err)
	}
	c.steps = MostSteps - 10
	if err := c.around(0); err == nil || !strings.Contains(err.Error(), "steps") {
		t.Errorf("error %v", err)
	}
}

func TestExclusionRefuses(t *testing.T) {
	rule := Exclusion{Most: 1, Range: 3, Orbitals: 9}
	for _, c := range []struct {
		rule      Exclusion
		particles int
		charges   []OrbitalCharge
		says      string
	}{
		{Exclusion{0, 3, 9, false}, 2, nil, "positive numbers"},
		{Exclusion{1, 0, 9, false}, 2, nil, "positive numbers"},
		{Exclusion{1 << 30, 1, 9, true}, 2, nil, "particles up to"},
		{Exclusion{1, 3, 0, false}, 2, nil, "a ring of 0"},
		{Exclusion{1, 3, 1 << 20, false}, 2, nil, "a ring of"},
		{Exclusion{1, 10, 9, false}, 2, nil, "range that fits"},
		{Exclusion{9, 30, 40, true}, 2, nil, "in more than"},
		{rule, -1, nil, "-1 particles"},
		{rule, 2, []OrbitalCharge{{Modulus: 3, Values: []int{1}}}, "1 values for 9"},
		{rule, 2, []OrbitalCharge{{Modulus: -3, Values: make([]int, 9)}}, "modulo -3"},
		{rule, 2, []OrbitalCharge{{Values: []int{1 << 40, 0, 0, 0, 0, 0, 0, 0, 0}}}, "the value"},
		{Exclusion{1, 2, 200, false}, 60, nil, "64 bits"},
	} {
		_, err := c.rule.BySector(c.particles, c.charges)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%+v: error %v, want one that says %q", c.rule, err, c.says)
		}
	}
	if _, err := (Exclusion{Most: 1, Range: 2, Orbitals: 60}).Configurations(15); err == nil || !strings.Contains(err.Error(), "count them instead") {
		t.Errorf("a long list: %v", err)
	}
}
