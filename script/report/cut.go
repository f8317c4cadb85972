package report

import (
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// window is the plotting area, used to cut what reaches beyond it.
func (p *panel) window() draw.Canvas {
	return draw.Canvas{Rectangle: vg.Rectangle{Min: at(p.left, p.bottom), Max: at(p.right, p.top)}}
}

// cutLines returns the pieces of a line inside the plotting area.
func (p *panel) cutLines(points []vg.Point) [][]vg.Point {
	w := p.window()
	return w.ClipLinesXY(points)
}

// cutArea returns the part of a polygon inside the plotting area.
func (p *panel) cutArea(points []vg.Point) []vg.Point {
	w := p.window()
	return w.ClipPolygonXY(points)
}
