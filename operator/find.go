package operator

import (
	"context"
	"errors"
	"fmt"
	"math/big"

	"ketloom/basis"
	"ketloom/basis/group"
)

// ErrSearchLimit is wrapped by the error of [Operator.FindSymmetries] when the
// search has visited as many nodes as it may.
var ErrSearchLimit = errors.New("the search for symmetries reached its limit")

// DefaultSearchNodes is the number of nodes that a search visits at most if
// the options do not say otherwise.
const DefaultSearchNodes = 1 << 18

// FindOptions steers [Operator.FindSymmetries]. nil and zero fields stand for
// the defaults.
type FindOptions struct {
	Nodes            int64 // most nodes of the search; 0: DefaultSearchNodes
	PermutationsOnly bool  // leave the inversion of spins out
}

// Symmetries is a group of symmetries of an operator: permutations of sites,
// and permutations that follow an inversion of all spins (see
// [SpinInversion]).
type Symmetries struct {
	Generators []group.Action // none for the trivial group; none follows from those before it
	Orbits     [][]int        // sites that the group takes to each other, ascending, by their first site
	Inversion  bool           // whether the inversion alone, with no site moved, is a symmetry
	Inverting  bool           // whether any symmetry inverts the spins: half of the group then does
	Complete   bool           // whether this is the largest group; false only beside an error
	Nodes      int64          // nodes that the search visited
	order      *big.Int
}

// Order returns the number of symmetries, exactly. It can be large: 2·64! for
// 64 spins of which each is coupled equally to each.
func (s Symmetries) Order() *big.Int {
	if s.order == nil {
		return big.NewInt(1)
	}
	return new(big.Int).Set(s.order)
}

// Elements returns the number of symmetries if it fits into an int64, else 0.
func (s Symmetries) Elements() int64 {
	if order := s.Order(); order.IsInt64() {
		return order.Int64()
	}
	return 0
}

// Invariant returns the generators with the eigenvalue one each: the sector of
// states that no symmetry changes, for [basis.Sector]. Other sectors need
// other eigenvalues, which must be a representation of the group.
//
// A sector lists its group element by element, so that the order must not pass
// [group.LargestOrder].
func (s Symmetries) Invariant() []group.Eigenvalue {
	list := make([]group.Eigenvalue, len(s.Generators))
	for i, g := range s.Generators {
		list[i] = group.Eigenvalue{Generator: g, Turn: group.NewTurn(0, 1)}
	}
	return list
}

// String summarises the group in a line.
func (s Symmetries) String() string {
	inversion := "no symmetry inverts the spins"
	switch {
	case s.Inversion:
		inversion = "spin inversion"
	case s.Inverting:
		inversion = "spin inversion only together with a permutation"
	}
	most := ""
	if !s.Complete {
		most = " at least"
	}
	return fmt.Sprintf("order%s %v from %d generators; %d orbits of sites; %s", most, s.Order(), len(s.Generators), len(s.Orbits), inversion)
}

// SpinInversion returns the action that inverts every spin and exchanges up
// and down electrons, and moves no site:
//
//	S⁺ <-> S⁻,  Sᶻ -> -Sᶻ,  c_↑ <-> c_↓
//
// that is, a relabelling of levels without phases, the half turn of the spins
// about the x axis up to a factor: Sˣ stays, Sʸ and Sᶻ change sign. ok is false
// on a space without spins and electrons. Bosons and spinless fermions stay.
func SpinInversion(space *basis.Space) (inversion group.Action, ok bool) {
	inversion.Sites = group.Identity(space.Sites())
	inversion.Levels = make([][]int, space.Sites())
	for i := range inversion.Levels {
		site := space.Site(i)
		switch site.Kind {
		case basis.KindElectron:
			inversion.Levels[i] = []int{0, 2, 1, 3}
		default:
			inversion.Levels[i] = group.Identity(site.Levels)
		case basis.KindSpin:
			for s := site.Levels - 1; s >= 0; s-- {
				inversion.Levels[i] = append(inversion.Levels[i], s)
			}
		}
		ok = ok || site.Kind == basis.KindSpin || site.Kind == basis.KindElectron
	}
	return inversion, ok
}

// FindSymmetries returns the largest group of permutations of sites, and of
// permutations combined with the inversion of all spins (see [SpinInversion]),
// that leaves the operator unchanged. It asks for no lattice: the operator can
// be that of a molecule, a disordered list of bonds, a graph, or a sum of
// products on any number of sites. Fermions are reordered with their sign.
//
// Sites are the vertices and canonical terms the edges of a coloured
// hypergraph; two coefficients have one colour if [Operator.Equal] would not
// tell them apart. Classes of sites are refined by what is attached to them,
// sites are singled out one after the other until all are told apart, and a
// symmetry is found as a second way to do the same; classes that known
// symmetries join are tried once. The order is the product of the orbits along
// the chain of stabilisers (C. C. Sims, in Computational Problems in Abstract
// Algebra, 1970; B. D. McKay, Congressus Numerantium 30, 45 (1981)).
// [Operator.Commutes] proves every generator before it is returned, and the
// order is checked to be that of the group which they generate.
//
// What is not sought: symmetries up to phases or signs on sites (gauges),
// other relabellings of levels, particle-hole exchange.
//
// Cost: for each of at most n generators of n sites up to n refinements, each
// proportional to the number of terms times a few; far less where sites are
// alike or told apart at once. Where refinement cannot tell sites apart that
// no symmetry joins, as in strongly regular graphs, the number of refinements
// can grow faster; it is limited by Nodes.
//
// Errors: an operator with an error or on no space, a negative limit,
// coefficients that are linked by others in between, each within rounding of
// the next but not the first of the last; ErrSearchLimit or the context's
// error beside the group found until then, of exact order but perhaps not the
// largest (Complete is false).
func (a Operator) FindSymmetries(ctx context.Context, opts *FindOptions) (Symmetries, error) {
	var o FindOptions
	if opts != nil {
		o = *opts
	}
	switch {
	case a.err != nil:
		return Symmetries{}, a.err
	case a.space == nil:
		return Symmetries{}, errors.New("operator: symmetries of an operator on no space; make it with operator.On")
	case o.Nodes < 0:
		return Symmetries{}, fmt.Errorf("operator: a search of %d nodes; give a positive limit, or 0 for %d", o.Nodes, DefaultSearchNodes)
	case o.Nodes == 0:
		o.Nodes = DefaultSearchNodes
	}
	f, err := newFinder(ctx, a, o)
	if err != nil {
		return Symmetries{}, err
	}
	stopped := f.run()
	found, err := f.result(a)
	if err != nil {
		return Symmetries{}, err
	}
	found.Complete = stopped == nil
	return found, stopped
}

// result proves what was found and describes it.
func (f *finder) result(a Operator) (Symmetries, error) {
	s := Symmetries{Nodes: f.nodes, order: f.order()}
	generators, err := fewGenerators(f.extended(), f.points(), s.order)
	if err != nil {
		return s, err
	}
	orbits := newClasses(f.sites)
	for _, p := range generators {
		g := f.action(p)
		if err := a.Commutes(g); err != nil {
			return s, fmt.Errorf("operator: a symmetry was found that is none, which is a fault of the search: %w", err)
		}
		s.Generators = append(s.Generators, g)
		orbits.joinAll(g.Sites)
	}
	s.Orbits = orbits.lists()
	s.Inverting = f.inverting != nil
	s.Inversion = s.Inverting && f.inverting.IsIdentity()
	return s, nil
}
