package group

import (
	"errors"
	"fmt"
	"math/cmplx"
	"math/rand/v2"
	"sort"
	"strings"
	"testing"
)

func span(t *testing.T, permutations ...Permutation) *Group {
	t.Helper()
	var list []Action
	for _, p := range permutations {
		list = append(list, Translate(p))
	}
	g, err := Span(list)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

func mirror(n int) Permutation {
	p := make(Permutation, n)
	for i := range p {
		p[i] = (n - i) % n
	}
	return p
}

// beside lets permutations act on places of their own.
func beside(p, q Permutation) Permutation {
	r := append(Permutation(nil), p...)
	for _, i := range q {
		r = append(r, len(p)+i)
	}
	return r
}

// torus returns the translations of an l×l torus, and the generators of its
// point group about site 0: of order 4 for the square and 6 for the triangular
// lattice, with a mirror.
func torus(l, order int) (translations, point []Permutation) {
	at := func(x, y int) int { return (x%l+l)%l + l*((y%l+l)%l) }
	make1 := func(f func(x, y int) int) Permutation {
		p := make(Permutation, l*l)
		for i := range p {
			p[i] = f(i%l, i/l)
		}
		return p
	}
	translations = []Permutation{
		make1(func(x, y int) int { return at(x+1, y) }),
		make1(func(x, y int) int { return at(x, y+1) }),
	}
	turn := make1(func(x, y int) int { return at(-y, x) })
	if order == 6 { // a1 to a2, a2 to a2-a1
		turn = make1(func(x, y int) int { return at(-y, x+y) })
	}
	return translations, []Permutation{turn, make1(func(x, y int) int { return at(y, x) })}
}

// checkTable holds the list of representations to everything that characters
// obey: orthogonality of rows and columns, the degrees, and Frobenius
// reciprocity with the subgroup of each row.
func checkTable(t *testing.T, g *Group, all []Representation) {
	t.Helper()
	if len(all) != len(g.Classes()) {
		t.Fatalf("%d representations, %d classes", len(all), len(g.Classes()))
	}
	characters := make([][]complex128, len(all))
	squares := 0
	for i, r := range all {
		characters[i] = r.Characters()
		squares += r.Dimension * r.Dimension
		near(t, characters[i][0], complex(float64(r.Dimension), 0))
	}
	if squares != g.Order() {
		t.Fatalf("Σd² = %d, order %d", squares, g.Order())
	}
	for _, v := range characters[0] {
		near(t, v, 1)
	}
	for i, a := range characters {
		for j, b := range characters {
			want := complex(0, 0)
			if i == j {
				want = 1
			}
			near(t, g.InnerProduct(a, b), want)
			// D_j holds χ_i of H_i δ_ij times.
			sum := complex(0, 0)
			for k, h := range all[i].Linear.Elements {
				sum += cmplx.Conj(all[i].Linear.Turns[k].Complex()) * b[g.ClassOf(h)]
			}
			near(t, sum/complex(float64(len(all[i].Linear.Elements)), 0), want)
		}
	}
	for c, class := range g.Classes() {
		for d := range g.Classes() {
			sum := complex(0, 0)
			for _, a := range characters {
				sum += cmplx.Conj(a[c]) * a[d]
			}
			want := complex(0, 0)
			if c == d {
				want = complex(float64(g.Order())/float64(len(class)), 0)
			}
			near(t, sum, want)
		}
	}
	for _, r := range all {
		elements, err := Generate(r.Row)
		if err != nil {
			t.Fatal(err)
		}
		if len(r.Row) > 0 && len(elements)*r.Dimension != g.Order() {
			t.Fatalf("%s: the row spans %d elements of %d, dimension %d", r.Name, len(elements), g.Order(), r.Dimension)
		}
		for _, e := range elements {
			at, ok := g.Find(e.Action)
			if len(r.Row) == 0 {
				at, ok = 0, true
			}
			found := false
			for k, h := range r.Linear.Elements {
				if h == at {
					found = r.Linear.Turns[k].Equal(e.Turn)
				}
			}
			if !ok || !found {
				t.Fatalf("%s: the row does not span its linear character", r.Name)
			}
		}
	}
}

func dimensions(all []Representation) string {
	var list []int
	for _, r := range all {
		list = append(list, r.Dimension)
	}
	sort.Ints(list)
	return fmt.Sprint(list)
}

func quaternions(t *testing.T) *Group {
	// i and j on one particle of two levels: i = diag(√-1, -√-1), j = (0 -1; 1 0).
	i := Action{Sites: Identity(1), Phases: [][]Turn{{NewTurn(1, 4), NewTurn(3, 4)}}}
	j := Action{Sites: Identity(1), Levels: [][]int{{1, 0}}, Phases: [][]Turn{{{}, NewTurn(1, 2)}}}
	g, err := Span([]Action{i, j})
	if err != nil {
		t.Fatal(err)
	}
	return g
}

// Degrees: of the dihedral, symmetric and quaternion groups from textbooks;
// closed formulas elsewhere.
func TestRepresentationsAreComplete(t *testing.T) {
	cases := map[string]struct {
		g    *Group
		want string
	}{
		"trivial": {span(t, Identity(3)), "[1]"},
		"S3":      {span(t, ring(3), Permutation{1, 0, 2}), "[1 1 2]"},
		"S4":      {span(t, ring(4), Permutation{1, 0, 2, 3}), "[1 1 2 3 3]"},
		"A4":      {span(t, Permutation{1, 2, 0, 3}, Permutation{1, 0, 3, 2}), "[1 1 1 3]"},
		"Q8":      {quaternions(t), "[1 1 1 1 2]"},
		"S3×S3":   {span(t, beside(ring(3), Identity(3)), beside(Permutation{1, 0, 2}, Identity(3)), beside(Identity(3), ring(3)), beside(Identity(3), Permutation{1, 0, 2})), "[1 1 1 1 2 2 2 2 4]"},
		"S4×Z2":   {span(t, beside(ring(4), Identity(2)), beside(Permutation{1, 0, 2, 3}, Identity(2)), beside(Identity(4), ring(2))), "[1 1 1 1 2 2 3 3 3 3]"},
		// 7:3, the affine maps x → ax+b with a³ = 1 on seven places.
		"Frobenius 21": {span(t, ring(7), Permutation{0, 2, 4, 6, 1, 3, 5}), "[1 1 1 3 3]"},
		// The hypercube of dimension 4 has 2⁴·4! = 384 symmetries; pairs of
		// partitions of 4 in all give 20 representations.
		"hypercube": {span(t, Permutation{1, 0, 2, 3, 4, 5, 6, 7}, Permutation{2, 3, 0, 1, 4, 5, 6, 7}, Permutation{2, 3, 4, 5, 6, 7, 0, 1}), "[1 1 1 1 2 2 3 3 3 3 4 4 4 4 6 6 6 6 8 8]"},
	}
	for n := 1; n <= 12; n++ {
		var degrees []int
		for range n {
			degrees = append(degrees, 1)
		}
		cases[fmt.Sprintf("C%d", n)] = struct {
			g    *Group
			want string
		}{span(t, ring(n)), fmt.Sprint(degrees)}
		if n < 3 {
			continue
		}
		degrees = []int{1, 1}
		if n%2 == 0 {
			degrees = append(degrees, 1, 1)
		}
		for range (n - 1) / 2 {
			degrees = append(degrees, 2)
		}
		cases[fmt.Sprintf("D%d", n)] = struct {
			g    *Group
			want string
		}{span(t, ring(n), mirror(n)), fmt.Sprint(degrees)}
		cases[fmt.Sprintf("D%d×Z2", n)] = struct {
			g    *Group
			want string
		}{span(t, beside(ring(n), Identity(2)), beside(mirror(n), Identity(2)), beside(Identity(n), ring(2))), fmt.Sprint(append(append([]int(nil), degrees...), degrees...))}
	}
	for name, c := range cases {
		all, err := c.g.Representations(nil)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		checkTable(t, c.g, all)
		var want []int
		for _, f := range strings.Fields(strings.Trim(c.want, "[]")) {
			d := 0
			fmt.Sscan(f, &d)
			want = append(want, d)
		}
		sort.Ints(want)
		if dimensions(all) != fmt.Sprint(want) {
			t.Errorf("%s: degrees %s, want %v", name, dimensions(all), want)
		}
	}
}

func TestSpaceGroupsOfTori(t *testing.T) {
	for _, c := range []struct{ l, order, elements int }{{2, 4, 8 * 4}, {3, 4, 72}, {4, 4, 128}, {6, 4, 288}, {3, 6, 108}, {4, 6, 192}, {6, 6, 432}} {
		translations, point := torus(c.l, c.order)
		g := span(t, append(translations, point...)...)
		if c.l > 2 && g.Order() != c.elements {
			t.Errorf("%d×%d: %d elements, want %d", c.l, c.l, g.Order(), c.elements)
		}
		for _, normal := range [][]int{g.Generators()[:2], nil} {
			all, err := g.Representations(normal)
			if err != nil {
				t.Errorf("%d×%d, order %d: %v", c.l, c.l, c.order, err)
				continue
			}
			checkTable(t, g, all)
		}
		stars, err := g.Stars(g.Generators()[:2])
		if err != nil {
			t.Fatal(err)
		}
		momenta := 0
		for _, star := range stars {
			momenta += len(star)
			for _, k := range star {
				little, err := g.LittleGroup(g.Generators()[:2], k)
				if err != nil || len(little)*len(star) != g.Order() {
					t.Errorf("little group of %v: %d elements, star of %d, %v", k, len(little), len(star), err)
				}
			}
		}
		if momenta != c.l*c.l {
			t.Errorf("%d momenta in the stars", momenta)
		}
	}
}

func TestGroupObeysItsTable(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	translations, point := torus(4, 4)
	big := span(t, ring(8), Permutation{1, 0, 2, 3, 4, 5, 6, 7})
	if big.Order() != 40320 {
		t.Fatal(big.Order())
	}
	for _, g := range []*Group{span(t, append(translations, point...)...), quaternions(t), big} {
		for range 200 {
			i, j := r.IntN(g.Order()), r.IntN(g.Order())
			at, ok := g.Find(g.At(i).Compose(g.At(j)))
			if !ok || g.Product(i, j) != at {
				t.Fatalf("product %d∘%d is %d, want %d", i, j, g.Product(i, j), at)
			}
			if g.Product(i, g.Inverse(i)) != 0 || g.Product(g.Inverse(i), i) != 0 {
				t.Fatalf("inverse of %d", i)
			}
			if g.ClassOf(g.Conjugate(j, i)) != g.ClassOf(i) {
				t.Fatalf("class of %d", i)
			}
		}
	}
}

func TestRandomSubgroups(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	translations, point := torus(4, 4)
	g := span(t, append(translations, point...)...)
	for range 60 {
		sub := g.Subgroup([]int{r.IntN(g.Order()), r.IntN(g.Order())})
		short := g.Generating(sub)
		if got := g.Subgroup(short); fmt.Sprint(got) != fmt.Sprint(sub) {
			t.Fatalf("%v generates %d of %d elements", short, len(got), len(sub))
		}
		var actions []Action
		for _, i := range short {
			actions = append(actions, g.At(i))
		}
		if len(actions) == 0 {
			continue
		}
		h, err := Span(actions)
		if err != nil {
			t.Fatal(err)
		}
		all, err := h.Representations(nil)
		if err != nil {
			t.Fatal(err)
		}
		checkTable(t, h, all)
		// The linear characters are the representations of degree one.
		linear, err := g.LinearCharacters(short)
		if err != nil {
			t.Fatal(err)
		}
		ones := 0
		for _, r := range all {
			if r.Dimension == 1 {
				ones++
			}
		}
		if len(linear) != ones {
			t.Fatalf("%d linear characters, %d representations of degree one", len(linear), ones)
		}
		for _, l := range linear {
			turn := map[int]Turn{}
			for i, e := range l.Elements {
				turn[e] = l.Turns[i]
			}
			for range 20 {
				a, b := sub[r.IntN(len(sub))], sub[r.IntN(len(sub))]
				if !turn[g.Product(a, b)].Equal(turn[a].Add(turn[b])) {
					t.Fatalf("%v is no character", l)
				}
			}
		}
	}
}

// Magnetic translations on an l×l torus with the flux 1/l a cell: the group has
// l³ elements, generated with the central phase; l² representations of degree
// one and l-1 of degree l (the Heisenberg group over the integers modulo a
// prime l, from textbooks).
func TestMagneticTranslations(t *testing.T) {
	for _, l := range []int{2, 3, 5} {
		translations, _ := torus(l, 4)
		tx, ty := Translate(translations[0]), Translate(translations[1])
		// Landau gauge: T_y carries the phase x/l of a particle at x.
		ty.Phases = make([][]Turn, l*l)
		for i := range ty.Phases {
			ty.Phases[i] = []Turn{{}, NewTurn(int64(i%l), int64(l))}
		}
		g, err := Span([]Action{tx, ty})
		if err != nil {
			t.Fatal(err)
		}
		all, err := g.Representations(nil)
		if err != nil {
			t.Fatal(err)
		}
		checkTable(t, g, all)
		count := map[int]int{}
		for _, r := range all {
			count[r.Dimension]++
		}
		if l > 2 && (g.Order() != l*l*l || count[1] != l*l || count[l] != l-1) {
			t.Errorf("l = %d: order %d, degrees %v", l, g.Order(), count)
		}
		if l == 2 && count[2] == 0 {
			t.Errorf("no degenerate representation at half a flux: %v", count)
		}
	}
}

func TestIcosahedronIsRefused(t *testing.T) {
	// A5: degrees 1, 3, 3, 4, 5, of which 1 and 5 are monomial. From textbooks.
	g := span(t, ring(5), Permutation{1, 2, 0, 3, 4})
	_, err := g.Representations(nil)
	if !errors.Is(err, ErrNotMonomial) || !strings.Contains(err.Error(), "3 of dimensions 3 3 4;") {
		t.Errorf("error %v", err)
	}
}

func TestNormalSubgroupsAreChecked(t *testing.T) {
	g := span(t, ring(4), Permutation{1, 0, 2, 3})
	for name, c := range map[string]struct {
		generators []int
		turns      []Turn
		says       string
	}{
		"not abelian":     {g.Generators(), []Turn{{}, {}}, "do not commute"},
		"not normal":      {g.Generators()[:1], []Turn{{}}, "out of the subgroup"},
		"outside":         {[]int{24}, []Turn{{}}, "element 24"},
		"too few turns":   {nil, []Turn{{}}, "1 eigenvalues for 0 generators"},
		"not a character": {[]int{mustFind(t, g, Permutation{1, 0, 3, 2}), mustFind(t, g, Permutation{2, 3, 0, 1})}, []Turn{NewTurn(1, 3), {}}, "not a representation"},
	} {
		_, err := g.Over(c.generators, c.turns)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: error %v, want one that says %q", name, err, c.says)
		}
	}
}

func mustFind(t *testing.T, g *Group, p Permutation) int {
	t.Helper()
	i, ok := g.Find(Translate(p))
	if !ok {
		t.Fatalf("%v is not in the group", p)
	}
	return i
}

func ExampleGroup_Representations() {
	g, err := Span([]Action{Translate(Permutation{1, 2, 0}), Translate(Permutation{1, 0, 2})})
	if err != nil {
		fmt.Println(err)
		return
	}
	all, err := g.Representations(nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, r := range all {
		fmt.Println(r.Name, r.Dimension, r.Characters())
		for _, e := range r.Row {
			fmt.Println("  ", e.Generator.Sites, e.Turn)
		}
	}
	// Output:
	// Γ1 1 [(1+0i) (1+0i) (1+0i)]
	//    [1 2 0] 0/1
	//    [1 0 2] 0/1
	// Γ2 1 [(1+0i) (1+0i) (-1+0i)]
	//    [1 2 0] 0/1
	//    [1 0 2] 1/2
	// Γ3 2 [(2+0i) (-1+0i) (0+0i)]
	//    [1 2 0] 1/3
}
