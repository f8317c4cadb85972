package model

import (
	"fmt"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// Hops returns -t Σ_b (φ_b c†_To c_From + h.c.) over any list of bonds, of
// which From and To are used, for bosons, spinless fermions, or electrons (both
// spins hop). Phases may be nil, which means one; see [Phases].
func Hops(space *basis.Space, bonds []lattice.Bond, t float64, phases []complex128) (operator.Operator, error) {
	if err := checkNumbers("a hopping amplitude", t); err != nil {
		return operator.Operator{}, err
	}
	if err := checkPhases(bonds, phases); err != nil {
		return operator.Operator{}, err
	}
	if space == nil {
		return done(space, nil)
	}
	var terms []operator.Operator
	for i, b := range bonds {
		for _, hop := range transfers(space, b) {
			hop = hop.Scale(complex(-t, 0) * phaseOf(phases, i))
			terms = append(terms, hop, hop.Adjoint())
		}
	}
	return done(space, terms)
}

// transfers returns c†_To c_From, for each spin of electrons.
func transfers(space *basis.Space, b lattice.Bond) []operator.Operator {
	o := operator.On(space)
	if b.To >= 0 && b.To < space.Sites() && space.Site(b.To).Kind == basis.KindElectron {
		var list []operator.Operator
		for _, spin := range []int{operator.Up, operator.Down} {
			list = append(list, o.CreateSpin(b.To, spin).Times(o.AnnihilateSpin(b.From, spin)))
		}
		return list
	}
	return []operator.Operator{o.Create(b.To).Times(o.Annihilate(b.From))}
}

// Repulsion returns V Σ_b n_From n_To over any list of bonds.
func Repulsion(space *basis.Space, bonds []lattice.Bond, v float64) (operator.Operator, error) {
	if err := checkNumbers("a repulsion", v); err != nil {
		return operator.Operator{}, err
	}
	o := operator.On(space)
	var terms []operator.Operator
	for _, b := range bonds {
		terms = append(terms, o.Number(b.From).Times(o.Number(b.To)).Scale(complex(v, 0)))
	}
	return done(space, terms)
}

// TV returns the t-V model of spinless fermions or of hard-core or soft bosons,
//
//	H = Σ_s Σ_⟨ij⟩ [ -t_s (φ_ij c†_j c_i + h.c.) + V_s n_i n_j ]
//
// over the bonds i -> j of the neighbour shells s = 1, 2, …, with the couplings
// t[s-1] and v[s-1], both lists of the same length, and the phases of a
// boundary twist, 1 by default. v may be nil, which means none.
func TV(space *basis.Space, c *lattice.Cluster, t, v []float64, opts *Options) (operator.Operator, error) {
	if v == nil {
		v = make([]float64, len(t))
	}
	if len(t) != len(v) {
		return operator.Operator{}, fmt.Errorf("model: %d hopping amplitudes and %d repulsions; give one of each a shell", len(t), len(v))
	}
	list, err := shells(space, c, len(t), func(i int) bool { return t[i] != 0 || v[i] != 0 }, opts)
	if err != nil {
		return operator.Operator{}, err
	}
	var terms []operator.Operator
	for i, s := range list {
		hops, err := Hops(space, s.bonds, t[i], s.phases)
		if err != nil {
			return operator.Operator{}, err
		}
		repulsion, err := Repulsion(space, s.bonds, v[i])
		if err != nil {
			return operator.Operator{}, err
		}
		terms = append(terms, hops, repulsion)
	}
	return done(space, terms)
}

// Hubbard returns the Hubbard model on electron sites,
//
//	H = -Σ_s t_s Σ_⟨ij⟩σ (φ_ij c†_jσ c_iσ + h.c.) + U Σ_i n_i↑ n_i↓
//
// with the hopping amplitude t[s-1] on the neighbour shell s.
func Hubbard(space *basis.Space, c *lattice.Cluster, t []float64, u float64, opts *Options) (operator.Operator, error) {
	hops, err := TV(space, c, t, nil, opts)
	if err != nil {
		return operator.Operator{}, err
	}
	if err := checkNumbers("the repulsion U", u); err != nil {
		return operator.Operator{}, err
	}
	o := operator.On(space)
	terms := []operator.Operator{hops}
	for i := range space.Sites() {
		terms = append(terms, o.NumberSpin(i, operator.Up).Times(o.NumberSpin(i, operator.Down)).Scale(complex(u, 0)))
	}
	return done(space, terms)
}

// TJ returns H = -t Σ_⟨ij⟩σ (φ_ij c†_jσ c_iσ + h.c.) + J Σ_⟨ij⟩ (S_i·S_j -
// n_i n_j/4) over nearest neighbours on electron sites. It is the t-J model on
// a basis with the constraint basis.Space.NoDoubleOccupancy.
func TJ(space *basis.Space, c *lattice.Cluster, t, j float64, opts *Options) (operator.Operator, error) {
	hops, err := TV(space, c, []float64{t}, []float64{-j / 4}, opts)
	if err != nil {
		return operator.Operator{}, err
	}
	exchange, err := XXZ(space, c, []float64{j}, []float64{j}, nil)
	if err != nil {
		return operator.Operator{}, err
	}
	return done(space, []operator.Operator{hops, exchange})
}

// BoseHubbard returns H = -t Σ_⟨ij⟩ (φ_ij b†_j b_i + h.c.) + U/2 Σ_i n_i(n_i-1)
// over nearest neighbours on boson sites.
func BoseHubbard(space *basis.Space, c *lattice.Cluster, t, u float64, opts *Options) (operator.Operator, error) {
	hops, err := TV(space, c, []float64{t}, nil, opts)
	if err != nil {
		return operator.Operator{}, err
	}
	if err := checkNumbers("the repulsion U", u); err != nil {
		return operator.Operator{}, err
	}
	o := operator.On(space)
	terms := []operator.Operator{hops}
	for i := range space.Sites() {
		n := o.Number(i)
		terms = append(terms, n.Times(n.Minus(o.One())).Scale(complex(u/2, 0)))
	}
	return done(space, terms)
}
