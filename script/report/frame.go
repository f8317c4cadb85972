package report

import (
	"fmt"
	"math"

	"gonum.org/v1/plot/vg"
)

// Sizes in points.
const (
	titleSize  = 8.0
	tickSize   = 7.0
	keySize    = 7.0
	countSize  = 6.0
	noteSize   = 6.0
	smallest   = 6.0 // below this a title is not shrunk
	border     = 4.0
	tickLength = 3.0
	labelGap   = 2.0
	lineWidth  = 0.6
	leastSide  = 40.0 // of the plotting area
)

// frame is what a figure asks for around its plotting area.
type frame struct {
	page   Page
	name   string   // of the kind of figure, for readers of the file's text
	names  []string // labels of the sectors; nil for a horizontal axis of numbers
	xAxis  Axis     // of it, only the title counts above sectors
	xRange [2]float64
	whole  bool // ticks at whole numbers only
	yAxis  Axis
	yRange [2]float64
	// decades says that yRange are decadic logarithms of the ends of the axis.
	decades bool
	key     func(columns) []entry
	strip   func(columns) float64 // height kept free above the plotting area; may be nil
	bar     *colourBar            // beside the plotting area; may be nil
	equal   bool                  // a unit is equally long in both directions
	marks   []tick                // ticks below, instead of those of the axis; nil for these
}

// panel is a frame with all places fixed.
type panel struct {
	frame
	sheet
	width, height            float64
	left, right, bottom, top float64
	x, y                     scale
	columns                  columns
	rows                     [][]entry
	note                     []string
}

// arrange finds the places of all parts. The left margin depends on the tick
// labels, these on the height, the height on the labels below, and these on the
// left margin: the margin grows until it is enough.
func (f frame) arrange() (*panel, error) {
	p := &panel{frame: f, width: f.page.Width * perMillimetre, height: f.page.Height * perMillimetre}
	var ok bool
	if p.note, ok = lines(f.page.Note, noteSize, p.width-2*border); !ok {
		return nil, fmt.Errorf("%w: a word of the note is longer than the page is wide; break it or widen the page", ErrSize)
	}
	p.left, p.right = border+titleSize*(1+descenders), p.width-border-2
	for range 6 {
		if err := p.divide(); err != nil {
			return nil, err
		}
		left := border + titleSize*(1+descenders) + labelGap + p.widestTick() + labelGap + tickLength
		right := p.width - border - math.Max(2, p.overhang())
		if p.bar != nil {
			right = p.width - border - p.bar.room()
		}
		if left <= p.left && right >= p.right {
			return p, p.finished()
		}
		p.left, p.right = math.Max(left, p.left), math.Min(right, p.right)
	}
	return p, p.finished()
}

// finished makes the units equal, if asked, and checks the titles.
func (p *panel) finished() error {
	if p.equal {
		unit := math.Min((p.right-p.left)/(p.xRange[1]-p.xRange[0]), (p.top-p.bottom)/(p.yRange[1]-p.yRange[0]))
		wide, high := unit*(p.xRange[1]-p.xRange[0]), unit*(p.yRange[1]-p.yRange[0])
		p.left += (p.right - p.left - wide) / 2
		p.right = p.left + wide
		p.bottom += (p.top - p.bottom - high) / 2
		p.top = p.bottom + high
		p.x = numbersBelow(p.frame, p.left, p.right)
		p.y = newScale(p.yAxis, p.yRange[0], p.yRange[1], p.bottom, p.top, 22, false)
		if p.bar != nil {
			p.bar.place(p.bottom, p.top)
		}
	}
	return p.checkTitles()
}

