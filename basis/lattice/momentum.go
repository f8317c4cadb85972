package lattice

import (
	"fmt"
	"math"

	"ketloom/basis/group"
)

// Momentum is an allowed crystal momentum of a cluster.
type Momentum struct {
	Index [2]int        // (n1, n2); on a torus of l1×l2 cells k·a1 = 2π·n1/l1, k·a2 = 2π·n2/l2
	Turns [2]group.Turn // k·a1/2π and k·a2/2π, exact, in [0, 1)
	K     [2]float64    // Cartesian; any other choice differs by a reciprocal lattice vector
}

// String writes k/2π along a1 and a2, such as "(1/4, 1/2)".
func (k Momentum) String() string { return fmt.Sprintf("(%v, %v)", k.Turns[0], k.Turns[1]) }

// lengths returns the ranges of the momentum indices.
func (c *Cluster) lengths() (n1, n2 int) {
	n1, n2 = c.periods.m, c.periods.h
	if !c.periodic[0] {
		n1 = 1
	}
	if !c.periodic[1] {
		n2 = 1
	}
	return n1, n2
}

// Momenta returns all allowed momenta, in ascending order of n1 + m·n2, with
// n1 < m and n2 < h of the normal form: as many as there are cells on a periodic
// cluster. A direction with open boundaries has the index 0 only, so that an
// open cluster has one entry, which imposes nothing.
func (c *Cluster) Momenta() []Momentum {
	l1, l2 := c.lengths()
	all := make([]Momentum, 0, l1*l2)
	for n2 := range l2 {
		for n1 := range l1 {
			all = append(all, c.Momentum(n1, n2))
		}
	}
	return all
}

// Momentum returns the allowed momentum of index (n1, n2), any integers; on a
// torus of l1×l2 cells they count modulo l1 and l2. In general
//
//	k·a1/2π = n1/m,   k·a2/2π = (n2 - s·n1/m)/h
//
// with the normal form (m, 0), (s, h) of the period vectors; the index is
// reduced to 0 <= n1 < m, 0 <= n2 < h. Indices along an open direction are
// taken as 0.
func (c *Cluster) Momentum(n1, n2 int) Momentum {
	l1, l2 := c.lengths()
	m, s, h := l1, c.periods.s, l2
	// n1 + m leaves k alone if n2 grows by s.
	shift := floorDiv(n1, m)
	n1, n2 = n1-m*shift, modulo(modulo(n2, h)-modulo(s, h)*modulo(shift, h), h)
	k := Momentum{Index: [2]int{n1, n2}}
	k.Turns[0] = group.NewTurn(int64(n1), int64(m))
	k.Turns[1] = group.NewTurn(int64(n2)*int64(m)-int64(s)*int64(n1), int64(m)*int64(h))
	k.K = c.lattice.wave(fraction(k.Turns[0]), fraction(k.Turns[1]))
	return k
}

func fraction(t group.Turn) float64 { return float64(t.Num) / float64(t.Den) }

// wave returns the vector k with k·A1 = 2πx and k·A2 = 2πy; along A1 in one
// dimension.
func (l Lattice) wave(x, y float64) [2]float64 {
	if l.Dimension == 1 {
		return scale(2*math.Pi*x/dot(l.A1, l.A1), l.A1)
	}
	f := 2 * math.Pi / cross(l.A1, l.A2)
	return [2]float64{f * (x*l.A2[1] - y*l.A1[1]), f * (y*l.A1[0] - x*l.A2[0])}
}

// Translations returns the translations by a1 and by a2, which send each site
// to the one that lies there: one for each periodic direction, none on an open
// cluster.
func (c *Cluster) Translations() []group.Action {
	var list []group.Action
	if c.periodic[0] {
		list = append(list, c.translation([2]int{1, 0}))
	}
	if c.periodic[1] {
		list = append(list, c.translation([2]int{0, 1}))
	}
	return list
}

func (c *Cluster) translation(by [2]int) group.Action {
	p := make(group.Permutation, c.Sites())
	for i := range p {
		cell, orbital := c.CellOf(i)
		p[i] = c.SiteAt([2]int{cell[0] + by[0], cell[1] + by[1]}, orbital)
	}
	return group.Translate(p)
}

// Sector returns the symmetries of the sector of momentum k: the translations
// T_a with the eigenvalues exp(-ik·a). A momentum that the cluster does not
// allow is refused where the sector is used.
func (c *Cluster) Sector(k Momentum) []group.Eigenvalue {
	var list []group.Eigenvalue
	d := 0
	for _, t := range c.Translations() {
		if !c.periodic[d] {
			d++
		}
		list = append(list, group.Eigenvalue{Generator: t, Turn: k.Turns[d].Neg()})
		d++
	}
	return list
}
