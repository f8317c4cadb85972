package report

import (
	"errors"
	"io"
	"math"
	"strings"
	"testing"
)

func TestTowerStandsAtItsSpins(t *testing.T) {
	f := specimens()["tower"].(Tower)
	f.Page.Dots = 600
	f.Line = false // a line would cover the marks
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	img := picture(t, f)
	apart, _ := f.spacing(p, f.spins())
	for n, s := range f.Series {
		for i, e := range s.Energies {
			x := p.x.at(casimir(s.TwiceS[i])) + float64(n-1)*apart[s.TwiceS[i]]
			if got := pixel(img, p, x, p.y.at(e+10)); got != series(n) {
				t.Errorf("series %d, level %d: colour %v, want %v", n, i, got, series(n))
			}
		}
	}
	var labels []string
	for _, tick := range p.x.ticks {
		labels = append(labels, tick.label)
	}
	if got := strings.Join(labels, " "); got != "0 1 2 3 4" || p.x.title != "Total spin S, placed at S(S+1)" || p.y.title != "E − E_{0} (J)" {
		t.Errorf("spins %s, titles %q and %q", got, p.x.title, p.y.title)
	}
	if y := p.x.at(casimir(4)); math.Abs(y-p.x.at(6)) > 1e-12 { // S = 2
		t.Errorf("spin 2 at %v", y)
	}
}

func TestHalfSpinsAndLargeOnes(t *testing.T) {
	p, _, err := Tower{Series: []TowerSeries{{TwiceS: []int{1, 3, 2001}, Energies: []float64{1, 2, 3}}}}.plan()
	if err != nil {
		t.Fatal(err)
	}
	// 3/2 stands on 1/2; the scale of the places, 10⁶, is none of the title.
	if got := p.x.ticks; len(got) != 3 || got[0].label != "1/2" || got[1].label != "" || got[2].label != "2001/2" || p.x.title != "Total spin S, placed at S(S+1)" {
		t.Errorf("ticks %v, title %q", got, p.x.title)
	}
}

// Marks of one spin stay nearer to its place than to that of another.
func TestMarksStayAtTheirSpin(t *testing.T) {
	var f Tower
	for range 8 {
		s := TowerSeries{}
		for twice := 0; twice <= 40; twice += 2 {
			s.TwiceS, s.Energies = append(s.TwiceS, twice), append(s.Energies, float64(twice))
		}
		f.Series = append(f.Series, s)
	}
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	spins := f.spins()
	apart, size := f.spacing(p, spins)
	for i, twice := range spins[1:] {
		reach := 3.5 * (apart[twice] + apart[spins[i]])
		if between := p.x.at(casimir(twice)) - p.x.at(casimir(spins[i])); reach > 0.6*between {
			t.Errorf("marks of 2S = %d and %d reach %.2f of %.2f points towards each other", spins[i], twice, reach, between)
		}
	}
	if apart[40] < 1 || size < 1 {
		t.Errorf("marks of size %v, %v apart at spin 20; the test has lost its grip", size, apart[40])
	}
}

// The lowest levels of an exact tower give its slope, whatever lies above, and a line to
// Upto leaves higher spins out.
func TestSlopeOfTheTower(t *testing.T) {
	f := Tower{Line: true, Energy: Axis{Unit: "J"}, Series: []TowerSeries{{}, {TwiceS: []int{0, 2, 4}, Energies: []float64{-1e5 + 3, -1e5 + 4, -1e5 + 5}}}}
	for twice := 0; twice <= 12; twice += 2 {
		f.Series[0].TwiceS, f.Series[0].Energies = append(f.Series[0].TwiceS, twice), append(f.Series[0].Energies, -1e5+0.025*casimir(twice))
	}
	if line, err := f.fit(0); err != nil || math.Abs(line.slope-0.025) > 1e-11 || math.Abs(line.offset+1e5) > 1e-9 || line.end != 42 {
		t.Errorf("%+v, %v", line, err)
	}
	f.Series[0].Energies[6] = 0
	f.Upto = 10
	if line, err := f.fit(0); err != nil || math.Abs(line.slope-0.025) > 1e-11 || line.end != 30 {
		t.Errorf("up to spin 5: %+v, %v", line, err)
	}
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	if got := keyOf(p); got != "slope 1/(2χN) = 0.025 J" {
		t.Errorf("key %q", got)
	}
	// Three points worked by hand: x 0, 2, 6 and y 1, 2, 7 have the slope 29/28.
	three := Tower{Series: []TowerSeries{{TwiceS: []int{0, 2, 4}, Energies: []float64{1, 2, 7}}}}
	if line, err := three.fit(0); err != nil || math.Abs(line.slope-29.0/28) > 1e-14 || math.Abs(line.offset-(10.0/3-29.0/28*8/3)) > 1e-14 {
		t.Errorf("three points: %+v, %v", line, err)
	}
}

func TestUnfitTowers(t *testing.T) {
	levels := func(spins []int, e ...float64) Tower {
		return Tower{Series: []TowerSeries{{Name: "Γ", TwiceS: spins, Energies: e}}}
	}
	line, lone, upto, short, label := levels([]int{2, 2}, 1, 2), levels([]int{0}, 1), levels([]int{0}, 1), levels([]int{0}, 1), levels([]int{0}, 1)
	line.Line, upto.Upto, short.Page.Width, label.Series[0].Name = true, 2, 20, "雪"
	lone.Line, lone.Upto = true, -1
	for _, c := range []struct {
		f    Tower
		want error
		says string
	}{
		{Tower{}, ErrData, "without levels"},
		{levels([]int{0, 1}, 1), ErrData, "series 0 Γ has 2 spins and 1 energies"},
		{levels([]int{-1}, 1), ErrData, "twice the spin -1"},
		{levels([]int{1 << 21}, 1), ErrData, "twice the spin 2097152"},
		{levels([]int{0}, math.NaN()), ErrData, "energy 0 of series 0 Γ is NaN"},
		{line, ErrData, "the lowest levels of 1 spins"},
		{lone, ErrData, "Upto -1"},
		{upto, ErrData, "Upto 2"},
		{short, ErrSize, "page width"},
		{label, ErrData, "does not have"},
	} {
		err := c.f.Write(io.Discard, "svg")
		if !errors.Is(err, c.want) || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%+v: error %v, want %v with %q", c.f, err, c.want, c.says)
		}
		if _, again := c.f.Data(); !errors.Is(again, c.want) {
			t.Errorf("%+v: Data gives %v", c.f, again)
		}
	}
}