// divide shares the page out for the present margins at left and right.
func (p *panel) divide() error {
	const useful = "make the page larger, or labels, key and note shorter"
	if p.right-p.left < leastSide {
		return fmt.Errorf("%w: %.0f mm are left for the width of the plot; %s", ErrSize, (p.right-p.left)/perMillimetre, useful)
	}
	depth := capital * tickSize
	if p.names != nil {
		p.columns = newColumns(p.names, p.left, p.right)
		depth = p.columns.depth()
	} else {
		p.x = numbersBelow(p.frame, p.left, p.right)
		if p.marks != nil {
			p.x.ticks, p.x.title = p.marks, title(p.xAxis, "", 0, 0)
			p.x.ticks = p.x.thinned()
		}
	}
	var err error
	if p.rows, err = rowsOf(p.key(p.columns), p.width-2*border); err != nil {
		return err
	}
	p.bottom = border + p.noteHeight() + titleSize*(1+descenders) + labelGap + depth + labelGap + tickLength
	p.top = p.height - border - p.titleHeight() - p.keyHeight() - p.stripHeight()
	if p.top-p.bottom < leastSide {
		return fmt.Errorf("%w: %.0f mm are left for the height of the plot; %s", ErrSize, (p.top-p.bottom)/perMillimetre, useful)
	}
	if p.decades {
		p.y = newDecades(p.yAxis, p.yRange[0], p.yRange[1], p.bottom, p.top, 22)
	} else {
		p.y = newScale(p.yAxis, p.yRange[0], p.yRange[1], p.bottom, p.top, 22, false)
	}
	if p.bar != nil {
		p.bar.place(p.bottom, p.top)
	}
	return nil
}

// numbersBelow takes as many ticks as have room for their labels.
func numbersBelow(f frame, from, to float64) scale {
	for apart := 24.0; ; apart *= 1.25 {
		s := newScale(f.xAxis, f.xRange[0], f.xRange[1], from, to, apart, f.whole)
		kept := s.apart()
		if len(kept) == len(s.ticks) || apart > to-from {
			s.ticks = kept
			return s
		}
	}
}

// apart returns the ticks whose labels do not touch the one before.
func (s scale) apart() []tick {
	var kept []tick
	end := math.Inf(-1)
	for _, t := range s.ticks {
		half := width(t.label, tickSize) / 2
		if x := s.at(t.value); x-half >= end+clearance {
			kept, end = append(kept, t), x+half
		}
	}
	return kept
}

// thinned returns all ticks, without the labels that apart leaves out.
func (s scale) thinned() []tick {
	kept := s.apart()
	var all []tick
	for _, t := range s.ticks {
		if len(kept) > 0 && kept[0] == t {
			kept = kept[1:]
		} else {
			t.label = ""
		}
		all = append(all, t)
	}
	return all
}

func (p *panel) noteHeight() float64 {
	if len(p.note) == 0 {
		return 0
	}
	return float64(len(p.note))*noteSize*1.2 + labelGap
}

func (p *panel) titleHeight() float64 {
	if p.page.Title == "" {
		return 0
	}
	return titleSize * 1.5
}

func (p *panel) keyHeight() float64 {
	if len(p.rows) == 0 {
		return capital * tickSize / 2
	}
	return float64(len(p.rows))*keyRow + 3
}

func (p *panel) stripHeight() float64 {
	if p.strip == nil {
		return 0
	}
	return p.strip(p.columns)
}

func (p *panel) widestTick() float64 {
	w := 0.0
	for _, t := range p.y.ticks {
		w = math.Max(w, width(t.label, tickSize))
	}
	return w
}

// overhang is how far the last label below reaches beyond the plotting area.
func (p *panel) overhang() float64 {
	if p.names != nil {
		last := (len(p.names) - 1) / p.columns.stride * p.columns.stride
		half := width(p.names[last], tickSize) / 2
		if p.columns.upright {
			half = tickSize / 2
		}
		return p.columns.at(last) + half - p.right
	}
	if len(p.x.ticks) == 0 {
		return 0
	}
	t := p.x.ticks[len(p.x.ticks)-1]
	return p.x.at(t.value) + width(t.label, tickSize)/2 - p.right
}

func (p *panel) xTitle() string {
	if p.names != nil {
		return p.xAxis.Title
	}
	return p.x.title
}

// fitted is the size at which a title fits into room, or 0.
func fitted(label string, room float64) float64 {
	for size := titleSize; size >= smallest; size -= 0.5 {
		if width(label, size) <= room {
			return size
		}
	}
	return 0
}

