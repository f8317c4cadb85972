package report

import (
	"fmt"
	"io"
	"math"

	"gonum.org/v1/plot/vg"
)

// TowerSeries is a set of levels with a mark of its own, such as those of one momentum
// and representation.
type TowerSeries struct {
	// Name for the key; empty means none.
	Name string
	// TwiceS holds twice the total spin of each level, 0 or more.
	TwiceS []int
	// Energies, one for each of TwiceS.
	Energies []float64
}

// Tower draws energy against S(S+1): the tower of states of an ordered magnet lies on
// a straight line (P. W. Anderson, Phys. Rev. 86, 694 (1952); B. Bernu, C. Lhuillier,
// L. Pierre, Phys. Rev. Lett. 69, 2590 (1992)). Marks of different series at the same
// spin stand side by side.
type Tower struct {
	Page   Page
	Series []TowerSeries
	// Energy is the vertical axis. Default title "Energy".
	Energy Axis
	// Relative draws all levels less the lowest; the default title is then "E − E_{0}".
	Relative bool
	// Line draws the least-squares line through the lowest level of each spin, up to
	// the spin Upto (twice; 0 means all), and prints its slope in the key: 1/(2χN), with
	// the uniform susceptibility χ a site, where the tower is one.
	Line bool
	Upto int
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f Tower) Save(path string) error { return save(path, "Tower", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f Tower) Write(w io.Writer, format string) error { return write(w, format, "Tower", f.plan) }

// Data returns the levels: series, total spin, S(S+1) and energy as given. Errors:
// those of Write about the data.
func (f Tower) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "series"}, {Title: "S"}, {Title: "S(S+1)"}, {Title: named(f.Energy, "energy"), Unit: f.Energy.Unit}}}
	for n, s := range f.Series {
		for i, twice := range s.TwiceS {
			t.Add(labelled(s.Name, n), float64(twice)/2, casimir(twice), s.Energies[i])
		}
	}
	return t, nil
}

// casimir is S(S+1) for twice S.
func casimir(twice int) float64 { return float64(twice) * float64(twice+2) / 4 }

func (f Tower) plan() (*panel, func(), error) {
	if err := f.check(); err != nil {
		return nil, nil, err
	}
	lowest, highest, most := math.Inf(1), math.Inf(-1), 0
	for _, s := range f.Series {
		for i, e := range s.Energies {
			lowest, highest, most = math.Min(lowest, e), math.Max(highest, e), max(most, s.TwiceS[i])
		}
	}
	axis, zero := f.Energy.or("Energy"), 0.0
	if f.Relative {
		axis, zero = f.Energy.or("E − E_{0}"), lowest
	}
	var line *straight
	if f.Line {
		l, err := f.fit(zero)
		if err != nil {
			return nil, nil, err
		}
		line = &l
	}
	yLo, yHi := span(axis, lowest-zero, highest-zero, 0.06)
	xLo, xHi := span(Axis{}, 0, math.Max(casimir(most), 0.75), 0.06)
	hidden := 0
	for _, s := range f.Series {
		for _, e := range s.Energies {
			if !axis.holds(e - zero) {
				hidden++
			}
		}
	}
	p, err := frame{
		page: f.Page.filled(), name: "Energy against total spin",
		xAxis: Axis{Title: "S(S+1)"}, xRange: [2]float64{xLo, xHi},
		yAxis: axis, yRange: [2]float64{yLo, yHi}, key: func(columns) []entry { return f.key(line, hidden) },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, line, zero) }, nil
}

func (f Tower) check() error {
	if err := f.Page.filled().check(); err != nil {
		return err
	}
	if err := f.Energy.check("energy"); err != nil {
		return err
	}
	levels := 0
	for n, s := range f.Series {
		who := called("series", n, s.Name)
		if err := checkLabel("name of series "+fmt.Sprint(n), s.Name); err != nil {
			return err
		}
		if len(s.TwiceS) != len(s.Energies) {
			return fmt.Errorf("%w: %s has %d spins and %d energies; give as many of both", ErrData, who, len(s.TwiceS), len(s.Energies))
		}
		for i, twice := range s.TwiceS {
			if twice < 0 || twice > 1<<20 {
				return fmt.Errorf("%w: level %d of %s has twice the spin %d; give 0 or more", ErrData, i, who, twice)
			}
			if err := checkNumber(fmt.Sprintf("energy %d of %s", i, who), s.Energies[i]); err != nil {
				return err
			}
		}
		levels += len(s.Energies)
	}
	if levels == 0 {
		return fmt.Errorf("%w: a tower without levels; give at least one", ErrData)
	}
	if f.Upto < 0 {
		return fmt.Errorf("%w: a line up to twice the spin %d; give 0 for all, or a spin", ErrData, f.Upto)
	}
	return nil
}

// straight is a line y = offset + slope·x, up to an end.
type straight struct{ offset, slope, end float64 }

// fit is the line through the lowest level of each spin.
func (f Tower) fit(zero float64) (straight, error) {
	lowest := map[int]float64{}
	for _, s := range f.Series {
		for i, twice := range s.TwiceS {
			if e, known := lowest[twice]; f.Upto == 0 || twice <= f.Upto {
				if !known || s.Energies[i] < e {
					lowest[twice] = s.Energies[i]
				}
			}
		}
	}
	if len(lowest) < 2 {
		return straight{}, fmt.Errorf("%w: a line through the lowest levels of %d spins; give levels of two spins at least, or no line", ErrData, len(lowest))
	}
	var n, x, y, xx, xy, end float64
	for twice := 0; twice <= 1<<20 && int(n) < len(lowest); twice++ {
		if e, known := lowest[twice]; known {
			a, b := casimir(twice), e-zero
			n, x, y, xx, xy, end = n+1, x+a, y+b, xx+a*a, xy+a*b, a
		}
	}
	slope := (n*xy - x*y) / (n*xx - x*x)
	return straight{(y - slope*x) / n, slope, end}, nil
}

func (f Tower) key(line *straight, hidden int) []entry {
	var key []entry
	for i, s := range f.Series {
		if s.Name != "" {
			key = append(key, entry{s.Name, func(s sheet, x, y, w float64) { s.marker(i, x+w/2, y, 2, series(i)) }})
		}
	}
	if line != nil {
		key = append(key, entry{"slope " + quantity(line.slope, f.Energy.Unit), func(s sheet, x, y, w float64) { s.broken(x, y, x+w, y, 0.8, muted) }})
	}
	return append(key, hiddenEntry(hidden, "level")...)
}

func (f Tower) paint(p *panel, line *straight, zero float64) {
	p.draw()
	if line != nil {
		points := []vg.Point{at(p.x.at(0), p.y.at(line.offset)), at(p.x.at(line.end), p.y.at(line.offset+line.slope*line.end))}
		for _, piece := range p.cutLines(points) {
			a, b := piece[0], piece[len(piece)-1]
			p.broken(float64(a.X), float64(a.Y), float64(b.X), float64(b.Y), 0.8, muted)
		}
	}
	apart := math.Min(3.2, 14/math.Max(1, float64(len(f.Series))))
	for n, s := range f.Series {
		aside := (float64(n) - float64(len(f.Series)-1)/2) * apart
		for i, e := range s.Energies {
			if p.yAxis.holds(e - zero) {
				p.marker(n, math.Max(p.left, p.x.at(casimir(s.TwiceS[i]))+aside), p.y.at(e-zero), 2, series(n))
			}
		}
	}
}
