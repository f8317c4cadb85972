package report

import (
	"image/color"
	"math"
	"strconv"
)

// columns is a horizontal axis with one place for each sector.
type columns struct {
	labels  []string
	from    float64
	pitch   float64
	stride  int
	upright bool
}

// clearance between neighbouring labels of sectors, in points.
const clearance = 3.0

// newColumns divides the axis and decides how the labels are printed: side by side
// if all fit, else upright if that shows more of them; and as many as fit.
func newColumns(labels []string, from, to float64) columns {
	c := columns{labels: labels, from: from, pitch: (to - from) / float64(len(labels))}
	needed := func(size float64) int { return max(1, int(math.Ceil(size/c.pitch-1e-9))) }
	longest := c.longest()
	c.stride = needed(longest + clearance)
	if turned := needed(1.08 * tickSize); turned < c.stride && longest > 1.6*tickSize {
		c.stride, c.upright = turned, true
	}
	return c
}

func (c columns) longest() float64 {
	w := 0.0
	for _, label := range c.labels {
		w = math.Max(w, width(label, tickSize))
	}
	return w
}

func (c columns) at(i int) float64 { return c.from + (float64(i)+0.5)*c.pitch }

// depth is the height of the labels.
func (c columns) depth() float64 {
	if c.upright {
		return c.longest()
	}
	return capital * tickSize
}

// draw prints ticks and labels below y.
func (c columns) draw(s sheet, y float64) {
	for i, label := range c.labels {
		x := c.at(i)
		length := tickLength
		if i%c.stride != 0 {
			length /= 2
		}
		if c.pitch > 1.5 {
			s.line(x, y, x, y-length, lineWidth, ink)
		}
		if i%c.stride != 0 {
			continue
		}
		below := y - tickLength - labelGap
		if c.upright {
			s.upright(label, tickSize, x+capital*tickSize/2, below, 1, ink)
			continue
		}
		s.text(label, tickSize, x, below-capital*tickSize, 0.5, ink)
	}
}

// dash is the length of the dash that stands for a level.
func (c columns) dash() float64 { return math.Min(0.66*c.pitch, 15) }

// drawCluster draws one dash for a level and as many short dashes side by side as
// a degenerate level has members; if these are too short to be told apart, one
// heavy dash. The number of members follows where there is room for it.
func (c columns) drawCluster(s sheet, g cluster, y float64, ink color.Color, numbered bool) {
	x, w := c.at(g.column), c.dash()
	s.dashes(x-w/2, y, w, g.count, ink)
	if numbered {
		s.text(strconv.Itoa(g.count), countSize, x+w/2+0.8, y-capital*countSize/2, 0, ink)
	}
}

// dashes divides a dash of width w into count parts.
func (s sheet) dashes(x, y, w float64, count int, c color.Color) {
	const thick, heavy, pause, shortest = 1.1, 2.2, 1.0, 1.2
	part := (w - pause*float64(count-1)) / float64(count)
	if count > 1 && part < shortest {
		s.line(x, y, x+w, y, heavy, c)
		return
	}
	for i := range count {
		from := x + float64(i)*(part+pause)
		s.line(from, y, from+part, y, thick, c)
	}
}

// numbered says which clusters have room for their number: it must fit between
// two columns and not touch another number of its column.
func (c columns) numbered(groups []cluster, heights []float64) []bool {
	out := make([]bool, len(groups))
	last := map[int]float64{}
	room := c.pitch - c.dash()
	for i, g := range groups {
		if g.count < 2 || width(strconv.Itoa(g.count), countSize)+1.2 > room {
			continue
		}
		if before, seen := last[g.column]; seen && heights[i]-before < capital*countSize+1 {
			continue
		}
		out[i], last[g.column] = true, heights[i]
	}
	return out
}
