package main

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"time"

	"ketloom/basis/lattice"
	"ketloom/lanczos/archive"
	"ketloom/script/report"
	"ketloom/script/report/page"
)

// publish writes figures, archive, and page and JSON if they are wanted.
func publish(s settings, m *magnet, sectors []*sector, levels []level, structure report.StructureFactorMap, drawing report.LatticeDrawing) error {
	figures := map[string]interface{ Save(string) error }{"structure": structure, "bonds": drawing}
	var tower report.Tower
	if m.rotations {
		tower = towerOf(sectors, levels, note(s, m))
		figures["tower"] = tower
	}
	for _, name := range []string{"tower", "structure", "bonds"} {
		if figure, drawn := figures[name]; drawn {
			if err := figure.Save(s.path(name + "." + s.format)); err != nil {
				return err
			}
		}
	}
	if err := archiveGround(s, m, sectors[levels[0].sector]); err != nil {
		return err
	}
	if s.page != "" {
		if err := writePage(s, m, sectors, levels, tower, structure, drawing); err != nil {
			return err
		}
	}
	if s.json != "" {
		return writeJSON(s, m, sectors, levels, structure)
	}
	return nil
}

// note says what a figure shows.
func note(s settings, m *magnet) string {
	return fmt.Sprintf("%s, %d spins, J1 = %g, J2 = %g, anisotropy %g, field %g", s.lattice, m.cluster.Sites(), s.j1, s.j2, s.anisotropy, s.field)
}

// mostSeries is the number of sectors that have marks of their own.
const mostSeries = 6

// towerOf draws the levels by sector; those of the sectors with the lowest levels have
// names.
func towerOf(sectors []*sector, levels []level, note string) report.Tower {
	figure := report.Tower{
		Page: report.Page{Width: 120, Height: 90, Note: note}, Energy: report.Axis{Unit: "J"}, Relative: true, Line: true,
	}
	place := map[int]int{}
	rest := report.TowerSeries{Name: "other sectors"}
	spins := map[int]bool{}
	for _, l := range levels {
		k := sectors[l.sector]
		twice := k.twiceS[l.index]
		if twice < 0 {
			continue
		}
		at, named := place[l.sector]
		if !named && len(figure.Series) < mostSeries {
			at, named = len(figure.Series), true
			place[l.sector] = at
			figure.Series = append(figure.Series, report.TowerSeries{Name: k.name})
		}
		series := &rest
		if named {
			series = &figure.Series[at]
		}
		series.TwiceS, series.Energies = append(series.TwiceS, twice), append(series.Energies, l.energy)
		spins[twice] = true
	}
	if len(rest.TwiceS) > 0 {
		figure.Series = append(figure.Series, rest)
	}
	figure.Line = len(spins) > 1
	return figure
}

// structureMap draws the structure factor over its period.
func structureMap(s settings, m *magnet, peaks []peak, period [2][2]float64) report.StructureFactorMap {
	figure := report.StructureFactorMap{
		Page:       report.Page{Width: 100, Height: 90, Note: note(s, m)},
		Reciprocal: period,
		Labels:     []report.MomentumLabel{{K: [2]float64{0, 0}, Label: "Γ"}},
	}
	for _, p := range peaks {
		figure.Points = append(figure.Points, report.MomentumValue{K: p.k, Value: p.value})
	}
	return figure
}

// bondDrawing draws the correlations of neighbours.
func bondDrawing(s settings, m *magnet, correlations [][]float64) report.LatticeDrawing {
	c := m.cluster
	figure := report.LatticeDrawing{
		Page:      report.Page{Width: 100, Height: 85, Note: note(s, m)},
		BondValue: report.Axis{Title: "Correlation S_{i}·S_{j}"},
	}
	for i := 0; i < c.Sites(); i++ {
		_, orbital := c.CellOf(i)
		figure.Sites = append(figure.Sites, report.LatticeSite{Position: c.Position(i), Sublattice: orbital})
	}
	bonds, err := c.Bonds(1)
	if err != nil {
		return figure
	}
	for _, b := range bonds {
		figure.Bonds = append(figure.Bonds, report.LatticeBond{From: b.From, To: b.To, Displacement: b.Displacement, Value: math.Round(correlation(c, correlations, b)*1e12) / 1e12})
	}
	return figure
}

// correlation moves a bond to the cell at the origin.
func correlation(c *lattice.Cluster, correlations [][]float64, b lattice.Bond) float64 {
	cell, orbital := c.CellOf(b.From)
	to, other := c.CellOf(b.To)
	return correlations[orbital][c.SiteAt([2]int{to[0] - cell[0], to[1] - cell[1]}, other)]
}

