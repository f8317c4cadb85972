// Tower: the lowest energy at each S_z of a square lattice antiferromagnet grows as
// S(S+1), the tower of states of a magnet that will order.
package main

import (
	"context"
	"fmt"
	"log"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

func main() {
	ctx := context.Background()
	c, err := lattice.Torus(lattice.Square(), 4, 4)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(16, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	h, err := model.Heisenberg(space, c, []float64{1})
	if err != nil {
		log.Fatal(err)
	}
	ground := 0.0
	fmt.Println(" S   energy           (E - E_0) / S(S+1)")
	for s := 0; s <= 8; s++ {
		b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(2 * s)}}, nil)
		if err != nil {
			log.Fatal(err)
		}
		m, err := matrix.New(ctx, h, b, nil)
		if err != nil {
			log.Fatal(err)
		}
		result, err := lanczos.Lowest(ctx, m, 1, nil)
		if err != nil {
			log.Fatal(err)
		}
		e := result.Levels[0].Energy
		if s == 0 {
			ground = e
			fmt.Printf("%2d   %.10f\n", s, e)
			continue
		}
		fmt.Printf("%2d   %.10f   %.6f\n", s, e, (e-ground)/float64(s*(s+1)))
	}
}
