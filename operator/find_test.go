package operator_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/big"
	"math/bits"
	"math/rand/v2"
	"strings"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/operatortest"
)

// graph is a number of sites and its bonds.
type graph struct {
	n     int
	bonds [][2]int
}

// where joins the sites that a relation joins.
func where(n int, joined func(i, j int) bool) graph {
	g := graph{n: n}
	for j := range n {
		for i := range j {
			if joined(i, j) {
				g.bonds = append(g.bonds, [2]int{i, j})
			}
		}
	}
	return g
}

func ring(n int) graph {
	return where(n, func(i, j int) bool { return j-i == 1 || j-i == n-1 })
}

// copies puts disjoint copies side by side.
func (g graph) copies(k int) graph {
	all := graph{n: k * g.n}
	for c := range k {
		for _, b := range g.bonds {
			all.bonds = append(all.bonds, [2]int{b[0] + c*g.n, b[1] + c*g.n})
		}
	}
	return all
}

func (g graph) relabelled(p []int) graph {
	out := graph{n: g.n}
	for _, b := range g.bonds {
		out.bonds = append(out.bonds, [2]int{p[b[0]], p[b[1]]})
	}
	return out
}

func ofCluster(t *testing.T, l lattice.Lattice, t1, t2 [2]int) graph {
	t.Helper()
	c, err := lattice.New(l, t1, t2)
	if err != nil {
		t.Fatal(err)
	}
	bonds, err := c.Bonds(1)
	if err != nil {
		t.Fatal(err)
	}
	g := graph{n: c.Sites()}
	for _, b := range bonds {
		g.bonds = append(g.bonds, [2]int{b.From, b.To})
	}
	return g
}

// heisenberg is the sum of S_i·S_j over the bonds.
func (g graph) heisenberg(t *testing.T) operator.Operator {
	t.Helper()
	o := operator.On(uniform(t, g.n, basis.SpinHalf()))
	list := []operator.Operator{o.Zero()}
	for _, b := range g.bonds {
		list = append(list, o.Dot(b[0], b[1]))
	}
	return operator.Sum(list)
}

func uniform(t *testing.T, n int, site basis.Site) *basis.Space {
	t.Helper()
	space, err := basis.Uniform(n, site)
	if err != nil {
		t.Fatal(err)
	}
	return space
}

