package operator

import (
	"context"
	"fmt"
	"math/big"

	"ketloom/basis/group"
)

// finder searches the symmetries of one operator.
type finder struct {
	ctx       context.Context
	sites     int
	limit     int64
	nodes     int64
	plain     side
	inverted  *side // the operator with all spins inverted, or nil
	inversion group.Action
	path      []step
	finest    colouring           // every site told apart, at the end of the path
	found     []group.Permutation // those of later steps first
	inverting group.Permutation   // leads from the inverted operator back, or nil
}

// side is an operator that can be searched.
type side struct {
	terms    *colouredTerms
	graph    *hypergraph
	coarsest colouring // refined
	trace    uint64
}

// step of the first path: a site is singled out of a class.
type step struct {
	before colouring
	colour int // of the class
	size   int // of the class
	site   int
	trace  uint64 // of the refinement that follows
	orbit  int    // of the site, under the symmetries that keep those singled out before; 0: not known
}

func newFinder(ctx context.Context, a Operator, o FindOptions) (*finder, error) {
	f := &finder{ctx: ctx, sites: a.space.Sites(), limit: o.Nodes}
	list := []Operator{a.NormalOrdered()}
	inversion, ok := SpinInversion(a.space)
	if ok && !o.PermutationsOnly {
		f.inversion = inversion
		list = append(list, a.Transformed(inversion))
		if err := list[1].err; err != nil {
			return nil, err
		}
	}
	terms, err := colourTerms(a.space, list)
	if err != nil {
		return nil, err
	}
	f.plain = newSide(terms[0])
	if len(terms) == 2 {
		inverted := newSide(terms[1])
		f.inverted = &inverted
	}
	return f, nil
}

func newSide(terms *colouredTerms) side {
	s := side{terms: terms, graph: graphOf(terms)}
	s.coarsest, s.trace = s.graph.coarsest()
	s.trace = s.graph.refine(s.coarsest, s.trace)
	return s
}

// run searches until everything is found or an error stops it. What it has
// found by then is a group: the steps are completed from the last to the first.
func (f *finder) run() error {
	if err := f.walk(); err != nil {
		return err
	}
	stopped := error(nil)
	for k := len(f.path) - 1; k >= 0 && stopped == nil; k-- {
		stopped = f.complete(k)
	}
	if f.inverted == nil {
		return stopped
	}
	alone := group.Identity(f.sites)
	if f.inverted.terms.sentTo(f.plain.terms, alone) {
		f.inverting = alone
		return stopped
	}
	if stopped == nil && f.inverted.trace == f.plain.trace {
		f.inverting, stopped = f.descend(f.inverted, 0, f.inverted.coarsest)
	}
	return stopped
}

// walk makes the first path.
func (f *finder) walk() error {
	at := f.plain.coarsest
	for {
		class := at.target()
		if class == nil {
			f.finest = at
			return nil
		}
		s := step{before: at, colour: at[class[0]], size: len(class), site: class[0]}
		next, trace, err := f.single(&f.plain, at, s.site)
		if err != nil {
			f.path = nil
			return err
		}
		s.trace = trace
		f.path = append(f.path, s)
		at = next
	}
}

// single singles out a site and refines; it is a node of the search.
func (f *finder) single(s *side, c colouring, site int) (colouring, uint64, error) {
	if err := f.ctx.Err(); err != nil {
		return nil, 0, err
	}
	if f.nodes == f.limit {
		return nil, 0, fmt.Errorf("operator: %w of %d nodes; what was found until then is a group of symmetries, perhaps not the largest: allow more nodes", ErrSearchLimit, f.limit)
	}
	f.nodes++
	next := append(colouring(nil), c...)
	next.single(site)
	return next, s.graph.refine(next, 0), nil
}

// complete finds the orbit of the site of step k under all symmetries that
// keep the sites before it; those that keep this site too are known.
func (f *finder) complete(k int) error {
	s := &f.path[k]
	orbits := newClasses(f.sites)
	for _, p := range f.found {
		orbits.joinAll(p)
	}
	var failed []int
	for _, v := range s.before.class(s.colour) {
		if orbits.root(v) == orbits.root(s.site) || contains(orbits, failed, v) {
			continue
		}
		p, err := f.leadingFrom(k, v)
		if err != nil {
			s.orbit = orbits.size(s.site)
			return err
		}
		if p == nil {
			failed = append(failed, v)
			continue
		}
		f.found = append(f.found, p)
		orbits.joinAll(p)
	}
	s.orbit = orbits.size(s.site)
	return nil
}

// contains reports whether v is in the orbit of one of the sites.
func contains(orbits *classes, sites []int, v int) bool {
	for _, u := range sites {
		if orbits.root(u) == orbits.root(v) {
			return true
		}
	}
	return false
}

