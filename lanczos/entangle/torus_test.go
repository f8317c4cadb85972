package entangle

import (
	"fmt"
	"testing"
)

// Ground states of the 1/3 state in a Chern band, with the momenta of an
// independent NumPy program's diagonalisation of the checkerboard band.
func TestOnTorusPredictsGroundStates(t *testing.T) {
	for _, c := range []struct {
		n, lx, ly int
		want      string
	}{
		{4, 4, 3, "[(2,0) (2,1) (2,2)]"},
		{6, 6, 3, "[(3,0) (3,0) (3,0)]"},
		{8, 6, 4, "[(0,0) (2,0) (4,0)]"},
	} {
		rule := Exclusion{Most: 1, Range: 3, Orbitals: c.lx * c.ly}
		counts, err := rule.OnTorus(c.n, c.lx, c.ly)
		if err != nil {
			t.Fatal(err)
		}
		var found []string
		for _, k := range counts {
			for range k.Count {
				found = append(found, fmt.Sprintf("(%d,%d)", k.Charges[0], k.Charges[1]))
			}
		}
		if fmt.Sprint(found) != c.want {
			t.Errorf("%d particles on %d×%d: %v, want %v", c.n, c.lx, c.ly, found, c.want)
		}
	}
}

// Totals are those of the rule, and exchanging the directions of the torus
// exchanges the momenta, as the symmetry of the torus demands.
func TestOnTorusDoesNotPreferADirection(t *testing.T) {
	for _, rule := range []Exclusion{{Most: 1, Range: 3}, {Most: 1, Range: 5}, {Most: 2, Range: 4}, {Most: 1, Range: 2, Bosons: true}, {Most: 2, Range: 2, Bosons: true}} {
		for _, cells := range [][2]int{{2, 3}, {3, 3}, {4, 2}, {4, 3}, {4, 4}, {6, 3}, {5, 3}, {6, 4}} {
			lx, ly := cells[0], cells[1]
			rule.Orbitals = lx * ly
			if rule.Range > rule.Orbitals {
				continue
			}
			for n := 0; n <= 6; n++ {
				total, err := rule.Count(n)
				if err != nil {
					t.Fatal(err)
				}
				counts, err := rule.OnTorus(n, lx, ly)
				if err != nil {
					t.Fatal(err)
				}
				turned, err := rule.OnTorus(n, ly, lx)
				if err != nil {
					t.Fatal(err)
				}
				sum := uint64(0)
				for _, c := range counts {
					kx, ky := c.Charges[0], c.Charges[1]
					sum += c.Count
					if other := turned[ky*lx+kx].Count; other != c.Count {
						t.Errorf("rule %+v, %d particles on %d×%d: %d at (%d,%d), %d with the directions exchanged", rule, n, lx, ly, c.Count, kx, ky, other)
					}
				}
				if sum != total {
					t.Errorf("rule %+v, %d particles on %d×%d: sectors add up to %d of %d", rule, n, lx, ly, sum, total)
				}
			}
		}
	}
}

// Three particles on 6×4 cells: 46 states at kx = 0 and 3, 45 elsewhere, as
// the particle entanglement spectrum of the checkerboard band shows; 1,088 in
// all by the closed formula of Regnault and Bernevig (Phys. Rev. X 1, 021014,
// 2011).
func TestOnTorusOfThreeParticles(t *testing.T) {
	rule := Exclusion{Most: 1, Range: 3, Orbitals: 24}
	counts, err := rule.OnTorus(3, 6, 4)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range counts {
		want := uint64(45)
		if c.Charges[0]%3 == 0 {
			want = 46
		}
		if c.Count != want {
			t.Errorf("%d states at %v, want %d", c.Count, c.Charges, want)
		}
	}
}
