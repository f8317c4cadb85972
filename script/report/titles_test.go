package report

import (
	"bytes"
	"errors"
	"fmt"
	"image"
	"image/png"
	"strings"
	"testing"
)

// crowded has a vertical title with a shift and a power of ten in it, and a
// title, a key and a note at the left edge of the page, where it could meet them.
func crowded(width, height float64, title string) SectorSpectrum {
	f := SectorSpectrum{
		Page:     Page{Width: width, Height: height, Title: "Invented torus", Note: "Invented data, with a note that is long enough for two lines below the figure."},
		Energy:   Axis{Title: title, Unit: "t"},
		Manifold: 1, ShadeGap: true,
	}
	for i := range 12 {
		f.Sectors = append(f.Sectors, Sector{Label: fmt.Sprintf("(%d,0)", i), Levels: []float64{-24.4393974 + 1e-6*float64(i), -24.43939}, Predicted: 1})
	}
	return f
}

// painted is a page that holds what draw draws.
func painted(t *testing.T, p *panel, draw func()) image.Image {
	t.Helper()
	canvas := newCanvas("png", p)
	p.start(canvas)
	draw()
	var buf bytes.Buffer
	if _, err := canvas.WriteTo(&buf); err != nil {
		t.Fatal(err)
	}
	img, err := png.Decode(&buf)
	if err != nil {
		t.Fatal(err)
	}
	return img
}

// inkOn counts the pixels of one picture that lie on ink of the other.
func inkOn(a, b image.Image) (total, covered int) {
	size := a.Bounds()
	isWhite := func(img image.Image, x, y int) bool {
		r, g, b, _ := img.At(x, y).RGBA()
		return r&g&b == 0xffff
	}
	for y := size.Min.Y; y < size.Max.Y; y++ {
		for x := size.Min.X; x < size.Max.X; x++ {
			if !isWhite(a, x, y) {
				total++
				if !isWhite(b, x, y) {
					covered++
				}
			}
		}
	}
	return total, covered
}

// The vertical title lies on white paper: a title below the key would lose its
// power of ten, and the figure would say wrong numbers.
func TestVerticalTitleMeetsNothing(t *testing.T) {
	drawn, refused := 0, 0
	for _, size := range [][2]float64{{86, 65}, {60, 60}, {120, 75}, {70, 90}} {
		for _, title := range []string{"E", "Energy", "Energy of the film", strings.Repeat("Energy of the film ", 3)} {
			f := crowded(size[0], size[1], title)
			f.Page.Dots = 150
			p, paint, err := f.plan()
			if err != nil {
				if !errors.Is(err, ErrSize) || !strings.Contains(err.Error(), "title of the vertical axis") {
					t.Errorf("%v mm, %q: %v", size, title, err)
				}
				refused++
				continue
			}
			drawn++
			alone := painted(t, p, p.verticalTitle)
			p.y.title = ""
			total, covered := inkOn(alone, painted(t, p, paint))
			if total < 100 || covered > 0 {
				t.Errorf("%v mm, %q: %d of %d pixels of the vertical title lie on something else", size, title, covered, total)
			}
		}
	}
	if drawn < 8 || refused == 0 {
		t.Errorf("%d drawn, %d refused; the test has lost its grip", drawn, refused)
	}
}

// A number stands nearer to the dash that it counts than to the next column's.
func TestNumbersOfDegenerateLevelsAreApart(t *testing.T) {
	shown, hidden := 0, 0
	for n := 1; n <= 40; n++ {
		c := newColumns(make([]string, n), 30, 230)
		groups := []cluster{{value: 1, column: 0, count: 2}}
		if !c.numbered(groups, []float64{50})[0] {
			hidden++
			continue
		}
		shown++
		end := c.at(0) + c.dash()/2 + numberGap + width("2", countSize)
		if next := c.at(0) + c.pitch - c.dash()/2; next-end < 2*numberGap {
			t.Errorf("%d columns: the number ends %.2f points before the next dash", n, next-end)
		}
	}
	if shown == 0 || hidden == 0 {
		t.Errorf("%d shown, %d hidden; the test has lost its grip", shown, hidden)
	}
}
