package matrix_test

import (
	"context"
	"fmt"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/operatortest"
)

var background = context.Background()

// columns returns the states of a basis as dense vectors over all product
// states, state after state.
func columns(b *basis.Basis) [][]complex128 {
	place := map[basis.Configuration]int{}
	for i, c := range operatortest.States(b.Space()) {
		place[c] = i
	}
	out := make([][]complex128, b.Len())
	for i := range out {
		out[i] = make([]complex128, len(place))
		for _, k := range b.Orbit(i, nil) {
			out[i][place[k.Configuration]] = k.Factor
		}
	}
	return out
}

// projected returns ⟨i~|op|j~⟩ from the dense matrix of op.
func projected(dense [][]complex128, to, from [][]complex128) [][]complex128 {
	images := make([][]complex128, len(from))
	for j, v := range from {
		images[j] = make([]complex128, len(dense))
		for a := range dense {
			for b, x := range dense[a] {
				if x != 0 && v[b] != 0 {
					images[j][a] += x * v[b]
				}
			}
		}
	}
	out := make([][]complex128, len(to))
	for i, u := range to {
		out[i] = make([]complex128, len(from))
		for j := range from {
			for a, x := range u {
				if x != 0 {
					out[i][j] += cmplx.Conj(x) * images[j][a]
				}
			}
		}
	}
	return out
}

// check compares every form of a matrix with the brute-force one.
func check(t *testing.T, what string, want [][]complex128, make func(*matrix.Options) (*matrix.Matrix, error)) {
	t.Helper()
	for _, o := range []matrix.Options{{Form: matrix.Stored, Workers: 2}, {Form: matrix.OnTheFly, Workers: 2}, {Workers: 1}} {
		m, err := make(&o)
		if err != nil {
			t.Fatalf("%s: %v", what, err)
		}
		dense := m.Dense()
		src, dst := make2(m.Columns()), make2(m.Rows())
		for j := range m.Columns() {
			src[j] = 1
			m.ApplyComplex(dst, src)
			src[j] = 0
			for i, got := range dst {
				if cmplx.Abs(got-want[i][j]) > 1e-11 {
					t.Fatalf("%s, %v: element (%d, %d) is %v, want %v", what, o.Form, i, j, got, want[i][j])
				}
				if cmplx.Abs(dense[i*m.Columns()+j]-got) > 1e-14*(1+cmplx.Abs(got)) {
					t.Fatalf("%s, %v: Dense and the product differ at (%d, %d)", what, o.Form, i, j)
				}
			}
		}
		if m.Real() {
			checkReal(t, what, m, want)
		}
	}
}

func make2(n int) []complex128 { return make([]complex128, n) }

func checkReal(t *testing.T, what string, m *matrix.Matrix, want [][]complex128) {
	t.Helper()
	src, dst := make([]float64, m.Columns()), make([]float64, m.Rows())
	for j := range src {
		src[j] = 1
		m.Apply(dst, src)
		src[j] = 0
		for i, got := range dst {
			if cmplx.Abs(complex(got, 0)-want[i][j]) > 1e-11 {
				t.Fatalf("%s: real element (%d, %d) is %v, want %v", what, i, j, got, want[i][j])
			}
		}
	}
}

// Random operators on random spaces, without symmetry: the sector of a charge
// that the symmetrised operator conserves, and rectangles between sectors.
func TestRandomOperatorsAgainstKroneckerProducts(t *testing.T) {
	r := rand.New(rand.NewPCG(21, 1))
	for range 100 {
		space := operatortest.RandomSpace(r, 6, 150)
		q := []basis.Charge{space.ParticleNumber(), space.TwiceSz()}[r.IntN(2)]
		a := operatortest.Random(r, space, 6, 4)
		dense := operatortest.Dense(a)
		values := map[int]*basis.Basis{}
		total := 0
		for _, c := range operatortest.States(space) {
			v := q.Of(space, c)
			if values[v] == nil {
				b, err := basis.New(background, space, basis.Sector{Charges: []basis.ChargeValue{q.Is(v)}}, nil)
				if err != nil {
					t.Fatal(err)
				}
				values[v] = b
				total += b.Len()
			}
		}
		if float64(total) != space.Dimension() {
			t.Fatalf("sectors of %s add up to %d of %v", q.Name, total, space.Dimension())
		}
		for v, from := range values {
			for w, to := range values {
				want := projected(dense, columns(to), columns(from))
				check(t, fmt.Sprintf("%v from %s=%d to %d", a, q.Name, v, w), want, func(o *matrix.Options) (*matrix.Matrix, error) {
					return matrix.Between(background, a, from, to, o)
				})
			}
			kept := a.Changing(q, 0)
			want := projected(operatortest.Dense(kept), columns(from), columns(from))
			check(t, fmt.Sprintf("%v at %s=%d", kept, q.Name, v), want, func(o *matrix.Options) (*matrix.Matrix, error) {
				return matrix.New(background, kept, from, o)
			})
		}
	}
}

