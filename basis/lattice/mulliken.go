package lattice

import (
	"fmt"
	"math"
	"math/cmplx"
)

// irrep is a row of the character table of a point group in the plane.
type irrep struct {
	name      string
	character func(m Isometry) complex128
}

// characterTable returns the irreducible representations of the point group
// that the linear parts of the operations form, with the names of R. S.
// Mulliken, J. Chem. Phys. 23, 1997 (1955):
//
//	C1         A
//	Cs         A′ A″, even and odd under the reflection
//	Cn         A, for even n also B, odd under the rotation by 1/n of a turn,
//	           and E± or El±, in which that rotation is exp(±2πi·l/n)
//	Cnv        A1 A2, for even n also B1 B2, and E or El, in which it has the
//	           trace 2cos(2πl/n)
//
// 1 is even and 2 odd under the reflections σv: those equivalent to the one
// whose axis has the smallest angle to the positive x axis, counter-clockwise
// in [0, π). For A2 and the others this settles the remaining reflections.
func characterTable(parts []Isometry) []irrep {
	n, reflections, first := 0, 0, math.Inf(1)
	for _, m := range parts {
		if m.Reflects() {
			reflections++
			first = min(first, m.Angle())
		} else {
			n++
		}
	}
	if reflections > 0 {
		return reflecting(n, first)
	}
	turning := func(l int) func(Isometry) complex128 {
		return func(m Isometry) complex128 { return cmplx.Exp(complex(0, float64(l)*m.Angle())) }
	}
	table := []irrep{{"A", turning(0)}}
	if n%2 == 0 {
		table = append(table, irrep{"B", turning(n / 2)})
	}
	for l := 1; 2*l < n; l++ {
		table = append(table, irrep{degenerate(l, n) + "+", turning(l)}, irrep{degenerate(l, n) + "-", turning(-l)})
	}
	return table
}

func degenerate(l, n int) string {
	if n <= 4 {
		return "E"
	}
	return fmt.Sprintf("E%d", l)
}

// reflecting returns the table of Cnv, Cs for n = 1, with the axis of a σv.
func reflecting(n int, axis float64) []irrep {
	// even and odd under σv, with cos(l·angle) and sin(l·angle) about the axis.
	row := func(l int, sign float64) func(Isometry) complex128 {
		return func(m Isometry) complex128 {
			if m.Reflects() {
				return complex(sign*math.Cos(2*float64(l)*(m.Angle()-axis)), 0)
			}
			return complex(math.Cos(float64(l)*m.Angle()), 0)
		}
	}
	if n == 1 {
		return []irrep{{"A′", row(0, 1)}, {"A″", row(0, -1)}}
	}
	table := []irrep{{"A1", row(0, 1)}, {"A2", row(0, -1)}}
	if n%2 == 0 {
		table = append(table, irrep{"B1", row(n/2, 1)}, irrep{"B2", row(n/2, -1)})
	}
	for l := 1; 2*l < n; l++ {
		table = append(table, irrep{degenerate(l, n), func(m Isometry) complex128 {
			if m.Reflects() {
				return 0
			}
			return complex(2*math.Cos(float64(l)*m.Angle()), 0)
		}})
	}
	return table
}
