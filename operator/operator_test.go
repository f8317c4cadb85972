package operator_test

import (
	"encoding/json"
	"errors"
	"fmt"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/operator"
	"ketloom/operator/operatortest"
)

func distance(a, b [][]complex128) float64 {
	most := 0.0
	for i := range a {
		for j := range a[i] {
			most = max(most, cmplx.Abs(a[i][j]-b[i][j]))
		}
	}
	return most
}

func product(a, b [][]complex128) [][]complex128 {
	out := make([][]complex128, len(a))
	for i := range a {
		out[i] = make([]complex128, len(a))
		for k, x := range a[i] {
			if x != 0 {
				for j, y := range b[k] {
					out[i][j] += x * y
				}
			}
		}
	}
	return out
}

func adjoint(a [][]complex128) [][]complex128 {
	out := make([][]complex128, len(a))
	for i := range a {
		out[i] = make([]complex128, len(a))
		for j := range a {
			out[i][j] = cmplx.Conj(a[j][i])
		}
	}
	return out
}

func combine(x complex128, a [][]complex128, y complex128, b [][]complex128) [][]complex128 {
	out := make([][]complex128, len(a))
	for i := range a {
		out[i] = make([]complex128, len(a))
		for j := range a {
			out[i][j] = x*a[i][j] + y*b[i][j]
		}
	}
	return out
}

// The algebra agrees with matrices: sums, products, adjoints, commutators and
// normal order, on spaces of every kind of site.
func TestAlgebraIsThatOfMatrices(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 1))
	for range 150 {
		space := operatortest.RandomSpace(r, 5, 100)
		a, b := operatortest.Random(r, space, 3, 4), operatortest.Random(r, space, 3, 3)
		da, db := operatortest.Dense(a), operatortest.Dense(b)
		z := complex(r.NormFloat64(), r.NormFloat64())
		for name, c := range map[string]struct {
			op   operator.Operator
			want [][]complex128
		}{
			"normal order":   {a.NormalOrdered(), da},
			"sum":            {a.Plus(b.Scale(z)), combine(1, da, z, db)},
			"difference":     {a.Minus(b), combine(1, da, -1, db)},
			"product":        {a.Times(b), product(da, db)},
			"ordered":        {a.Times(b).NormalOrdered(), product(da, db)},
			"adjoint":        {a.Adjoint(), adjoint(da)},
			"commutator":     {operator.Commutator(a, b), combine(1, product(da, db), -1, product(db, da))},
			"anticommutator": {operator.Anticommutator(a, b), combine(1, product(da, db), 1, product(db, da))},
		} {
			if err := c.op.Err(); err != nil {
				t.Fatal(err)
			}
			if d := distance(operatortest.Dense(c.op), c.want); d > 1e-10 {
				t.Fatalf("%s of\n%v\n%v\nis off by %v", name, a, b, d)
			}
		}
		if !a.Equal(a.NormalOrdered()) || !a.Minus(a.NormalOrdered()).IsZero() {
			t.Fatalf("%v differs from its normal order", a)
		}
		if !a.Plus(a.Adjoint()).IsHermitian() {
			t.Fatalf("a + a† of %v is not Hermitian", a)
		}
		if distance(da, adjoint(da)) > 1e-10 && a.IsHermitian() {
			t.Fatalf("%v taken for Hermitian", a)
		}
		real := true
		for i := range da {
			for j := range da {
				real = real && imag(da[i][j]) == 0
			}
		}
		if a.Real() && !real {
			t.Fatalf("%v taken for real", a)
		}
		if !a.Times(b).Times(a).Equal(a.Times(b.Times(a))) {
			t.Fatal("products do not associate")
		}
	}
}

