// Poles: what neutron scattering sees of a spin ring at momentum q: the energies
// above the ground state and weights |⟨n|S^z_q|0⟩|² from a matrix between two
// momentum sectors.
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

const length = 8

func main() {
	ctx := context.Background()
	ring, err := lattice.Ring(length)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(length, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	h, err := model.Heisenberg(space, ring, []float64{1})
	if err != nil {
		log.Fatal(err)
	}
	home, ground, err := sector(ctx, space, ring, h, 0, 1)
	if err != nil {
		log.Fatal(err)
	}
	// Only the part of S^z_0 with the right momentum counts between two sectors; it
	// is S^z_q divided by the square root of the length.
	local := operator.On(space).Sz(0)
	for q := 1; q <= length/2; q++ {
		b, all, err := sector(ctx, space, ring, h, q, 0)
		if err != nil {
			log.Fatal(err)
		}
		m, err := matrix.Between(ctx, local, home, b, nil)
		if err != nil {
			log.Fatal(err)
		}
		image := make([]complex128, b.Len())
		m.ApplyComplex(image, ground.Vectors[0].AsComplex())
		total, strongest, place := 0.0, 0.0, 0.0
		for n, v := range all.Vectors {
			var z complex128
			for i, x := range v.AsComplex() {
				z += complex(real(x), -imag(x)) * image[i]
			}
			weight := length * (real(z)*real(z) + imag(z)*imag(z))
			total += weight
			if weight > strongest {
				strongest, place = weight, all.Levels[n].Energy-ground.Levels[0].Energy
			}
		}
		fmt.Printf("q = 2π·%d/%d: total weight %.8f, strongest pole at %.8f with %.8f\n", q, length, total, place, strongest)
	}
}

// sector returns the basis of a momentum with S_z = 0 and its lowest levels; all of
// them if levels is 0.
func sector(ctx context.Context, space *basis.Space, ring *lattice.Cluster, h operator.Operator, k, levels int) (*basis.Basis, *lanczos.Result, error) {
	b, err := basis.New(ctx, space, basis.Sector{
		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: ring.Sector(ring.Momentum(k, 0)),
	}, nil)
	if err != nil {
		return nil, nil, err
	}
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		return nil, nil, err
	}
	if levels == 0 {
		levels = b.Len()
	}
	result, err := lanczos.Lowest(ctx, m, levels, nil)
	return b, result, err
}
