package matrix

import (
	"context"
	"testing"
	"time"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/pages"
	"ketloom/operator"
)

// ring returns the Heisenberg ring of n sites in the sector of S_z = 0 and
// momentum index k.
func ring(b *testing.B, n, k int) (operator.Operator, *basis.Basis) {
	b.Helper()
	space, err := basis.Uniform(n, basis.SpinHalf())
	if err != nil {
		b.Fatal(err)
	}
	o := operator.On(space)
	h := o.Zero()
	p := make(group.Permutation, n)
	for i := range n {
		h = h.Plus(o.Dot(i, (i+1)%n))
		p[i] = (i + 1) % n
	}
	states, err := basis.New(context.Background(), space, basis.Sector{
		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: []group.Eigenvalue{{Generator: group.Translate(p), Turn: group.NewTurn(int64(-k), int64(n))}},
	}, nil)
	if err != nil {
		b.Fatal(err)
	}
	return h, states
}

// gatherReal reads the entries of src that a product reads, in the same order,
// with one addition each: the limit that a stored product is measured against.
func (m *Matrix) gatherReal(dst, src []float64) {
	m.share(m.plan.Rows, func(first, last int, _ *scratch) {
		for i := first; i < last; i++ {
			sum := 0.0
			for _, column := range m.store.columns[m.store.start[i]:m.store.start[i+1]] {
				sum += src[column]
			}
			dst[i] = sum
		}
	})
}

// gatherComplex is the same for complex vectors.
func (m *Matrix) gatherComplex(dst, src []complex128) {
	m.share(m.plan.Rows, func(first, last int, _ *scratch) {
		for i := first; i < last; i++ {
			var re, im float64
			for _, column := range m.store.columns[m.store.start[i]:m.store.start[i+1]] {
				re += real(src[column])
				im += imag(src[column])
			}
			dst[i] = complex(re, im)
		}
	})
}

// report times a product against its limit, turn by turn in the same run, and
// reports nanoseconds an element and the ratio.
func report(b *testing.B, elements int64, product, limit func()) {
	b.Helper()
	product()
	limit()
	var work, bound time.Duration
	for b.Loop() {
		t := time.Now()
		product()
		work += time.Since(t)
		t = time.Now()
		limit()
		bound += time.Since(t)
	}
	b.ReportMetric(float64(work.Nanoseconds())/float64(b.N)/float64(elements), "ns/element")
	b.ReportMetric(work.Seconds()/bound.Seconds(), "times-limit")
}

// BenchmarkStoredReal: 24 spins at momentum 0, 112,720 states; limit: the bare
// gather.
func BenchmarkStoredReal(b *testing.B) {
	h, states := ring(b, 24, 0)
	m, err := New(context.Background(), h, states, nil)
	if err != nil {
		b.Fatal(err)
	}
	src, dst := make([]float64, m.Columns()), make([]float64, m.Rows())
	report(b, m.plan.Elements, func() { m.Apply(dst, src) }, func() { m.gatherReal(dst, src) })
	b.ReportMetric(float64(m.plan.Bytes)/float64(m.plan.Elements), "bytes/element")
}

// BenchmarkStoredComplex: 24 spins at momentum 2π/24; limit: the bare gather.
func BenchmarkStoredComplex(b *testing.B) {
	h, states := ring(b, 24, 1)
	m, err := New(context.Background(), h, states, nil)
	if err != nil {
		b.Fatal(err)
	}
	src, dst := make([]complex128, m.Columns()), make([]complex128, m.Rows())
	report(b, m.plan.Elements, func() { m.ApplyComplex(dst, src) }, func() { m.gatherComplex(dst, src) })
	b.ReportMetric(float64(m.plan.Bytes)/float64(m.plan.Elements), "bytes/element")
}

