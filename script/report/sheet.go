package report

import (
	"image/color"
	"math"

	"gonum.org/v1/plot/vg"
)

// sheet draws on a canvas; lengths are points from the lower left corner.
type sheet struct{ canvas vg.Canvas }

func at(x, y float64) vg.Point { return vg.Point{X: vg.Length(x), Y: vg.Length(y)} }

func (s sheet) line(x0, y0, x1, y1, thick float64, c color.Color) {
	s.path([]vg.Point{at(x0, y0), at(x1, y1)}, thick, c)
}

func (s sheet) path(points []vg.Point, thick float64, c color.Color) {
	var p vg.Path
	for i, pt := range points {
		if i == 0 {
			p.Move(pt)
			continue
		}
		p.Line(pt)
	}
	s.canvas.SetColor(c)
	s.canvas.SetLineWidth(vg.Length(thick))
	s.canvas.SetLineDash(nil, 0)
	s.canvas.Stroke(p)
}

// broken draws a horizontal or vertical line of short strokes.
func (s sheet) broken(x0, y0, x1, y1, thick float64, c color.Color) {
	const stroke, pause = 3.0, 2.0
	length := math.Hypot(x1-x0, y1-y0)
	for from := 0.0; from < length; from += stroke + pause {
		a, b := from/length, math.Min(from+stroke, length)/length
		s.line(x0+a*(x1-x0), y0+a*(y1-y0), x0+b*(x1-x0), y0+b*(y1-y0), thick, c)
	}
}

func (s sheet) area(c color.Color, points ...vg.Point) {
	var p vg.Path
	for i, pt := range points {
		if i == 0 {
			p.Move(pt)
			continue
		}
		p.Line(pt)
	}
	p.Close()
	s.canvas.SetColor(c)
	s.canvas.Fill(p)
}

func (s sheet) box(x0, y0, x1, y1 float64, c color.Color) {
	s.area(c, at(x0, y0), at(x1, y0), at(x1, y1), at(x0, y1))
}

// disc fills a circle.
func (s sheet) disc(x, y, r float64, c color.Color) {
	s.canvas.SetColor(c)
	s.canvas.Fill(circle(x, y, r))
}

// ring draws the line of a circle.
func (s sheet) ring(x, y, r, thick float64, c color.Color) {
	s.canvas.SetColor(c)
	s.canvas.SetLineWidth(vg.Length(thick))
	s.canvas.SetLineDash(nil, 0)
	s.canvas.Stroke(circle(x, y, r))
}

// circle is made of four cubic curves, which all canvases draw alike.
func circle(x, y, r float64) vg.Path {
	k := r * 4 / 3 * (math.Sqrt2 - 1)
	var p vg.Path
	p.Move(at(x+r, y))
	p.CubeTo(at(x+r, y+k), at(x+k, y+r), at(x, y+r))
	p.CubeTo(at(x-k, y+r), at(x-r, y+k), at(x-r, y))
	p.CubeTo(at(x-r, y-k), at(x-k, y-r), at(x, y-r))
	p.CubeTo(at(x+k, y-r), at(x+r, y-k), at(x+r, y))
	p.Close()
	return p
}

// marker draws the filled mark of series i about (x, y): disc, square, triangle,
// rhombus, then the same again.
func (s sheet) marker(i int, x, y, r float64, c color.Color) {
	switch i % 4 {
	case 0:
		s.disc(x, y, r, c)
	case 1:
		s.box(x-0.88*r, y-0.88*r, x+0.88*r, y+0.88*r, c)
	case 2:
		s.area(c, at(x, y+1.25*r), at(x-1.1*r, y-0.75*r), at(x+1.1*r, y-0.75*r))
	case 3:
		s.area(c, at(x, y+1.3*r), at(x-1.1*r, y), at(x, y-1.3*r), at(x+1.1*r, y))
	}
}

// text prints a label on a horizontal base line; align 0, 0.5 and 1 put its left
// end, middle and right end at x.
func (s sheet) text(label string, size, x, y, align float64, c color.Color) {
	s.canvas.SetColor(c)
	s.canvas.Fill(outline(label, size, x-align*width(label, size), y, 0))
}

// upright prints a label that reads upwards; its base line is at x, and align 0,
// 0.5 and 1 put its lower end, middle and upper end at y.
func (s sheet) upright(label string, size, x, y, align float64, c color.Color) {
	s.canvas.SetColor(c)
	s.canvas.Fill(outline(label, size, x, y-align*width(label, size), math.Pi/2))
}
