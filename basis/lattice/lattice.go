package lattice

import (
	"fmt"
	"math"
)

// MostOrbitals is the largest number of sites in a cell.
const MostOrbitals = 64

// Lattice is an infinite lattice: cells at x·A1 + y·A2 for integers x, y, and
// the same Sites in each. A one-dimensional lattice has Dimension 1 and uses
// A1 only; its sites may still lie beside the line, as in a ladder.
type Lattice struct {
	Name      string
	Dimension int          // 1 or 2
	A1, A2    [2]float64   // Cartesian lattice vectors
	Sites     [][2]float64 // Cartesian positions in the cell, one an orbital
}

// Chain returns the chain with one site a cell.
func Chain() Lattice {
	return Lattice{Name: "chain", Dimension: 1, A1: [2]float64{1, 0}, Sites: [][2]float64{{0, 0}}}
}

// Square returns the square lattice.
func Square() Lattice {
	return Lattice{Name: "square", Dimension: 2, A1: [2]float64{1, 0}, A2: [2]float64{0, 1}, Sites: [][2]float64{{0, 0}}}
}

// Triangular returns the triangular lattice with A1 and A2 at 60 degrees: the
// nearest neighbours are at ±A1, ±A2, ±(A2-A1).
func Triangular() Lattice {
	return sixfold("triangular", 1, [][2]float64{{0, 0}})
}

// Honeycomb returns the honeycomb lattice: A (orbital 0) of cell r has the
// neighbours B (orbital 1) of the cells r, r-a1, r-a2; A1 and A2 at 60
// degrees have the length √3.
func Honeycomb() Lattice {
	return sixfold("honeycomb", math.Sqrt(3), [][2]float64{{0, 0}, {1. / 3, 1. / 3}})
}

// Kagome returns the kagome lattice: the sites 0, 1, 2 of cell r are an up
// triangle at 0, A1/2, A2/2; 1 of r is also a neighbour of 0 of r+a1 and of 2
// of r+a1-a2, and 2 of r of 0 of r+a2. A1 and A2 at 60 degrees have the
// length 2.
func Kagome() Lattice {
	return sixfold("kagome", 2, [][2]float64{{0, 0}, {0.5, 0}, {0, 0.5}})
}

// Checkerboard returns the square lattice of two sublattices, with A1 and A2
// along x and y of length √2: A (orbital 0) of cell r has the neighbours B
// (orbital 1, at (A1-A2)/2) of the cells r, r-a1, r+a2, r-a1+a2.
func Checkerboard() Lattice {
	a := math.Sqrt2
	return Lattice{
		Name: "checkerboard", Dimension: 2,
		A1: [2]float64{a, 0}, A2: [2]float64{0, a},
		Sites: [][2]float64{{0, 0}, {a / 2, -a / 2}},
	}
}

// sixfold is a lattice with vectors of the given length at 60 degrees and
// sites at fractions of them.
func sixfold(name string, length float64, fractions [][2]float64) Lattice {
	l := Lattice{Name: name, Dimension: 2, A1: [2]float64{length, 0}, A2: [2]float64{length / 2, length * math.Sqrt(3) / 2}}
	for _, f := range fractions {
		l.Sites = append(l.Sites, l.point(f[0], f[1]))
	}
	return l
}

// point returns x·A1 + y·A2.
func (l Lattice) point(x, y float64) [2]float64 {
	if l.Dimension == 1 {
		return [2]float64{x * l.A1[0], x * l.A1[1]}
	}
	return [2]float64{x*l.A1[0] + y*l.A2[0], x*l.A1[1] + y*l.A2[1]}
}

// fractions returns x, y with v = x·A1 + y·A2, the component along A1 in one
// dimension.
func (l Lattice) fractions(v [2]float64) (x, y float64) {
	if l.Dimension == 1 {
		return dot(v, l.A1) / dot(l.A1, l.A1), 0
	}
	det := cross(l.A1, l.A2)
	return cross(v, l.A2) / det, cross(l.A1, v) / det
}

func dot(a, b [2]float64) float64   { return a[0]*b[0] + a[1]*b[1] }
func cross(a, b [2]float64) float64 { return a[0]*b[1] - a[1]*b[0] }
func length(a [2]float64) float64   { return math.Hypot(a[0], a[1]) }

func plus(a, b [2]float64) [2]float64  { return [2]float64{a[0] + b[0], a[1] + b[1]} }
func minus(a, b [2]float64) [2]float64 { return [2]float64{a[0] - b[0], a[1] - b[1]} }

// Check reports why l is not a lattice: a dimension other than 1 or 2, lattice
// vectors that vanish or are parallel, no site in the cell or too many, two
// sites at one place, a number that is not finite.
func (l Lattice) Check() error {
	if l.Dimension != 1 && l.Dimension != 2 {
		return fmt.Errorf("lattice: %q has dimension %d; 1 and 2 are possible", l.Name, l.Dimension)
	}
	if len(l.Sites) == 0 || len(l.Sites) > MostOrbitals {
		return fmt.Errorf("lattice: %q has %d sites in its cell; 1 … %d are possible", l.Name, len(l.Sites), MostOrbitals)
	}
	for _, v := range append([][2]float64{l.A1, l.A2}, l.Sites...) {
		if s := math.Abs(v[0]) + math.Abs(v[1]); !(s <= 1e6) {
			return fmt.Errorf("lattice: %q holds the vector %v; its components must be numbers up to a million", l.Name, v)
		}
	}
	if !(length(l.A1) >= 1e-6) {
		return fmt.Errorf("lattice: %q has A1 = %v; give a vector that does not vanish", l.Name, l.A1)
	}
	if l.Dimension == 2 && !(math.Abs(cross(l.A1, l.A2)) >= 1e-6*length(l.A1)*length(l.A2) && length(l.A2) >= 1e-6) {
		return fmt.Errorf("lattice: %q has A1 = %v and A2 = %v, which span no area; give two independent vectors", l.Name, l.A1, l.A2)
	}
	for i, p := range l.Sites {
		for j := range i {
			x, y := l.fractions(minus(p, l.Sites[j]))
			rest := minus(minus(p, l.Sites[j]), l.point(math.Round(x), math.Round(y)))
			if length(rest) < 1e-6*length(l.A1) {
				return fmt.Errorf("lattice: %q has the sites %d and %d of the cell at the same place; give them different positions", l.Name, j, i)
			}
		}
	}
	return nil
}
