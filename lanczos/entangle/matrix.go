package entangle

import (
	"context"
	"math"
)

// window is a rectangle of the matrix of a block, held in memory row after row.
type window struct {
	block         int
	turned        bool // rows of the window are columns of the block
	row, column   int  // first row and column
	rows, columns int
	real          []float64 // exactly one of both is set
	complex       []complex128
}

// element is the number of bytes of an amplitude.
func (l *layout) element() int64 {
	if l.real {
		return 8
	}
	return 16
}

// whole is the window of all of a block.
func (l *layout) whole(block int) *window {
	return &window{block: block, rows: l.blocks[block].rows, columns: l.blocks[block].columns}
}

// allocate makes an empty matrix.
func (w *window) allocate(isReal bool) {
	if isReal {
		w.real = make([]float64, w.rows*w.columns)
	} else {
		w.complex = make([]complex128, w.rows*w.columns)
	}
}

// put sets an element of the block, if it is in the window.
func (w *window) put(row, column int, z complex128) {
	if w.turned {
		row, column = column, row
	}
	row, column = row-w.row, column-w.column
	if uint(row) >= uint(w.rows) || uint(column) >= uint(w.columns) {
		return
	}
	if w.real != nil {
		w.real[row*w.columns+column] = real(z)
	} else {
		w.complex[row*w.columns+column] = z
	}
}

// fill sets the elements of the windows, at most one a block. Every element is
// written once, so that workers do not meet.
func (k *cut) fill(ctx context.Context, l *layout, windows []*window) error {
	of := make([]*window, len(l.blocks))
	for _, w := range windows {
		w.allocate(l.real)
		of[w.block] = w
	}
	scale := 1 / math.Sqrt(float64(len(k.states)))
	return k.sweep(ctx, "amplitudes", func(_, state, from, to int) {
		columns := l.columns[state]
		var amplitude complex128
		emit := func(a, b uint64, factor float64) bool {
			block, row := unpacked(l.rows.get(a))
			if w := of[block]; w != nil {
				w.put(row, int(columns.get(b)), amplitude*complex(factor*scale, 0))
			}
			return true
		}
		k.states[state].each(from, to, func(c uint64, z complex128) {
			amplitude = z
			k.split(c, emit)
		})
	})
}
