package report

import (
	"errors"
	"fmt"
	"math"
)

// Default size and resolution of a figure. 86 mm is the width of one column in
// most physics journals (common practice, no source).
const (
	DefaultWidth  = 86.0  // mm
	DefaultHeight = 65.0  // mm
	DefaultDots   = 300.0 // per inch
)

const (
	smallestSide  = 30.0
	largestSide   = 1000.0
	fewestDots    = 50.0
	mostDots      = 1200.0
	mostPixels    = 1e8
	perMillimetre = 72 / 25.4 // points
)

// What an error of this package is about; see errors.Is.
var (
	ErrData   = errors.New("unfit data")
	ErrFormat = errors.New("unknown format")
	ErrSize   = errors.New("no room on the page")
)

// Page says how large a figure is and what stands above and below it. The zero
// value is a figure of 86 mm × 65 mm without title and note.
type Page struct {
	// Width and Height in mm, 30 to 1000; 0 means DefaultWidth, DefaultHeight.
	Width, Height float64
	// Dots per inch, a whole number from 50 to 1200; 0 means DefaultDots. No
	// effect unless the format is png.
	Dots float64
	// Title stands above the figure on one line; empty means none.
	Title string
	// Note stands below the figure in small letters, broken into lines: the
	// parameters that made the figure. Empty means none.
	Note string
}

// Axis describes an axis of numbers. The zero value takes title and range from
// the figure and its data.
type Axis struct {
	// Title without unit; empty means the title of the figure's kind.
	Title string
	// Unit is printed in brackets behind the title; empty means none.
	Unit string
	// Min and Max are the ends of the axis, in its unit. Both 0 means a range that
	// holds all data.
	Min, Max float64
}

func (p Page) filled() Page {
	if p.Width == 0 {
		p.Width = DefaultWidth
	}
	if p.Height == 0 {
		p.Height = DefaultHeight
	}
	if p.Dots == 0 {
		p.Dots = DefaultDots
	}
	return p
}

func (p Page) check() error {
	for _, side := range []struct {
		name  string
		value float64
	}{{"width", p.Width}, {"height", p.Height}} {
		if !(side.value >= smallestSide && side.value <= largestSide) {
			return fmt.Errorf("%w: page %s of %v mm; give %v to %v mm, or 0 for the default",
				ErrSize, side.name, side.value, smallestSide, largestSide)
		}
	}
	if !(p.Dots >= fewestDots && p.Dots <= mostDots) || p.Dots != math.Trunc(p.Dots) {
		return fmt.Errorf("%w: %v dots per inch; give a whole number from %v to %v, or 0 for the default",
			ErrSize, p.Dots, fewestDots, mostDots)
	}
	if pixels := p.Width * p.Height * p.Dots * p.Dots / (25.4 * 25.4); pixels > mostPixels {
		return fmt.Errorf("%w: %.0f million pixels; the limit is %.0f million, give fewer dots per inch or a smaller page",
			ErrSize, pixels/1e6, mostPixels/1e6)
	}
	if err := checkLabel("title of the page", p.Title); err != nil {
		return err
	}
	return checkLabel("note of the page", p.Note)
}

func (a Axis) or(title string) Axis {
	if a.Title == "" {
		a.Title = title
	}
	return a
}

func (a Axis) given() bool { return a.Min != 0 || a.Max != 0 }

func (a Axis) check(name string) error {
	if err := checkLabel("title of the "+name+" axis", a.Title); err != nil {
		return err
	}
	if err := checkLabel("unit of the "+name+" axis", a.Unit); err != nil {
		return err
	}
	if !a.given() {
		return nil
	}
	if !finite(a.Min) || !finite(a.Max) || !(a.Min < a.Max) {
		return fmt.Errorf("%w: the %s axis runs from %v to %v; give two finite numbers in ascending order, or 0 and 0 for the range of the data",
			ErrData, name, a.Min, a.Max)
	}
	for _, end := range []float64{a.Min, a.Max} {
		if err := checkNumber("an end of the "+name+" axis", end); err != nil {
			return err
		}
	}
	if level(a.Min, a.Max) {
		return fmt.Errorf("%w: the %s axis runs from %v to %v, too close together to draw; widen it",
			ErrData, name, a.Min, a.Max)
	}
	return nil
}

// holds reports whether v lies on the axis.
func (a Axis) holds(v float64) bool { return !a.given() || v >= a.Min && v <= a.Max }

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }
