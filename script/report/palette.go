package report

import "image/color"

// The colours of M. Okabe and K. Ito, Color Universal Design (2008); the numbers
// are those printed by B. Wong, Nature Methods 8, 441 (2011) (from memory).
var (
	orange        = color.RGBA{230, 159, 0, 255}
	skyBlue       = color.RGBA{86, 180, 233, 255}
	bluishGreen   = color.RGBA{0, 158, 115, 255}
	blue          = color.RGBA{0, 114, 178, 255}
	vermilion     = color.RGBA{213, 94, 0, 255}
	reddishPurple = color.RGBA{204, 121, 167, 255}
	black         = color.RGBA{0, 0, 0, 255}
)

// Tones of the drawing itself.
var (
	white  = color.RGBA{255, 255, 255, 255}
	ink    = color.RGBA{40, 40, 40, 255}
	muted  = color.RGBA{110, 110, 110, 255}
	ruling = color.RGBA{226, 226, 226, 255}

	gapTint       = color.RGBA{221, 240, 251, 255}
	predictedTint = color.RGBA{251, 232, 196, 255}
)

// series returns the colour of series i. The yellow of the set is left out: it is
// too pale for lines on white.
func series(i int) color.RGBA {
	colours := []color.RGBA{blue, vermilion, bluishGreen, reddishPurple, orange, skyBlue, black}
	return colours[i%len(colours)]
}

// overlap is the tint where two tints meet, half way between them.
func overlap(a, b color.RGBA) color.RGBA {
	mean := func(x, y uint8) uint8 { return uint8((int(x) + int(y)) / 2) }
	return color.RGBA{mean(a.R, b.R), mean(a.G, b.G), mean(a.B, b.B), 255}
}
