package report

import (
	"bytes"
	"errors"
	"strings"
	"testing"
)

// tabled is a figure with its numbers.
type tabled interface {
	figure
	Data() (Table, error)
}

// Each figure gives its numbers as a table that can be written as CSV, and refuses the
// data that it does not draw.
func TestFiguresGiveTheirNumbers(t *testing.T) {
	for name, c := range map[string]struct {
		figure tabled
		want   string
	}{
		"sectors": {SectorSpectrum{Sectors: []Sector{{Label: "(0,0)", Levels: []float64{-1, 2.5}, Predicted: 1}, {Levels: []float64{0.25}}}, Energy: Axis{Unit: "V"}},
			"sector,energy (V),levels predicted in the sector,in the manifold\n\"(0,0)\",-1,1,\n\"(0,0)\",2.5,1,\n1,0.25,0,\n"},
		"relative": {SectorSpectrum{Sectors: []Sector{{Levels: []float64{4, -1}}, {Predicted: 2}}, Energy: Axis{Title: "Excitation"}, Relative: true, Manifold: BelowLargestGap},
			"sector,energy,Excitation,levels predicted in the sector,in the manifold\n0,4,5,0,false\n0,-1,0,0,true\n1,,,2,\n"},
		"cut": {EntanglementSpectrum{Sectors: []Sector{{Label: "k_{x}", Levels: []float64{8, 3}}, {}}, Expected: []int{1, 0}, Below: 1},
			"sector,entanglement level,levels expected in the sector,below the line\nkx,8,1,false\nkx,3,1,true\n1,,0,\n"},
		"points": {SpectralFlow{Flux: []float64{0, 0.5}, Levels: [][]float64{{3, 1}, {1, 1}}, Manifold: 1},
			"flux (flux quanta),energy,line,in the manifold\n0,3,,false\n0,1,,true\n0.5,1,,true\n0.5,1,,false\n"},
		"flow": {SpectralFlow{Flux: []float64{0, 0.5}, Levels: [][]float64{{1}, {2}}, Flows: []Flow{{Energies: []float64{1, 2}, Manifold: true}}},
			"flux (flux quanta),energy,line,in the manifold\n0,1,,\n0.5,2,,\n0,1,0,true\n0.5,2,0,true\n"},
		"entropy": {EntropyProfile{Curves: []EntropyCurve{{Name: "ground", Sites: []int{1, 2}, Entropies: []float64{0.5, 0.75}}}},
			"curve,sites in part A,entropy (nats)\nground,1,0.5\nground,2,0.75\n"},
		"tower": {Tower{Series: []TowerSeries{{Name: "A_{1}", TwiceS: []int{3}, Energies: []float64{-2}}}},
			"series,S,S(S+1),energy\nA1,1.5,3.75,-2\n"},
		"relative tower": {Tower{Series: []TowerSeries{{TwiceS: []int{2, 0}, Energies: []float64{-2, -3}}}, Relative: true, Energy: Axis{Unit: "J"}},
			"series,S,S(S+1),energy (J),E − E0 (J)\n0,1,2,-2,1\n0,0,0,-3,0\n"},
		"convergence": {Convergence{Curves: []ConvergenceCurve{{Steps: []float64{1, 2}, Values: []float64{1, 0}}}},
			"curve,products,residual\n0,1,1\n0,2,0\n"},
		"extrapolation": {Extrapolation{Series: []ScalingSeries{{X: []float64{0.5}, Y: []float64{2}, Degree: -1}}},
			"series,kind,1/N,value,standard error,degree of the fit\n0,point,0.5,2,,\n"},
		"extrapolated": {Extrapolation{Quantity: Axis{Unit: "J"}, Series: []ScalingSeries{{Name: "gap", X: []float64{0.5}, Y: []float64{2}, Errors: []float64{0.25}}}},
			"series,kind,1/N,value (J),standard error (J),degree of the fit\ngap,point,0.5,2,0.25,0\ngap,extrapolated,0,2,0.25,0\n"},
		"statistics": {LevelStatistics{Ratios: []float64{0.1, 0.9, 1}, Bins: 2},
			"r from,r to,ratios,density,Poisson density at the middle,GOE density at the middle\n0,0.5,1,0.6666666666666666,1.28,1.068822319523228\n0.5,1,2,1.3333333333333333,0.6530612244897959,1.0894284973222799\n"},
	} {
		table, err := c.figure.Data()
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		var text strings.Builder
		if err := table.Write(&text, "csv"); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		if text.String() != c.want {
			t.Errorf("%s:\n%swant\n%s", name, text.String(), c.want)
		}
	}
	for name, f := range map[string]tabled{
		"sectors": SectorSpectrum{}, "cut": EntanglementSpectrum{}, "flow": SpectralFlow{}, "entropy": EntropyProfile{},
		"tower": Tower{}, "convergence": Convergence{}, "extrapolation": Extrapolation{}, "statistics": LevelStatistics{},
	} {
		if _, err := f.Data(); !errors.Is(err, ErrData) {
			t.Errorf("%s without data: %v", name, err)
		}
	}
}

