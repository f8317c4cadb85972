package lattice

import (
	"fmt"
	"math"

	"ketloom/basis/group"
)

// SymmetryOptions says which symmetries of a cluster are wanted. Nil and the
// zero value mean all isometries that carry sites to sites.
type SymmetryOptions struct {
	// OnlyTranslations leaves out everything but the lattice translations, for
	// a Hamiltonian with a boundary twist that is spread over its bonds.
	OnlyTranslations bool
	// NoReflections leaves out reflections and glides, for a Hamiltonian with
	// a handedness (a flux, a scalar chirality).
	NoReflections bool
	// Kinds, one for each site of a cell, must be kept: a site is carried to
	// sites of its kind only.
	Kinds []int
	// Bonds are lists of bonds (made by [Cluster.Bonds] or [Cluster.BondTo], or by
	// hand without a displacement) each of which must be carried to itself,
	// whatever the direction of a bond. Give one list for each coupling of a
	// Hamiltonian that has fewer symmetries than the positions of its sites.
	Bonds [][]Bond
	// Extra are further symmetries that commute with all motions and with
	// each other, such as the inversion of all spins.
	Extra []Extra
}

// Extra is a symmetry besides the motions of a cluster. A sector in which it
// is the number exp(2πi·j/n), n being its order, carries the label Labels[j];
// without labels "even" and "odd" for n = 2, else the fraction j/n.
type Extra struct {
	Action group.Action
	Labels []string
}

// Operation is one motion of each class modulo lattice translations.
type Operation struct {
	Isometry
	Element int // of the group
}

// SpaceGroup is the group of all motions that are symmetries of a cluster,
// with the extra symmetries.
type SpaceGroup struct {
	Cluster *Cluster
	Group   *group.Group
	// Translations are the elements T_a1 and T_a2, one for each periodic
	// direction; Extras those of the extra symmetries.
	Translations, Extras []int
	// Operations hold one motion of each class modulo lattice translations,
	// the identity first, then rotations and reflections by angle. On very
	// small clusters several may be the same permutation of sites.
	Operations []Operation
	// Origin is the point about which representations are named: the one with
	// the largest number of operations that leave it in place modulo lattice
	// translations; the first site that has it, else another point.
	Origin  [2]float64
	options SymmetryOptions
	motion  []place // by element
}

// place says which motion an element of the group is.
type place struct {
	operation int
	cells     [2]int // translation that follows
}

// SpaceGroup returns the symmetries of the cluster, found from the positions
// of its sites: all rotations of any order, reflections and glides that carry
// sites to sites, periods to periods and the lattice of cells to itself. The
// wrapping of a small torus may give its graph of bonds further symmetries,
// which are no isometries and not meant here.
//
// A multi-site cell whose sites alone form a finer lattice (the checkerboard, a
// doubled cell) has translations by parts of a cell too, unless Kinds or Bonds
// exclude them; they count as operations, not as translations.
//
// Positions agree if they differ by less than 1e-6 of A1: write √3/2 as such,
// not as 0.866, or the symmetries that rest on it are not found.
//
// Errors: kinds or bonds that do not fit the cluster, bonds that a lattice
// translation does not keep, an extra symmetry that does not commute with a
// motion or another extra one, more than group.LargestOrder elements.
func (c *Cluster) SpaceGroup(opts *SymmetryOptions) (*SpaceGroup, error) {
	s := &SpaceGroup{Cluster: c}
	if opts != nil {
		s.options = *opts
	}
	keep, err := newKeeper(c, s.options)
	if err != nil {
		return nil, err
	}
	generators := c.Translations()
	d := 0
	for _, t := range generators {
		if !c.periodic[d] {
			d++
		}
		m := Isometry{Linear: rotation(0), Translation: [2][2]float64{c.lattice.A1, c.lattice.A2}[d]}
		if err := keep.check(m, t.Sites); err != nil {
			return nil, fmt.Errorf("lattice: the translation by a%d is no symmetry: %w; give bonds that all translations keep, or describe the cluster by a larger cell", d+1, err)
		}
		d++
	}
	motions, images := s.wanted(keep)
	if err := s.checkSize(len(motions)); err != nil {
		return nil, err
	}
	if err := s.span(generators, images); err != nil {
		return nil, err
	}
	if err := s.adjoin(motions, images); err != nil {
		return nil, err
	}
	for i, m := range motions {
		at, _ := s.Group.Find(group.Translate(images[i]))
		s.Operations = append(s.Operations, Operation{m, at})
	}
	s.locate()
	s.Origin = s.origin()
	return s, nil
}

