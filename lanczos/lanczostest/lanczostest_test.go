package lanczostest_test

import (
	"fmt"
	"strings"
	"testing"

	"ketloom/lanczos"
	"ketloom/lanczos/lanczostest"
)

const n = 12

// ring is a good product that mistakes are added to.
func ring(dst, src []float64) {
	for i := range dst {
		dst[i] = src[(i+1)%n] + src[(i+n-1)%n] + float64(i)*src[i]
	}
}

func turned(dst, src []complex128) {
	for i := range dst {
		dst[i] = 1i*src[(i+1)%n] - 1i*src[(i+n-1)%n]
	}
}

// crossed says that it is real but multiplies complex vectors by another matrix.
type crossed struct{ lanczos.Operator }

func (crossed) ApplyComplex(dst, src []complex128) { turned(dst, src) }

func TestCheckAcceptsGoodOperators(t *testing.T) {
	for seed := range uint64(5) {
		if err := lanczostest.Check(lanczos.RealFunc(n, ring), seed); err != nil {
			t.Error(err)
		}
		if err := lanczostest.Check(lanczos.ComplexFunc(n, turned), seed); err != nil {
			t.Error(err)
		}
	}
}

func TestCheckFindsMistakes(t *testing.T) {
	calls := 0.0
	for says, op := range map[string]lanczos.Operator{
		"nil operator": nil,
		"below 1":      lanczos.RealFunc(0, ring),
		"not overwritten": lanczos.RealFunc(n, func(dst, src []float64) {
			last := dst[n-1]
			ring(dst, src)
			dst[n-1] += last
		}),
		"changed component 3": lanczos.RealFunc(n, func(dst, src []float64) { ring(dst, src); src[3] = 0 }),
		"same bits":           lanczos.RealFunc(n, func(dst, src []float64) { ring(dst, src); calls++; dst[0] += calls }),
		"finite":              lanczos.RealFunc(n, func(dst, src []float64) { ring(dst, src); dst[1] /= 0 * dst[2] }),
		"not linear":          lanczos.RealFunc(n, func(dst, src []float64) { ring(dst, src); dst[0] += src[0] * src[0] }),
		"not Hermitian":       lanczos.ComplexFunc(n, func(dst, src []complex128) { turned(dst, src); dst[0] += 1e-6 * src[5] }),
		"differs":             crossed{lanczos.RealFunc(n, ring)},
	} {
		err := lanczostest.Check(op, 1)
		if err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("%q: %v", says, err)
		}
	}
}

func ExampleCheck() {
	op := lanczos.RealFunc(2, func(dst, src []float64) {
		dst[0], dst[1] = src[1], src[0]
	})
	fmt.Println(lanczostest.Check(op, 1))
	// Output: <nil>
}
