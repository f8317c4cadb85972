package basis

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"

	"ketloom/basis/group"
)

var background = context.Background()

func randomSpace(r *rand.Rand, mostBits int) *Space {
	for {
		var sites []Site
		for range 1 + r.IntN(6) {
			sites = append(sites, []Site{SpinHalf(), Spin(2), Spin(3), HardCoreBoson(), Boson(3), Boson(2), Fermion(), Fermion(), Electron()}[r.IntN(9)])
		}
		if s, err := NewSpace(sites); err == nil && s.Bits() <= mostBits {
			return s
		}
	}
}

// allOf lists the configurations of the whole space by trying all words.
func allOf(s *Space) []Configuration {
	var all []Configuration
	for c := Configuration(0); c < 1<<s.Bits(); c++ {
		if s.Contains(c) {
			all = append(all, c)
		}
	}
	return all
}

func TestConfigurationsAndLevelsAreInverse(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 1))
	for range 60 {
		s := randomSpace(r, 12)
		all := allOf(s)
		if float64(len(all)) != s.Dimension() {
			t.Fatalf("%v: %d configurations, dimension %v", s.sites, len(all), s.Dimension())
		}
		for _, c := range all {
			back, err := s.Configuration(s.Levels(c))
			if err != nil || back != c {
				t.Fatalf("%v: %b -> %v -> %b (%v)", s.sites, c, s.Levels(c), back, err)
			}
		}
	}
}

func TestChargesSelectWhatTryingAllSelects(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 2))
	for range 150 {
		s := randomSpace(r, 11)
		weights := make([]int, s.Sites())
		for i := range weights {
			weights[i] = r.IntN(9) - 4
		}
		charges := []Charge{s.ParticleNumber(), s.TwiceSz(), s.Weighted("k", 1+r.IntN(5), weights), s.Weighted("w", 0, weights)}
		r.Shuffle(len(charges), func(i, j int) { charges[i], charges[j] = charges[j], charges[i] })
		all := allOf(s)
		witness := all[r.IntN(len(all))]
		var sector Sector
		for _, q := range charges[:r.IntN(len(charges)+1)] {
			sector.Charges = append(sector.Charges, q.Is(q.Of(s, witness)))
		}
		if r.IntN(2) == 0 {
			for i := 0; i+1 < s.Sites(); i++ {
				sector.Constraints = append(sector.Constraints, AtMost(1+r.IntN(2), []int{i, i + 1}))
			}
		}
		var want []Configuration
		for _, c := range all {
			ok := true
			for _, q := range sector.Charges {
				ok = ok && q.Charge.Of(s, c) == q.Charge.reduce(q.Value)
			}
			for _, k := range sector.Constraints {
				ok = ok && k.Allows(s, c)
			}
			if ok {
				want = append(want, c)
			}
		}
		b, err := New(background, s, sector, nil)
		if len(want) == 0 {
			if !errors.Is(err, ErrEmpty) && !strings.Contains(fmt.Sprint(err), ErrEmpty.Error()) {
				t.Fatalf("empty sector: error %v", err)
			}
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		checkList(t, b, want, all)
	}
}

// checkList compares a basis with the list that it should hold, in both
// directions.
func checkList(t *testing.T, b *Basis, want, all []Configuration) {
	t.Helper()
	if b.Len() != len(want) {
		t.Fatalf("%v: %d states, want %d", b, b.Len(), len(want))
	}
	place := map[Configuration]int{}
	for i, c := range want {
		place[c] = i
		if b.At(i) != c {
			t.Fatalf("state %d is %b, want %b", i, b.At(i), c)
		}
	}
	for _, c := range all {
		i, ok := b.Index(c)
		at, listed := place[c]
		if ok != listed || ok && i != at {
			t.Fatalf("%b: index %d %v, want %d %v", c, i, ok, at, listed)
		}
	}
}

