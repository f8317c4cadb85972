package report

import (
	"math"
	"strings"
	"testing"
)

func TestDecades(t *testing.T) { // worked by hand
	for _, c := range []struct {
		min, max, height float64
		want             string
	}{
		{1e-3, 1, 100, "10^{−3} 10^{−2} 10^{−1} 10^{0}"},
		{1e-12, 1, 100, "10^{−10} 10^{−5} 10^{0}"},
		{1e-300, 1, 100, "10^{−300} 10^{−200} 10^{−100} 10^{0}"},
		{0.3, 30, 100, "10^{0} 10^{1}"},
		{0.15, 8, 100, "0.2 0.5 1 2 5"},
		{1.5e-7, 9e-6, 100, "2·10^{−7} 5·10^{−7} 10^{−6} 2·10^{−6} 5·10^{−6}"},
		{0.15, 8, 40, "0.3 1 3"},
		{2, 8, 100, "2 4 6 8"},
		{2, 3, 100, "2.0 2.5 3.0"},
		{1, 10, 100, "10^{0} 10^{1}"},
	} {
		s := newDecades(Axis{Title: "E"}, math.Log10(c.min), math.Log10(c.max), 0, c.height, 22)
		var got []string
		for _, tick := range s.ticks {
			got = append(got, tick.label)
		}
		if strings.Join(got, " ") != c.want || s.title != "E" {
			t.Errorf("from %v to %v on %v points: %v, title %q; want %s", c.min, c.max, c.height, got, s.title, c.want)
		}
	}
	// A title that shifts the numbers at the ticks stands with them.
	s := newDecades(Axis{Title: "E", Unit: "J"}, math.Log10(1.00001), math.Log10(1.00002), 0, 100, 22)
	if !strings.Contains(s.title, "E − 1") || len(s.ticks) < 3 {
		t.Errorf("title %q, ticks %v", s.title, s.ticks)
	}
}

// The ticks of any axis are two at least, apart, and at the values that they name.
func TestDecadesOfAnyLength(t *testing.T) {
	for length := 0.01; length < 600; length *= 1.07 {
		for _, height := range []float64{40, 75, 130, 300} {
			for _, start := range []float64{-3.4, 0, 0.77} {
				s := newDecades(Axis{}, start, start+length, 0, height, 22)
				if len(s.ticks) < 2 {
					t.Fatalf("%v decades from %v on %v points: ticks %v", length, start, height, s.ticks)
				}
				for i, tick := range s.ticks {
					if y := s.at(tick.value); y < -1e-6 || y > height+1e-6 {
						t.Fatalf("%v decades from %v: tick %v at %v of %v points", length, start, tick, y, height)
					}
					if i > 0 && s.at(tick.value)-s.at(s.ticks[i-1].value) < capital*tickSize+1.5 {
						t.Fatalf("%v decades from %v on %v points: ticks %v touch", length, start, height, s.ticks)
					}
				}
			}
		}
	}
}
