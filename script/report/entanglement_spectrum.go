package report

import (
	"fmt"
	"io"
	"math"
	"strconv"

	"gonum.org/v1/plot/vg"
)

// EntanglementSpectrum draws entanglement levels ξ = -ln λ against momentum, a
// dash for each level, with a broken line in the gap and above each sector the
// number of levels found below the line and, after a stroke, the expected one
// (after H. Li and F. D. M. Haldane, Phys. Rev. Lett. 101, 010504 (2008)). Numbers
// that differ are printed in colour, with a mark below.
type EntanglementSpectrum struct {
	Page Page
	// Sectors as in SectorSpectrum; Predicted is not used here and must be 0.
	Sectors []Sector
	// Expected counts, one for each sector; nil prints only what was found.
	Expected []int
	// Below is the number of levels below the line over all sectors: 0 for no line
	// and no counts, or BelowLargestGap. All levels below the gap must be given.
	Below int
	// Xi is the vertical axis. Default title "Entanglement level ξ".
	Xi Axis
	// Momentum is the title below; empty means "Momentum (k_{x}, k_{y})".
	Momentum string
	// Tolerance as in SectorSpectrum.
	Tolerance float64
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f EntanglementSpectrum) Save(path string) error {
	return save(path, "EntanglementSpectrum", f.plan)
}

// Write writes the figure in the format svg, png or pdf.
func (f EntanglementSpectrum) Write(w io.Writer, format string) error {
	return write(w, format, "EntanglementSpectrum", f.plan)
}

// counting holds what is printed above the sectors.
type counting struct {
	labels []string
	wrong  []bool
	total  string
	shown  bool
}

func (f EntanglementSpectrum) plan() (*panel, func(), error) {
	names, levels, err := f.columns()
	if err != nil {
		return nil, nil, err
	}
	all := gather(levels)
	if len(all) == 0 {
		return nil, nil, fmt.Errorf("%w: %d sectors without any level; give at least one level", ErrData, len(names))
	}
	count, err := manifold(all, f.Below)
	if err != nil {
		return nil, nil, err
	}
	if count == len(all) {
		return nil, nil, fmt.Errorf("%w: all %d levels below the line and no gap above them; give the next level as well", ErrData, count)
	}
	counts := f.count(all, len(names), count)
	groups := clusters(all, len(names), f.Tolerance)
	axis := f.Xi.or("Entanglement level ξ")
	lo, hi := span(axis, all[0].value, all[len(all)-1].value, 0.06)
	momentum := SectorSpectrum{Momentum: f.Momentum}.momentum()
	p, err := frame{
		page: f.Page.filled(), name: "Entanglement level against momentum",
		names: names, xAxis: Axis{Title: momentum},
		yAxis: axis, yRange: [2]float64{lo, hi},
		key:   func(c columns) []entry { return f.key(c, all, groups, count, counts, beyond(groups, axis)) },
		strip: counts.height,
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	if err := counts.fits(p); err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, all, groups, count, counts) }, nil
}

// columns checks the figure and returns labels and levels of the sectors.
func (f EntanglementSpectrum) columns() (names []string, levels [][]float64, err error) {
	for i, s := range f.Sectors {
		if s.Predicted != 0 {
			return nil, nil, fmt.Errorf("%w: sector %d has Predicted %d; give the counts in Expected", ErrData, i, s.Predicted)
		}
	}
	if f.Expected != nil && len(f.Expected) != len(f.Sectors) {
		return nil, nil, fmt.Errorf("%w: %d expected counts for %d sectors; give one for each sector", ErrData, len(f.Expected), len(f.Sectors))
	}
	if f.Expected != nil && f.Below == 0 {
		return nil, nil, fmt.Errorf("%w: expected counts without a gap; give Below, or BelowLargestGap", ErrData)
	}
	for i, n := range f.Expected {
		if n < 0 {
			return nil, nil, fmt.Errorf("%w: %d levels expected in sector %d; give 0 or more", ErrData, n, i)
		}
	}
	return SectorSpectrum{Page: f.Page, Sectors: f.Sectors, Energy: f.Xi, Momentum: f.Momentum, Tolerance: f.Tolerance}.columns()
}

