// Package entangle computes what a part of a system knows of the rest: the
// reduced density operator of a set of sites or orbitals, or of some of the
// particles, for one state or an equal mixture of states, resolved by charges.
//
//	psi, err := entangle.ComplexState(b, vector)             // amplitudes in a basis
//	cut, err := entangle.SpaceCut(ctx, []entangle.State{psi}, []int{0, 1, 2, 3}, nil)
//	fmt.Println(cut.Entropy(), cut.Renyi(2))                 // nats
//	pes, err := entangle.ParticleCut(ctx, states, 3, nil)    // three of the particles
//	fmt.Println(pes.LargestGap().Below)                      // levels below the gap
//
// Entanglement levels are ξ = -ln λ with the eigenvalues λ of a density operator
// of trace one (Li and Haldane, Phys. Rev. Lett. 101, 010504, 2008). Logarithms
// are natural.
//
// [Exclusion] counts the configurations of the generalised exclusion principle,
// which say how many levels a fractional quantum Hall phase has below the gap.
//
// # Accuracy
//
// The weights λ are squares of singular values of the amplitudes, so that an
// error of about 1e-16 stands beside the singular value, not beside λ: levels up
// to about ξ = 60 are resolved as far as the state is. A state that is wrong by
// δ in norm moves a singular value by up to δ (Weyl, Math. Ann. 71, 441, 1912),
// and its level by up to -2 ln(1 - δ exp(ξ/2)).
//
// # Caveats
//
// The matrices of the blocks are dense: the largest block of a half cut of n
// sites has about 2^n / n amplitudes. A momentum of real-space translations is
// not a charge of a part and resolves nothing; orbitals that carry momentum do.
//
// # Arrows
//
// This package may import basis and lanczos/dense.
package entangle
