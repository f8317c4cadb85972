package lattice

import (
	"math"

	"ketloom/basis/group"
)

// shape of a Bravais lattice, as far as points of its Brillouin zone have
// names.
type shape int

const (
	oblique shape = iota
	rectangular
	square
	hexagonal60 // A1 and A2 at 60 degrees
	hexagonal120
)

// shapeOf returns the shape that two lattice vectors show.
func shapeOf(p, q [2]float64) shape {
	lp, lq, angle := length(p), length(q), dot(p, q)/(length(p)*length(q))
	equal := math.Abs(lp-lq) < 1e-6*lp
	switch {
	case math.Abs(angle) < 1e-6 && equal:
		return square
	case math.Abs(angle) < 1e-6:
		return rectangular
	case equal && math.Abs(angle-0.5) < 1e-6:
		return hexagonal60
	case equal && math.Abs(angle+0.5) < 1e-6:
		return hexagonal120
	}
	return oblique
}

// pointNames returns the names of the stars of momenta:
//
//	Γ                  k = 0
//	X                  (1/2) in one periodic direction
//	X, Y, M            square lattice: (1/2, 0), (0, 1/2) if not equivalent to it, (1/2, 1/2)
//	X, Y, S            rectangular lattice
//	M, M′, M″; K, K′   triangular lattice: half reciprocal vectors; corners
//
// and k/2π along a1 and a2 for all others. An open cluster has no names.
func (c *Cluster) pointNames(stars [][]Momentum) []string {
	names := make([]string, len(stars))
	count := map[string]int{}
	for i, star := range stars {
		name := c.pointName(star)
		names[i] = name
		if name == "M" || name == "K" {
			for range count[name] {
				names[i] += "′"
			}
			count[name]++
		}
	}
	return names
}

func (c *Cluster) pointName(star []Momentum) string {
	k := star[0]
	half := group.NewTurn(1, 2)
	switch {
	case !c.periodic[0] && !c.periodic[1]:
		return ""
	case k.Turns[0].IsZero() && k.Turns[1].IsZero():
		return "Γ"
	case !c.periodic[0] || !c.periodic[1]:
		turn := k.Turns[0].Add(k.Turns[1]) // one of them is zero
		if turn.Equal(half) {
			return "X"
		}
		return turn.String()
	}
	x, y, form := c.alongBravais(k)
	third := group.NewTurn(1, 3)
	halves := x.Times(2).IsZero() && y.Times(2).IsZero()
	switch {
	case (form == hexagonal60 || form == hexagonal120) && halves:
		return "M"
	case form == hexagonal60 && (x.Equal(third) && y.Equal(third.Neg()) || y.Equal(third) && x.Equal(third.Neg())),
		form == hexagonal120 && x.Equal(y) && x.Times(3).IsZero():
		return "K"
	case (form == square || form == rectangular) && halves:
		return c.rectangularName(star, form)
	}
	return k.String()
}

// rectangularName names the momenta that are half a reciprocal vector.
func (c *Cluster) rectangularName(star []Momentum, form shape) string {
	name := "Y"
	for _, k := range star {
		x, y, _ := c.alongBravais(k)
		switch {
		case !x.IsZero() && !y.IsZero() && form == square:
			return "M"
		case !x.IsZero() && !y.IsZero():
			return "S"
		case !x.IsZero():
			name = "X"
		}
	}
	return name
}

// alongBravais returns k/2π along two vectors that show the shape of the
// lattice: A1 and A2 if they do, else the shortest ones.
func (c *Cluster) alongBravais(k Momentum) (x, y group.Turn, form shape) {
	if form := shapeOf(c.lattice.A1, c.lattice.A2); form != oblique {
		return k.Turns[0], k.Turns[1], form
	}
	p, q := reduced(c.lattice.A1, c.lattice.A2)
	along := func(v [2]float64) group.Turn {
		x, y := c.lattice.fractions(v)
		return k.Turns[0].Times(int64(math.Round(x))).Add(k.Turns[1].Times(int64(math.Round(y))))
	}
	return along(p), along(q), shapeOf(p, q)
}
