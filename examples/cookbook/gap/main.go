// Gap: the spin gap of Heisenberg rings, from the lowest levels with S_z = 0 and
// S_z = 1, and how it shrinks with the length.
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

// lowest returns the lowest level of a ring at a value of 2·S_z.
func lowest(ctx context.Context, length, twiceSz int) (lanczos.Level, error) {
	ring, err := lattice.Ring(length)
	if err != nil {
		return lanczos.Level{}, err
	}
	space, err := basis.Uniform(length, basis.SpinHalf())
	if err != nil {
		return lanczos.Level{}, err
	}
	h, err := model.Heisenberg(space, ring, []float64{1})
	if err != nil {
		return lanczos.Level{}, err
	}
	b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(twiceSz)}}, nil)
	if err != nil {
		return lanczos.Level{}, err
	}
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		return lanczos.Level{}, err
	}
	result, err := lanczos.Lowest(ctx, m, 1, nil)
	if err != nil {
		return lanczos.Level{}, err
	}
	return result.Levels[0], nil
}

func main() {
	ctx := context.Background()
	fmt.Println("sites   E(S=0)        gap to S=1    gap × sites")
	for length := 4; length <= 14; length += 2 {
		singlet, err := lowest(ctx, length, 0)
		if err != nil {
			log.Fatal(err)
		}
		triplet, err := lowest(ctx, length, 2)
		if err != nil {
			log.Fatal(err)
		}
		gap := triplet.Energy - singlet.Energy
		fmt.Printf("%5d   %.8f   %.8f   %.4f\n", length, singlet.Energy, gap, gap*float64(length))
	}
}
