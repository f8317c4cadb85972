package entangle

import (
	"math"
	"math/cmplx"
	"slices"
	"strings"
	"testing"
)

// shiftSign is the sign of the permutation that sorts the creators of a
// configuration after orbital j went to j+s around the ring.
func shiftSign(filled []int, s int) (shifted []int, sign float64) {
	n := len(filled)
	shifted = make([]int, n)
	var to []int
	for j, count := range filled {
		shifted[(j+s)%n] = count
		for range count {
			to = append(to, (j+s)%n)
		}
	}
	sign = 1
	for i := range to {
		for j := range i {
			if to[j] > to[i] {
				sign = -sign
			}
		}
	}
	return shifted, sign
}

// The definition: the configurations of one kx = Σ j mod lx span a space that the
// shift S by lx orbitals maps to itself, and (1/ly) Σ_m exp(2πi m ky/ly) S^m projects
// on one ky. Its trace is taken over all configurations, each shifted as it is.
func TestOnTorusByDefinition(t *testing.T) {
	for _, rule := range []Exclusion{{Most: 1, Range: 3}, {Most: 1, Range: 2, Bosons: true}, {Most: 2, Range: 2, Bosons: true}, {Most: 2, Range: 4}, {Most: 3, Range: 2, Bosons: true}, {Most: 1, Range: 5}} {
		for _, cells := range [][2]int{{3, 3}, {4, 2}, {2, 4}, {1, 6}, {6, 1}, {3, 4}} {
			lx, ly := cells[0], cells[1]
			rule.Orbitals = lx * ly
			for n := range 7 {
				want := make([]complex128, lx*ly)
				for _, filled := range must(rule.Configurations(n))(t) {
					kx, now, sign := 0, filled, 1.0
					for j, count := range filled {
						kx += j * count
					}
					for m := range ly {
						if slices.Equal(now, filled) {
							for ky := range ly {
								want[kx%lx*ly+ky] += cmplx.Rect(sign/float64(ly), 2*math.Pi*float64(m*ky)/float64(ly))
							}
						}
						next, s := shiftSign(now, lx)
						if rule.Bosons {
							s = 1
						}
						now, sign = next, sign*s
					}
				}
				for i, c := range must(rule.OnTorus(n, lx, ly))(t) {
					if !slices.Equal(c.Charges, []int{i / ly, i % ly}) || cmplx.Abs(want[i]-complex(float64(c.Count), 0)) > 1e-9 {
						t.Errorf("%+v, %d particles on %d×%d: %+v, want %v", rule, n, lx, ly, c, want[i])
					}
				}
			}
		}
	}
}

// must returns the value of a call that may not fail.
func must[T any](v T, err error) func(testing.TB) T {
	return func(t testing.TB) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

func TestOnTorusRefuses(t *testing.T) {
	rule := Exclusion{Most: 1, Range: 3, Orbitals: 12}
	for _, c := range []struct {
		rule   Exclusion
		n      int
		lx, ly int
		says   string
	}{
		{rule, 2, 4, 4, "4 × 4 cells for 12 orbitals"},
		{rule, 2, -4, -3, "-4 × -3 cells"},
		{rule, 2, 0, 12, "0 × 12 cells"},
		{rule, -1, 4, 3, "-1 particles"},
		{Exclusion{Most: 0, Range: 3, Orbitals: 12}, 2, 4, 3, "positive numbers"},
		{Exclusion{Most: 1, Range: 2, Orbitals: 144}, 12, 12, 12, "at most 1125899906842624 are resolved"},
		{Exclusion{Most: 1, Range: 2, Orbitals: 400}, 100, 20, 20, "64 bits"},
	} {
		_, err := c.rule.OnTorus(c.n, c.lx, c.ly)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%+v on %d×%d: error %v, want one that says %q", c.rule, c.lx, c.ly, err, c.says)
		}
	}
}
