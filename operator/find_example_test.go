package operator_test

import (
	"context"
	"fmt"

	"ketloom/basis"
	"ketloom/operator"
)

// A molecule of eight spins, given as a list of bonds: a cube with one body
// diagonal. No lattice is named; its symmetries are found, and the invariant
// sector of S_z = 0 is made with them.
func ExampleOperator_FindSymmetries() {
	ctx := context.Background()
	space, _ := basis.Uniform(8, basis.SpinHalf())
	o := operator.On(space)
	bonds := [][2]int{{0, 1}, {0, 2}, {0, 4}, {1, 3}, {1, 5}, {2, 3}, {2, 6}, {3, 7}, {4, 5}, {4, 6}, {5, 7}, {6, 7}}
	h := o.Dot(0, 7).Scale(0.5)
	for _, b := range bonds {
		h = h.Plus(o.Dot(b[0], b[1]))
	}

	found, err := h.FindSymmetries(ctx, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(found)
	fmt.Println(found.Orbits)

	sector := basis.Sector{
		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: found.Invariant(),
	}
	b, err := basis.New(ctx, space, sector, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(b.Len(), "of 70 states")
	// Output:
	// order 24 from 3 generators; 2 orbits of sites; spin inversion
	// [[0 7] [1 2 3 4 5 6]]
	// 9 of 70 states
}