func symmetries(t *testing.T, a operator.Operator) operator.Symmetries {
	t.Helper()
	s, err := a.FindSymmetries(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	if !s.Complete {
		t.Fatalf("not complete, yet no error: %v", s)
	}
	for _, g := range s.Generators {
		if err := a.Commutes(g); err != nil {
			t.Fatal(err)
		}
	}
	return s
}

// automorphisms counts the permutations that keep the multiplicities of bonds,
// by placing one site after the other, and stops above most.
func (g graph) automorphisms(most int) int {
	bond := make([][]int, g.n)
	for i := range bond {
		bond[i] = make([]int, g.n)
	}
	for _, b := range g.bonds {
		bond[b[0]][b[1]]++
		bond[b[1]][b[0]]++
	}
	order := []int{0} // every site after a neighbour, where there is one
	for len(order) < g.n {
		next := -1
		for v := range g.n {
			placed, joined := false, false
			for _, u := range order {
				placed = placed || u == v
				joined = joined || bond[u][v] > 0
			}
			if !placed && (next < 0 || joined) {
				next = v
				if joined {
					break
				}
			}
		}
		order = append(order, next)
	}
	image, used, count := make([]int, g.n), make([]bool, g.n), 0
	var place func(k int)
	place = func(k int) {
		if count > most {
			return
		}
		if k == g.n {
			count++
			return
		}
		for w := range g.n {
			fits := !used[w]
			for x := 0; fits && x < k; x++ {
				fits = bond[order[x]][order[k]] == bond[image[order[x]]][w]
			}
			if fits {
				image[order[k]], used[w] = w, true
				place(k + 1)
				used[w] = false
			}
		}
	}
	place(0)
	return count
}

func factorial(n int) *big.Int { return new(big.Int).MulRange(1, int64(n)) }

func times2(n *big.Int) *big.Int { return new(big.Int).Lsh(n, 1) }

func square(x int, p int) bool {
	for y := 1; y < p; y++ {
		if (y*y-x)%p == 0 {
			return true
		}
	}
	return false
}

// Orders of groups of graphs from closed formulas; the Heisenberg model has
// twice as many symmetries, with spin inversion.
func TestOrdersOfGraphs(t *testing.T) {
	power := func(b *big.Int, k int64) *big.Int { return new(big.Int).Exp(b, big.NewInt(k), nil) }
	product := func(a, b *big.Int) *big.Int { return new(big.Int).Mul(a, b) }
	number := big.NewInt
	pairs := [][2]int{}
	for j := range 5 {
		for i := range j {
			pairs = append(pairs, [2]int{i, j})
		}
	}
	for name, c := range map[string]struct {
		g      graph
		want   *big.Int
		orbits int
	}{
		"no bonds":          {graph{n: 30}, factorial(30), 1},
		"one site":          {graph{n: 1}, number(1), 1},
		"complete":          {where(20, func(i, j int) bool { return true }), factorial(20), 1},
		"complete, largest": {where(64, func(i, j int) bool { return true }), factorial(64), 1},
		"two halves":        {where(16, func(i, j int) bool { return i < 8 && j >= 8 }), times2(power(factorial(8), 2)), 1},
		"star":              {where(12, func(i, j int) bool { return i == 0 }), factorial(11), 2},
		"path":              {where(15, func(i, j int) bool { return j == i+1 }), number(2), 8},
		"ring":              {ring(64), number(128), 1},
		"rings":             {ring(5).copies(4), product(power(number(10), 4), factorial(4)), 1},
		"dimers":            {graph{2, [][2]int{{0, 1}}}.copies(32), product(power(number(2), 32), factorial(32)), 1},
		"hypercube":         {where(64, func(i, j int) bool { return (i^j)&(i^j-1) == 0 }), product(power(number(2), 6), factorial(6)), 1},
		// Kneser graph of pairs out of five: S_5
		"Petersen": {where(10, func(i, j int) bool {
			a, b := pairs[i], pairs[j]
			return a[0] != b[0] && a[0] != b[1] && a[1] != b[0] && a[1] != b[1]
		}), number(120), 1},
		// strongly regular: rows and columns of a board, S_n wr 2
		"board of 4": {where(16, func(i, j int) bool { return i/4 == j/4 || i%4 == j%4 }), times2(power(factorial(4), 2)), 1},
		"board of 8": {where(64, func(i, j int) bool { return i/8 == j/8 || i%8 == j%8 }), times2(power(factorial(8), 2)), 1},
		// strongly regular with the parameters of the board of 4: 192, S. S. Shrikhande, Ann. Math. Stat. 30, 781 (1959); the order from memory, counted again below
		"Shrikhande": {shrikhande(), number(192), 1},
		// Paley, strongly regular: x -> a x + b with a square: p(p-1)/2
		"Paley 29": {where(29, func(i, j int) bool { return square(j-i, 29) }), number(29 * 14), 1},
		"Paley 61": {where(61, func(i, j int) bool { return square(j-i, 61) }), number(61 * 30), 1},
		// Latin square graph of the cyclic group: 7² translations, 6 multipliers, 6 exchanges of rows, columns, symbols
		"Latin square of 7": {where(49, func(i, j int) bool {
			return i/7 == j/7 || i%7 == j%7 || (i/7+i%7-j/7-j%7)%7 == 0
		}), number(49 * 36), 1},
		// strongly regular graphs of one set of parameters side by side
		"boards and Shrikhande": {boards(), product(times2(power(number(192), 2)), times2(power(number(1152), 2))), 2},
		"crown":                 {where(64, func(i, j int) bool { return i < 32 && j >= 32 && j-32 != i }), times2(factorial(32)), 1},
		// the same number of neighbours everywhere, two orbits
		"ring of 3 and of 4": {where(7, func(i, j int) bool {
			return j < 3 || i >= 3 && (j-i == 1 || j-i == 3)
		}), number(48), 2},
	} {
		s := symmetries(t, c.g.heisenberg(t))
		if want := times2(c.want); s.Order().Cmp(want) != 0 || !s.Inversion || !s.Inverting {
			t.Errorf("%s: %v; want the order %v", name, s, want)
		}
		if len(s.Orbits) != c.orbits {
			t.Errorf("%s: orbits %v; want %d", name, s.Orbits, c.orbits)
		}
		if len(s.Generators) > 8 || s.Nodes > 1000 {
			t.Errorf("%s: %d generators, %d nodes", name, len(s.Generators), s.Nodes)
		}
	}
}

// boards is two Shrikhande graphs and two boards of 4.
func boards() graph {
	all := shrikhande().copies(2)
	board := where(16, func(i, j int) bool { return i/4 == j/4 || i%4 == j%4 })
	for _, b := range board.copies(2).bonds {
		all.bonds = append(all.bonds, [2]int{b[0] + 32, b[1] + 32})
	}
	all.n = 64
	return all
}

func shrikhande() graph {
	return where(16, func(i, j int) bool {
		dx, dy := (j/4-i/4+4)%4, (j%4-i%4+4)%4
		for _, d := range [][2]int{{0, 1}, {0, 3}, {1, 0}, {3, 0}, {1, 1}, {3, 3}} {
			if d == [2]int{dx, dy} {
				return true
			}
		}
		return false
	})
}

// Clusters and random graphs against a plain count of automorphisms.
func TestOrdersOfClustersAgainstACount(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 5))
	cases := map[string]graph{
		"4x4 torus":       ofCluster(t, lattice.Square(), [2]int{4, 0}, [2]int{0, 4}),
		"6x6 torus":       ofCluster(t, lattice.Square(), [2]int{6, 0}, [2]int{0, 6}),
		"4x6 torus":       ofCluster(t, lattice.Square(), [2]int{4, 0}, [2]int{0, 6}),
		"2x4 torus":       ofCluster(t, lattice.Square(), [2]int{2, 0}, [2]int{0, 4}),
		"square 20":       ofCluster(t, lattice.Square(), [2]int{4, 2}, [2]int{-2, 4}),
		"triangular 36":   ofCluster(t, lattice.Triangular(), [2]int{6, 0}, [2]int{0, 6}),
		"kagome 27":       ofCluster(t, lattice.Kagome(), [2]int{3, 0}, [2]int{0, 3}),
		"kagome 36":       ofCluster(t, lattice.Kagome(), [2]int{2, 2}, [2]int{-2, 4}),
		"kagome 36, long": ofCluster(t, lattice.Kagome(), [2]int{3, 0}, [2]int{0, 4}),
		"honeycomb 24":    ofCluster(t, lattice.Honeycomb(), [2]int{2, 2}, [2]int{-2, 4}),
		"checkerboard 32": ofCluster(t, lattice.Checkerboard(), [2]int{4, 0}, [2]int{0, 4}),
		"Shrikhande":      shrikhande(),
		"Latin square":    latinSquare(r, 8),
	}
	for k := range 4 {
		cases[fmt.Sprint("random of degree 3, ", k)] = regular(r, 30, 3)
		cases[fmt.Sprint("random of degree 4, ", k)] = regular(r, 20, 4)
		cases[fmt.Sprint("random of degree 3, small, ", k)] = regular(r, 8, 3)
	}
	for k := range 60 { // bonds of several strengths: some appear twice or more
		g := graph{n: 4 + k%4}
		for range r.IntN(2 * g.n) {
			p := r.Perm(g.n)
			g.bonds = append(g.bonds, [2]int{p[0], p[1]})
		}
		cases[fmt.Sprint("weights, ", k)] = g
	}
	known := map[string]int{"4x4 torus": 384, "6x6 torus": 288} // closed formulas: 2^4·4! of the hypercube; 36·8
	for name, g := range cases {
		const most = 20000
		count := g.automorphisms(most)
		if count > most {
			t.Fatalf("%s: too many to count", name)
		}
		if want, ok := known[name]; ok && count != want {
			t.Fatalf("%s: counted %d automorphisms, want %d", name, count, want)
		}
		s := symmetries(t, g.heisenberg(t))
		if s.Elements() != int64(2*count) {
			t.Errorf("%s: %v; counted 2·%d", name, s, count)
		}
	}
}

