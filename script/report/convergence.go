package report

import (
	"errors"
	"fmt"
	"io"
	"math"

	"gonum.org/v1/plot/vg"
)

// ConvergenceCurve is what falls in a run, such as a residual.
type ConvergenceCurve struct {
	// Name for the key; empty means none.
	Name string
	// Steps are numbers of products or iterations, ascending.
	Steps []float64
	// Values, one for each step, 0 or more. The logarithmic axis does not reach 0: zeros
	// stand at its lower end, and the key says so.
	Values []float64
}

// Convergence draws residuals, changes or errors of a run on a logarithmic axis against
// its steps, with a line at the tolerance and a ring at the first point from which on each
// curve is within it. A line joins all points; marks are thinned until they are apart.
type Convergence struct {
	Page   Page
	Curves []ConvergenceCurve
	// Tolerance is drawn as a broken line; 0 means none.
	Tolerance float64
	// Value is the vertical axis; Min and Max are values, both positive. Default title
	// "Residual".
	Value Axis
	// Step is the axis below. Default title "Products".
	Step Axis
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f Convergence) Save(path string) error { return save(path, "Convergence", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f Convergence) Write(w io.Writer, format string) error {
	return write(w, format, "Convergence", f.plan)
}

// Data returns the curves: name, step and value. Errors: those of Write about the data.
func (f Convergence) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "curve"}, {Title: named(f.Step, "products"), Unit: f.Step.Unit}, {Title: named(f.Value, "residual"), Unit: f.Value.Unit}}}
	for n, c := range f.Curves {
		for i, v := range c.Values {
			t.Add(labelled(c.Name, n), c.Steps[i], v)
		}
	}
	return t, nil
}

func (f Convergence) check() error {
	if err := errors.Join(f.Page.filled().check(), f.Value.check("value"), f.Step.check("step")); err != nil {
		return err
	}
	if f.Value.given() && !(f.Value.Min > 0) {
		return fmt.Errorf("%w: a logarithmic axis from %v; give positive ends", ErrData, f.Value.Min)
	}
	if !(f.Tolerance >= 0) || !finite(f.Tolerance) {
		return fmt.Errorf("%w: a tolerance of %v; give a positive number, or 0 for none", ErrData, f.Tolerance)
	}
	for n, c := range f.Curves {
		who := called("curve", n, c.Name)
		if err := checkLabel("name of curve "+fmt.Sprint(n), c.Name); err != nil {
			return err
		}
		if len(c.Steps) != len(c.Values) {
			return fmt.Errorf("%w: %s has %d steps and %d values; give as many of both", ErrData, who, len(c.Steps), len(c.Values))
		}
		for i, v := range c.Values {
			if err := errors.Join(checkNumber(fmt.Sprintf("value %d of %s", i, who), v), checkNumber(fmt.Sprintf("step %d of %s", i, who), c.Steps[i])); err != nil {
				return err
			}
			if v < 0 || i > 0 && c.Steps[i] <= c.Steps[i-1] {
				return fmt.Errorf("%w: value %v at step %v of %s; give values of 0 or more at ascending steps", ErrData, v, c.Steps[i], who)
			}
		}
	}
	return nil
}

func (f Convergence) plan() (*panel, func(), error) {
	if err := f.check(); err != nil {
		return nil, nil, err
	}
	f.Value, f.Step = f.Value.or("Residual"), f.Step.or("Products")
	x, y, any := f.extent()
	if !any {
		return nil, nil, fmt.Errorf("%w: no value above 0 to draw; give at least one", ErrData)
	}
	if f.Tolerance > 0 {
		y = [2]float64{math.Min(y[0], math.Log10(f.Tolerance)), math.Max(y[1], math.Log10(f.Tolerance))}
	}
	axis := Axis{Title: f.Value.Title, Unit: f.Value.Unit}
	if f.Value.given() {
		y = [2]float64{math.Log10(f.Value.Min), math.Log10(f.Value.Max)}
	} else {
		y[0], y[1] = math.Floor(y[0]-0.1), math.Ceil(y[1]+0.1)
	}
	xLo, xHi := span(f.Step, x[0], x[1], 0.04)
	p, err := frame{
		page: f.Page.filled(), name: "Convergence of a run",
		xAxis: f.Step, xRange: [2]float64{xLo, xHi}, yAxis: axis, yRange: y, decades: true,
		key:   func(columns) []entry { return f.key() },
		strip: func(columns) float64 { return raisedRoom },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p) }, nil
}

