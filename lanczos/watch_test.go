package lanczos

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// The bound on the weight of a start vector on an eigenvector must hold whatever
// the weight is, through restarts, and be of use: here the eigenvector lies below
// everything that the run has seen of the spectrum.
func TestWatchBoundsWeight(t *testing.T) {
	const n = 500
	r := rand.New(rand.NewPCG(51, 1))
	levels := bulk(n, -2.5)
	op := RealFunc(n, func(dst, src []float64) {
		for i, x := range src {
			dst[i] = levels[i] * x
		}
	})
	for _, component := range []float64{1e-2, 1e-4, 1e-7, 0} {
		s, err := resolve(op, 1, &Options{Krylov: 9})
		if err != nil {
			t.Fatal(err)
		}
		search := newSearch(context.Background(), op, s, realField{})
		b := search.basis[0]
		for i := range b {
			b[i] = r.NormFloat64()
		}
		b[0] = 0
		search.space.scaleBy(b, 1/search.space.norm(b))
		b[0] = component
		search.space.scaleBy(b, 1/search.space.norm(b))
		weight := b[0] * b[0]
		search.watch = newWatch([]float64{-2.5}, s.Krylov)
		smallest := 1.0
		err = search.run(func(bool) (int, bool) {
			bound := search.watch.weight[0]
			if search.matrix.values[0] < -2.5+1e-9 { // found: nothing to bound any more
				return 0, true
			}
			if bound < weight*(1-1e-6) {
				t.Errorf("component %g: weight %g, bound %g after %d products", component, weight, bound, search.spent.products)
			}
			smallest = min(smallest, bound)
			return 0, search.spent.products >= 60
		})
		search.space.crew.close()
		if err != nil {
			t.Fatal(err)
		}
		if search.spent.restarts < 2 {
			t.Errorf("%d restarts", search.spent.restarts)
		}
		if limit := max(3*weight, 1e-18); smallest > limit {
			t.Errorf("component %g: weight %g, bound never below %g", component, weight, smallest)
		}
	}
}

// A random vector has at most the weight w on a direction with the probability
// chance(w) at most, and not much less often.
func TestChanceAgainstSamples(t *testing.T) {
	const n, samples = 30, 20000
	for _, isComplex := range []bool{false, true} {
		weights := make([]float64, samples)
		for k := range weights {
			sum := 0.0
			for i := range n {
				x, y := gaussian(streamOf(uint64(k), 3), i)
				if !isComplex {
					y = 0
				}
				if i == 0 {
					weights[k] = x*x + y*y
				}
				sum += x*x + y*y
			}
			weights[k] /= sum
		}
		slices.Sort(weights)
		for _, part := range []float64{0.01, 0.03, 0.1} {
			w := weights[int(part*samples)]
			spread := 4 * math.Sqrt(part/samples) // four standard deviations
			if p := chance(w, n, isComplex); p < part-spread || p > 1.1*part+spread {
				t.Errorf("complex %v: weight %g has probability %g, bound %g", isComplex, w, part, p)
			}
		}
	}
}

// A check with a coarse chance may miss, as often as it says and not more: level k+1
// is one copy of level k, and a list that is not known as cut has missed it.
func TestMissChanceIsKept(t *testing.T) {
	const trials, missChance = 300, 0.05
	op := prescribed(bulk(300, -3, -3), 12, false)
	missed := 0
	for seed := range uint64(trials) {
		result, err := Lowest(context.Background(), op, 1, &Options{Seed: seed + 1, MissChance: missChance, EnergiesOnly: true})
		if err != nil {
			t.Fatal(err)
		}
		if !result.CutMultiplet {
			missed++
		}
	}
	if float64(missed) > trials*missChance+4*math.Sqrt(trials*missChance) {
		t.Errorf("%d of %d checks missed a level; expected %g at most", missed, trials, trials*missChance)
	}
	if missed == 0 {
		t.Errorf("no check of %d missed a level at a chance of %g; the bound is not what decides", trials, missChance)
	}
}
