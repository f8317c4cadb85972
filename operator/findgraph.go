package operator

import (
	"ketloom/basis"
)

// hypergraph has the sites as vertices and the terms as edges. Colours and
// labels are numbers that do not depend on how sites are numbered.
type hypergraph struct {
	colours []uint64 // of the sites: their kind
	edges   []edge
	untold  []int // terms whose sign the edges do not tell
}

// edge joins some sites in given roles.
type edge struct {
	colour uint64
	ends   []end
}

type end struct {
	site int
	role uint64
}

// mostArrangements bounds the number of edges that stand for one term: 3!·3!.
const mostArrangements = 36

// graphOf describes the terms as a hypergraph.
//
// Where fermionic creators (or annihilators) of one spin stand in a product,
// its coefficient means something only together with their order. Such a term
// becomes one edge for each order in which the coefficient has the smaller
// colour of the two that it takes, the roles saying who is first; c†_i c†_j is
// an arrow. With more orders than mostArrangements the edge does not tell the
// sign, and the search compares such a term once its sites are settled.
func graphOf(c *colouredTerms) *hypergraph {
	g := &hypergraph{colours: make([]uint64, c.space.Sites())}
	for i := range g.colours {
		site := c.space.Site(i)
		g.colours[i] = mix(uint64(site.Levels))
		for _, letter := range []byte(site.Kind) {
			g.colours[i] = mix(g.colours[i] + uint64(letter))
		}
	}
	for i, t := range c.terms {
		smaller := min(c.colour[i], c.opposite[i])
		groups := ambiguous(c.space, t.Factors)
		roles := make([]uint64, len(t.Factors))
		if arrangements(groups) > mostArrangements {
			g.add(c.space, uint64(smaller)<<1|1, t.Factors, roles)
			g.untold = append(g.untold, i)
			continue
		}
		if len(groups) == 0 {
			smaller = c.colour[i]
		}
		arrange(groups, roles, false, func(odd bool) {
			if !odd && c.colour[i] == smaller || odd && c.opposite[i] == smaller {
				g.add(c.space, uint64(smaller)<<1, t.Factors, roles)
			}
		})
	}
	return g
}

// ambiguous returns the groups of two or more factors that anticommute and
// that a permutation of sites can bring into another order.
func ambiguous(space *basis.Space, factors []Factor) [][]int {
	kinds := [4][]int{}
	for j, f := range factors {
		if f.odd(space) {
			k := 2*space.Mode(f.Mode).Component + int(f.Symbol-Raise)
			kinds[k] = append(kinds[k], j)
		}
	}
	var groups [][]int
	for _, k := range kinds {
		if len(k) > 1 {
			groups = append(groups, k)
		}
	}
	return groups
}

// arrangements is the number of orders of all groups, as far as it matters.
func arrangements(groups [][]int) int {
	n := 1
	for _, g := range groups {
		for k := 2; k <= len(g) && n <= mostArrangements; k++ {
			n *= k
		}
	}
	return n
}

// arrange sets the roles to every order of every group in turn and tells
// whether it is odd.
func arrange(groups [][]int, roles []uint64, odd bool, visit func(odd bool)) {
	if len(groups) == 0 {
		visit(odd)
		return
	}
	members := groups[0]
	var choose func(taken, rank int, odd bool)
	choose = func(taken, rank int, odd bool) {
		if rank == len(members) {
			arrange(groups[1:], roles, odd, visit)
			return
		}
		skipped := 0
		for x, j := range members {
			if taken>>x&1 == 1 {
				continue
			}
			roles[j] = uint64(rank + 1)
			choose(taken|1<<x, rank+1, odd != (skipped%2 == 1))
			skipped++
		}
	}
	choose(0, 0, odd)
}

// add adds an edge: the factors on one site make one end.
func (g *hypergraph) add(space *basis.Space, colour uint64, factors []Factor, roles []uint64) {
	e := edge{colour: mix(colour)}
	for j, f := range factors {
		mode := space.Mode(f.Mode)
		role := mix(mix(mix(uint64(f.Symbol)<<32|uint64(f.To)<<16|uint64(f.From))+uint64(mode.Component)) + roles[j])
		k := 0
		for k < len(e.ends) && e.ends[k].site != mode.Site {
			k++
		}
		if k == len(e.ends) {
			e.ends = append(e.ends, end{site: mode.Site})
		}
		e.ends[k].role += role
	}
	for k := range e.ends {
		e.ends[k].role = mix(e.ends[k].role)
	}
	g.edges = append(g.edges, e)
}

// mix spreads the bits of a number over all 64 (the finaliser of G. L. Steele,
// D. Lea and C. H. Flood, OOPSLA 2014).
func mix(z uint64) uint64 {
	z += 0x9e3779b97f4a7c15
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}
