// Entropy: the entropy of the first sites of a critical chain against their
// number, and the central charge from its slope (Calabrese and Cardy, J. Stat.
// Mech. P06002, 2004): S = (c/3) ln[(L/π) sin(πl/L)] + constant on a ring.
package main

import (
	"context"
	"fmt"
	"log"
	"math"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/lanczos/entangle"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

func main() {
	const length = 14
	ctx := context.Background()
	ring, err := lattice.Ring(length)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(length, basis.Fermion())
	if err != nil {
		log.Fatal(err)
	}
	h, err := model.TV(space, ring, []float64{1}, []float64{0}, nil)
	if err != nil {
		log.Fatal(err)
	}
	b, err := basis.New(ctx, space, basis.Sector{
		Charges:    []basis.ChargeValue{space.ParticleNumber().Is(length / 2)},
		Symmetries: ring.Sector(ring.Momentum(0, 0)),
	}, nil)
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
	state, err := entangle.RealState(b, ground.Vectors[0].Real)
	if err != nil {
		log.Fatal(err)
	}
	var part []int
	entropies := make([]float64, length)
	for l := 1; l <= length/2; l++ {
		part = append(part, l-1)
		cut, err := entangle.SpaceCut(ctx, []entangle.State{state}, part, nil)
		if err != nil {
			log.Fatal(err)
		}
		entropies[l] = cut.Entropy()
		second, err := cut.Renyi(2)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("%2d sites: S = %.8f nats, S_2 = %.8f\n", l, entropies[l], second)
	}
	chord := func(l int) float64 {
		return math.Log(length / math.Pi * math.Sin(math.Pi*float64(l)/length))
	}
	charge := 3 * (entropies[7] - entropies[3]) / (chord(7) - chord(3))
	fmt.Printf("central charge from 3 and 7 sites: %.3f (free fermions: 1)\n", charge)
}
