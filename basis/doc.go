// Package basis says which states there are: sites and spaces, configurations
// as words of bits, additive charges, constraints, symmetry sectors, and the
// numbering of the states of a sector in both directions.
//
// A half-filled ring of sixteen spins 1/2 at momentum π:
//
//	space, err := basis.Uniform(16, basis.SpinHalf())
//	shift := group.Translate(ring)                     // i -> i+1
//	b, err := basis.New(ctx, space, basis.Sector{
//		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
//		Symmetries: []group.Eigenvalue{{Generator: shift, Turn: group.NewTurn(1, 2)}},
//	}, nil)
//	fmt.Println(b.Len(), b.At(0))
//
// # Configurations
//
// A product state is one [Configuration], a uint64. Each site has a bit field
// as wide as its number of levels needs; an electron site has two one-bit
// fields, and all up modes come before all down modes. A bit field is a
// [Mode]; modes are numbered in ascending bit order. On spaces of spins 1/2,
// hard-core bosons and spinless fermions, mode i is site i is bit i.
//
// Levels count upwards: level s of a spin S has S_z = s - S, of a boson or
// fermion site s particles; an electron site has the levels empty 0, up 1,
// down 2, both 3.
//
// # Fermions
//
// |n⟩ = (c₀†)^n₀ (c₁†)^n₁ … |0⟩, modes in ascending order; c_i takes the sign
// (-1)^(occupied fermion modes below i). Symmetries carry c†_i to c†_{p(i)}
// and leave |0⟩ alone (a relabelling that exchanges empty and occupied
// carries c†_i to c_{p(i)} and |0⟩ to the state with those modes filled in
// ascending order), so that the reordering sign follows.
//
// # Sectors
//
// A sector fixes the values of additive charges (integers, or integers modulo
// m) and the eigenvalues of symmetries that together are a one-dimensional
// representation χ of the group G they span. Its states are
//
//	|r~⟩ = N_r^(-1/2) Σ_g χ(g)* g|r⟩,   N_r = ‖Σ_g χ(g)* g|r⟩‖² = |G|·|G_r|,
//
// where the representative r is the smallest configuration of its orbit and
// G_r its stabiliser; states ascend with r. Configurations are compared as
// numbers; but where the charges allow more than 2^16 of them and the symmetries
// fall into sublattices, the bits of one sublattice count first (see
// [Basis.ModeOrder]), which makes hundreds of symmetries as cheap as a few. An orbit on which χ does not restrict to the action of
// the stabiliser holds no state. A translation by a acts as exp(-ik·a).
//
// # Caveats
//
// At most 64 bits. Higher-dimensional representations are not reduced here.
// Enumeration of a symmetry sector visits the configurations whose bits on the
// sublattice that counts first are the smallest of their orbit, and keeps 1⅓ bits
// for each: about |G|/2 times fewer than the charges allow on two sublattices.
//
// # Arrows
//
// This package may import basis/group only.
package basis
