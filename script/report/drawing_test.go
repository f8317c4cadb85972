package report

import (
	"fmt"
	"image"
	"image/color"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/plot/vg"
)

// reach is a canvas that remembers how far the drawing went.
type reach struct {
	vg.Canvas
	minX, minY, maxX, maxY float64
	thick                  float64
}

func newReach() *reach {
	return &reach{minX: math.Inf(1), minY: math.Inf(1), maxX: math.Inf(-1), maxY: math.Inf(-1)}
}

func (r *reach) SetColor(color.Color)               {}
func (r *reach) SetLineWidth(w vg.Length)           { r.thick = float64(w) }
func (r *reach) SetLineDash([]vg.Length, vg.Length) {}
func (r *reach) Fill(p vg.Path)                     { r.add(p) }
func (r *reach) Stroke(p vg.Path)                   { r.add(p) }
func (r *reach) add(p vg.Path) {
	for _, c := range p {
		if c.Type != vg.CloseComp {
			r.minX, r.maxX = math.Min(r.minX, float64(c.Pos.X)), math.Max(r.maxX, float64(c.Pos.X))
			r.minY, r.maxY = math.Min(r.minY, float64(c.Pos.Y)), math.Max(r.maxY, float64(c.Pos.Y))
		}
	}
}

// randomSectors has the sizes that come up: 1 to 100 sectors of 0 to 30 levels.
func randomSectors(r *rand.Rand) []Sector {
	out := make([]Sector, 1+r.IntN(100))
	size := math.Pow(10, float64(r.IntN(20)-10))
	centre := (2*r.Float64() - 1) * size * math.Pow(10, 6*r.Float64())
	for i := range out {
		out[i].Label = fmt.Sprintf("(%d,%d)", i%10, i/10)
		for range r.IntN(30) {
			out[i].Levels = append(out[i].Levels, centre+size*float64(r.IntN(1000)))
		}
	}
	out[0].Levels = append(out[0].Levels, centre, centre+size)
	return out
}

func TestNothingLeavesThePage(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	drawn := 0
	for range 150 {
		page := Page{Width: 40 + 160*r.Float64(), Height: 40 + 100*r.Float64()}
		if r.IntN(2) == 0 {
			page.Title, page.Note = "Invented title", "Invented data: V_{1} = 1, V_{2} = 0.2, some words more."
		}
		for _, f := range []figure{
			SectorSpectrum{Page: page, Sectors: randomSectors(r), Manifold: BelowLargestGap, ShadeGap: true, Energy: Axis{Unit: "V"}},
			EntanglementSpectrum{Page: page, Sectors: randomSectors(r), Below: BelowLargestGap, Xi: Axis{Title: "ξ"}},
		} {
			p, paint, err := f.plan()
			if err != nil {
				if !strings.Contains(err.Error(), ErrSize.Error()) {
					t.Fatal(err)
				}
				continue
			}
			canvas := newReach()
			p.start(canvas)
			paint()
			drawn++
			const slack = 0.6
			if canvas.minX < -slack || canvas.minY < -slack || canvas.maxX > p.width+slack || canvas.maxY > p.height+slack {
				t.Fatalf("%T of %.0f mm × %.0f mm: drawn from (%.1f, %.1f) to (%.1f, %.1f) of (%.1f, %.1f) points",
					f, page.Width, page.Height, canvas.minX, canvas.minY, canvas.maxX, canvas.maxY, p.width, p.height)
			}
			checkSpacing(t, p)
		}
	}
	if drawn < 150 {
		t.Errorf("only %d of 300 figures were drawn; the test has lost its grip", drawn)
	}
}

// checkSpacing holds that labels of sectors do not touch and the key fits.
func checkSpacing(t *testing.T, p *panel) {
	t.Helper()
	c := p.columns
	need := c.longest()
	if c.upright {
		need = tickSize
	}
	if len(c.labels) > c.stride && float64(c.stride)*c.pitch < need {
		t.Fatalf("labels %v points long stand %v points apart", need, float64(c.stride)*c.pitch)
	}
	for _, row := range p.rows {
		length := -entryGap
		for _, e := range row {
			length += entryGap + e.width()
		}
		if border+length > p.width-border+1e-9 {
			t.Fatalf("a row of the key is %v points long on %v", length, p.width)
		}
	}
}