func TestRankTablesAgreeWithTheWalk(t *testing.T) {
	s, _ := Uniform(18, SpinHalf())
	l, err := newLadder(s, []ChargeValue{s.TwiceSz().Is(-2)})
	if err != nil {
		t.Fatal(err)
	}
	tables := newRanker(l)
	if tables.cut == 0 {
		t.Fatal("no tables were made")
	}
	for c := Configuration(0); c < 1<<18; c++ {
		a, okA := tables.rank(c)
		b, okB := l.rank(c)
		if okA != okB || okA && (a != b || l.unrank(a) != c) {
			t.Fatalf("%b: %d %v by tables, %d %v by walking", c, a, okA, b, okB)
		}
	}
	if l.total != 43758 { // C(18, 8), closed formula
		t.Errorf("%d configurations", l.total)
	}
}

// actOn applies a symmetry to a product state by its definition: creators are
// moved one by one and put into order with their Jordan-Wigner signs.
func actOn(t *testing.T, s *Space, a group.Action, c Configuration) (Configuration, complex128) {
	t.Helper()
	mv, err := s.Resolve(a)
	if err != nil {
		t.Fatal(err)
	}
	phase := complex128(1)
	var out Configuration
	for m, mode := range s.modes { // the image of the vacuum, and what is not fermionic
		level := mode.Level(c)
		to := s.modes[mv.To[m]]
		phase *= mv.Phases[m][level].Complex()
		if mode.Fermionic {
			level = 0
		}
		out |= Configuration(mv.Levels[m][level]) << to.Shift
	}
	for m := len(s.modes) - 1; m >= 0; m-- { // the last creator acts first
		mode := s.modes[m]
		if !mode.Fermionic || mode.Level(c) == 0 {
			continue
		}
		to := s.modes[mv.To[m]]
		for _, other := range s.modes[:mv.To[m]] {
			if other.Fermionic && other.Level(out) == 1 {
				phase = -phase
			}
		}
		out ^= 1 << to.Shift
	}
	return out, phase
}

// checkSector verifies that every state is normalised, orthogonal to others
// by disjoint orbits, an eigenstate of each generator with its eigenvalue, and
// that Component inverts Orbit. It returns the number of states.
func checkSector(t *testing.T, s *Space, sector Sector) int {
	t.Helper()
	b, err := New(background, s, sector, &Options{Workers: 1})
	if errors.Is(err, ErrEmpty) {
		return 0
	}
	if err != nil {
		t.Fatal(err)
	}
	owner := map[Configuration]int{}
	for i := range b.Len() {
		vector := map[Configuration]complex128{}
		norm := 0.0
		for n, k := range b.Orbit(i, nil) {
			if n == 0 && (k.Configuration != b.At(i) || imag(k.Factor) != 0 || real(k.Factor) <= 0) {
				t.Fatalf("orbit of %b starts with %b and %v", b.At(i), k.Configuration, k.Factor)
			}
			if at, taken := owner[k.Configuration]; taken {
				t.Fatalf("%b is in states %d and %d", k.Configuration, at, i)
			}
			owner[k.Configuration] = i
			vector[k.Configuration] = k.Factor
			norm += real(k.Factor)*real(k.Factor) + imag(k.Factor)*imag(k.Factor)
			at, factor, ok := b.Component(k.Configuration)
			if !ok || at != i || cmplx.Abs(factor-k.Factor) > 1e-14 {
				t.Fatalf("component of %b: %d %v %v, want %d %v", k.Configuration, at, factor, ok, i, k.Factor)
			}
			if b.Representative(k.Configuration) != b.At(i) {
				t.Fatalf("representative of %b", k.Configuration)
			}
		}
		if math.Abs(norm-1) > 1e-12 {
			t.Fatalf("state %d has the norm %v", i, norm)
		}
		for _, e := range sector.Symmetries {
			image := map[Configuration]complex128{}
			for c, amplitude := range vector {
				to, phase := actOn(t, s, e.Generator, c)
				image[to] += amplitude * phase
			}
			for c, amplitude := range image {
				if cmplx.Abs(amplitude-e.Turn.Complex()*vector[c]) > 1e-12 {
					t.Fatalf("state %d of%s: the generator gives %v on %b, want %v", i, sector.describe(), amplitude, c, e.Turn.Complex()*vector[c])
				}
			}
		}
	}
	return b.Len()
}

