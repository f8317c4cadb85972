// Package label says which multiplet a set of computed levels is: the character
// under any symmetry, used in the calculation or not, and the total spin.
//
//	multiplets := label.Multiplets(energies, 1e-9)             // levels that are one
//	z, err := label.Character(b, vectors, rotation)            // trace of the rotation in them
//	spin, err := label.Spin(ctx, b, vectors, nil)              // S of each, from S²
//	fmt.Println(z.Trace, z.Leak, spin.Text())
//
// A level that is not degenerate in its sector has a character of modulus one for
// every symmetry of the Hamiltonian that keeps the sector; the character of a
// degenerate set names its representation. Both hold for the eigenspace, not for
// single vectors of it, so that degenerate vectors must be given together.
//
// # Caveats
//
// A set that is not whole, or holds levels that are not exact, is not carried into
// itself; how much is lost is reported (Leak, Spread), not hidden.
//
// # Arrows
//
// This package may import basis, basis/group, operator, operator/matrix and
// lanczos/dense.
package label