// archiveGround keeps the ground state.
func archiveGround(s settings, m *magnet, ground *sector) error {
	w, err := archive.Create(s.path("ground.ket"))
	if err != nil {
		return err
	}
	if s.plain {
		if err := w.SetCreated(time.Unix(0, 0)); err != nil {
			w.Discard()
			return err
		}
	}
	lowest := *ground.result
	lowest.Levels, lowest.Vectors = lowest.Levels[:1], lowest.Vectors[:1]
	w.Note("cluster", m.cluster.String())
	w.Note("sector", ground.name)
	if err := w.Add(archive.Sector{Basis: ground.basis, Operator: m.h, Result: &lowest}); err != nil {
		w.Discard()
		return err
	}
	if err := w.Close(); err != nil {
		return err
	}
	fmt.Printf("\narchive    %s\n", s.path("ground.ket"))
	return nil
}

// row is a level in the JSON form.
type row struct {
	Energy       float64 `json:"energy"`
	Bound        float64 `json:"bound"`
	Sector       string  `json:"sector"`
	Momentum     string  `json:"momentum"`
	TwiceSz      int     `json:"twice_sz"`
	Spin         string  `json:"spin"`
	Multiplicity int     `json:"multiplicity"`
	Dimension    int64   `json:"dimension"`
}

func rows(sectors []*sector, levels []level) []row {
	var list []row
	for _, l := range levels {
		k := sectors[l.sector]
		list = append(list, row{l.energy, k.result.Levels[l.index].Bound, k.name, k.momentum, k.twiceSz, k.spin(l.index), k.multiplicity, k.dimension})
	}
	return list
}

func writeJSON(s settings, m *magnet, sectors []*sector, levels []level, structure report.StructureFactorMap) error {
	type point struct {
		K     [2]float64 `json:"k"`
		Value float64    `json:"structure_factor"`
	}
	var points []point
	for _, p := range structure.Points {
		points = append(points, point{p.K, p.Value})
	}
	data, err := json.MarshalIndent(map[string]any{
		"cluster": m.cluster.String(), "j1": s.j1, "j2": s.j2, "anisotropy": s.anisotropy, "field": s.field,
		"levels": rows(sectors, levels), "structure": points,
	}, "", " ")
	if err != nil {
		return err
	}
	return os.WriteFile(s.json, append(data, '\n'), 0o666)
}

// writePage gathers the study on one page.
func writePage(s settings, m *magnet, sectors []*sector, levels []level, tower report.Tower, structure report.StructureFactorMap, drawing report.LatticeDrawing) error {
	p := page.New("Does this magnet order?")
	p.Reproducible = s.plain
	p.Text(fmt.Sprintf("%d spins 1/2 on the %s lattice with\n\n$$H = \\sum_s J_s \\sum_{\\langle ij\\rangle_s} (S^x_i S^x_j + S^y_i S^y_j + \\Delta S^z_i S^z_j) - h \\sum_i S^z_i,$$\n\n$J_1 = %g$, $J_2 = %g$, $\\Delta = %g$, $h = %g$, in all symmetry sectors of the cluster. A finite cluster is not the thermodynamic limit: look at several sizes.",
		m.cluster.Sites(), s.lattice, s.j1, s.j2, s.anisotropy, s.field))
	if m.rotations {
		p.Text("## Tower of states\n\nIn an ordered magnet the lowest level of each spin lies at $S(S+1)/2\\chi N$ above the ground state, and below all others.")
		p.Figure(tower, "Levels against total spin; the line goes through the lowest ones.")
	}
	t := report.Table{Title: "Lowest levels", Columns: []report.Column{{Title: "energy", Unit: "J", Format: "%.10f"}, {Title: "bound", Unit: "J", Format: "%.1e"},
		{Title: "sector"}, {Title: "S"}, {Title: "2Sz"}, {Title: "multiplicity"}, {Title: "dimension"}}}
	for i, r := range rows(sectors, levels) {
		if i < 2*mostPrinted {
			t.Add(r.Energy, r.Bound, r.Sector, r.Spin, r.TwiceSz, r.Multiplicity, int(r.Dimension))
		}
	}
	p.Table(t)
	p.Text("## Where the order is\n\nThe static structure factor $S(k) = N^{-1} \\sum_{ij} e^{ik(r_i-r_j)} \\langle S_i \\cdot S_j\\rangle$ of the ground state, and its correlations on bonds.")
	p.Figure(structure, "Structure factor over the zone in which it repeats.")
	p.Figure(drawing, "Correlations of nearest neighbours.")
	if err := p.Archive(s.path("ground.ket"), "The ground state with Hamiltonian and sector."); err != nil {
		return err
	}
	p.Seed("start vectors", s.seed)
	return p.Save(s.page)
}
