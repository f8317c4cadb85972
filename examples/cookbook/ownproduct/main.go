// Ownproduct: the solver asks for products and nothing else, so that an operator of
// your own needs no matrix: here a particle in a harmonic trap on a grid.
package main

import (
	"context"
	"fmt"
	"log"

	"ketloom/lanczos"
)

func main() {
	const (
		points = 601
		width  = 20.0
		step   = width / (points - 1)
	)
	// H = -½ d²/dx² + ½ x² by second differences.
	product := func(dst, src []float64) {
		for i := range src {
			x := -width/2 + float64(i)*step
			sum := (1/(step*step) + x*x/2) * src[i]
			if i > 0 {
				sum -= src[i-1] / (2 * step * step)
			}
			if i < points-1 {
				sum -= src[i+1] / (2 * step * step)
			}
			dst[i] = sum
		}
	}
	result, err := lanczos.Lowest(context.Background(), lanczos.RealFunc(points, product), 4, nil)
	if err != nil {
		log.Fatal(err)
	}
	for n, l := range result.Levels {
		fmt.Printf("level %d: %.6f, without a grid %.1f\n", n, l.Energy, float64(n)+0.5)
	}
}
