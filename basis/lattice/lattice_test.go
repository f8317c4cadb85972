package lattice

import (
	"encoding/json"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"os"
	"sort"
	"strings"
	"testing"

	"ketloom/basis/group"
)

func stock() []Lattice {
	return []Lattice{Chain(), Square(), Triangular(), Honeycomb(), Kagome(), Checkerboard()}
}

func must(t *testing.T) func(*Cluster, error) *Cluster {
	t.Helper()
	return func(c *Cluster, err error) *Cluster {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return c
	}
}

// pairs returns the unordered pairs of sites, sorted, as text.
func pairs(list [][2]int) string {
	var text []string
	for _, p := range list {
		text = append(text, fmt.Sprintf("%03d-%03d", min(p[0], p[1]), max(p[0], p[1])))
	}
	sort.Strings(text)
	return strings.Join(text, " ")
}

func ends(bonds []Bond) [][2]int {
	var list [][2]int
	for _, b := range bonds {
		list = append(list, [2]int{b.From, b.To})
	}
	return list
}

func TestBondsAndMomentaAgreeWithIndependentLists(t *testing.T) {
	data, err := os.ReadFile("testdata/bonds.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		Source   string
		Clusters []struct {
			Name, Lattice string
			T1, T2        [2]int
			Bonds         [][2]int
			Momenta       []string
		}
	}
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Clusters) != 7 {
		t.Fatalf("%d clusters read, want 7", len(file.Clusters))
	}
	for _, want := range file.Clusters {
		for _, l := range stock() {
			if l.Name != want.Lattice {
				continue
			}
			c := must(t)(New(l, want.T1, want.T2))
			bonds, err := c.Bonds(1)
			if err != nil {
				t.Fatal(err)
			}
			if pairs(ends(bonds)) != pairs(want.Bonds) {
				t.Errorf("%s: bonds\n%s\nwant (%s)\n%s", want.Name, pairs(ends(bonds)), file.Source, pairs(want.Bonds))
			}
			if len(want.Momenta) == 0 {
				continue
			}
			var momenta []string
			for _, k := range c.Momenta() {
				text := "("
				for d, turn := range k.Turns {
					text += map[bool]string{true: "0", false: turn.String()}[turn.IsZero()] + []string{",", ")"}[d]
				}
				momenta = append(momenta, text)
			}
			sort.Strings(momenta)
			if fmt.Sprint(momenta) != fmt.Sprint(want.Momenta) {
				t.Errorf("%s: momenta %v, want %v", want.Name, momenta, want.Momenta)
			}
		}
	}
}

// Coordination numbers and distances by the closed formulas of the lattices,
// nearest-neighbour distance 1.
func TestShellsHaveTheirCoordination(t *testing.T) {
	r3 := math.Sqrt(3)
	for name, want := range map[string]struct {
		distance []float64
		z        []float64
	}{
		"chain":        {[]float64{1, 2, 3, 4}, []float64{2, 2, 2, 2}},
		"square":       {[]float64{1, math.Sqrt2, 2, math.Sqrt(5)}, []float64{4, 4, 4, 8}},
		"triangular":   {[]float64{1, r3, 2, math.Sqrt(7)}, []float64{6, 6, 6, 12}},
		"honeycomb":    {[]float64{1, r3, 2, math.Sqrt(7)}, []float64{3, 6, 3, 6}},
		"kagome":       {[]float64{1, r3, 2, math.Sqrt(7)}, []float64{4, 4, 6, 8}},
		"checkerboard": {[]float64{1, math.Sqrt2, 2, math.Sqrt(5)}, []float64{4, 4, 4, 8}},
	} {
		for _, l := range stock() {
			if l.Name != name {
				continue
			}
			distances, err := l.Distances(40)
			if err != nil {
				t.Fatal(err)
			}
			for i := range distances[1:] {
				if distances[i] >= distances[i+1] {
					t.Errorf("%s: shell distances do not ascend: %v", name, distances)
				}
			}
			size := 8
			c := must(t)(Torus(l, size, map[int]int{1: 1, 2: size}[l.Dimension]))
			for i, z := range want.z {
				if l.Dimension == 1 && i == 3 {
					continue // both directions meet half-way around
				}
				if math.Abs(distances[i]-want.distance[i]) > 1e-12 {
					t.Errorf("%s: shell %d at %v, want %v", name, i+1, distances[i], want.distance[i])
				}
				bonds, err := c.Bonds(i + 1)
				if err != nil {
					t.Fatal(err)
				}
				if got := 2 * float64(len(bonds)) / float64(c.Sites()); got != z {
					t.Errorf("%s: shell %d has %v neighbours, want %v", name, i+1, got, z)
				}
			}
		}
	}
}

