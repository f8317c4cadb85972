package report

import (
	"fmt"
	"image/color"
	"io"
	"math"
	"strconv"
)

// Sector is a column of a figure: the levels of one momentum sector.
type Sector struct {
	// Label below the column, such as "(1,0)"; empty means the index.
	Label string
	// Levels in any order, each repeated as often as its multiplicity; may be
	// empty.
	Levels []float64
	// Predicted is the number of levels that a theory expects in the manifold from
	// this sector; the column is shaded if it is not 0.
	Predicted int
}

// SectorSpectrum draws energy against momentum sector: a dash for each level, in
// the column of its sector. Columns stand in the order of Sectors at equal
// distances, that is, at the linear index k_x + L_x k_y if the sectors are listed
// with k_x running fastest; labels are thinned until they are legible.
type SectorSpectrum struct {
	Page    Page
	Sectors []Sector
	// Energy is the vertical axis. Default title "Energy".
	Energy Axis
	// Momentum is the title below; empty means "Momentum (k_{x}, k_{y})".
	Momentum string
	// Relative draws all levels less the lowest; the default title is then
	// "E − E_{0}".
	Relative bool
	// Tolerance below which neighbouring levels of a sector count as degenerate, in
	// the unit of the levels: a chain of levels, each at most Tolerance above the
	// one before, becomes one dash at their mean, split into as many parts as it has
	// members, with their number beside it where there is room. 0 joins equal levels
	// only.
	Tolerance float64
	// Manifold is the number of lowest levels to draw in colour: 0 for none, or
	// BelowLargestGap.
	Manifold int
	// ShadeGap shades the band between the manifold and the next level. Needs
	// a manifold.
	ShadeGap bool
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f SectorSpectrum) Save(path string) error { return save(path, "SectorSpectrum", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f SectorSpectrum) Write(w io.Writer, format string) error {
	return write(w, format, "SectorSpectrum", f.plan)
}

func (f SectorSpectrum) plan() (*panel, func(), error) {
	names, levels, err := f.columns()
	if err != nil {
		return nil, nil, err
	}
	all := gather(levels)
	if len(all) == 0 {
		return nil, nil, fmt.Errorf("%w: %d sectors without any level; give at least one level", ErrData, len(names))
	}
	count, err := manifold(all, f.Manifold)
	if err != nil {
		return nil, nil, err
	}
	axis := f.Energy.or("Energy")
	if f.Relative {
		axis = f.Energy.or("E − E_{0}")
		relative(all)
	}
	gap, err := f.gap(all, count)
	if err != nil {
		return nil, nil, err
	}
	groups := clusters(all, len(names), f.Tolerance)
	lo, hi := span(axis, all[0].value, all[len(all)-1].value, 0.06)
	p, err := frame{
		page: f.Page.filled(), name: "Energy against momentum sector",
		names: names, xAxis: Axis{Title: f.momentum()},
		yAxis: axis, yRange: [2]float64{lo, hi},
		key: func(c columns) []entry { return f.key(c, groups, count, gap, beyond(groups, axis)) },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, groups, gap) }, nil
}

// relative subtracts the lowest level.
func relative(all []placed) {
	lowest := all[0].value
	for i := range all {
		all[i].value -= lowest
	}
}

// beyond is the number of levels that are not on the axis.
func beyond(groups []cluster, axis Axis) int {
	n := 0
	for _, g := range groups {
		if !axis.holds(g.value) {
			n += g.count
		}
	}
	return n
}

func (f SectorSpectrum) momentum() string {
	if f.Momentum == "" {
		return "Momentum (k_{x}, k_{y})"
	}
	return f.Momentum
}

// columns checks the figure and returns labels and levels of the sectors.
func (f SectorSpectrum) columns() (names []string, levels [][]float64, err error) {
	if err := f.Page.filled().check(); err != nil {
		return nil, nil, err
	}
	if err := f.Energy.check("energy"); err != nil {
		return nil, nil, err
	}
	if err := checkLabel("title of the momentum axis", f.Momentum); err != nil {
		return nil, nil, err
	}
	if err := checkTolerance(f.Tolerance); err != nil {
		return nil, nil, err
	}
	for i, s := range f.Sectors {
		if s.Predicted < 0 {
			return nil, nil, fmt.Errorf("%w: %d levels predicted in sector %d; give 0 or more", ErrData, s.Predicted, i)
		}
		names, levels = append(names, s.Label), append(levels, s.Levels)
	}
	names, err = checkSectors(names, levels)
	return names, levels, err
}

