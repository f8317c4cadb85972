package report

import (
	"fmt"
	"io"
	"math"

	"gonum.org/v1/plot/vg"
)

// EntropyCurve is the entropy of one state, or of one kind, against the cut.
type EntropyCurve struct {
	// Name for the key; empty means none.
	Name string
	// Sites are the numbers of sites in part A, in strictly ascending order.
	Sites []int
	// Entropies in nats, one for each of Sites.
	Entropies []float64
}

// EntropyProfile draws the entropy of part A against its number of sites: a mark
// for each cut and a line that joins them. Curves differ in colour and in mark.
type EntropyProfile struct {
	Page   Page
	Curves []EntropyCurve
	// Entropy is the vertical axis. Default title "Entropy", default unit "nats".
	Entropy Axis
	// Cut is the axis below. Default title "Sites in part A".
	Cut Axis
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f EntropyProfile) Save(path string) error { return save(path, "EntropyProfile", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f EntropyProfile) Write(w io.Writer, format string) error {
	return write(w, format, "EntropyProfile", f.plan)
}

func (f EntropyProfile) plan() (*panel, func(), error) {
	if err := f.check(); err != nil {
		return nil, nil, err
	}
	f.Entropy, f.Cut = f.Entropy.or("Entropy"), f.Cut.or("Sites in part A")
	if f.Entropy.Unit == "" {
		f.Entropy.Unit = "nats"
	}
	xs, ys, hidden := f.extent()
	xLo, xHi := span(f.Cut, xs[0], xs[1], 0.04)
	yLo, yHi := span(f.Entropy, ys[0], ys[1], 0.06)
	p, err := frame{
		page: f.Page.filled(), name: "Entropy against the cut",
		xAxis: f.Cut, xRange: [2]float64{xLo, xHi}, whole: true,
		yAxis: f.Entropy, yRange: [2]float64{yLo, yHi}, key: func(columns) []entry { return f.key(hidden) },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p) }, nil
}

func (f EntropyProfile) check() error {
	if err := f.Page.filled().check(); err != nil {
		return err
	}
	if err := f.Entropy.check("entropy"); err != nil {
		return err
	}
	if err := f.Cut.check("cut"); err != nil {
		return err
	}
	if len(f.Curves) == 0 {
		return fmt.Errorf("%w: no curves; give at least one", ErrData)
	}
	for i, c := range f.Curves {
		if err := c.check(i); err != nil {
			return err
		}
	}
	return nil
}

func (c EntropyCurve) check(i int) error {
	if err := checkLabel(fmt.Sprintf("name of curve %d", i), c.Name); err != nil {
		return err
	}
	if len(c.Sites) == 0 || len(c.Sites) != len(c.Entropies) {
		return fmt.Errorf("%w: %s has %d cuts and %d entropies; give as many of both, at least one",
			ErrData, called("curve", i, c.Name), len(c.Sites), len(c.Entropies))
	}
	for j, v := range c.Entropies {
		if err := checkNumber(fmt.Sprintf("entropy %d of %s", j, called("curve", i, c.Name)), v); err != nil {
			return err
		}
		if err := checkNumber(fmt.Sprintf("cut %d of %s", j, called("curve", i, c.Name)), float64(c.Sites[j])); err != nil {
			return err
		}
		if c.Sites[j] < 0 || j > 0 && c.Sites[j] <= c.Sites[j-1] {
			return fmt.Errorf("%w: cut %d of %s has %d sites in part A; give ascending numbers, none negative",
				ErrData, j, called("curve", i, c.Name), c.Sites[j])
		}
	}
	return nil
}

// extent is the range of the data, with zero entropy in it, and the number of
// points beyond given axes.
func (f EntropyProfile) extent() (xs, ys [2]float64, hidden int) {
	xs, ys = [2]float64{math.Inf(1), math.Inf(-1)}, [2]float64{0, 0}
	for _, c := range f.Curves {
		for j, v := range c.Entropies {
			n := float64(c.Sites[j])
			xs = [2]float64{math.Min(xs[0], n), math.Max(xs[1], n)}
			ys = [2]float64{math.Min(ys[0], v), math.Max(ys[1], v)}
			if !f.Cut.holds(n) || !f.Entropy.holds(v) {
				hidden++
			}
		}
	}
	return xs, ys, hidden
}

func (f EntropyProfile) key(hidden int) []entry {
	var key []entry
	for i, c := range f.Curves {
		if c.Name == "" {
			continue
		}
		key = append(key, entry{c.Name, func(s sheet, x, y, w float64) {
			s.line(x, y, x+w, y, 0.9, series(i))
			s.marker(i, x+w/2, y, 2, series(i))
		}})
	}
	return append(key, hiddenEntry(hidden, "point")...)
}

func (f EntropyProfile) paint(p *panel) {
	p.draw()
	for i, c := range f.Curves {
		var points []vg.Point
		for j, v := range c.Entropies {
			points = append(points, at(p.x.at(float64(c.Sites[j])), p.y.at(v)))
		}
		for _, piece := range p.cutLines(points) {
			p.path(piece, 0.9, series(i))
		}
		for j, v := range c.Entropies {
			if f.Cut.holds(float64(c.Sites[j])) && f.Entropy.holds(v) {
				p.marker(i, float64(points[j].X), float64(points[j].Y), 2, series(i))
			}
		}
	}
}