// randomCluster returns a random periodic cluster with 1 to 60 cells.
func randomCluster(t *testing.T, r *rand.Rand) *Cluster {
	for {
		l := stock()[r.IntN(6)]
		if l.Dimension == 1 {
			return must(t)(Ring(1 + r.IntN(20)))
		}
		t1, t2 := [2]int{r.IntN(13) - 6, r.IntN(13) - 6}, [2]int{r.IntN(13) - 6, r.IntN(13) - 6}
		if det := t1[0]*t2[1] - t1[1]*t2[0]; det != 0 && det <= 60 && det >= -60 {
			return must(t)(New(l, t1, t2))
		}
	}
}

func TestClustersAreConsistent(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for range 150 {
		c := randomCluster(t, r)
		for site := range c.Sites() {
			cell, orbital := c.CellOf(site)
			if c.SiteAt(cell, orbital) != site {
				t.Fatalf("%v: site %d lies in cell %v, where site %d is", c, site, cell, c.SiteAt(cell, orbital))
			}
			p := plus(c.lattice.point(float64(cell[0]), float64(cell[1])), c.lattice.Sites[orbital])
			if c.Position(site) != p {
				t.Fatalf("%v: site %d is at %v", c, site, c.Position(site))
			}
			if c.lattice.Dimension == 2 {
				t1, t2 := c.Periods()
				a, b := r.IntN(9)-4, r.IntN(9)-4
				far := [2]int{cell[0] + a*t1[0] + b*t2[0], cell[1] + a*t1[1] + b*t2[1]}
				if c.SiteAt(far, orbital) != site {
					t.Fatalf("%v: cell %v is not folded to %v", c, far, cell)
				}
			}
		}
		if c.Cells()*c.Orbitals() != c.Sites() || len(c.Momenta()) != c.Cells() {
			t.Fatalf("%v: %d cells, %d momenta", c, c.Cells(), len(c.Momenta()))
		}
	}
}

func TestTranslationsFormTheGroupOfTheCells(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for range 60 {
		c := randomCluster(t, r)
		seen := map[string]bool{}
		for i, k := range c.Momenta() {
			elements, err := group.Generate(c.Sector(k))
			if err != nil {
				t.Fatalf("%v, momentum %v: %v", c, k, err)
			}
			if len(elements) != c.Cells() {
				t.Fatalf("%v: %d translations", c, len(elements))
			}
			seen[k.String()] = true
			if other := c.Momentum(k.Index[0], k.Index[1]); other != k {
				t.Fatalf("%v: momentum %d is %v by its index, %v in the list", c, i, other, k)
			}
			// The same momentum in Cartesian components, from a site and its image under a1.
			for d, turn := range k.Turns {
				a := [][2]float64{c.lattice.A1, c.lattice.A2}[d]
				if got := cmplx.Exp(complex(0, dot(k.K, a))); cmplx.Abs(got-turn.Complex()) > 1e-9 {
					t.Fatalf("%v: momentum %v has the vector %v", c, k, k.K)
				}
			}
		}
		if len(seen) != c.Cells() {
			t.Fatalf("%v: %d different momenta of %d", c, len(seen), c.Cells())
		}
		for _, k := range c.Momenta() {
			minus := c.Momentum(-k.Index[0], -k.Index[1])
			if !minus.Turns[0].Equal(k.Turns[0].Neg()) || !minus.Turns[1].Equal(k.Turns[1].Neg()) {
				t.Fatalf("%v: -(%v) is %v", c, k, minus)
			}
			a, b := r.IntN(9)-4, r.IntN(9)-4
			q := c.Momentum(a, b)
			sum := c.Momentum(k.Index[0]+a, k.Index[1]+b)
			if !sum.Turns[0].Equal(k.Turns[0].Add(q.Turns[0])) || !sum.Turns[1].Equal(k.Turns[1].Add(q.Turns[1])) {
				t.Fatalf("%v: %v + %v is %v", c, k, q, sum)
			}
		}
	}
}