// Operators that are equal by an identity have the same canonical terms.
func TestIdentitiesOfTheAlgebra(t *testing.T) {
	spins, _ := basis.Uniform(3, basis.SpinHalf())
	fermions, _ := basis.Uniform(3, basis.Fermion())
	bosons, _ := basis.Uniform(2, basis.HardCoreBoson())
	soft, _ := basis.Uniform(2, basis.Boson(4))
	ones, _ := basis.Uniform(2, basis.Spin(2))
	electrons, _ := basis.Uniform(2, basis.Electron())
	s, c, b, d, u, e := operator.On(spins), operator.On(fermions), operator.On(bosons), operator.On(soft), operator.On(ones), operator.On(electrons)
	for name, pair := range map[string][2]operator.Operator{
		"[S^x,S^y]=iS^z":           {operator.Commutator(s.Sx(1), s.Sy(1)), s.Sz(1).Scale(1i)},
		"spin 1 [S^x,S^y]=iS^z":    {operator.Commutator(u.Sx(1), u.Sy(1)), u.Sz(1).Scale(1i)},
		"S^2=3/4":                  {s.Dot(0, 0), s.One().Scale(0.75)},
		"spin 1 S^2=2":             {u.Dot(0, 0), u.One().Scale(2)},
		"{c,c†}=1":                 {operator.Anticommutator(c.Annihilate(1), c.Create(1)), c.One()},
		"{c_0,c†_2}=0":             {operator.Anticommutator(c.Annihilate(0), c.Create(2)), c.Zero()},
		"{c_0,c_2}=0":              {operator.Anticommutator(c.Annihilate(0), c.Annihilate(2)), c.Zero()},
		"c†c†=0":                   {c.Create(0).Times(c.Create(0)), c.Zero()},
		"n^2=n":                    {c.Number(1).Times(c.Number(1)), c.Number(1)},
		"hard-core bb†=1-n":        {b.Annihilate(0).Times(b.Create(0)), b.One().Minus(b.Number(0))},
		"[b_0,b†_1]=0":             {operator.Commutator(b.Annihilate(0), b.Create(1)), b.Zero()},
		"[b,b†] below the cutoff":  {operator.Commutator(d.Annihilate(0), d.Create(0)), d.One().Minus(d.Transfer(0, 4, 4).Scale(5))},
		"n=b†b":                    {d.Create(1).Times(d.Annihilate(1)), d.Number(1)},
		"c†_0c†_1=-c†_1c†_0":       {c.Create(0).Times(c.Create(1)), c.Create(1).Times(c.Create(0)).Scale(-1)},
		"(S_0·S_1)^2 of spins 1/2": {s.Dot(0, 1).Times(s.Dot(0, 1)), s.One().Scale(3.0 / 16).Minus(s.Dot(0, 1).Scale(0.5))},
		"electron [S^x,S^y]=iS^z":  {operator.Commutator(e.Sx(1), e.Sy(1)), e.Sz(1).Scale(1i)},
	} {
		if !pair[0].Equal(pair[1]) || pair[0].NormalOrdered().Len() != pair[1].NormalOrdered().Len() {
			t.Errorf("%s: %v against %v", name, pair[0].NormalOrdered(), pair[1].NormalOrdered())
		}
	}
	if s.Sz(0).Equal(s.Sz(1)) || s.Dot(0, 1).IsZero() || s.Raise(0).IsHermitian() {
		t.Error("different operators taken for equal")
	}
}

// symmetryMatrix builds the matrix of a symmetry on all product states by
// moving creators one at a time.
func symmetryMatrix(t *testing.T, space *basis.Space, a group.Action) [][]complex128 {
	t.Helper()
	states := operatortest.States(space)
	place := map[basis.Configuration]int{}
	for i, c := range states {
		place[c] = i
	}
	mv, err := space.Resolve(a)
	if err != nil {
		t.Fatal(err)
	}
	u := make([][]complex128, len(states))
	for i := range u {
		u[i] = make([]complex128, len(states))
	}
	for j, c := range states {
		phase := complex128(1)
		var out basis.Configuration
		for m := range space.Modes() {
			mode := space.Mode(m)
			level := mode.Level(c)
			phase *= mv.Phases[m][level].Complex()
			if mode.Fermionic {
				level = 0
			}
			out |= basis.Configuration(mv.Levels[m][level]) << space.Mode(mv.To[m]).Shift
		}
		for m := space.Modes() - 1; m >= 0; m-- {
			if !space.Mode(m).Fermionic || space.Mode(m).Level(c) == 0 {
				continue
			}
			for below := range mv.To[m] {
				if k := space.Mode(below); k.Fermionic && k.Level(out) == 1 {
					phase = -phase
				}
			}
			out ^= 1 << space.Mode(mv.To[m]).Shift
		}
		u[place[out]][j] = phase
	}
	return u
}

func randomAction(r *rand.Rand, space *basis.Space) group.Action {
	n := space.Sites()
	a := group.Action{Sites: make(group.Permutation, n), Levels: make([][]int, n), Phases: make([][]group.Turn, n)}
	byKind := map[basis.Site][]int{}
	for i := range n {
		byKind[space.Site(i)] = append(byKind[space.Site(i)], i)
	}
	for _, sites := range byKind {
		for x, y := range r.Perm(len(sites)) {
			a.Sites[sites[x]] = sites[y]
		}
	}
	electron := [][]int{{0, 1, 2, 3}, {0, 2, 1, 3}, {1, 0, 3, 2}, {3, 2, 1, 0}}
	for i := range n {
		site := space.Site(i)
		up, down, empty := group.NewTurn(r.Int64N(8), 8), group.NewTurn(r.Int64N(8), 8), group.NewTurn(r.Int64N(8), 8)
		if site.Kind == basis.KindElectron {
			a.Levels[i] = electron[r.IntN(4)]
			a.Phases[i] = []group.Turn{empty, empty.Add(up), empty.Add(down), empty.Add(up).Add(down)}
			continue
		}
		a.Levels[i] = r.Perm(site.Levels)
		for range site.Levels {
			a.Phases[i] = append(a.Phases[i], group.NewTurn(r.Int64N(8), 8))
		}
	}
	return a
}

