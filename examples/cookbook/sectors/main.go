// Sectors: the momentum sectors of fermions on a torus, their dimensions beside
// the binomial that they add up to, and one that the Pauli principle empties.
package main

import (
	"context"
	"errors"
	"fmt"
	"log"

	"ketloom/basis"
	"ketloom/basis/lattice"
)

func main() {
	ctx := context.Background()
	torus, err := lattice.Torus(lattice.Square(), 3, 2)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(torus.Sites(), basis.Fermion())
	if err != nil {
		log.Fatal(err)
	}
	for n := 1; n <= 6; n++ {
		fmt.Printf("%d fermions:", n)
		total := 0
		for _, k := range torus.Momenta() {
			b, err := basis.New(ctx, space, basis.Sector{
				Charges:    []basis.ChargeValue{space.ParticleNumber().Is(n)},
				Symmetries: torus.Sector(k),
			}, nil)
			if errors.Is(err, basis.ErrEmpty) {
				fmt.Printf("  %v:0", k.Index)
				continue
			}
			if err != nil {
				log.Fatal(err)
			}
			fmt.Printf("  %v:%d", k.Index, b.Len())
			total += b.Len()
		}
		fmt.Println("  sum:", total)
	}
}
