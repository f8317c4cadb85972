package entangle

import (
	"fmt"
	"math"
	"testing"
)

// Rényi entropies fall with the order, lie between the lowest level and the
// logarithm of the number of levels, and are all equal for equal weights. So does
// S_α ≤ α/(α-1) S_∞ for α > 1 (closed formulas).
func TestRenyiEntropiesFall(t *testing.T) {
	r := rng(41)
	orders := []float64{0, 1e-12, 0.3, 0.9, 0.95, 1 - 1e-9, 1, 1 + 1e-9, 1.05, 1.1, 1.3, 2, 7, 500, 1e17, math.MaxFloat64, math.Inf(1)}
	for range 50 {
		n := 2 + r.IntN(20)
		w := make([]float64, n)
		sum := 0.0
		for i := range w {
			w[i] = math.Exp(-12 * r.Float64())
			sum += w[i]
		}
		for i := range w {
			w[i] /= sum
		}
		s := made(w[:n/2], w[n/2:])
		last := math.Log(float64(n))
		for _, alpha := range orders {
			got, err := s.Renyi(alpha)
			if err != nil {
				t.Fatal(err)
			}
			if !(got <= last+1e-13) {
				t.Errorf("order %v: %v after %v", alpha, got, last)
			}
			if lowest := s.Levels()[0].Xi; !(got >= lowest-1e-13) || alpha > 1 && !math.IsInf(alpha, 1) && got > alpha/(alpha-1)*lowest+1e-13 {
				t.Errorf("order %v: %v with the lowest level %v", alpha, got, lowest)
			}
			last = got
		}
	}
	for _, n := range []int{1, 3, 64} {
		w := make([]float64, n)
		for i := range w {
			w[i] = 1 / float64(n)
		}
		for _, alpha := range orders {
			got, err := made(w).Renyi(alpha)
			if err != nil {
				t.Fatal(err)
			}
			near(t, fmt.Sprintf("%d equal weights, order %v", n, alpha), got, math.Log(float64(n)), 1e-13)
		}
	}
}
