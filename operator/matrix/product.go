package matrix

import (
	"sync"
	"sync/atomic"

	"ketloom/basis/pages"
)

// product is the working memory of products: the source with its weights.
type product struct {
	real    []float64
	complex []complex128
}

// Apply computes dst = M src for a real matrix: len(dst) = Rows(), len(src) =
// Columns(), no overlap. dst is overwritten. A complex matrix or a wrong length
// panics.
func (m *Matrix) Apply(dst, src []float64) {
	if !m.plan.Real {
		panic("matrix: Apply on a complex matrix; use ApplyComplex")
	}
	if len(dst) != m.plan.Rows || len(src) != m.plan.Columns {
		panic("matrix: vector length does not match the matrix")
	}
	weighted := m.weighted(src)
	m.share(m.plan.Rows, func(first, last int, s *scratch) {
		if m.store == nil {
			m.applyReal(dst, weighted, src, first, last, s)
			return
		}
		m.store.sumReal(dst, weighted, first, last)
		m.finish(dst, src, first, last)
	})
}

// weighted returns the source with the weights of its norms.
func (m *Matrix) weighted(src []float64) []float64 {
	w := &m.rows.weights
	if w.from == nil {
		return src
	}
	if m.product.real == nil {
		m.product.real = pages.Floats(m.plan.Columns)
	}
	dst := m.product.real
	m.share(m.plan.Columns, func(first, last int, _ *scratch) {
		for j := first; j < last; j++ {
			dst[j] = w.columns[w.from[j]] * src[j]
		}
	})
	return dst
}

// finish weights the sums of the rows and adds the diagonal.
func (m *Matrix) finish(dst, src []float64, first, last int) {
	w, diagonal := &m.rows.weights, m.store.realDiagonal
	switch {
	case w.to != nil && diagonal != nil:
		to, rows := w.to[first:last], w.rows
		diagonal, src = diagonal[first:last], src[first:last]
		for i, x := range dst[first:last] {
			dst[first+i] = float64(rows[to[i]]*x) + float64(diagonal[i]*src[i])
		}
	case w.to != nil:
		for i := first; i < last; i++ {
			dst[i] *= w.rows[w.to[i]]
		}
	case diagonal != nil:
		for i := first; i < last; i++ {
			dst[i] += diagonal[i] * src[i]
		}
	}
}

// ApplyComplex computes dst = M src for any matrix, as Apply does.
func (m *Matrix) ApplyComplex(dst, src []complex128) {
	if len(dst) != m.plan.Rows || len(src) != m.plan.Columns {
		panic("matrix: vector length does not match the matrix")
	}
	weighted := m.weightedComplex(src)
	m.share(m.plan.Rows, func(first, last int, s *scratch) {
		if m.store == nil {
			m.applyComplex(dst, weighted, src, first, last, s)
			return
		}
		if m.store.real {
			m.store.sumRealOfComplex(dst, weighted, first, last)
		} else {
			m.store.sumComplex(dst, weighted, first, last)
		}
		m.finishComplex(dst, src, first, last)
	})
}

func (m *Matrix) weightedComplex(src []complex128) []complex128 {
	w := &m.rows.weights
	if w.from == nil {
		return src
	}
	if m.product.complex == nil {
		m.product.complex = pages.Complexes(m.plan.Columns)
	}
	dst := m.product.complex
	m.share(m.plan.Columns, func(first, last int, _ *scratch) {
		for j := first; j < last; j++ {
			f := w.columns[w.from[j]]
			dst[j] = complex(f*real(src[j]), f*imag(src[j]))
		}
	})
	return dst
}

func (m *Matrix) finishComplex(dst, src []complex128, first, last int) {
	if w := &m.rows.weights; w.to != nil {
		for i := first; i < last; i++ {
			f := w.row(i)
			dst[i] = complex(f*real(dst[i]), f*imag(dst[i]))
		}
	}
	for i := first; i < last; i++ {
		switch {
		case m.store.realDiagonal != nil:
			d := m.store.realDiagonal[i]
			dst[i] += complex(d*real(src[i]), d*imag(src[i]))
		case m.store.diagonal != nil:
			dst[i] += times(m.store.diagonal[i], src[i])
		}
	}
}

// share calls work with blocks of 0 … n-1 from Workers goroutines until all are
// done. Each row is computed by one goroutine in a fixed order, so that the
// result does not depend on the number of goroutines.
func (m *Matrix) share(n int, work func(first, last int, s *scratch)) {
	blocks := (n + blockRows - 1) / blockRows
	workers := min(m.workers, blocks)
	if workers <= 1 {
		for b := range blocks {
			work(b*blockRows, min((b+1)*blockRows, n), &m.scratch[0])
		}
		return
	}
	var next atomic.Int64
	var wg sync.WaitGroup
	for w := range workers {
		wg.Add(1)
		go func(s *scratch) {
			defer wg.Done()
			for {
				b := int(next.Add(1)) - 1
				if b >= blocks {
					return
				}
				work(b*blockRows, min((b+1)*blockRows, n), s)
			}
		}(&m.scratch[w])
	}
	wg.Wait()
}

// applyReal computes rows on the fly, with the same sums as a store.
func (m *Matrix) applyReal(dst, weighted, src []float64, first, last int, s *scratch) {
	for i := first; i < last; i++ {
		diagonal := real(m.rows.row(i, s))
		a, b := 0.0, 0.0
		for n, column := range s.columns {
			x := weighted[column]
			if !m.plan.uniform {
				x *= real(s.values[n])
			}
			if n%2 == 0 {
				a += x
			} else {
				b += x
			}
		}
		sum := a + b
		if m.plan.uniform {
			sum *= real(m.plan.value)
		}
		dst[i] = sum
		if m.rows.weights.to != nil {
			dst[i] *= m.rows.weights.row(i)
		}
		if m.rows.to == m.rows.from {
			dst[i] += diagonal * src[i]
		}
	}
}

func (m *Matrix) applyComplex(dst, weighted, src []complex128, first, last int, s *scratch) {
	for i := first; i < last; i++ {
		diagonal := m.rows.row(i, s)
		var re, im, re2, im2 float64
		for n, column := range s.columns {
			v, x := s.values[n], weighted[column]
			re += real(v) * real(x)
			re2 += imag(v) * imag(x)
			im += real(v) * imag(x)
			im2 += imag(v) * real(x)
		}
		dst[i] = complex(re-re2, im+im2)
		if m.rows.weights.to != nil {
			f := m.rows.weights.row(i)
			dst[i] = complex(f*real(dst[i]), f*imag(dst[i]))
		}
		if m.rows.to == m.rows.from {
			dst[i] += times(diagonal, src[i])
		}
	}
}

// times multiplies without the care for infinities that the * of complex
// numbers takes.
func times(a, b complex128) complex128 {
	return complex(real(a)*real(b)-imag(a)*imag(b), real(a)*imag(b)+imag(a)*real(b))
}
