package dense_test

import (
	"fmt"

	"ketloom/lanczos/dense"
)

// A spin in a field along y: the Hermitian matrix is complex, its levels are real.
func ExampleEigenComplex() {
	values, vectors, err := dense.EigenComplex([]complex128{0, -1i, 1i, 0}, 2, true)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.6f\n", values)
	fmt.Printf("%.4f\n", vectors[2:4])
	// Output:
	// [-1.000000 1.000000]
	// [(0.7071+0.0000i) (0.0000+0.7071i)]
}

func ExampleSingularReal() {
	s, err := dense.SingularReal([]float64{1, 1, 0, 0, 0, 2}, 2, 3)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.6f\n", s)
	// Output:
	// [2.000000 1.414214]
}
