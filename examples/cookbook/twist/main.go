// Twist: the ground state energy of an XXZ ring against a twist of its boundary,
// and the stiffness, the second derivative at no twist.
package main

import (
	"context"
	"fmt"
	"log"
	"math"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

const length = 10

// energy returns the ground state energy with a twist in turns.
func energy(ctx context.Context, turns float64) (float64, error) {
	ring, err := lattice.Ring(length)
	if err != nil {
		return 0, err
	}
	space, err := basis.Uniform(length, basis.SpinHalf())
	if err != nil {
		return 0, err
	}
	h, err := model.XXZ(space, ring, []float64{1}, []float64{0.5}, &model.Options{Twist: [2]float64{turns, 0}})
	if err != nil {
		return 0, err
	}
	b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}}, nil)
	if err != nil {
		return 0, err
	}
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		return 0, err
	}
	result, err := lanczos.Lowest(ctx, m, 1, nil)
	if err != nil {
		return 0, err
	}
	return result.Levels[0].Energy, nil
}

func main() {
	ctx := context.Background()
	for step := 0; step <= 4; step++ {
		turns := float64(step) / 8
		e, err := energy(ctx, turns)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("twist %.3f turns: E = %.8f\n", turns, e)
	}
	const small = 0.002 // turns
	middle, err := energy(ctx, 0)
	if err != nil {
		log.Fatal(err)
	}
	right, err := energy(ctx, small)
	if err != nil {
		log.Fatal(err)
	}
	angle := 2 * math.Pi * small
	fmt.Printf("stiffness d²E/dφ² = %.4f\n", 2*(right-middle)/(angle*angle))
}
