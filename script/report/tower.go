package report

import (
	"fmt"
	"io"
	"maps"
	"math"
	"slices"
	"strconv"

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

// Tower draws energy against S(S+1), with the spins S below: the tower of states of an
// ordered magnet lies on a straight line (P. W. Anderson, Phys. Rev. 86, 694 (1952);
// B. Bernu, C. Lhuillier, L. Pierre, Phys. Rev. Lett. 69, 2590 (1992)). Marks of different
// series at the same spin stand side by side, about the place of the spin.
type Tower struct {
	Page   Page
	Series []TowerSeries
	// Energy is the vertical axis. Default title "Energy".
	Energy Axis
	// Relative draws all levels less the lowest; the default title is then "E − E_{0}".
	Relative bool
	// Line draws the least-squares line through the lowest level of each spin, up to
	// twice the spin Upto (0 means all), and prints its slope in the key: 1/(2χN) for N
	// sites, with the uniform susceptibility χ a site, where the tower is one.
	Line bool
	Upto int
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f Tower) Save(path string) error { return save(path, "Tower", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f Tower) Write(w io.Writer, format string) error { return write(w, format, "Tower", f.plan) }

// Data returns the levels: series, total spin, S(S+1) and energy as given; and, if
// Relative, less the lowest. Errors: those of Write about the data.
func (f Tower) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: append([]Column{{Title: "series"}, {Title: "S"}, {Title: "S(S+1)"}}, energyColumns(f.Energy, f.Relative)...)}
	lowest, _ := f.extent()
	for n, s := range f.Series {
		for i, twice := range s.TwiceS {
			row := []any{labelled(s.Name, n), float64(twice) / 2, casimir(twice), s.Energies[i]}
			if f.Relative {
				row = append(row, s.Energies[i]-lowest)
			}
			t.Add(row...)
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
	lowest, highest := f.extent()
	spins := f.spins()
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
	xLo, xHi := span(Axis{}, 0, math.Max(casimir(spins[len(spins)-1]), 0.75), 0.06)
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
		xAxis: Axis{Title: "Total spin S, placed at S(S+1)"}, xRange: [2]float64{xLo, xHi}, marks: spinTicks(spins),
		yAxis: axis, yRange: [2]float64{yLo, yHi}, key: func(columns) []entry { return f.key(line, hidden) },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, spins, line, zero) }, nil
}

// extent is the range of the energies.
func (f Tower) extent() (lowest, highest float64) {
	lowest, highest = math.Inf(1), math.Inf(-1)
	for _, s := range f.Series {
		for _, e := range s.Energies {
			lowest, highest = math.Min(lowest, e), math.Max(highest, e)
		}
	}
	return lowest, highest
}

// spins are twice the spins that occur, ascending.
func (f Tower) spins() []int {
	var all []int
	for _, s := range f.Series {
		all = append(all, s.TwiceS...)
	}
	slices.Sort(all)
	return slices.Compact(all)
}

func spinTicks(spins []int) []tick {
	var ticks []tick
	for _, twice := range spins {
		label := strconv.Itoa(twice / 2)
		if twice%2 != 0 {
			label = strconv.Itoa(twice) + "/2"
		}
		ticks = append(ticks, tick{casimir(twice), label})
	}
	return ticks
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
				return fmt.Errorf("%w: level %d of %s has twice the spin %d; give 0 to %d", ErrData, i, who, twice, 1<<20)
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
	if f.Upto < 0 || f.Upto > 0 && !f.Line {
		return fmt.Errorf("%w: Upto %d; give twice the spin where the line ends, 0 for all spins or without a line", ErrData, f.Upto)
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
	var x, y, end float64 // means, and the last place
	spins := slices.Sorted(maps.Keys(lowest))
	for i, twice := range spins {
		end = casimir(twice)
		x += (end - x) / float64(i+1)
		y += (lowest[twice] - zero - y) / float64(i+1)
	}
	var xx, xy float64
	for _, twice := range spins {
		d := casimir(twice) - x
		xx, xy = xx+d*d, xy+d*(lowest[twice]-zero-y)
	}
	slope := xy / xx
	return straight{y - slope*x, slope, end}, nil
}

func (f Tower) key(line *straight, hidden int) []entry {
	var key []entry
	for i, s := range f.Series {
		if s.Name != "" {
			key = append(key, entry{s.Name, func(s sheet, x, y, w float64) { s.marker(i, x+w/2, y, 2, series(i)) }})
		}
	}
	if line != nil {
		key = append(key, entry{"slope 1/(2χN) = " + quantity(line.slope, f.Energy.Unit), func(s sheet, x, y, w float64) { s.broken(x, y, x+w, y, 0.8, muted) }})
	}
	return append(key, hiddenEntry(hidden, "level")...)
}

func (f Tower) paint(p *panel, spins []int, line *straight, zero float64) {
	p.draw()
	apart, size := f.spacing(p, spins)
	for n, s := range f.Series {
		for i, e := range s.Energies {
			if p.yAxis.holds(e - zero) {
				aside := (float64(n) - float64(len(f.Series)-1)/2) * apart[s.TwiceS[i]]
				p.marker(n, math.Max(p.left, p.x.at(casimir(s.TwiceS[i]))+aside), p.y.at(e-zero), size, series(n))
			}
		}
	}
	if line == nil {
		return
	}
	points := []vg.Point{at(p.x.at(0), p.y.at(line.offset)), at(p.x.at(line.end), p.y.at(line.offset+line.slope*line.end))}
	for _, piece := range p.cutLines(points) {
		a, b := piece[0], piece[len(piece)-1]
		p.broken(float64(a.X), float64(a.Y), float64(b.X), float64(b.Y), 0.8, muted)
	}
}

// spacing is the distance of neighbouring series at each spin (twice), and the size of the
// marks: those of one spin take three fifths of the way to the nearest other spin.
func (f Tower) spacing(p *panel, spins []int) (apart map[int]float64, size float64) {
	const widest = 14.0
	rooms := make([]float64, len(spins))
	least := widest
	for i, twice := range spins {
		rooms[i] = widest
		for _, other := range []int{i - 1, i + 1} {
			if other >= 0 && other < len(spins) {
				rooms[i] = math.Min(rooms[i], 0.6*math.Abs(p.x.at(casimir(spins[other]))-p.x.at(casimir(twice))))
			}
		}
		least = math.Min(least, rooms[i])
	}
	size = math.Max(1.3, math.Min(2, least/2))
	apart = map[int]float64{}
	for i, twice := range spins {
		apart[twice] = math.Min(3.2, math.Max(0, rooms[i]-2*size)/math.Max(1, float64(len(f.Series)-1)))
	}
	return apart, size
}
