package entangle

import (
	"fmt"
	"math"
	"sort"
)

// Spectrum is the spectrum of a reduced density operator, block by block.
type Spectrum struct {
	// Names are the charges of the part that label the blocks.
	Names []string
	// Blocks are sorted by their charges.
	Blocks []Block
}

// Block is the part of a density operator with given charges of the part.
type Block struct {
	Charges   []int // in the order of Spectrum.Names
	Dimension int   // number of states of the part that occur
	// Weights are the eigenvalues λ, descending; at most Dimension of them, those
	// beyond are zero.
	Weights []float64
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

// SmallestWeight is the eigenvalue below which a weight counts as zero: what
// rounding leaves of a singular value of 0, squared, is smaller.
const SmallestWeight = 1e-28

// Levels returns all levels of weights above SmallestWeight, ascending in ξ.
func (s *Spectrum) Levels() []Level {
	var all []Level
	for i, b := range s.Blocks {
		for _, w := range b.Weights {
			if w > SmallestWeight {
				all = append(all, Level{-math.Log(w), w, i})
			}
		}
	}
	sort.SliceStable(all, func(a, b int) bool { return all[a].Xi < all[b].Xi })
	return all
}

// Trace returns the sum of all weights: one, up to rounding.
func (s *Spectrum) Trace() float64 {
	sum := 0.0
	for _, b := range s.Blocks {
		for _, w := range b.Weights {
			sum += w
		}
	}
	return sum
}

// Entropy returns the von Neumann entropy -Σ λ ln λ in nats.
func (s *Spectrum) Entropy() float64 {
	sum := 0.0
	for _, b := range s.Blocks {
		for _, w := range b.Weights {
			if w > 0 {
				sum -= w * math.Log(w)
			}
		}
	}
	return math.Max(sum, 0)
}

// Renyi returns the entropy ln(Σ λ^α)/(1-α) in nats: at α = 0 the logarithm of
// the number of levels, at 1 the von Neumann entropy, at +Inf the lowest level.
// A negative or undefined α gives NaN.
func (s *Spectrum) Renyi(alpha float64) float64 {
	switch {
	case alpha == 1:
		return s.Entropy()
	case math.IsNaN(alpha) || alpha < 0:
		return math.NaN()
	}
	levels := s.Levels()
	if len(levels) == 0 {
		return 0
	}
	switch {
	case alpha == 0:
		return math.Log(float64(len(levels)))
	case math.IsInf(alpha, 1):
		return levels[0].Xi
	}
	sum := 0.0
	for _, l := range levels {
		sum += math.Exp(-alpha * (l.Xi - levels[0].Xi))
	}
	return (math.Log(sum) - alpha*levels[0].Xi) / (1 - alpha)
}

// LargestGap returns the largest spacing between neighbouring levels. With fewer
// than two levels nothing lies above: Below counts all and XiAbove is +Inf.
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
// look at an expected counting. Errors: fewer levels than that.
func (s *Spectrum) GapAfter(below int) (Gap, error) {
	levels := s.Levels()
	if below < 1 || below > len(levels) {
		return Gap{}, fmt.Errorf("entangle: a gap above %d levels; the spectrum has %d", below, len(levels))
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
