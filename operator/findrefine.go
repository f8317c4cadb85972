package operator

import "sort"

// colouring is an ordered partition of sites: the colour of a site is the
// number of sites in classes before its own.
type colouring []int

// coarsest returns the partition by kinds of sites, and its trace.
func (g *hypergraph) coarsest() (colouring, uint64) {
	c := make(colouring, len(g.colours))
	trace, _ := c.split(g.colours)
	return c, trace
}

// refine splits classes until every two sites of one class are attached in the
// same way to all classes, and returns a number that summarises the splitting:
// it is the same where one colouring is the image of the other.
//
// Cost: proportional to the ends of all edges, for every round; at most one
// round for each class that is added, and one.
func (g *hypergraph) refine(c colouring, trace uint64) uint64 {
	attached := make([]uint64, len(c))
	for {
		for v := range attached {
			attached[v] = 0
		}
		for _, e := range g.edges {
			sum := e.colour
			for _, x := range e.ends {
				sum += mix(x.role + uint64(c[x.site])*0x9e3779b97f4a7c15)
			}
			sum = mix(sum)
			for _, x := range e.ends {
				attached[x.site] += mix(sum ^ x.role)
			}
		}
		seen, grew := c.split(attached)
		trace = mix(trace + seen)
		if !grew {
			return trace
		}
	}
}

// split splits the classes by a second number of each site, and returns a
// summary of classes and numbers.
func (c colouring) split(by []uint64) (trace uint64, grew bool) {
	order := make([]int, len(c))
	for v := range order {
		order[v] = v
	}
	sort.Slice(order, func(x, y int) bool {
		u, v := order[x], order[y]
		if c[u] != c[v] {
			return c[u] < c[v]
		}
		return by[u] < by[v]
	})
	start, old := 0, 0 // of the class at hand, and the colour that it had
	for x, v := range order {
		switch {
		case x == 0 || c[v] != old:
			start, old = x, c[v]
		case by[v] != by[order[x-1]]:
			start, grew = x, true
		}
		trace = mix(trace+by[v]) + uint64(start)
		c[v] = start
	}
	return trace, grew
}

// single gives a site a class of its own, before the rest of its class.
func (c colouring) single(v int) {
	for u := range c {
		if u != v && c[u] == c[v] {
			c[u]++
		}
	}
}

// target returns the smallest class with two or more sites, the first of
// these, or nil if every site has a colour of its own.
func (c colouring) target() []int {
	sizes := make([]int, len(c))
	for _, colour := range c {
		sizes[colour]++
	}
	best := -1
	for colour, n := range sizes {
		if n > 1 && (best < 0 || n < sizes[best]) {
			best = colour
		}
	}
	if best < 0 {
		return nil
	}
	return c.class(best)
}

// class returns the sites of a colour, ascending.
func (c colouring) class(colour int) []int {
	var list []int
	for v := range c {
		if c[v] == colour {
			list = append(list, v)
		}
	}
	return list
}