// latinSquare returns the strongly regular graph of a Latin square of order n, a
// power of two, mixed by exchanges in squares of two by two: cells are joined
// if they share the row, the column or the symbol. Sites look alike to any
// refinement, yet few symmetries remain, if any.
func latinSquare(r *rand.Rand, n int) graph {
	symbol := make([]int, n*n)
	for x := range symbol {
		symbol[x] = x/n ^ x%n
	}
	for range 5000 {
		a, b, c, d := r.IntN(n)*n, r.IntN(n)*n, r.IntN(n), r.IntN(n)
		if a != b && c != d && symbol[a+c] == symbol[b+d] && symbol[a+d] == symbol[b+c] {
			symbol[a+c], symbol[a+d] = symbol[a+d], symbol[a+c]
			symbol[b+c], symbol[b+d] = symbol[b+d], symbol[b+c]
		}
	}
	return where(n*n, func(i, j int) bool { return i/n == j/n || i%n == j%n || symbol[i] == symbol[j] })
}

// regular returns a random graph in which every site has d neighbours.
func regular(r *rand.Rand, n, d int) graph {
	for {
		var ends []int
		for v := range n {
			for range d {
				ends = append(ends, v)
			}
		}
		r.Shuffle(len(ends), func(i, j int) { ends[i], ends[j] = ends[j], ends[i] })
		g, seen, good := graph{n: n}, map[[2]int]bool{}, true
		for k := 0; k < len(ends); k += 2 {
			b := [2]int{min(ends[k], ends[k+1]), max(ends[k], ends[k+1])}
			good = good && b[0] != b[1] && !seen[b]
			seen[b] = true
			g.bonds = append(g.bonds, b)
		}
		if good {
			return g
		}
	}
}

