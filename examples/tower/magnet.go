package main

import (
	"fmt"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/operator"
	"ketloom/operator/model"
)

// magnet is the cluster with its Hamiltonian.
type magnet struct {
	cluster   *lattice.Cluster
	space     *basis.Space
	h         operator.Operator
	rotations bool // all rotations of the spins are symmetries, so that S is a good number
	inversion bool // so is turning all spins over
}

// newMagnet builds H = Σ_s J_s Σ_⟨ij⟩ (Sˣ_i Sˣ_j + Sʸ_i Sʸ_j + Δ Sᶻ_i Sᶻ_j) - h Σ_i Sᶻ_i.
func newMagnet(s settings) (*magnet, error) {
	shapes := map[string]lattice.Lattice{
		"square": lattice.Square(), "triangular": lattice.Triangular(), "kagome": lattice.Kagome(), "honeycomb": lattice.Honeycomb(),
	}
	shape, known := shapes[s.lattice]
	if !known {
		return nil, fmt.Errorf("-lattice %q: give square, triangular, kagome or honeycomb", s.lattice)
	}
	c, err := lattice.New(shape, s.t1, s.t2)
	if err != nil {
		return nil, err
	}
	space, err := basis.Uniform(c.Sites(), basis.SpinHalf())
	if err != nil {
		return nil, err
	}
	couplings, along := []float64{s.j1}, []float64{s.j1 * s.anisotropy}
	if s.j2 != 0 {
		couplings, along = append(couplings, s.j2), append(along, s.j2*s.anisotropy)
	}
	h, err := model.XXZ(space, c, couplings, along, nil)
	if err != nil {
		return nil, err
	}
	if s.field != 0 {
		o := operator.On(space)
		for i := 0; i < c.Sites(); i++ {
			h = h.Minus(o.Sz(i).Scale(complex(s.field, 0)))
		}
	}
	return &magnet{cluster: c, space: space, h: h, rotations: s.anisotropy == 1, inversion: s.field == 0}, h.Err()
}

// magnetisations returns twice the S_z to look at: the smallest alone where each
// multiplet of S reaches down to it, all that are not mirror images else.
func (m *magnet) magnetisations() []int {
	n := m.cluster.Sites()
	if m.rotations && m.inversion {
		return []int{n % 2}
	}
	lowest := -n
	if m.inversion {
		lowest = n % 2
	}
	var list []int
	for twice := lowest; twice <= n; twice += 2 {
		list = append(list, twice)
	}
	return list
}
