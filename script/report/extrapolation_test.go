package report

import (
	"errors"
	"io"
	"math"
	"strings"
	"testing"
)

func TestExtrapolationStandsAtItsValues(t *testing.T) {
	f := specimens()["extrapolation"].(Extrapolation)
	f.Page.Dots = 600
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	fits, err := f.fits()
	if err != nil {
		t.Fatal(err)
	}
	img := picture(t, f)
	for n, s := range f.Series {
		for i, x := range s.X {
			if got := pixel(img, p, p.x.at(x), p.y.at(s.Y[i])); got != series(n) {
				t.Errorf("series %d, size %v: colour %v", n, x, got)
			}
		}
	}
	tilted := fits[0]
	// The value at 0 is an open mark with its error bar, and beside it the band.
	for what, c := range map[string]struct {
		x, y float64
		want bool // white
	}{
		"open mark":      {0, tilted.Value, true},
		"error bar":      {0, tilted.Value + 0.9*tilted.Error, false},
		"beyond the bar": {0, tilted.Value + 1.3*tilted.Error, true},
	} {
		if got := pixel(img, p, p.x.at(c.x), p.y.at(c.y)); (got == white) != c.want {
			t.Errorf("%s: colour %v", what, got)
		}
	}
	value, e := tilted.At(0.02)
	band := overlap(overlap(series(0), white), white)
	for times, want := range map[float64]bool{0.8: true, -0.8: true, 1.3: false, -1.3: false} {
		if got := pixel(img, p, p.x.at(0.02), p.y.at(value+times*e)); (got == band) != want {
			t.Errorf("%v standard errors from the curve: colour %v", times, got)
		}
	}
	if got := keyOf(p); got != "tilted → 0.186 ± 0.045 J; bare → 0.4 J (error unknown)" {
		t.Errorf("key %q", got)
	}
}

func TestMeasuredValues(t *testing.T) { // worked by hand
	for _, c := range []struct {
		value, e float64
		want     string
	}{
		{-0.669383, 0.000104, "−0.66938 ± 0.00010"},
		{0.186, 0.0449, "0.186 ± 0.045"},
		{12345, 17, "12345 ± 17"},
		{12345.678, 1.7, "12345.7 ± 1.7"},
		{0, 0.25, "0.00 ± 0.25"},
		{-3e12, 4e11, "−3·10^{12} ± 4·10^{11}"},
	} {
		if got := measured(c.value, c.e); got != c.want {
			t.Errorf("%v ± %v is %q, want %q", c.value, c.e, got, c.want)
		}
	}
}

func TestUnfitExtrapolations(t *testing.T) {
	points := func(x, y, e []float64, degree int) Extrapolation {
		return Extrapolation{Series: []ScalingSeries{{Name: "gap", X: x, Y: y, Errors: e, Degree: degree}}}
	}
	one := []float64{1}
	for _, c := range []struct {
		f    Extrapolation
		says string
	}{
		{Extrapolation{}, "no series"},
		{points(nil, nil, nil, -1), "series 0 gap has no points"},
		{points(one, []float64{1, 2}, nil, 0), "series 0 gap: unfit data: 1 places, 2 values"},
		{points(one, one, nil, 1), "degree 1 through 1 points"},
		{points(one, one, nil, -2), "degree -2"},
		{points([]float64{0}, one, nil, 0), "size 0 of series 0 gap is 0"},
		{points([]float64{math.NaN()}, one, nil, -1), "place 0 is NaN"},
		{points(one, one, []float64{-1}, -1), "an error of -1 at point 0"},
		{points([]float64{0.1, 0.1, 0.1}, []float64{1, 2, 3}, nil, 1), "points at 1 different places"},
	} {
		err := c.f.Write(io.Discard, "svg")
		if !errors.Is(err, ErrData) || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%+v: error %v, want one with %q", c.f, err, c.says)
		}
	}
}
