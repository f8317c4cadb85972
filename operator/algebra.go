package operator

import (
	"fmt"

	"ketloom/basis"
)

// Spin components of an electron site.
const (
	Up   = 0
	Down = 1
)

// Algebra makes the elementary operators on one space.
type Algebra struct {
	space *basis.Space
}

// On returns the algebra of operators on a space.
func On(space *basis.Space) Algebra { return Algebra{space} }

// Zero returns the operator 0.
func (o Algebra) Zero() Operator {
	if o.space == nil {
		return failed(nil, fmt.Errorf("operator: no space; make one with basis.NewSpace or basis.Uniform"))
	}
	return Operator{space: o.space}
}

// One returns the identity.
func (o Algebra) One() Operator { return o.product(1) }

// product returns coefficient times the factors.
func (o Algebra) product(coefficient complex128, factors ...Factor) Operator {
	if o.space == nil {
		return o.Zero()
	}
	for _, f := range factors {
		if err := f.check(o.space); err != nil {
			return failed(o.space, err)
		}
	}
	return Operator{space: o.space, terms: []Term{{coefficient, factors}}}
}

// kind returns the kind of a site, or an operator that carries the error that
// there is no such site.
func (o Algebra) kind(site int) (basis.Kind, error) {
	if o.space == nil {
		return "", o.Zero().err
	}
	if site < 0 || site >= o.space.Sites() {
		return "", fmt.Errorf("operator: site %d; the space has the sites 0 … %d", site, o.space.Sites()-1)
	}
	return o.space.Site(site).Kind, nil
}

// on returns the elementary operator on a site if the site is of one of the
// given kinds.
func (o Algebra) on(site int, what string, symbol Symbol, kinds ...basis.Kind) Operator {
	kind, err := o.kind(site)
	if err != nil {
		return failed(o.space, err)
	}
	for _, k := range kinds {
		if k == kind {
			return o.product(1, Factor{Mode: o.space.ModeOf(site, 0), Symbol: symbol})
		}
	}
	return failed(o.space, fmt.Errorf("operator: %s on site %d, which is a %v; it exists on sites of kind %v", what, site, o.space.Site(site), kinds))
}

// Raise returns S⁺ of a spin or electron site (on the latter c†_↑ c_↓).
func (o Algebra) Raise(site int) Operator {
	if kind, err := o.kind(site); err == nil && kind == basis.KindElectron {
		return o.CreateSpin(site, Up).Times(o.AnnihilateSpin(site, Down))
	}
	return o.on(site, "S⁺", Raise, basis.KindSpin)
}

// Lower returns S⁻ of a spin or electron site.
func (o Algebra) Lower(site int) Operator { return o.Raise(site).Adjoint() }

// Sz returns Sᶻ of a spin or electron site (on the latter (n_↑ - n_↓)/2).
func (o Algebra) Sz(site int) Operator {
	if kind, err := o.kind(site); err == nil && kind == basis.KindElectron {
		return o.NumberSpin(site, Up).Minus(o.NumberSpin(site, Down)).Scale(0.5)
	}
	return o.on(site, "Sᶻ", SpinZ, basis.KindSpin)
}

// Sx returns Sˣ = (S⁺ + S⁻)/2.
func (o Algebra) Sx(site int) Operator {
	return o.Raise(site).Plus(o.Lower(site)).Scale(0.5)
}

// Sy returns Sʸ = (S⁺ - S⁻)/2i.
func (o Algebra) Sy(site int) Operator {
	return o.Raise(site).Minus(o.Lower(site)).Scale(-0.5i)
}

// Dot returns S_i·S_j = Sᶻ_i Sᶻ_j + (S⁺_i S⁻_j + S⁻_i S⁺_j)/2.
func (o Algebra) Dot(i, j int) Operator {
	flips := o.Raise(i).Times(o.Lower(j)).Plus(o.Lower(i).Times(o.Raise(j)))
	return o.Sz(i).Times(o.Sz(j)).Plus(flips.Scale(0.5))
}

// Create returns b† of a boson or c† of a spinless fermion site.
func (o Algebra) Create(site int) Operator {
	return o.on(site, "a creator", Raise, basis.KindBoson, basis.KindFermion)
}

// Annihilate returns b of a boson or c of a spinless fermion site.
func (o Algebra) Annihilate(site int) Operator {
	return o.on(site, "an annihilator", Lower, basis.KindBoson, basis.KindFermion)
}

// Number returns the number of bosons, fermions or electrons on a site.
func (o Algebra) Number(site int) Operator {
	if kind, err := o.kind(site); err == nil && kind == basis.KindElectron {
		return o.NumberSpin(site, Up).Plus(o.NumberSpin(site, Down))
	}
	return o.on(site, "a number", Number, basis.KindBoson, basis.KindFermion)
}

// CreateSpin returns c†_σ of an electron site, σ = Up or Down.
func (o Algebra) CreateSpin(site, spin int) Operator { return o.electron(site, spin, Raise) }

// AnnihilateSpin returns c_σ of an electron site.
func (o Algebra) AnnihilateSpin(site, spin int) Operator { return o.electron(site, spin, Lower) }

// NumberSpin returns n_σ of an electron site.
func (o Algebra) NumberSpin(site, spin int) Operator { return o.electron(site, spin, Number) }

func (o Algebra) electron(site, spin int, symbol Symbol) Operator {
	kind, err := o.kind(site)
	if err != nil {
		return failed(o.space, err)
	}
	if kind != basis.KindElectron {
		return failed(o.space, fmt.Errorf("operator: an electron operator on site %d, which is a %v", site, o.space.Site(site)))
	}
	if spin != Up && spin != Down {
		return failed(o.space, fmt.Errorf("operator: spin component %d on site %d; use operator.Up or operator.Down", spin, site))
	}
	return o.product(1, Factor{Mode: o.space.ModeOf(site, spin), Symbol: symbol})
}

// Transfer returns |to⟩⟨from| on the levels of a spin or boson site.
func (o Algebra) Transfer(site, to, from int) Operator {
	kind, err := o.kind(site)
	if err != nil {
		return failed(o.space, err)
	}
	if kind == basis.KindElectron || kind == basis.KindFermion {
		return failed(o.space, fmt.Errorf("operator: |%d⟩⟨%d| on site %d, which is a %v; use creators and annihilators", to, from, site, kind))
	}
	return o.product(1, Factor{Mode: o.space.ModeOf(site, 0), Symbol: Transfer, To: to, From: from})
}
