package report

import (
	"errors"
	"fmt"
	"image/color"
	"io"
	"math"
)

// PathPoint is a special point of a path through the Brillouin zone.
type PathPoint struct {
	At    float64 // position on the path
	Label string  // such as "Γ", "X" or "M"
}

// DispersionMap draws a spectral function A(k, ω) as colours along a path of momenta. A
// momentum fills the path half way to its neighbours, since those of a finite cluster
// need not stand at equal distances.
type DispersionMap struct {
	Page Page
	// Path holds the positions of the momenta, ascending.
	Path []float64
	// Energies are the frequencies ω, ascending.
	Energies []float64
	// Values[i][j] = A at Path[i] and Energies[j], 0 or more.
	Values [][]float64
	// Points are marked by lines and named below.
	Points []PathPoint
	// Energy is the vertical axis. Default title "Energy ω".
	Energy Axis
	// Intensity is the axis of colours; Min and Max as elsewhere, both positive if
	// Logarithmic. Default title "A(k, ω)".
	Intensity Axis
	// Logarithmic colours show six decades, or those of Intensity.
	Logarithmic bool
}

// mostCells bounds the drawn cells of a map.
const mostCells = 60000

// Broadened returns Σ_n weights[n]·η/π/((ω-poles[n])²+η²) at each of the energies: lines of
// Lorentz with half width η at half maximum, which integrate to the weights.
//
// Errors: ErrData for lists of different lengths, numbers that are not finite, η <= 0.
func Broadened(poles, weights, energies []float64, eta float64) ([]float64, error) {
	if len(poles) != len(weights) {
		return nil, fmt.Errorf("%w: %d poles with %d weights; give one each", ErrData, len(poles), len(weights))
	}
	if !(eta > 0) || !finite(eta) {
		return nil, fmt.Errorf("%w: a half width of %v; give a positive number", ErrData, eta)
	}
	for i := range poles {
		if err := errors.Join(checkNumber(fmt.Sprintf("pole %d", i), poles[i]), checkNumber(fmt.Sprintf("weight %d", i), weights[i])); err != nil {
			return nil, err
		}
	}
	out := make([]float64, len(energies))
	for j, w := range energies {
		if err := checkNumber(fmt.Sprintf("energy %d", j), w); err != nil {
			return nil, err
		}
		for n, e := range poles {
			out[j] += weights[n] * eta / math.Pi / ((w-e)*(w-e) + eta*eta)
		}
	}
	return out, nil
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f DispersionMap) Save(path string) error { return save(path, "DispersionMap", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f DispersionMap) Write(w io.Writer, format string) error {
	return write(w, format, "DispersionMap", f.plan)
}

// Data returns the map: position, energy and value. Errors: those of Write about the
// data.
func (f DispersionMap) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "position on the path"}, {Title: named(f.Energy, "energy"), Unit: f.Energy.Unit}, {Title: named(f.Intensity, "A(k, ω)"), Unit: f.Intensity.Unit}}}
	for i, k := range f.Path {
		for j, w := range f.Energies {
			t.Add(k, w, f.Values[i][j])
		}
	}
	return t, nil
}

func (f DispersionMap) check() error {
	if err := errors.Join(f.Page.filled().check(), f.Energy.check("energy"), f.Intensity.check("intensity")); err != nil {
		return err
	}
	if len(f.Path) < 2 || len(f.Energies) < 2 || len(f.Values) != len(f.Path) {
		return fmt.Errorf("%w: %d momenta, %d energies and %d columns of values; give two momenta and energies at least, and a column for each momentum", ErrData, len(f.Path), len(f.Energies), len(f.Values))
	}
	if n := len(f.Path) * len(f.Energies); n > mostCells {
		return fmt.Errorf("%w: a map of %d cells; at most %d can be drawn, so give fewer energies", ErrData, n, mostCells)
	}
	if f.Logarithmic && f.Intensity.given() && !(f.Intensity.Min > 0) {
		return fmt.Errorf("%w: logarithmic colours from %v; give positive ends", ErrData, f.Intensity.Min)
	}
	for what, list := range map[string][]float64{"position": f.Path, "energy": f.Energies} {
		for i, v := range list {
			if err := checkNumber(fmt.Sprintf("%s %d", what, i), v); err != nil {
				return err
			}
			if i > 0 && !(v > list[i-1]) {
				return fmt.Errorf("%w: %s %d is %v after %v; give ascending numbers", ErrData, what, i, v, list[i-1])
			}
		}
	}
	for i, column := range f.Values {
		if len(column) != len(f.Energies) {
			return fmt.Errorf("%w: %d values at momentum %d for %d energies; give one each", ErrData, len(column), i, len(f.Energies))
		}
		for j, v := range column {
			if err := checkNumber(fmt.Sprintf("value %d at momentum %d", j, i), v); err != nil {
				return err
			}
			if v < 0 {
				return fmt.Errorf("%w: value %d at momentum %d is %v; a spectral function is not negative", ErrData, j, i, v)
			}
		}
	}
	for _, m := range f.Points {
		if err := errors.Join(checkLabel("label of a point", m.Label), checkNumber("place of a point", m.At)); err != nil {
			return err
		}
	}
	return nil
}

