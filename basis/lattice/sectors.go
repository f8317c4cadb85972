package lattice

import (
	"fmt"
	"math/cmplx"
	"sort"

	"ketloom/basis/group"
)

// Sector is one row of an irreducible representation of a space group: the
// states of one momentum of a star on which the symmetries are numbers. Each
// level of the representation appears in it once and has Multiplicity states
// in the whole space.
type Sector struct {
	Momentum     Momentum   // the first of the star
	Star         []Momentum // all equivalent momenta
	Point        string     // Γ X M K …, or k/2π; empty on an open cluster
	Irrep        string     // of the little group: A1 B2 E …, or Γ1 Γ2 … where there is no such name
	Labels       []string   // of the extra symmetries
	Multiplicity int        // |star|·d, d being the dimension over the little group
	Symmetries   []group.Eigenvalue

	// Conjugate is the place in the list of the sector with the complex
	// conjugate representation, its own place where that is equivalent: a
	// Hamiltonian with real elements between product states has the same levels
	// in both. With an extra symmetry of complex phases it is its own place.
	Conjugate int
}

// String writes the label, such as "M B1 odd".
func (k Sector) String() string {
	text := ""
	for _, word := range append([]string{k.Point, k.Irrep}, k.Labels...) {
		if word != "" && text != "" {
			text += " "
		}
		text += word
	}
	return text
}

// turns returns the eigenvalues of the translations at a momentum.
func (s *SpaceGroup) turns(k Momentum) []group.Turn {
	var list []group.Turn
	for d, periodic := range s.Cluster.periodic {
		if periodic {
			list = append(list, k.Turns[d].Neg())
		}
	}
	return list
}

// Stars returns the momenta of the cluster in stars of equivalent ones. Within
// a star, and by their first members, they are in the order of
// [Cluster.Momenta]. An open cluster has one momentum, which imposes nothing.
func (s *SpaceGroup) Stars() [][]Momentum {
	g := s.Group
	momenta := s.Cluster.Momenta()
	number := map[string]int{}
	for i, k := range momenta {
		number[fmt.Sprint(s.turns(k))] = i
	}
	orbits, err := g.Stars(s.Translations)
	if err != nil {
		panic("lattice: translations that are no normal subgroup")
	}
	var places [][]int
	for _, orbit := range orbits {
		var list []int
		for _, turns := range orbit {
			list = append(list, number[fmt.Sprint(turns)])
		}
		sort.Ints(list)
		places = append(places, list)
	}
	sort.Slice(places, func(i, j int) bool { return places[i][0] < places[j][0] })
	var stars [][]Momentum
	for _, list := range places {
		var star []Momentum
		for _, i := range list {
			star = append(star, momenta[i])
		}
		stars = append(stars, star)
	}
	return stars
}

// LittleGroup returns the elements of the group that carry the momentum to an
// equivalent one, ascending. A momentum that the cluster does not allow is an
// error.
func (s *SpaceGroup) LittleGroup(k Momentum) ([]int, error) {
	return s.Group.LittleGroup(s.Translations, s.turns(k))
}

// Sectors returns one row of every irreducible representation of the group:
// ordered by star, by the eigenvalues of the extra symmetries, and as in the
// character table. The sum of Multiplicity times the number of states of the
// sector (with the same charges, which all symmetries must keep) over all
// sectors is the number of states of the whole space; a sector may be empty.
//
// The origin of the names is [SpaceGroup.Origin]: an operation x → R(x-o)+o+τ
// acts as D(R)·exp(-ik·τ), D being the named representation of the point
// group of k. Where there is none (momenta on the
// boundary of the zone of a non-symmorphic group, translations by parts of a
// cell) the names are Γ1, Γ2 … by dimension.
//
// Names follow R. S. Mulliken, J. Chem. Phys. 23, 1997 (1955): A and B by the
// principal rotation, E for two dimensions, E+ and E- (E1+ …) for its complex
// rows in a group without reflections; 1 is even and 2 odd under the
// reflections equivalent to the one whose axis has the smallest angle to the
// positive x axis in [0, π); A′ and A″ for a single reflection.
//
// Errors: those of [group.Group.Over].
func (s *SpaceGroup) Sectors() ([]Sector, error) {
	extras, err := s.extraTurns()
	if err != nil {
		return nil, err
	}
	stars := s.Stars()
	names := s.Cluster.pointNames(stars)
	var all []Sector
	var characters [][]complex128
	for i, star := range stars {
		for _, turns := range extras {
			some, rows, err := s.over(star, names[i], turns)
			if err != nil {
				return nil, err
			}
			all, characters = append(all, some...), append(characters, rows...)
		}
	}
	s.pair(all, characters)
	squares := 0
	for _, k := range all {
		squares += k.Multiplicity * k.Multiplicity
	}
	if squares != s.Group.Order() {
		return nil, fmt.Errorf("lattice: the squares of the multiplicities add up to %d, not to the order %d of the group; please report this cluster (%v)", squares, s.Group.Order(), s.Cluster)
	}
	return all, nil
}

// extraTurns returns the possible eigenvalues of the extra symmetries.
func (s *SpaceGroup) extraTurns() ([][]group.Turn, error) {
	if len(s.Extras) == 0 {
		return [][]group.Turn{nil}, nil
	}
	orbits, err := s.Group.Stars(s.Extras)
	var list [][]group.Turn
	for _, orbit := range orbits {
		list = append(list, orbit[0])
	}
	return list, err
}

