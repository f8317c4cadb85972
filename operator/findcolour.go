package operator

import (
	"fmt"
	"math"
	"math/cmplx"
	"sort"
)

// sameNumber is the relation by which [Operator.Equal] compares coefficients.
func sameNumber(x, y complex128) bool {
	return cmplx.Abs(x-y) <= zeroBelow*(cmplx.Abs(x)+cmplx.Abs(y))
}

// palette gives equal numbers the same colour.
type palette struct {
	numbers []complex128 // distinct, by magnitude
	class   *classes
	place   map[complex128]int
}

// newPalette joins numbers that are the same within rounding. Numbers that are
// linked by others in between, but are not the same, are an error.
func newPalette(numbers []complex128) (*palette, error) {
	p := &palette{place: map[complex128]int{}}
	for _, z := range numbers {
		if cmplx.IsNaN(z) || cmplx.IsInf(z) {
			return nil, fmt.Errorf("operator: the coefficient %v; coefficients must be finite", z)
		}
		if _, known := p.place[z]; !known {
			p.place[z] = 0
			p.numbers = append(p.numbers, z)
		}
	}
	sort.Slice(p.numbers, func(x, y int) bool { return smaller(p.numbers[x], p.numbers[y]) })
	for i, z := range p.numbers {
		p.place[z] = i
	}
	p.class = newClasses(len(p.numbers))
	for from := 0; from < len(p.numbers); {
		to := from + 1
		for to < len(p.numbers) && sameNumber(complex(cmplx.Abs(p.numbers[to-1]), 0), complex(cmplx.Abs(p.numbers[to]), 0)) {
			to++
		}
		p.joinShell(from, to)
		from = to
	}
	return p, p.check()
}

func smaller(x, y complex128) bool {
	switch ax, ay := cmplx.Abs(x), cmplx.Abs(y); {
	case ax != ay:
		return ax < ay
	case real(x) != real(y):
		return real(x) < real(y)
	}
	return imag(x) < imag(y)
}

// joinShell joins numbers of nearly one magnitude: those in the same or
// neighbouring squares of a grid as wide as the tolerance are compared.
func (p *palette) joinShell(from, to int) {
	width := 2 * zeroBelow * cmplx.Abs(p.numbers[to-1])
	squares := map[[2]float64][]int{}
	for i := from; i < to; i++ {
		z := p.numbers[i]
		x, y := math.Floor(real(z)/width), math.Floor(imag(z)/width)
		for dx := -1.0; dx <= 1; dx++ {
			for dy := -1.0; dy <= 1; dy++ {
				for _, j := range squares[[2]float64{x + dx, y + dy}] {
					if sameNumber(z, p.numbers[j]) {
						p.class.join(i, j)
					}
				}
			}
		}
		squares[[2]float64{x, y}] = append(squares[[2]float64{x, y}], i)
	}
}

// check reports a class whose first and farthest number differ.
func (p *palette) check() error {
	for _, list := range p.class.lists() {
		first := p.numbers[list[0]]
		for _, i := range list {
			if z := p.numbers[i]; !sameNumber(first, z) {
				return fmt.Errorf("operator: the coefficients %.17g and %.17g differ, but are linked by others in between that are equal within rounding; round the coefficients, so that equal ones are equal", first, z)
			}
		}
	}
	return nil
}

// of returns the colour of a number that was given to newPalette.
func (p *palette) of(z complex128) int { return p.class.root(p.place[z]) }

// classes is a partition of 0 … n-1 that only grows coarser; the root of a
// class is its smallest member.
type classes struct{ up []int }

func newClasses(n int) *classes {
	c := &classes{up: make([]int, n)}
	for i := range c.up {
		c.up[i] = i
	}
	return c
}

func (c *classes) root(i int) int {
	for c.up[i] != i {
		c.up[i] = c.up[c.up[i]]
		i = c.up[i]
	}
	return i
}

func (c *classes) join(i, j int) {
	i, j = c.root(i), c.root(j)
	c.up[max(i, j)] = min(i, j)
}

// joinAll joins every point with its image.
func (c *classes) joinAll(p []int) {
	for i, to := range p {
		c.join(i, to)
	}
}

// size returns the number of members of the class of i.
func (c *classes) size(i int) int {
	n, r := 0, c.root(i)
	for j := range c.up {
		if c.root(j) == r {
			n++
		}
	}
	return n
}

// lists returns the classes, each ascending, by their smallest members.
func (c *classes) lists() [][]int {
	members := map[int][]int{}
	for i := range c.up {
		members[c.root(i)] = append(members[c.root(i)], i)
	}
	var all [][]int
	for i := range c.up {
		if c.up[i] == i {
			all = append(all, members[i])
		}
	}
	return all
}
