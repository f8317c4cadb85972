package group

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"sort"
)

// ErrNotMonomial is wrapped by the error for a group with an irreducible
// representation that is not induced from a one-dimensional representation of
// a subgroup, such as the rotations of the icosahedron.
var ErrNotMonomial = errors.New("not all irreducible representations are induced from one-dimensional ones")

// Representation is an irreducible representation D of a group G that is
// induced from a one-dimensional representation χ of a subgroup H of index
// Dimension.
//
// In D the subgroup H acts as χ on exactly one vector, and in no other
// irreducible representation on any (Frobenius reciprocity). So the sector
// with the symmetries Row holds one state for each copy of D: each level of
// the representation once, in place of Dimension times.
//
// Sources: G. W. Mackey; E. Wigner, Ann. Math. 40, 149 (1939); J.-P. Serre,
// Linear Representations of Finite Groups (Springer, 1977), sections 7 and 8.
type Representation struct {
	Name      string       // Γ1, Γ2 … by place in the list, unless named otherwise
	Dimension int          // of D: Star·Small
	Star      int          // characters of the normal subgroup that D holds
	Small     int          // how often it holds each: the dimension over the little group
	Linear    Linear       // χ on the elements of H
	Row       []Eigenvalue // generators of H with their eigenvalues
	group     *Group
}

// Real reports whether χ is real, so that the sector needs no complex
// amplitudes on this account.
func (r Representation) Real() bool { return r.Linear.Real() }

// Characters returns the trace of D by conjugacy class of the group; values
// that lie within 1e-9 of an integer are that integer.
func (r Representation) Characters() []complex128 { return r.group.induced(r.Linear) }

// induced returns the character of the representation that is induced from a
// one-dimensional one of a subgroup H, by class C of the group:
// |G|/(|H||C|) Σ_{h∈H∩C} χ(h).
func (g *Group) induced(l Linear) []complex128 {
	sums := make([]complex128, len(g.classes))
	var last Turn
	value := last.Complex()
	for i, h := range l.Elements {
		if l.Turns[i] != last {
			last = l.Turns[i]
			value = last.Complex()
		}
		sums[g.classOf[h]] += value
	}
	index := float64(len(g.elements)) / float64(len(l.Elements))
	for c, class := range g.classes {
		sums[c] = tidied(sums[c] * complex(index/float64(len(class)), 0))
	}
	return sums
}

func tidied(z complex128) complex128 {
	re, im := real(z), imag(z)
	if r := math.Round(re); math.Abs(re-r) < 1e-9 {
		re = r + 0
	}
	if r := math.Round(im); math.Abs(im-r) < 1e-9 {
		im = r + 0
	}
	return complex(re, im)
}

// InnerProduct returns Σ_C |C| conj(a_C) b_C / |G| for two functions of the
// conjugacy classes: one for the character of an irreducible representation
// with itself, zero with another one.
func (g *Group) InnerProduct(a, b []complex128) complex128 {
	sum := complex(0, 0)
	for c, class := range g.classes {
		sum += complex(float64(len(class)), 0) * cmplx.Conj(a[c]) * b[c]
	}
	return sum / complex(float64(len(g.elements)), 0)
}