func ringShift(n int) group.Action {
	p := make(group.Permutation, n)
	for i := range p {
		p[i] = (i + 1) % n
	}
	return group.Translate(p)
}

func TestMomentumSectorsOfEveryKindAddUp(t *testing.T) {
	for _, site := range []Site{SpinHalf(), Spin(2), HardCoreBoson(), Boson(3), Fermion(), Electron()} {
		for n := 1; n <= 7; n++ {
			s, err := Uniform(n, site)
			if err != nil {
				t.Fatal(err)
			}
			if s.Bits() > 12 {
				continue
			}
			sum := 0
			for k := range n {
				sum += checkSector(t, s, Sector{Symmetries: []group.Eigenvalue{{Generator: ringShift(n), Turn: group.NewTurn(-int64(k), int64(n))}}})
			}
			if float64(sum) != s.Dimension() {
				t.Errorf("%v, ring of %d: sectors add up to %d of %v states", site, n, sum, s.Dimension())
			}
		}
	}
}

func TestTorusSectorsWithParticleNumber(t *testing.T) {
	const lx, ly = 3, 3
	shift := func(dx, dy int) group.Action {
		p := make(group.Permutation, lx*ly)
		for x := range lx {
			for y := range ly {
				p[x+lx*y] = (x+dx)%lx + lx*((y+dy)%ly)
			}
		}
		return group.Translate(p)
	}
	for _, site := range []Site{Fermion(), HardCoreBoson()} {
		s, _ := Uniform(lx*ly, site)
		total := 0
		for n := 0; n <= lx*ly; n++ {
			for kx := range lx {
				for ky := range ly {
					total += checkSector(t, s, Sector{
						Charges: []ChargeValue{s.ParticleNumber().Is(n)},
						Symmetries: []group.Eigenvalue{
							{Generator: shift(1, 0), Turn: group.NewTurn(int64(-kx), lx)},
							{Generator: shift(0, 1), Turn: group.NewTurn(int64(-ky), ly)},
						},
					})
				}
			}
		}
		if total != 1<<(lx*ly) {
			t.Errorf("%v: sectors add up to %d", site, total)
		}
	}
}

// randomSymmetry returns up to four sites of one kind and a permutation of them with
// any relabelling and phases of quarter turns.
func randomSymmetry(r *rand.Rand) (*Space, group.Action) {
	kinds := []Site{SpinHalf(), Spin(2), HardCoreBoson(), Fermion(), Electron()}
	electron := [][]int{{0, 1, 2, 3}, {0, 2, 1, 3}, {1, 0, 3, 2}, {3, 2, 1, 0}, {2, 3, 0, 1}, {3, 1, 2, 0}, {1, 3, 0, 2}, {2, 0, 3, 1}}
	site := kinds[r.IntN(len(kinds))]
	n := 1 + r.IntN(4)
	s, _ := Uniform(n, site)
	a := group.Action{Sites: r.Perm(n), Levels: make([][]int, n), Phases: make([][]group.Turn, n)}
	for i := range n {
		if site.Kind == KindElectron {
			a.Levels[i] = electron[r.IntN(8)]
			up, down, empty := group.NewTurn(r.Int64N(4), 4), group.NewTurn(r.Int64N(4), 4), group.NewTurn(r.Int64N(4), 4)
			a.Phases[i] = []group.Turn{empty, empty.Add(up), empty.Add(down), empty.Add(up).Add(down)}
			continue
		}
		a.Levels[i] = r.Perm(site.Levels)
		a.Phases[i] = make([]group.Turn, site.Levels)
		for level := range a.Phases[i] {
			a.Phases[i][level] = group.NewTurn(r.Int64N(4), 4)
		}
	}
	return s, a
}