// A random numbering of the sites gives a conjugate group: the same order, and
// generators that are symmetries after the numbering is undone.
func TestNumberingDoesNotMatter(t *testing.T) {
	r := rand.New(rand.NewPCG(6, 6))
	for _, g := range []graph{ring(9), shrikhande(), ring(4).copies(3), regular(r, 16, 3), where(9, func(i, j int) bool { return j/3 == i/3 || i%3 == 0 && j%3 == 0 })} {
		want := symmetries(t, g.heisenberg(t))
		for range 5 {
			p := group.Permutation(r.Perm(g.n))
			s := symmetries(t, g.relabelled(p).heisenberg(t))
			if s.Order().Cmp(want.Order()) != 0 || len(s.Orbits) != len(want.Orbits) {
				t.Fatalf("%v and %v after %v", want, s, p)
			}
			for _, e := range s.Generators {
				back := group.Translate(p.Inverse()).Compose(e).Compose(group.Translate(p))
				if err := g.heisenberg(t).Commutes(back); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
}

// everyPermutation visits all permutations of n sites.
func everyPermutation(n int, visit func(p group.Permutation)) {
	p := group.Identity(n)
	var place func(k int)
	place = func(k int) {
		if k == n {
			visit(append(group.Permutation(nil), p...))
			return
		}
		for i := k; i < n; i++ {
			p[k], p[i] = p[i], p[k]
			place(k + 1)
			p[k], p[i] = p[i], p[k]
		}
	}
	place(0)
}

// bruteForce lists the keys of all symmetries by asking the algebra about each.
func bruteForce(a operator.Operator) map[string]bool {
	space := a.Space()
	found := map[string]bool{}
	inversion, ok := operator.SpinInversion(space)
	everyPermutation(space.Sites(), func(p group.Permutation) {
		for i, to := range p {
			if space.Site(i) != space.Site(to) {
				return
			}
		}
		g := group.Translate(p)
		if a.Commutes(g) == nil {
			found[g.Key()] = true
		}
		if ok {
			if h := g.Compose(inversion); a.Commutes(h) == nil {
				found[h.Key()] = true
			}
		}
	})
	return found
}

func agreesWithBruteForce(t *testing.T, name string, a operator.Operator) int {
	t.Helper()
	want := bruteForce(a)
	s := symmetries(t, a)
	if s.Elements() != int64(len(want)) {
		t.Fatalf("%s: %v; brute force finds %d\n%v", name, s, len(want), a)
	}
	elements := []group.Element{{Action: group.Translate(group.Identity(a.Space().Sites()))}}
	if len(s.Generators) > 0 {
		var err error
		if elements, err = group.Generate(s.Invariant()); err != nil {
			t.Fatal(err)
		}
	}
	if len(elements) != len(want) {
		t.Fatalf("%s: the generators make %d elements, want %d", name, len(elements), len(want))
	}
	inversion, inverting := false, false
	for _, e := range elements {
		if !want[e.Action.Key()] {
			t.Fatalf("%s: %v is not among the symmetries of brute force", name, e.Action)
		}
		inverting = inverting || e.Action.Levels != nil
		inversion = inversion || e.Action.Levels != nil && e.Action.Sites.IsIdentity()
	}
	if inversion != s.Inversion || inverting != s.Inverting {
		t.Fatalf("%s: %v; inversion among the elements: %v, with permutations %v", name, s, inversion, inverting)
	}
	for _, orbit := range s.Orbits {
		reached := map[int]bool{}
		for _, e := range elements {
			reached[e.Action.Sites[orbit[0]]] = true
		}
		if len(reached) != len(orbit) {
			t.Fatalf("%s: orbit %v, but %v is reached", name, orbit, reached)
		}
	}
	return len(want)
}

// spread adds the images of an operator under the powers of a random
// permutation, so that there is something to find.
func spread(r *rand.Rand, a operator.Operator) operator.Operator {
	space := a.Space()
	p := group.Identity(space.Sites())
	for range 3 {
		i, j := r.IntN(len(p)), r.IntN(len(p))
		if space.Site(i) == space.Site(j) {
			p[i], p[j] = p[j], p[i]
		}
	}
	g := group.Translate(p)
	if inversion, ok := operator.SpinInversion(space); ok && r.IntN(2) == 0 {
		g = g.Compose(inversion)
	}
	order, _ := g.Order()
	sum, image := a, a
	for range order - 1 {
		image = image.Transformed(g)
		sum = sum.Plus(image)
	}
	return sum
}

// Random operators on spaces of every kind, brute force over all permutations
// with and without inversion.
func TestSymmetriesAgainstBruteForce(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 7))
	nontrivial := 0
	for k := range 150 {
		space := operatortest.RandomSpace(r, 5, 1e4)
		a := operatortest.Random(r, space, 1+r.IntN(2), 4)
		if k%3 > 0 {
			a = spread(r, a)
		}
		if agreesWithBruteForce(t, "random", a) > 1 {
			nontrivial++
		}
	}
	if nontrivial < 50 {
		t.Fatalf("only %d of the cases had a symmetry", nontrivial)
	}
}

// Weighted graphs of few weights, three-spin terms and fermionic products
// whose sign depends on the order of sites, on up to six sites.
func TestFewWeightsAgainstBruteForce(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 8))
	orders := map[int]int{}
	for k := range 36 {
		n := 4 + k%18/17 + k%4/3 // up to six
		spins, fermions, electrons := operator.On(uniform(t, n, basis.SpinHalf())), operator.On(uniform(t, n, basis.Fermion())), operator.On(uniform(t, n, basis.Electron()))
		a, b, c := spins.Zero(), fermions.Zero(), electrons.Zero()
		for range 1 + r.IntN(2*n) {
			p := r.Perm(n)
			w := complex([]float64{1, 1, 0.5}[r.IntN(3)], 0)
			chiral := spins.Sz(p[0]).Times(spins.Raise(p[1])).Times(spins.Lower(p[2]))
			a = a.Plus(spins.Dot(p[0], p[1]).Scale(w)).Plus(chiral.Minus(chiral.Adjoint()).Scale(complex(0, float64(r.IntN(2)))))
			pair := fermions.Create(p[0]).Times(fermions.Create(p[1]))
			if k%2 == 0 {
				pair = pair.Times(fermions.Annihilate(p[2])).Times(fermions.Annihilate(p[3]))
			}
			b = b.Plus(pair.Plus(pair.Adjoint()))
			hop := electrons.CreateSpin(p[0], operator.Up).Times(electrons.AnnihilateSpin(p[1], operator.Up))
			hop = hop.Plus(electrons.CreateSpin(p[0], operator.Down).Times(electrons.AnnihilateSpin(p[1], operator.Down)))
			if k%2 == 0 {
				hop = electrons.Raise(p[0]).Times(electrons.Lower(p[1]))
			}
			c = c.Plus(hop).Plus(hop.Adjoint())
		}
		for name, x := range map[string]operator.Operator{"spins": a, "fermions": b, "electrons": c} {
			orders[agreesWithBruteForce(t, name, x)]++
		}
	}
	if len(orders) < 6 {
		t.Fatalf("little variety: %v", orders)
	}
}

