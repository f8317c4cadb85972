package report

import (
	"errors"
	"fmt"
	"io"
	"math"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/plot/vg"
)

// Fit is a polynomial c₀ + c₁x + c₂x² + … fitted to points by least squares.
type Fit struct {
	// Coefficients c₀, c₁, …; c₀ is the extrapolated value at x = 0.
	Coefficients []float64
	// Error is the standard error of c₀: from the given errors of the points, or, where
	// none are given, from the scatter about the curve. HasError is false where that
	// needs more points than coefficients.
	Error    float64
	HasError bool
	// ChiSquare is Σ ((y-fit)/error)², with errors of one where none are given. Freedom
	// is the number of points less that of coefficients.
	ChiSquare float64
	Freedom   int

	covariance []float64 // of the coefficients, row after row; nil without error
}

// FitPolynomial fits a polynomial of a degree to the points (x, y). errs are the
// standard errors of y, all positive, or nil where they are equal and unknown.
//
// The coefficients solve the weighted least squares by the QR factorisation; their
// covariance is (AᵀA)⁻¹ with A_ik = x_i^k/err_i, times ChiSquare/Freedom where errs is
// nil (W. H. Press et al., Numerical Recipes (Cambridge University Press, 1992),
// section 15.4, from memory).
//
// Errors: ErrData for lists of different lengths, numbers that are not finite, errors
// that are not positive, fewer points than coefficients, or points at too few
// different x.
func FitPolynomial(x, y, errs []float64, degree int) (Fit, error) {
	if err := checkPoints(x, y, errs, degree); err != nil {
		return Fit{}, err
	}
	n, k := len(x), degree+1
	scale := 0.0
	for _, v := range x {
		scale = math.Max(scale, math.Abs(v))
	}
	if scale == 0 {
		scale = 1
	}
	a, b := mat.NewDense(n, k, nil), mat.NewVecDense(n, nil)
	for i := range x {
		w := 1.0
		if errs != nil {
			w = 1 / errs[i]
		}
		power := w
		for j := range k {
			a.Set(i, j, power)
			power *= x[i] / scale
		}
		b.SetVec(i, w*y[i])
	}
	var qr mat.QR
	qr.Factorize(a)
	var c mat.VecDense
	if err := qr.SolveVecTo(&c, false, b); err != nil {
		return Fit{}, fmt.Errorf("%w: points at too few different places for a polynomial of degree %d; give more or a lower degree", ErrData, degree)
	}
	f := Fit{Freedom: n - k}
	var rest mat.VecDense
	rest.MulVec(a, &c)
	rest.SubVec(b, &rest)
	f.ChiSquare = mat.Dot(&rest, &rest)
	f.HasError = errs != nil || f.Freedom > 0
	var normal, inverse mat.Dense
	normal.Mul(a.T(), a)
	if err := inverse.Inverse(&normal); err != nil {
		f.HasError = false
	}
	factor := 1.0
	if errs == nil {
		factor = f.ChiSquare / math.Max(1, float64(f.Freedom))
	}
	down := 1.0
	downs := make([]float64, k)
	for j := range k {
		downs[j] = down
		f.Coefficients = append(f.Coefficients, c.AtVec(j)/down)
		down *= scale
	}
	if f.HasError {
		f.covariance = make([]float64, k*k)
		for i := range k {
			for j := range k {
				f.covariance[i*k+j] = factor * inverse.At(i, j) / downs[i] / downs[j]
			}
		}
		f.Error = math.Sqrt(f.covariance[0])
	}
	return f, nil
}

func checkPoints(x, y, errs []float64, degree int) error {
	if len(x) != len(y) || errs != nil && len(errs) != len(x) {
		return fmt.Errorf("%w: %d places, %d values and %d errors; give as many of each, or no errors", ErrData, len(x), len(y), len(errs))
	}
	if degree < 0 || degree > 8 || degree+1 > len(x) {
		return fmt.Errorf("%w: a polynomial of degree %d through %d points; give a degree from 0 to 8 and more points than that", ErrData, degree, len(x))
	}
	for i := range x {
		if err := errors.Join(checkNumber(fmt.Sprintf("place %d", i), x[i]), checkNumber(fmt.Sprintf("value %d", i), y[i])); err != nil {
			return err
		}
		if errs != nil && (!(errs[i] > 0) || !finite(errs[i]) || errs[i] > MostMagnitude) {
			return fmt.Errorf("%w: an error of %v at point %d; give positive numbers, or nil where they are unknown", ErrData, errs[i], i)
		}
	}
	return nil
}

// At returns the fitted value at x and its standard error, 0 where that is unknown.
func (f Fit) At(x float64) (value, standardError float64) {
	powers := make([]float64, len(f.Coefficients))
	power := 1.0
	for k, c := range f.Coefficients {
		powers[k] = power
		value += c * power
		power *= x
	}
	if f.covariance == nil {
		return value, 0
	}
	variance := 0.0
	for i, p := range powers {
		for j, q := range powers {
			variance += p * q * f.covariance[i*len(powers)+j]
		}
	}
	return value, math.Sqrt(math.Max(0, variance))
}

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

// Extrapolation draws values against a size such as 1/N with the fitted polynomial,
// the band of its standard error, and the extrapolated value with its error in the key.
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

// Data returns the points: series, size, value and its error. Errors: those of Write
// about the data.
func (f Extrapolation) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "series"}, {Title: named(f.Size, "1/N"), Unit: f.Size.Unit}, {Title: named(f.Quantity, "value"), Unit: f.Quantity.Unit}, {Title: "standard error", Unit: f.Quantity.Unit}}}
	for n, s := range f.Series {
		for i := range s.X {
			var e any
			if s.Errors != nil {
				e = s.Errors[i]
			}
			t.Add(labelled(s.Name, n), s.X[i], s.Y[i], e)
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
			v, e := fits[i].At(0)
			low, high = math.Min(low, v-e), math.Max(high, v+e)
		}
	}
	xLo, xHi := 0.0, most*1.05
	if f.Size.given() {
		xLo, xHi = f.Size.Min, f.Size.Max
	}
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
			value, e := fits[i].At(0)
			result := "→ " + short(value) + " (error unknown)"
			if fits[i].HasError {
				result = "→ " + measured(value, e)
			}
			if f.Quantity.Unit != "" {
				result += " " + f.Quantity.Unit
			}
			if text != "" {
				text += " "
			}
			text += result
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
		if fits[i] != nil {
			var points []vg.Point
			for n := range curvePoints + 1 {
				x := p.x.max * float64(n) / curvePoints
				v, _ := fits[i].At(x)
				points = append(points, at(p.x.at(x), p.y.at(v)))
			}
			for _, piece := range p.cutLines(points) {
				p.path(piece, 0.9, series(i))
			}
		}
		for j, x := range s.X {
			if !f.Size.holds(x) || !f.Quantity.holds(s.Y[j]) {
				continue
			}
			if s.Errors != nil {
				low, high := p.clip(p.y.at(s.Y[j]-s.Errors[j])), p.clip(p.y.at(s.Y[j]+s.Errors[j]))
				p.line(p.x.at(x), low, p.x.at(x), high, 0.7, series(i))
			}
			p.marker(i, p.x.at(x), p.y.at(s.Y[j]), 2, series(i))
		}
	}
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