// Random cyclic symmetries with relabellings, phases, spin exchange and
// particle-hole exchange: the sectors of all eigenvalues add up.
func TestRandomMonomialSymmetries(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 7))
	signs := 0
	for range 80 {
		s, a := randomSymmetry(r)
		site := s.Site(0)
		order, err := a.Order()
		if err != nil {
			t.Fatal(err)
		}
		sum, refused := 0, false
		for k := range order {
			sector := Sector{Symmetries: []group.Eigenvalue{{Generator: a, Turn: group.NewTurn(int64(k), int64(order))}}}
			_, err := New(background, s, sector, nil)
			refused = refused || err != nil && !errors.Is(err, ErrEmpty)
			if err != nil && refused && !strings.Contains(err.Error(), "closes only up to a sign") {
				t.Fatal(err)
			}
			if err == nil {
				sum += checkSector(t, s, sector)
			}
		}
		if refused {
			signs++
		}
		if !refused && float64(sum) != s.Dimension() {
			t.Errorf("%v under %v: sectors add up to %d of %v", site, a, sum, s.Dimension())
		}
	}
	if signs == 0 || signs > 30 {
		t.Errorf("%d of 80 symmetries close only up to a sign; some do, most do not", signs)
	}
}

func TestDimensionsOfKnownSectors(t *testing.T) {
	// Independent NumPy program, Burnside's formula with characters.
	ring12 := []int{80, 75, 78, 76, 78, 75, 80, 75, 78, 76, 78, 75}
	s, _ := Uniform(12, SpinHalf())
	for k, want := range ring12 {
		b, err := New(background, s, Sector{
			Charges:    []ChargeValue{s.TwiceSz().Is(0)},
			Symmetries: []group.Eigenvalue{{Generator: ringShift(12), Turn: group.NewTurn(int64(k), 12)}},
		}, nil)
		if err != nil || b.Len() != want {
			t.Errorf("ring of 12, k=%d: %v (%v), want %d", k, b, err, want)
		}
	}
	s24, _ := Uniform(24, SpinHalf())
	for k, want := range map[int]int{0: 112720, 1: 112632, 12: 112720, 18: 112716} {
		b, err := New(background, s24, Sector{
			Charges:    []ChargeValue{s24.TwiceSz().Is(0)},
			Symmetries: []group.Eigenvalue{{Generator: ringShift(24), Turn: group.NewTurn(int64(k), 24)}},
		}, nil)
		if err != nil || b.Len() != want {
			t.Errorf("ring of 24, k=%d: %v (%v), want %d", k, b, err, want)
		}
	}
}

func TestSpinInversionOnTheSquare(t *testing.T) {
	// 4×4 torus, S_z = 0: 822 states at k = 0; with the point group and spin
	// inversion 107 and 46 (independent NumPy program, Burnside's formula and
	// enumeration).
	s, _ := Uniform(16, SpinHalf())
	move := func(f func(x, y int) (int, int)) group.Action {
		p := make(group.Permutation, 16)
		for x := range 4 {
			for y := range 4 {
				u, v := f(x, y)
				p[x+4*y] = (u+8)%4 + 4*((v+8)%4)
			}
		}
		return group.Translate(p)
	}
	gens := []group.Eigenvalue{
		{Generator: move(func(x, y int) (int, int) { return x + 1, y })},
		{Generator: move(func(x, y int) (int, int) { return x, y + 1 })},
	}
	count := func(gens []group.Eigenvalue) int {
		b, err := New(background, s, Sector{Charges: []ChargeValue{s.TwiceSz().Is(0)}, Symmetries: gens}, nil)
		if err != nil {
			t.Fatal(err)
		}
		return b.Len()
	}
	if got := count(gens); got != 822 {
		t.Errorf("translations: %d states, want 822", got)
	}
	gens = append(gens, group.Eigenvalue{Generator: move(func(x, y int) (int, int) { return -y, x })},
		group.Eigenvalue{Generator: move(func(x, y int) (int, int) { return -x, y })})
	for turn, want := range map[group.Turn]int{group.NewTurn(0, 1): 107, group.NewTurn(1, 2): 46} {
		flip := group.Eigenvalue{Generator: group.Relabel(16, []int{1, 0}), Turn: turn}
		if got := count(append(gens[:4:4], flip)); got != want {
			t.Errorf("spin inversion %v: %d states, want %d", turn, got, want)
		}
	}
}