// raisedRoom is kept free below the key for the raised letters of the uppermost tick.
const raisedRoom = 2.0

// extent is the range of all steps, and of the logarithms of all values above 0.
func (f Convergence) extent() (x, y [2]float64, any bool) {
	x, y = [2]float64{math.Inf(1), math.Inf(-1)}, [2]float64{math.Inf(1), math.Inf(-1)}
	for _, c := range f.Curves {
		for i, v := range c.Values {
			x = [2]float64{math.Min(x[0], c.Steps[i]), math.Max(x[1], c.Steps[i])}
			if v > 0 {
				y, any = [2]float64{math.Min(y[0], math.Log10(v)), math.Max(y[1], math.Log10(v))}, true
			}
		}
	}
	return x, y, any
}

// drawn reports whether a point is on both axes; zeros are at the lower end.
func (f Convergence) drawn(step, value float64) bool {
	return f.Step.holds(step) && (value == 0 || f.Value.holds(value))
}

// reached is the first point from which on a curve is within the tolerance, or -1.
func (f Convergence) reached(c ConvergenceCurve) int {
	first := len(c.Values)
	for first > 0 && c.Values[first-1] <= f.Tolerance {
		first--
	}
	if f.Tolerance == 0 || first == len(c.Values) {
		return -1
	}
	return first
}

func (f Convergence) key() []entry {
	var key []entry
	hidden, zeros, ringed := 0, 0, false
	for i, c := range f.Curves {
		if c.Name != "" {
			key = append(key, entry{c.Name, func(s sheet, x, y, w float64) {
				s.line(x, y, x+w, y, 0.9, series(i))
				s.marker(i, x+w/2, y, 1.6, series(i))
			}})
		}
		for j, v := range c.Values {
			if !f.drawn(c.Steps[j], v) {
				hidden++
			} else if v == 0 {
				zeros++
			}
		}
		if first := f.reached(c); first >= 0 && f.drawn(c.Steps[first], c.Values[first]) {
			ringed = true
		}
	}
	if f.Tolerance > 0 {
		key = append(key, entry{"tolerance " + quantity(f.Tolerance, f.Value.Unit), func(s sheet, x, y, w float64) { s.broken(x, y, x+w, y, 0.8, muted) }})
	}
	if ringed {
		key = append(key, entry{"within it from here on", func(s sheet, x, y, w float64) { s.ring(x+w/2, y, 3.2, 0.8, ink) }})
	}
	if zeros > 0 {
		key = append(key, entry{text: counted(zeros, "value") + " of 0, at the lower end"})
	}
	return append(key, hiddenEntry(hidden, "point")...)
}

func (f Convergence) paint(p *panel) {
	p.draw()
	if f.Tolerance > 0 {
		if y := p.y.at(math.Log10(f.Tolerance)); y >= p.bottom && y <= p.top {
			p.broken(p.left, y, p.right, y, 0.8, muted)
		}
	}
	for n, c := range f.Curves {
		points := f.places(p, c)
		for _, piece := range p.cutLines(points) {
			p.path(piece, 0.9, series(n))
		}
		last := math.Inf(-1)
		for i, pt := range points {
			if x := float64(pt.X); f.drawn(c.Steps[i], c.Values[i]) && x-last >= markPitch {
				p.marker(n, x, float64(pt.Y), 1.6, series(n))
				last = x
			}
		}
	}
	for n, c := range f.Curves {
		if i := f.reached(c); i >= 0 && f.drawn(c.Steps[i], c.Values[i]) {
			pt := f.places(p, c)[i]
			p.ring(float64(pt.X), float64(pt.Y), 3.2, 2, white)
			p.ring(float64(pt.X), float64(pt.Y), 3.2, 0.8, series(n))
		}
	}
}

// markPitch is the least distance of the marks of a curve.
const markPitch = 5.0

// places are those of all points of a curve on the page.
func (f Convergence) places(p *panel, c ConvergenceCurve) []vg.Point {
	var points []vg.Point
	for i, v := range c.Values {
		y := p.bottom
		if v > 0 {
			y = p.y.at(math.Log10(v))
		}
		points = append(points, at(p.x.at(c.Steps[i]), y))
	}
	return points
}
