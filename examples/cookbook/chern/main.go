// Chern: the Chern number of the lower band of Haldane's honeycomb model (Phys. Rev.
// Lett. 61, 2015, 1988) against the mass that competes with it.
package main

import (
	"fmt"
	"log"
	"math"

	"ketloom/operator/model"
)

func main() {
	critical := 3 * math.Sqrt(3) * 0.2
	fmt.Printf("transition expected at M = 3√3 t2 = %.4f\n", critical)
	for _, mass := range []float64{0, 0.5, 0.9, 1.0, 1.1, 1.5} {
		bands := model.Haldane(1, 0.2, math.Pi/2, mass, 0)
		top, err := bands.Chern(0, 24, 24)
		if err != nil {
			log.Fatal(err)
		}
		shape, err := bands.Dispersion(0, 24, 24)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("M = %.1f: Chern number %+d, gap above the band %.4f, flatness %.2f\n", mass, top.Chern, shape.GapAbove, shape.Flatness())
	}
}
