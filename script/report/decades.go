package report

import "math"

// newDecades makes the logarithmic scale of an axis: min and max are decadic logarithms
// of its ends, and ticks stand at powers of ten, apart points from each other or a little
// less; where less than two of these lie on the axis, at 1, 2 and 5 (or 1 and 3, if there
// is no room) times a power; and on less than seven tenths of a decade, at equal steps.
func newDecades(a Axis, min, max, from, to, apart float64) scale {
	s := scale{min: min, max: max, from: from, to: to, title: title(a, "", 0, 0)}
	pitch := (to - from) / (max - min) // of one decade
	each := math.Max(1, math.Ceil(apart/pitch*(1-1e-9)))
	if digit, exponent := step(each, true); each > 1 {
		each = digit * math.Pow(10, float64(exponent))
	}
	const slack = 1e-9 // of a decade
	for s.ticks = powers(min-slack, max+slack, each); len(s.ticks) < 2 && each > 1; {
		each = math.Ceil(each / 2)
		s.ticks = powers(min-slack, max+slack, each)
	}
	switch {
	case len(s.ticks) >= 2:
	case max-min < evenBelow:
		even := newScale(a, math.Pow(10, min), math.Pow(10, max), from, to, apart, false)
		s.ticks, s.title = even.ticks, even.title
		for i := range s.ticks {
			s.ticks[i].value = math.Log10(s.ticks[i].value)
		}
	case math.Log10(2)*pitch < 1.3*tickSize:
		s.ticks = multiples(min-slack, max+slack, 1, 3)
	default:
		s.ticks = multiples(min-slack, max+slack, 1, 2, 5)
	}
	return s
}

// multiples puts a tick at each of the digits times each power of ten.
func multiples(min, max float64, digits ...float64) []tick {
	var ticks []tick
	for n := math.Floor(min); n <= max; n++ {
		for _, digit := range digits {
			if at := n + math.Log10(digit); at >= min && at <= max {
				ticks = append(ticks, tick{at, short(power(digit, int(n)))})
			}
		}
	}
	return ticks
}

// powers puts a tick at each power of ten that is a multiple of each.
func powers(min, max, each float64) []tick {
	var ticks []tick
	for n := math.Ceil(min/each) * each; n <= max; n += each {
		ticks = append(ticks, tick{n, "10^{" + decimal(n, 0) + "}"})
	}
	return ticks
}

// evenBelow is the length of an axis, in decades, that has ticks at equal steps: the
// closest of them stand at half their mean distance.
const evenBelow = 0.7

// power is digit·10^n, the nearest number to it.
func power(digit float64, n int) float64 {
	if n < 0 {
		return digit / math.Pow(10, float64(-n))
	}
	return digit * math.Pow(10, float64(n))
}