func TestBondsAreCarriedToBondsByTranslations(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	checked := 0
	for range 200 {
		c := randomCluster(t, r)
		for shell := 1; shell <= 3; shell++ {
			bonds, err := c.Bonds(shell)
			if err != nil {
				continue
			}
			checked++
			for _, translation := range c.Translations() {
				moved := ends(bonds)
				for i := range moved {
					moved[i] = [2]int{translation.Sites[moved[i][0]], translation.Sites[moved[i][1]]}
				}
				if pairs(moved) != pairs(ends(bonds)) {
					t.Fatalf("%v: shell %d is not invariant", c, shell)
				}
			}
			for _, b := range bonds {
				t1, t2 := c.period(0), c.period(1)
				end := plus(c.Position(b.To), plus(scale(float64(b.Wrap[0]), t1), scale(float64(b.Wrap[1]), t2)))
				if d := minus(plus(c.Position(b.From), b.Displacement), end); length(d) > 1e-9 {
					t.Fatalf("%v: bond %+v ends at a distance %v from its site", c, b, d)
				}
				again, ok := c.BondTo(b.From, b.Cells, b.To%c.Orbitals())
				if again.Shell = b.Shell; !ok || length(minus(again.Displacement, b.Displacement)) > 1e-12 {
					t.Fatalf("%v: bond %+v is %+v by its displacement", c, b, again)
				}
				if again.Displacement = b.Displacement; again != b {
					t.Fatalf("%v: bond %+v is %+v by its displacement", c, b, again)
				}
				if math.Abs(c.Distance(b.From, b.To)-length(b.Displacement)) > 1e-9 || b.From == b.To {
					t.Fatalf("%v: bond %+v joins sites at the distance %v", c, b, c.Distance(b.From, b.To))
				}
			}
		}
	}
	if checked < 150 {
		t.Fatalf("only %d bond lists were checked", checked)
	}
}

func TestSmallToriKeepBothBonds(t *testing.T) {
	c := must(t)(Torus(Square(), 4, 2))
	bonds, err := c.Bonds(1)
	if err != nil {
		t.Fatal(err)
	}
	if len(bonds) != 16 || len(Simple(bonds)) != 12 {
		t.Errorf("4×2 torus: %d bonds, %d pairs; want 16, 12", len(bonds), len(Simple(bonds)))
	}
	ladder := must(t)(Cylinder(Square(), 4, 2))
	bonds, err = ladder.Bonds(1)
	if err != nil {
		t.Fatal(err)
	}
	// Independent NumPy program, two routes (two-leg ladder of four rungs).
	want := [][2]int{{0, 1}, {1, 2}, {2, 3}, {3, 0}, {4, 5}, {5, 6}, {6, 7}, {7, 4}, {0, 4}, {1, 5}, {2, 6}, {3, 7}}
	if pairs(ends(bonds)) != pairs(want) {
		t.Errorf("ladder: %s", pairs(ends(bonds)))
	}
	if len(ladder.Momenta()) != 4 || len(ladder.Translations()) != 1 {
		t.Errorf("ladder: %d momenta, %d translations", len(ladder.Momenta()), len(ladder.Translations()))
	}
	ring := must(t)(Ring(4))
	bonds, err = ring.Bonds(2)
	if err != nil || len(bonds) != 4 || len(Simple(bonds)) != 2 {
		t.Errorf("second neighbours of the ring of 4: %v, %v", bonds, err)
	}
}

