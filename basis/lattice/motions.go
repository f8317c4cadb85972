package lattice

import (
	"math"
	"sort"

	"ketloom/basis/group"
)

// linearParts returns the orthogonal matrices that may belong to a symmetry:
// those that carry periods to periods and cells to cells or, on an open
// cluster, one site to another about the centre. The identity comes first,
// then rotations and reflections by angle.
func (c *Cluster) linearParts() []Isometry {
	var list []Isometry
	add := func(m [2][2]float64) {
		next := Isometry{Linear: m}
		for _, known := range list {
			if length(minus(known.Linear[0], m[0]))+length(minus(known.Linear[1], m[1])) < 1e-6 {
				return
			}
		}
		if c.keepsCells(next) {
			list = append(list, next)
		}
	}
	direction, line := c.onLine()
	switch {
	case line:
		add(rotation(0))
		if direction != [2]float64{} {
			add(reflection(math.Atan2(direction[1], direction[0]) + math.Pi/2))
		}
	case c.periodic[0] && c.periodic[1]:
		p, q := reduced(c.period(0), c.period(1))
		axis := math.Atan2(p[1], p[0])
		for _, u := range neighbours(p, q) {
			if math.Abs(length(u)-length(p)) < 1e-6*length(p) {
				angle := math.Atan2(u[1], u[0])
				add(rotation(angle - axis))
				add(reflection((angle + axis) / 2))
			}
		}
	case c.periodic[0] || c.periodic[1]:
		p := c.period(0)
		if !c.periodic[0] {
			p = c.period(1)
		}
		axis := math.Atan2(p[1], p[0])
		add(rotation(0))
		add(rotation(math.Pi))
		add(reflection(axis))
		add(reflection(axis + math.Pi/2))
	default:
		c.aboutCentre(add)
	}
	sort.SliceStable(list, func(i, j int) bool {
		if list[i].Reflects() != list[j].Reflects() {
			return list[j].Reflects()
		}
		return list[i].Angle() < list[j].Angle()
	})
	return list
}

// neighbours returns the combinations of p and q with coefficients -1, 0, 1.
func neighbours(p, q [2]float64) [][2]float64 {
	var list [][2]float64
	for x := -1.0; x <= 1; x++ {
		for y := -1.0; y <= 1; y++ {
			list = append(list, plus(scale(x, p), scale(y, q)))
		}
	}
	return list
}

// aboutCentre passes on the rotations and reflections about the centre of an
// open cluster that carry the farthest site to one equally far.
func (c *Cluster) aboutCentre(add func([2][2]float64)) {
	centre := c.centre()
	far, radius := 0, 0.0
	for i := range c.Sites() {
		if r := length(minus(c.Position(i), centre)); r > radius*(1+1e-9) {
			far, radius = i, r
		}
	}
	from := minus(c.Position(far), centre)
	axis := math.Atan2(from[1], from[0])
	for i := range c.Sites() {
		to := minus(c.Position(i), centre)
		if math.Abs(length(to)-radius) < 1e-6*length(c.lattice.A1) {
			angle := math.Atan2(to[1], to[0])
			add(rotation(angle - axis))
			add(reflection((angle + axis) / 2))
		}
	}
}

// centre returns the mean of the positions of all sites.
func (c *Cluster) centre() [2]float64 {
	var sum [2]float64
	for i := range c.Sites() {
		sum = plus(sum, c.Position(i))
	}
	return scale(1/float64(c.Sites()), sum)
}

// onLine reports whether all sites lie on one line and gives its direction; a
// single site has none.
func (c *Cluster) onLine() (direction [2]float64, ok bool) {
	if c.periodic[0] && c.periodic[1] {
		return direction, false
	}
	list := []([2]float64){}
	for d, periodic := range c.periodic {
		if periodic {
			list = append(list, c.period(d))
		}
	}
	for i := range c.Sites() {
		list = append(list, minus(c.Position(i), c.Position(0)))
	}
	small := 1e-6 * length(c.lattice.A1)
	for _, v := range list {
		if direction == [2]float64{} && length(v) > small {
			direction = scale(1/length(v), v)
		}
		if math.Abs(cross(direction, v)) > small {
			return direction, false
		}
	}
	return direction, true
}

// keepsCells reports whether the linear part carries the periods to periods
// and the lattice of cells to itself.
func (c *Cluster) keepsCells(m Isometry) bool {
	for d, periodic := range c.periodic {
		a := [2][2]float64{c.lattice.A1, c.lattice.A2}[d]
		if periodic && !(c.isPeriod(m.turned(c.period(d))) && c.isCellVector(m.turned(a))) {
			return false
		}
	}
	return true
}

// isCellVector reports whether v is a translation of the lattice of cells
// along periodic directions.
func (c *Cluster) isCellVector(v [2]float64) bool {
	x, y := c.lattice.fractions(v)
	if !c.periodic[0] {
		x = 0
	}
	if !c.periodic[1] {
		y = 0
	}
	return length(minus(v, c.lattice.point(math.Round(x), math.Round(y)))) < 1e-6*length(c.lattice.A1)
}

// motions returns the isometries with one of the linear parts that carry the
// sites to sites, one for each class modulo lattice translations, with the
// permutations of sites.
func (c *Cluster) motions(parts []Isometry) ([]Isometry, []group.Permutation) {
	var list []Isometry
	var images []group.Permutation
	for _, m := range parts {
		for _, site := range c.anchors() {
			next := m
			next.Translation = minus(c.Position(site), m.turned(c.Position(0)))
			if p := c.carriedBy(next); p != nil {
				list, images = append(list, next), append(images, p)
			}
		}
	}
	return list, images
}

// anchors returns the sites of one cell for each orbit of the translations.
func (c *Cluster) anchors() []int {
	var list []int
	for site := range c.Sites() {
		number := site / c.Orbitals()
		if c.periodic[0] && number%c.periods.m != 0 || c.periodic[1] && number/c.periods.m != 0 {
			continue
		}
		list = append(list, site)
	}
	return list
}

// carriedBy returns where the isometry carries the sites, nil if not to sites.
func (c *Cluster) carriedBy(m Isometry) group.Permutation {
	p := make(group.Permutation, c.Sites())
	for i := range p {
		if p[i] = c.siteNear(m.apply(c.Position(i))); p[i] < 0 {
			return nil
		}
	}
	if p.Check() != nil {
		return nil
	}
	return p
}
