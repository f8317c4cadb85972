package matrix

import (
	"sync"
	"sync/atomic"
)

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
	m.share(func(first, last int, s *scratch) {
		if m.store == nil {
			m.rows.applyReal(dst, src, first, last, s)
			return
		}
		m.store.applyReal(dst, src, first, last)
	})
}

// ApplyComplex computes dst = M src for any matrix, as Apply does.
func (m *Matrix) ApplyComplex(dst, src []complex128) {
	if len(dst) != m.plan.Rows || len(src) != m.plan.Columns {
		panic("matrix: vector length does not match the matrix")
	}
	m.share(func(first, last int, s *scratch) {
		switch {
		case m.store == nil:
			m.rows.applyComplex(dst, src, first, last, s)
		case m.store.real:
			m.store.applyRealToComplex(dst, src, first, last)
		default:
			m.store.applyComplex(dst, src, first, last)
		}
	})
}

// share calls work with blocks of rows from Workers goroutines until all are
// done. Each row is computed by one goroutine in a fixed order, so that the
// result does not depend on the number of goroutines.
func (m *Matrix) share(work func(first, last int, s *scratch)) {
	blocks := (m.plan.Rows + blockRows - 1) / blockRows
	workers := min(m.workers, blocks)
	if workers <= 1 {
		for b := range blocks {
			work(b*blockRows, min((b+1)*blockRows, m.plan.Rows), &m.scratch[0])
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
				work(b*blockRows, min((b+1)*blockRows, m.plan.Rows), s)
			}
		}(&m.scratch[w])
	}
	wg.Wait()
}

func (r *rows) applyReal(dst, src []float64, first, last int, s *scratch) {
	for i := first; i < last; i++ {
		elements, diagonal := r.row(i, s)
		sum := 0.0
		if r.to == r.from {
			sum = real(diagonal) * src[i]
		}
		for _, e := range elements {
			sum += real(e.value) * src[e.column]
		}
		dst[i] = sum
	}
}

func (r *rows) applyComplex(dst, src []complex128, first, last int, s *scratch) {
	for i := first; i < last; i++ {
		elements, diagonal := r.row(i, s)
		var sum complex128
		if r.to == r.from {
			sum = times(diagonal, src[i])
		}
		for _, e := range elements {
			sum += times(e.value, src[e.column])
		}
		dst[i] = sum
	}
}

// times multiplies without the care for infinities that the * of complex
// numbers takes.
func times(a, b complex128) complex128 {
	return complex(real(a)*real(b)-imag(a)*imag(b), real(a)*imag(b)+imag(a)*real(b))
}

// value returns element n of the store.
func (s *store) value(n int64) complex128 {
	switch {
	case s.real && s.narrow != nil:
		return complex(s.realTable[s.narrow[n]], 0)
	case s.real && s.codes != nil:
		return complex(s.realTable[s.codes[n]], 0)
	case s.real:
		return complex(s.realValues[n], 0)
	case s.narrow != nil:
		return s.table[s.narrow[n]]
	case s.codes != nil:
		return s.table[s.codes[n]]
	}
	return s.values[n]
}

func (s *store) applyReal(dst, src []float64, first, last int) {
	for i := first; i < last; i++ {
		from, to := s.start[i], s.start[i+1]
		sum := 0.0
		if s.realDiagonal != nil {
			sum = s.realDiagonal[i] * src[i]
		}
		switch {
		case s.wide != nil:
			for n := from; n < to; n++ {
				sum += real(s.value(n)) * src[s.wide[n]]
			}
		case s.narrow != nil:
			codes := s.narrow[from:to]
			for n, column := range s.columns[from:to] {
				sum += s.realTable[codes[n]] * src[column]
			}
		case s.codes != nil:
			codes := s.codes[from:to]
			for n, column := range s.columns[from:to] {
				sum += s.realTable[codes[n]] * src[column]
			}
		default:
			values := s.realValues[from:to]
			for n, column := range s.columns[from:to] {
				sum += values[n] * src[column]
			}
		}
		dst[i] = sum
	}
}

func (s *store) applyRealToComplex(dst, src []complex128, first, last int) {
	for i := first; i < last; i++ {
		var re, im float64
		if s.realDiagonal != nil {
			re, im = s.realDiagonal[i]*real(src[i]), s.realDiagonal[i]*imag(src[i])
		}
		for n := s.start[i]; n < s.start[i+1]; n++ {
			v, x := real(s.value(n)), src[s.column(n)]
			re += v * real(x)
			im += v * imag(x)
		}
		dst[i] = complex(re, im)
	}
}

func (s *store) column(n int64) uint64 {
	if s.wide != nil {
		return s.wide[n]
	}
	return uint64(s.columns[n])
}

func (s *store) applyComplex(dst, src []complex128, first, last int) {
	for i := first; i < last; i++ {
		from, to := s.start[i], s.start[i+1]
		var re, im float64
		if s.diagonal != nil {
			d := times(s.diagonal[i], src[i])
			re, im = real(d), imag(d)
		}
		switch {
		case s.wide != nil:
			for n := from; n < to; n++ {
				p := times(s.value(n), src[s.wide[n]])
				re, im = re+real(p), im+imag(p)
			}
		case s.narrow != nil:
			codes := s.narrow[from:to]
			for n, column := range s.columns[from:to] {
				v, x := s.table[codes[n]], src[column]
				re += real(v)*real(x) - imag(v)*imag(x)
				im += real(v)*imag(x) + imag(v)*real(x)
			}
		case s.codes != nil:
			codes := s.codes[from:to]
			for n, column := range s.columns[from:to] {
				v, x := s.table[codes[n]], src[column]
				re += real(v)*real(x) - imag(v)*imag(x)
				im += real(v)*imag(x) + imag(v)*real(x)
			}
		default:
			values := s.values[from:to]
			for n, column := range s.columns[from:to] {
				v, x := values[n], src[column]
				re += real(v)*real(x) - imag(v)*imag(x)
				im += real(v)*imag(x) + imag(v)*real(x)
			}
		}
		dst[i] = complex(re, im)
	}
}
