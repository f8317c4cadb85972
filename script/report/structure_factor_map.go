package report

import (
	"errors"
	"fmt"
	"image/color"
	"io"
	"math"

	"gonum.org/v1/plot/vg"
)

// MomentumValue is a value at an allowed momentum of a cluster.
type MomentumValue struct {
	K     [2]float64 // Cartesian
	Value float64
}

// MomentumLabel names a special point.
type MomentumLabel struct {
	K     [2]float64
	Label string // such as "Γ" or "M"
}

// StructureFactorMap draws values at the allowed momenta of a cluster, repeated by the
// reciprocal lattice, as a colour of all points that are nearer to a momentum than to any
// other, with the outline of the first Brillouin zone. Values of both signs have colours
// on both sides of white.
type StructureFactorMap struct {
	Page Page
	// Points are the momenta, each once up to reciprocal lattice vectors.
	Points []MomentumValue
	// Reciprocal lattice vectors b₁, b₂ of the lattice.
	Reciprocal [2][2]float64
	// Labels of special points.
	Labels []MomentumLabel
	// Value is the axis of colours. Default title "S(k)".
	Value Axis
	// Unit of the momenta. Empty means that of the inverse of lengths, without a name.
	Unit string
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f StructureFactorMap) Save(path string) error { return save(path, "StructureFactorMap", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f StructureFactorMap) Write(w io.Writer, format string) error {
	return write(w, format, "StructureFactorMap", f.plan)
}

// Data returns the momenta and values as given. Errors: those of Write about the data.
func (f StructureFactorMap) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "kx", Unit: f.Unit}, {Title: "ky", Unit: f.Unit}, {Title: named(f.Value, "S(k)"), Unit: f.Value.Unit}}}
	for _, m := range f.Points {
		t.Add(m.K[0], m.K[1], m.Value)
	}
	return t, nil
}

// mostMomenta bounds the points of a map.
const mostMomenta = 2000

func (f StructureFactorMap) check() error {
	if err := errors.Join(f.Page.filled().check(), f.Value.check("value"), checkLabel("unit of momenta", f.Unit)); err != nil {
		return err
	}
	if len(f.Points) == 0 || len(f.Points) > mostMomenta {
		return fmt.Errorf("%w: %d momenta; give 1 to %d", ErrData, len(f.Points), mostMomenta)
	}
	for i, m := range f.Points {
		if err := errors.Join(checkNumber(fmt.Sprintf("value %d", i), m.Value), checkNumber(fmt.Sprintf("momentum %d", i), m.K[0]), checkNumber(fmt.Sprintf("momentum %d", i), m.K[1])); err != nil {
			return err
		}
	}
	for i, b := range f.Reciprocal {
		if err := errors.Join(checkNumber(fmt.Sprintf("reciprocal vector %d", i), b[0]), checkNumber(fmt.Sprintf("reciprocal vector %d", i), b[1])); err != nil {
			return err
		}
	}
	b := f.Reciprocal
	size := math.Hypot(b[0][0], b[0][1]) * math.Hypot(b[1][0], b[1][1])
	if area := math.Abs(b[0][0]*b[1][1] - b[0][1]*b[1][0]); !(area > 1e-9*size) || size == 0 {
		return fmt.Errorf("%w: the reciprocal vectors %v and %v are parallel; give two that span the plane", ErrData, b[0], b[1])
	}
	for _, l := range f.Labels {
		if err := errors.Join(checkLabel("label of a momentum", l.Label), checkNumber("a labelled momentum", l.K[0]), checkNumber("a labelled momentum", l.K[1])); err != nil {
			return err
		}
	}
	return nil
}

func (f StructureFactorMap) plan() (*panel, func(), error) {
	if err := f.check(); err != nil {
		return nil, nil, err
	}
	b := shortened(f.Reciprocal)
	far := 4 * (math.Hypot(b[0][0], b[0][1]) + math.Hypot(b[1][0], b[1][1]))
	zone := wignerSeitz(combinations(b, 2), far)
	reach := [2]float64{}
	for _, corner := range zone {
		reach[0], reach[1] = math.Max(reach[0], math.Abs(corner[0])), math.Max(reach[1], math.Abs(corner[1]))
	}
	bar := valueBar(f.Value.or("S(k)"), f.values())
	titles := [2]string{"k_{x}", "k_{y}"}
	p, err := frame{
		page: f.Page.filled(), name: "Structure factor over the Brillouin zone",
		xAxis: Axis{Title: titles[0], Unit: f.Unit}, xRange: [2]float64{-1.3 * reach[0], 1.3 * reach[0]},
		yAxis: Axis{Title: titles[1], Unit: f.Unit}, yRange: [2]float64{-1.3 * reach[1], 1.3 * reach[1]},
		bar: bar, equal: true, key: func(columns) []entry { return nil },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, b, zone) }, nil
}

