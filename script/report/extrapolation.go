package report

import (
	"errors"
	"fmt"
	"io"
	"math"

	"gonum.org/v1/plot/vg"
)

// ScalingSeries is a quantity on clusters of several sizes.
type ScalingSeries struct {
	// Name for the key; empty means none.
	Name string
	// X is what vanishes for infinite size, such as 1/N, positive.
	X []float64
	// Y are the values.
	Y []float64
	// Errors are standard errors of Y, all positive; nil means that they are unknown.
	Errors []float64
	// Degree of the polynomial in X that is fitted; -1 for no fit.
	Degree int
}

// Extrapolation draws values against a size such as 1/N with the fitted polynomial of
// FitPolynomial and the band of its standard error. The extrapolated value is an open
// mark with its error bar at 0, and a number in the key.
type Extrapolation struct {
	Page   Page
	Series []ScalingSeries
	// Size is the axis below. Default title "1/N".
	Size Axis
	// Quantity is the vertical axis. Default title "Value".
	Quantity Axis
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f Extrapolation) Save(path string) error { return save(path, "Extrapolation", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f Extrapolation) Write(w io.Writer, format string) error {
	return write(w, format, "Extrapolation", f.plan)
}

// Data returns the points and the extrapolated values: series, which of both, size (0 of
// what is extrapolated), value, its standard error (nothing where that is unknown) and
// the degree of the fit. Errors: those of Write about the data.
func (f Extrapolation) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	fits, err := f.fits()
	if err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{
		{Title: "series"}, {Title: "kind"}, {Title: named(f.Size, "1/N"), Unit: f.Size.Unit}, {Title: named(f.Quantity, "value"), Unit: f.Quantity.Unit},
		{Title: "standard error", Unit: f.Quantity.Unit}, {Title: "degree of the fit"},
	}}
	for n, s := range f.Series {
		var degree any
		if fits[n] != nil {
			degree = s.Degree
		}
		for i := range s.X {
			var e any
			if s.Errors != nil {
				e = s.Errors[i]
			}
			t.Add(labelled(s.Name, n), "point", s.X[i], s.Y[i], e, degree)
		}
		if fit := fits[n]; fit != nil {
			var e any
			if fit.HasError {
				e = fit.Error
			}
			t.Add(labelled(s.Name, n), "extrapolated", 0.0, fit.Value, e, degree)
		}
	}
	return t, nil
}

// fits returns the fit of each series, nil where none is wanted.
func (f Extrapolation) fits() ([]*Fit, error) {
	if err := errors.Join(f.Page.filled().check(), f.Size.check("size"), f.Quantity.check("quantity")); err != nil {
		return nil, err
	}
	if len(f.Series) == 0 {
		return nil, fmt.Errorf("%w: no series; give at least one", ErrData)
	}
	fits := make([]*Fit, len(f.Series))
	for i, s := range f.Series {
		who := called("series", i, s.Name)
		if err := checkLabel("name of series "+fmt.Sprint(i), s.Name); err != nil {
			return nil, err
		}
		if len(s.X) == 0 {
			return nil, fmt.Errorf("%w: %s has no points; give at least one", ErrData, who)
		}
		if s.Degree < -1 {
			return nil, fmt.Errorf("%w: a polynomial of degree %d for %s; give -1 for no fit, or 0 and more", ErrData, s.Degree, who)
		}
		if err := checkPoints(s.X, s.Y, s.Errors, max(0, s.Degree)); err != nil {
			return nil, fmt.Errorf("%s: %w", who, err)
		}
		for j, x := range s.X {
			if !(x > 0) {
				return nil, fmt.Errorf("%w: size %d of %s is %v; give what vanishes for infinite size, such as 1/N", ErrData, j, who, x)
			}
		}
		if s.Degree >= 0 {
			fit, err := FitPolynomial(s.X, s.Y, s.Errors, s.Degree)
			if err != nil {
				return nil, fmt.Errorf("%s: %w", who, err)
			}
			fits[i] = &fit
		}
	}
	return fits, nil
}

func (f Extrapolation) plan() (*panel, func(), error) {
	fits, err := f.fits()
	if err != nil {
		return nil, nil, err
	}
	f.Size, f.Quantity = f.Size.or("1/N"), f.Quantity.or("Value")
	most, low, high := 0.0, math.Inf(1), math.Inf(-1)
	for i, s := range f.Series {
		for j, x := range s.X {
			e := 0.0
			if s.Errors != nil {
				e = s.Errors[j]
			}
			most, low, high = math.Max(most, x), math.Min(low, s.Y[j]-e), math.Max(high, s.Y[j]+e)
		}
		if fits[i] != nil {
			v, e := fits[i].Value, fits[i].Error
			low, high = math.Min(low, v-e), math.Max(high, v+e)
		}
	}
	xLo, xHi := span(f.Size, 0, most, 0.04)
	yLo, yHi := span(f.Quantity, low, high, 0.06)
	p, err := frame{
		page: f.Page.filled(), name: "Extrapolation to infinite size",
		xAxis: f.Size, xRange: [2]float64{xLo, xHi}, yAxis: f.Quantity, yRange: [2]float64{yLo, yHi},
		key: func(columns) []entry { return f.key(fits) },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, fits) }, nil
}