func shift(n int) group.Action {
	p := make(group.Permutation, n)
	for i := range p {
		p[i] = (i + 1) % n
	}
	return group.Translate(p)
}

func momentum(n, k int) []group.Eigenvalue {
	return []group.Eigenvalue{{Generator: shift(n), Turn: group.NewTurn(int64(-k), int64(n))}}
}

// Momentum sectors of every kind of site: invariant operators, and the
// rectangle of any operator between two momenta.
func TestMomentumSectorsAgainstKroneckerProducts(t *testing.T) {
	r := rand.New(rand.NewPCG(22, 1))
	for _, kind := range []struct {
		site basis.Site
		n    int
	}{{basis.SpinHalf(), 6}, {basis.SpinHalf(), 5}, {basis.HardCoreBoson(), 6}, {basis.Fermion(), 6}, {basis.Fermion(), 5}, {basis.Electron(), 3}, {basis.Electron(), 4}, {basis.Spin(2), 4}, {basis.Boson(3), 3}} {
		space, err := basis.Uniform(kind.n, kind.site)
		if err != nil {
			t.Fatal(err)
		}
		local := operatortest.Random(r, space, 3, 3)
		var images []operator.Operator
		moved := local
		for range kind.n {
			images = append(images, moved)
			moved = moved.Transformed(shift(kind.n))
		}
		invariant := operator.Sum(images)
		dense, denseLocal := operatortest.Dense(invariant), operatortest.Dense(local)
		plain, err := basis.New(background, space, basis.Sector{}, nil)
		if err != nil {
			t.Fatal(err)
		}
		var bases []*basis.Basis
		for k := range kind.n {
			b, err := basis.New(background, space, basis.Sector{Symmetries: momentum(kind.n, k)}, nil)
			if err != nil {
				t.Fatal(err)
			}
			bases = append(bases, b)
		}
		for k, b := range bases {
			what := fmt.Sprintf("%v ring of %d at k=%d", kind.site, kind.n, k)
			check(t, what, projected(dense, columns(b), columns(b)), func(o *matrix.Options) (*matrix.Matrix, error) {
				return matrix.New(background, invariant, b, o)
			})
			other := bases[(k+1+r.IntN(kind.n))%kind.n]
			check(t, what+" to another momentum", projected(denseLocal, columns(other), columns(b)), func(o *matrix.Options) (*matrix.Matrix, error) {
				return matrix.Between(background, local, b, other, o)
			})
			check(t, what+" unfolded", projected(denseLocal, columns(plain), columns(b)), func(o *matrix.Options) (*matrix.Matrix, error) {
				return matrix.Between(background, local, b, plain, o)
			})
		}
	}
}

// Ten sites of each two-level kind: one sector each, against brute force.
func TestTenSites(t *testing.T) {
	r := rand.New(rand.NewPCG(23, 1))
	for _, site := range []basis.Site{basis.SpinHalf(), basis.HardCoreBoson(), basis.Fermion()} {
		space, _ := basis.Uniform(10, site)
		q := space.ParticleNumber()
		value := 4
		if site.Kind == basis.KindSpin {
			q, value = space.TwiceSz(), -2
		}
		local := operatortest.Random(r, space, 4, 4).Changing(q, 0)
		var images []operator.Operator
		for range 10 {
			images = append(images, local)
			local = local.Transformed(shift(10))
		}
		h := operator.Sum(images)
		b, err := basis.New(background, space, basis.Sector{Charges: []basis.ChargeValue{q.Is(value)}, Symmetries: momentum(10, 3)}, nil)
		if err != nil {
			t.Fatal(err)
		}
		check(t, site.String(), projected(operatortest.Dense(h), columns(b), columns(b)), func(o *matrix.Options) (*matrix.Matrix, error) {
			return matrix.New(background, h, b, o)
		})
	}
}

