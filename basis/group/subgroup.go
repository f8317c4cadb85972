package group

import (
	"fmt"
	"sort"
)

// Subgroup returns the elements of the subgroup that the given elements
// generate, ascending.
func (g *Group) Subgroup(generators []int) []int {
	list := g.closure(generators)
	sort.Ints(list)
	return list
}

// closure lists the subgroup that the given elements generate, the identity
// first.
func (g *Group) closure(generators []int) []int {
	list, known := []int{0}, make([]bool, len(g.elements))
	known[0] = true
	for next := 0; next < len(list); next++ {
		for _, s := range generators {
			if at := g.Product(s, list[next]); !known[at] {
				known[at] = true
				list = append(list, at)
			}
		}
	}
	return list
}

// Generating returns a short list of elements that generate a subgroup, given
// by its elements or by generators: at every step the element that leads
// furthest (the first such), and in the end none that the others generate.
//
// Cost: about order² products a step.
func (g *Group) Generating(subgroup []int) []int {
	return g.extending(nil, subgroup, len(g.closure(subgroup)))
}

// extending returns elements of the list that generate, with those given, a
// subgroup of the given order, which the list must reach.
func (g *Group) extending(given, list []int, order int) []int {
	var chosen []int
	all := append([]int(nil), given...)
	for reached := len(g.closure(all)); reached < order; {
		best, most := -1, reached
		for _, x := range list {
			if n := len(g.closure(append(all, x))); n > most {
				best, most = x, n
			}
			if most == order {
				break
			}
		}
		if best < 0 {
			break
		}
		chosen, all, reached = append(chosen, best), append(all, best), most
	}
	for i := 0; i < len(chosen) && len(chosen) > 1; {
		rest := append(append([]int(nil), chosen[:i]...), chosen[i+1:]...)
		if len(g.closure(append(append([]int(nil), given...), rest...))) == order {
			chosen = rest
		} else {
			i++
		}
	}
	return chosen
}

// checkElements reports the first number that is not an element.
func (g *Group) checkElements(list []int) error {
	for _, i := range list {
		if i < 0 || i >= len(g.elements) {
			return fmt.Errorf("group: element %d of a group of %d elements; elements are numbered 0 … %d", i, len(g.elements), len(g.elements)-1)
		}
	}
	return nil
}

// Commute reports whether all of the given elements commute with each other;
// if not, it names two that do not.
func (g *Group) Commute(elements []int) (i, j int, ok bool) {
	for a, x := range elements {
		for _, y := range elements[:a] {
			if g.Product(x, y) != g.Product(y, x) {
				return y, x, false
			}
		}
	}
	return 0, 0, true
}