// pair finds complex conjugate representations by their characters.
func (s *SpaceGroup) pair(all []Sector, characters [][]complex128) {
	for i := range all {
		all[i].Conjugate = i
	}
	for _, e := range s.options.Extra {
		for _, list := range e.Action.Phases {
			for _, t := range list {
				if !t.IsReal() {
					return
				}
			}
		}
	}
	for i := range all {
		if all[i].Conjugate != i {
			continue
		}
		conjugate := make([]complex128, len(characters[i]))
		for c, v := range characters[i] {
			conjugate[c] = cmplx.Conj(v)
		}
		for j := i; j < len(all); j++ {
			if all[j].Multiplicity == all[i].Multiplicity && real(s.Group.InnerProduct(characters[j], conjugate)) > 0.5 {
				all[i].Conjugate, all[j].Conjugate = j, i
				break
			}
		}
	}
}

// over returns the sectors of one star with given eigenvalues of the extra
// symmetries, and the characters of their representations.
func (s *SpaceGroup) over(star []Momentum, point string, extras []group.Turn) ([]Sector, [][]complex128, error) {
	normal := append(append([]int(nil), s.Translations...), s.Extras...)
	turns := append(s.turns(star[0]), extras...)
	all, err := s.Group.Over(normal, turns)
	if err != nil {
		return nil, nil, fmt.Errorf("lattice: the momentum %v: %w", star[0], err)
	}
	labels := s.labels(extras)
	names, order := s.irreps(star[0], all)
	list, characters := make([]Sector, len(all)), make([][]complex128, len(all))
	for i, r := range all {
		k := Sector{Momentum: star[0], Star: star, Point: point, Irrep: names[i], Labels: labels, Multiplicity: r.Dimension}
		for _, e := range r.Row {
			if !e.Generator.IsIdentity() {
				k.Symmetries = append(k.Symmetries, e)
			}
		}
		list[order[i]], characters[order[i]] = k, r.Characters()
	}
	return list, characters, nil
}

// labels returns the labels of the extra symmetries.
func (s *SpaceGroup) labels(extras []group.Turn) []string {
	var list []string
	for i, t := range extras {
		n := int64(s.Group.ElementOrder(s.Extras[i]))
		j := t.Num * n / t.Den
		switch labels := s.options.Extra[i].Labels; {
		case labels != nil:
			list = append(list, labels[j])
		case n == 1 || n == 2:
			list = append(list, []string{"even", "odd"}[j])
		default:
			list = append(list, fmt.Sprintf("%d/%d", j, n))
		}
	}
	return list
}

// irreps names the representations at a momentum and gives their places in
// the order of the character table.
func (s *SpaceGroup) irreps(k Momentum, all []group.Representation) (names []string, order []int) {
	names, order = make([]string, len(all)), make([]int, len(all))
	for i := range all {
		names[i], order[i] = fmt.Sprintf("Γ%d", i+1), i
	}
	if s.options.OnlyTranslations {
		return make([]string, len(all)), order
	}
	little, err := s.LittleGroup(k)
	if err != nil {
		return names, order
	}
	operations := s.keeping(little)
	var parts []Isometry
	for i, o := range operations {
		if i == 0 || length(minus(o.Linear[0], parts[len(parts)-1].Linear[0])) > 1e-6 || o.Reflects() != parts[len(parts)-1].Reflects() {
			parts = append(parts, o.Isometry)
		}
	}
	table := characterTable(parts)
	rows := make([]int, len(all))
	taken := map[int]bool{}
	for i, r := range all {
		rows[i] = s.row(table, k, little, operations, r)
		if rows[i] < 0 || taken[rows[i]] {
			return names, order
		}
		taken[rows[i]] = true
	}
	for i, row := range rows {
		names[i], order[i] = table[row].name, 0
		for _, other := range rows {
			if other < row {
				order[i]++
			}
		}
	}
	return names, order
}

// keeping returns the operations that the little group holds.
func (s *SpaceGroup) keeping(little []int) []Operation {
	member := make([]bool, s.Group.Order())
	for _, i := range little {
		member[i] = true
	}
	var list []Operation
	for _, o := range s.Operations {
		if member[o.Element] {
			list = append(list, o)
		}
	}
	return list
}

// row finds the representation in a character table, -1 if it is not there.
func (s *SpaceGroup) row(table []irrep, k Momentum, little []int, operations []Operation, r group.Representation) int {
	traces := s.traces(k, little, operations, r)
	for row, line := range table {
		same := true
		for i, o := range operations {
			same = same && cmplx.Abs(traces[i]-line.character(o.Isometry)) < 1e-6
		}
		if same {
			return row
		}
	}
	return -1
}

// traces returns the traces of the operations over the little group, without
// the phase of their translation about the origin: χ(g)·exp(ik·τ). For the
// representation that χ on H induces, χ(g) is the sum of χ(x⁻¹gx) over the
// cosets x of H, as far as x⁻¹gx lies in H.
func (s *SpaceGroup) traces(k Momentum, little []int, operations []Operation, r group.Representation) []complex128 {
	g := s.Group
	value, inside := make([]complex128, g.Order()), make([]bool, g.Order())
	for i, h := range r.Linear.Elements {
		value[h], inside[h] = r.Linear.Turns[i].Complex(), true
	}
	covered := make([]bool, g.Order())
	var cosets []int
	for _, x := range little {
		if covered[x] {
			continue
		}
		cosets = append(cosets, x)
		for _, h := range r.Linear.Elements {
			covered[g.Product(x, h)] = true
		}
	}
	traces := make([]complex128, len(operations))
	for i, o := range operations {
		for _, x := range cosets {
			if at := g.Conjugate(g.Inverse(x), o.Element); inside[at] {
				traces[i] += value[at]
			}
		}
		traces[i] *= cmplx.Exp(complex(0, dot(k.K, o.beyond(s.Origin))))
	}
	return traces
}
