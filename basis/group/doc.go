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
// # Caveats
//
// The reordering sign of fermions is not part of an Action: it follows from
// the kinds of the sites and is supplied by package basis. Only
// one-dimensional representations are formed here.
//
// # Arrows
//
// This package imports no other package of Ketloom.
package group
