package group

import "fmt"

// normal is an abelian normal subgroup with the action of the group on its
// linear characters, which are named by the turns of its generators.
type normal struct {
	group      *Group
	generators []int
	subgroup   presentation
	place      map[int]int // element to its place in subgroup.elements
	exponents  [][]int64   // elements[i] is the product of the generators to these powers
}

// abelianNormal checks that the given elements generate an abelian normal
// subgroup.
func (g *Group) abelianNormal(generators []int) (*normal, error) {
	if err := g.checkElements(generators); err != nil {
		return nil, err
	}
	if i, j, ok := g.Commute(generators); !ok {
		return nil, fmt.Errorf("group: the elements %d and %d do not commute; the characters of a normal subgroup can be used only if it is abelian", i, j)
	}
	n := &normal{group: g, generators: generators, subgroup: g.present(generators), place: map[int]int{}}
	for i, e := range n.subgroup.elements {
		n.place[e] = i
		word := make([]int64, len(generators))
		if i > 0 {
			copy(word, n.exponents[n.subgroup.parent[i]])
			word[n.subgroup.letter[i]]++
		}
		n.exponents = append(n.exponents, word)
	}
	for _, x := range g.generators {
		for _, s := range generators {
			if _, ok := n.place[g.Conjugate(x, s)]; !ok {
				return nil, fmt.Errorf("group: the element %d carries the element %d out of the subgroup; give generators of a normal subgroup (or none, to have one found)", x, s)
			}
		}
	}
	return n, nil
}

// carried returns the character n ↦ λ(x⁻¹ n x) for the character λ with the
// given turns.
func (n *normal) carried(x int, turns []Turn) []Turn {
	image := make([]Turn, len(turns))
	for i, s := range n.generators {
		word := n.exponents[n.place[n.group.Conjugate(n.group.inverse[x], s)]]
		image[i] = Turn{0, 1}
		for k, t := range turns {
			image[i] = image[i].Add(t.Times(word[k]))
		}
	}
	return image
}

// turn returns the turn of element e of the subgroup.
func (n *normal) turn(e int, turns []Turn) Turn {
	sum := Turn{0, 1}
	for k, t := range turns {
		sum = sum.Add(t.Times(n.exponents[n.place[e]][k]))
	}
	return sum
}

// check reports turns that are not a character of the subgroup.
func (n *normal) check(turns []Turn) error {
	if len(turns) != len(n.generators) {
		return fmt.Errorf("group: %d eigenvalues for %d generators of a normal subgroup; give one each", len(turns), len(n.generators))
	}
	for _, t := range turns {
		if err := t.Check(); err != nil {
			return err
		}
	}
	if len(n.subgroup.solutions(0, turns)) == 0 {
		return fmt.Errorf("group: the eigenvalues exp(2πi·%v) of the generators of a normal subgroup are not a representation of it; an element with gⁿ = 1 needs an eigenvalue whose n-th power is one", turns)
	}
	return nil
}

func turnsKey(turns []Turn) string {
	key := ""
	for _, t := range turns {
		key += t.String() + " "
	}
	return key
}

// Stars returns the linear characters of the abelian normal subgroup that the
// given elements generate, each as the turns of these generators, arranged in
// stars: the orbits under the group, λ(n) → λ(x⁻¹ n x). For the translations
// of a cluster these are the stars of momenta. Stars are ordered by their
// first member; that of the trivial character comes first.
//
// Errors: elements that do not commute, or a subgroup that is not normal.
func (g *Group) Stars(generators []int) ([][][]Turn, error) {
	n, err := g.abelianNormal(generators)
	if err != nil {
		return nil, err
	}
	var stars [][][]Turn
	known := map[string]bool{}
	for _, turns := range n.subgroup.solutions(0, nil) {
		if known[turnsKey(turns)] {
			continue
		}
		known[turnsKey(turns)] = true
		star := [][]Turn{turns}
		for next := 0; next < len(star); next++ {
			for _, x := range g.generators {
				image := n.carried(x, star[next])
				if key := turnsKey(image); !known[key] {
					known[key] = true
					star = append(star, image)
				}
			}
		}
		stars = append(stars, star)
	}
	return stars, nil
}

// LittleGroup returns the elements that keep a character of the abelian normal
// subgroup with the given generators, λ(x⁻¹ n x) = λ(n), ascending.
func (g *Group) LittleGroup(generators []int, turns []Turn) ([]int, error) {
	n, err := g.abelianNormal(generators)
	if err != nil {
		return nil, err
	}
	if err := n.check(turns); err != nil {
		return nil, err
	}
	return n.littleGroup(turns), nil
}

func (n *normal) littleGroup(turns []Turn) []int {
	cosets, number := n.cosets(nil)
	keeps := make([]bool, len(cosets))
	want := turnsKey(n.carried(0, turns))
	for i, x := range cosets {
		keeps[i] = turnsKey(n.carried(x, turns)) == want
	}
	var list []int
	for x := range n.group.elements {
		if keeps[number[x]] {
			list = append(list, x)
		}
	}
	return list
}

// cosets returns the first element of each coset of the subgroup in a list of
// elements (nil: all of the group) that is a union of cosets, and the number
// of the coset of every element, -1 outside.
func (n *normal) cosets(within []int) (first []int, number []int) {
	g := n.group
	number = make([]int, len(g.elements))
	for i := range number {
		number[i] = -1
	}
	if within == nil {
		within = make([]int, len(g.elements))
		for i := range within {
			within[i] = i
		}
	}
	for _, x := range within {
		if number[x] >= 0 {
			continue
		}
		for _, e := range n.subgroup.elements {
			number[g.Product(x, e)] = len(first)
		}
		first = append(first, x)
	}
	return first, number
}

// largeAbelianNormal returns generators of an abelian normal subgroup that
// no class of elements enlarges: the first such in the order that takes the
// classes of the largest abelian normal closures first.
func (g *Group) largeAbelianNormal() []int {
	var best []int
	size := 0
	closures := make([][]int, len(g.classes))
	start := 0
	for c, class := range g.classes {
		generators := g.normalClosure(nil, class)
		if _, _, ok := g.Commute(generators); !ok {
			continue
		}
		closures[c] = generators
		if n := len(g.closure(generators)); n > size {
			best, size, start = generators, n, c
		}
	}
	for c := range g.classes {
		if c == start || closures[c] == nil {
			continue
		}
		larger := g.normalClosure(best, closures[c])
		if _, _, ok := g.Commute(larger); ok && len(larger) > len(best) {
			best = larger
		}
	}
	return best
}

// normalClosure adds to a list of generators those elements of another list
// that the subgroup does not hold already.
func (g *Group) normalClosure(generators, class []int) []int {
	list := append([]int(nil), generators...)
	known := map[int]bool{}
	for _, e := range g.closure(list) {
		known[e] = true
	}
	for _, e := range class {
		if known[e] {
			continue
		}
		list = append(list, e)
		for _, f := range g.closure(list) {
			known[f] = true
		}
	}
	return list
}
