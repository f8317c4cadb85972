package report

import (
	"errors"
	"image/color"
	"math"
	"testing"
)

// invertedBand is an invented band along a path, broadened.
func invertedBand() DispersionMap {
	f := DispersionMap{Energy: Axis{Unit: "J"}, Points: []PathPoint{{0, "Γ"}, {1, "X"}, {2, "M"}, {3.4, "Γ"}}}
	for j := range 60 {
		f.Energies = append(f.Energies, 0.05*float64(j))
	}
	for i := range 18 {
		k := 3.4 * float64(i) / 17
		f.Path = append(f.Path, k)
		column, err := Broadened([]float64{1 + math.Cos(1.8*k), 2.2}, []float64{1, 0.3}, f.Energies, 0.08)
		if err != nil {
			panic(err)
		}
		f.Values = append(f.Values, column)
	}
	return f
}

// squareMap has a peak at (π, π) of a square lattice of 4×4 cells.
func squareMap() StructureFactorMap {
	f := StructureFactorMap{Reciprocal: [2][2]float64{{2 * math.Pi, 0}, {0, 2 * math.Pi}}, Labels: []MomentumLabel{{[2]float64{0, 0}, "Γ"}, {[2]float64{math.Pi, math.Pi}, "M"}}}
	for x := range 4 {
		for y := range 4 {
			k := [2]float64{math.Pi / 2 * float64(x), math.Pi / 2 * float64(y)}
			f.Points = append(f.Points, MomentumValue{k, 1.2 - 0.6*(math.Cos(k[0])+math.Cos(k[1]))})
		}
	}
	return f
}

// plaquettes is a cluster of six sites with invented correlations.
func plaquettes() LatticeDrawing {
	f := LatticeDrawing{BondValue: Axis{Title: "S_{i}·S_{j}"}, Outline: [][2]float64{{-0.5, -0.5}, {2.5, -0.5}, {2.5, 1.5}, {-0.5, 1.5}}}
	for y := range 2 {
		for x := range 3 {
			f.Sites = append(f.Sites, LatticeSite{Position: [2]float64{float64(x), float64(y)}, Sublattice: (x + y) % 2, Label: string(rune('0' + x + 3*y))})
		}
	}
	for y := range 2 {
		for x := range 3 {
			f.Bonds = append(f.Bonds, LatticeBond{From: x + 3*y, To: (x+1)%3 + 3*y, Displacement: [2]float64{1, 0}, Value: 0.1*float64(x) - 0.3})
		}
	}
	f.Bonds = append(f.Bonds, LatticeBond{From: 0, To: 3, Value: 0.2}, LatticeBond{From: 1, To: 4, Value: -0.4})
	return f
}

// Colours keep their order in grey: luminance (ITU-R BT.709) falls from the first to the
// last, and from the middle to both ends.
func TestColoursKeepTheirOrder(t *testing.T) {
	luminance := func(c color.RGBA) float64 {
		linear := func(v uint8) float64 {
			x := float64(v) / 255
			if x <= 0.04045 {
				return x / 12.92
			}
			return math.Pow((x+0.055)/1.055, 2.4)
		}
		return 0.2126*linear(c.R) + 0.7152*linear(c.G) + 0.0722*linear(c.B)
	}
	for i := range 50 {
		a, b := float64(i)/50, float64(i+1)/50
		if !(luminance(rising(a)) > luminance(rising(b))) {
			t.Errorf("rising: %v is not lighter than %v", a, b)
		}
		if !(luminance(signed(a)) > luminance(signed(b))) || !(luminance(signed(-a)) > luminance(signed(-b))) {
			t.Errorf("signed: ±%v are not lighter than ±%v", a, b)
		}
	}
	if luminance(rising(0)) < 0.9 || luminance(rising(1)) > 0.08 {
		t.Errorf("from %v to %v", rising(0), rising(1))
	}
	if c := oklch(1, 0, 0); c != (color.RGBA{255, 255, 255, 255}) {
		t.Errorf("white is %v", c)
	}
}

// The cell of the square lattice is a square, that of the triangular one a regular
// hexagon; areas are those of the reciprocal cell.
func TestBrillouinZones(t *testing.T) {
	for name, c := range map[string]struct {
		b       [2][2]float64
		corners int
	}{
		"square":     {[2][2]float64{{2, 0}, {0, 2}}, 4},
		"skewed":     {[2][2]float64{{2, 0}, {10, 2}}, 4},
		"triangular": {[2][2]float64{{2, 0}, {1, math.Sqrt(3)}}, 6},
		"oblique":    {[2][2]float64{{2, 0}, {0.5, 1.7}}, 6},
	} {
		b := shortened(c.b)
		zone := wignerSeitz(combinations(b, 2), 100)
		area := 0.0
		for i, p := range zone {
			q := zone[(i+1)%len(zone)]
			area += (p[0]*q[1] - p[1]*q[0]) / 2
		}
		want := math.Abs(c.b[0][0]*c.b[1][1] - c.b[0][1]*c.b[1][0])
		if math.Abs(area-want) > 1e-9*want {
			t.Errorf("%s: area %v, want %v", name, area, want)
		}
		distinct := 0
		for i, p := range zone {
			q := zone[(i+1)%len(zone)]
			if math.Hypot(p[0]-q[0], p[1]-q[1]) > 1e-6 {
				distinct++
			}
		}
		if distinct != c.corners {
			t.Errorf("%s: %d corners, want %d", name, distinct, c.corners)
		}
	}
}

func TestBroadenedWeights(t *testing.T) {
	energies := make([]float64, 40001)
	for i := range energies {
		energies[i] = -200 + 0.01*float64(i)
	}
	a, err := Broadened([]float64{-1, 2}, []float64{0.25, 0.75}, energies, 0.1)
	if err != nil {
		t.Fatal(err)
	}
	sum := 0.0
	for _, x := range a {
		sum += 0.01 * x
	}
	if math.Abs(sum-1) > 1e-3 { // the tails beyond ±200 hold 2η/(200π)
		t.Errorf("weights add up to %v", sum)
	}
	if x, err := Broadened([]float64{0}, []float64{1}, []float64{0, 0.1}, 0.1); err != nil || math.Abs(x[1]/x[0]-0.5) > 1e-12 {
		t.Errorf("half width: %v, %v", x, err)
	}
}

func TestMapsRefuseUnfitData(t *testing.T) {
	band, zone, cluster := invertedBand(), squareMap(), plaquettes()
	band.Values[3][2] = -1
	zone.Reciprocal[1] = zone.Reciprocal[0]
	cluster.Bonds[0].To = 99
	long := invertedBand()
	long.Energies = make([]float64, 60000)
	for name, f := range map[string]tabled{
		"negative": band, "parallel": zone, "no site": cluster, "too many": long,
		"empty map": DispersionMap{}, "empty zone": StructureFactorMap{}, "no sites": LatticeDrawing{},
	} {
		if _, err := f.Data(); !errors.Is(err, ErrData) {
			t.Errorf("%s: %v", name, err)
		}
	}
	if _, err := Broadened(nil, nil, []float64{1}, 0); !errors.Is(err, ErrData) {
		t.Errorf("no width: %v", err)
	}
	for name, f := range map[string]tabled{"band": invertedBand(), "zone": squareMap(), "cluster": plaquettes()} {
		if table, err := f.Data(); err != nil || len(table.Rows) < 8 {
			t.Errorf("%s: %d rows, %v", name, len(table.Rows), err)
		}
	}
}