func TestOpenClusters(t *testing.T) {
	c := must(t)(Open(Chain(), 5, 1))
	bonds, err := c.Bonds(1)
	if err != nil || pairs(ends(bonds)) != pairs([][2]int{{0, 1}, {1, 2}, {2, 3}, {3, 4}}) {
		t.Errorf("open chain: %v, %v", bonds, err)
	}
	if c.SiteAt([2]int{5, 0}, 0) != -1 || c.SiteAt([2]int{-1, 0}, 0) != -1 || c.SiteAt([2]int{0, 1}, 0) != -1 || c.SiteAt([2]int{0, 0}, 1) != -1 {
		t.Error("a site beyond the end of an open chain")
	}
	if _, ok := c.BondTo(4, [2]int{1, 0}, 0); ok {
		t.Error("a bond beyond the end of an open chain")
	}
	if _, ok := must(t)(Ring(4)).BondTo(1, [2]int{4, 0}, 0); ok {
		t.Error("a bond from a site to itself")
	}
	if len(c.Momenta()) != 1 || c.Sector(c.Momenta()[0]) != nil {
		t.Error("an open chain has translations")
	}
	square := must(t)(Open(Square(), 3, 4))
	for shell, want := range map[int]int{1: 17, 2: 12, 3: 10} {
		if bonds, err := square.Bonds(shell); err != nil || len(bonds) != want {
			t.Errorf("open 3×4 square, shell %d: %d bonds, want %d (%v)", shell, len(bonds), want, err)
		}
	}
}

func TestTwistAroundALoopIsTheSameInBothGauges(t *testing.T) {
	r := rand.New(rand.NewPCG(13, 14))
	for range 60 {
		c := randomCluster(t, r)
		bonds, err := c.Bonds(1)
		if err != nil {
			continue
		}
		out := make([][]Bond, c.Sites())
		for _, b := range bonds {
			back := Bond{b.To, b.From, b.Shell, scale(-1, b.Displacement), [2]int{}, [2]int{-b.Wrap[0], -b.Wrap[1]}}
			out[b.From], out[b.To] = append(out[b.From], b), append(out[b.To], back)
		}
		twist := [2]float64{r.Float64()*4 - 2, r.Float64()*4 - 2}
		// A random walk that comes back to its start.
		site, start := 0, 0
		phases, winding := [2]complex128{1, 1}, [2]int{}
		for step := 0; step < 2000; step++ {
			b := out[site][r.IntN(len(out[site]))]
			phases[0] *= c.BondPhase(b, twist, Uniform)
			phases[1] *= c.BondPhase(b, twist, Boundary)
			winding[0], winding[1] = winding[0]+b.Wrap[0], winding[1]+b.Wrap[1]
			if site = b.To; site == start && step > 50 {
				break
			}
		}
		if site != start {
			continue
		}
		want := cmplx.Exp(complex(0, -2*math.Pi*(twist[0]*float64(winding[0])+twist[1]*float64(winding[1]))))
		for gauge, got := range phases {
			if cmplx.Abs(got-want) > 1e-10 {
				t.Errorf("%v, gauge %d: phase %v around a loop that winds %v at twist %v, want %v", c, gauge, got, winding, twist, want)
			}
		}
	}
	ring := must(t)(Ring(6))
	bonds, _ := ring.Bonds(1)
	real := 0
	for _, b := range bonds {
		switch ring.BondPhase(b, [2]float64{0.5, 0}, Boundary) {
		case 1:
			real++
		case -1:
			real += 10
		}
	}
	if real != 15 {
		t.Errorf("antiperiodic ring of 6: signs sum up to %d, want five +1 and one -1", real)
	}
	byHand := Bond{From: 0, To: 1}
	if !cmplx.IsNaN(ring.BondPhase(byHand, [2]float64{0.5, 0}, Uniform)) || !cmplx.IsNaN(ring.BondPhase(bonds[0], [2]float64{}, Gauge(7))) {
		t.Error("a bond without displacement or an unknown gauge got a phase")
	}
}

func TestPhaseIsTheExponential(t *testing.T) {
	r := rand.New(rand.NewPCG(15, 16))
	for range 1000 {
		x := 6*r.Float64() - 3
		if got, want := phase(x), cmplx.Exp(complex(0, 2*math.Pi*x)); cmplx.Abs(got-want) > 1e-14 {
			t.Fatalf("phase of %v turns: %v, want %v", x, got, want)
		}
	}
	for i, want := range []complex128{1, 1i, -1, -1i} {
		if got := phase(float64(i)/4 - 2); got != want {
			t.Errorf("phase of %d/4 turns: %v", i, got)
		}
	}
}