// checkSectors checks labels and levels and puts indices for empty labels.
func checkSectors(names []string, levels [][]float64) ([]string, error) {
	if len(names) == 0 {
		return nil, fmt.Errorf("%w: no sectors; give at least one", ErrData)
	}
	out := make([]string, len(names))
	for i, name := range names {
		if err := checkLabel("label of sector "+strconv.Itoa(i), name); err != nil {
			return nil, err
		}
		out[i] = name
		if name == "" {
			out[i] = strconv.Itoa(i)
		}
		for j, v := range levels[i] {
			if err := checkNumber(fmt.Sprintf("level %d of %s", j, called("sector", i, name)), v); err != nil {
				return nil, err
			}
		}
	}
	return out, nil
}

// gap is the band between the manifold and the next level; nil if not wanted.
func (f SectorSpectrum) gap(all []placed, count int) (*[2]float64, error) {
	if !f.ShadeGap {
		return nil, nil
	}
	if count == 0 || count == len(all) {
		return nil, fmt.Errorf("%w: no gap to shade with %d of %d levels in the manifold; give a smaller manifold above 0, or BelowLargestGap", ErrData, count, len(all))
	}
	return &[2]float64{all[count-1].value, all[count].value}, nil
}

func (f SectorSpectrum) key(c columns, groups []cluster, count int, gap *[2]float64, hidden int) []entry {
	var key []entry
	if count > 0 {
		key = append(key, dashEntry(lowest(count), 1, blue), dashEntry("other levels", 1, muted))
	}
	if gap != nil {
		key = append(key, tintEntry("gap "+quantity(gap[1]-gap[0], f.Energy.Unit), gapTint))
	}
	predicted, total := false, 0
	for _, s := range f.Sectors {
		predicted, total = predicted || s.Predicted > 0, total+s.Predicted
	}
	if predicted {
		key = append(key, tintEntry("predicted: "+counted(total, "level"), predictedTint))
	}
	key = append(key, c.key(groups, f.Tolerance, f.Energy.Unit)...)
	return append(key, hiddenEntry(hidden, "level")...)
}

// quantity writes a number with its unit.
func quantity(v float64, unit string) string {
	if unit == "" {
		return short(v)
	}
	return short(v) + " " + unit
}

func dashEntry(text string, parts int, c color.Color) entry {
	return entry{text, func(s sheet, x, y, w float64) { s.dashes(x+1, y, w-2, dashWidth, parts, c) }}
}

func tintEntry(text string, c color.Color) entry {
	return entry{text, func(s sheet, x, y, w float64) { s.box(x, y-3, x+w, y+3, c) }}
}

// hiddenEntry says how many levels or points the axis does not reach.
func hiddenEntry(n int, what string) []entry {
	if n == 0 {
		return nil
	}
	return []entry{{text: counted(n, what) + " beyond the axis"}}
}

// counted writes a number of things, one or many.
func counted(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return strconv.Itoa(n) + " " + what + "s"
}

func lowest(n int) string {
	if n == 1 {
		return "lowest level"
	}
	return "lowest " + counted(n, "level")
}

func (f SectorSpectrum) paint(p *panel, groups []cluster, gap *[2]float64) {
	f.shade(p, gap)
	p.draw()
	p.drawClusters(groups)
}

// shade draws the columns of predicted sectors, the gap, and where both meet.
func (f SectorSpectrum) shade(p *panel, gap *[2]float64) {
	low, high := p.bottom, p.bottom
	if gap != nil {
		low, high = p.clip(p.y.at(gap[0])), p.clip(p.y.at(gap[1]))
		p.box(p.left, low, p.right, high, gapTint)
	}
	half := math.Min(0.46*p.columns.pitch, 12)
	for i, s := range f.Sectors {
		if s.Predicted == 0 {
			continue
		}
		x := p.columns.at(i)
		p.box(x-half, p.bottom, x+half, p.top, predictedTint)
		if gap != nil {
			p.box(x-half, low, x+half, high, overlap(predictedTint, gapTint))
		}
	}
}

// drawClusters draws the levels on the axis, those of the manifold last.
func (p *panel) drawClusters(groups []cluster) {
	heights := make([]float64, len(groups))
	for i, g := range groups {
		heights[i] = p.y.at(g.value)
	}
	numbered := p.columns.numbered(groups, heights)
	for _, inManifold := range []bool{false, true} {
		c, thick := muted, p.columns.thickness(groups, heights, inManifold)
		if inManifold {
			c = blue
		}
		for i, g := range groups {
			if g.manifold == inManifold && p.yAxis.holds(g.value) {
				p.columns.drawCluster(p.sheet, g, heights[i], thick, c, numbered[i])
			}
		}
	}
}
