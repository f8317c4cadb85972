package model

import (
	"fmt"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// OnCluster returns the model with all its bands as an operator on a cluster of
// its lattice, on a space of spinless fermions or bosons with the sites of the
// cluster:
//
//	H = Σ_r [ Σ t·φ c†_{To, r+R} c_{From, r} + h.c. ] + Σ_r Σ V n_{From, r} n_{To, r+R}
//
// with the phases φ of a boundary twist, 1 by default. Terms that lead beyond
// an open boundary are left out. In the gauge lattice.Uniform the operator
// commutes with the translations of the cluster.
//
// Errors: an impossible model, a cluster with another number of orbitals or
// space with another number of sites, a hopping or interaction that joins a
// site of the cluster to itself.
func (m TightBinding) OnCluster(space *basis.Space, c *lattice.Cluster, opts *Options) (operator.Operator, error) {
	if err := m.Check(); err != nil {
		return operator.Operator{}, err
	}
	if _, err := shells(space, c, 0, nil, opts); err != nil {
		return operator.Operator{}, err
	}
	if c.Orbitals() != m.Orbitals() || c.Lattice().Dimension != m.Lattice.Dimension {
		return operator.Operator{}, fmt.Errorf("model: %q has %d orbitals a cell, the cluster (%v) %d; make the cluster with the Lattice of the model", m.Name, m.Orbitals(), c, c.Orbitals())
	}
	o := operator.On(space)
	var terms []operator.Operator
	for i, h := range m.Hoppings {
		if h.onSite() {
			for site := h.From; site < c.Sites(); site += c.Orbitals() {
				terms = append(terms, o.Number(site).Scale(h.Amplitude))
			}
			continue
		}
		bonds, err := m.links(c, h.From, h.To, h.Cells, fmt.Sprintf("hopping %d", i))
		if err != nil {
			return operator.Operator{}, err
		}
		phases := Phases(c, bonds, opts)
		for n, b := range bonds {
			hop := o.Create(b.To).Times(o.Annihilate(b.From)).Scale(h.Amplitude * phaseOf(phases, n))
			terms = append(terms, hop, hop.Adjoint())
		}
	}
	for i, v := range m.Interactions {
		bonds, err := m.links(c, v.From, v.To, v.Cells, fmt.Sprintf("interaction %d", i))
		if err != nil {
			return operator.Operator{}, err
		}
		repulsion, err := Repulsion(space, bonds, v.Strength)
		if err != nil {
			return operator.Operator{}, err
		}
		terms = append(terms, repulsion)
	}
	return done(space, terms)
}

// links returns the bonds of one hopping or interaction on the cluster.
func (m TightBinding) links(c *lattice.Cluster, from, to int, cells [2]int, what string) ([]lattice.Bond, error) {
	var bonds []lattice.Bond
	for site := from; site < c.Sites(); site += c.Orbitals() {
		cell, _ := c.CellOf(site)
		end := c.SiteAt([2]int{cell[0] + cells[0], cell[1] + cells[1]}, to)
		if end == site {
			return nil, fmt.Errorf("model: %s of %q joins site %d to itself on this cluster (%v); use a larger cluster", what, m.Name, site, c)
		}
		if b, ok := c.BondTo(site, cells, to); ok {
			bonds = append(bonds, b)
		}
	}
	return bonds, nil
}