// mostImages bounds the number of sites times that of symmetries.
const mostImages = 1 << 24

// checkSize refuses groups that would take long to list.
func (s *SpaceGroup) checkSize(operations int) error {
	l1, l2 := s.Cluster.lengths()
	if order := l1 * l2 * operations; order > group.LargestOrder || order*s.Cluster.Sites() > mostImages {
		return fmt.Errorf("lattice: %d symmetries of %d sites (%v); up to %d symmetries and %d images of sites are listed, so take a smaller cluster or leave symmetries out", order, s.Cluster.Sites(), s.Cluster, group.LargestOrder, mostImages)
	}
	return nil
}

// wanted returns the motions that the options ask for.
func (s *SpaceGroup) wanted(keep *keeper) (motions []Isometry, images []group.Permutation) {
	parts := s.Cluster.linearParts()
	if s.options.OnlyTranslations {
		parts = parts[:1]
	}
	all, permutations := s.Cluster.motions(parts)
	for i, m := range all {
		if s.options.NoReflections && m.Reflects() || s.options.OnlyTranslations && !permutations[i].IsIdentity() {
			continue
		}
		if keep.check(m, permutations[i]) == nil {
			motions, images = append(motions, m), append(images, permutations[i])
		}
	}
	return motions, images
}

// span forms the group of the translations and motions, with few generators.
func (s *SpaceGroup) span(generators []group.Action, images []group.Permutation) error {
	translations := len(generators)
	if translations == 0 {
		generators = []group.Action{group.Translate(group.Identity(s.Cluster.Sites()))}
	}
	g, err := group.Span(generators)
	if err != nil {
		return err
	}
	for _, p := range images {
		if _, ok := g.Find(group.Translate(p)); ok {
			continue
		}
		generators = append(generators, group.Translate(p))
		if g, err = group.Span(generators); err != nil {
			return err
		}
	}
	s.Group, s.Translations = g, g.Generators()[:translations]
	return nil
}

// adjoin adds the extra symmetries.
func (s *SpaceGroup) adjoin(motions []Isometry, images []group.Permutation) error {
	if len(s.options.Extra) == 0 {
		return nil
	}
	var generators []group.Action
	for _, i := range s.Group.Generators() {
		generators = append(generators, s.Group.At(i))
	}
	for i, e := range s.options.Extra {
		if err := e.Action.Check(); err != nil {
			return fmt.Errorf("lattice: the extra symmetry %d: %w", i, err)
		}
		if len(e.Action.Sites) != s.Cluster.Sites() {
			return fmt.Errorf("lattice: the extra symmetry %d acts on %d sites, the cluster has %d", i, len(e.Action.Sites), s.Cluster.Sites())
		}
		n, err := e.Action.Order()
		if err != nil {
			return fmt.Errorf("lattice: the extra symmetry %d: %w", i, err)
		}
		if e.Labels != nil && len(e.Labels) != n {
			return fmt.Errorf("lattice: %d labels for the extra symmetry %d, which has %d eigenvalues; give one each, or none", len(e.Labels), i, n)
		}
		commutes := func(b group.Action) bool { return e.Action.Compose(b).Equal(b.Compose(e.Action)) }
		for j, t := range s.Cluster.Translations() {
			if !commutes(t) {
				return fmt.Errorf("lattice: the extra symmetry %d does not commute with translation %d of the cluster; form the group by group.Span and take its representations", i, j)
			}
		}
		for j, p := range images {
			if !commutes(group.Translate(p)) {
				return fmt.Errorf("lattice: the extra symmetry %d does not commute with a motion of the cluster (%v); exclude such motions, or form the group by group.Span and take its representations", i, motions[j])
			}
		}
		for j, other := range s.options.Extra[:i] {
			if !commutes(other.Action) {
				return fmt.Errorf("lattice: the extra symmetries %d and %d do not commute; give one of them, or form the group by group.Span and take its representations", j, i)
			}
		}
		generators = append(generators, e.Action)
	}
	translations := len(s.Translations)
	g, err := group.Span(generators)
	if err != nil {
		return err
	}
	all := g.Generators()
	s.Group, s.Translations = g, all[:translations]
	s.Extras = all[len(all)-len(s.options.Extra):]
	return nil
}