// Representations returns all irreducible representations of the group, the
// trivial one first and then by dimension. The generators of an abelian normal
// subgroup (the translations of a cluster) order the work: without any, a large
// one is found. The list is complete: the code checks that the squares of the
// dimensions add up to the order, that there are as many representations as
// classes, and that characters of one star are orthogonal.
//
// Actions with phases that span a central extension (magnetic translations)
// are representations of that extension, whose central elements are part of
// the list of eigenvalues.
//
// Errors: a normal subgroup that is not one or not abelian, a group of more
// than 4096 elements, a quotient with too many subgroups, and a group with
// representations that are not induced from one-dimensional ones, for which
// the error wraps [ErrNotMonomial] and says which dimensions are missing.
func (g *Group) Representations(abelianNormal []int) ([]Representation, error) {
	if g.table == nil {
		return nil, fmt.Errorf("group: the irreducible representations of a group of %d elements; at most %d are possible, so take a subgroup", len(g.elements), tableOrder)
	}
	if len(abelianNormal) == 0 {
		abelianNormal = g.largeAbelianNormal()
	}
	stars, err := g.Stars(abelianNormal)
	if err != nil {
		return nil, err
	}
	n, err := g.abelianNormal(abelianNormal)
	if err != nil {
		return nil, err
	}
	var all []Representation
	squares := 0
	for _, star := range stars {
		some, err := n.over(star[0])
		if err != nil {
			return nil, err
		}
		for _, r := range some {
			squares += r.Dimension * r.Dimension
		}
		all = append(all, some...)
	}
	if squares != len(g.elements) || len(all) != len(g.classes) {
		return nil, fmt.Errorf("group: found %d representations for %d classes, the squares of whose dimensions add up to %d, not to the order %d; please report this group", len(all), len(g.classes), squares, len(g.elements))
	}
	sort.SliceStable(all, func(i, j int) bool { return all[i].Dimension < all[j].Dimension })
	for i := range all {
		all[i].Name = fmt.Sprintf("Γ%d", i+1)
	}
	return all, nil
}

// Over returns the irreducible representations that hold the character λ of
// an abelian normal subgroup, given by its generators and their turns, by
// dimension: those of the little group of λ on which the subgroup acts as λ,
// induced to the group. The Row of each begins with the generators of the
// subgroup. Where λ extends to the little group the first representation is
// one-dimensional there; for trivial turns it is the trivial one.
//
// Errors: as for [Group.Representations], and turns that are not a character
// of the subgroup.
func (g *Group) Over(abelianNormal []int, turns []Turn) ([]Representation, error) {
	n, err := g.abelianNormal(abelianNormal)
	if err != nil {
		return nil, err
	}
	if err := n.check(turns); err != nil {
		return nil, err
	}
	some, err := n.over(turns)
	for i := range some {
		some[i].Name = fmt.Sprintf("Γ%d", i+1)
	}
	return some, err
}

// over collects the induced representations over λ, from small index to large,
// until the squares of their dimensions over the little group fill its
// quotient.
func (n *normal) over(turns []Turn) ([]Representation, error) {
	g := n.group
	little := n.littleGroup(turns)
	q := n.quotient(little)
	c := collection{normal: n, quotient: q, turns: turns, star: len(g.elements) / len(little), missing: len(q.first)}
	whole := make(set, len(q.first))
	for i := range whole {
		whole[i] = true
	}
	c.collect([]set{whole})
	if c.missing > 0 {
		subgroups, err := q.subgroups()
		if err != nil {
			return nil, err
		}
		for start := 1; start < len(subgroups) && c.missing > 0; {
			size, end := len(subgroups[start].members()), start
			for end < len(subgroups) && len(subgroups[end].members()) == size {
				end++
			}
			if d := len(q.first) / size; d*d <= c.missing {
				c.collect(subgroups[start:end])
			}
			start = end
		}
	}
	regular := n.regularClasses(q, turns)
	if c.missing > 0 {
		return nil, c.refuse(regular - len(c.found))
	}
	if c.missing < 0 || len(c.found) != regular {
		return nil, fmt.Errorf("group: found %d representations over a character with %d regular classes; please report this group", len(c.found), regular)
	}
	return c.found, c.checkOrthogonal()
}

// collection gathers inequivalent representations over one character.
type collection struct {
	normal     *normal
	quotient   *quotient
	turns      []Turn
	star       int
	missing    int // what the squares of the dimensions still lack
	found      []Representation
	characters [][]complex128
}

