package report

import (
	"image/color"
	"math"
)

// Colours of numbers are chosen in OKLab, in which equal steps look about equally large
// (B. Ottosson, 2020, from memory): lightness falls steadily from the first to the last
// colour, so that the order survives in grey and in any colour vision.

// oklch returns the colour of a lightness from 0 to 1, chroma and hue in degrees, with
// channels that the screen does not have cut off.
func oklch(lightness, chroma, hue float64) color.RGBA {
	sin, cos := math.Sincos(hue * math.Pi / 180)
	a, b := chroma*cos, chroma*sin
	l := lightness + 0.3963377774*a + 0.2158037573*b
	m := lightness - 0.1055613458*a - 0.0638541728*b
	s := lightness - 0.0894841775*a - 1.2914855480*b
	l, m, s = l*l*l, m*m*m, s*s*s
	channel := func(x float64) uint8 {
		if x > 0.0031308 {
			x = 1.055*math.Pow(x, 1/2.4) - 0.055
		} else {
			x *= 12.92
		}
		return uint8(math.Round(255 * math.Max(0, math.Min(1, x))))
	}
	return color.RGBA{
		channel(4.0767416621*l - 3.3077115913*m + 0.2309699292*s),
		channel(-1.2684380046*l + 2.6097574011*m - 0.3413193965*s),
		channel(-0.0041960863*l - 0.7034186147*m + 1.7076147010*s), 255,
	}
}

// rising is the colour of t from 0 (white) to 1 (dark blue), by way of green.
func rising(t float64) color.RGBA {
	t = math.Max(0, math.Min(1, t))
	return oklch(1-0.72*t, 0.13*math.Sin(math.Pi*math.Min(1, 0.02+0.88*t)), 170+95*t)
}

// signed is the colour of t from -1 (blue) by 0 (near white) to 1 (red).
func signed(t float64) color.RGBA {
	t = math.Max(-1, math.Min(1, t))
	if t < 0 {
		return oklch(0.97+0.5*t, -0.15*t, 250)
	}
	return oklch(0.97-0.5*t, 0.15*t, 40)
}

// colourBar is a legend of colours beside the plotting area.
type colourBar struct {
	axis   Axis
	lo, hi float64
	colour func(v float64) color.RGBA
	log    bool // lo and hi are powers of ten

	scale scale
}

const (
	barWidth = 7.0
	barGap   = 6.0
	barSteps = 64
)

// place makes the ticks for the heights of the plotting area.
func (b *colourBar) place(bottom, top float64) {
	b.scale = newScale(b.axis, b.lo, b.hi, bottom, top, 22, b.log)
	if b.log {
		for i, t := range b.scale.ticks {
			b.scale.ticks[i].label = "10^{" + decimal(t.value, 0) + "}"
		}
	}
}

// room is the width that the bar takes.
func (b *colourBar) room() float64 {
	w := 0.0
	for _, t := range b.scale.ticks {
		w = math.Max(w, width(t.label, tickSize))
	}
	return barGap + barWidth + tickLength + labelGap + w + labelGap + titleSize*(1+descenders)
}

func (b *colourBar) draw(p *panel) {
	x := p.right + barGap
	step := (p.top - p.bottom) / barSteps
	for i := range barSteps {
		v := b.lo + (b.hi-b.lo)*(float64(i)+0.5)/barSteps
		p.box(x, p.bottom+float64(i)*step, x+barWidth, math.Min(p.top, p.bottom+float64(i+1)*step+0.3), b.colour(v))
	}
	for _, t := range b.scale.ticks {
		y := b.scale.at(t.value)
		p.line(x+barWidth, y, x+barWidth+tickLength, y, lineWidth, ink)
		p.text(t.label, tickSize, x+barWidth+tickLength+labelGap, y-capital*tickSize/2, 0, ink)
	}
	size := fitted(b.scale.title, p.height-2*border)
	if size == 0 {
		size = smallest
	}
	end := x + b.room() - barGap
	middle := between((p.bottom+p.top)/2, width(b.scale.title, size), border, p.height-border)
	p.upright(b.scale.title, size, end-descenders*titleSize, middle, 0.5, ink)
}
