// Multiplets: at J2 = J1/2 a spin ring has two exactly degenerate ground states
// (Majumdar and Ghosh, J. Math. Phys. 10, 1399, 1969). The solver finds both
// without being told of any symmetry, and says how it looked for more.
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
	ring, err := lattice.Ring(14)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(14, basis.SpinHalf())
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
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		log.Fatal(err)
	}
	result, err := lanczos.Lowest(ctx, m, 3, nil)
	if err != nil {
		log.Fatal(err)
	}
	for i, l := range result.Levels {
		fmt.Printf("level %d: %.10f\n", i, l.Energy)
	}
	fmt.Println("exact ground state energy -3/8 a site:", -3.0/8*14)
	fmt.Println("no level missed, as far as the check can tell:", result.Complete)
}