// The sign that remains of a fermionic product makes arrows: pairs around a
// ring keep rotations (with the sign at the seam the other way round they
// would not) and lose reflections.
func TestPairsOfFermionsAroundARing(t *testing.T) {
	for _, n := range []int{5, 8, 13} {
		o := operator.On(uniform(t, n, basis.Fermion()))
		h := o.Zero()
		for i := range n {
			pair := o.Create(i).Times(o.Create((i + 1) % n))
			h = h.Plus(pair).Plus(pair.Adjoint())
		}
		if s := symmetries(t, h); s.Elements() != int64(n) || s.Inverting {
			t.Errorf("%d sites: %v", n, s)
		}
	}
}

// Long products of creators, whose sign the search sees only as sites are
// settled: with random signs nothing remains, and one orbit under a random
// permutation brings that back.
func TestSignsOfLongProducts(t *testing.T) {
	r := rand.New(rand.NewPCG(10, 10))
	long := func(n int) operator.Operator {
		o := operator.On(uniform(t, n, basis.Fermion()))
		var list []operator.Operator
		for set := range 1 << n {
			if bits.OnesCount(uint(set)) != 5 {
				continue
			}
			p := o.One().Scale(complex(float64(1-2*r.IntN(2)), 0))
			for i := range n {
				if set>>i&1 == 1 {
					p = p.Times(o.Create(i))
				}
			}
			list = append(list, p)
		}
		return operator.Sum(list)
	}
	if s := symmetries(t, long(9)); s.Elements() != 1 {
		t.Error(s)
	}
	for range 4 {
		agreesWithBruteForce(t, "long products", spread(r, long(6)))
	}
	const n = 9
	o := operator.On(uniform(t, n, basis.Fermion()))
	even, odd := o.Zero(), o.Zero() // reversing a product of five is an even permutation, of six an odd one
	for k := range n {
		p := o.One()
		for x := range 5 {
			p = p.Times(o.Create((k + x) % n))
		}
		even, odd = even.Plus(p), odd.Plus(p.Times(o.Create((k+5)%n)))
	}
	if s := symmetries(t, even); s.Elements() != 2*n {
		t.Error(s)
	}
	if s := symmetries(t, odd); s.Elements() != n {
		t.Error(s)
	}
}