// From the numbers alone the figure can be drawn again, to the byte.
func TestFiguresAreRedrawnFromTheirNumbers(t *testing.T) {
	for name, c := range map[string]struct {
		figure tabled
		again  func(rows [][]any) figure
	}{
		"sectors": {specimens()["sectors"].(SectorSpectrum), func(rows [][]any) figure {
			f := specimens()["sectors"].(SectorSpectrum)
			f.Sectors, f.Manifold = nil, 0
			for _, row := range rows {
				label := row[0].(string)
				if n := len(f.Sectors); n == 0 || f.Sectors[n-1].Label != label {
					f.Sectors = append(f.Sectors, Sector{Label: label, Predicted: row[2].(int)})
				}
				if row[1] != nil {
					s := &f.Sectors[len(f.Sectors)-1]
					s.Levels = append(s.Levels, row[1].(float64))
					if row[3].(bool) {
						f.Manifold++
					}
				}
			}
			return f
		}},
		"tower": {specimens()["tower"].(Tower), func(rows [][]any) figure {
			f := specimens()["tower"].(Tower)
			f.Series = nil
			for _, row := range rows {
				name := row[0].(string)
				if name == "2" { // the index of what has no name
					name = ""
				}
				if n := len(f.Series); n == 0 || f.Series[n-1].Name != name {
					f.Series = append(f.Series, TowerSeries{Name: name})
				}
				s := &f.Series[len(f.Series)-1]
				s.TwiceS, s.Energies = append(s.TwiceS, int(2*row[1].(float64))), append(s.Energies, row[3].(float64))
			}
			return f
		}},
		"convergence": {specimens()["convergence"].(Convergence), func(rows [][]any) figure {
			f := specimens()["convergence"].(Convergence)
			f.Curves = nil
			for _, row := range rows {
				if n := len(f.Curves); n == 0 || f.Curves[n-1].Name != row[0] {
					f.Curves = append(f.Curves, ConvergenceCurve{Name: row[0].(string)})
				}
				c := &f.Curves[len(f.Curves)-1]
				c.Steps, c.Values = append(c.Steps, row[1].(float64)), append(c.Values, row[2].(float64))
			}
			return f
		}},
		"extrapolation": {specimens()["extrapolation"].(Extrapolation), func(rows [][]any) figure {
			f := specimens()["extrapolation"].(Extrapolation)
			f.Series = nil
			for _, row := range rows {
				if row[1] == "extrapolated" {
					continue
				}
				name := row[0].(string)
				if name == "2" {
					name = ""
				}
				if n := len(f.Series); n == 0 || f.Series[n-1].Name != name {
					f.Series = append(f.Series, ScalingSeries{Name: name, Degree: -1})
				}
				s := &f.Series[len(f.Series)-1]
				s.X, s.Y = append(s.X, row[2].(float64)), append(s.Y, row[3].(float64))
				if row[4] != nil {
					s.Errors = append(s.Errors, row[4].(float64))
				}
				if row[5] != nil {
					s.Degree = row[5].(int)
				}
			}
			return f
		}},
	} {
		table, err := c.figure.Data()
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(rendered(t, c.again(table.Rows), "svg"), rendered(t, c.figure, "svg")) {
			t.Errorf("%s: another figure from the numbers\n%v", name, table)
		}
	}
}