// locate says for every element which motion it is.
func (s *SpaceGroup) locate() {
	g := s.Group
	s.motion = make([]place, g.Order())
	for i := range s.motion {
		s.motion[i].operation = -1
	}
	extras := g.Subgroup(s.Extras)
	l1, l2 := s.Cluster.lengths()
	along := [2]int{}
	for d, i := 0, 0; d < 2; d++ {
		if s.Cluster.periodic[d] {
			along[d] = s.Translations[i]
			i++
		}
	}
	row := 0
	for y := range l2 {
		shift := row
		for x := range l1 {
			for k, o := range s.Operations {
				at := g.Product(shift, o.Element)
				for _, e := range extras {
					if to := g.Product(e, at); s.motion[to].operation < 0 {
						s.motion[to] = place{k, [2]int{x, y}}
					}
				}
			}
			shift = g.Product(along[0], shift)
		}
		row = g.Product(along[1], row)
	}
}

// Motion returns the isometry by which an element of the group moves the
// sites; extra symmetries that the element may hold besides move none. The
// element must lie in 0 … Group.Order()-1.
func (s *SpaceGroup) Motion(element int) Isometry {
	at := s.motion[element]
	m := s.Operations[at.operation].Isometry
	m.Translation = plus(m.Translation, s.Cluster.lattice.point(float64(at.cells[0]), float64(at.cells[1])))
	return m
}

// PointGroup returns, for each operation that leaves the origin in place
// modulo lattice translations, the element of the group that leaves it in
// place modulo periods.
func (s *SpaceGroup) PointGroup() []int {
	var list []int
	for element := range s.Group.Order() {
		m := s.Motion(element)
		if s.Cluster.isPeriod(minus(m.apply(s.Origin), s.Origin)) && !s.holdsExtra(element) {
			list = append(list, element)
		}
	}
	return list
}

// holdsExtra reports whether an element is a motion times an extra symmetry.
func (s *SpaceGroup) holdsExtra(element int) bool {
	at := s.motion[element]
	shift := s.Cluster.translation(at.cells)
	motion := shift.Compose(s.Group.At(s.Operations[at.operation].Element))
	return !motion.Equal(s.Group.At(element))
}

// beyond returns the lattice translation τ that remains of an operation about
// the origin o, x → R(x-o) + o + τ.
func (o Operation) beyond(origin [2]float64) [2]float64 { return minus(o.apply(origin), origin) }

// origin finds the point of the highest symmetry.
func (s *SpaceGroup) origin() [2]float64 {
	c := s.Cluster
	var best [2]float64
	most := 0
	try := func(at [2]float64) {
		n := 0
		for _, o := range s.Operations {
			if c.isCellVector(o.beyond(at)) {
				n++
			}
		}
		if n > most {
			best, most = [2]float64{settled(at[0]), settled(at[1])}, n
		}
	}
	for _, site := range c.anchors() {
		try(c.Position(site))
	}
	for _, o := range s.Operations[1:] {
		for _, cell := range c.homes {
			a := [2]float64{}
			if c.periodic[0] {
				a = plus(a, scale(float64(cell[0]), c.lattice.A1))
			}
			if c.periodic[1] {
				a = plus(a, scale(float64(cell[1]), c.lattice.A2))
			}
			if at, ok := o.fixed(a); ok {
				try(at)
			}
		}
	}
	return best
}

// settled drops the rounding of a coordinate that is zero.
func settled(x float64) float64 {
	if math.Abs(x) < 1e-12 {
		return 0
	}
	return x
}

// fixed returns a point that the operation followed by the translation a
// leaves in place; for a reflection the foot of (0, 0) on its axis.
func (o Operation) fixed(a [2]float64) ([2]float64, bool) {
	t := plus(o.Translation, a)
	if o.Reflects() {
		s, c := math.Sincos(o.Angle())
		across := [2]float64{-s, c}
		return scale(dot(t, across)/2, across), true
	}
	// (1 - R) x = t.
	m := [2][2]float64{{1 - o.Linear[0][0], -o.Linear[0][1]}, {-o.Linear[1][0], 1 - o.Linear[1][1]}}
	det := cross(m[0], m[1])
	if math.Abs(det) < 1e-9 {
		return [2]float64{}, false
	}
	return [2]float64{(t[0]*m[1][1] - t[1]*m[0][1]) / det, (m[0][0]*t[1] - m[1][0]*t[0]) / det}, true
}