// count compares the levels below the line with the expected numbers.
func (f EntanglementSpectrum) count(all []placed, sectors, below int) counting {
	c := counting{shown: below > 0, total: strconv.Itoa(below)}
	found := make([]int, sectors)
	for _, p := range all[:below] {
		found[p.column]++
	}
	expected := 0
	for i, n := range found {
		label, wrong := strconv.Itoa(n), false
		if f.Expected != nil {
			label += "/" + strconv.Itoa(f.Expected[i])
			wrong = n != f.Expected[i]
			expected += f.Expected[i]
		}
		c.labels, c.wrong = append(c.labels, label), append(c.wrong, wrong)
	}
	if f.Expected != nil {
		c.total += "/" + strconv.Itoa(expected)
	}
	return c
}

// Counts are printed from 6 points down to 4.5.
const leastCount = 4.5

func (c counting) longest(size float64) float64 {
	longest := 0.0
	for _, label := range c.labels {
		longest = math.Max(longest, width(label, size))
	}
	return longest
}

// upright reports whether the counts do not fit side by side.
func (c counting) upright(cols columns) bool { return c.longest(countSize)+clearance > cols.pitch }

// countLift is the room below the counts, where the mark of a wrong one stands.
const countLift = 5.5

func (c counting) height(cols columns) float64 {
	switch {
	case !c.shown:
		return 0
	case c.upright(cols):
		return c.longest(c.size(cols)) + countLift + 1
	}
	return capital*countSize + countLift + 1
}

func (c counting) size(cols columns) float64 {
	if !c.upright(cols) {
		return countSize
	}
	return math.Min(countSize, cols.pitch)
}

func (c counting) fits(p *panel) error {
	if c.shown && c.size(p.columns) < leastCount {
		need := leastCount * float64(len(c.labels)) / perMillimetre
		have := (p.right - p.left) / perMillimetre
		return fmt.Errorf("%w: the counts of %d sectors need %.0f mm and have %.0f mm; widen the page by %.0f mm",
			ErrSize, len(c.labels), math.Ceil(need), have, math.Ceil(need-have))
	}
	return nil
}

func (f EntanglementSpectrum) key(cols columns, all []placed, groups []cluster, below int, c counting, hidden int) []entry {
	var key []entry
	if c.shown {
		what := "below the gap: "
		if f.Expected != nil {
			what = "below the gap, found/expected: "
		}
		key = append(key, dashEntry(what+c.total, 1, blue), entry{
			"gap " + quantity(all[below].value-all[below-1].value, f.Xi.Unit),
			func(s sheet, x, y, w float64) { s.broken(x, y, x+w, y, 0.8, vermilion) },
		})
	}
	key = append(key, cols.key(groups, f.Tolerance, f.Xi.Unit)...)
	return append(key, hiddenEntry(hidden, "level")...)
}

func (f EntanglementSpectrum) paint(p *panel, all []placed, groups []cluster, below int, c counting) {
	p.draw()
	if c.shown {
		line := p.y.at((all[below-1].value + all[below].value) / 2)
		for _, piece := range p.cutLines([]vg.Point{at(p.left, line), at(p.right, line)}) {
			p.broken(float64(piece[0].X), line, p.right, line, 0.8, vermilion)
		}
		c.draw(p)
	}
	p.drawClusters(groups)
}

// draw prints the counts, and below each wrong one a mark.
func (c counting) draw(p *panel) {
	size, base := c.size(p.columns), p.top+countLift
	for i, label := range c.labels {
		x, tone := p.columns.at(i), ink
		if c.wrong[i] {
			tone = vermilion
			p.area(tone, at(x-1.8, base-1.2), at(x+1.8, base-1.2), at(x, base-4.2))
		}
		if c.upright(p.columns) {
			p.sheet.upright(label, size, x+capital*size/2, base, 0, tone)
			continue
		}
		p.text(label, size, x, base, 0.5, tone)
	}
}
