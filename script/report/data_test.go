package report

import (
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
			"sector,energy (V),levels predicted in the sector\n\"(0,0)\",-1,1\n\"(0,0)\",2.5,1\n1,0.25,0\n"},
		"cut": {EntanglementSpectrum{Sectors: []Sector{{Label: "k_{x}", Levels: []float64{3, 8}}}, Expected: []int{1}, Below: 1},
			"sector,entanglement level,levels expected in the sector\nkx,3,1\nkx,8,1\n"},
		"flow": {SpectralFlow{Flux: []float64{0, 0.5}, Levels: [][]float64{{1}, {2}}, Flows: []Flow{{Energies: []float64{1, 2}, Manifold: true}}},
			"flux (flux quanta),energy,line,in the manifold\n0,1,,\n0.5,2,,\n0,1,0,true\n0.5,2,0,true\n"},
		"entropy": {EntropyProfile{Curves: []EntropyCurve{{Name: "ground", Sites: []int{1, 2}, Entropies: []float64{0.5, 0.75}}}},
			"curve,sites in part A,entropy (nats)\nground,1,0.5\nground,2,0.75\n"},
		"tower": {Tower{Series: []TowerSeries{{Name: "A_{1}", TwiceS: []int{3}, Energies: []float64{-2}}}},
			"series,S,S(S+1),energy\nA1,1.5,3.75,-2\n"},
		"convergence": {Convergence{Curves: []ConvergenceCurve{{Steps: []float64{1, 2}, Values: []float64{1, 0}}}},
			"curve,products,residual\n0,1,1\n0,2,0\n"},
		"extrapolation": {Extrapolation{Series: []ScalingSeries{{X: []float64{0.5}, Y: []float64{2}, Degree: -1}}},
			"series,1/N,value,standard error\n0,0.5,2,\n"},
		"statistics": {LevelStatistics{Ratios: []float64{0.1, 0.9, 1}, Bins: 2},
			"r from,r to,ratios,density\n0,0.5,1,0.6666666666666666\n0.5,1,2,1.3333333333333333\n"},
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