func TestBlockadedConfigurations(t *testing.T) {
	// No two neighbours excited: 4×4 torus 743 (independent NumPy program,
	// transfer matrix and enumeration); ring of n: Lucas numbers, closed formula.
	s, _ := Uniform(16, HardCoreBoson())
	var bans []Constraint
	for x := range 4 {
		for y := range 4 {
			bans = append(bans, AtMost(1, []int{x + 4*y, (x+1)%4 + 4*y}), AtMost(1, []int{x + 4*y, x + 4*((y+1)%4)}))
		}
	}
	b, err := New(background, s, Sector{Constraints: bans}, nil)
	if err != nil || b.Len() != 743 {
		t.Errorf("hard squares: %v (%v), want 743", b, err)
	}
	lucas := []int{2, 1}
	for n := 2; n <= 15; n++ {
		lucas = append(lucas, lucas[n-1]+lucas[n-2])
		if n < 3 {
			continue
		}
		s, _ := Uniform(n, HardCoreBoson())
		var bans []Constraint
		for i := range n {
			bans = append(bans, AtMost(1, []int{i, (i + 1) % n}))
		}
		b, err := New(background, s, Sector{Constraints: bans}, nil)
		if err != nil || b.Len() != lucas[n] {
			t.Errorf("blockaded ring of %d: %v (%v), want %d", n, b, err, lucas[n])
		}
		sum := 0
		for k := range n {
			sum += checkSector(t, s, Sector{Constraints: bans, Symmetries: []group.Eigenvalue{{Generator: ringShift(n), Turn: group.NewTurn(int64(k), int64(n))}}})
		}
		if sum != lucas[n] {
			t.Errorf("blockaded ring of %d: momentum sectors add up to %d", n, sum)
		}
	}
}

func TestLargeSpacesAreNotVisited(t *testing.T) {
	s, err := Uniform(64, Fermion())
	if err != nil {
		t.Fatal(err)
	}
	b, err := New(background, s, Sector{Charges: []ChargeValue{s.ParticleNumber().Is(3)}}, nil)
	if err != nil || b.Len() != 41664 { // C(64, 3), closed formula
		t.Fatalf("%v (%v)", b, err)
	}
	for _, i := range []int{0, 1, 777, 41663} {
		if at, ok := b.Index(b.At(i)); !ok || at != i {
			t.Errorf("state %d comes back as %d %v", i, at, ok)
		}
	}
	b, err = New(background, s, Sector{
		Charges:    []ChargeValue{s.ParticleNumber().Is(3)},
		Symmetries: []group.Eigenvalue{{Generator: ringShift(64), Turn: group.NewTurn(5, 64)}},
	}, nil)
	if err != nil || b.Len() != 41664/64 {
		t.Errorf("at a momentum: %v (%v)", b, err)
	}
	half, err := New(background, s, Sector{Charges: []ChargeValue{s.ParticleNumber().Is(12)}}, nil)
	if err != nil {
		t.Fatal(err)
	}
	last := half.Len() - 1
	if at, ok := half.Index(half.At(last)); !ok || at != last {
		t.Errorf("state %d of %v comes back as %d", last, half, at)
	}
}

