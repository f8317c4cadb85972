package entangle

import (
	"cmp"
	"fmt"
	"math"
	"slices"
)

// Spectrum is the spectrum of a reduced density operator of trace one, block by
// block.
type Spectrum struct {
	// Names are the charges of the part that label the blocks.
	Names []string
	// Blocks are sorted by their charges.
	Blocks []Block
	// Trust is -ln of the largest Floor of the blocks: levels up to it are more
	// than errors of rounding (and of the states, with Options.Error) in any block.
	Trust float64
}

// Block is the part of a density operator with given charges of the part.
type Block struct {
	Charges   []int // in the order of Spectrum.Names
	Dimension int   // number of states of the part that occur
	// Weights are the eigenvalues λ, descending; at most Dimension of them, those
	// beyond are zero.
	Weights []float64
	// Floor is the weight up to which a weight counts as zero: the larger of
	// λ·((16+√q/2)·2⁻⁵²)² with the largest weight λ and the larger dimension q of the
	// matrix of the block (λ·(16+√q/2)·2⁻⁵² for blocks beyond Options.Memory), and of
	// Options.Error².
	Floor float64
}

// Level is an entanglement level ξ = -ln λ.
type Level struct {
	Xi, Weight float64
	Block      int
}

// Gap is the largest spacing between neighbouring levels.
type Gap struct {
	Below            int // levels below the gap
	XiBelow, XiAbove float64
}

// Levels returns all levels of weights above the floors of their blocks,
// ascending in ξ. [Spectrum.Zeros] counts the others.
func (s *Spectrum) Levels() []Level {
	return slices.DeleteFunc(s.all(), func(l Level) bool { return l.Weight <= s.Blocks[l.Block].Floor })
}

// all returns the levels of all weights, those that are zero included.
func (s *Spectrum) all() []Level {
	var all []Level
	for i, b := range s.Blocks {
		for _, w := range b.Weights {
			all = append(all, Level{0 - math.Log(w), w, i})
		}
	}
	slices.SortStableFunc(all, func(a, b Level) int { return cmp.Compare(b.Weight, a.Weight) })
	return all
}

// Zeros returns the number of eigenvalues that count as zero: weights that are
// not above the floor of their block, and those beyond the rank of its matrix.
func (s *Spectrum) Zeros() int {
	n := -len(s.Levels())
	for _, b := range s.Blocks {
		n += b.Dimension
	}
	return n
}

// Trace returns the sum of all weights: one, up to rounding.
func (s *Spectrum) Trace() float64 {
	sum := 0.0
	for _, l := range s.all() {
		sum += l.Weight
	}
	return sum
}

// Entropy returns the von Neumann entropy -Σ λ ln λ in nats.
func (s *Spectrum) Entropy() float64 {
	sum := 0.0
	for _, l := range s.all() {
		if l.Weight > 0 {
			sum += l.Weight * l.Xi
		}
	}
	return max(sum, 0)
}

// Renyi returns the entropy ln(Σ λ^α)/(1-α) in nats: at α = 0 the logarithm of
// the number of levels, at 1 the von Neumann entropy, at +Inf the lowest level.
// Weights that count as zero are left out but at α = 1. Errors: α that is
// negative or not a number; no level at all, where Options.Error is too large.
func (s *Spectrum) Renyi(alpha float64) (float64, error) {
	if math.IsNaN(alpha) || alpha < 0 {
		return 0, fmt.Errorf("entangle: a Rényi entropy of the order %v; give 0 … +Inf", alpha)
	}
	levels := s.Levels()
	if len(levels) == 0 {
		return 0, fmt.Errorf("entangle: all weights count as zero; make Options.Error smaller")
	}
	switch {
	case alpha == 1:
		return s.Entropy(), nil
	case alpha == 0:
		return math.Log(float64(len(levels))), nil
	case math.IsInf(alpha, 1):
		return max(levels[0].Xi, 0), nil
	case math.Abs(alpha-1) < 0.1:
		return max(nearOne(levels, 1-alpha), 0), nil
	}
	sum := 0.0
	for _, l := range levels {
		sum += math.Exp(-alpha * (l.Xi - levels[0].Xi))
	}
	return max(alpha/(alpha-1)*levels[0].Xi-math.Log(sum)/(alpha-1), 0), nil
}

// nearOne is the Rényi entropy of the order 1-d for small d ≠ 0, without
// cancellation: Σ λ^(1-d) = 1 + Σ λ (exp(dξ) - 1).
func nearOne(levels []Level, d float64) float64 {
	sum := 0.0
	for _, l := range levels {
		sum += l.Weight * math.Expm1(d*l.Xi)
	}
	return math.Log1p(sum) / d
}

// LargestGap returns the largest spacing between neighbouring levels, the lowest
// one where several are equal. With fewer than two levels nothing lies above:
// Below counts all and XiAbove is +Inf. Weights that count as zero make no gap;
// the noise of an eigenvector does, unless Options.Error is given.
func (s *Spectrum) LargestGap() Gap {
	levels := s.Levels()
	g := Gap{Below: len(levels), XiAbove: math.Inf(1)}
	if len(levels) > 0 {
		g.XiBelow = levels[len(levels)-1].Xi
	}
	largest := -1.0
	for i := 0; i+1 < len(levels); i++ {
		if d := levels[i+1].Xi - levels[i].Xi; d > largest {
			largest = d
			g = Gap{i + 1, levels[i].Xi, levels[i+1].Xi}
		}
	}
	return g
}

// GapAfter returns the spacing above the lowest levels of a given number, to
// look at an expected counting; XiAbove is +Inf above the last. Errors: fewer
// levels than that, or none asked for.
func (s *Spectrum) GapAfter(below int) (Gap, error) {
	levels := s.Levels()
	if below < 1 || below > len(levels) {
		return Gap{}, fmt.Errorf("entangle: a gap above %d levels; the spectrum has %d, ask for 1 … %d", below, len(levels), len(levels))
	}
	g := Gap{below, levels[below-1].Xi, math.Inf(1)}
	if below < len(levels) {
		g.XiAbove = levels[below].Xi
	}
	return g, nil
}

// Below returns how many levels of each block lie below ξ.
func (s *Spectrum) Below(xi float64) []int {
	counts := make([]int, len(s.Blocks))
	for _, l := range s.Levels() {
		if l.Xi < xi {
			counts[l.Block]++
		}
	}
	return counts
}

// BelowGap returns how many levels of each block lie below the largest gap.
func (s *Spectrum) BelowGap() []int {
	counts := make([]int, len(s.Blocks))
	for _, l := range s.Levels()[:s.LargestGap().Below] {
		counts[l.Block]++
	}
	return counts
}
