// Package lanczostest checks that a lanczos.Operator keeps the rules of that
// interface. It is meant for the tests of packages that offer operators:
//
//	op := lanczos.RealFunc(dim, product)
//	if err := lanczostest.Check(op, 1); err != nil {
//		t.Error(err)
//	}
//
// A few random vectors find gross mistakes with certainty and a single wrong
// element only where its effect exceeds Tolerance; they prove nothing for all
// vectors. The package imports package lanczos only.
package lanczostest

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"

	"ketloom/lanczos"
)

// Tolerance is the largest violation of linearity and Hermiticity that counts as
// rounding, in units of the norms of the products involved.
const Tolerance = 1e-12

// Check multiplies random vectors, drawn from seed, by op and returns nil or one
// error that joins all violations: the dimension is positive; a product overwrites
// all of dst whatever was there, leaves src as it is, and has the same bits when
// repeated; products are linear over the scalars and Hermitian, ⟨x|Hy⟩ = ⟨Hx|y⟩;
// a real operator gives the same for real and for complex vectors.
// It takes 8 products, for a real operator 12.
func Check(op lanczos.Operator, seed uint64) error {
	if op == nil || op.Dim() < 1 {
		return errors.New("lanczostest: nil operator or dimension below 1")
	}
	r := rand.New(rand.NewPCG(seed, 0x6f70657261746f72))
	c := &checker{op: op, n: op.Dim(), random: r, complexScalars: true, multiply: op.ApplyComplex}
	if op.Real() {
		c.complexScalars, c.multiply = false, c.realProduct
	}
	c.bits()
	c.linear()
	c.hermitian()
	if op.Real() {
		c.realAndComplex()
	}
	return errors.Join(c.found...)
}

// checker keeps vectors as complex ones; for a real operator the imaginary parts
// are zero and realProduct does the work.
type checker struct {
	op             lanczos.Operator
	n              int
	random         *rand.Rand
	complexScalars bool
	multiply       func(dst, src []complex128)
	found          []error
}

func (c *checker) report(format string, values ...any) {
	c.found = append(c.found, fmt.Errorf("lanczostest: "+format, values...))
}

func (c *checker) realProduct(dst, src []complex128) {
	from, to := make([]float64, c.n), make([]float64, c.n)
	for i := range src {
		from[i], to[i] = real(src[i]), real(dst[i])
	}
	c.op.Apply(to, from)
	for i := range dst {
		src[i], dst[i] = complex(from[i], imag(src[i])), complex(to[i], 0)
	}
}

func (c *checker) number() complex128 {
	if c.complexScalars {
		return complex(c.random.NormFloat64(), c.random.NormFloat64())
	}
	return complex(c.random.NormFloat64(), 0)
}

func (c *checker) vector() []complex128 {
	x := make([]complex128, c.n)
	for i := range x {
		x[i] = c.number()
	}
	return x
}

func (c *checker) product(src []complex128) []complex128 {
	dst := make([]complex128, c.n)
	c.multiply(dst, src)
	return dst
}

// bits checks that dst is overwritten, src is left alone and bits repeat.
func (c *checker) bits() {
	src := c.vector()
	before := append([]complex128(nil), src...)
	first := c.product(src)
	for i := range src {
		if src[i] != before[i] {
			c.report("product changed component %d of src from %v to %v", i, before[i], src[i])
			break
		}
	}
	copy(src, before)
	second := make([]complex128, c.n)
	for i := range second {
		second[i] = cmplx.NaN()
	}
	c.multiply(second, src)
	for i := range first {
		if cmplx.IsNaN(first[i]) || cmplx.IsInf(first[i]) {
			c.report("component %d of a product is %v; expected finite numbers", i, first[i])
			return
		}
		if cmplx.IsNaN(second[i]) {
			c.report("component %d of dst is not overwritten but added to or left", i)
			return
		}
		if first[i] != second[i] {
			c.report("component %d of equal products is %v and %v; expected the same bits", i, first[i], second[i])
			return
		}
	}
}

func (c *checker) linear() {
	x, y, a, b := c.vector(), c.vector(), c.number(), c.number()
	sum := make([]complex128, c.n)
	for i := range sum {
		sum[i] = a*x[i] + b*y[i]
	}
	hx, hy, hsum := c.product(x), c.product(y), c.product(sum)
	for i := range sum {
		hsum[i] -= a*hx[i] + b*hy[i]
	}
	allowed := Tolerance * (cmplx.Abs(a)*norm(hx) + cmplx.Abs(b)*norm(hy))
	if d := norm(hsum); !(d <= allowed) {
		c.report("product is not linear: ‖H(ax+by) - aHx - bHy‖ is %.3g; expected %.3g at most", d, allowed)
	}
}

func (c *checker) hermitian() {
	x, y := c.vector(), c.vector()
	hx, hy := c.product(x), c.product(y)
	d := cmplx.Abs(dot(x, hy) - dot(hx, y))
	allowed := Tolerance * (norm(hx)*norm(y) + norm(x)*norm(hy))
	if !(d <= allowed) {
		c.report("operator is not Hermitian: |⟨x|Hy⟩ - ⟨Hx|y⟩| is %.3g; expected %.3g at most", d, allowed)
	}
}

// realAndComplex compares a complex product with those of the two parts.
func (c *checker) realAndComplex() {
	z, dst := make([]complex128, c.n), make([]complex128, c.n)
	re, im := c.vector(), c.vector()
	for i := range z {
		z[i] = complex(real(re[i]), real(im[i]))
	}
	c.op.ApplyComplex(dst, z)
	hre, him := c.product(re), c.product(im)
	allowed := Tolerance * (norm(hre) + norm(him))
	for i := range dst {
		dst[i] -= complex(real(hre[i]), real(him[i]))
	}
	if d := norm(dst); !(d <= allowed) {
		c.report("complex product of a real operator differs from its real products by %.3g; expected %.3g at most", d, allowed)
	}
}

func dot(x, y []complex128) complex128 {
	var sum complex128
	for i := range x {
		sum += cmplx.Conj(x[i]) * y[i]
	}
	return sum
}

func norm(x []complex128) float64 {
	sum := 0.0
	for _, z := range x {
		sum += real(z)*real(z) + imag(z)*imag(z)
	}
	return math.Sqrt(sum)
}
