package report

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// drawnFigures returns one figure of each kind with numbers and names of any size.
func drawnFigures(r *rand.Rand, page Page) map[string]figure {
	size := math.Pow(10, float64(r.IntN(24)-12))
	value := func() float64 { return size * (2*r.Float64() - 1) }
	offset := []float64{0, 0, 100 * size}[r.IntN(3)]
	unit := []string{"", "J", "V_{1}"}[r.IntN(3)]
	name := func(i int) string {
		return []string{"", "Γ A_{1}", "(10,12) E_{2}", "periodic, tilted cluster"}[r.IntN(4)] + []string{"", fmt.Sprint(i)}[r.IntN(2)]
	}
	tower := Tower{Page: page, Energy: Axis{Unit: unit}, Relative: r.IntN(2) == 0}
	convergence := Convergence{Page: page, Value: Axis{Unit: unit}, Tolerance: size * math.Pow(10, -12*r.Float64())}
	extrapolation := Extrapolation{Page: page, Quantity: Axis{Title: "Gap", Unit: unit}}
	entropy := EntropyProfile{Page: page}
	half := r.IntN(2)
	most := 1 + r.IntN(40)
	for i := range 1 + r.IntN(5) {
		s, c, x, e := TowerSeries{Name: name(i)}, ConvergenceCurve{Name: name(i)}, ScalingSeries{Name: name(i), Degree: 1}, EntropyCurve{Name: name(i)}
		for n := range 2 + r.IntN(40) {
			s.TwiceS, s.Energies = append(s.TwiceS, 2*r.IntN(most)+half), append(s.Energies, offset+value())
			c.Steps, c.Values = append(c.Steps, float64(n+1)), append(c.Values, []float64{math.Abs(value()) * math.Pow(10, -float64(n)), 0}[r.IntN(20)/19])
			x.X, x.Y = append(x.X, 1/float64(4+2*n)), append(x.Y, offset+value())
			e.Sites, e.Entropies = append(e.Sites, n+1), append(e.Entropies, math.Abs(value()))
		}
		c.Values[0] = size
		tower.Series, convergence.Curves = append(tower.Series, s), append(convergence.Curves, c)
		extrapolation.Series, entropy.Curves = append(extrapolation.Series, x), append(entropy.Curves, e)
	}
	tower.Line = len(tower.spins()) > 1
	if r.IntN(3) == 0 {
		convergence.Value.Min, convergence.Value.Max = size*0.01*r.Float64(), size*(0.02+r.Float64())
	}
	statistics := LevelStatistics{Page: page, Bins: 2 + r.IntN(60), Unitary: r.IntN(2) == 0}
	for range 1 + r.IntN(300) {
		statistics.Ratios = append(statistics.Ratios, r.Float64())
	}
	return map[string]figure{"tower": tower, "convergence": convergence, "extrapolation": extrapolation, "entropy": entropy, "statistics": statistics}
}

// letters returns what prints one part of the letters alone, and what takes it away.
func (p *panel) letters() map[string][2]func() {
	labels := func(ticks []tick) func() {
		return func() {
			for i := range ticks {
				ticks[i].label = ""
			}
		}
	}
	return map[string][2]func(){
		"vertical title": {p.verticalTitle, func() { p.y.title = "" }},
		"key": {func() { p.drawKey(p.rows, border, p.height-border-p.titleHeight()-1) }, func() {
			for _, row := range p.rows {
				for i := range row {
					row[i] = entry{}
				}
			}
		}},
		"labels at the left": {func() {
			for _, t := range p.y.ticks {
				p.text(t.label, tickSize, p.left-tickLength-labelGap, p.y.at(t.value)-capital*tickSize/2, 1, ink)
			}
		}, labels(p.y.ticks)},
		"labels below": {func() {
			for _, t := range p.x.ticks {
				p.text(t.label, tickSize, p.x.at(t.value), p.bottom-tickLength-labelGap-capital*tickSize, 0.5, ink)
			}
		}, labels(p.x.ticks)},
	}
}

// Letters meet neither other letters nor the drawing, and nothing leaves the page.
func TestLettersMeetNothing(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	drawn, refused := map[string]int{}, 0
	for range 10 {
		page := Page{Width: 45 + 100*r.Float64(), Height: 45 + 60*r.Float64(), Dots: 72}
		if r.IntN(2) == 0 {
			page.Title, page.Note = "Invented title", "Invented data: V_{1} = 1, V_{2} = 0.2, some words more."
		}
		for name, f := range drawnFigures(r, page) {
			p, _, err := f.plan()
			if err != nil {
				if !errors.Is(err, ErrSize) {
					t.Fatalf("%s: %v", name, err)
				}
				refused++
				continue
			}
			drawn[name]++
			for part := range p.letters() {
				p, paint, err := f.plan()
				if err != nil {
					t.Fatal(err)
				}
				way := p.letters()[part]
				alone := painted(t, p, way[0])
				way[1]()
				if total, covered := inkOn(alone, painted(t, p, paint)); covered > 0 {
					t.Errorf("%s of %.0f mm × %.0f mm, %s: %d of %d pixels lie on something else", name, page.Width, page.Height, part, covered, total)
				}
			}
			checkPage(t, name, f)
		}
	}
	for _, name := range []string{"tower", "convergence", "extrapolation", "entropy", "statistics"} {
		if drawn[name] < 5 {
			t.Errorf("%s: drawn %d times only (%d refused); the test has lost its grip", name, drawn[name], refused)
		}
	}
}

// checkPage holds that labels of an axis are apart and all lies on the page.
func checkPage(t *testing.T, name string, f figure) {
	t.Helper()
	p, paint, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	checkSpacing(t, p)
	end := math.Inf(-1)
	for _, tick := range p.x.ticks {
		if tick.label == "" {
			continue
		}
		half := width(tick.label, tickSize) / 2
		if p.x.at(tick.value)-half < end+1 {
			t.Errorf("%s: the label %q below touches the one before", name, tick.label)
		}
		end = p.x.at(tick.value) + half
	}
	if len(p.y.ticks) < 2 {
		t.Errorf("%s: %d ticks at the left, from %v to %v", name, len(p.y.ticks), p.y.min, p.y.max)
	}
	for i := 1; i < len(p.y.ticks); i++ {
		if p.y.at(p.y.ticks[i].value)-p.y.at(p.y.ticks[i-1].value) < capital*tickSize+1.5 {
			t.Errorf("%s: the labels %q and %q at the left touch", name, p.y.ticks[i-1].label, p.y.ticks[i].label)
		}
	}
	canvas := newReach()
	p.start(canvas)
	paint()
	const slack = 0.6
	if canvas.minX < -slack || canvas.minY < -slack || canvas.maxX > p.width+slack || canvas.maxY > p.height+slack {
		t.Errorf("%s: drawn from (%.1f, %.1f) to (%.1f, %.1f) of (%.1f, %.1f) points", name, canvas.minX, canvas.minY, canvas.maxX, canvas.maxY, p.width, p.height)
	}
}
