// Proof: what a Hamiltonian conserves and commutes with is decided by algebra, and
// where a symmetry is broken the term that breaks it is named.
package main

import (
	"fmt"
	"log"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/operator"
	"ketloom/operator/model"
)

func main() {
	ring, err := lattice.Ring(4)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(4, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	h, err := model.Heisenberg(space, ring, []float64{1})
	if err != nil {
		log.Fatal(err)
	}
	o := operator.On(space)
	shift := ring.Translations()[0]
	flip := group.Relabel(4, []int{1, 0})

	fmt.Println("S_1·S_2 =", o.Dot(1, 2).NormalOrdered())
	fmt.Println("[S⁺_0, S⁻_0] =", operator.Commutator(o.Raise(0), o.Lower(0)))
	fmt.Println("Hermitian:", h.IsHermitian())
	fmt.Println("total S_z:", h.Conserves(space.TwiceSz()))
	fmt.Println("translation:", h.Commutes(shift))
	fmt.Println("spin inversion:", h.Commutes(flip))

	field := h.Plus(o.Sz(2).Scale(0.3))
	fmt.Println("with a field on site 2:")
	fmt.Println("translation:", field.Commutes(shift))
	fmt.Println("spin inversion:", field.Commutes(flip))
	transverse := h.Plus(o.Sx(0))
	fmt.Println("with a transverse field:")
	fmt.Println("total S_z:", transverse.Conserves(space.TwiceSz()))
}