func TestSymmetriesActAsMatrices(t *testing.T) {
	r := rand.New(rand.NewPCG(12, 1))
	for range 120 {
		space := operatortest.RandomSpace(r, 4, 70)
		a := operatortest.Random(r, space, 3, 3)
		g := randomAction(r, space)
		u := symmetryMatrix(t, space, g)
		want := product(product(u, operatortest.Dense(a)), adjoint(u))
		image := a.Transformed(g)
		if image.Err() != nil {
			t.Fatal(image.Err())
		}
		if d := distance(operatortest.Dense(image), want); d > 1e-10 {
			t.Fatalf("%v under %v: off by %v", a, g, d)
		}
		err := a.Commutes(g)
		if commutes := distance(want, operatortest.Dense(a)) < 1e-10; commutes != (err == nil) {
			t.Fatalf("%v under %v: %v, but matrices say %v", a, g, err, commutes)
		}
		if err != nil && !errors.Is(err, operator.ErrNotSymmetric) {
			t.Fatal(err)
		}
	}
}

func TestCovariantPartsAddUpAndTransform(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 1))
	space, _ := basis.Uniform(4, basis.Fermion())
	shift := group.Translate(group.Permutation{1, 2, 3, 0})
	for range 10 {
		a := operatortest.Random(r, space, 4, 3)
		sum := operator.On(space).Zero()
		for k := range 4 {
			elements, err := group.Generate([]group.Eigenvalue{{Generator: shift, Turn: group.NewTurn(int64(k), 4)}})
			if err != nil {
				t.Fatal(err)
			}
			part := a.Covariant(elements)
			if !part.Transformed(shift).Equal(part.Scale(group.NewTurn(int64(k), 4).Complex())) {
				t.Fatalf("part %d of %v does not transform", k, a)
			}
			sum = sum.Plus(part)
		}
		if d := distance(operatortest.Dense(sum), operatortest.Dense(a)); d > 1e-12 {
			t.Fatalf("parts of %v add up to something %v away", a, d)
		}
	}
}

func TestChargesByTheAlgebra(t *testing.T) {
	r := rand.New(rand.NewPCG(14, 1))
	for range 150 {
		space := operatortest.RandomSpace(r, 4, 100)
		weights := make([]int, space.Sites())
		for i := range weights {
			weights[i] = r.IntN(5)
		}
		q := []basis.Charge{space.ParticleNumber(), space.TwiceSz(), space.Weighted("k", 3, weights)}[r.IntN(3)]
		a := operatortest.Random(r, space, 2, 3)
		dense, states := operatortest.Dense(a), operatortest.States(space)
		conserved := true
		for i, to := range states {
			for j, from := range states {
				if cmplx.Abs(dense[i][j]) > 1e-10 && q.Of(space, to) != q.Of(space, from) {
					conserved = false
				}
			}
		}
		if err := a.Conserves(q); (err == nil) != conserved {
			t.Fatalf("%v and %s: %v, but matrices say %v", a, q.Name, err, conserved)
		}
		sum := operator.On(space).Zero()
		for by := -60; by <= 60; by++ {
			if q.Modulus > 0 && (by < 0 || by >= q.Modulus) {
				continue
			}
			sum = sum.Plus(a.Changing(q, by))
		}
		if !sum.Equal(a) {
			t.Fatalf("the parts of %v that change %s do not add up", a, q.Name)
		}
	}
}

func TestBrokenSymmetriesNameTheTerm(t *testing.T) {
	space, _ := basis.Uniform(4, basis.SpinHalf())
	o := operator.On(space)
	h := o.Dot(0, 1).Plus(o.Dot(1, 2)).Plus(o.Dot(2, 3)).Plus(o.Dot(3, 0).Scale(1.5))
	err := h.Commutes(group.Translate(group.Permutation{1, 2, 3, 0}))
	if err == nil || !strings.Contains(err.Error(), "Sᶻ₀ Sᶻ₁ has the coefficient 1, but 1.5") {
		t.Errorf("error %v", err)
	}
	err = h.Plus(o.Raise(2)).Conserves(space.TwiceSz())
	if err == nil || !strings.Contains(err.Error(), `the term S⁺₂ changes the charge "2Sz" by +2`) {
		t.Errorf("error %v", err)
	}
	if err := h.Commutes(group.Translate(group.Permutation{0, 1})); err == nil {
		t.Error("a symmetry of two sites accepted on four")
	}
}