func TestPointSymmetries(t *testing.T) {
	square := must(t)(Torus(Square(), 4, 4))
	quarter, err := square.Rotation([2]float64{0, 0}, 4)
	if err != nil {
		t.Fatal(err)
	}
	mirror, err := square.Reflection([2]float64{0, 0}, [2]float64{1, 1})
	if err != nil {
		t.Fatal(err)
	}
	gens := []group.Eigenvalue{{Generator: quarter}, {Generator: mirror}}
	if elements, err := group.Generate(gens); err != nil || len(elements) != 8 {
		t.Errorf("point group of the 4×4 torus: %d elements (%v), want 8", len(elements), err)
	}
	if elements, err := group.Generate(append(gens, square.Sector(square.Momentum(0, 0))...)); err != nil || len(elements) != 128 {
		t.Errorf("space group of the 4×4 torus: %d elements (%v), want 128", len(elements), err)
	}
	for _, l := range []Lattice{Triangular(), Kagome()} {
		c := must(t)(New(l, [2]int{2, 2}, [2]int{-2, 4}))
		center := [2]float64{}
		if l.Name == "kagome" {
			center = scale(0.5, plus(l.A1, l.A2)) // of a hexagon
		}
		sixth, err := c.Rotation(center, 6)
		if err != nil {
			t.Fatal(err)
		}
		bonds, _ := c.Bonds(1)
		moved := ends(bonds)
		for i := range moved {
			moved[i] = [2]int{sixth.Sites[moved[i][0]], sixth.Sites[moved[i][1]]}
		}
		if order, _ := sixth.Order(); order != 6 || pairs(moved) != pairs(ends(bonds)) {
			t.Errorf("%v: the sixfold rotation has the order %d", c, order)
		}
	}
	chain := must(t)(Open(Chain(), 5, 1))
	inversion, err := chain.Rotation([2]float64{2, 0}, 2)
	if err != nil || !inversion.Sites.Equal(group.Permutation{4, 3, 2, 1, 0}) {
		t.Errorf("inversion of the open chain: %v, %v", inversion.Sites, err)
	}
	// sqrt(26): rotations but no reflections.
	tilted := must(t)(New(Square(), [2]int{5, 1}, [2]int{-1, 5}))
	if _, err := tilted.Rotation([2]float64{0, 0}, 4); err != nil {
		t.Error(err)
	}
	if _, err := tilted.Reflection([2]float64{0, 0}, [2]float64{1, 0}); err == nil || !strings.Contains(err.Error(), "periods") {
		t.Errorf("a reflection of the tilted cluster: %v", err)
	}
	if _, err := square.Rotation([2]float64{0.25, 0}, 4); err == nil || !strings.Contains(err.Error(), "there is none") {
		t.Errorf("a rotation about no centre: %v", err)
	}
}

func TestDrawing(t *testing.T) {
	c := must(t)(Torus(Kagome(), 3, 2))
	bonds, _ := c.Bonds(1)
	d, err := c.Draw(bonds)
	if err != nil || len(d.Positions) != 18 || len(d.Orbitals) != 18 || len(d.Segments) != 36 || len(d.Outline) != 4 {
		t.Fatalf("%d sites, %d segments, outline %v, %v", len(d.Positions), len(d.Segments), d.Outline, err)
	}
	for i, s := range d.Segments {
		inside := s.End == c.Position(bonds[i].To) || length(minus(s.End, c.Position(bonds[i].To))) < 1e-9
		if inside == s.Crosses || math.Abs(length(minus(s.End, s.Start))-1) > 1e-12 {
			t.Errorf("segment %+v of bond %+v", s, bonds[i])
		}
	}
	if _, err := c.Draw([]Bond{{From: 99}}); err == nil {
		t.Error("a bond from a site that is not there was drawn")
	}
}