// Pairs between all sites, directed by the squares modulo p, are a tournament:
// x -> a x + b with a square, p(p-1)/2 symmetries (closed formula).
func TestPairsOfATournament(t *testing.T) {
	for _, p := range []int{7, 23, 43} {
		o := operator.On(uniform(t, p, basis.Fermion()))
		h := o.Zero()
		for j := range p {
			for i := range j {
				sign := complex128(-1)
				if square(j-i, p) {
					sign = 1
				}
				pair := o.Create(i).Times(o.Create(j)).Scale(sign)
				h = operator.Sum([]operator.Operator{h, pair, pair.Adjoint()})
			}
		}
		if s := symmetries(t, h); s.Elements() != int64(p*(p-1)/2) {
			t.Errorf("%d: %v", p, s)
		}
		if p == 7 {
			agreesWithBruteForce(t, "one pair inverted", h.Plus(o.Create(0).Times(o.Create(1)).Scale(-2)))
		}
	}
}

// A ring with flux keeps its rotations and loses reflections; with half a
// flux quantum in all, hoppings are real in another gauge, but in this one
// reflections are none without phases.
func TestRingWithFlux(t *testing.T) {
	const n = 12
	for _, c := range []struct {
		turn float64
		want int64
	}{{0, 2 * n}, {0.1, n}, {0.5, 2 * n}} {
		for _, site := range []basis.Site{basis.Fermion(), basis.HardCoreBoson(), basis.Electron()} {
			o := operator.On(uniform(t, n, site))
			h := o.Zero()
			for i := range n {
				j := (i + 1) % n
				for spin := range 2 {
					var hop operator.Operator
					switch {
					case site == basis.Electron():
						hop = o.CreateSpin(i, spin).Times(o.AnnihilateSpin(j, spin))
					case spin == 1:
						continue
					default:
						hop = o.Create(i).Times(o.Annihilate(j))
					}
					s, x := math.Sincos(2 * math.Pi * c.turn)
					if c.turn == 0.5 {
						s, x = 0, -1
					}
					hop = hop.Scale(complex(x, s))
					h = h.Plus(hop).Plus(hop.Adjoint())
				}
			}
			want := c.want
			if site == basis.Electron() {
				want *= 2
			}
			if s := symmetries(t, h); s.Elements() != want || s.Inversion != (site == basis.Electron()) {
				t.Errorf("%v, %v of a turn a bond: %v", site, c.turn, s)
			}
		}
	}
}

