package report_test

import (
	"fmt"
	"os"

	"ketloom/script/report"
)

// The tower of an imaginary magnet; all numbers are invented.
func ExampleTower() {
	tower := report.Tower{
		Series: []report.TowerSeries{
			{Name: "Γ A_{1}", TwiceS: []int{0, 4}, Energies: []float64{-11.2, -10.5}},
			{Name: "M A_{1}", TwiceS: []int{2, 2}, Energies: []float64{-10.95, -9.75}},
		},
		Energy: report.Axis{Unit: "J"}, Relative: true, Line: true,
	}
	table, err := tower.Data()
	if err != nil {
		fmt.Println(err)
		return
	}
	table.Columns[4].Format = "%.2f"
	fmt.Println(table)
	tower.Series[0].TwiceS[0] = -2
	fmt.Println(tower.Save("tower.svg"))
	// Output:
	// series  S  S(S+1)  energy  E − E0
	//                       (J)     (J)
	// ------  -  ------  ------  ------
	// Γ A1    0       0   -11.2    0.00
	// Γ A1    2       6   -10.5    0.70
	// M A1    1       2  -10.95    0.25
	// M A1    1       2   -9.75    1.45
	//
	// report: Tower: unfit data: level 0 of series 0 Γ A_{1} has twice the spin -2; give 0 to 1048576
}

// Invented energies per site of three clusters with N sites, extrapolated in 1/N.
func ExampleFitPolynomial() {
	x := []float64{1. / 16, 1. / 24, 1. / 32}
	y := []float64{-0.70, -0.68, -0.67}
	fit, err := report.FitPolynomial(x, y, []float64{0.001, 0.001, 0.001}, 1)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.4f ± %.4f, χ² = %.2f with %d degree of freedom\n", fit.Value, fit.Error, fit.ChiSquare, fit.Freedom)
	_, err = report.FitPolynomial(x[:2], y[:2], nil, 2)
	fmt.Println(err)
	// Output:
	// -0.6400 ± 0.0021, χ² = 0.00 with 1 degree of freedom
	// unfit data: a polynomial of degree 2 through 2 points; give a degree from 0 to 8 and more points than that
}

func ExampleExtrapolation() {
	gap := report.Extrapolation{
		Series: []report.ScalingSeries{{Name: "gap", X: []float64{0.25, 0.125, 0.0625}, Y: []float64{0.75, 0.5, 0.375}, Errors: []float64{0.01, 0.01, 0.01}, Degree: 1}},
		Size:   report.Axis{Title: "1/L"}, Quantity: report.Axis{Title: "Gap", Unit: "J"},
	}
	table, err := gap.Data()
	if err != nil {
		fmt.Println(err)
		return
	}
	table.Columns[3].Format, table.Columns[4].Format = "%.3f", "%.3f"
	fmt.Print(table)
	// Output:
	// series  kind             1/L    Gap  standard error  degree of the fit
	//                                 (J)             (J)
	// ------  ------------  ------  -----  --------------  -----------------
	// gap     point           0.25  0.750           0.010                  1
	// gap     point          0.125  0.500           0.010                  1
	// gap     point         0.0625  0.375           0.010                  1
	// gap     extrapolated       0  0.250           0.012                  1
}

// Levels of two invented sectors: ratios are made sector by sector.
func ExampleSpacingRatios() {
	var statistics report.LevelStatistics
	for _, levels := range [][]float64{{0, 1, 3, 4}, {2, 2.5, 4.5}} {
		ratios, err := report.SpacingRatios(levels, 0)
		if err != nil {
			fmt.Println(err)
			return
		}
		statistics.Ratios = append(statistics.Ratios, ratios...)
	}
	fmt.Println(statistics.Ratios)
	_, err := report.SpacingRatios([]float64{0, 1, 1, 2}, 0)
	fmt.Println(err)
	// Output:
	// [0.5 0.5 0.25]
	// unfit data: two levels are degenerate, 1 and 1; use one sector of all symmetries, or keep one of each such group
}

func ExampleConvergence() {
	run := report.Convergence{
		Curves:    []report.ConvergenceCurve{{Name: "level 0", Steps: []float64{10, 20, 30}, Values: []float64{1e-2, 1e-6, 1e-11}}},
		Tolerance: 1e-10,
	}
	if err := run.Write(os.Stdout, "txt"); err != nil {
		fmt.Println(err)
	}
	run.Curves[0].Steps[2] = 20
	_, err := run.Data()
	fmt.Println(err)
	// Output:
	// report: Convergence: unknown format "txt"; give svg, png or pdf, as the ending of the file
	// unfit data: value 1e-11 at step 20 of curve 0 level 0; give values of 0 or more at ascending steps
}
