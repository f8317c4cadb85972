package entangle_test

import (
	"context"
	"fmt"

	"ketloom/basis"
	"ketloom/lanczos/entangle"
)

// Two singlets, of sites 0 and 2 and of sites 1 and 3.
func ExampleSpaceCut() {
	ctx := context.Background()
	space, err := basis.Uniform(4, basis.SpinHalf())
	if err != nil {
		fmt.Println(err)
		return
	}
	b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}}, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	psi := make([]float64, b.Len())
	for c, x := range map[basis.Configuration]float64{0b0011: 0.5, 0b0110: -0.5, 0b1001: -0.5, 0b1100: 0.5} {
		i, _ := b.Index(c)
		psi[i] = x
	}
	state, err := entangle.RealState(b, psi)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, sites := range [][]int{{0, 2}, {0, 1}} {
		cut, err := entangle.SpaceCut(ctx, []entangle.State{state}, sites, nil)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("sites %v: entropy %.4f\n", sites, cut.Entropy())
		for _, block := range cut.Blocks {
			fmt.Printf("  %v = %v: weights %.3f\n", cut.Names, block.Charges, block.Weights)
		}
	}
	// Output:
	// sites [0 2]: entropy 0.0000
	//   [2Sz] = [0]: weights [1.000 0.000]
	// sites [0 1]: entropy 1.3863
	//   [2Sz] = [-2]: weights [0.250]
	//   [2Sz] = [0]: weights [0.250 0.250]
	//   [2Sz] = [2]: weights [0.250]
}

// Two of three fermions, in a Slater determinant.
func ExampleParticleCut() {
	ctx := context.Background()
	space, err := basis.Uniform(6, basis.Fermion())
	if err != nil {
		fmt.Println(err)
		return
	}
	b, err := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(3)}}, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	psi := make([]complex128, b.Len())
	psi[0] = 1
	state, err := entangle.ComplexState(b, psi)
	if err != nil {
		fmt.Println(err)
		return
	}
	cut, err := entangle.ParticleCut(ctx, []entangle.State{state}, 2, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, l := range cut.Levels() {
		fmt.Printf("ξ = %.6f\n", l.Xi)
	}
	// Output:
	// ξ = 1.098612
	// ξ = 1.098612
	// ξ = 1.098612
}

// Quasiholes of the 1/3 state: one particle in three consecutive orbitals.
func ExampleExclusion() {
	rule := entangle.Exclusion{Most: 1, Range: 3, Orbitals: 6}
	patterns, err := rule.Configurations(2)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, p := range patterns {
		fmt.Println(p)
	}
	momentum := entangle.OrbitalCharge{Modulus: 6, Values: []int{0, 1, 2, 3, 4, 5}}
	sectors, err := rule.BySector(2, []entangle.OrbitalCharge{momentum})
	fmt.Println(sectors, err)
	rule.Orbitals = 30
	fmt.Println(rule.Count(5))
	// Output:
	// [0 0 1 0 0 1]
	// [0 1 0 0 1 0]
	// [1 0 0 1 0 0]
	// [{[1] 1} {[3] 1} {[5] 1}] <nil>
	// 23256 <nil>
}
