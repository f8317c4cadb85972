package pages_test

import (
	"fmt"

	"ketloom/basis/pages"
)

func Example() {
	x := pages.Floats(3)
	x[1] = 0.5
	fmt.Println(x)
	// Output: [0 0.5 0]
}
