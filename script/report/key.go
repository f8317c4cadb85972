package report

import "fmt"

// entry is one explanation in the key: a sample of the given width and its text.
// Without sample the text stands alone.
type entry struct {
	text   string
	sample func(s sheet, x, y, w float64)
}

const (
	sampleWidth = 13.0
	sampleGap   = 3.0
	entryGap    = 9.0
	keyRow      = 9.5
)

func (e entry) width() float64 {
	w := width(e.text, keySize)
	if e.sample != nil {
		w += sampleWidth + sampleGap
	}
	return w
}

// rowsOf puts the entries of a key into rows no longer than room.
func rowsOf(key []entry, room float64) ([][]entry, error) {
	var rows [][]entry
	used := 0.0
	for _, e := range key {
		w := e.width()
		if w > room {
			return nil, fmt.Errorf("%w: the entry %q of the key is %.0f mm long and has %.0f mm; shorten it or widen the page",
				ErrSize, unmarked(e.text), w/perMillimetre, room/perMillimetre)
		}
		if len(rows) == 0 || used+entryGap+w > room {
			rows, used = append(rows, nil), -entryGap
		}
		rows[len(rows)-1] = append(rows[len(rows)-1], e)
		used += entryGap + w
	}
	return rows, nil
}

// drawKey prints rows downwards; top is the upper edge of the first.
func (s sheet) drawKey(rows [][]entry, x, top float64) {
	for i, row := range rows {
		pen, base := x, top-float64(i)*keyRow-capital*keySize
		for _, e := range row {
			start := pen
			if e.sample != nil {
				e.sample(s, pen, base+capital*keySize/2, sampleWidth)
				start += sampleWidth + sampleGap
			}
			s.text(e.text, keySize, start, base, 0, ink)
			pen += e.width() + entryGap
		}
	}
}
