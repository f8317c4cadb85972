package operator

import (
	"errors"
	"math/big"
	"math/rand/v2"

	"ketloom/basis/group"
)

// chain is a chain of stabilisers of points: level i knows how some elements
// that keep the points before i take point i elsewhere. The product of the
// lengths of its orbits never exceeds the order of the group generated; where
// it reaches a known order, the chain is the group.
type chain struct {
	points []int
	levels []chainLevel
	random *rand.Rand
	pool   []group.Permutation // random elements of the group
}

type chainLevel struct {
	movers []group.Permutation
	to     []group.Permutation // to[v] takes the point to v, nil if v is not reached
	orbit  []int
}

func newChain(points []int, n int) *chain {
	c := &chain{points: points, levels: make([]chainLevel, len(points)), random: rand.New(rand.NewPCG(1970, 30))}
	for i, p := range points {
		c.levels[i].to = make([]group.Permutation, n)
		c.levels[i].to[p] = group.Identity(n)
		c.levels[i].orbit = []int{p}
	}
	return c
}

// order is the product of the lengths of the orbits.
func (c *chain) order() *big.Int {
	order := big.NewInt(1)
	for _, l := range c.levels {
		order.Mul(order, big.NewInt(int64(len(l.orbit))))
	}
	return order
}

// sift divides g by elements of the chain until a level does not know where
// it takes its point; known means that nothing is left.
func (c *chain) sift(g group.Permutation) (rest group.Permutation, level int, known bool) {
	for i, l := range c.levels {
		to := l.to[g[c.points[i]]]
		if to == nil {
			return g, i, false
		}
		g = to.Inverse().Compose(g)
	}
	return g, len(c.levels), g.IsIdentity()
}

// extend adds what g tells to the chain, and reports whether it was new.
func (c *chain) extend(g group.Permutation) bool {
	rest, i, known := c.sift(g)
	if known || i == len(c.levels) {
		return false
	}
	c.levels[i].movers = append(c.levels[i].movers, rest)
	for j := i; j >= 0; j-- {
		c.spread(j)
	}
	return true
}

// spread closes the orbit of a level under the movers of its own and of later
// levels.
func (c *chain) spread(i int) {
	l := &c.levels[i]
	for x := 0; x < len(l.orbit); x++ {
		for _, below := range c.levels[i:] {
			for _, m := range below.movers {
				v := l.orbit[x]
				if w := m[v]; l.to[w] == nil {
					l.to[w] = m.Compose(l.to[v])
					l.orbit = append(l.orbit, w)
				}
			}
		}
	}
}

// quietSifts is the number of random elements in a row that must be known
// before the chain is taken for complete.
const quietSifts = 24

// admit adds a generator and, with random elements (products replace factors,
// F. Celler et al., Commun. Algebra 23, 4931 (1995)), what follows from it,
// until nothing new comes or the order is reached. It reports whether g was new:
// a g that follows from the others may be taken for new by chance, not the
// reverse.
func (c *chain) admit(g group.Permutation, order *big.Int) bool {
	if !c.extend(g) {
		return false
	}
	c.pool = append(c.pool, g)
	for len(c.pool) < 10 {
		c.pool = append(c.pool, c.pool[c.random.IntN(len(c.pool))])
	}
	c.stir(quietSifts, order)
	return true
}

// stir sifts random elements until so many in a row bring nothing new, or the
// order is reached.
func (c *chain) stir(most int, order *big.Int) {
	for quiet := 0; quiet < most && c.order().Cmp(order) != 0; quiet++ {
		if c.extend(c.randomElement()) {
			quiet = -1
		}
	}
}

func (c *chain) randomElement() group.Permutation {
	i, j := c.random.IntN(len(c.pool)), c.random.IntN(len(c.pool)-1)
	if j >= i {
		j++
	}
	factor := c.pool[j]
	if c.random.IntN(2) == 0 {
		factor = factor.Inverse()
	}
	if c.random.IntN(2) == 0 {
		c.pool[i] = c.pool[i].Compose(factor)
	} else {
		c.pool[i] = factor.Compose(c.pool[i])
	}
	return c.pool[i]
}

// enough returns the elements of the list that did not follow from those
// before them, until they generate a group of the given order; ok tells
// whether they do.
func enough(list []group.Permutation, points []int, order *big.Int) (few []group.Permutation, ok bool) {
	if len(list) == 0 {
		return nil, order.Cmp(big.NewInt(1)) == 0
	}
	c := newChain(points, len(list[0]))
	for _, g := range list {
		if c.order().Cmp(order) == 0 {
			break
		}
		if c.admit(g, order) {
			few = append(few, g)
		}
	}
	c.stir(100*quietSifts, order)
	return few, c.order().Cmp(order) == 0
}

// fewGenerators returns a few elements that generate the group of the list,
// whose order is known. It proves the order: that of the chain they make is not
// above that of their group.
func fewGenerators(list []group.Permutation, points []int, order *big.Int) ([]group.Permutation, error) {
	few, ok := enough(list, points, order)
	if !ok {
		return nil, errors.New("operator: the symmetries found do not make a group of the order found, which is a fault of the search")
	}
	if len(few) <= 2 {
		return few, nil
	}
	all := few[0]
	for _, g := range few[1:] {
		all = all.Compose(g)
	}
	fewer, ok := enough(append([]group.Permutation{all}, few...), points, order)
	if ok && len(fewer) < len(few) {
		return fewer, nil
	}
	return few, nil
}
