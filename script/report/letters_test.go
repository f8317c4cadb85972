package report

import (
	"math"
	"reflect"
	"testing"
)

func TestLoweredAndRaisedGroups(t *testing.T) {
	for label, want := range map[string][]run{
		"k_{x}, 10^{−6}": {{"k", 1, 0}, {"x", groupSize, groupDown}, {", 10", 1, 0}, {"−6", groupSize, groupUp}},
		"t_prime":        {{"t_prime", 1, 0}},
		"a_{b":           {{"a_{b", 1, 0}},
		"^{2}_{}":        {{"2", groupSize, groupUp}},
		"":               nil,
	} {
		if got := runs(label); !reflect.DeepEqual(got, want) {
			t.Errorf("%q: %v, want %v", label, got, want)
		}
	}
	if got := unmarked("V_{1}/t^{2}"); got != "V1/t2" {
		t.Errorf("without marks: %q", got)
	}
}

func TestWidths(t *testing.T) {
	// Figures of the font are 1139 of 2048 units wide (from memory: the metrics of
	// its family).
	if got, want := width("0123456789", 10), 10*10*1139.0/2048; math.Abs(got-want) > 1e-9 {
		t.Errorf("ten figures are %v wide, want %v", got, want)
	}
	if got, want := width("E_{0}", 10), width("E", 10)+groupSize*width("0", 10); math.Abs(got-want) > 1e-9 {
		t.Errorf("E with index 0 is %v wide, want %v", got, want)
	}
	if err := checkLabel("label", "雪"); err == nil {
		t.Error("a sign that the font lacks was accepted")
	}
	if err := checkLabel("label", "ξ = −ln λ, Å², ΔE/t, 6×4, ½"); err != nil {
		t.Error(err)
	}
}

func TestOutlineStaysInItsBox(t *testing.T) {
	const size, x, y = 10.0, 50.0, 70.0
	for _, label := range []string{"Energy", "k_{x}", "10^{−6}"} {
		w := width(label, size)
		for _, c := range outline(label, size, x, y, 0) {
			if px, py := float64(c.Pos.X), float64(c.Pos.Y); c.Type != 4 && (px < x-0.1*size || px > x+w+0.1*size || py < y-0.45*size || py > y+size) {
				t.Fatalf("%q: point (%v, %v) lies outside", label, px, py)
			}
		}
		flat, turned := outline(label, size, x, y, 0), outline(label, size, x, y, math.Pi/2)
		for i := range flat {
			u, v := float64(flat[i].Pos.X)-x, float64(flat[i].Pos.Y)-y
			if flat[i].Type != 4 && (math.Abs(float64(turned[i].Pos.X)-x+v) > 1e-9 || math.Abs(float64(turned[i].Pos.Y)-y-u) > 1e-9) {
				t.Fatalf("%q: point %d is not turned by a right angle", label, i)
			}
		}
	}
}

func TestLinesBreakAtSpaces(t *testing.T) {
	room := width("aaa bbb", 6)
	got, ok := lines(" aaa bbb  ccc ", 6, room)
	if !ok || !reflect.DeepEqual(got, []string{"aaa bbb", "ccc"}) {
		t.Errorf("%q, %v", got, ok)
	}
	if _, ok := lines("aaaaaaaaaaaa", 6, room); ok {
		t.Error("a word longer than the line was accepted")
	}
}