// collect tries the linear characters of subgroups of one index over λ, the
// real ones first, and keeps those that induce new irreducible
// representations.
func (c *collection) collect(subgroups []set) {
	type candidate struct {
		linear     Linear
		generators []int
		turns      []Turn
	}
	var reals, others []candidate
	n := c.normal
	for _, s := range subgroups {
		var generators []int
		for _, x := range c.quotient.generating(s) {
			generators = append(generators, c.quotient.first[x])
		}
		free := len(generators)
		generators = append(generators, n.generators...)
		p := n.subgroup
		if free > 0 {
			p = n.group.present(generators)
		}
		for _, turns := range p.solutions(free, c.turns) {
			next := candidate{p.linear(turns), generators, turns}
			if next.linear.Real() {
				reals = append(reals, next)
			} else {
				others = append(others, next)
			}
		}
	}
	for _, next := range append(reals, others...) {
		small := len(c.quotient.first) * len(n.subgroup.elements) / len(next.linear.Elements)
		if small*small > c.missing {
			return
		}
		character := n.group.induced(next.linear)
		if math.Abs(real(n.group.InnerProduct(character, character))-1) > 1e-6 || c.knows(character) {
			continue
		}
		r := Representation{Dimension: c.star * small, Star: c.star, Small: small, Linear: next.linear, group: n.group}
		free := len(next.generators) - len(n.generators)
		for i := range next.generators {
			k := (i + free) % len(next.generators) // those of the normal subgroup first
			r.Row = append(r.Row, Eigenvalue{n.group.elements[next.generators[k]], next.turns[k].normal()})
		}
		c.found = append(c.found, r)
		c.characters = append(c.characters, character)
		c.missing -= small * small
	}
}

func (c *collection) knows(character []complex128) bool {
	for _, other := range c.characters {
		if cmplx.Abs(c.normal.group.InnerProduct(other, character)) > 0.5 {
			return true
		}
	}
	return false
}

func (c *collection) checkOrthogonal() error {
	for i, a := range c.characters {
		for j, b := range c.characters[:i+1] {
			want := complex(0, 0)
			if i == j {
				want = 1
			}
			if cmplx.Abs(c.normal.group.InnerProduct(a, b)-want) > 1e-6 {
				return fmt.Errorf("group: the characters %d and %d over one character of the normal subgroup are not orthogonal; please report this group", j, i)
			}
		}
	}
	return nil
}

// regularClasses counts the representations over λ without forming them: the
// classes of cosets xN with λ(x y x⁻¹ y⁻¹) = 1 for all y that commute with x
// modulo N.
func (n *normal) regularClasses(q *quotient, turns []Turn) int {
	seen := make([]bool, len(q.first))
	count := 0
	for x := range q.first {
		if seen[x] {
			continue
		}
		regular := true
		for y := range q.first {
			image := q.product[q.product[y][x]][q.inverse[y]]
			seen[image] = true
			if image == x {
				a, b := q.first[x], q.first[y]
				commutator := n.group.Product(n.group.Product(a, b), n.group.inverse[n.group.Product(b, a)])
				regular = regular && n.turn(commutator, turns).IsZero()
			}
		}
		if regular {
			count++
		}
	}
	return count
}

// refuse says which dimensions no induced representation accounts for.
func (c *collection) refuse(count int) error {
	text := ""
	ways := squares(c.missing, count, len(c.quotient.first), 2)
	for _, dims := range ways {
		if text != "" {
			text += " or"
		}
		for _, d := range dims {
			text += fmt.Sprintf(" %d", d*c.star)
		}
	}
	text = " of dimensions" + text
	if len(ways) > 2 {
		text = fmt.Sprintf(", the squares of whose dimensions add up to %d", c.missing*c.star*c.star)
	}
	return fmt.Errorf("group: a group of %d elements: %w; missing are %d%s; take a subgroup without them, such as that of the translations or of one axis", len(c.normal.group.elements), ErrNotMonomial, count, text)
}

// squares returns the ways to write a sum as that of count squares of divisors
// of order, none below least, ascending.
func squares(sum, count, order, least int) [][]int {
	if count == 0 {
		if sum == 0 {
			return [][]int{nil}
		}
		return nil
	}
	var list [][]int
	for d := least; count*d*d <= sum && len(list) < 4; d++ {
		if order%d != 0 {
			continue
		}
		for _, rest := range squares(sum-d*d, count-1, order, d) {
			list = append(list, append([]int{d}, rest...))
		}
	}
	return list
}
