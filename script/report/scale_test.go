package report

import (
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"
)

func labelsOf(s scale) string {
	var out []string
	for _, t := range s.ticks {
		out = append(out, t.label)
	}
	return strings.Join(out, " ")
}

func TestTicksOfKnownRanges(t *testing.T) { // worked by hand
	energy := Axis{Title: "Energy", Unit: "V"}
	for _, c := range []struct {
		axis     Axis
		min, max float64
		whole    bool
		ticks    string
		title    string
	}{
		{energy, 0, 1, false, "0.0 0.5 1.0", "Energy (V)"},
		{energy, -24.11, -23.89, false, "−24.1 −24.0 −23.9", "Energy (V)"},
		{energy, -0.05, 0.25, false, "0.0 0.1 0.2", "Energy (V)"},
		{energy, 0, 3e-7, false, "0 100 200 300", "Energy (10^{−9} V)"},
		{energy, 0, 2.5e6, false, "0 1 2", "Energy (10^{6} V)"},
		{energy, -24.4393981, -24.4393959, false, "0 1 2", "Energy + 24.439398 V (10^{−6} V)"},
		{energy, 7000000.5, 7000003.5, false, "0 1 2", "Energy − 7000001 V (V)"},
		{Axis{Title: "Sites"}, 0.9, 4.1, true, "1 2 3 4", "Sites"},
		{Axis{Title: "Sites"}, 0.9, 8.1, true, "2 4 6 8", "Sites"},
		{Axis{Title: "Sites"}, 0.9, 2.1, true, "1 2", "Sites"},
	} {
		s := newScale(c.axis, c.min, c.max, 0, 100, 30, c.whole)
		if labelsOf(s) != c.ticks || s.title != c.title {
			t.Errorf("%v to %v: ticks %q, title %q; want %q, %q", c.min, c.max, labelsOf(s), s.title, c.ticks, c.title)
		}
	}
}

// readTick is the value that a reader takes from a tick label and the title.
func readTick(t *testing.T, label, title string) float64 {
	t.Helper()
	number := func(s string) float64 {
		v, err := strconv.ParseFloat(strings.ReplaceAll(s, "−", "-"), 64)
		if err != nil {
			t.Fatalf("title %q, label %q: %v", title, label, err)
		}
		return v
	}
	v := number(label)
	if _, rest, ok := strings.Cut(title, "(10^{"); ok {
		power, _, _ := strings.Cut(rest, "}")
		v *= math.Pow(10, number(power))
	}
	words := strings.Fields(title)
	if len(words) > 2 && words[1] == "+" {
		v -= number(words[2])
	}
	if len(words) > 2 && words[1] == "−" {
		v += number(words[2])
	}
	return v
}

func TestTicksReadBack(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	for range 3000 {
		scaleOf := math.Pow(10, float64(r.IntN(60)-30))
		lo := (2*r.Float64() - 1) * scaleOf
		hi := lo + scaleOf*math.Pow(10, -9*r.Float64())
		if level(lo, hi) {
			continue
		}
		s := newScale(Axis{Title: "E"}, lo, hi, 0, 120, 22, false)
		if len(s.ticks) < 2 || len(s.ticks) > 7 {
			t.Fatalf("%v to %v: %d ticks", lo, hi, len(s.ticks))
		}
		for i, k := range s.ticks {
			slack := 1e-9 * (hi - lo)
			if k.value < lo-slack || k.value > hi+slack {
				t.Fatalf("%v to %v: tick %v outside", lo, hi, k.value)
			}
			if read := readTick(t, k.label, s.title); math.Abs(read-k.value) > 1e-6*(hi-lo)+1e-14*math.Abs(lo) {
				t.Fatalf("%v to %v: tick %v reads %v from %q, %q", lo, hi, k.value, read, k.label, s.title)
			}
			if i > 0 && s.at(k.value)-s.at(s.ticks[i-1].value) < 21.99 {
				t.Fatalf("%v to %v: ticks too close", lo, hi)
			}
			if len([]rune(k.label)) > longest+1 {
				t.Fatalf("%v to %v: label %q is too long", lo, hi, k.label)
			}
		}
	}
}

func TestShortNumbers(t *testing.T) {
	for v, want := range map[float64]string{0.118649: "0.1186", -2: "−2", 1e-8: "10^{−8}", 2.5e-7: "2.5·10^{−7}", 12345678: "1.235·10^{7}", 0: "0"} {
		if got := short(v); got != want {
			t.Errorf("%v is written %q, want %q", v, got, want)
		}
	}
}