// BenchmarkOnTheFly: the same sector; limit: the stored product.
func BenchmarkOnTheFly(b *testing.B) {
	h, states := ring(b, 24, 0)
	stored, err := New(context.Background(), h, states, nil)
	if err != nil {
		b.Fatal(err)
	}
	m, err := New(context.Background(), h, states, &Options{Form: OnTheFly})
	if err != nil {
		b.Fatal(err)
	}
	src, dst := make([]float64, m.Columns()), make([]float64, m.Rows())
	report(b, stored.plan.Elements, func() { m.Apply(dst, src) }, func() { stored.Apply(dst, src) })
}

// BenchmarkBuild: the stored form; limit: one product on the fly, which
// computes the same rows.
func BenchmarkBuild(b *testing.B) {
	h, states := ring(b, 24, 0)
	m, err := New(context.Background(), h, states, &Options{Form: OnTheFly})
	if err != nil {
		b.Fatal(err)
	}
	src, dst := make([]float64, m.Columns()), make([]float64, m.Rows())
	elements := int64(0)
	report(b, 1, func() {
		stored, err := New(context.Background(), h, states, nil)
		if err != nil {
			b.Fatal(err)
		}
		elements = stored.plan.Elements
	}, func() { m.Apply(dst, src) })
	b.ReportMetric(b.Elapsed().Seconds()*1e9/2/float64(b.N)/float64(elements), "ns/element")
}

// torus returns the Heisenberg model on an l1×l2 square torus with all translations,
// two reflections and spin inversion.
func torus(b *testing.B, l1, l2 int) (operator.Operator, *basis.Basis) {
	b.Helper()
	n := l1 * l2
	space, err := basis.Uniform(n, basis.SpinHalf())
	if err != nil {
		b.Fatal(err)
	}
	site := func(x, y int) int { return (x+2*l1)%l1 + l1*((y+2*l2)%l2) }
	move := func(f func(x, y int) (int, int)) group.Eigenvalue {
		p := make(group.Permutation, n)
		for x := range l1 {
			for y := range l2 {
				p[site(x, y)] = site(f(x, y))
			}
		}
		return group.Eigenvalue{Generator: group.Translate(p)}
	}
	o := operator.On(space)
	var terms []operator.Operator
	for x := range l1 {
		for y := range l2 {
			terms = append(terms, o.Dot(site(x, y), site(x+1, y)), o.Dot(site(x, y), site(x, y+1)))
		}
	}
	states, err := basis.New(context.Background(), space, basis.Sector{
		Charges: []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: []group.Eigenvalue{
			move(func(x, y int) (int, int) { return x + 1, y }), move(func(x, y int) (int, int) { return x, y + 1 }),
			move(func(x, y int) (int, int) { return -x, y }), move(func(x, y int) (int, int) { return x, -y }),
			{Generator: group.Relabel(n, []int{1, 0})},
		},
	}, nil)
	if err != nil {
		b.Fatal(err)
	}
	return operator.Sum(terms), states
}

// BenchmarkStoredSquare30: 6×5 sites, 240 symmetries, 650,000 states; limit: the bare
// gather.
func BenchmarkStoredSquare30(b *testing.B) {
	h, states := torus(b, 6, 5)
	m, err := New(context.Background(), h, states, nil)
	if err != nil {
		b.Fatal(err)
	}
	src, dst := pages.Floats(m.Columns()), pages.Floats(m.Rows())
	report(b, m.plan.Elements, func() { m.Apply(dst, src) }, func() { m.gatherReal(dst, src) })
	b.ReportMetric(float64(m.plan.Bytes)/float64(m.plan.Elements), "bytes/element")
}

// BenchmarkOnTheFlySquare30: the same; limit: the stored product.
func BenchmarkOnTheFlySquare30(b *testing.B) {
	h, states := torus(b, 6, 5)
	stored, err := New(context.Background(), h, states, nil)
	if err != nil {
		b.Fatal(err)
	}
	m, err := New(context.Background(), h, states, &Options{Form: OnTheFly})
	if err != nil {
		b.Fatal(err)
	}
	src, dst := pages.Floats(m.Columns()), pages.Floats(m.Rows())
	report(b, stored.plan.Elements, func() { m.Apply(dst, src) }, func() { stored.Apply(dst, src) })
}
