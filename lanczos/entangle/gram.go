package entangle

import (
	"context"
	"fmt"
	"sync"

	"ketloom/lanczos/dense"

	"gonum.org/v1/gonum/blas/gonum"
)

// gram returns the eigenvalues, descending, of the smaller of M M† and M†M of a
// block, for matrices that do not fit into memory. The matrix is made strip by
// strip, with a pass over all states for each.
func (k *cut) gram(ctx context.Context, l *layout, block int) ([]float64, error) {
	e := l.blocks[block]
	n, length := min(e.rows, e.columns), max(e.rows, e.columns)
	const copies = 4 // the Gram matrix and what its eigenvalues take
	if float64(n)*float64(n)*copies*float64(l.element()) > float64(k.options.Memory)/2 {
		return nil, fmt.Errorf("entangle: block %v has %d × %d amplitudes, too many for the limit of %d MiB; take a smaller part, resolve more charges, or raise Options.Memory", e.charges, e.rows, e.columns, k.options.Memory>>20)
	}
	g := &gramMatrix{n: n, workers: k.options.Workers, real: l.real}
	g.allocate()
	width := int(min(int64(length), max(1, k.options.Memory/4/l.element()/int64(n))))
	for from := 0; from < length; from += width {
		strip := &window{block: block, turned: e.rows > e.columns, column: from, rows: n, columns: min(width, length-from)}
		if err := k.fill(ctx, l, []*window{strip}); err != nil {
			return nil, err
		}
		g.add(strip)
	}
	weights, err := g.eigenvalues()
	if err != nil {
		return nil, fmt.Errorf("entangle: block %v: %w", e.charges, err)
	}
	return weights, nil
}

// gramMatrix is an n×n matrix, a sum of products P P†.
type gramMatrix struct {
	n, workers int
	real       bool
	re         []float64
	z          []complex128
}

func (g *gramMatrix) allocate() {
	if g.real {
		g.re = make([]float64, g.n*g.n)
	} else {
		g.z = make([]complex128, g.n*g.n)
	}
}

// tile is the number of columns that are multiplied at a time, to stay in the
// cache.
const tile = 512

// add adds P P† of a strip, lower triangle only, in a fixed order.
func (g *gramMatrix) add(p *window) {
	var wg sync.WaitGroup
	for w := range g.workers {
		wg.Go(func() {
			for from := 0; from < p.columns; from += tile {
				for i := w; i < g.n; i += g.workers {
					g.addRow(p, i, from, min(from+tile, p.columns))
				}
			}
		})
	}
	wg.Wait()
}

func (g *gramMatrix) addRow(p *window, i, from, to int) {
	impl := gonum.Implementation{}
	at := func(row int) int { return row*p.columns + from }
	for j := range i + 1 {
		if g.real {
			g.re[i*g.n+j] += impl.Ddot(to-from, p.real[at(i):], 1, p.real[at(j):], 1)
		} else {
			g.z[i*g.n+j] += impl.Zdotc(to-from, p.complex[at(j):], 1, p.complex[at(i):], 1)
		}
	}
}

// eigenvalues completes the matrix and returns its eigenvalues, descending: they
// are its singular values, since it is positive up to rounding.
func (g *gramMatrix) eigenvalues() ([]float64, error) {
	for i := range g.n {
		for j := range i {
			if g.real {
				g.re[j*g.n+i] = g.re[i*g.n+j]
			} else {
				z := g.z[i*g.n+j]
				g.z[j*g.n+i] = complex(real(z), -imag(z))
			}
		}
	}
	if g.real {
		return dense.SingularReal(g.re, g.n, g.n)
	}
	return dense.SingularComplex(g.z, g.n, g.n)
}