// edges returns the borders of cells around ascending places.
func edges(places []float64) []float64 {
	n := len(places)
	out := make([]float64, n+1)
	for i := 1; i < n; i++ {
		out[i] = (places[i-1] + places[i]) / 2
	}
	out[0], out[n] = places[0]-(out[1]-places[0]), places[n-1]+(places[n-1]-out[n-1])
	return out
}

// colours returns the bar and what it makes of a value.
func (f DispersionMap) colours() (*colourBar, func(v float64) color.RGBA, error) {
	top := 0.0
	for _, column := range f.Values {
		for _, v := range column {
			top = math.Max(top, v)
		}
	}
	if top == 0 {
		return nil, nil, fmt.Errorf("%w: all values are 0; there is nothing to draw", ErrData)
	}
	lo, hi := 0.0, top
	if f.Intensity.given() {
		lo, hi = f.Intensity.Min, f.Intensity.Max
	} else if f.Logarithmic {
		lo = top * 1e-6
	}
	bar := &colourBar{axis: Axis{Title: f.Intensity.or("A(k, ω)").Title, Unit: f.Intensity.Unit}, lo: lo, hi: hi}
	measure := func(v float64) float64 { return v }
	if f.Logarithmic {
		bar.lo, bar.hi, bar.log = math.Log10(lo), math.Log10(hi), true
		measure = func(v float64) float64 { return math.Log10(math.Max(v, 1e-300)) }
	}
	bar.colour = func(v float64) color.RGBA { return rising((v - bar.lo) / (bar.hi - bar.lo)) }
	return bar, func(v float64) color.RGBA { return bar.colour(measure(v)) }, nil
}

func (f DispersionMap) plan() (*panel, func(), error) {
	if err := f.check(); err != nil {
		return nil, nil, err
	}
	bar, colour, err := f.colours()
	if err != nil {
		return nil, nil, err
	}
	f.Energy = f.Energy.or("Energy ω")
	x, y := edges(f.Path), edges(f.Energies)
	yLo, yHi := y[0], y[len(y)-1]
	if f.Energy.given() {
		yLo, yHi = f.Energy.Min, f.Energy.Max
	}
	marks := []tick{}
	for _, m := range f.Points {
		if m.At >= x[0] && m.At <= x[len(x)-1] {
			marks = append(marks, tick{m.At, m.Label})
		}
	}
	p, err := frame{
		page: f.Page.filled(), name: "Spectral function along a path of momenta",
		xAxis: Axis{Title: "Momentum"}, xRange: [2]float64{x[0], x[len(x)-1]}, marks: marks,
		yAxis: f.Energy, yRange: [2]float64{yLo, yHi}, bar: bar,
		key: func(columns) []entry { return nil },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, x, y, colour) }, nil
}

func (f DispersionMap) paint(p *panel, x, y []float64, colour func(float64) color.RGBA) {
	p.draw()
	for i, column := range f.Values {
		for j, v := range column {
			low, high := p.clip(p.y.at(y[j])), p.clip(p.y.at(y[j+1]))
			if high > low { // neighbours overlap a little, so that no seams show
				p.box(p.x.at(x[i]), low, math.Min(p.right, p.x.at(x[i+1])+0.2), math.Min(p.top, high+0.2), colour(v))
			}
		}
	}
	for _, t := range p.x.ticks {
		p.line(p.x.at(t.value), p.bottom, p.x.at(t.value), p.top, 0.5, ink)
	}
	p.line(p.left, p.bottom, p.left, p.top, lineWidth, ink)
	p.line(p.left, p.bottom, p.right, p.bottom, lineWidth, ink)
	p.bar.draw(p)
}
