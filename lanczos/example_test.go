package lanczos_test

import (
	"context"
	"fmt"

	"ketloom/lanczos"
)

// A particle that hops on a ring of 1000 sites: levels -2cos(2πm/1000), all but the
// lowest doubly degenerate.
func ExampleLowest() {
	const n = 1000
	op := lanczos.RealFunc(n, func(dst, src []float64) {
		for i := range dst {
			dst[i] = -src[(i+1)%n] - src[(i+n-1)%n]
		}
	})
	result, err := lanczos.Lowest(context.Background(), op, 3, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println("complete:", result.Complete, "multiplet cut:", result.CutMultiplet)
	for _, level := range result.Levels {
		fmt.Printf("%.9f\n", level.Energy)
	}
	// Output:
	// complete: true multiplet cut: false
	// -2.000000000
	// -1.999960522
	// -1.999960522
}
