package report

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"sync"
	"unicode/utf8"

	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"golang.org/x/image/font"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
	"gonum.org/v1/plot/vg"
)

// capital is the height of capitals and figures in units of the font size.
const capital = 0.7

// Lowered and raised groups: size and shift in units of the font size.
const (
	groupSize  = 0.72
	groupDown  = -0.18
	groupUp    = 0.36
	descenders = 0.22
)

var letters = sync.OnceValue(func() *sfnt.Font {
	f, err := sfnt.Parse(liberationsansregular.TTF)
	if err != nil {
		panic("report: the font built into the program cannot be read")
	}
	return f
})

// run is a stretch of text at one height.
type run struct {
	text        string
	size, shift float64 // in units of the font size
}

// runs splits a label at its lowered and raised groups. An opening without its
// closing brace is ordinary text.
func runs(label string) []run {
	var out []run
	plain := func(s string) {
		if s != "" {
			out = append(out, run{s, 1, 0})
		}
	}
	for {
		down, up := strings.Index(label, "_{"), strings.Index(label, "^{")
		at, shift := down, groupDown
		if at < 0 || up >= 0 && up < at {
			at, shift = up, groupUp
		}
		if at < 0 {
			break
		}
		end := strings.IndexByte(label[at:], '}')
		if end < 0 {
			break
		}
		plain(label[:at])
		if inner := label[at+2 : at+end]; inner != "" {
			out = append(out, run{inner, groupSize, shift})
		}
		label = label[at+end+1:]
	}
	plain(label)
	return out
}

// unmarked returns a label without the marks of its groups.
func unmarked(label string) string {
	var b strings.Builder
	for _, r := range runs(label) {
		b.WriteString(r.text)
	}
	return b.String()
}

// checkLabel reports why a label cannot be printed.
func checkLabel(what, label string) error {
	if !utf8.ValidString(label) {
		return fmt.Errorf("%w: the %s is not valid UTF-8: %q", ErrData, what, label)
	}
	var buf sfnt.Buffer
	for _, r := range label {
		if index, err := letters().GlyphIndex(&buf, r); err != nil || index == 0 || r < ' ' {
			return fmt.Errorf("%w: the %s %q holds the sign %q, which the font does not have; write it with other signs on one line",
				ErrData, what, label, r)
		}
	}
	return nil
}

// units is the number of font units in one font size.
func units() fixed.Int26_6 { return fixed.I(int(letters().UnitsPerEm())) }

// advance is how far glyph index moves the pen, in units of the font size.
func advance(buf *sfnt.Buffer, index sfnt.GlyphIndex) float64 {
	a, err := letters().GlyphAdvance(buf, index, units(), font.HintingNone)
	if err != nil {
		return 0
	}
	return float64(a) / float64(units())
}

// width is the length of a label, in points, at a font size in points.
func width(label string, size float64) float64 {
	var buf sfnt.Buffer
	total := 0.0
	for _, r := range runs(label) {
		for _, c := range r.text {
			index, err := letters().GlyphIndex(&buf, c)
			if err != nil {
				continue
			}
			total += advance(&buf, index) * r.size * size
		}
	}
	return total
}

// outline returns the label as a path whose base line starts at (x, y) and runs
// at the given angle (radians, counter-clockwise).
func outline(label string, size, x, y, angle float64) vg.Path {
	var path vg.Path
	var buf sfnt.Buffer
	sin, cos := math.Sincos(angle)
	pen := 0.0
	for _, r := range runs(label) {
		scale := r.size * size / float64(units())
		for _, c := range r.text {
			index, err := letters().GlyphIndex(&buf, c)
			if err != nil {
				continue
			}
			segments, err := letters().LoadGlyph(&buf, index, units(), nil)
			if err != nil && !errors.Is(err, sfnt.ErrNotFound) {
				continue
			}
			place := func(p fixed.Point26_6) vg.Point {
				u, v := pen+float64(p.X)*scale, r.shift*size-float64(p.Y)*scale
				return vg.Point{X: vg.Length(x + u*cos - v*sin), Y: vg.Length(y + u*sin + v*cos)}
			}
			path = appendGlyph(path, segments, place)
			pen += advance(&buf, index) * r.size * size
		}
	}
	return path
}

func appendGlyph(path vg.Path, segments sfnt.Segments, place func(fixed.Point26_6) vg.Point) vg.Path {
	open := false
	for _, s := range segments {
		switch s.Op {
		case sfnt.SegmentOpMoveTo:
			if open {
				path.Close()
			}
			path.Move(place(s.Args[0]))
			open = true
		case sfnt.SegmentOpLineTo:
			path.Line(place(s.Args[0]))
		case sfnt.SegmentOpQuadTo:
			path.QuadTo(place(s.Args[0]), place(s.Args[1]))
		case sfnt.SegmentOpCubeTo:
			path.CubeTo(place(s.Args[0]), place(s.Args[1]), place(s.Args[2]))
		}
	}
	if open {
		path.Close()
	}
	return path
}

// lines breaks text at spaces into lines no longer than room points. ok is false
// if one word alone is longer.
func lines(text string, size, room float64) (out []string, ok bool) {
	line := ""
	for _, word := range strings.Fields(text) {
		if width(word, size) > room {
			return nil, false
		}
		longer := word
		if line != "" {
			longer = line + " " + word
		}
		if width(longer, size) > room {
			out, line = append(out, line), word
			continue
		}
		line = longer
	}
	if line != "" {
		out = append(out, line)
	}
	return out, true
}
