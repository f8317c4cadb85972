package entangle

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"ketloom/basis"
)

var (
	spinHalf = basis.SpinHalf()
	nothing  basis.Sector
)

// cuts are a space cut and a particle cut of a complex and a real mixture.
func cuts(t *testing.T) map[string]func(o *Options) (*Spectrum, error) {
	t.Helper()
	list := map[string]func(o *Options) (*Spectrum, error){}
	space := makeSpace(t, repeated(12, basis.Fermion())...)
	weights := firstSites(12)
	for _, isReal := range []bool{false, true} {
		var numbers, momenta []State
		for k := range 3 {
			b := makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(4 + k)}})
			numbers = append(numbers, makeState(t, b, randomAmplitudes(rng(uint64(k)), b.Len(), isReal)))
			b = makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(5), space.Weighted("momentum", 12, weights).Is(k)}})
			momenta = append(momenta, makeState(t, b, randomAmplitudes(rng(uint64(k)), b.Len(), isReal)))
		}
		list[fmt.Sprint("few sites, real ", isReal)] = func(o *Options) (*Spectrum, error) {
			return SpaceCut(context.Background(), numbers, []int{0, 3, 7}, o)
		}
		list[fmt.Sprint("many sites, real ", isReal)] = func(o *Options) (*Spectrum, error) {
			return SpaceCut(context.Background(), numbers[1:], []int{0, 1, 2, 3, 4, 5, 6, 7, 8, 9}, o)
		}
		list[fmt.Sprint("particles, real ", isReal)] = func(o *Options) (*Spectrum, error) {
			return ParticleCut(context.Background(), momenta, 2, o)
		}
	}
	return list
}

// The bits of a result depend neither on the workers nor on how many blocks fit
// into memory at a time.
func TestSameBits(t *testing.T) {
	for name, cut := range cuts(t) {
		want, err := cut(&Options{Workers: 1})
		if err != nil {
			t.Fatal(err)
		}
		for _, o := range []*Options{nil, {Workers: 2}, {Workers: 7}, {Workers: 3, Memory: 40000}} {
			got, err := cut(o)
			if err != nil {
				t.Fatal(err)
			}
			if o != nil && o.Memory > 0 && slices.ContainsFunc(got.Blocks, func(b Block) bool { return b.Floor > 1e-20 }) {
				t.Errorf("%s: a Gram matrix where the blocks should fit", name)
			}
			for i, b := range got.Blocks {
				if !slices.Equal(b.Weights, want.Blocks[i].Weights) || !slices.Equal(b.Charges, want.Blocks[i].Charges) {
					t.Errorf("%s: block %v differs with %+v", name, b.Charges, o)
				}
			}
			if got.Trust != want.Trust || !slices.Equal(got.Names, want.Names) {
				t.Errorf("%s: %v %v, want %v %v", name, got.Names, got.Trust, want.Names, want.Trust)
			}
		}
	}
}

// Blocks beyond the memory are solved by Gram matrices, from strips.
func TestGramMatrices(t *testing.T) {
	for name, cut := range cuts(t) {
		want, err := cut(nil)
		if err != nil {
			t.Fatal(err)
		}
		grams := 0
		for _, memory := range []int64{1500, 5000, 12000, 40000} {
			got, err := cut(&Options{Memory: memory})
			if err != nil {
				if memory < 40000 {
					continue // refused: too small for the largest block
				}
				t.Fatal(err)
			}
			for i, b := range got.Blocks {
				if b.Floor > 1e-20 {
					grams++
				}
				if len(b.Weights) != len(want.Blocks[i].Weights) || b.Dimension != want.Blocks[i].Dimension {
					t.Fatalf("%s: block %v has %d weights", name, b.Charges, len(b.Weights))
				}
				for j, w := range b.Weights {
					if math.Abs(w-want.Blocks[i].Weights[j]) > 1e-15 {
						t.Errorf("%s: weight %v, want %v", name, w, want.Blocks[i].Weights[j])
					}
				}
			}
		}
		if grams == 0 {
			t.Errorf("%s: no Gram matrix was tried", name)
		}
	}
}

func TestProgress(t *testing.T) {
	for name, cut := range cuts(t) {
		last := map[string]int64{}
		totals := map[string]int64{}
		_, err := cut(&Options{Progress: func(what string, done, total int64, rate float64) {
			if done < last[what] || done > total || rate < 0 {
				t.Errorf("%s: %s %d of %d at %v", name, what, done, total, rate)
			}
			last[what], totals[what] = done, total
		}})
		if err != nil {
			t.Fatal(err)
		}
		for _, what := range []string{"rows and columns", "amplitudes", "blocks"} {
			if totals[what] == 0 || last[what] != totals[what] {
				t.Errorf("%s: %s ended at %d of %d", name, what, last[what], totals[what])
			}
		}
	}
}

func TestCancelled(t *testing.T) {
	b := makeBasis(t, makeSpace(t, repeated(8, spinHalf)...), nothing)
	s := []State{randomState(t, rng(12), b)}
	for _, when := range []string{"rows and columns", "amplitudes", "blocks", "before"} {
		ctx, cancel := context.WithCancel(context.Background())
		if when == "before" {
			cancel()
		}
		cut, err := SpaceCut(ctx, s, []int{0, 1}, &Options{Progress: func(what string, done, total int64, rate float64) {
			if what == when {
				cancel()
			}
		}})
		cancel()
		if cut != nil || !errors.Is(err, context.Canceled) {
			t.Errorf("cancelled at %q: %v, %v", when, cut, err)
		}
	}
}

// A cut with more rows and columns than the memory is meant for is refused before
// they are all numbered.
func TestTooManyColumns(t *testing.T) {
	b := makeBasis(t, makeSpace(t, repeated(21, spinHalf)...), nothing)
	s := []State{randomState(t, rng(13), b)}
	for _, o := range []*Options{{Memory: 1 << 20, Workers: 1}, {Memory: 1 << 20, Workers: 3}} {
		_, err := SpaceCut(context.Background(), s, []int{5}, o)
		if err == nil || !strings.Contains(err.Error(), "more than 1048576 rows and columns") {
			t.Errorf("%+v: %v", o, err)
		}
	}
}
