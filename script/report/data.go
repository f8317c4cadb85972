package report

import "strconv"

// Data returns the levels: sector, energy as given and, if Relative, less the lowest, how
// many levels the theory predicts in the sector, and whether the level belongs to the
// manifold (nothing without one). A sector without levels has a row without energy.
// Errors: those of Write about the data.
func (f SectorSpectrum) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: append([]Column{{Title: "sector"}}, energyColumns(f.Energy, f.Relative)...)}
	t.Columns = append(t.Columns, Column{Title: "levels predicted in the sector"}, Column{Title: "in the manifold"})
	_, levels, err := f.columns()
	if err != nil {
		return Table{}, err
	}
	lowest := gather(levels)[0].value
	inside, err := members(levels, f.Manifold)
	if err != nil {
		return Table{}, err
	}
	for i, s := range f.Sectors {
		for j, e := range s.Levels {
			row := []any{labelled(s.Label, i), e}
			if f.Relative {
				row = append(row, e-lowest)
			}
			t.Add(append(row, s.Predicted, inside[i][j])...)
		}
		if len(s.Levels) == 0 {
			row := []any{labelled(s.Label, i), nil}
			if f.Relative {
				row = append(row, nil)
			}
			t.Add(append(row, s.Predicted, nil)...)
		}
	}
	return t, nil
}

// energyColumns heads the energies as given and, if they are drawn so, less the lowest.
func energyColumns(a Axis, relative bool) []Column {
	if !relative {
		return []Column{{Title: named(a, "energy"), Unit: a.Unit}}
	}
	return []Column{{Title: "energy", Unit: a.Unit}, {Title: named(a, "E − E0"), Unit: a.Unit}}
}

// members says of each level of each column whether it is one of the count lowest; the
// cells are empty for a count of 0.
func members(columns [][]float64, count int) ([][]any, error) {
	cells := make([][]any, len(columns))
	for c, levels := range columns {
		cells[c] = make([]any, len(levels))
	}
	all := gather(columns)
	if count == 0 {
		return cells, nil
	}
	if _, err := manifold(all, count); err != nil {
		return nil, err
	}
	for _, p := range all {
		cells[p.column][p.index] = p.manifold
	}
	return cells, nil
}

// Data returns the levels, each with what was expected in its sector (nothing where no
// counts are) and whether it lies below the line (nothing without one). A sector without
// levels has a row without level. Errors: those of Write about the data.
func (f EntanglementSpectrum) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "sector"}, {Title: named(f.Xi, "entanglement level"), Unit: f.Xi.Unit}, {Title: "levels expected in the sector"}, {Title: "below the line"}}}
	_, levels, err := f.columns()
	if err != nil {
		return Table{}, err
	}
	inside, err := members(levels, f.Below)
	if err != nil {
		return Table{}, err
	}
	for i, s := range f.Sectors {
		var expected any
		if f.Expected != nil {
			expected = f.Expected[i]
		}
		for j, x := range s.Levels {
			t.Add(labelled(s.Label, i), x, expected, inside[i][j])
		}
		if len(s.Levels) == 0 {
			t.Add(labelled(s.Label, i), nil, expected, nil)
		}
	}
	return t, nil
}

// Data returns points and lines: flux, energy, the name of the line (or its index;
// nothing for points) and whether the level belongs to the manifold (nothing for points
// without one). Errors: those of Write about the data.
func (f SpectralFlow) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	unit := f.FluxAxis.Unit
	if unit == "" {
		unit = "flux quanta"
	}
	t := Table{Columns: []Column{{Title: named(f.FluxAxis, "flux"), Unit: unit}, {Title: named(f.Energy, "energy"), Unit: f.Energy.Unit}, {Title: "line"}, {Title: "in the manifold"}}}
	for i, levels := range f.Levels {
		inside, err := members([][]float64{levels}, f.Manifold)
		if err != nil {
			return Table{}, err
		}
		for j, e := range levels {
			t.Add(f.Flux[i], e, nil, inside[0][j])
		}
	}
	for n, line := range f.Flows {
		for i, e := range line.Energies {
			t.Add(f.Flux[i], e, labelled(line.Name, n), line.Manifold)
		}
	}
	return t, nil
}

// Data returns the curves: name (or index), sites in part A and entropy. Errors: those
// of Write about the data.
func (f EntropyProfile) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	unit := f.Entropy.Unit
	if unit == "" {
		unit = "nats"
	}
	t := Table{Columns: []Column{{Title: "curve"}, {Title: named(f.Cut, "sites in part A"), Unit: f.Cut.Unit}, {Title: named(f.Entropy, "entropy"), Unit: unit}}}
	for n, c := range f.Curves {
		for i, s := range c.Entropies {
			t.Add(labelled(c.Name, n), c.Sites[i], s)
		}
	}
	return t, nil
}

// named is the title of an axis, or what its kind of figure calls it.
func named(a Axis, otherwise string) string {
	if a.Title == "" {
		return otherwise
	}
	return unmarked(a.Title)
}

// labelled is a label without marks, or the index in its place.
func labelled(label string, i int) string {
	if label == "" {
		return strconv.Itoa(i)
	}
	return unmarked(label)
}
