// Correlations: spin correlations of the 4×4 square lattice antiferromagnet with
// distance, and its static structure factor at two momenta.
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

// expectation returns ⟨ψ|A|ψ⟩ of a real state.
func expectation(ctx context.Context, a operator.Operator, b *basis.Basis, psi []float64) (float64, error) {
	m, err := matrix.New(ctx, a, b, nil)
	if err != nil {
		return 0, err
	}
	image := make([]float64, len(psi))
	m.Apply(image, psi)
	sum := 0.0
	for i, x := range psi {
		sum += x * image[i]
	}
	return sum, nil
}

func main() {
	ctx := context.Background()
	c, err := lattice.Torus(lattice.Square(), 4, 4)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(c.Sites(), basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	h, err := model.Heisenberg(space, c, []float64{1})
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
	ground, err := lanczos.Lowest(ctx, m, 1, nil)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("energy a site: %.10f\n", ground.Levels[0].Energy/16)
	o := operator.On(space)
	uniform, staggered := 0.0, 0.0
	for site := 0; site < 16; site++ {
		s, err := expectation(ctx, o.Dot(0, site), b, ground.Vectors[0].Real)
		if err != nil {
			log.Fatal(err)
		}
		if site%4 <= 2 && site/4 <= site%4 {
			fmt.Printf("⟨S_0·S_r⟩ at r = (%d,%d), distance %.4f: %+.8f\n", site%4, site/4, c.Distance(0, site), s)
		}
		uniform += s
		if (site%4+site/4)%2 == 0 {
			staggered += s
		} else {
			staggered -= s
		}
	}
	fmt.Printf("structure factor at (0,0): %.6f, at (π,π): %.6f\n", uniform+0, staggered)
}
