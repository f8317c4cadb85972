// Counting: how many quasihole states a 1/3 state has for given particles, in all and
// by momentum on a lattice torus, from the exclusion rule.
package main

import (
	"fmt"
	"log"

	"ketloom/lanczos/entangle"
)

func main() {
	rule := entangle.Exclusion{Most: 1, Range: 3, Orbitals: 24}
	for n := 1; n <= 8; n++ {
		count, err := rule.Count(n)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("%d particles in 24 orbitals: %d states\n", n, count)
	}
	sectors, err := rule.OnTorus(8, 6, 4)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Print("8 particles on 6×4 cells, momenta of the ground states:")
	for _, s := range sectors {
		for i := uint64(0); i < s.Count; i++ {
			fmt.Printf(" %v", s.Charges)
		}
	}
	fmt.Println()
}
