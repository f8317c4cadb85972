package report

import (
	"errors"
	"io"
	"math"
	"strings"
	"testing"
)

func TestHistogramAndCurvesStandAtTheirDensities(t *testing.T) {
	f := specimens()["statistics"].(LevelStatistics)
	f.Page.Dots = 600
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	img := picture(t, f)
	table, err := f.Data()
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range table.Rows {
		middle, density := (row[0].(float64)+row[1].(float64))/2, row[3].(float64)
		if density < 0.5 {
			continue
		}
		// Inside the bar, away from the curves, that is, close to its lower edge and,
		// as the unitary ensemble starts there, close to its top in the first bin.
		if got := pixel(img, p, p.x.at(middle)-2, p.bottom+2); middle > 0.2 && got != gapTint {
			t.Errorf("bar at %v: colour %v", middle, got)
		}
		if got := pixel(img, p, p.x.at(middle), p.y.at(density+0.03)); got == gapTint {
			t.Errorf("above the bar at %v: colour %v", middle, got)
		}
	}
	for i, c := range f.references() {
		if got := pixel(img, p, p.x.at(0.8), p.y.at(c.density(0.8))); got != series(i) {
			t.Errorf("%s at 0.8: colour %v", c.name, got)
		}
	}
	// The mean of the specimen's 15 ratios, by hand, is 8.09/15.
	if got := keyOf(p); !strings.HasPrefix(got, "15 ratios, mean 0.5393 ± ") || !strings.HasSuffix(got, "Poisson, mean 0.3863; GOE, mean 0.5359; GUE, mean 0.6027") {
		t.Errorf("key %q", got)
	}
}

func TestUnfitStatistics(t *testing.T) {
	for _, c := range []struct {
		f    LevelStatistics
		says string
	}{
		{LevelStatistics{}, "no ratios"},
		{LevelStatistics{Ratios: []float64{0.5, 1.5}}, "ratio 1 is 1.5"},
		{LevelStatistics{Ratios: []float64{math.NaN()}}, "ratio 0 is NaN"},
		{LevelStatistics{Ratios: []float64{0.5}, Bins: 1}, "1 bins"},
		{LevelStatistics{Ratios: []float64{0.5}, Bins: -3}, "-3 bins"},
	} {
		err := c.f.Write(io.Discard, "svg")
		if !errors.Is(err, ErrData) || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%+v: error %v, want one with %q", c.f, err, c.says)
		}
	}
}
