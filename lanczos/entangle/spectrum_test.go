package entangle

import (
	"context"
	"fmt"
	"math"
	"slices"
	"testing"
)

// made is a spectrum with given weights.
func made(blocks ...[]float64) *Spectrum {
	s := &Spectrum{}
	for i, w := range blocks {
		s.Blocks = append(s.Blocks, Block{Charges: []int{i}, Dimension: len(w) + 1, Weights: w, Floor: 1e-29})
	}
	return s
}

func TestRenyiEntropies(t *testing.T) {
	s := made([]float64{0.5, 0.125, 1e-31}, []float64{0.25, 0.125})
	for _, c := range []struct{ alpha, want float64 }{
		{0, math.Log(4)}, {1, 1.75 * math.Ln2}, {math.Inf(1), math.Ln2},
		{2, -math.Log(0.25 + 0.0625 + 2*0.015625)}, {0.5, 2 * math.Log(math.Sqrt(0.5)+0.5+2*math.Sqrt(0.125))},
		{300, (300*math.Ln2 - math.Log1p(math.Pow(0.5, 300))) / 299},
		// near 1: S_1 - (α-1)/2 · variance of ξ, with ⟨ξ⟩ = 1.75 ln 2 and ⟨ξ²⟩ = 3.75 ln² 2
		{1 + 1e-9, 1.75*math.Ln2 - 0.5e-9*(3.75-1.75*1.75)*math.Ln2*math.Ln2},
		{1 - 1e-13, 1.75 * math.Ln2},
	} {
		got, err := s.Renyi(c.alpha)
		if err != nil {
			t.Fatal(err)
		}
		near(t, fmt.Sprint("order ", c.alpha), got, c.want, 1e-13)
	}
	// both branches near 1 meet
	low, _ := s.Renyi(1.1 - 1e-12)
	high, _ := s.Renyi(1.1 + 1e-12)
	near(t, "order 1.1", low, high, 1e-11)
	for _, alpha := range []float64{-1, math.NaN(), math.Inf(-1)} {
		if _, err := s.Renyi(alpha); err == nil {
			t.Errorf("order %v: no error", alpha)
		}
	}
	if _, err := made([]float64{1e-30}).Renyi(2); err == nil {
		t.Error("no level: no error")
	}
}

func TestLevelsAndGaps(t *testing.T) {
	s := made([]float64{0.4, 0.1, 1e-31, 0}, []float64{0.4, 0.09}, []float64{0.01})
	blocks := []int{}
	for _, l := range s.Levels() {
		blocks = append(blocks, l.Block)
	}
	if !slices.Equal(blocks, []int{0, 1, 0, 1, 2}) {
		t.Errorf("levels in blocks %v", blocks)
	}
	if z := s.Zeros(); z != 5 { // two weights, and one beyond the rank of each block
		t.Errorf("%d zeros", z)
	}
	g := s.LargestGap()
	if g.Below != 4 || !slices.Equal(s.BelowGap(), []int{2, 2, 0}) || !slices.Equal(s.Below(1), []int{1, 1, 0}) {
		t.Errorf("gap %+v, below it %v, below ξ = 1 %v", g, s.BelowGap(), s.Below(1))
	}
	near(t, "gap", g.XiAbove-g.XiBelow, math.Log(9), 1e-14)
	if g, err := s.GapAfter(2); err != nil || g.Below != 2 || math.Abs(g.XiAbove-g.XiBelow-math.Log(4)) > 1e-14 {
		t.Errorf("gap after 2: %+v, %v", g, err)
	}
	if g, err := s.GapAfter(5); err != nil || !math.IsInf(g.XiAbove, 1) {
		t.Errorf("gap after all: %+v, %v", g, err)
	}
	for _, n := range []int{0, 6} {
		if _, err := s.GapAfter(n); err == nil {
			t.Errorf("gap after %d: no error", n)
		}
	}
	if g := made([]float64{1}).LargestGap(); g.Below != 1 || g.XiBelow != 0 || !math.IsInf(g.XiAbove, 1) {
		t.Errorf("gap of a single level: %+v", g)
	}
	if g := made().LargestGap(); g.Below != 0 || !math.IsInf(g.XiAbove, 1) {
		t.Errorf("gap without levels: %+v", g)
	}
}

// Weights below the square of the stated error of a state are no levels.
func TestStatedError(t *testing.T) {
	psi := make([]complex128, 4)
	psi[0], psi[3] = complex(math.Sqrt(1-1e-12), 0), 1e-6
	b := makeBasis(t, makeSpace(t, repeated(2, spinHalf)...), nothing)
	s := []State{makeState(t, b, psi)}
	for _, c := range []struct {
		bound  float64
		levels int
	}{{0, 2}, {1e-7, 2}, {1e-5, 1}} {
		cut, err := SpaceCut(context.Background(), s, []int{0}, &Options{Error: c.bound})
		if err != nil {
			t.Fatal(err)
		}
		if n := len(cut.Levels()); n != c.levels || cut.Zeros() != 2-n {
			t.Errorf("error %v: %d levels and %d zeros", c.bound, n, cut.Zeros())
		}
		if c.bound > 0 {
			near(t, "trust", cut.Trust, -2*math.Log(c.bound), 1e-12)
		}
	}
}
