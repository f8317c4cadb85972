package report_test

import (
	"fmt"
	"math"
	"os"
	"path/filepath"

	"ketloom/script/report"
)

// The lowest levels of an imaginary film; all numbers are invented.
func ExampleSectorSpectrum() {
	folder, err := os.MkdirTemp("", "figure")
	if err != nil {
		fmt.Println(err)
		return
	}
	defer os.RemoveAll(folder)

	figure := report.SectorSpectrum{
		Page: report.Page{Note: "Invented data: 6 sites, V_{2} = 0.2 V_{1}."},
		Sectors: []report.Sector{
			{Label: "(0,0)", Levels: []float64{-3.10, -2.71, -2.70}, Predicted: 1},
			{Label: "(1,0)", Levels: []float64{-2.75, -2.74}},
			{Label: "(2,0)", Levels: []float64{-3.09, -2.73}, Predicted: 1},
		},
		Energy:   report.Axis{Unit: "V_{1}"},
		Manifold: report.BelowLargestGap,
		ShadeGap: true,
	}
	for _, name := range []string{"film.svg", "film.png", "film.pdf", "film.txt"} {
		fmt.Println(name, figure.Save(filepath.Join(folder, name)))
	}
	// Output:
	// film.svg <nil>
	// film.png <nil>
	// film.pdf <nil>
	// film.txt report: SectorSpectrum: unknown format "txt"; give svg, png or pdf, as the ending of the file
}

func ExampleEntropyProfile() {
	curve := report.EntropyCurve{Name: "ring of 8", Sites: []int{1, 2, 3}, Entropies: []float64{0.69, 0.9, math.NaN()}}
	fmt.Println(report.EntropyProfile{Curves: []report.EntropyCurve{curve}}.Save("entropy.svg"))
	// Output:
	// report: EntropyProfile: unfit data: entropy 2 of curve 0 ring of 8 is NaN; give a finite number below 1e+15 in magnitude
}

func ExampleTable() {
	t := report.Table{Columns: []report.Column{
		{Title: "Sector"}, {Title: "Energy", Unit: "V", Format: "%.6f"}, {Title: "Residual", Unit: "V", Format: "%.1e"},
	}}
	t.Add("(0,0)", -3.1044712, 2.1e-12)
	t.Add("(1,0)", -12.75, nil)
	if err := t.Write(os.Stdout, "txt"); err != nil {
		fmt.Println(err)
	}
	if err := t.Write(os.Stdout, "csv"); err != nil {
		fmt.Println(err)
	}
	// Output:
	// Sector      Energy  Residual
	//                (V)       (V)
	// ------  ----------  --------
	// (0,0)    -3.104471   2.1e-12
	// (1,0)   -12.750000         -
	// Sector,Energy (V),Residual (V)
	// "(0,0)",-3.1044712,2.1e-12
	// "(1,0)",-12.75,
}
