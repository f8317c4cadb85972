// Molecule: a cluster of eight spins on the corners of a cube, given as a list of
// bonds. The symmetries are found from the Hamiltonian itself, used for the lowest
// level, and the total spin of that level is read from its vector.
package main

import (
	"context"
	"fmt"
	"log"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/lanczos/label"
	"ketloom/operator"
	"ketloom/operator/matrix"
)

func main() {
	ctx := context.Background()
	space, err := basis.Uniform(8, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	o := operator.On(space)
	h := o.Zero()
	for i := 0; i < 8; i++ { // corners that differ in one of three bits are neighbours
		for bit := 1; bit < 8; bit *= 2 {
			if j := i ^ bit; i < j {
				h = h.Plus(o.Dot(i, j))
			}
		}
	}
	found, err := h.FindSymmetries(ctx, nil)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Println(found)
	b, err := basis.New(ctx, space, basis.Sector{
		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: found.Invariant(),
	}, nil)
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
	spin, err := label.Spin(ctx, b, [][]complex128{result.Vectors[0].AsComplex()}, nil)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("%d invariant states, lowest level %.10f with %s\n", b.Len(), result.Levels[0].Energy, spin.Text())
}
