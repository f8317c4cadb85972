// Package entangle computes what a part of a system knows of the rest: the
// reduced density operator of a set of sites or orbitals, or of some of the
// particles, for one state or an equal mixture of states, resolved by charges.
//
//	psi, err := entangle.ComplexState(b, vector)             // amplitudes in a basis
//	cut, err := entangle.SpaceCut(ctx, []entangle.State{psi}, []int{0, 1, 2, 3}, nil)
//	fmt.Println(cut.Entropy(), cut.LargestGap())             // nats, levels
//	pes, err := entangle.ParticleCut(ctx, states, 3, nil)    // three of the particles
//	fmt.Println(pes.LargestGap().Below, pes.BelowGap())      // in all, and by sector
//
// Entanglement levels are ξ = -ln λ with the eigenvalues λ of a density operator
// of trace one (Li and Haldane, Phys. Rev. Lett. 101, 010504, 2008). Logarithms
// are natural.
//
// [Exclusion] counts the configurations of the generalised exclusion principle,
// which say how many levels a fractional quantum Hall phase has below the gap,
// and in which sectors.
//
// # Accuracy
//
// The weights λ are squares of singular values of the matrix of amplitudes. No
// density operator is formed, so that rounding stands beside the singular value,
// not beside λ: a singular value of a block is wrong by up to (16+√q/2)·2⁻⁵² of the
// largest one of the block, q being the larger dimension of its matrix. Weights up
// to the square of that, about 1e-29, count as zero (Block.Floor), and
// Spectrum.Trust is the level that belongs to the largest of these floors, 65 or
// so. A level ξ itself is wrong by about 1e-15·exp((ξ-ξ_lowest)/2).
//
// A state that is wrong by δ in norm moves a singular value by up to δ (Weyl,
// Math. Ann. 71, 441, 1912), whatever its size: what lies above ξ = -2 ln δ is
// noise of the solver. Options.Error says δ, and then such weights count as zero.
//
// A block whose matrix does not fit into Options.Memory is solved by its Gram
// matrix instead, from strips of the matrix: weights below about 4e-15 of the
// largest one (33 above its level) are lost and count as zero.
//
// Same bits for any number of workers.
//
// # Caveats
//
// The matrices of the blocks are dense: the largest block of a half cut of n
// sites has about 2^n / n amplitudes. A momentum of real-space translations is
// not a charge of a part and resolves nothing; orbitals that carry momentum do.
//
// A singular value decomposition, once begun, is not interrupted: a cancelled
// context is seen before the next block.
//
// # Arrows
//
// This package may import basis and lanczos/dense.
package entangle
