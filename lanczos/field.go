package lanczos

import (
	"math"
	"math/cmplx"

	blasgonum "gonum.org/v1/gonum/blas/gonum"

	"ketloom/lanczos/dense"
)

type scalar interface{ float64 | complex128 }

// field is the arithmetic of real or complex vectors of one block.
type field[T scalar] interface {
	dot(x, y []T) T        // x†y
	add(a T, x, y []T)     // y += a x
	scale(a T, x []T)      // x *= a
	square(x []T) float64  // x†x
	largest(x []T) float64 // largest magnitude, up to √2; NaN and Inf survive
	number(x float64) T
	parts(z T) (re, im float64)
	fill(dst []T, stream uint64, first int) // normal deviates
	apply(op Operator, dst, src []T)
	eigen(a []T, n int) ([]float64, []T, error)
	vector(x []T) Vector
	read(v Vector) []T // nil where v is of the other kind
}

type realField struct{}

func (realField) dot(x, y []float64) float64 {
	return blasgonum.Implementation{}.Ddot(len(x), x, 1, y, 1)
}

func (realField) add(a float64, x, y []float64) {
	blasgonum.Implementation{}.Daxpy(len(x), a, x, 1, y, 1)
}

func (realField) scale(a float64, x []float64) {
	for i := range x {
		x[i] *= a
	}
}

func (f realField) square(x []float64) float64 { return f.dot(x, x) }

func (realField) largest(x []float64) float64 {
	top := 0.0
	for _, a := range x {
		top = max(top, math.Abs(a))
	}
	return top
}

func (realField) number(x float64) float64           { return x }
func (realField) parts(x float64) (float64, float64) { return x, 0 }

func (realField) fill(dst []float64, stream uint64, first int) {
	for i := range dst {
		dst[i], _ = gaussian(stream, first+i)
	}
}

func (realField) apply(op Operator, dst, src []float64) { op.Apply(dst, src) }

func (realField) eigen(a []float64, n int) ([]float64, []float64, error) {
	return dense.EigenReal(a, n, true)
}

func (realField) vector(x []float64) Vector { return Vector{Real: x} }

func (realField) read(v Vector) []float64 { return v.Real }

type complexField struct{}

func (complexField) dot(x, y []complex128) complex128 {
	return blasgonum.Implementation{}.Zdotc(len(x), x, 1, y, 1)
}

func (complexField) add(a complex128, x, y []complex128) {
	blasgonum.Implementation{}.Zaxpy(len(x), a, x, 1, y, 1)
}

func (complexField) scale(a complex128, x []complex128) {
	if imag(a) == 0 {
		for i, z := range x {
			x[i] = complex(real(a)*real(z), real(a)*imag(z))
		}
		return
	}
	for i := range x {
		x[i] *= a
	}
}

func (complexField) square(x []complex128) float64 {
	var a, b float64
	for _, z := range x {
		a += real(z) * real(z)
		b += imag(z) * imag(z)
	}
	return a + b
}

func (complexField) largest(x []complex128) float64 {
	top := 0.0
	for _, z := range x {
		top = max(top, math.Abs(real(z)), math.Abs(imag(z)))
	}
	return top
}

func (complexField) number(x float64) complex128           { return complex(x, 0) }
func (complexField) parts(z complex128) (float64, float64) { return real(z), imag(z) }

func (complexField) fill(dst []complex128, stream uint64, first int) {
	for i := range dst {
		dst[i] = complex(gaussian(stream, first+i))
	}
}

func (complexField) apply(op Operator, dst, src []complex128) { op.ApplyComplex(dst, src) }

func (complexField) eigen(a []complex128, n int) ([]float64, []complex128, error) {
	return dense.EigenComplex(a, n, true)
}

func (complexField) vector(x []complex128) Vector { return Vector{Complex: x} }

func (complexField) read(v Vector) []complex128 { return v.AsComplex() }

// magnitude returns |z|.
func magnitude[T scalar](f field[T], z T) float64 {
	re, im := f.parts(z)
	return cmplx.Abs(complex(re, im))
}

// conjugate returns the complex conjugate of z.
func conjugate[T scalar](z T) T {
	if c, ok := any(z).(complex128); ok {
		return any(cmplx.Conj(c)).(T)
	}
	return z
}