// A blockaded chain: the operator is projected onto the constrained space.
func TestConstraintsProject(t *testing.T) {
	space, _ := basis.Uniform(7, basis.SpinHalf())
	o := operator.On(space)
	var bans []basis.Constraint
	var flips []operator.Operator
	for i := range 7 {
		bans = append(bans, basis.AtMost(1, []int{i, (i + 1) % 7}))
		flips = append(flips, o.Sx(i).Scale(2))
	}
	h := operator.Sum(flips)
	for k := range 7 {
		b, err := basis.New(background, space, basis.Sector{Constraints: bans, Symmetries: momentum(7, k)}, nil)
		if err != nil {
			t.Fatal(err)
		}
		check(t, "blockade", projected(operatortest.Dense(h), columns(b), columns(b)), func(o *matrix.Options) (*matrix.Matrix, error) {
			return matrix.New(background, h, b, o)
		})
	}
}

func heisenberg(t testing.TB, n int) operator.Operator {
	t.Helper()
	space, err := basis.Uniform(n, basis.SpinHalf())
	if err != nil {
		t.Fatal(err)
	}
	o := operator.On(space)
	h := o.Zero()
	for i := range n {
		h = h.Plus(o.Dot(i, (i+1)%n))
	}
	return h
}

func sector(t testing.TB, h operator.Operator, n, k int) *basis.Basis {
	t.Helper()
	b, err := basis.New(background, h.Space(), basis.Sector{
		Charges:    []basis.ChargeValue{h.Space().TwiceSz().Is(0)},
		Symmetries: momentum(n, k),
	}, nil)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestFormsAndWorkersGiveTheSameBits(t *testing.T) {
	h := heisenberg(t, 16)
	b := sector(t, h, 16, 3)
	r := rand.New(rand.NewPCG(24, 1))
	src := make([]complex128, b.Len())
	for i := range src {
		src[i] = complex(r.NormFloat64(), r.NormFloat64())
	}
	var want []complex128
	for _, o := range []matrix.Options{{Form: matrix.Stored, Workers: 1}, {Form: matrix.Stored, Workers: 2}, {Form: matrix.Stored, Workers: 5}, {Form: matrix.OnTheFly, Workers: 1}, {Form: matrix.OnTheFly, Workers: 3}} {
		m, err := matrix.New(background, h, b, &o)
		if err != nil {
			t.Fatal(err)
		}
		dst := make([]complex128, b.Len())
		m.ApplyComplex(dst, src)
		if want == nil {
			want = dst
		}
		for i := range dst {
			if dst[i] != want[i] {
				t.Fatalf("%v with %d workers: element %d is %v, want %v", o.Form, o.Workers, i, dst[i], want[i])
			}
		}
	}
}

func TestPlanPredictsAndChooses(t *testing.T) {
	h := heisenberg(t, 18)
	b := sector(t, h, 18, 0)
	plan, err := matrix.Estimate(h, b, nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := matrix.New(background, h, b, nil)
	if err != nil {
		t.Fatal(err)
	}
	exact := m.Plan()
	if !exact.Exact || !plan.Real || plan.Form != matrix.Stored || plan.Rows != b.Len() {
		t.Errorf("plan %v, matrix %v", plan, exact)
	}
	if off := float64(plan.Elements)/float64(exact.Elements) - 1; off > 0.05 || off < -0.05 {
		t.Errorf("planned %d elements, found %d", plan.Elements, exact.Elements)
	}
	if perElement := float64(exact.Bytes-int64(b.Len())*16) / float64(exact.Elements); perElement > 5.5 {
		t.Errorf("%.2f bytes an element", perElement)
	}
	small := &matrix.Options{Memory: 1000}
	if plan, err = matrix.Estimate(h, b, small); err != nil || plan.Form != matrix.OnTheFly {
		t.Errorf("plan with little memory: %v (%v)", plan, err)
	}
	small.Form = matrix.Stored
	if _, err = matrix.Estimate(h, b, small); err == nil || !strings.Contains(err.Error(), "MiB") {
		t.Errorf("stored with little memory: error %v", err)
	}
}

// disordered returns flips whose strength depends on all other spins, so that
// nearly every matrix element has a value of its own.
func disordered(t *testing.T, n int) (operator.Operator, *basis.Basis) {
	t.Helper()
	space, _ := basis.Uniform(n, basis.SpinHalf())
	o := operator.On(space)
	r := rand.New(rand.NewPCG(25, 1))
	var terms []operator.Operator
	for i := range n {
		strength := o.One()
		for j := range n {
			if j != i {
				strength = strength.Plus(o.Sz(j).Scale(complex(r.Float64(), 0)))
			}
		}
		terms = append(terms, o.Sx(i).Times(strength))
	}
	b, err := basis.New(background, space, basis.Sector{}, nil)
	if err != nil {
		t.Fatal(err)
	}
	return operator.Sum(terms), b
}

// Two-byte codes, and more values than two bytes code.
func TestManyDistinctValues(t *testing.T) {
	h, b := disordered(t, 8)
	m, err := matrix.New(background, h, b, nil)
	if err != nil {
		t.Fatal(err)
	}
	if v := m.Plan().Values; v <= 1<<8 || v > 1<<16 {
		t.Fatalf("%d distinct values", v)
	}
	check(t, "two-byte codes", operatortest.Dense(h), func(o *matrix.Options) (*matrix.Matrix, error) { return matrix.New(background, h, b, o) })

	h, b = disordered(t, 14)
	src := make([]float64, b.Len())
	r := rand.New(rand.NewPCG(26, 1))
	for i := range src {
		src[i] = r.NormFloat64()
	}
	want, got := make([]float64, b.Len()), make([]float64, b.Len())
	for form, dst := range map[matrix.Form][]float64{matrix.OnTheFly: want, matrix.Stored: got} {
		m, err := matrix.New(background, h, b, &matrix.Options{Form: form})
		if err != nil {
			t.Fatal(err)
		}
		if form == matrix.Stored && m.Plan().Bytes < m.Plan().Elements*12 {
			t.Errorf("%v keeps codes for %d elements of as many values", m.Plan(), m.Plan().Elements)
		}
		m.Apply(dst, src)
	}
	for i := range got {
		if got[i] != want[i] {
			t.Fatalf("element %d: stored %v, on the fly %v", i, got[i], want[i])
		}
	}
}

func TestWrongSymmetriesAreRefused(t *testing.T) {
	h := heisenberg(t, 6)
	o := operator.On(h.Space())
	b := sector(t, h, 6, 1)
	other, _ := basis.Uniform(6, basis.Fermion())
	plain, _ := basis.New(background, h.Space(), basis.Sector{}, nil)
	for says, op := range map[string]operator.Operator{
		"does not commute with generator 0": h.Plus(o.Sz(2)),
		"changes the charge":                h.Plus(o.Sx(2)),
		"different spaces":                  operator.On(other).Number(0),
		"site 9":                            h.Plus(o.Sz(9)),
	} {
		if _, err := matrix.New(background, op, b, nil); err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("error %v, want one that says %q", err, says)
		}
		if _, err := matrix.Estimate(op, b, nil); err == nil {
			t.Errorf("Estimate accepts what %q", says)
		}
	}
	if _, err := matrix.Between(background, o.Sz(0), plain, b, nil); err == nil {
		t.Error("folding without a symmetric source accepted")
	}
	if _, err := matrix.New(background, h, nil, nil); err == nil {
		t.Error("no basis accepted")
	}
	ctx, cancel := context.WithCancel(background)
	cancel()
	if _, err := matrix.New(ctx, h, b, nil); err == nil {
		t.Error("a cancelled context goes unnoticed")
	}
}

func TestProductsDoNotAllocate(t *testing.T) {
	h := heisenberg(t, 14)
	b := sector(t, h, 14, 0)
	for _, form := range []matrix.Form{matrix.Stored, matrix.OnTheFly} {
		m, err := matrix.New(background, h, b, &matrix.Options{Form: form, Workers: 1})
		if err != nil {
			t.Fatal(err)
		}
		src, dst := make([]float64, b.Len()), make([]float64, b.Len())
		m.Apply(dst, src)
		if n := testing.AllocsPerRun(10, func() { m.Apply(dst, src) }); n > 2 {
			t.Errorf("%v: %v allocations a product", form, n)
		}
	}
}

func ExampleNew() {
	space, err := basis.Uniform(4, basis.SpinHalf())
	if err != nil {
		fmt.Println(err)
		return
	}
	o := operator.On(space)
	h := operator.Sum([]operator.Operator{o.Dot(0, 1), o.Dot(1, 2), o.Dot(2, 3), o.Dot(3, 0)})
	b, err := basis.New(context.Background(), space, basis.Sector{
		Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: []group.Eigenvalue{{Generator: group.Translate(group.Permutation{1, 2, 3, 0})}},
	}, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	m, err := matrix.New(context.Background(), h, b, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	dst := make([]float64, 2)
	m.Apply(dst, []float64{1, 0})
	fmt.Printf("%.4f\n", dst)
	m.Apply(dst, []float64{0, 1})
	fmt.Printf("%.4f\n", dst)
	// Output:
	// [0.0000 1.4142]
	// [1.4142 -1.0000]
}
