// Statistics: are the levels of a ring chaotic? Spins with couplings to neighbours and
// next neighbours and disorder in a field, whose ratios of level spacings are compared with
// those of independent levels and of random matrices (Oganesyan and Huse, Phys. Rev. B
// 75, 155111, 2007). The disorder is drawn with a fixed seed.
package main

import (
	"context"
	"fmt"
	"log"
	"math/rand"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos/dense"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
	"ketloom/script/report"
)

func main() {
	ctx := context.Background()
	const n = 10
	ring, err := lattice.Ring(n)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(n, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	h, err := model.Heisenberg(space, ring, []float64{1, 0.5})
	if err != nil {
		log.Fatal(err)
	}
	b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}}, nil)
	if err != nil {
		log.Fatal(err)
	}
	o := operator.On(space)
	for _, strength := range []float64{1, 12} {
		draw := rand.New(rand.NewSource(7))
		var ratios []float64
		for sample := 0; sample < 6; sample++ {
			disordered := h
			for i := 0; i < n; i++ {
				disordered = disordered.Plus(o.Sz(i).Scale(complex(strength*(2*draw.Float64()-1), 0)))
			}
			m, err := matrix.New(ctx, disordered, b, nil)
			if err != nil {
				log.Fatal(err)
			}
			levels, _, err := dense.EigenComplex(m.Dense(), b.Len(), false)
			if err != nil {
				log.Fatal(err)
			}
			middle, err := report.SpacingRatios(levels, 0.5)
			if err != nil {
				log.Fatal(err)
			}
			ratios = append(ratios, middle...)
		}
		mean := 0.0
		for _, r := range ratios {
			mean += r / float64(len(ratios))
		}
		fmt.Printf("disorder %4.1f: mean ratio %.2f of %d\n", strength, mean, len(ratios))
	}
	fmt.Printf("independent levels %.4f, real random matrices %.4f\n", report.MeanRatioPoisson, report.MeanRatioGOE)
}