// The Dzyaloshinskii term of a ring changes sign with a reflection and with
// spin inversion, and keeps both together; a field along z leaves no
// inversion, one along x does.
func TestInversionInSpinRings(t *testing.T) {
	const n = 8
	o := operator.On(uniform(t, n, basis.SpinHalf()))
	xy, twist, z, x := o.Zero(), o.Zero(), o.Zero(), o.Zero()
	for i := range n {
		j := (i + 1) % n
		xy = xy.Plus(o.Dot(i, j))
		twist = twist.Plus(o.Sx(i).Times(o.Sy(j)).Minus(o.Sy(i).Times(o.Sx(j))))
		z, x = z.Plus(o.Sz(i)), x.Plus(o.Sx(i))
	}
	for name, c := range map[string]struct {
		h                    operator.Operator
		order                int64
		inversion, inverting bool
	}{
		"Heisenberg":      {xy, 4 * n, true, true},
		"Dzyaloshinskii":  {xy.Plus(twist.Scale(0.3)), 2 * n, false, true},
		"field along z":   {xy.Plus(z.Scale(0.2)), 2 * n, false, false},
		"field along x":   {xy.Plus(x.Scale(0.2)), 4 * n, true, true},
		"twist and field": {xy.Plus(twist.Scale(0.3)).Plus(z.Scale(0.2)), n, false, false},
	} {
		s := symmetries(t, c.h)
		if s.Elements() != c.order || s.Inversion != c.inversion || s.Inverting != c.inverting {
			t.Errorf("%s: %v; want %d %v %v", name, s, c.order, c.inversion, c.inverting)
		}
		only, err := c.h.FindSymmetries(context.Background(), &operator.FindOptions{PermutationsOnly: true})
		want := c.order
		if c.inverting {
			want /= 2
		}
		if err != nil || only.Elements() != want || only.Inverting {
			t.Errorf("%s, permutations only: %v, %v", name, only, err)
		}
	}
}

// Disorder leaves nothing but the inversion, or nothing.
func TestDisorderIsTrivial(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 9))
	o := operator.On(uniform(t, 64, basis.SpinHalf()))
	var list []operator.Operator
	for i := range 64 {
		for j := range i {
			list = append(list, o.Dot(i, j).Scale(complex(r.NormFloat64(), 0)))
		}
	}
	h := operator.Sum(list)
	if s := symmetries(t, h); s.Elements() != 2 || !s.Inversion || len(s.Orbits) != 64 {
		t.Error(s)
	}
	if s := symmetries(t, h.Plus(o.Sz(5))); s.Elements() != 1 || len(s.Generators) != 0 {
		t.Error(s)
	}
}

// Different kinds of sites are not exchanged, and inversion acts on all.
func TestSitesOfSeveralKinds(t *testing.T) {
	sites := []basis.Site{basis.SpinHalf(), basis.Boson(2), basis.SpinHalf(), basis.Boson(2), basis.Fermion(), basis.Fermion(), basis.Spin(2)}
	space, err := basis.NewSpace(sites)
	if err != nil {
		t.Fatal(err)
	}
	if s := symmetries(t, operator.On(space).Zero()); s.Elements() != 16 || len(s.Orbits) != 4 {
		t.Error(s)
	}
	bosons := uniform(t, 3, basis.Boson(2))
	if s := symmetries(t, operator.On(bosons).One()); s.Elements() != 6 || s.Inverting {
		t.Error(s)
	}
}

