package report

import (
	"fmt"
	"io"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"
)

// Means of the ratio of neighbouring spacings, r = min/max: closed formulas of the
// surmises of Y. Y. Atas, E. Bogomolny, O. Giraud and G. Roux, Phys. Rev. Lett. 110,
// 084101 (2013).
const (
	MeanRatioPoisson = 2*math.Ln2 - 1             // levels without correlations
	MeanRatioGOE     = 4 - 2*1.732050807568877294 // real chaotic Hamiltonians, 4 - 2√3
	MeanRatioGUE     = 2*1.732050807568877294/math.Pi - 0.5
)

// SpacingRatios returns r_n = min(s_n, s_{n+1})/max(s_n, s_{n+1}) of the spacings s of
// neighbouring levels (V. Oganesyan and D. A. Huse, Phys. Rev. B 75, 155111 (2007)), in
// ascending order of the levels. Only the middle part of the levels is used: a part of
// 1/2 leaves out a quarter at each end; 0 means all. The levels must be those of one
// sector of all symmetries: levels of several sectors have no correlations, whatever
// each of them has. The ratios of several sectors may then be taken together.
//
// Errors: ErrData for numbers that are not finite, a part outside 0 to 1, fewer than
// three levels in the part, and degenerate levels, that is, neighbours at most 10⁻¹³ times
// the largest magnitude apart: their ratios are those of rounding, and they tell of
// a symmetry that has not been used.
func SpacingRatios(levels []float64, middle float64) ([]float64, error) {
	sorted, err := middleOf(levels, middle)
	if err != nil {
		return nil, err
	}
	limit := degenerateSpacing * math.Max(math.Abs(sorted[0]), math.Abs(sorted[len(sorted)-1]))
	spacings := make([]float64, len(sorted)-1)
	for i := range spacings {
		if spacings[i] = sorted[i+1] - sorted[i]; spacings[i] <= limit {
			return nil, fmt.Errorf("%w: two levels are degenerate, %v and %v; use one sector of all symmetries, or keep one of each such group", ErrData, sorted[i], sorted[i+1])
		}
	}
	ratios := make([]float64, len(spacings)-1)
	for i := range ratios {
		s, t := spacings[i], spacings[i+1]
		ratios[i] = math.Min(s, t) / math.Max(s, t)
	}
	return ratios, nil
}

// degenerateSpacing is the spacing, in units of the largest magnitude of the levels, up to
// which SpacingRatios calls them degenerate: several times what dense diagonalisation in
// double precision rounds.
const degenerateSpacing = 1e-13

// middleOf checks the levels and returns the middle part in ascending order.
func middleOf(levels []float64, middle float64) ([]float64, error) {
	if !(middle >= 0 && middle <= 1) {
		return nil, fmt.Errorf("%w: the middle part %v of the levels; give a number from 0 to 1", ErrData, middle)
	}
	for i, e := range levels {
		if err := checkNumber(fmt.Sprintf("level %d", i), e); err != nil {
			return nil, err
		}
	}
	sorted := slices.Clone(levels)
	slices.Sort(sorted)
	if middle > 0 {
		cut := int(float64(len(sorted)) * (1 - middle) / 2)
		sorted = sorted[cut : len(sorted)-cut]
	}
	if len(sorted) < 3 {
		return nil, fmt.Errorf("%w: %d levels have no ratio of spacings; give three at least", ErrData, len(sorted))
	}
	return sorted, nil
}

// LevelStatistics draws the distribution of ratios of neighbouring spacings beside
// those of Poisson levels and of the Gaussian orthogonal and unitary ensembles:
//
//	Poisson P(r) = 2/(1+r)²,   P(r) ∝ (r+r²)^β/(1+r+r²)^(1+3β/2), β = 1, 2
//
// (Atas et al. 2013, surmises of 3×3 matrices), with the means in the key. The standard
// error of the mean there takes the ratios as independent; neighbouring ones share a
// spacing.
type LevelStatistics struct {
	Page Page
	// Ratios from SpacingRatios, of one or more sectors together.
	Ratios []float64
	// Bins of the histogram; 0 means 20.
	Bins int
	// Unitary draws the curve of the unitary ensemble too.
	Unitary bool
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f LevelStatistics) Save(path string) error { return save(path, "LevelStatistics", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f LevelStatistics) Write(w io.Writer, format string) error {
	return write(w, format, "LevelStatistics", f.plan)
}

// Data returns the histogram: from, to, how many ratios, their density, and that of each
// curve at the middle of the bin. Errors: those of Write about the data.
func (f LevelStatistics) Data() (Table, error) {
	counts, err := f.counts()
	if err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "r from"}, {Title: "r to"}, {Title: "ratios"}, {Title: "density"}}}
	for _, c := range f.references() {
		t.Columns = append(t.Columns, Column{Title: c.name + " density at the middle"})
	}
	n := float64(len(counts))
	for i, count := range counts {
		row := []any{float64(i) / n, float64(i+1) / n, count, float64(count) * n / float64(len(f.Ratios))}
		for _, c := range f.references() {
			row = append(row, c.density((float64(i)+0.5)/n))
		}
		t.Add(row...)
	}
	return t, nil
}

