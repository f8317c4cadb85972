package report

import (
	"errors"
	"io"
	"math"
	"strings"
	"testing"
)

func TestBadDataAreErrorsThatSayWhich(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	sector := func(levels ...float64) []Sector { return []Sector{{Label: "(0,1)", Levels: levels}} }
	curve := func(sites []int, s []float64) EntropyProfile {
		return EntropyProfile{Curves: []EntropyCurve{{Name: "ring", Sites: sites, Entropies: s}}}
	}
	for _, c := range []struct {
		f    figure
		want error
		says string
	}{
		{SectorSpectrum{}, ErrData, "no sectors"},
		{SectorSpectrum{Sectors: []Sector{{}}}, ErrData, "without any level"},
		{SectorSpectrum{Sectors: sector(1, nan)}, ErrData, "level 1 of sector 0 (0,1) is NaN"},
		{SectorSpectrum{Sectors: sector(-inf)}, ErrData, "level 0 of sector 0 (0,1) is -Inf"},
		{SectorSpectrum{Sectors: sector(1.5e15)}, ErrData, "1.5e+15"},
		{SectorSpectrum{Sectors: sector(1), Tolerance: -1}, ErrData, "tolerance of -1"},
		{SectorSpectrum{Sectors: sector(1), Tolerance: nan}, ErrData, "tolerance of NaN"},
		{SectorSpectrum{Sectors: sector(1), Manifold: 2}, ErrData, "a manifold of 2 among 1"},
		{SectorSpectrum{Sectors: sector(1), Manifold: -2}, ErrData, "a manifold of -2"},
		{SectorSpectrum{Sectors: sector(1), Manifold: BelowLargestGap}, ErrData, "hold no gap"},
		{SectorSpectrum{Sectors: sector(1, 2), ShadeGap: true}, ErrData, "no gap to shade with 0 of 2"},
		{SectorSpectrum{Sectors: sector(1, 2), ShadeGap: true, Manifold: 2}, ErrData, "no gap to shade with 2 of 2"},
		{SectorSpectrum{Sectors: []Sector{{Levels: []float64{1}, Predicted: -1}}}, ErrData, "-1 levels predicted in sector 0"},
		{SectorSpectrum{Sectors: []Sector{{Label: "two\nlines", Levels: []float64{1}}}}, ErrData, "label of sector 0"},
		{SectorSpectrum{Sectors: sector(1), Momentum: "雪"}, ErrData, "does not have"},
		{SectorSpectrum{Sectors: sector(1), Energy: Axis{Unit: "\xff"}}, ErrData, "not valid UTF-8"},
		{SectorSpectrum{Sectors: sector(1), Energy: Axis{Min: 2, Max: 1}}, ErrData, "runs from 2 to 1"},
		{SectorSpectrum{Sectors: sector(1), Energy: Axis{Min: 1, Max: inf}}, ErrData, "runs from 1 to +Inf"},
		{SectorSpectrum{Sectors: sector(1), Energy: Axis{Min: 1, Max: 1 + 1e-15}}, ErrData, "too close together"},
		{SectorSpectrum{Sectors: sector(1), Page: Page{Width: 10}}, ErrSize, "page width of 10 mm"},
		{SectorSpectrum{Sectors: sector(1), Page: Page{Height: nan}}, ErrSize, "page height of NaN mm"},
		{SectorSpectrum{Sectors: sector(1), Page: Page{Dots: 72.5}}, ErrSize, "72.5 dots"},
		{SectorSpectrum{Sectors: sector(1), Page: Page{Width: 1000, Height: 1000, Dots: 1200}}, ErrSize, "million pixels"},
		{SectorSpectrum{Sectors: sector(1), Page: Page{Title: strings.Repeat("long ", 40)}}, ErrSize, "title of the page"},
		{SectorSpectrum{Sectors: sector(1), Page: Page{Note: strings.Repeat("long", 60)}}, ErrSize, "word of the note"},
		{SectorSpectrum{Sectors: sector(1), Page: Page{Note: strings.Repeat("long ", 400)}}, ErrSize, "height of the plot"},
		{SectorSpectrum{Sectors: sector(1), Momentum: strings.Repeat("long ", 40)}, ErrSize, "title of the horizontal axis"},

		{SpectralFlow{}, ErrData, "0 fluxes"},
		{SpectralFlow{Flux: []float64{0}}, ErrData, "1 fluxes and no level"},
		{SpectralFlow{Flux: []float64{nan}, Levels: [][]float64{{1}}}, ErrData, "flux 0 is NaN"},
		{SpectralFlow{Flux: []float64{0, 1}, Levels: [][]float64{{1}}}, ErrData, "1 sets of levels for 2 fluxes"},
		{SpectralFlow{Flux: []float64{0.5}, Levels: [][]float64{{1, inf}}}, ErrData, "level 1 at flux 0.5 is +Inf"},
		{SpectralFlow{Flux: []float64{0.5}, Levels: [][]float64{{1}}, Manifold: 2}, ErrData, "a manifold of 2 among 1 levels at flux 0.5"},
		{SpectralFlow{Flux: []float64{0.5}, Levels: [][]float64{{1}}, Manifold: 1, ShadeGap: true}, ErrData, "no gap to shade at flux 0.5"},
		{SpectralFlow{Flux: []float64{0}, Flows: []Flow{{Name: "a"}}}, ErrData, "flow 0 a has 0 energies for 1 fluxes"},
		{SpectralFlow{Flux: []float64{0}, Flows: []Flow{{Energies: []float64{nan}}}}, ErrData, "energy of flow 0 at flux 0 is NaN"},
		{SpectralFlow{Flux: []float64{0, 0}, Flows: []Flow{{Energies: []float64{1, 2}}}}, ErrData, "flux 0 follows 0"},
		{SpectralFlow{Flux: []float64{0}, Flows: []Flow{{Energies: []float64{1}}}, Manifold: 1}, ErrData, "Manifold 1 without Levels"},
		{SpectralFlow{Flux: []float64{0}, Flows: []Flow{{Energies: []float64{1}}}, ShadeGap: true}, ErrData, "no gap to shade"},
		{SpectralFlow{Flux: []float64{0}, Flows: []Flow{{Name: strings.Repeat("long", 30), Energies: []float64{1}}}}, ErrSize, "the key"},

		{EntanglementSpectrum{}, ErrData, "no sectors"},
		{EntanglementSpectrum{Sectors: sector(1, nan)}, ErrData, "level 1 of sector 0 (0,1) is NaN"},
		{EntanglementSpectrum{Sectors: sector(1, 2), Below: 1, Expected: []int{1, 1}}, ErrData, "2 expected counts for 1 sectors"},
		{EntanglementSpectrum{Sectors: sector(1, 2), Below: 1, Expected: []int{-1}}, ErrData, "-1 levels expected in sector 0"},
		{EntanglementSpectrum{Sectors: sector(1, 2), Expected: []int{1}}, ErrData, "without a gap"},
		{EntanglementSpectrum{Sectors: sector(1, 2), Below: 2}, ErrData, "no gap above them"},
		{EntanglementSpectrum{Sectors: sector(1, 2), Below: 3}, ErrData, "a manifold of 3"},
		{EntanglementSpectrum{Sectors: []Sector{{Levels: []float64{1}, Predicted: 1}}}, ErrData, "Expected"},
		{EntanglementSpectrum{Sectors: append(make([]Sector, 100), sector(1, 2)...), Below: 1}, ErrSize, "counts of 101 sectors need"},

		{EntropyProfile{}, ErrData, "no curves"},
		{curve(nil, nil), ErrData, "curve 0 ring has 0 cuts"},
		{curve([]int{1, 2}, []float64{1}), ErrData, "curve 0 ring has 2 cuts and 1 entropies"},
		{curve([]int{1}, []float64{nan}), ErrData, "entropy 0 of curve 0 ring is NaN"},
		{curve([]int{2, 2}, []float64{1, 1}), ErrData, "cut 1 of curve 0 ring has 2 sites"},
		{curve([]int{-1}, []float64{1}), ErrData, "-1 sites"},
	} {
		err := c.f.Write(io.Discard, "svg")
		if !errors.Is(err, c.want) || !strings.Contains(err.Error(), c.says) || !strings.HasPrefix(err.Error(), "report: ") {
			t.Errorf("%+v:\nerror %v\nwant %v with %q", c.f, err, c.want, c.says)
		}
	}
	for name, f := range specimens() {
		for _, format := range []string{"", "SVG", "gif", ".png"} {
			if err := f.Write(io.Discard, format); !errors.Is(err, ErrFormat) {
				t.Errorf("%s: format %q gives %v", name, format, err)
			}
		}
	}
}
