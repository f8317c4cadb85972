package group

import "fmt"

// tableOrder is the largest order up to which a group keeps its
// multiplication table, two bytes a product.
const tableOrder = 1 << 12

// Group is a finite group of actions: all products of its generators, the
// identity first, the rest in a fixed order (that of [Generate]). Elements are
// named by their place 0 … Order()-1. It does not change after it is made and
// may be shared.
type Group struct {
	elements   []Action
	place      map[string]int
	generators []int   // elements
	left       [][]int // left[j][i]: generator j times element i
	letter     []int   // element i > 0 is generator letter[i] times element parent[i] < i
	parent     []int
	inverse    []int
	table      [][]uint16 // table[i][j] = i∘j, nil above tableOrder
	classes    [][]int
	classOf    []int
}

// Span returns the group of all products of the generators. No generators give
// the group {1} on no sites.
//
// Errors: a generator that is not an action, generators on different numbers
// of sites, more than LargestOrder elements.
//
// Cost: order × generators compositions, and order² steps for the
// multiplication table of a group of at most 4096 elements; larger groups
// multiply by walking along generators.
func Span(generators []Action) (*Group, error) {
	n := 0
	if len(generators) > 0 {
		n = len(generators[0].Sites)
	}
	for j, a := range generators {
		if err := a.Check(); err != nil {
			return nil, fmt.Errorf("group: generator %d is not a symmetry: %w", j, err)
		}
		if len(a.Sites) != n {
			return nil, fmt.Errorf("group: generator %d acts on %d sites but generator 0 on %d; give all on the same sites", j, len(a.Sites), n)
		}
	}
	g := &Group{
		elements: []Action{Translate(Identity(n))},
		left:     make([][]int, len(generators)),
		letter:   []int{-1},
		parent:   []int{-1},
	}
	g.place = map[string]int{g.elements[0].Key(): 0}
	for next := 0; next < len(g.elements); next++ {
		for j, a := range generators {
			product := a.Compose(g.elements[next])
			key := product.Key()
			at, known := g.place[key]
			if !known {
				if len(g.elements) == LargestOrder {
					return nil, fmt.Errorf("group: the generators span more than %d elements; check that they are the symmetries you mean", LargestOrder)
				}
				at = len(g.elements)
				g.place[key] = at
				g.elements = append(g.elements, product)
				g.letter, g.parent = append(g.letter, j), append(g.parent, next)
			}
			g.left[j] = append(g.left[j], at)
		}
	}
	for j := range generators {
		g.generators = append(g.generators, g.left[j][0])
	}
	g.multiply()
	g.invert()
	g.classify()
	return g, nil
}

// multiply fills the table: the row of generator·parent is that of the parent,
// each entry multiplied by the generator.
func (g *Group) multiply() {
	n := len(g.elements)
	if n > tableOrder {
		return
	}
	all := make([]uint16, n*n)
	g.table = make([][]uint16, n)
	for i := range g.table {
		row := all[i*n : (i+1)*n]
		g.table[i] = row
		if i == 0 {
			for j := range row {
				row[j] = uint16(j)
			}
			continue
		}
		left, above := g.left[g.letter[i]], g.table[g.parent[i]]
		for j := range row {
			row[j] = uint16(left[above[j]])
		}
	}
}

// invert finds the inverses of the generators from their powers, and those of
// products from these.
func (g *Group) invert() {
	inverse := make([]int, len(g.generators))
	for j, at := range g.generators {
		for at != 0 {
			inverse[j], at = at, g.left[j][at]
		}
	}
	g.inverse = make([]int, len(g.elements))
	for i := 1; i < len(g.elements); i++ {
		g.inverse[i] = g.Product(g.inverse[g.parent[i]], inverse[g.letter[i]])
	}
}

// Order returns the number of elements.
func (g *Group) Order() int { return len(g.elements) }

// At returns element i; element 0 is the identity.
func (g *Group) At(i int) Action { return g.elements[i] }

// Generators returns the generators, as elements, in the order given to [Span].
func (g *Group) Generators() []int { return append([]int(nil), g.generators...) }

// Find returns the place of an action; ok is false if the group does not
// hold it.
func (g *Group) Find(a Action) (i int, ok bool) {
	i, ok = g.place[a.Key()]
	return i, ok
}

// Product returns the element i∘j, which applies j first.
func (g *Group) Product(i, j int) int {
	if g.table != nil {
		return int(g.table[i][j])
	}
	var word []int
	for ; i != 0; i = g.parent[i] {
		word = append(word, g.letter[i])
	}
	for k := len(word) - 1; k >= 0; k-- {
		j = g.left[word[k]][j]
	}
	return j
}

// Inverse returns the element that undoes element i.
func (g *Group) Inverse(i int) int { return g.inverse[i] }

// Conjugate returns the element x∘i∘x⁻¹.
func (g *Group) Conjugate(x, i int) int { return g.Product(g.Product(x, i), g.inverse[x]) }

// ElementOrder returns the smallest n > 0 with iⁿ = 1.
func (g *Group) ElementOrder(i int) int {
	n := 1
	for at := i; at != 0; at = g.Product(i, at) {
		n++
	}
	return n
}

// classify arranges the elements in conjugacy classes, following the
// generators.
func (g *Group) classify() {
	g.classOf = make([]int, len(g.elements))
	for i := range g.classOf {
		g.classOf[i] = -1
	}
	for i := range g.elements {
		if g.classOf[i] >= 0 {
			continue
		}
		class := []int{i}
		g.classOf[i] = len(g.classes)
		for next := 0; next < len(class); next++ {
			for _, x := range g.generators {
				if at := g.Conjugate(x, class[next]); g.classOf[at] < 0 {
					g.classOf[at] = len(g.classes)
					class = append(class, at)
				}
			}
		}
		g.classes = append(g.classes, class)
	}
}

// Classes returns the conjugacy classes as lists of elements, ordered by their
// first element, which comes first; {identity} is class 0. The slices are
// shared.
func (g *Group) Classes() [][]int { return g.classes }

// ClassOf returns the class of element i.
func (g *Group) ClassOf(i int) int { return g.classOf[i] }
