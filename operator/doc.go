// Package operator is the algebra of operators on a space of spins, bosons and
// fermions: sums of products of elementary operators, with exact normal order,
// adjoints, commutators and proofs of symmetry.
//
// A Heisenberg bond and its commutator with the total S_z:
//
//	o := operator.On(space)
//	h := o.Dot(0, 1)                            // S_0·S_1
//	fmt.Println(h)                              // 0.5 S⁺₀ S⁻₁ + …
//	sz := o.Sz(0).Plus(o.Sz(1))
//	fmt.Println(operator.Commutator(h, sz).IsZero())  // true
//	fmt.Println(h.Conserves(space.TwiceSz()))         // <nil>
//
// # Canonical form
//
// [Operator.NormalOrdered] writes an operator in the one form that equal
// operators share. Each mode carries at most one elementary operator of
//
//	spins 1/2:            S⁺, S⁻, Sᶻ
//	two-level bosons:     b†, b, n
//	fermion modes:        c†, c, n
//	more levels:          |a⟩⟨b| with (a,b) ≠ (0,0)
//
// and a product is written with the diagonal ones first, then raising ones
// with the mode ascending, then lowering ones with the mode descending, then
// |a⟩⟨b|. Products on one mode are multiplied out (the algebra is that of the
// finite number of levels: b b† = 1 - n for hard-core bosons), fermion modes
// anticommute, everything else commutes between modes.
//
// Equality, the zero test, Hermiticity and [Operator.Commutes] compare
// canonical forms. Coefficients are float64 pairs; one that is smaller than
// 2^-46 of the sum of the magnitudes that were added to make it counts as
// zero.
//
// # Errors
//
// A site or kind that does not exist makes an operator that carries the error:
// see [Operator.Err]. Whatever is made from it carries the same error, and
// every use that can fail returns it.
//
// # Caveats
//
// A boson with a cutoff is a finite matrix; what is proved by the algebra is
// proved for that matrix. Plus copies both sums; build long sums with [Sum].
//
// # Arrows
//
// This package may import basis and basis/group.
package operator