// Coefficients that differ by rounding are equal, larger differences are not.
func TestRoundingOfCoefficients(t *testing.T) {
	o := operator.On(uniform(t, 3, basis.SpinHalf()))
	third := 1.0 / 3
	h := o.Dot(0, 1).Scale(complex(0.1+0.2, 0)).Plus(o.Dot(1, 2).Scale(0.3)).Plus(o.Dot(2, 0).Scale(complex(0.9*third, 0)))
	if s := symmetries(t, h); s.Elements() != 12 {
		t.Error(s)
	}
	if s := symmetries(t, h.Plus(o.Dot(0, 1).Scale(1e-12))); s.Elements() != 4 {
		t.Error(s)
	}
	chain := o.Sz(0).Plus(o.Sz(1).Scale(1 + 2e-14)).Plus(o.Sz(2).Scale(1 + 4e-14))
	if _, err := chain.FindSymmetries(context.Background(), nil); err == nil || !strings.Contains(err.Error(), "round") {
		t.Errorf("linked coefficients: %v", err)
	}
}

// The invariant sector holds one state for each orbit of configurations, and
// the products prove the symmetries once more.
func TestSectorFromFoundSymmetries(t *testing.T) {
	ctx := context.Background()
	for name, g := range map[string]graph{"ring": ring(10), "Petersen-like": shrikhande(), "complete": where(7, func(i, j int) bool { return true })} {
		h := g.heisenberg(t)
		s := symmetries(t, h)
		space := h.Space()
		b, err := basis.New(ctx, space, basis.Sector{Symmetries: s.Invariant()}, nil)
		if err != nil {
			t.Fatal(name, err)
		}
		root := make([]int, 1<<g.n)
		for c := range root {
			root[c] = c
		}
		find := func(c int) int {
			for root[c] != c {
				c = root[c]
			}
			return c
		}
		for _, e := range s.Generators {
			for c := range root {
				image := 0
				for i := range g.n {
					image |= e.Level(i, c>>i&1) << e.Sites[i]
				}
				x, y := find(c), find(image)
				root[max(x, y)] = min(x, y)
			}
		}
		orbits := 0
		for c := range root {
			if root[c] == c {
				orbits++
			}
		}
		if b.Len() != orbits {
			t.Errorf("%s: %d states in the invariant sector, %d orbits", name, b.Len(), orbits)
		}
		if _, err := matrix.New(ctx, h, b, nil); err != nil {
			t.Error(name, err)
		}
	}
}

// What stops a search is an error beside a group of exact order.
func TestSearchThatIsStopped(t *testing.T) {
	h := ring(12).heisenberg(t)
	whole := symmetries(t, h)
	seen, inversions := map[string]bool{}, 0
	for nodes := int64(1); nodes < whole.Nodes; nodes++ {
		s, err := h.FindSymmetries(context.Background(), &operator.FindOptions{Nodes: nodes})
		if !errors.Is(err, operator.ErrSearchLimit) || s.Complete {
			t.Fatalf("%d nodes: %v, %v", nodes, s, err)
		}
		if new(big.Int).Rem(whole.Order(), s.Order()).Sign() != 0 {
			t.Fatalf("%d nodes: the order %v does not divide %v", nodes, s.Order(), whole.Order())
		}
		if elements, _ := group.Generate(s.Invariant()); int64(max(len(elements), 1)) != s.Elements() {
			t.Fatalf("%d nodes: %d elements, %v", nodes, len(elements), s)
		}
		seen[s.Order().String()] = true
		if s.Inversion {
			inversions++
		}
	}
	if len(seen) < 2 || inversions == 0 {
		t.Fatalf("orders %v, %d with the inversion alone, which needs no search", seen, inversions)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if s, err := h.FindSymmetries(ctx, nil); !errors.Is(err, context.Canceled) || s.Complete {
		t.Fatal(s, err)
	}
	if _, err := h.FindSymmetries(context.Background(), &operator.FindOptions{Nodes: -1}); err == nil {
		t.Fatal("a negative limit is accepted")
	}
	var none operator.Operator
	if _, err := none.FindSymmetries(context.Background(), nil); err == nil {
		t.Fatal("an operator on no space has symmetries")
	}
	if _, err := operator.On(h.Space()).Sz(99).FindSymmetries(context.Background(), nil); err == nil {
		t.Fatal("an operator with an error has symmetries")
	}
}
