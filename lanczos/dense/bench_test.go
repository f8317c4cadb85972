package dense

import (
	"math/rand/v2"
	"strconv"
	"testing"
	"time"

	"gonum.org/v1/gonum/blas"
	blasgonum "gonum.org/v1/gonum/blas/gonum"
	"gonum.org/v1/gonum/lapack"
	"gonum.org/v1/gonum/lapack/gonum"
)

// BenchmarkEigen reports the time of EigenComplex and EigenReal with vectors in
// units of gonum's real Dsyev and of one real product of matrices (2n³
// operations), all of the same n in the same run.
func BenchmarkEigen(b *testing.B) {
	for _, n := range []int{200, 500, 1000} {
		b.Run(strconv.Itoa(n), func(b *testing.B) {
			r := rand.New(rand.NewPCG(21, 1))
			a, h := randomSymmetric(r, n), randomHermitian(r, n)
			var complexTime, realTime, library, product time.Duration
			for b.Loop() {
				complexTime += timed(func() { must(EigenComplex(h, n, true)) })
				realTime += timed(func() { must(EigenReal(a, n, true)) })
				library += timed(func() { librarySymmetric(a, n) })
				product += timed(func() {
					c := make([]float64, n*n)
					blasgonum.Implementation{}.Dgemm(blas.NoTrans, blas.NoTrans, n, n, n, 1, a, n, a, n, 0, c, n)
				})
			}
			b.ReportMetric(float64(complexTime)/float64(library), "complex/gonum-real")
			b.ReportMetric(float64(realTime)/float64(library), "real/gonum-real")
			b.ReportMetric(float64(complexTime)/float64(product), "complex/product")
		})
	}
}

// BenchmarkSingular reports SingularComplex in units of SingularReal.
func BenchmarkSingular(b *testing.B) {
	for _, n := range []int{200, 500, 1000} {
		b.Run(strconv.Itoa(n), func(b *testing.B) {
			r := rand.New(rand.NewPCG(22, 1))
			a, z := randomSymmetric(r, n), randomComplex(r, n*n)
			var complexTime, realTime time.Duration
			for b.Loop() {
				complexTime += timed(func() { mustSingular(SingularComplex(z, n, n)) })
				realTime += timed(func() { mustSingular(SingularReal(a, n, n)) })
			}
			b.ReportMetric(float64(complexTime)/float64(realTime), "complex/real")
		})
	}
}

func timed(f func()) time.Duration {
	start := time.Now()
	f()
	return time.Since(start)
}

func must[T any](_ []float64, _ []T, err error) {
	if err != nil {
		panic(err)
	}
}

func mustSingular(_ []float64, err error) {
	if err != nil {
		panic(err)
	}
}

func librarySymmetric(a []float64, n int) {
	m, w := append([]float64(nil), a...), make([]float64, n)
	var size [1]float64
	impl := gonum.Implementation{}
	impl.Dsyev(lapack.EVCompute, blas.Lower, n, m, n, w, size[:], -1)
	work := make([]float64, int(size[0]))
	impl.Dsyev(lapack.EVCompute, blas.Lower, n, m, n, w, work, len(work))
}