// pixel is the colour at a place given in points.
func pixel(img image.Image, p *panel, x, y float64) color.RGBA {
	dots := p.page.Dots / 72
	return color.RGBAModel.Convert(img.At(int(x*dots), int((p.height-y)*dots))).(color.RGBA)
}

func TestLevelsStandAtTheirEnergies(t *testing.T) {
	f := specimens()["sectors"].(SectorSpectrum)
	f.Page.Dots = 600
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	img := picture(t, f)
	for _, c := range []struct {
		column int
		aside  float64 // from the middle of the column, in points
		energy float64
		want   color.RGBA
	}{
		{0, 4, -4, blue}, {0, -4, -4, blue}, // a pair: two parts
		{0, 0, -1, muted}, {1, 0, -1.5, muted}, {1, 0, 0, muted},
		{0, 4, -3.2, overlap(predictedTint, gapTint)}, {1, 0, -3.2, gapTint}, {0, 4, -0.5, predictedTint},
		{2, 0, -1.25, white}, {1, 0, -4.1, white},
	} {
		if got := pixel(img, p, p.columns.at(c.column)+c.aside, p.y.at(c.energy)); got != c.want {
			t.Errorf("column %d, energy %v: colour %v, want %v", c.column, c.energy, got, c.want)
		}
	}
	if got := pixel(img, p, p.columns.at(0), p.y.at(-4)); got == blue {
		t.Error("the dash of a pair is not divided")
	}
}

func TestRelativeStartsAtZero(t *testing.T) {
	p, _, err := SectorSpectrum{Sectors: []Sector{{Levels: []float64{-5, -3}}}, Relative: true, Energy: Axis{Unit: "V"}}.plan()
	if err != nil {
		t.Fatal(err)
	}
	if p.y.min > 0 || p.y.min < -0.3 || p.y.max < 2 || p.y.title != "E − E_{0} (V)" {
		t.Errorf("from %v to %v, title %q", p.y.min, p.y.max, p.y.title)
	}
}

func keyOf(p *panel) string {
	var out []string
	for _, e := range p.key(p.columns) {
		out = append(out, e.text)
	}
	return strings.Join(out, "; ")
}

func TestKeysSayWhatIsDrawn(t *testing.T) { // worked by hand
	cut := specimens()["sectors"].(SectorSpectrum)
	cut.Energy = Axis{Min: -5, Max: -1.25}
	cut.Tolerance = 0.5
	for _, c := range []struct {
		f    figure
		want string
	}{
		{specimens()["sectors"], "lowest 2 levels; other levels; gap 2.5 V; predicted: 2 levels; degenerate"},
		{cut, "lowest 2 levels; other levels; gap 2.5; predicted: 2 levels; degenerate within 0.5; 2 levels beyond the axis"},
		{specimens()["entanglement"], "below the gap, found/expected: 3/4; gap 7"},
		{EntanglementSpectrum{Sectors: []Sector{{Levels: []float64{1, 1, 1, 3, 3}}}, Below: 3}, "below the gap: 3; gap 2; degenerate"},
		{specimens()["flow"], "lowest level; other levels; a; smallest gap 1"},
		{EntropyProfile{Curves: []EntropyCurve{{Name: "s", Sites: []int{1, 9}, Entropies: []float64{1, 1}}}, Cut: Axis{Min: 0.5, Max: 4}}, "s; 1 point beyond the axis"},
	} {
		p, _, err := c.f.plan()
		if err != nil {
			t.Fatal(err)
		}
		if got := keyOf(p); got != c.want {
			t.Errorf("key %q, want %q", got, c.want)
		}
	}
}

func TestCountsBelowTheGap(t *testing.T) { // worked by hand
	f := specimens()["entanglement"].(EntanglementSpectrum)
	all := gather([][]float64{f.Sectors[0].Levels, f.Sectors[1].Levels})
	got := f.count(all, 2, 3)
	if strings.Join(got.labels, " ") != "2/2 1/2" || got.wrong[0] || !got.wrong[1] || got.total != "3/4" {
		t.Errorf("%+v", got)
	}
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	img := picture(t, f)
	if got := pixel(img, p, p.left+1, p.y.at(7.5)); got != vermilion { // half way from 4 to 11
		t.Errorf("no line in the gap, but %v", got)
	}
	if got := pixel(img, p, p.columns.at(1), p.top+countLift-2); got != vermilion {
		t.Errorf("no mark at the wrong count, but %v", got)
	}
	if got := pixel(img, p, p.columns.at(0), p.top+countLift-2); got != white {
		t.Errorf("a mark at the right count: %v", got)
	}
}

