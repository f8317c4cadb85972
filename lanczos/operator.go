package lanczos

// Operator is a Hermitian operator H known only by its product with a vector.
//
// Where Real reports true, H is real symmetric: only Apply is called and the
// eigenvectors are real. Otherwise only ApplyComplex is called. Both write H·src
// over all of dst, leave src as it is and keep neither; dst and src have length Dim
// and never overlap. A product is asked for by one goroutine at a time and may use
// as many itself as it likes; equal src must give equal bits in dst, or results are
// not reproducible.
type Operator interface {
	Dim() int
	Real() bool
	Apply(dst, src []float64)
	ApplyComplex(dst, src []complex128)
}

// RealFunc makes an Operator of a function that multiplies real vectors by a real
// symmetric matrix of the given dimension.
func RealFunc(dim int, apply func(dst, src []float64)) Operator {
	return realFunc{dim, apply}
}

// ComplexFunc makes an Operator of a function that multiplies complex vectors by a
// complex Hermitian matrix of the given dimension.
func ComplexFunc(dim int, apply func(dst, src []complex128)) Operator {
	return complexFunc{dim, apply}
}

type realFunc struct {
	dim   int
	apply func(dst, src []float64)
}

func (f realFunc) Dim() int                 { return f.dim }
func (f realFunc) Real() bool               { return true }
func (f realFunc) Apply(dst, src []float64) { f.apply(dst, src) }

// ApplyComplex multiplies real and imaginary parts one after the other.
func (f realFunc) ApplyComplex(dst, src []complex128) {
	if len(dst) != f.dim || len(src) != f.dim {
		panic(panicLength)
	}
	from, to := make([]float64, f.dim), make([]float64, f.dim)
	for i, z := range src {
		from[i] = real(z)
	}
	f.apply(to, from)
	for i, x := range to {
		dst[i] = complex(x, 0)
	}
	for i, z := range src {
		from[i] = imag(z)
	}
	f.apply(to, from)
	for i, y := range to {
		dst[i] += complex(0, y)
	}
}

type complexFunc struct {
	dim   int
	apply func(dst, src []complex128)
}

func (f complexFunc) Dim() int   { return f.dim }
func (f complexFunc) Real() bool { return false }

func (f complexFunc) Apply(dst, src []float64) { panic(panicReal) }

func (f complexFunc) ApplyComplex(dst, src []complex128) { f.apply(dst, src) }

const (
	panicLength = "lanczos: length of a vector differs from the dimension of the operator"
	panicReal   = "lanczos: real product of an operator that is not real"
)
