// Blockade: a chain of atoms in which no two neighbours may be excited at once. The
// constraint is part of the basis; the Hamiltonian is projected by it.
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
)

func main() {
	const length = 16
	ctx := context.Background()
	ring, err := lattice.Ring(length)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(length, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	o := operator.On(space)
	var bans []basis.Constraint
	var flips []operator.Operator
	for i := 0; i < length; i++ {
		bans = append(bans, basis.AtMost(1, []int{i, (i + 1) % length}))
		flips = append(flips, o.Sx(i).Scale(2))
	}
	h := operator.Sum(flips)
	total := 0
	for k := 0; k < length; k++ {
		b, err := basis.New(ctx, space, basis.Sector{Constraints: bans, Symmetries: ring.Sector(ring.Momentum(k, 0))}, nil)
		if err != nil {
			log.Fatal(err)
		}
		total += b.Len()
		if k > 2 {
			continue
		}
		m, err := matrix.New(ctx, h, b, nil)
		if err != nil {
			log.Fatal(err)
		}
		result, err := lanczos.Lowest(ctx, m, 2, nil)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("momentum %d: %d states, lowest levels %.8f %.8f\n", k, b.Len(), result.Levels[0].Energy, result.Levels[1].Energy)
	}
	fmt.Println("allowed configurations of all momenta:", total)
}
