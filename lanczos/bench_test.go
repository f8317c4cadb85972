package lanczos

import (
	"context"
	"strconv"
	"testing"
	"time"
)

// BenchmarkOrthogonalise reports the time of the additions of one step, against 24
// vectors, in units of the time of reading these vectors twice, which no method that
// reorthogonalises fully can avoid. The reading adds squares with the same workers.
func BenchmarkOrthogonalise(b *testing.B) {
	const n, vectors = 1 << 20, 24
	b.Run("real", func(b *testing.B) { benchmarkStep(b, idle(n, false), realField{}, vectors) })
	b.Run("complex", func(b *testing.B) { benchmarkStep(b, idle(n/2, true), complexField{}, vectors) })
}

// idle is the cheapest product that does not exhaust a Krylov space: hopping on an
// open chain.
func idle(n int, isComplex bool) Operator {
	if isComplex {
		return ComplexFunc(n, func(dst, src []complex128) {
			copy(dst[1:], src)
			dst[0] = 0
			for i := range n - 1 {
				dst[i] += src[i+1]
			}
		})
	}
	return RealFunc(n, func(dst, src []float64) {
		copy(dst[1:], src)
		dst[0] = 0
		for i := range n - 1 {
			dst[i] += src[i+1]
		}
	})
}

func benchmarkStep[T scalar](b *testing.B, op Operator, f field[T], vectors int) {
	s, err := resolve(op, 1, &Options{Krylov: vectors + 1})
	if err != nil {
		b.Fatal(err)
	}
	search := newSearch(context.Background(), op, s, f)
	defer search.space.crew.close()
	search.randomStart()
	for range vectors {
		if err := search.step(); err != nil {
			b.Fatal(err)
		}
	}
	var step, product, read time.Duration
	for b.Loop() {
		start := time.Now()
		f.apply(op, search.basis[vectors], search.basis[vectors-1])
		product += time.Since(start)
		search.matrix.size = vectors - 1
		start = time.Now()
		if err := search.step(); err != nil {
			b.Fatal(err)
		}
		step += time.Since(start)
		start = time.Now()
		for range 2 {
			for _, v := range search.basis[:vectors] {
				search.space.norm(v)
			}
		}
		read += time.Since(start)
	}
	b.ReportMetric(float64(step-product)/float64(read), "additions/reading")
}

// BenchmarkCondense reports the time of a restart, 32 vectors to 13, in units of one
// reading of the 32 vectors.
func BenchmarkCondense(b *testing.B) {
	const n = 1 << 19
	b.Run("real", func(b *testing.B) { benchmarkCondense(b, idle(n, false), realField{}) })
	b.Run("complex", func(b *testing.B) { benchmarkCondense(b, idle(n/2, true), complexField{}) })
}

func benchmarkCondense[T scalar](b *testing.B, op Operator, f field[T]) {
	s, err := resolve(op, 1, &Options{Krylov: 32})
	if err != nil {
		b.Fatal(err)
	}
	search := newSearch(context.Background(), op, s, f)
	defer search.space.crew.close()
	for _, v := range search.basis {
		search.space.fillRandom(v, 1)
	}
	u := make([]T, 32*13)
	for i := range u {
		u[i] = f.number(1.0 / 32)
	}
	var rotate, read time.Duration
	for b.Loop() {
		start := time.Now()
		search.space.rotate(search.basis[:13], search.basis[:32], u)
		rotate += time.Since(start)
		start = time.Now()
		for _, v := range search.basis[:32] {
			search.space.norm(v)
		}
		read += time.Since(start)
	}
	b.ReportMetric(float64(rotate)/float64(read), "rotation/reading")
}

// BenchmarkCrossover reports a search for four levels in units of the
// diagonalisation of the whole matrix of the same operator, a full matrix.
func BenchmarkCrossover(b *testing.B) {
	for _, n := range []int{60, 100, 150, 200, 300, 500} {
		b.Run(strconv.Itoa(n), func(b *testing.B) {
			op := prescribed(bulk(n, -3, -2.5, -2, -1.9), 1, true)
			s, err := resolve(op, 4, &Options{Krylov: 32})
			if err != nil {
				b.Fatal(err)
			}
			var run, all time.Duration
			for b.Loop() {
				start := time.Now()
				search := newSearch(context.Background(), op, s, complexField{})
				if _, err := search.find(); err != nil {
					b.Fatal(err)
				}
				search.space.crew.close()
				run += time.Since(start)
				start = time.Now()
				if _, err := whole(context.Background(), op, s, complexField{}); err != nil {
					b.Fatal(err)
				}
				all += time.Since(start)
			}
			b.ReportMetric(float64(run)/float64(all), "search/whole")
		})
	}
}