func (f StructureFactorMap) values() []float64 {
	var list []float64
	for _, m := range f.Points {
		list = append(list, m.Value)
	}
	return list
}

// valueBar returns the colours of values: rising from 0 where none is negative, else
// with both signs alike.
func valueBar(axis Axis, values []float64) *colourBar {
	lo, hi := 0.0, 0.0
	for _, v := range values {
		lo, hi = math.Min(lo, v), math.Max(hi, v)
	}
	if axis.given() {
		lo, hi = axis.Min, axis.Max
	}
	bar := &colourBar{axis: Axis{Title: axis.Title, Unit: axis.Unit}, lo: lo, hi: hi}
	if lo < -1e-9*hi {
		most := math.Max(-lo, hi)
		bar.lo, bar.hi = -most, most
		bar.colour = func(v float64) color.RGBA { return signed(v / most) }
		return bar
	}
	bar.lo = math.Max(0, lo)
	if level(bar.lo, bar.hi) {
		bar.hi = bar.lo + 1
	}
	bar.colour = func(v float64) color.RGBA { return rising((v - bar.lo) / (bar.hi - bar.lo)) }
	return bar
}

func (f StructureFactorMap) paint(p *panel, b [2][2]float64, zone [][2]float64) {
	p.draw()
	shifts := append(combinations(b, 3), [2]float64{})
	var images []MomentumValue
	for _, m := range f.Points {
		home := folded(m.K, b)
		for _, s := range shifts {
			images = append(images, MomentumValue{[2]float64{home[0] + s[0], home[1] + s[1]}, m.Value})
		}
	}
	reach := p.x.max - p.x.min
	for _, m := range images {
		if math.Abs(m.K[0]) > 1.6*p.x.max || math.Abs(m.K[1]) > 1.6*p.y.max {
			continue
		}
		var others [][2]float64
		for _, o := range images {
			others = append(others, [2]float64{o.K[0] - m.K[0], o.K[1] - m.K[1]})
		}
		var corners []vg.Point
		for _, c := range wignerSeitz(others, reach) {
			corners = append(corners, at(p.x.at(m.K[0]+1.004*c[0]), p.y.at(m.K[1]+1.004*c[1])))
		}
		if polygon := p.cutArea(corners); len(polygon) > 2 {
			p.area(p.bar.colour(m.Value), polygon...)
		}
	}
	var outline []vg.Point
	for i := range len(zone) + 1 {
		c := zone[i%len(zone)]
		outline = append(outline, at(p.x.at(c[0]), p.y.at(c[1])))
	}
	p.path(outline, 0.9, ink)
	for _, l := range f.Labels {
		x, y := p.x.at(l.K[0]), p.y.at(l.K[1])
		if x < p.left || x > p.right || y < p.bottom || y > p.top {
			continue
		}
		half := width(l.Label, tickSize)/2 + 1.5
		p.disc(x, y, 1.2, ink)
		x = between(x, 2*half, p.left, p.right)
		p.box(x-half, y+2, x+half, y+3.5+capital*tickSize, white)
		p.text(l.Label, tickSize, x, y+2.8, 0.5, ink)
	}
	p.bar.draw(p)
}

// folded moves a momentum into the parallelogram about the origin.
func folded(k [2]float64, b [2][2]float64) [2]float64 {
	area := b[0][0]*b[1][1] - b[0][1]*b[1][0]
	x := math.Round((k[0]*b[1][1] - k[1]*b[1][0]) / area)
	y := math.Round((b[0][0]*k[1] - b[0][1]*k[0]) / area)
	return [2]float64{k[0] - x*b[0][0] - y*b[1][0], k[1] - x*b[0][1] - y*b[1][1]}
}