func TestResultDoesNotDependOnWorkers(t *testing.T) {
	s, _ := Uniform(14, Fermion())
	sector := Sector{
		Charges:    []ChargeValue{s.ParticleNumber().Is(6)},
		Symmetries: []group.Eigenvalue{{Generator: ringShift(14), Turn: group.NewTurn(3, 14)}},
	}
	one, err := New(background, s, sector, &Options{Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	for _, w := range []int{2, 3, 8} {
		many, err := New(background, s, sector, &Options{Workers: w})
		if err != nil {
			t.Fatal(err)
		}
		if fmt.Sprint(many.list) != fmt.Sprint(one.list) || fmt.Sprint(many.stab) != fmt.Sprint(one.stab) {
			t.Errorf("%d workers find another basis", w)
		}
	}
}

func TestCancelledEnumerationStops(t *testing.T) {
	ctx, cancel := context.WithCancel(background)
	s, _ := Uniform(40, SpinHalf())
	sector := Sector{
		Charges:    []ChargeValue{s.TwiceSz().Is(0)},
		Symmetries: []group.Eigenvalue{{Generator: ringShift(40), Turn: group.NewTurn(0, 1)}},
	}
	_, err := New(ctx, s, sector, &Options{Memory: 1 << 50, Progress: func(string, int64, int64, float64) { cancel() }})
	cancel()
	if !errors.Is(err, context.Canceled) {
		t.Errorf("error %v", err)
	}
}

func TestDescriptionsRebuildTheBasis(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 9))
	for range 40 {
		s := randomSpace(r, 10)
		a := group.Translate(group.Identity(s.Sites()))
		b, err := New(background, s, Sector{Symmetries: []group.Eigenvalue{{Generator: a}}, Constraints: []Constraint{AtMost(2, []int{0})}}, nil)
		if err != nil {
			t.Fatal(err)
		}
		data, err := json.Marshal(b)
		if err != nil {
			t.Fatal(err)
		}
		back, err := Decode(background, data, nil)
		if err != nil {
			t.Fatal(err)
		}
		if back.Fingerprint() != b.Fingerprint() || back.Len() != b.Len() || !back.Space().Equal(s) {
			t.Fatalf("%s comes back as another basis", data)
		}
		list := make([]Configuration, b.Len())
		for i := range list {
			list[i] = b.At(i)
		}
		checkList(t, back, list, allOf(s))
	}
	for _, bad := range []string{
		``, `[]`, `{}`, `{"sites":[{"kind":"spin","levels":2,"count":-1}]}`,
		`{"sites":[{"kind":"spin","levels":2,"count":1000000000}]}`,
		`{"sites":[{"kind":"anyon","levels":2,"count":1}]}`,
		`{"sites":[{"kind":"spin","levels":2,"count":4}],"dimension":15}`,
		`{"sites":[{"kind":"spin","levels":2,"count":4}],"sector":{"symmetries":[{"generator":{"sites":[0,0,1,2]}}]},"dimension":1}`,
		`{"sites":[{"kind":"spin","levels":2,"count":4}],"sector":{"charges":[{"charge":{"weights":[[1]]},"value":1}]},"dimension":1}`,
	} {
		if _, err := Decode(background, []byte(bad), nil); err == nil {
			t.Errorf("%s accepted", bad)
		}
	}
}