func TestImpossibleClustersAreRefused(t *testing.T) {
	bad := Square()
	bad.A2 = [2]float64{2, 0}
	twice := Square()
	twice.Sites = [][2]float64{{0, 0}, {1, 1}}
	nan := Square()
	nan.A1[0] = math.NaN()
	for name, c := range map[string]struct {
		make func() (*Cluster, error)
		says string
	}{
		"no area":           {func() (*Cluster, error) { return New(Square(), [2]int{2, 4}, [2]int{1, 2}) }, "span no area"},
		"zero period":       {func() (*Cluster, error) { return New(Square(), [2]int{0, 0}, [2]int{1, 2}) }, "span no area"},
		"negative length":   {func() (*Cluster, error) { return Torus(Square(), 4, -4) }, "at least 1"},
		"no ring":           {func() (*Cluster, error) { return Ring(0) }, "at least 1"},
		"negative ring":     {func() (*Cluster, error) { return Ring(-3) }, "at least 1"},
		"chain with width":  {func() (*Cluster, error) { return Torus(Chain(), 4, 2) }, "l2 = 1"},
		"tilted chain":      {func() (*Cluster, error) { return New(Chain(), [2]int{4, 1}, [2]int{0, 0}) }, "one dimension"},
		"open of no length": {func() (*Cluster, error) { return Open(Square(), 0, 2) }, "at least 1"},
		"too large":         {func() (*Cluster, error) { return Torus(Square(), 1<<15, 1<<15) }, "at most 65536 sites"},
		"too long":          {func() (*Cluster, error) { return Torus(Square(), math.MaxInt, 1) }, "components up to"},
		"parallel vectors":  {func() (*Cluster, error) { return Torus(bad, 2, 2) }, "independent"},
		"coinciding sites":  {func() (*Cluster, error) { return Torus(twice, 2, 2) }, "same place"},
		"not a number":      {func() (*Cluster, error) { return Torus(nan, 2, 2) }, "must be numbers"},
		"empty lattice":     {func() (*Cluster, error) { return Torus(Lattice{}, 2, 2) }, "dimension 0"},
	} {
		if _, err := c.make(); err == nil || !strings.Contains(err.Error(), c.says) || !strings.HasPrefix(err.Error(), "lattice: ") {
			t.Errorf("%s: error %v, want one that says %q", name, err, c.says)
		}
	}
	wide := Square()
	wide.Sites = [][2]float64{{0, 0}, {1e5, 0.5}}
	if _, err := wide.Distances(1); err == nil || !strings.Contains(err.Error(), "too many cells away") {
		t.Errorf("sites of one cell that are 10⁵ cells apart: %v", err)
	}
}

func TestImpossibleShellsAreRefused(t *testing.T) {
	square, narrow := must(t)(Torus(Square(), 4, 4)), must(t)(Torus(Square(), 4, 1))
	open := must(t)(Open(Square(), 2, 2))
	for name, c := range map[string]struct {
		cluster *Cluster
		shell   int
		says    string
	}{
		"shell 0":       {square, 0, "1 being the nearest"},
		"negative":      {square, -1, "1 being the nearest"},
		"far shell":     {square, 101, "shells 1 … 100"},
		"itself":        {narrow, 1, "a site to itself"},
		"shorter image": {square, 6, "only 1 apart"},
		"open":          {open, 3, "no two sites"},
	} {
		if bonds, err := c.cluster.Bonds(c.shell); err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: %d bonds, error %v, want one that says %q", name, len(bonds), err, c.says)
		}
	}
}

func ExampleTorus() {
	c, err := Torus(Square(), 4, 4)
	if err != nil {
		fmt.Println(err)
		return
	}
	bonds, err := c.Bonds(1)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(c)
	fmt.Println(len(bonds), "bonds, first", bonds[0].From, "-", bonds[0].To)
	fmt.Println(len(c.Momenta()), "momenta, the last", c.Momentum(3, 3))
	// Output:
	// square, 16 sites, T1 = (4,0), T2 = (0,4), periodic
	// 32 bonds, first 0 - 1
	// 16 momenta, the last (3/4, 3/4)
}
