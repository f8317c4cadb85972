package model

import (
	"fmt"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// Heisenberg returns H = Σ_s J_s Σ_⟨ij⟩ S_i·S_j over the bonds of the
// neighbour shells s = 1, 2, …, with J_s = couplings[s-1]; spins of any length,
// J > 0 antiferromagnetic. A coupling of zero skips its shell.
//
// Errors: a space that does not fit the cluster or holds other sites than spins
// or electrons, a coupling that is not finite, a shell that the cluster does
// not have.
func Heisenberg(space *basis.Space, c *lattice.Cluster, couplings []float64) (operator.Operator, error) {
	return XXZ(space, c, couplings, couplings, nil)
}

// XXZ returns
//
//	H = Σ_s Σ_⟨ij⟩ [ xy_s/2 (φ_ij S⁺_j S⁻_i + h.c.) + z_s Sᶻ_i Sᶻ_j ]
//
// over the bonds i -> j of the neighbour shells s = 1, 2, …, with the couplings
// xy[s-1] and z[s-1] and the phases φ of a boundary twist, 1 by default. Both
// lists have the same length.
func XXZ(space *basis.Space, c *lattice.Cluster, xy, z []float64, opts *Options) (operator.Operator, error) {
	if len(xy) != len(z) {
		return operator.Operator{}, fmt.Errorf("model: %d couplings of the xy components and %d of z; give one of each a shell", len(xy), len(z))
	}
	list, err := shells(space, c, len(xy), func(i int) bool { return xy[i] != 0 || z[i] != 0 }, opts)
	if err != nil {
		return operator.Operator{}, err
	}
	var terms []operator.Operator
	for i, s := range list {
		h, err := Exchange(space, s.bonds, xy[i], z[i], s.phases)
		if err != nil {
			return operator.Operator{}, err
		}
		terms = append(terms, h)
	}
	return done(space, terms)
}

// Exchange returns Σ_b [ xy/2 (φ_b S⁺_To S⁻_From + h.c.) + z Sᶻ_From Sᶻ_To ]
// over any list of bonds, of which From and To are used. Phases may be nil,
// which means one; see [Phases]. With xy = z and no phases it is the Heisenberg
// exchange.
func Exchange(space *basis.Space, bonds []lattice.Bond, xy, z float64, phases []complex128) (operator.Operator, error) {
	if err := checkNumbers("an exchange coupling", xy, z); err != nil {
		return operator.Operator{}, err
	}
	if err := checkPhases(bonds, phases); err != nil {
		return operator.Operator{}, err
	}
	o := operator.On(space)
	var terms []operator.Operator
	for i, b := range bonds {
		if xy != 0 {
			flip := o.Raise(b.To).Times(o.Lower(b.From)).Scale(complex(xy/2, 0) * phaseOf(phases, i))
			terms = append(terms, flip, flip.Adjoint())
		}
		if z != 0 {
			terms = append(terms, o.Sz(b.From).Times(o.Sz(b.To)).Scale(complex(z, 0)))
		}
	}
	return done(space, terms)
}

// Field returns -Σ_i h_i·S_i, with the components (x, y, z) of the field on
// each site.
func Field(space *basis.Space, fields [][3]float64) (operator.Operator, error) {
	if space != nil && len(fields) != space.Sites() {
		return operator.Operator{}, fmt.Errorf("model: fields on %d sites of %d; give one a site", len(fields), space.Sites())
	}
	o := operator.On(space)
	var terms []operator.Operator
	for i, h := range fields {
		if err := checkNumbers("a field", h[0], h[1], h[2]); err != nil {
			return operator.Operator{}, err
		}
		for d, s := range []operator.Operator{o.Sx(i), o.Sy(i), o.Sz(i)} {
			if h[d] != 0 {
				terms = append(terms, s.Scale(complex(-h[d], 0)))
			}
		}
	}
	return done(space, terms)
}

// TransverseIsing returns H = -J Σ_⟨ij⟩ σᶻ_i σᶻ_j - h Σ_i σˣ_i with Pauli
// matrices on spins 1/2, over nearest neighbours. On the ring it is solved by
// Pfeuty (Ann. Phys. 57, 79, 1970).
func TransverseIsing(space *basis.Space, c *lattice.Cluster, coupling, field float64) (operator.Operator, error) {
	zz, err := XXZ(space, c, []float64{0}, []float64{-4 * coupling}, nil)
	if err != nil {
		return operator.Operator{}, err
	}
	fields := make([][3]float64, space.Sites())
	for i := range fields {
		if site := space.Site(i); site != basis.SpinHalf() {
			return operator.Operator{}, fmt.Errorf("model: site %d is a %v; the transverse-field Ising model is made of spins 1/2", i, site)
		}
		fields[i][0] = 2 * field
	}
	x, err := Field(space, fields)
	if err != nil {
		return operator.Operator{}, err
	}
	return done(space, []operator.Operator{zz, x})
}

// BilinearBiquadratic returns H = Σ_⟨ij⟩ [J S_i·S_j + K (S_i·S_j)²] over
// nearest neighbours. Spins 1 with K = J/3 are the model of Affleck, Kennedy,
// Lieb and Tasaki (Phys. Rev. Lett. 59, 799, 1987).
func BilinearBiquadratic(space *basis.Space, c *lattice.Cluster, bilinear, biquadratic float64) (operator.Operator, error) {
	if err := checkNumbers("an exchange coupling", bilinear, biquadratic); err != nil {
		return operator.Operator{}, err
	}
	list, err := shells(space, c, 1, func(int) bool { return true }, nil)
	if err != nil {
		return operator.Operator{}, err
	}
	o := operator.On(space)
	var terms []operator.Operator
	for _, b := range list[0].bonds {
		dot := o.Dot(b.From, b.To)
		square := dot.Times(dot).Scale(complex(biquadratic, 0))
		terms = append(terms, dot.Scale(complex(bilinear, 0)).Plus(square).NormalOrdered())
	}
	return done(space, terms)
}