// leadingFrom returns a symmetry that takes v to the site of step k and keeps
// the sites before it, or nil if there is none.
func (f *finder) leadingFrom(k, v int) (group.Permutation, error) {
	if f.plain.terms.exchangeable(f.path[k].site, v) {
		return exchange(f.sites, f.path[k].site, v), nil
	}
	next, trace, err := f.single(&f.plain, f.path[k].before, v)
	if err != nil || trace != f.path[k].trace || !f.keepsSigns(&f.plain, k+1, next) {
		return nil, err
	}
	return f.descend(&f.plain, k+1, next)
}

// before returns the colouring of the path before step k, or its end.
func (f *finder) before(k int) colouring {
	if k == len(f.path) {
		return f.finest
	}
	return f.path[k].before
}

// keepsSigns compares the terms that the graph does not tell wholly, as far as
// the colouring c, reached before step k, settles where their sites go.
func (f *finder) keepsSigns(s *side, k int, c colouring) bool {
	if len(s.graph.untold) == 0 {
		return true
	}
	p := make(group.Permutation, f.sites)
	members, there := make([]int, f.sites), make([]int, f.sites)
	for v, colour := range f.before(k) {
		there[colour] = v
		members[colour]++
	}
	for v, colour := range c {
		p[v] = there[colour]
	}
	for _, i := range s.graph.untold {
		settled := true
		for _, factor := range s.terms.terms[i].Factors {
			settled = settled && members[c[s.terms.space.Mode(factor.Mode).Site]] == 1
		}
		if settled && !s.terms.termSentTo(f.plain.terms, p, i) {
			return false
		}
	}
	return true
}

// descend looks for a permutation that takes side s to the plain one and
// extends what the colouring c, reached before step k, has settled.
//
// If there is one at all, then one for as many choices at step k as the orbit
// of its site is long, so that all others may fail but no more.
func (f *finder) descend(s *side, k int, c colouring) (group.Permutation, error) {
	if k == len(f.path) {
		return f.settled(s, c), nil
	}
	here := f.path[k]
	mayFail := here.size - here.orbit
	for _, v := range c.class(here.colour) {
		next, trace, err := f.single(s, c, v)
		if err != nil {
			return nil, err
		}
		if trace == here.trace && f.keepsSigns(s, k+1, next) {
			p, err := f.descend(s, k+1, next)
			if p != nil || err != nil {
				return p, err
			}
		}
		if mayFail--; mayFail < 0 {
			break
		}
	}
	return nil, nil
}

// settled returns the permutation that takes a colouring without classes to the
// finest one of the path, if it takes side s to the plain one.
func (f *finder) settled(s *side, c colouring) group.Permutation {
	byColour := make([]int, f.sites)
	for v, colour := range f.finest {
		byColour[colour] = v
	}
	p := make(group.Permutation, f.sites)
	for v, colour := range c {
		p[v] = byColour[colour]
	}
	if !s.terms.sentTo(f.plain.terms, p) {
		return nil
	}
	return p
}

// order is the product of the orbits along the path, twice that if a symmetry
// inverts the spins.
func (f *finder) order() *big.Int {
	order := big.NewInt(1)
	for _, s := range f.path {
		order.Mul(order, big.NewInt(int64(max(s.orbit, 1))))
	}
	if f.inverting != nil {
		order.Lsh(order, 1)
	}
	return order
}

// extended returns the symmetries found as permutations of the sites and two
// more points, which those that invert the spins exchange. Those of the first
// steps, which move most, come first; the inversion is last if it is alone.
func (f *finder) extended() []group.Permutation {
	var list []group.Permutation
	for i := len(f.found) - 1; i >= 0; i-- {
		p := append(group.Permutation(nil), f.found[i]...)
		list = append(list, append(p, f.sites, f.sites+1))
	}
	if f.inverting == nil {
		return list
	}
	p := append(group.Permutation(nil), f.inverting...)
	p = append(p, f.sites+1, f.sites)
	if f.inverting.IsIdentity() {
		return append(list, p)
	}
	return append([]group.Permutation{p}, list...)
}

// points are the points in whose stabilisers the group descends.
func (f *finder) points() []int {
	list := []int{f.sites}
	for _, s := range f.path {
		list = append(list, s.site)
	}
	return list
}

// action turns an extended permutation back into a symmetry.
func (f *finder) action(p group.Permutation) group.Action {
	a := group.Translate(append(group.Permutation(nil), p[:f.sites]...))
	if p[f.sites] != f.sites {
		a.Levels = f.inversion.Levels
	}
	return a
}
