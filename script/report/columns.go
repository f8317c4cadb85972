package report

import (
	"fmt"
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
func (c columns) dash() float64 { return math.Min(0.72*c.pitch, 15) }

// drawCluster draws one dash for a level and as many short dashes side by side as
// a degenerate level has members; if these are too short to be told apart, one
// heavy dash. The number of members follows where there is room for it.
func (c columns) drawCluster(s sheet, g cluster, y, thick float64, ink color.Color, numbered bool) {
	x, w := c.at(g.column), c.dash()
	s.dashes(x-w/2, y, w, thick, g.count, ink)
	if numbered {
		s.text(strconv.Itoa(g.count), countSize, x+w/2+numberGap, y-capital*countSize/2, 0, ink)
	}
}

// Dashes of degenerate levels: the distance between the parts, and the length
// below which they would not be told apart.
const (
	partPause    = 0.8
	shortestPart = 1.0
)

func parts(w float64, count int) float64 { return (w - partPause*float64(count-1)) / float64(count) }

// dashes divides a dash of width w into count parts, or makes it heavy if these
// were too short.
func (s sheet) dashes(x, y, w, thick float64, count int, c color.Color) {
	part := parts(w, count)
	if count > 1 && part < shortestPart {
		s.line(x, y, x+w, y, 2.2*thick, c)
		return
	}
	for i := range count {
		from := x + float64(i)*(part+partPause)
		s.line(from, y, from+part, y, thick, c)
	}
}

// key explains the dashes of degenerate levels that occur among the groups.
func (c columns) key(groups []cluster, tolerance float64, unit string) []entry {
	divided, heavy, least := false, false, 2
	for parts(c.dash(), least) >= shortestPart {
		least++
	}
	for _, g := range groups {
		divided = divided || g.count > 1 && g.count < least
		heavy = heavy || g.count >= least
	}
	text := "degenerate"
	if tolerance > 0 {
		text += " within " + quantity(tolerance, unit)
	}
	var key []entry
	if divided {
		key = append(key, dashEntry(text, 2, ink))
	}
	if heavy {
		if !divided {
			text = fmt.Sprintf("%d or more %s", least, text)
		} else {
			text = fmt.Sprintf("%d or more", least)
		}
		key = append(key, dashEntry(text, 100, ink))
	}
	return key
}

// dashWidth is the thickness of a dash where there is room.
const dashWidth = 1.1

// thickness of the dashes in the manifold, or of the others: half the mean
// distance of those in the fullest column, if that is less than dashWidth.
func (c columns) thickness(groups []cluster, heights []float64, inManifold bool) float64 {
	counts, most := make([]int, len(c.labels)), 0
	low, high := math.Inf(1), math.Inf(-1)
	for i, g := range groups {
		if g.manifold != inManifold {
			continue
		}
		counts[g.column]++
		most = max(most, counts[g.column])
		low, high = math.Min(low, heights[i]), math.Max(high, heights[i])
	}
	if most < 4 {
		return dashWidth
	}
	return math.Max(0.3, math.Min(dashWidth, (high-low)/2/float64(most)))
}

// Free paper on both sides of the number of a degenerate level: it stands nearer
// to the dash that it counts than to the next one.
const (
	numberGap  = 0.8
	numberRest = 1.8
)

// numbered says which clusters have room for their number: it must fit between
// two columns and not touch another number of its column.
func (c columns) numbered(groups []cluster, heights []float64) []bool {
	out := make([]bool, len(groups))
	last := map[int]float64{}
	room := c.pitch - c.dash()
	for i, g := range groups {
		if g.count < 2 || width(strconv.Itoa(g.count), countSize)+numberGap+numberRest > room {
			continue
		}
		if before, seen := last[g.column]; seen && heights[i]-before < capital*countSize+1 {
			continue
		}
		out[i], last[g.column] = true, heights[i]
	}
	return out
}
