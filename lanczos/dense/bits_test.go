package dense

import (
	"math/rand/v2"
	"runtime"
	"slices"
	"testing"
)

// The number of processors must not change a bit.
func TestBitsDoNotDependOnProcessors(t *testing.T) {
	r := rand.New(rand.NewPCG(31, 1))
	const n = 210
	h, a := randomHermitian(r, n), randomSymmetric(r, n)
	rect := randomComplex(r, n*300)
	type outcome struct {
		complexValues, realValues, singular []float64
		complexVectors                      []complex128
		realVectors                         []float64
	}
	run := func(processors int) (o outcome) {
		defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(processors))
		var err1, err2, err3 error
		o.complexValues, o.complexVectors, err1 = EigenComplex(h, n, true)
		o.realValues, o.realVectors, err2 = EigenReal(a, n, true)
		o.singular, err3 = SingularComplex(rect, n, 300)
		if err1 != nil || err2 != nil || err3 != nil {
			t.Fatal(err1, err2, err3)
		}
		return o
	}
	one := run(1)
	for _, processors := range []int{2, 3} {
		o := run(processors)
		if !slices.Equal(one.complexValues, o.complexValues) || !slices.Equal(one.complexVectors, o.complexVectors) ||
			!slices.Equal(one.realValues, o.realValues) || !slices.Equal(one.realVectors, o.realVectors) ||
			!slices.Equal(one.singular, o.singular) {
			t.Errorf("%d processors give other bits than one", processors)
		}
	}
}
