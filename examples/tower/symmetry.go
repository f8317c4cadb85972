package main

import (
	"fmt"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
)

// sectors lists all symmetry sectors with their dimensions, and checks that they add
// up to the whole space.
func (m *magnet) sectors() ([]*sector, error) {
	var list []*sector
	for _, twice := range m.magnetisations() {
		part, err := m.sectorsAt(twice)
		if err != nil {
			return nil, err
		}
		list = append(list, part...)
	}
	return list, nil
}

func (m *magnet) sectorsAt(twice int) ([]*sector, error) {
	charges := []basis.ChargeValue{m.space.TwiceSz().Is(twice)}
	opts := &lattice.SymmetryOptions{}
	if m.inversion && twice == 0 {
		opts.Extra = []lattice.Extra{{Action: group.Relabel(m.cluster.Sites(), []int{1, 0})}}
	}
	symmetries, err := m.cluster.SpaceGroup(opts)
	if err != nil {
		return nil, err
	}
	rows, err := symmetries.Sectors()
	if err != nil {
		return nil, err
	}
	var list []*sector
	var parts []basis.Sector
	var multiplicities []int
	for _, row := range rows {
		k := &sector{
			twiceSz: twice, name: row.String(), momentum: row.Momentum.String(), multiplicity: row.Multiplicity,
			spec: basis.Sector{Charges: charges, Symmetries: row.Symmetries},
		}
		if m.inversion && !m.rotations && twice != 0 {
			k.multiplicity *= 2 // the same at -S_z
		}
		list, parts, multiplicities = append(list, k), append(parts, k.spec), append(multiplicities, row.Multiplicity)
	}
	dimensions, err := basis.Whole(m.space, basis.Sector{Charges: charges}, parts, multiplicities)
	if err != nil {
		return nil, fmt.Errorf("2Sz = %d: %w", twice, err)
	}
	for i, d := range dimensions {
		list[i].dimension = d
	}
	return list, nil
}
