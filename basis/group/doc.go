// Package group holds the symmetries of a lattice model as monomial actions:
// permutations of sites, relabellings of local levels and phases, together
// with the numbers (characters) by which they act on a symmetry sector.
//
// Every symmetry that Ketloom knows - a translation, a point-group element,
// spin inversion, a sublattice phase, a magnetic translation - is one
// [Action]. A sector is named by a few generators and the eigenvalue of each:
//
//	shift := group.Translate(group.Permutation{1, 2, 3, 0})
//	k := group.Eigenvalue{Generator: shift, Turn: group.NewTurn(-1, 4)}
//	elements, err := group.Generate([]group.Eigenvalue{k})
//	// four elements, T^n with the character exp(-2πi n/4)
//
// Phases are exact fractions of a turn, so that whether two symmetries are
// equal, whether a set closes and whether numbers are a representation are
// decided without rounding.
//
// # Groups and representations
//
// [Span] lists a finite group of actions, its products, inverses and
// conjugacy classes. [Group.Representations] lists its irreducible
// representations, each as the one-dimensional representation of a subgroup
// from which it is induced. A sector with these symmetries holds one state for
// every copy of the representation, so that a level of degeneracy d is found
// once:
//
//	g, err := group.Span([]group.Action{shift, mirror})
//	all, err := g.Representations(nil)
//	for _, r := range all {
//		use(r.Row, r.Dimension) // sector, and how often each of its levels counts
//	}
//
// [Group.Stars], [Group.LittleGroup] and [Group.Over] do the same for one
// character of an abelian normal subgroup, such as one momentum.
//
// # Caveats
//
// The reordering sign of fermions is not part of an Action: it follows from
// the kinds of the sites and is supplied by package basis. It leaves products
// of actions alone, so that groups, characters and rows hold for fermions too.
//
// A few groups have representations that no one-dimensional one induces, such
// as the rotations of the icosahedron or all permutations of five sites; see
// [ErrNotMonomial].
//
// # Arrows
//
// This package imports no other package of Ketloom.
package group