func TestJSONKeepsTheOperator(t *testing.T) {
	r := rand.New(rand.NewPCG(15, 1))
	for range 50 {
		space := operatortest.RandomSpace(r, 4, 100)
		a := operatortest.Random(r, space, 4, 4)
		data, err := json.Marshal(a)
		if err != nil {
			t.Fatal(err)
		}
		back, err := operator.Decode(space, data)
		if err != nil {
			t.Fatal(err)
		}
		if back.String() != a.String() {
			t.Fatalf("%v comes back as %v", a, back)
		}
	}
	space, _ := basis.Uniform(2, basis.Fermion())
	for _, bad := range []string{`{`, `[{"coefficient":[1,0],"factors":[{"mode":2,"symbol":"raise"}]}]`,
		`[{"coefficient":[1,0],"factors":[{"mode":-1,"symbol":"raise"}]}]`, `[{"coefficient":[1,0],"factors":[{"mode":0,"symbol":"z"}]}]`,
		`[{"coefficient":[1,0],"factors":[{"mode":0,"symbol":"spin"}]}]`, `[{"coefficient":[1e999,0]}]`} {
		if _, err := operator.Decode(space, []byte(bad)); err == nil {
			t.Errorf("%s accepted", bad)
		}
	}
}

func TestMistakesAreCarriedAlong(t *testing.T) {
	space, _ := basis.Uniform(2, basis.SpinHalf())
	other, _ := basis.Uniform(2, basis.Fermion())
	o := operator.On(space)
	for says, a := range map[string]operator.Operator{
		"site 5":                      o.Sz(5),
		"site -1":                     o.Dot(0, -1),
		"a creator on site 0":         o.Create(0),
		"an electron operator":        o.CreateSpin(0, operator.Up),
		"|3⟩⟨0| on site 1":            o.Transfer(1, 3, 0),
		"different spaces":            o.Sz(0).Plus(operator.On(other).Number(0)),
		"no space":                    operator.On(nil).One(),
		"coefficients must be finite": o.Sz(0).Scale(cmplx.Inf()),
	} {
		sum := o.Sz(0).Plus(a.Times(o.Sz(1)).Scale(2)).Adjoint().NormalOrdered()
		if a.Err() == nil || !strings.Contains(a.Err().Error(), says) {
			t.Errorf("error %v, want one that says %q", a.Err(), says)
		}
		if sum.Err() == nil || sum.IsZero() || sum.Conserves(space.TwiceSz()) == nil {
			t.Errorf("%q is lost on the way", says)
		}
	}
}

func TestPrinting(t *testing.T) {
	electrons, _ := basis.Uniform(12, basis.Electron())
	e := operator.On(electrons)
	bosons, _ := basis.Uniform(2, basis.Boson(3))
	b := operator.On(bosons)
	for want, a := range map[string]operator.Operator{
		"c†₁₁↓ c₀↑":           e.CreateSpin(11, operator.Down).Times(e.AnnihilateSpin(0, operator.Up)),
		"0":                   e.Zero(),
		"1":                   e.One(),
		"-n₁↑ n₁↓ + (0+2i)":   e.NumberSpin(1, 0).Times(e.NumberSpin(1, 1)).Scale(-1).Plus(e.One().Scale(2i)),
		"b†₀ b₁ - 0.5":        b.Create(0).Times(b.Annihilate(1)).Minus(b.One().Scale(0.5)),
		"|2⟩⟨3|₁":             b.Transfer(1, 2, 3),
		"2 |2⟩⟨2|₁ + |1⟩⟨1|₁": b.Transfer(1, 2, 2).Scale(2).Plus(b.Transfer(1, 1, 1)),
	} {
		if a.String() != want {
			t.Errorf("%q, want %q", a.String(), want)
		}
	}
}

func ExampleCommutator() {
	space, err := basis.Uniform(2, basis.SpinHalf())
	if err != nil {
		fmt.Println(err)
		return
	}
	o := operator.On(space)
	h := o.Dot(0, 1)
	fmt.Println(h.NormalOrdered())
	fmt.Println(operator.Commutator(h, o.Sz(0)))
	fmt.Println(operator.Commutator(h, o.Sz(0).Plus(o.Sz(1))))
	fmt.Println(h.Conserves(space.TwiceSz()))
	// Output:
	// Sᶻ₀ Sᶻ₁ + 0.5 S⁺₀ S⁻₁ + 0.5 S⁺₁ S⁻₀
	// -0.5 S⁺₀ S⁻₁ + 0.5 S⁺₁ S⁻₀
	// 0
	// <nil>
}