// beside is the range of heights that the vertical title has to itself: above the
// note and the horizontal title, below the key.
func (p *panel) beside() (low, high float64) {
	low = border + p.noteHeight()
	if p.xTitle() != "" {
		low += titleSize*(1+descenders) + labelGap
	}
	return low, p.height - border - p.titleHeight() - p.keyHeight()
}

func (p *panel) checkTitles() error {
	low, high := p.beside()
	for _, t := range []struct {
		what, label string
		room        float64
	}{
		{"title of the page", p.page.Title, p.width - 2*border},
		{"title of the horizontal axis", p.xTitle(), p.width - 2*border},
		{"title of the vertical axis", p.y.title, high - low},
	} {
		if fitted(t.label, t.room) == 0 {
			return fmt.Errorf("%w: the %s %q has %.0f mm; shorten it or enlarge the page",
				ErrSize, t.what, unmarked(t.label), t.room/perMillimetre)
		}
	}
	return nil
}

// between moves the middle of a label of the given length so that it stays
// between lo and hi.
func between(middle, length, lo, hi float64) float64 {
	return math.Max(lo+length/2, math.Min(middle, hi-length/2))
}

// draw prints everything around and below the data.
func (p *panel) draw() {
	p.rules()
	p.line(p.left, p.bottom, p.left, p.top, lineWidth, ink)
	p.line(p.left, p.bottom, p.right, p.bottom, lineWidth, ink)
	for _, t := range p.y.ticks {
		y := p.y.at(t.value)
		p.line(p.left-tickLength, y, p.left, y, lineWidth, ink)
		p.text(t.label, tickSize, p.left-tickLength-labelGap, y-capital*tickSize/2, 1, ink)
	}
	if p.names != nil {
		p.columns.draw(p.sheet, p.bottom)
	} else {
		for _, t := range p.x.ticks {
			x := p.x.at(t.value)
			if t.label == "" {
				p.line(x, p.bottom, x, p.bottom-tickLength/2, lineWidth, ink)
				continue
			}
			p.line(x, p.bottom, x, p.bottom-tickLength, lineWidth, ink)
			p.text(t.label, tickSize, x, p.bottom-tickLength-labelGap-capital*tickSize, 0.5, ink)
		}
	}
	p.titles()
}

func (p *panel) rules() {
	for _, t := range p.y.ticks {
		if y := p.y.at(t.value); y > p.bottom+1 {
			p.line(p.left, y, p.right, y, 0.4, ruling)
		}
	}
}

func (p *panel) titles() {
	if label := p.xTitle(); label != "" {
		size := fitted(label, p.width-2*border)
		x := between((p.left+p.right)/2, width(label, size), border, p.width-border)
		p.text(label, size, x, border+p.noteHeight()+descenders*titleSize, 0.5, ink)
	}
	p.verticalTitle()
	top := p.height - border
	if p.page.Title != "" {
		p.text(p.page.Title, fitted(p.page.Title, p.width-2*border), border, top-capital*titleSize-1, 0, ink)
	}
	p.drawKey(p.rows, border, top-p.titleHeight()-1)
	for i, line := range p.note {
		base := border + float64(len(p.note)-1-i)*noteSize*1.2 + descenders*noteSize
		p.text(line, noteSize, border, base, 0, muted)
	}
}

func (p *panel) verticalTitle() {
	if p.y.title == "" {
		return
	}
	low, high := p.beside()
	size := fitted(p.y.title, high-low)
	y := between((p.bottom+p.top)/2, width(p.y.title, size), low, high)
	p.upright(p.y.title, size, border+capital*titleSize, y, 0.5, ink)
}

// clip keeps a height inside the plotting area.
func (p *panel) clip(y float64) float64 { return math.Max(p.bottom, math.Min(y, p.top)) }

// start covers the page in white and hands it the canvas.
func (p *panel) start(canvas vg.Canvas) {
	p.sheet = sheet{canvas}
	p.box(0, 0, p.width, p.height, white)
}
