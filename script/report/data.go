package report

import "strconv"

// Data returns the levels: sector, level, and how many the theory predicts there.
// Errors: those of Write about the data.
func (f SectorSpectrum) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "sector"}, {Title: named(f.Energy, "energy"), Unit: f.Energy.Unit}, {Title: "levels predicted in the sector"}}}
	for i, s := range f.Sectors {
		for _, e := range s.Levels {
			t.Add(labelled(s.Label, i), e, s.Predicted)
		}
	}
	return t, nil
}

// Data returns the levels, each with what was expected in its sector, nothing where
// no counts are. Errors: those of Write about the data.
func (f EntanglementSpectrum) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "sector"}, {Title: named(f.Xi, "entanglement level"), Unit: f.Xi.Unit}, {Title: "levels expected in the sector"}}}
	for i, s := range f.Sectors {
		var expected any
		if f.Expected != nil {
			expected = f.Expected[i]
		}
		for _, x := range s.Levels {
			t.Add(labelled(s.Label, i), x, expected)
		}
	}
	return t, nil
}

// Data returns points and lines: flux, energy, the name of the line (or its index;
// nothing for points) and whether it belongs to the manifold. Errors: those of Write
// about the data.
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
		for _, e := range levels {
			t.Add(f.Flux[i], e, nil, nil)
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
