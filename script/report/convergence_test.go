package report

import (
	"errors"
	"io"
	"math"
	"strings"
	"testing"
)

func TestConvergenceStandsAtItsLogarithms(t *testing.T) {
	f := specimens()["convergence"].(Convergence)
	f.Page.Dots = 600
	p, _, err := f.plan()
	if err != nil {
		t.Fatal(err)
	}
	img := picture(t, f)
	for n, c := range f.Curves {
		for i, v := range c.Values {
			y := p.bottom
			if v > 0 {
				y = p.y.at(math.Log10(v))
			}
			if got := pixel(img, p, p.x.at(c.Steps[i]), y); got != series(n) {
				t.Errorf("curve %d, step %v: colour %v", n, c.Steps[i], got)
			}
		}
	}
	// Between 10⁻⁴ at 12 and 10⁻⁸ at 16 the line is at 10⁻⁶; rings are where 10⁻⁹ is
	// reached, and nowhere else.
	if got := pixel(img, p, p.x.at(14), p.y.at(-6)); got != series(0) {
		t.Errorf("no line between the points, but %v", got)
	}
	for _, c := range []struct {
		step, height float64
		ring         bool
	}{{20, p.y.at(-10), true}, {20, p.bottom, true}, {16, p.y.at(-8), false}} {
		if got := pixel(img, p, p.x.at(c.step)+3.2, c.height); (got == series(0) || got == series(1)) != c.ring {
			t.Errorf("beside step %v: colour %v, ring %v", c.step, got, c.ring)
		}
	}
	if got := keyOf(p); got != "level 0; level 1; tolerance 10^{−9} J; within it from here on; 1 value of 0, at the lower end" {
		t.Errorf("key %q", got)
	}
	if p.y.title != "Residual (J)" || p.x.title != "Products" {
		t.Errorf("titles %q, %q", p.y.title, p.x.title)
	}
}

// A curve is within the tolerance from the point after which it stays there.
func TestWhereTheToleranceIsReached(t *testing.T) { // worked by hand
	for _, c := range []struct {
		values    []float64
		tolerance float64
		want      int
	}{
		{[]float64{1, 0.1, 0.01, 0.001}, 0.01, 2},
		{[]float64{1, 0.001, 0.1, 0.001, 0.0001}, 0.01, 3},
		{[]float64{1, 0.5}, 0.01, -1},
		{[]float64{0.001}, 0.01, 0},
		{[]float64{1, 0.001, 1}, 0.01, -1},
		{[]float64{1, 0}, 0.01, 1},
		{[]float64{1, 0}, 0, -1},
		{nil, 0.01, -1},
	} {
		if got := (Convergence{Tolerance: c.tolerance}).reached(ConvergenceCurve{Values: c.values}); got != c.want {
			t.Errorf("%v within %v from %d, want %d", c.values, c.tolerance, got, c.want)
		}
	}
}

// A run of thousands of steps has marks that are apart, and a line through all of them.
func TestManySteps(t *testing.T) {
	c := ConvergenceCurve{}
	for i := range 5000 {
		c.Steps, c.Values = append(c.Steps, float64(i)), append(c.Values, math.Exp(-0.003*float64(i)))
	}
	data := string(rendered(t, Convergence{Curves: []ConvergenceCurve{c}}, "svg"))
	if paths := strings.Count(data, "<path"); paths > 200 || len(data) < 5000*10 {
		t.Errorf("%d paths, %d bytes", paths, len(data))
	}
}

func TestUnfitRuns(t *testing.T) {
	run := func(steps []float64, values ...float64) Convergence {
		return Convergence{Curves: []ConvergenceCurve{{Name: "level", Steps: steps, Values: values}}}
	}
	tolerance, axis, hidden := run([]float64{1}, 1), run([]float64{1}, 1), run([]float64{1, 2}, 1, 5)
	tolerance.Tolerance, axis.Value, hidden.Value = math.Inf(1), Axis{Min: 0, Max: 1}, Axis{Min: 2, Max: 9}
	for _, c := range []struct {
		f    Convergence
		says string
	}{
		{Convergence{}, "no value above 0"},
		{run([]float64{1, 2}, 0, 0), "no value above 0"},
		{run([]float64{1, 2}, 1), "curve 0 level has 2 steps and 1 values"},
		{run([]float64{1, 1}, 1, 2), "ascending steps"},
		{run([]float64{1}, -1), "value -1 at step 1"},
		{run([]float64{1}, math.NaN()), "value 0 of curve 0 level is NaN"},
		{run([]float64{math.Inf(1)}, 1), "step 0 of curve 0 level is +Inf"},
		{tolerance, "a tolerance of +Inf"},
		{axis, "logarithmic axis from 0"},
	} {
		err := c.f.Write(io.Discard, "svg")
		if !errors.Is(err, ErrData) || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%+v: error %v, want one with %q", c.f, err, c.says)
		}
	}
	p, _, err := hidden.plan()
	if err != nil {
		t.Fatal(err)
	}
	if got := keyOf(p); got != "level; 1 point beyond the axis" {
		t.Errorf("key %q", got)
	}
}
