package matrix

import (
	"math"

	"ketloom/basis"
)

// weights are the norms that the elements of a row leave out: element (i, j) is
// to be multiplied by column(j)·row(i), with
//
//	column(j) = |G_j|^½ (over |G|^½ where the target has no symmetry and the
//	source has one),   row(i) = |G_i|^(-½).
//
// Products scale the source before and the result after.
type weights struct {
	from, to []uint16  // stabilisers, less one; nil where all weights are one
	columns  []float64 // by stabiliser, less one
	rows     []float64
}

func newWeights(to, from *basis.Basis) weights {
	w := weights{}
	unfold := to.GroupOrder() == 1 && from.GroupOrder() > 1
	if unfold || !free(from) {
		w.from = from.Stabilisers()
		for size := 1; size <= from.GroupOrder(); size++ {
			x := float64(size)
			if unfold {
				x /= float64(from.GroupOrder())
			}
			w.columns = append(w.columns, math.Sqrt(x))
		}
	}
	if !free(to) {
		w.to = to.Stabilisers()
		for size := 1; size <= to.GroupOrder(); size++ {
			w.rows = append(w.rows, 1/math.Sqrt(float64(size)))
		}
	}
	return w
}

// free reports whether no symmetry keeps any representative.
func free(b *basis.Basis) bool {
	for _, s := range b.Stabilisers() {
		if s > 0 {
			return false
		}
	}
	return true
}

func (w *weights) column(j int) float64 {
	if w.from == nil {
		return 1
	}
	return w.columns[w.from[j]]
}

func (w *weights) row(i int) float64 {
	if w.to == nil {
		return 1
	}
	return w.rows[w.to[i]]
}
