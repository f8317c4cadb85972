// Disorder: level statistics of a spin chain in random fields, from complete spectra:
// the mean ratio of neighbouring spacings lies near 0.53 where levels repel and near
// 0.39 where they do not (Oganesyan and Huse, Phys. Rev. B 75, 155111, 2007).
package main

import (
	"context"
	"fmt"
	"log"
	"math/rand/v2"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos/dense"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

const length = 10

// meanRatio returns the mean of min(s, s')/max(s, s') over neighbouring spacings in
// the middle half of a spectrum.
func meanRatio(levels []float64) float64 {
	sum, count := 0.0, 0
	for i := len(levels) / 4; i < 3*len(levels)/4; i++ {
		below, above := levels[i]-levels[i-1], levels[i+1]-levels[i]
		sum += min(below, above) / max(below, above)
		count++
	}
	return sum / float64(count)
}

func main() {
	ctx := context.Background()
	ring, err := lattice.Ring(length)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(length, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	clean, err := model.Heisenberg(space, ring, []float64{1})
	if err != nil {
		log.Fatal(err)
	}
	b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}}, nil)
	if err != nil {
		log.Fatal(err)
	}
	o := operator.On(space)
	r := rand.New(rand.NewPCG(1, 2))
	for _, width := range []float64{0.5, 8} {
		mean := 0.0
		const samples = 20
		for s := 0; s < samples; s++ {
			h := clean
			for i := 0; i < length; i++ {
				h = h.Plus(o.Sz(i).Scale(complex(width*(2*r.Float64()-1), 0)))
			}
			m, err := matrix.New(ctx, h, b, nil)
			if err != nil {
				log.Fatal(err)
			}
			levels, _, err := dense.EigenComplex(m.Dense(), b.Len(), false)
			if err != nil {
				log.Fatal(err)
			}
			mean += meanRatio(levels) / samples
		}
		fmt.Printf("fields in ±%g: mean spacing ratio %.3f\n", width, mean)
	}
}
