package report

import (
	"math"
	"strconv"
	"strings"
)

// scale maps the numbers of an axis to points on the page.
type scale struct {
	min, max float64
	from, to float64
	ticks    []tick
	title    string
}

type tick struct {
	value float64
	label string
}

// longest is the number of signs a tick label may have before it is shortened.
const longest = 6

func (s scale) at(v float64) float64 {
	return s.from + (v-s.min)/(s.max-s.min)*(s.to-s.from)
}

// level reports whether lo and hi are too close for an axis between them.
func level(lo, hi float64) bool {
	return hi-lo < 1e-290 || hi-lo <= 1e-11*math.Max(math.Abs(lo), math.Abs(hi))
}

// span is the range of an axis that holds lo to hi: the given one, or that of the
// data with a margin of the given fraction at both ends.
func span(a Axis, lo, hi, margin float64) (float64, float64) {
	if a.given() {
		return a.Min, a.Max
	}
	if level(lo, hi) {
		pad := math.Max(0.5, 1e-3*math.Abs(lo))
		return lo - pad, hi + pad
	}
	pad := margin * (hi - lo)
	return lo - pad, hi + pad
}

// newScale makes the scale of an axis from min to max, drawn between two places
// on the page, with ticks at least apart points from each other, or closer if else
// there were less than two; at whole numbers only if asked.
func newScale(a Axis, min, max, from, to, apart float64, whole bool) scale {
	s := scale{min: min, max: max, from: from, to: to}
	raw := (max - min) / math.Max(2, math.Abs(to-from)/apart)
	digit, exponent := step(raw, whole)
	first := s.mark(digit, exponent)
	for len(s.ticks) < 2 && raw > 0 && !(whole && digit == 1 && exponent == 0) {
		raw /= 2
		digit, exponent = step(raw, whole)
		first = s.mark(digit, exponent)
	}
	s.label(a, digit, exponent, first)
	return s
}

// mark puts ticks at the multiples of digit·10^exponent and returns the first
// multiple.
func (s *scale) mark(digit float64, exponent int) (first float64) {
	unit := math.Pow(10, math.Abs(float64(exponent)))
	value := func(k float64) float64 {
		if exponent < 0 {
			return k * digit / unit
		}
		return k * digit * unit
	}
	s.ticks = nil
	first = math.Ceil(s.min / value(1) * (1 - 1e-12*sign(s.min)))
	last := math.Floor(s.max / value(1) * (1 + 1e-12*sign(s.max)))
	for k := first; k <= last; k++ {
		s.ticks = append(s.ticks, tick{value: value(k)})
	}
	return first
}

func sign(v float64) float64 {
	if v < 0 {
		return -1
	}
	return 1
}

// step returns the smallest of 1, 2, 5 times a power of ten that is at least raw.
func step(raw float64, whole bool) (digit float64, exponent int) {
	exponent = int(math.Floor(math.Log10(raw)))
	if whole && exponent < 0 {
		return 1, 0
	}
	for {
		for _, digit := range []float64{1, 2, 5} {
			if digit*math.Pow(10, float64(exponent)) >= raw*(1-1e-9) {
				return digit, exponent
			}
		}
		exponent++
	}
}

// label writes the ticks and the title. Tick n is (first+n)·digit·10^exponent.
func (s *scale) label(a Axis, digit float64, exponent int, first float64) {
	base, power := 0.0, 0
	if s.long(digit, exponent, first, power) {
		if s.max-s.min < 0.02*math.Max(math.Abs(s.min), math.Abs(s.max)) {
			base = first
		}
		power = exponentOf(s, digit, exponent, first-base)
	}
	for i := range s.ticks {
		s.ticks[i].label = decimal((first-base+float64(i))*digit, exponent-power)
	}
	s.title = title(a, decimal(base*digit, exponent), base, power)
}

// long reports whether a tick label has too many signs.
func (s *scale) long(digit float64, exponent int, first float64, power int) bool {
	for i := range s.ticks {
		text := decimal((first+float64(i))*digit, exponent-power)
		if len([]rune(strings.TrimPrefix(text, "−"))) > longest {
			return true
		}
	}
	return false
}

// exponentOf is the power of ten, a multiple of three, taken out of the labels.
func exponentOf(s *scale, digit float64, exponent int, first float64) int {
	if !s.long(digit, exponent, first, 0) {
		return 0
	}
	largest := 0.0
	for i := range s.ticks {
		largest = math.Max(largest, math.Abs(first+float64(i))*digit)
	}
	return 3 * int(math.Floor((math.Log10(largest)+float64(exponent))/3))
}

func title(a Axis, base string, shifted float64, power int) string {
	text := a.Title
	if shifted != 0 && a.Unit != "" {
		base += " " + a.Unit
	}
	switch {
	case shifted > 0:
		text += " − " + base
	case shifted < 0:
		text += " + " + strings.TrimPrefix(base, "−")
	}
	var unit []string
	if power != 0 {
		unit = append(unit, "10^{"+decimal(float64(power), 0)+"}")
	}
	if a.Unit != "" {
		unit = append(unit, a.Unit)
	}
	if len(unit) == 0 {
		return text
	}
	return text + " (" + strings.Join(unit, " ") + ")"
}

// decimal writes mantissa·10^exponent, mantissa a whole number, with as many
// decimals as the exponent asks for.
func decimal(mantissa float64, exponent int) string {
	value := mantissa * math.Pow(10, float64(exponent))
	if exponent < 0 {
		value = mantissa / math.Pow(10, -float64(exponent))
	}
	return typeset(strconv.FormatFloat(value, 'f', max(0, -exponent), 64))
}

// typeset replaces hyphens in a number by minus signs and drops the sign of zero.
func typeset(number string) string {
	if strings.Trim(number, "-0.") == "" {
		number = strings.TrimPrefix(number, "-")
	}
	return strings.ReplaceAll(number, "-", "−")
}

// short writes a number with four digits for the key.
func short(v float64) string {
	text := strconv.FormatFloat(v, 'g', 4, 64)
	mantissa, exponent, found := strings.Cut(text, "e")
	if !found {
		return typeset(text)
	}
	power, err := strconv.Atoi(exponent)
	if err != nil {
		return typeset(text)
	}
	if mantissa == "1" {
		return "10^{" + typeset(strconv.Itoa(power)) + "}"
	}
	return typeset(mantissa) + "·10^{" + typeset(strconv.Itoa(power)) + "}"
}
