package entangle

import (
	"context"
	"math"
	"testing"
	"time"

	"ketloom/basis"
	"ketloom/lanczos/dense"
)

// chernStates are three random complex states of 8 fermions in 24 orbitals, of
// the momenta of a fractional Chern insulator on 6×4 cells.
func chernStates(b *testing.B) []State {
	space := makeSpace(b, repeated(24, basis.Fermion())...)
	kx, ky := make([]int, 24), make([]int, 24)
	for j := range 24 {
		kx[j], ky[j] = j/4, j%4
	}
	var states []State
	for _, k := range []int{0, 2, 4} {
		states = append(states, randomState(b, rng(uint64(k)), makeBasis(b, space, basis.Sector{Charges: []basis.ChargeValue{
			space.ParticleNumber().Is(8), space.Weighted("kx", 6, kx).Is(k), space.Weighted("ky", 4, ky).Is(0),
		}})))
	}
	return states
}

// The limit is the singular values of matrices of the same shapes, one after the
// other.
func BenchmarkParticleCut(b *testing.B) {
	states := chernStates(b)
	for _, part := range []int{2, 3, 4} {
		b.Run(string(rune('0'+part)), func(b *testing.B) {
			var cut, limit time.Duration
			for range b.N {
				begun := time.Now()
				s, err := ParticleCut(context.Background(), states, part, nil)
				if err != nil {
					b.Fatal(err)
				}
				cut += time.Since(begun)
				r := rng(1)
				for _, block := range s.Blocks {
					columns := int(math.Ceil(3 * binomial(24, 8-part) / 24))
					m := randomAmplitudes(r, block.Dimension*columns, false)
					begun = time.Now()
					if _, err := dense.SingularComplex(m, block.Dimension, columns); err != nil {
						b.Fatal(err)
					}
					limit += time.Since(begun)
				}
			}
			b.ReportMetric(cut.Seconds()/limit.Seconds(), "of-limit")
		})
	}
}
