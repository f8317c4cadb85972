package main

import (
	"fmt"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
)

// shape is a cluster with all symmetries of its lattice.
type shape struct {
	lattice lattice.Lattice
	periods map[int][2][2]int // by number of sites
	order   int               // of the rotation
	center  [2]float64        // of the rotation, in units of a1 and a2
}

var shapes = map[string]shape{
	"square":     {lattice.Square(), map[int][2][2]int{16: {{4, 0}, {0, 4}}, 36: {{6, 0}, {0, 6}}}, 4, [2]float64{0, 0}},
	"triangular": {lattice.Triangular(), map[int][2][2]int{12: {{2, 2}, {-2, 4}}, 36: {{6, 0}, {0, 6}}}, 6, [2]float64{0, 0}},
	"kagome":     {lattice.Kagome(), map[int][2][2]int{12: {{2, 0}, {0, 2}}, 36: {{2, 2}, {-2, 4}}}, 6, [2]float64{0.5, 0.5}},
}

// cluster returns the cluster that the flags ask for.
func cluster(s settings) (*lattice.Cluster, error) {
	k, ok := shapes[s.lattice]
	if !ok {
		return nil, fmt.Errorf("-lattice %q: give square, triangular or kagome", s.lattice)
	}
	t, ok := k.periods[s.sites]
	if !ok {
		return nil, fmt.Errorf("-sites %d: the square lattice has clusters of 16 and 36 sites, the others of 12 and 36", s.sites)
	}
	return lattice.New(k.lattice, t[0], t[1])
}

// symmetric returns the sector of S_z = 0 in which every symmetry acts as one, and
// spin inversion as +1 or -1.
func symmetric(s settings, c *lattice.Cluster, space *basis.Space) (basis.Sector, error) {
	k := shapes[s.lattice]
	a1, a2 := k.lattice.A1, k.lattice.A2
	center := [2]float64{k.center[0]*a1[0] + k.center[1]*a2[0], k.center[0]*a1[1] + k.center[1]*a2[1]}
	rotation, err := c.Rotation(center, k.order)
	if err != nil {
		return basis.Sector{}, err
	}
	reflection, err := c.Reflection(center, a1)
	if err != nil {
		return basis.Sector{}, err
	}
	inversion := group.Eigenvalue{Generator: group.Relabel(c.Sites(), []int{1, 0})}
	if s.odd {
		inversion.Turn = group.NewTurn(1, 2)
	}
	return basis.Sector{
		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: append(c.Sector(c.Momentum(0, 0)), group.Eigenvalue{Generator: rotation}, group.Eigenvalue{Generator: reflection}, inversion),
	}, nil
}
