// Package model builds stock Hamiltonians with their citations: magnets,
// electrons, fermions and bosons on clusters, tight-binding bands with their
// Chern numbers, and interactions projected to a band.
//
// The Heisenberg model with first and second neighbours on the 4×4 torus:
//
//	c, err := lattice.Torus(lattice.Square(), 4, 4)
//	space, err := basis.Uniform(c.Sites(), basis.SpinHalf())
//	h, err := model.Heisenberg(space, c, []float64{1, 0.5})
//	fmt.Println(h.Commutes(c.Translations()[0])) // <nil>
//
// A fractional Chern insulator, in the sector of 4 fermions and total momentum
// (2, 0):
//
//	bands := model.Checkerboard(1, model.SunSecond, 0, 1)
//	p, err := bands.Projected(4, 3, nil)
//	b, err := basis.New(ctx, p.Space, p.Sector(4, 2, 0), nil)
//	m, err := matrix.New(ctx, p.Operator, b, nil)
//
// # Choosing
//
// Functions named after a model take a cluster and couplings by neighbour
// shell (the first number is for nearest neighbours). The others ([Exchange],
// [Hops], [Repulsion], [Field]) take a list of bonds or sites and are added up
// by operator.Sum. Every bond of a list counts once, also where two join the
// same sites of a small cluster; lattice.Simple merges them.
//
// # Signs and units
//
// Spins are S = σ/2 and positive exchange is antiferromagnetic, except in
// [TransverseIsing], which is written in Pauli matrices. Hopping enters as
// -t(c†c + h.c.) in the models on clusters, and as the amplitude itself, with
// no sign, in [TightBinding]. Twists are in turns; a particle that is carried
// once around a period in its positive direction gains exp(-2πi·twist), so that
// one-particle momenta are 2π(n+twist)/L.
//
// # Caveats
//
// Hard-core bosons cannot be projected to a band here: the projected operators
// no longer obey a hard-core condition.
//
// # Arrows
//
// This package may import operator, basis and basis/lattice.
package model