// counts checks the figure and fills the bins; r = 1 belongs to the last.
func (f LevelStatistics) counts() ([]int, error) {
	if err := f.Page.filled().check(); err != nil {
		return nil, err
	}
	bins := f.Bins
	if bins == 0 {
		bins = 20
	}
	if bins < 2 || bins > 500 {
		return nil, fmt.Errorf("%w: %d bins; give 2 to 500, or 0 for 20", ErrData, f.Bins)
	}
	if len(f.Ratios) == 0 {
		return nil, fmt.Errorf("%w: no ratios; make them with SpacingRatios", ErrData)
	}
	counts := make([]int, bins)
	for i, r := range f.Ratios {
		if !(r >= 0 && r <= 1) {
			return nil, fmt.Errorf("%w: ratio %d is %v; ratios of the smaller to the larger spacing lie from 0 to 1", ErrData, i, r)
		}
		counts[min(bins-1, int(r*float64(bins)))]++
	}
	return counts, nil
}

// reference is a curve to compare with.
type reference struct {
	name    string
	mean    float64
	density func(r float64) float64
}

// surmise is the density on [0, 1] of Atas et al. with its norm.
func surmise(beta, norm float64) func(r float64) float64 {
	return func(r float64) float64 {
		return 2 / norm * math.Pow(r+r*r, beta) / math.Pow(1+r+r*r, 1+1.5*beta)
	}
}

func (f LevelStatistics) references() []reference {
	list := []reference{
		{"Poisson", MeanRatioPoisson, func(r float64) float64 { return 2 / ((1 + r) * (1 + r)) }},
		{"GOE", MeanRatioGOE, surmise(1, 8.0/27)},
	}
	if f.Unitary {
		list = append(list, reference{"GUE", MeanRatioGUE, surmise(2, 4*math.Pi/(81*math.Sqrt(3)))})
	}
	return list
}

func (f LevelStatistics) plan() (*panel, func(), error) {
	counts, err := f.counts()
	if err != nil {
		return nil, nil, err
	}
	high := 2.0 // of Poisson levels at r = 0
	density := make([]float64, len(counts))
	for i, c := range counts {
		density[i] = float64(c) * float64(len(counts)) / float64(len(f.Ratios))
		high = math.Max(high, density[i])
	}
	p, err := frame{
		page: f.Page.filled(), name: "Distribution of ratios of neighbouring spacings",
		xAxis: Axis{Title: "Ratio r of neighbouring spacings"}, xRange: [2]float64{0, 1},
		yAxis: Axis{Title: "Density P(r)"}, yRange: [2]float64{0, 1.05 * high},
		key: func(columns) []entry { return f.key() },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, density) }, nil
}

func (f LevelStatistics) key() []entry {
	mean, square := 0.0, 0.0
	for _, r := range f.Ratios {
		mean += r / float64(len(f.Ratios))
	}
	for _, r := range f.Ratios {
		square += (r - mean) * (r - mean)
	}
	text := fmt.Sprintf("%s, mean %.4f", counted(len(f.Ratios), "ratio"), mean)
	if n := float64(len(f.Ratios)); n > 1 {
		text += fmt.Sprintf(" ± %.4f", math.Sqrt(square/(n-1)/n))
	}
	key := []entry{tintEntry(text, gapTint)}
	for i, c := range f.references() {
		key = append(key, entry{fmt.Sprintf("%s, mean %.4f", c.name, c.mean), func(s sheet, x, y, w float64) { s.line(x, y, x+w, y, 1, series(i)) }})
	}
	return key
}

func (f LevelStatistics) paint(p *panel, density []float64) {
	n := float64(len(density))
	for i, d := range density {
		p.box(p.x.at(float64(i)/n), p.bottom, p.x.at(float64(i+1)/n), p.y.at(d), gapTint)
	}
	p.draw()
	for i, d := range density {
		if d == 0 {
			continue
		}
		x0, x1, y := p.x.at(float64(i)/n), p.x.at(float64(i+1)/n), p.y.at(d)
		p.path([]vg.Point{at(x0, p.bottom), at(x0, y), at(x1, y), at(x1, p.bottom)}, 0.4, muted)
	}
	for i, c := range f.references() {
		var points []vg.Point
		for k := range curvePoints + 1 {
			r := float64(k) / curvePoints
			points = append(points, at(p.x.at(r), p.y.at(c.density(r))))
		}
		p.path(points, 1, series(i))
	}
}
