package lattice

import (
	"fmt"
	"math"

	"ketloom/basis/group"
)

// Rotation returns the permutation of sites by the rotation through the n-th
// part of a full turn, counter-clockwise, about a Cartesian centre (that of a
// site is [Cluster.Position]). Negative n turn clockwise.
//
// Errors: n = 0, or a rotation that is no symmetry of the cluster: it does not
// carry sites to sites or does not carry the period vectors to periods.
func (c *Cluster) Rotation(center [2]float64, n int) (group.Action, error) {
	if n == 0 {
		return group.Action{}, fmt.Errorf("lattice: a rotation through a full turn divided by 0; give the order of the rotation, such as 4")
	}
	s, co := math.Sincos(2 * math.Pi / float64(n))
	return c.carried([2][2]float64{{co, -s}, {s, co}}, center, fmt.Sprintf("the rotation of order %d about (%.4g, %.4g)", n, center[0], center[1]))
}

// Reflection returns the permutation of sites by the reflection in the line
// through a Cartesian point along a direction.
//
// Errors: a direction that vanishes, or a reflection that is no symmetry of
// the cluster.
func (c *Cluster) Reflection(point, direction [2]float64) (group.Action, error) {
	norm := length(direction)
	if !(norm > 0) || math.IsInf(norm, 0) {
		return group.Action{}, fmt.Errorf("lattice: a reflection in a line along %v; give a direction that does not vanish", direction)
	}
	x, y := direction[0]/norm, direction[1]/norm
	return c.carried([2][2]float64{{x*x - y*y, 2 * x * y}, {2 * x * y, y*y - x*x}}, point,
		fmt.Sprintf("the reflection in the line through (%.4g, %.4g) along (%.4g, %.4g)", point[0], point[1], direction[0], direction[1]))
}

// carried returns the permutation of sites by the isometry that applies the
// matrix about the centre.
func (c *Cluster) carried(matrix [2][2]float64, center [2]float64, what string) (group.Action, error) {
	turn := func(v [2]float64) [2]float64 { return [2]float64{dot(matrix[0], v), dot(matrix[1], v)} }
	for d, periodic := range c.periodic {
		if periodic && !c.isPeriod(turn(c.period(d))) {
			return group.Action{}, fmt.Errorf("lattice: %s is no symmetry of this cluster (%v): it does not carry the periods to periods", what, c)
		}
	}
	p := make(group.Permutation, c.Sites())
	for i := range p {
		at := plus(center, turn(minus(c.Position(i), center)))
		if p[i] = c.siteNear(at); p[i] < 0 {
			return group.Action{}, fmt.Errorf("lattice: %s is no symmetry of this cluster (%v): it carries site %d to (%.4g, %.4g), where there is none", what, c, i, at[0], at[1])
		}
	}
	return group.Translate(p), nil
}

// isPeriod reports whether v is an integer combination of the periods.
func (c *Cluster) isPeriod(v [2]float64) bool {
	x, y := c.shares(v)
	if !c.periodic[0] {
		x = 0
	}
	if !c.periodic[1] {
		y = 0
	}
	rest := minus(v, plus(scale(math.Round(x), c.period(0)), scale(math.Round(y), c.period(1))))
	return length(rest) < 1e-6*length(c.lattice.A1)
}

// siteNear returns the site at a Cartesian position, -1 if there is none.
func (c *Cluster) siteNear(at [2]float64) int {
	if s := math.Abs(at[0]) + math.Abs(at[1]); !(s < 1e9) {
		return -1
	}
	for orbital, p := range c.lattice.Sites {
		x, y := c.lattice.fractions(minus(at, p))
		x, y = math.Round(x), math.Round(y)
		if length(minus(minus(at, p), c.lattice.point(x, y))) < 1e-6*length(c.lattice.A1) {
			return c.SiteAt([2]int{int(x), int(y)}, orbital)
		}
	}
	return -1
}