func TestErrorsSayWhatIsWrong(t *testing.T) {
	spins, _ := Uniform(4, SpinHalf())
	fermions, _ := Uniform(4, Fermion())
	mixed, _ := NewSpace([]Site{SpinHalf(), Fermion(), SpinHalf(), Fermion()})
	shift := group.Eigenvalue{Generator: ringShift(4), Turn: group.NewTurn(1, 4)}
	flip := group.Eigenvalue{Generator: group.Relabel(4, []int{1, 0})}
	for name, c := range map[string]struct {
		space  *Space
		sector Sector
		says   string
	}{
		"impossible charge":                 {spins, Sector{Charges: []ChargeValue{spins.TwiceSz().Is(6)}}, "2Sz=6"},
		"odd charge":                        {spins, Sector{Charges: []ChargeValue{spins.TwiceSz().Is(1)}}, "holds no state"},
		"momentum without states":           {fermions, Sector{Charges: []ChargeValue{fermions.ParticleNumber().Is(4)}, Symmetries: []group.Eigenvalue{{Generator: ringShift(4)}}}, "every orbit drops out"},
		"momentum off the ring":             {spins, Sector{Symmetries: []group.Eigenvalue{{Generator: ringShift(4), Turn: group.NewTurn(1, 3)}}}, "not a representation"},
		"permutation of too few sites":      {spins, Sector{Symmetries: []group.Eigenvalue{{Generator: ringShift(3)}}}, "3 sites on a space of 4"},
		"two sites sent to one":             {spins, Sector{Symmetries: []group.Eigenvalue{{Generator: group.Translate(group.Permutation{0, 0, 1, 2})}}}, "sites 0 and 1 are both sent to 0"},
		"unequal sites exchanged":           {mixed, Sector{Symmetries: []group.Eigenvalue{shift}}, "only join equal sites"},
		"spin inversion at finite S_z":      {spins, Sector{Charges: []ChargeValue{spins.TwiceSz().Is(2)}, Symmetries: []group.Eigenvalue{flip}}, "does not keep the charge \"2Sz\" = 2"},
		"charge that the shift changes":     {spins, Sector{Charges: []ChargeValue{spins.Weighted("x", 0, []int{0, 1, 2, 3}).Is(3)}, Symmetries: []group.Eigenvalue{shift}}, "does not keep the charge"},
		"charge of the wrong length":        {spins, Sector{Charges: []ChargeValue{spins.Weighted("x", 0, []int{1}).Is(3)}}, "weights for 0 sites"},
		"constraint that the shift changes": {spins, Sector{Constraints: []Constraint{AtMost(1, []int{0, 1})}, Symmetries: []group.Eigenvalue{shift}}, "no such constraint stands"},
		"constraint beyond the space":       {spins, Sector{Constraints: []Constraint{AtMost(1, []int{9})}}, "site 9"},
		"no space":                          {nil, Sector{}, "no space"},
	} {
		_, err := New(background, c.space, c.sector, nil)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: error %v, want one that says %q", name, err, c.says)
		}
	}
	for _, bad := range [][]Site{nil, {Spin(0)}, {Boson(-3)}, {Boson(1000)}, {{}}, {{KindFermion, 3}}} {
		if _, err := NewSpace(bad); err == nil {
			t.Errorf("%v accepted", bad)
		}
	}
	if _, err := Uniform(65, SpinHalf()); err == nil {
		t.Error("65 sites accepted")
	}
	if _, err := Uniform(33, Electron()); err == nil {
		t.Error("66 modes accepted")
	}
	large, _ := Uniform(48, SpinHalf())
	_, err := New(background, large, Sector{Symmetries: []group.Eigenvalue{{Generator: ringShift(48)}}}, nil)
	if err == nil || !strings.Contains(err.Error(), "MiB") {
		t.Errorf("a basis beyond the memory: error %v", err)
	}
}

func ExampleNew() {
	space, err := Uniform(6, SpinHalf())
	if err != nil {
		fmt.Println(err)
		return
	}
	shift := group.Translate(group.Permutation{1, 2, 3, 4, 5, 0})
	b, err := New(context.Background(), space, Sector{
		Charges:    []ChargeValue{space.TwiceSz().Is(0)},
		Symmetries: []group.Eigenvalue{{Generator: shift, Turn: group.NewTurn(1, 2)}},
	}, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	for i := range b.Len() {
		fmt.Println(space.Format(b.At(i)), b.Norm(i))
	}
	// Output:
	// |↑↑↑↓↓↓⟩ 6
	// |↑↑↓↑↓↓⟩ 6
	// |↑↓↑↑↓↓⟩ 6
	// |↑↓↑↓↑↓⟩ 18
}
