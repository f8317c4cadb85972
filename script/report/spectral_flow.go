package report

import (
	"fmt"
	"image/color"
	"io"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"
)

// Flow is one level followed through all fluxes.
type Flow struct {
	// Name for the key; empty means none.
	Name string
	// Energies, one for each flux.
	Energies []float64
	// Manifold says that the level belongs to the manifold: it is drawn in a colour
	// of its own.
	Manifold bool
}

// SpectralFlow draws levels against the flux through a period of the cluster: as
// points of one column for each flux (Levels), as lines that follow a level
// (Flows), or both.
type SpectralFlow struct {
	Page Page
	// Flux in flux quanta, in any order for points; ascending if there are Flows or
	// a gap to shade.
	Flux []float64
	// Levels[i] are the levels at Flux[i], in any order and of any number. Nil
	// means no points.
	Levels [][]float64
	// Flows are the followed levels. Nil means no lines.
	Flows []Flow
	// Energy is the vertical axis. Default title "Energy".
	Energy Axis
	// FluxAxis is the axis below. Default title "Flux", default unit "flux quanta".
	FluxAxis Axis
	// Manifold is the number of lowest levels at each flux to draw in colour. Applies
	// to Levels alone.
	Manifold int
	// ShadeGap shades, from flux to flux, the region between the highest level of
	// the manifold and the lowest other one. It needs both at each flux, in Levels
	// if given and else in Flows. Where a manifold of Flows lies above another
	// level there is no gap, and none is shaded.
	ShadeGap bool
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f SpectralFlow) Save(path string) error { return save(path, "SpectralFlow", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f SpectralFlow) Write(w io.Writer, format string) error {
	return write(w, format, "SpectralFlow", f.plan)
}

// flow holds the checked data of the figure.
type flow struct {
	SpectralFlow
	sorted [][]float64 // Levels in ascending order
	gap    []gapNode   // in ascending flux; nil without a shaded gap
	beyond int         // points outside the axes
}

func (f SpectralFlow) plan() (*panel, func(), error) {
	if err := f.check(); err != nil {
		return nil, nil, err
	}
	f.Energy, f.FluxAxis = f.Energy.or("Energy"), f.FluxAxis.or("Flux")
	if f.FluxAxis.Unit == "" {
		f.FluxAxis.Unit = "flux quanta"
	}
	d := flow{SpectralFlow: f}
	for _, levels := range f.Levels {
		s := slices.Clone(levels)
		slices.Sort(s)
		d.sorted = append(d.sorted, s)
	}
	if err := d.findGap(); err != nil {
		return nil, nil, err
	}
	d.countBeyond()
	lo, hi := d.extent()
	yLo, yHi := span(f.Energy, lo, hi, 0.05)
	xLo, xHi := span(f.FluxAxis, slices.Min(f.Flux), slices.Max(f.Flux), 0.03)
	p, err := frame{
		page: f.Page.filled(), name: "Levels against flux",
		xAxis: f.FluxAxis, xRange: [2]float64{xLo, xHi},
		yAxis: f.Energy, yRange: [2]float64{yLo, yHi}, key: func(columns) []entry { return d.key() },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { d.paint(p) }, nil
}

func (f SpectralFlow) check() error {
	if err := f.Page.filled().check(); err != nil {
		return err
	}
	if err := f.Energy.check("energy"); err != nil {
		return err
	}
	if err := f.FluxAxis.check("flux"); err != nil {
		return err
	}
	for i, v := range f.Flux {
		if err := checkNumber(fmt.Sprintf("flux %d", i), v); err != nil {
			return err
		}
	}
	if err := f.checkLevels(); err != nil {
		return err
	}
	return f.checkFlows()
}

func (f SpectralFlow) checkLevels() error {
	if f.Levels != nil && len(f.Levels) != len(f.Flux) {
		return fmt.Errorf("%w: %d sets of levels for %d fluxes; give one set for each flux", ErrData, len(f.Levels), len(f.Flux))
	}
	total := 0
	for i, levels := range f.Levels {
		total += len(levels)
		if f.Manifold < 0 || f.Manifold > len(levels) {
			return fmt.Errorf("%w: a manifold of %d among %d levels at flux %v; give 0 to the number of levels", ErrData, f.Manifold, len(levels), f.Flux[i])
		}
		for j, v := range levels {
			if err := checkNumber(fmt.Sprintf("level %d at flux %v", j, f.Flux[i]), v); err != nil {
				return err
			}
		}
	}
	if f.Levels == nil && f.Manifold != 0 {
		return fmt.Errorf("%w: Manifold %d without Levels; mark the members in Flows", ErrData, f.Manifold)
	}
	if len(f.Flux) == 0 || total == 0 && len(f.Flows) == 0 {
		return fmt.Errorf("%w: %d fluxes and no level; give at least one flux with levels, or flows", ErrData, len(f.Flux))
	}
	return nil
}

func (f SpectralFlow) checkFlows() error {
	if len(f.Flows) > 0 || f.ShadeGap {
		for i := 1; i < len(f.Flux); i++ {
			if !(f.Flux[i] > f.Flux[i-1]) {
				return fmt.Errorf("%w: flux %v follows %v; lines and gaps need ascending fluxes, sort them", ErrData, f.Flux[i], f.Flux[i-1])
			}
		}
	}
	for i, l := range f.Flows {
		if err := checkLabel(fmt.Sprintf("name of flow %d", i), l.Name); err != nil {
			return err
		}
		if len(l.Energies) != len(f.Flux) {
			return fmt.Errorf("%w: %s has %d energies for %d fluxes; give one for each flux", ErrData, called("flow", i, l.Name), len(l.Energies), len(f.Flux))
		}
		for j, v := range l.Energies {
			if err := checkNumber(fmt.Sprintf("energy of %s at flux %v", called("flow", i, l.Name), f.Flux[j]), v); err != nil {
				return err
			}
		}
	}
	return nil
}

func (d *flow) onPage(flux, energy float64) bool {
	return d.FluxAxis.holds(flux) && d.Energy.holds(energy)
}

func (d *flow) countBeyond() {
	for i, levels := range d.sorted {
		for _, v := range levels {
			if !d.onPage(d.Flux[i], v) {
				d.beyond++
			}
		}
	}
	for _, l := range d.Flows {
		for i, v := range l.Energies {
			if !d.onPage(d.Flux[i], v) {
				d.beyond++
			}
		}
	}
}

// extent is the range of all energies.
func (d *flow) extent() (lo, hi float64) {
	lo, hi = math.Inf(1), math.Inf(-1)
	add := func(values []float64) {
		for _, v := range values {
			lo, hi = math.Min(lo, v), math.Max(hi, v)
		}
	}
	for _, levels := range d.sorted {
		add(levels)
	}
	for _, l := range d.Flows {
		add(l.Energies)
	}
	return lo, hi
}

// colour of flow i: one of the series for each member of the manifold.
func (d *flow) colour(i int) color.RGBA {
	if !d.Flows[i].Manifold {
		return muted
	}
	n := 0
	for _, l := range d.Flows[:i] {
		if l.Manifold {
			n++
		}
	}
	return series(n)
}

func (d *flow) key() []entry {
	var key []entry
	if d.Manifold > 0 {
		key = append(key, pointEntry(lowest(d.Manifold), 0, blue), pointEntry("other levels", 0, muted))
	}
	for i, l := range d.Flows {
		if l.Name != "" {
			key = append(key, lineEntry(l.Name, d.colour(i), d.thick(i)))
		}
	}
	if d.gap != nil {
		smallest := math.Inf(1)
		for _, n := range d.gap {
			smallest = math.Min(smallest, n.width())
		}
		text := "no gap at some flux"
		if smallest > 0 {
			text = "smallest gap " + quantity(smallest, d.Energy.Unit)
		}
		key = append(key, tintEntry(text, gapTint))
	}
	return append(key, hiddenEntry(d.beyond, "point")...)
}

func pointEntry(text string, mark int, c color.Color) entry {
	return entry{text, func(s sheet, x, y, w float64) { s.marker(mark, x+w/2, y, 1.6, c) }}
}

func lineEntry(text string, c color.Color, thick float64) entry {
	return entry{text, func(s sheet, x, y, w float64) { s.line(x, y, x+w, y, thick, c) }}
}

func (d *flow) thick(i int) float64 {
	if d.Flows[i].Manifold {
		return 1.2
	}
	return 0.6
}

func (d *flow) paint(p *panel) {
	d.shade(p)
	p.draw()
	for _, inManifold := range []bool{false, true} {
		for i, l := range d.Flows {
			if l.Manifold == inManifold {
				d.follow(p, i)
			}
		}
		d.points(p, inManifold)
	}
}

// follow draws flow i and, if it lies in the manifold, a point at each flux.
func (d *flow) follow(p *panel, i int) {
	var points []vg.Point
	for j, v := range d.Flows[i].Energies {
		points = append(points, at(p.x.at(d.Flux[j]), p.y.at(v)))
	}
	for _, piece := range p.cutLines(points) {
		p.path(piece, d.thick(i), d.colour(i))
	}
	if !d.Flows[i].Manifold && len(points) > 1 {
		return
	}
	for j, v := range d.Flows[i].Energies {
		if d.onPage(d.Flux[j], v) {
			p.disc(float64(points[j].X), float64(points[j].Y), 1.5, d.colour(i))
		}
	}
}

func (d *flow) points(p *panel, inManifold bool) {
	c, radius := muted, 1.0
	if inManifold {
		c, radius = blue, 1.5
	}
	for i, levels := range d.sorted {
		for j, v := range levels {
			if (j < d.Manifold) == inManifold && d.onPage(d.Flux[i], v) {
				p.disc(p.x.at(d.Flux[i]), p.y.at(v), radius, c)
			}
		}
	}
}
