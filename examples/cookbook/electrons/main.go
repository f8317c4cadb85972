// Electrons: a half-filled Hubbard ring goes from metal to magnet as U grows; double
// occupancy falls and neighbouring spins correlate.
package main

import (
	"context"
	"fmt"
	"log"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

func main() {
	const length = 6
	ctx := context.Background()
	ring, err := lattice.Ring(length)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(length, basis.Electron())
	if err != nil {
		log.Fatal(err)
	}
	b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{
		space.ParticleNumber().Is(length), space.TwiceSz().Is(0),
	}}, nil)
	if err != nil {
		log.Fatal(err)
	}
	o := operator.On(space)
	double := o.NumberSpin(0, operator.Up).Times(o.NumberSpin(0, operator.Down))
	bond := o.Dot(0, 1)
	fmt.Println("  U   energy          double occupancy   S·S of neighbours")
	for _, u := range []float64{0, 1, 4, 16} {
		h, err := model.Hubbard(space, ring, []float64{1}, u, nil)
		if err != nil {
			log.Fatal(err)
		}
		m, err := matrix.New(ctx, h, b, nil)
		if err != nil {
			log.Fatal(err)
		}
		ground, err := lanczos.Lowest(ctx, m, 1, nil)
		if err != nil {
			log.Fatal(err)
		}
		values := make([]float64, 2)
		for i, a := range []operator.Operator{double, bond} {
			part, err := matrix.New(ctx, a, b, nil)
			if err != nil {
				log.Fatal(err)
			}
			psi := ground.Vectors[0].Real
			image := make([]float64, len(psi))
			part.Apply(image, psi)
			for k, x := range psi {
				values[i] += x * image[k]
			}
		}
		fmt.Printf("%3g   %.8f   %.6f           %.6f\n", u, ground.Levels[0].Energy, values[0], values[1])
	}
}