func TestShadedGapFollowsTheLevels(t *testing.T) { // worked by hand
	f := SpectralFlow{
		Flux: []float64{0, 1, 2},
		Flows: []Flow{
			{Energies: []float64{0, 2, 2}, Manifold: true}, {Energies: []float64{2, 0, 2}, Manifold: true}, // cross at (0.5, 1)
			{Energies: []float64{4, 4, 0}}, // the gap shuts at flux 1.5
		},
		ShadeGap: true,
	}
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	img := picture(t, f)
	for _, c := range []struct {
		flux, energy float64
		want         color.RGBA
	}{
		{0.5, 1.3, gapTint}, {0.5, 0.7, white}, {0.1, 3.5, gapTint}, {0.1, 1.5, white}, {1.25, 2.5, gapTint}, {1.25, 3.5, white}, {1.75, 1.6, white},
	} {
		if got := pixel(img, p, p.x.at(c.flux), p.y.at(c.energy)); got != c.want {
			t.Errorf("flux %v, energy %v: colour %v, want %v", c.flux, c.energy, got, c.want)
		}
	}
	if got := keyOf(p); got != "no gap at some flux" {
		t.Errorf("key %q", got)
	}
}

func TestPointsAndCurvesStandAtTheirPlaces(t *testing.T) {
	f := specimens()["entropy"].(EntropyProfile)
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	img := picture(t, f)
	for i, c := range f.Curves {
		for j, v := range c.Entropies {
			if got := pixel(img, p, p.x.at(float64(c.Sites[j])), p.y.at(v)); got != series(i) {
				t.Errorf("curve %d, point %d: colour %v", i, j, got)
			}
		}
	}
	if got := pixel(img, p, p.x.at(1.5), p.y.at(0.6)); got != series(0) {
		t.Errorf("no line between the points, but %v", got)
	}
	if p.x.title != "Sites in part A" || p.y.title != "Entropy (nats)" {
		t.Errorf("titles %q, %q", p.x.title, p.y.title)
	}
}

func TestThousandsOfLevels(t *testing.T) {
	f := SpectralFlow{Manifold: 3}
	for i := range 11 {
		var levels []float64
		for j := range 200 {
			levels = append(levels, float64(j)+0.1*float64(i))
		}
		f.Flux, f.Levels = append(f.Flux, float64(i)/10), append(f.Levels, levels)
	}
	spectrum := SectorSpectrum{}
	for _, levels := range f.Levels {
		spectrum.Sectors = append(spectrum.Sectors, Sector{Levels: levels})
	}
	for _, g := range []figure{f, spectrum} {
		if n := strings.Count(string(rendered(t, g, "svg")), "<path"); n < 2200 {
			t.Errorf("%T: %d paths for 2200 levels", g, n)
		}
	}
}

func TestExtremeNumbers(t *testing.T) {
	for _, v := range [][]float64{{0}, {1e15, -1e15}, {1e-300, 2e-300}, {1, 1 + 1e-13}, {1e14, 1e14 + 1}, {1e-15, 1e15}, {-1e15}, {5e-324, 0}} {
		for _, f := range []figure{
			SectorSpectrum{Sectors: []Sector{{Levels: v}}},
			SpectralFlow{Flux: []float64{v[0]}, Levels: [][]float64{v}},
			EntropyProfile{Curves: []EntropyCurve{{Sites: []int{1e15}, Entropies: v[:1]}}},
		} {
			p, paint, err := f.plan()
			if err != nil {
				t.Errorf("%T of %v: %v", f, v, err)
				continue
			}
			canvas := newReach()
			p.start(canvas)
			paint()
			if !finite(canvas.maxX+canvas.minX+canvas.maxY+canvas.minY) || len(p.y.ticks) < 2 {
				t.Errorf("%T of %v: ticks %v, drawn to %v", f, v, p.y.ticks, *canvas)
			}
		}
	}
}
