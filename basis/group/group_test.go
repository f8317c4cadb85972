package group

import (
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"
)

func TestTurnArithmeticFollowsComplexNumbers(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 2000 {
		a := NewTurn(r.Int64N(200)-100, 1+r.Int64N(60))
		b := NewTurn(r.Int64N(200)-100, 1+r.Int64N(60))
		n := r.Int64N(40) - 20
		near(t, a.Add(b).Complex(), a.Complex()*b.Complex())
		near(t, a.Neg().Complex(), cmplx.Conj(a.Complex()))
		near(t, a.Times(n).Complex(), cmplx.Pow(a.Complex(), complex(float64(n), 0)))
		if a.Neg().Complex() != cmplx.Conj(a.Complex()) && imag(a.Complex()) != 0 {
			t.Fatalf("conjugate of %v is not exact", a)
		}
		near(t, a.Complex(), cmplx.Exp(complex(0, 2*math.Pi*float64(a.Num)/float64(a.Den))))
	}
	for eighth, want := range []complex128{1, complex(math.Sqrt2/2, math.Sqrt2/2), 1i, complex(-math.Sqrt2/2, math.Sqrt2/2), -1} {
		if got := NewTurn(int64(eighth), 8).Complex(); cmplx.Abs(got-want) > 1.2e-16 || eighth%2 == 0 && got != want {
			t.Errorf("%d/8 of a turn is %v, want %v", eighth, got, want)
		}
	}
}

func near(t *testing.T, got, want complex128) {
	t.Helper()
	if cmplx.Abs(got-want) > 1e-12 {
		t.Fatalf("got %v, want %v", got, want)
	}
}

func TestInvalidTurnsAreRefused(t *testing.T) {
	for _, bad := range []Turn{{1, 0}, {1, -3}, {1, 1 << 40}, NewTurn(1, 0), NewTurn(math.MinInt64, -1)} {
		if bad.Check() == nil {
			t.Errorf("%d/%d accepted", bad.Num, bad.Den)
		}
	}
}

func TestPermutations(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for range 300 {
		n := 1 + r.IntN(12)
		p, q := Permutation(r.Perm(n)), Permutation(r.Perm(n))
		if err := p.Check(); err != nil {
			t.Fatal(err)
		}
		if !p.Compose(p.Inverse()).IsIdentity() || !p.Inverse().Compose(p).IsIdentity() {
			t.Fatalf("inverse of %v", p)
		}
		if !p.Compose(q).Inverse().Equal(q.Inverse().Compose(p.Inverse())) {
			t.Fatalf("inverse of a product of %v and %v", p, q)
		}
		power := Identity(n)
		for i := 1; i <= p.Order(); i++ {
			power = power.Compose(p)
			if power.IsIdentity() != (i == p.Order()) {
				t.Fatalf("order of %v is not %d", p, p.Order())
			}
		}
	}
	for _, bad := range []Permutation{{0, 0}, {0, 2}, {-1, 0}} {
		if bad.Check() == nil {
			t.Errorf("%v accepted as a permutation", bad)
		}
	}
}

func randomAction(r *rand.Rand, n, levels int) Action {
	a := Action{Sites: r.Perm(n), Levels: make([][]int, n), Phases: make([][]Turn, n)}
	for i := range n {
		if r.IntN(3) > 0 {
			a.Levels[i] = r.Perm(levels)
		}
		if r.IntN(3) > 0 {
			a.Phases[i] = make([]Turn, levels)
			for s := range levels {
				a.Phases[i][s] = NewTurn(r.Int64N(12), 12)
			}
		}
	}
	return a
}

// act applies a to the product state with the given levels.
func act(a Action, levels []int) ([]int, Turn) {
	out, phase := make([]int, len(levels)), Turn{}
	for i, s := range levels {
		out[a.Sites[i]] = a.Level(i, s)
		phase = phase.Add(a.Phase(i, s))
	}
	return out, phase
}

func TestActionsComposeAsMapsOfStates(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for range 300 {
		n, d := 1+r.IntN(5), 2+r.IntN(3)
		a, b := randomAction(r, n, d), randomAction(r, n, d)
		state := make([]int, n)
		for i := range state {
			state[i] = r.IntN(d)
		}
		middle, p1 := act(b, state)
		want, p2 := act(a, middle)
		got, p := act(a.Compose(b), state)
		if fmt.Sprint(got) != fmt.Sprint(want) || !p.Equal(p1.Add(p2)) {
			t.Fatalf("%v∘%v on %v: got %v·%v, want %v·%v", a, b, state, got, p, want, p1.Add(p2))
		}
		if !a.Compose(a.Inverse()).IsIdentity() || !a.Inverse().Compose(a).IsIdentity() {
			t.Fatalf("inverse of %v", a)
		}
		if !a.Equal(a.Compose(Translate(Identity(n)))) {
			t.Fatalf("%v times one is something else", a)
		}
	}
}

func ring(n int) Permutation {
	p := make(Permutation, n)
	for i := range p {
		p[i] = (i + 1) % n
	}
	return p
}

func TestCyclicGroupHasItsCharacters(t *testing.T) {
	for n := 1; n <= 12; n++ {
		for k := range n {
			elements, err := Generate([]Eigenvalue{{Translate(ring(n)), NewTurn(-int64(k), int64(n))}})
			if err != nil {
				t.Fatal(err)
			}
			if len(elements) != n {
				t.Fatalf("ring of %d sites: %d translations", n, len(elements))
			}
			for _, e := range elements {
				if want := NewTurn(-int64(k*e.Action.Sites[0]), int64(n)); !e.Turn.Equal(want) {
					t.Errorf("translation by %d at k=%d: character %v, want %v", e.Action.Sites[0], k, e.Turn, want)
				}
			}
		}
	}
}

func TestGenerateRefuses(t *testing.T) {
	shift := Translate(ring(4))
	for name, c := range map[string]struct {
		gens []Eigenvalue
		says string
	}{
		"momentum that does not fit the ring": {[]Eigenvalue{{shift, NewTurn(1, 3)}}, "not a representation"},
		"no permutation":                      {[]Eigenvalue{{Translate(Permutation{0, 0, 1}), Turn{}}}, "generator 0 is not a symmetry"},
		"different sizes":                     {[]Eigenvalue{{shift, Turn{}}, {Translate(ring(5)), Turn{}}}, "5 sites"},
		"phase without denominator":           {[]Eigenvalue{{shift, Turn{1, 0}}}, "denominator"},
		"too large a group":                   {[]Eigenvalue{{Translate(ring(9)), Turn{}}, {Translate(Permutation{1, 0, 2, 3, 4, 5, 6, 7, 8}), Turn{}}}, "more than 65536"},
		"commutator with a character":         {[]Eigenvalue{{Translate(ring(3)), NewTurn(1, 3)}, {Translate(Permutation{1, 0, 2}), Turn{}}}, "not a representation"},
	} {
		_, err := Generate(c.gens)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: error %v, want one that says %q", name, err, c.says)
		}
	}
}

func ExampleGenerate() {
	shift := Translate(Permutation{1, 2, 3, 0})
	elements, err := Generate([]Eigenvalue{{Generator: shift, Turn: NewTurn(-1, 4)}})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, e := range elements {
		fmt.Println(e.Action.Sites, e.Turn)
	}
	// Output:
	// [0 1 2 3] 0/1
	// [1 2 3 0] 3/4
	// [2 3 0 1] 1/2
	// [3 0 1 2] 1/4
}