func (f Extrapolation) key(fits []*Fit) []entry {
	var key []entry
	hidden := 0
	for i, s := range f.Series {
		text := s.Name
		if fits[i] != nil {
			if text != "" {
				text += " "
			}
			text += "→ " + f.outcome(*fits[i])
		}
		if text != "" {
			key = append(key, entry{text, func(s sheet, x, y, w float64) {
				s.line(x, y, x+w, y, 0.9, series(i))
				s.marker(i, x+w/2, y, 2, series(i))
			}})
		}
		for j, x := range s.X {
			if !f.Size.holds(x) || !f.Quantity.holds(s.Y[j]) {
				hidden++
			}
		}
	}
	return append(key, hiddenEntry(hidden, "point")...)
}

// outcome is the extrapolated value in words.
func (f Extrapolation) outcome(fit Fit) string {
	if !fit.HasError {
		return quantity(fit.Value, f.Quantity.Unit) + " (error unknown)"
	}
	text := measured(fit.Value, fit.Error)
	if f.Quantity.Unit != "" {
		text += " " + f.Quantity.Unit
	}
	return text
}

// measured writes a value and its error, both with the two first digits of the error.
func measured(value, e float64) string {
	if !(e > 0) || e < 1e-12*math.Abs(value) || e > 1e6 || e < 1e-9 {
		return short(value) + " ± " + short(e)
	}
	digits := max(0, 1-int(math.Floor(math.Log10(e))))
	return typeset(fmt.Sprintf("%.*f", digits, value)) + " ± " + fmt.Sprintf("%.*f", digits, e)
}

// curvePoints is the number of points of a drawn curve.
const curvePoints = 60

func (f Extrapolation) paint(p *panel, fits []*Fit) {
	for i := range f.Series {
		f.band(p, i, fits[i])
	}
	p.draw()
	for i, s := range f.Series {
		f.curve(p, i, fits[i])
		for j, x := range s.X {
			e := 0.0
			if s.Errors != nil {
				e = s.Errors[j]
			}
			if f.mark(p, i, x, s.Y[j], e) {
				p.marker(i, p.x.at(x), p.y.at(s.Y[j]), 2, series(i))
			}
		}
	}
	for i, fit := range fits {
		if fit != nil && f.mark(p, i, 0, fit.Value, fit.Error) {
			p.marker(i, p.x.at(0), p.y.at(fit.Value), 2.4, series(i))
			p.marker(i, p.x.at(0), p.y.at(fit.Value), 1.5, white)
		}
	}
}

// curve draws a fit from 0 on.
func (f Extrapolation) curve(p *panel, i int, fit *Fit) {
	if fit == nil {
		return
	}
	var points []vg.Point
	for n := range curvePoints + 1 {
		x := p.x.max * float64(n) / curvePoints
		v, _ := fit.At(x)
		points = append(points, at(p.x.at(x), p.y.at(v)))
	}
	for _, piece := range p.cutLines(points) {
		p.path(piece, 0.9, series(i))
	}
}

// mark draws the error bar of a point and reports whether the point is on the axes.
func (f Extrapolation) mark(p *panel, i int, x, y, e float64) bool {
	if !f.Size.holds(x) || !f.Quantity.holds(y) {
		return false
	}
	if e > 0 {
		p.line(p.x.at(x), p.clip(p.y.at(y-e)), p.x.at(x), p.clip(p.y.at(y+e)), 0.7, series(i))
	}
	return true
}

// band shades one standard error about a fit.
func (f Extrapolation) band(p *panel, i int, fit *Fit) {
	if fit == nil || !fit.HasError {
		return
	}
	var above, below []vg.Point
	for n := range curvePoints + 1 {
		x := p.x.max * float64(n) / curvePoints
		v, e := fit.At(x)
		above = append(above, at(p.x.at(x), p.y.at(v+e)))
		below = append(below, at(p.x.at(x), p.y.at(v-e)))
	}
	for n := len(below) - 1; n >= 0; n-- {
		above = append(above, below[n])
	}
	if polygon := p.cutArea(above); len(polygon) > 2 {
		p.area(overlap(overlap(series(i), white), white), polygon...)
	}
}
