package lattice_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"sort"
	"strings"
	"testing"
	"time"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/lanczos/dense"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

func must[T any](v T, err error) func(t *testing.T) T {
	return func(t *testing.T) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

// shastrySutherland is the square lattice in cells of four sites, with the
// diagonal bonds of alternate squares: the group p4g, with glides.
func shastrySutherland() lattice.Lattice {
	return lattice.Lattice{
		Name: "orthogonal dimers", Dimension: 2, A1: [2]float64{2, 0}, A2: [2]float64{0, 2},
		Sites: [][2]float64{{0, 0}, {1, 0}, {0, 1}, {1, 1}},
	}
}

// dimers returns its diagonal bonds: 0-3 of each cell, and 2 of the cell to the
// right with 1 of the cell above.
func dimers(t *testing.T, c *lattice.Cluster) []lattice.Bond {
	t.Helper()
	var list []lattice.Bond
	for site := range c.Sites() {
		cells, orbital, ok := [2]int{}, 3, true
		switch _, from := c.CellOf(site); from {
		case 0:
		case 2:
			cells, orbital = [2]int{-1, 1}, 1
		default:
			ok = false
		}
		if !ok {
			continue
		}
		b, ok := c.BondTo(site, cells, orbital)
		if !ok {
			t.Fatal("no dimer")
		}
		list = append(list, b)
	}
	return list
}

func ladder() lattice.Lattice {
	return lattice.Lattice{Name: "ladder", Dimension: 1, A1: [2]float64{1, 0}, Sites: [][2]float64{{0, 0}, {0, 1}}}
}

// pentagon has five sites in one cell, for open clusters with a fivefold axis.
func pentagon() lattice.Lattice {
	l := lattice.Lattice{Name: "pentagon", Dimension: 2, A1: [2]float64{5, 0}, A2: [2]float64{0, 5}}
	for i := range 5 {
		s, c := math.Sincos(2 * math.Pi * float64(i) / 5)
		l.Sites = append(l.Sites, [2]float64{c, s})
	}
	return l
}

// clusters are those on which sectors are counted, with the order of the group
// modulo lattice translations (from the plane groups p4m, p6m, p4, p4g, pmm and
// the shapes of the open clusters).
func clusters(t *testing.T) map[*lattice.Cluster]int {
	t.Helper()
	type periods struct {
		l      lattice.Lattice
		t1, t2 [2]int
		order  int
	}
	list := map[*lattice.Cluster]int{}
	for _, p := range []periods{
		{lattice.Square(), [2]int{4, 0}, [2]int{0, 4}, 8},
		{lattice.Square(), [2]int{3, 0}, [2]int{0, 3}, 8},
		{lattice.Square(), [2]int{2, 0}, [2]int{0, 2}, 8},
		{lattice.Square(), [2]int{4, 0}, [2]int{0, 3}, 4},
		{lattice.Square(), [2]int{4, 0}, [2]int{0, 2}, 4},
		{lattice.Square(), [2]int{2, 2}, [2]int{-2, 2}, 8},
		{lattice.Square(), [2]int{3, 1}, [2]int{-1, 3}, 4},
		{lattice.Square(), [2]int{4, 0}, [2]int{1, 3}, 2},
		{lattice.Triangular(), [2]int{3, 0}, [2]int{0, 3}, 12},
		{lattice.Triangular(), [2]int{2, 2}, [2]int{-2, 4}, 12},
		{lattice.Triangular(), [2]int{4, 0}, [2]int{0, 3}, 2},
		{lattice.Triangular(), [2]int{4, 0}, [2]int{0, 2}, 4},
		{lattice.Triangular(), [2]int{2, 1}, [2]int{-1, 3}, 6},
		{lattice.Kagome(), [2]int{2, 0}, [2]int{0, 2}, 12},
		{lattice.Kagome(), [2]int{1, 1}, [2]int{-1, 2}, 12},
		{lattice.Honeycomb(), [2]int{2, 0}, [2]int{0, 2}, 12},
		{lattice.Honeycomb(), [2]int{1, 1}, [2]int{-1, 2}, 12},
		{lattice.Checkerboard(), [2]int{2, 0}, [2]int{0, 2}, 16},
		{lattice.Checkerboard(), [2]int{2, 0}, [2]int{0, 3}, 8},
	} {
		c := must(lattice.New(p.l, p.t1, p.t2))(t)
		list[c] = p.order
	}
	list[must(lattice.Ring(8))(t)] = 2
	list[must(lattice.Ring(9))(t)] = 2
	list[must(lattice.Torus(ladder(), 5, 1))(t)] = 4
	list[must(lattice.Open(ladder(), 4, 1))(t)] = 4
	list[must(lattice.Open(lattice.Chain(), 6, 1))(t)] = 2
	list[must(lattice.Open(lattice.Square(), 1, 1))(t)] = 1
	list[must(lattice.Open(lattice.Square(), 3, 3))(t)] = 8
	list[must(lattice.Open(lattice.Square(), 3, 4))(t)] = 4
	list[must(lattice.Open(lattice.Triangular(), 3, 3))(t)] = 4
	list[must(lattice.Open(lattice.Honeycomb(), 2, 2))(t)] = 4
	list[must(lattice.Open(pentagon(), 1, 1))(t)] = 10
	list[must(lattice.Cylinder(lattice.Square(), 4, 3))(t)] = 4
	list[must(lattice.Cylinder(lattice.Triangular(), 4, 2))(t)] = 4
	list[must(lattice.Cylinder(lattice.Kagome(), 2, 2))(t)] = 2
	return list
}

func inversion(n int) lattice.Extra { return lattice.Extra{Action: group.Relabel(n, []int{1, 0})} }

// parts returns the sectors of a cluster as sectors of a space.
func parts(list []lattice.Sector, charges []basis.ChargeValue) (sectors []basis.Sector, multiplicities []int) {
	for _, k := range list {
		sectors = append(sectors, basis.Sector{Charges: charges, Symmetries: k.Symmetries})
		multiplicities = append(multiplicities, k.Multiplicity)
	}
	return sectors, multiplicities
}

func TestSectorsAddUpToTheWholeSpace(t *testing.T) {
	for c, order := range clusters(t) {
		whole := must(c.SpaceGroup(nil))(t)
		if len(whole.Operations) != order {
			t.Errorf("%v: %d operations, want %d", c, len(whole.Operations), order)
		}
		n := c.Sites()
		for what, s := range map[string]struct {
			space  *basis.Space
			charge func(*basis.Space) basis.ChargeValue
			opts   *lattice.SymmetryOptions
		}{
			"spin 1/2, inversion":     {must(basis.Uniform(n, basis.SpinHalf()))(t), func(s *basis.Space) basis.ChargeValue { return s.TwiceSz().Is(n % 2) }, &lattice.SymmetryOptions{}},
			"spin 1":                  {must(basis.Uniform(n, basis.Spin(2)))(t), func(s *basis.Space) basis.ChargeValue { return s.TwiceSz().Is(2 * (n - 4)) }, nil},
			"fermions":                {must(basis.Uniform(n, basis.Fermion()))(t), func(s *basis.Space) basis.ChargeValue { return s.ParticleNumber().Is(n / 2) }, nil},
			"fermions, no reflection": {must(basis.Uniform(n, basis.Fermion()))(t), func(s *basis.Space) basis.ChargeValue { return s.ParticleNumber().Is(n / 3) }, &lattice.SymmetryOptions{NoReflections: true}},
			"bosons, translations":    {must(basis.Uniform(n, basis.Boson(3)))(t), func(s *basis.Space) basis.ChargeValue { return s.ParticleNumber().Is(4) }, &lattice.SymmetryOptions{OnlyTranslations: true}},
			"electrons":               {must(basis.Uniform(n, basis.Electron()))(t), func(s *basis.Space) basis.ChargeValue { return s.ParticleNumber().Is(4) }, nil},
		} {
			if n == 1 && what != "electrons" && what != "fermions" || n > 12 && s.space.Site(0).Levels > 2 {
				continue // 16 sites with two levels each only: time
			}
			value := s.charge(s.space)
			if what == "electrons" {
				s.opts = &lattice.SymmetryOptions{Extra: []lattice.Extra{{Action: group.Relabel(n, []int{0, 2, 1, 3})}}}
				if n == 1 {
					value.Value = 1
				}
			}
			if strings.HasSuffix(what, "inversion") && n%2 == 0 {
				s.opts = &lattice.SymmetryOptions{Extra: []lattice.Extra{inversion(n)}}
			}
			list := must(must(c.SpaceGroup(s.opts))(t).Sectors())(t)
			charges := []basis.ChargeValue{value}
			sectors, multiplicities := parts(list, charges)
			dims, err := basis.Whole(s.space, basis.Sector{Charges: charges}, sectors, multiplicities)
			if err != nil {
				t.Errorf("%v, %s: %v", c, what, err)
				continue
			}
			labels := map[string]bool{}
			for i, k := range list {
				if labels[k.String()] && !(what == "bosons, translations") {
					t.Errorf("%v, %s: two sectors %v", c, what, k)
				}
				labels[k.String()] = true
				if dims[i] > 100 || i%6 > 0 {
					continue
				}
				b, err := basis.New(context.Background(), s.space, sectors[i], nil)
				if dims[i] == 0 && errors.Is(err, basis.ErrEmpty) {
					continue
				}
				if err != nil || int64(b.Len()) != dims[i] {
					t.Errorf("%v, %s, %v: %v, %d states wanted", c, what, k, err, dims[i])
				}
			}
		}
	}
}

func TestSectorsOfRandomTori(t *testing.T) {
	skew := lattice.Lattice{Name: "skew square", Dimension: 2, A1: [2]float64{1, 0}, A2: [2]float64{1, 1}, Sites: [][2]float64{{0.3, 0.1}}}
	flat := lattice.Lattice{Name: "rectangular", Dimension: 2, A1: [2]float64{1, 0}, A2: [2]float64{0, 1.3}, Sites: [][2]float64{{0, 0}}}
	centred := lattice.Lattice{Name: "centred", Dimension: 2, A1: [2]float64{1, 0.4}, A2: [2]float64{1, -0.4}, Sites: [][2]float64{{0, 0}}}
	glide := lattice.Lattice{Name: "glide", Dimension: 2, A1: [2]float64{1, 0}, A2: [2]float64{0, 1.7}, Sites: [][2]float64{{0.25, 0.2}, {0.75, -0.2}}}
	lattices := []lattice.Lattice{lattice.Square(), lattice.Triangular(), lattice.Honeycomb(), lattice.Kagome(), lattice.Checkerboard(), shastrySutherland(), skew, flat, centred, glide}
	r := rand.New(rand.NewPCG(11, 12))
	for done := 0; done < 120; {
		l := lattices[r.IntN(len(lattices))]
		c, err := lattice.New(l, [2]int{r.IntN(7) - 3, r.IntN(7) - 3}, [2]int{r.IntN(7) - 3, r.IntN(7) - 3})
		if err != nil || c.Sites() > 12 || c.Sites() < 2 {
			continue
		}
		done++
		n := c.Sites()
		space := must(basis.Uniform(n, basis.Fermion()))(t)
		charges := []basis.ChargeValue{space.ParticleNumber().Is(n / 2)}
		s := must(c.SpaceGroup(nil))(t)
		list := must(s.Sectors())(t)
		sectors, multiplicities := parts(list, charges)
		if _, err := basis.Whole(space, basis.Sector{Charges: charges}, sectors, multiplicities); err != nil {
			t.Errorf("%v: %v", c, err)
		}
		stars := 0
		for _, star := range s.Stars() {
			stars += len(star)
		}
		if stars != c.Cells() {
			t.Errorf("%v: %d momenta in the stars", c, stars)
		}
		labels := map[string]bool{}
		for _, k := range list {
			if labels[k.String()] {
				t.Errorf("%v: two sectors %v", c, k)
			}
			labels[k.String()] = true
			if strings.Contains(k.Irrep, "Γ") && len(l.Sites) == 1 {
				t.Errorf("%v: %v has no name in a lattice of one site a cell", c, k)
			}
		}
	}
}

// By Burnside's formula, with an independent count.
func TestFullySymmetricSectors(t *testing.T) {
	for _, c := range []struct {
		l         int
		even, odd int64
	}{{4, 107, 46}, {6, 15804956, 15761166}} {
		cluster := must(lattice.Torus(lattice.Square(), c.l, c.l))(t)
		n := c.l * c.l
		s := must(cluster.SpaceGroup(&lattice.SymmetryOptions{Extra: []lattice.Extra{inversion(n)}}))(t)
		if s.Group.Order() != 16*n {
			t.Errorf("%d symmetries of the %d×%d square lattice, want %d", s.Group.Order(), c.l, c.l, 16*n)
		}
		space := must(basis.Uniform(n, basis.SpinHalf()))(t)
		got := map[string]int64{}
		for _, k := range must(s.Sectors())(t) {
			if k.Point == "Γ" && k.Irrep == "A1" {
				got[k.String()] = must(basis.Dimension(space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}, Symmetries: k.Symmetries}))(t)
			}
		}
		if got["Γ A1 even"] != c.even || got["Γ A1 odd"] != c.odd {
			t.Errorf("%v, want %d and %d", got, c.even, c.odd)
		}
	}
}

// levels returns the spectrum of an operator in a sector, empty for one
// without states.
func levels(t *testing.T, op operator.Operator, space *basis.Space, sector basis.Sector) []float64 {
	t.Helper()
	b, err := basis.New(context.Background(), space, sector, nil)
	if errors.Is(err, basis.ErrEmpty) {
		return nil
	}
	if err != nil {
		t.Fatal(err)
	}
	a := must(matrix.New(context.Background(), op, b, nil))(t).Dense()
	n, complexes := b.Len(), false
	reals := make([]float64, len(a))
	for i := range n {
		for j := range i + 1 {
			x, y := a[i*n+j], cmplx.Conj(a[j*n+i])
			if cmplx.Abs(x-y) > 1e-12 {
				t.Fatalf("element (%d, %d) is %v, its adjoint %v", i, j, x, y)
			}
			a[i*n+j], a[j*n+i] = (x+y)/2, cmplx.Conj(x+y)/2 // without the rounding
			reals[i*n+j], reals[j*n+i] = real(x+y)/2, real(x+y)/2
			complexes = complexes || imag(x) != 0
		}
	}
	if complexes {
		values, _, err := dense.EigenComplex(a, n, false)
		if err != nil {
			t.Fatal(err)
		}
		return values
	}
	values, _, err := dense.EigenReal(reals, n, false)
	if err != nil {
		t.Fatal(err)
	}
	return values
}

// checkSpectrum compares the full spectrum with the union of those of the
// sectors, each level as often as its multiplicity says, and returns the lowest
// level of each sector.
func checkSpectrum(t *testing.T, what string, op operator.Operator, space *basis.Space, sector basis.Sector, list []lattice.Sector) map[string]float64 {
	t.Helper()
	want := levels(t, op, space, sector)
	var got []float64
	lowest := map[string]float64{}
	for _, k := range list {
		part := sector
		part.Symmetries = k.Symmetries
		for i, e := range levels(t, op, space, part) {
			if i == 0 {
				lowest[k.String()] = e
			}
			for range k.Multiplicity {
				got = append(got, e)
			}
		}
	}
	sort.Float64s(got)
	if len(got) != len(want) {
		t.Fatalf("%s: %d levels in the sectors, %d in all", what, len(got), len(want))
	}
	for i := range got {
		if math.Abs(got[i]-want[i]) > 1e-9 {
			t.Fatalf("%s: level %d is %.12f in the sectors, %.12f in all", what, i, got[i], want[i])
		}
	}
	return lowest
}

func TestUnionOfSectorSpectra(t *testing.T) {
	hubbard := func(space *basis.Space, c *lattice.Cluster) (operator.Operator, error) {
		return model.Hubbard(space, c, []float64{1}, 4, nil)
	}
	bose := func(space *basis.Space, c *lattice.Cluster) (operator.Operator, error) {
		return model.BoseHubbard(space, c, 1, 3, nil)
	}
	tv := func(space *basis.Space, c *lattice.Cluster) (operator.Operator, error) {
		return model.TV(space, c, []float64{1}, []float64{1.7}, nil)
	}
	heisenberg := func(space *basis.Space, c *lattice.Cluster) (operator.Operator, error) {
		return model.Heisenberg(space, c, []float64{1})
	}
	for _, c := range []struct {
		cluster *lattice.Cluster
		site    basis.Site
		model   func(*basis.Space, *lattice.Cluster) (operator.Operator, error)
		charge  int // 2Sz for spins, else particles
	}{
		{must(lattice.Torus(lattice.Kagome(), 2, 2))(t), basis.SpinHalf(), heisenberg, 4},
		{must(lattice.New(lattice.Triangular(), [2]int{2, 2}, [2]int{-2, 4}))(t), basis.SpinHalf(), heisenberg, 4},
		{must(lattice.Torus(lattice.Triangular(), 3, 3))(t), basis.SpinHalf(), heisenberg, 1},
		{must(lattice.New(lattice.Honeycomb(), [2]int{1, 1}, [2]int{-1, 2}))(t), basis.SpinHalf(), heisenberg, 0},
		{must(lattice.Torus(lattice.Honeycomb(), 2, 2))(t), basis.SpinHalf(), heisenberg, 0},
		{must(lattice.New(lattice.Square(), [2]int{3, 1}, [2]int{-1, 3}))(t), basis.SpinHalf(), heisenberg, 0},
		{must(lattice.New(lattice.Square(), [2]int{2, 2}, [2]int{-2, 2}))(t), basis.SpinHalf(), heisenberg, 0},
		{must(lattice.Open(lattice.Square(), 3, 3))(t), basis.SpinHalf(), heisenberg, 1},
		{must(lattice.Open(lattice.Square(), 3, 4))(t), basis.SpinHalf(), heisenberg, 4},
		{must(lattice.Torus(lattice.Checkerboard(), 2, 2))(t), basis.SpinHalf(), heisenberg, 0},
		{must(lattice.Ring(6))(t), basis.Spin(2), heisenberg, 0},
		{must(lattice.Cylinder(lattice.Triangular(), 3, 2))(t), basis.Spin(2), heisenberg, 0},
		{must(lattice.Torus(lattice.Kagome(), 2, 2))(t), basis.Fermion(), tv, 4},
		{must(lattice.Torus(lattice.Square(), 4, 4))(t), basis.Fermion(), tv, 3},
		{must(lattice.Cylinder(lattice.Square(), 4, 3))(t), basis.Fermion(), tv, 4},
		{must(lattice.Torus(lattice.Square(), 3, 3))(t), basis.Boson(3), bose, 3},
		{must(lattice.Torus(lattice.Triangular(), 3, 3))(t), basis.Boson(2), bose, 3},
		{must(lattice.Torus(lattice.Square(), 3, 3))(t), basis.Electron(), hubbard, 3},
		{must(lattice.Open(lattice.Square(), 2, 2))(t), basis.Electron(), hubbard, 4},
		{must(lattice.Torus(lattice.Triangular(), 3, 3))(t), basis.Electron(), hubbard, 3},
	} {
		space := must(basis.Uniform(c.cluster.Sites(), c.site))(t)
		opts := &lattice.SymmetryOptions{}
		charge := space.ParticleNumber
		if c.site.Kind == basis.KindSpin {
			charge = space.TwiceSz
			if c.charge == 0 {
				levels := []int{1, 0}
				if space.Site(0).Levels == 3 {
					levels = []int{2, 1, 0}
				}
				opts.Extra = []lattice.Extra{{Action: group.Relabel(c.cluster.Sites(), levels)}}
			}
		}
		sector := basis.Sector{Charges: []basis.ChargeValue{charge().Is(c.charge)}}
		if c.site.Kind == basis.KindElectron {
			sector.Charges = append(sector.Charges, space.TwiceSz().Is(c.charge%2))
			if c.charge%2 == 0 {
				opts.Extra = []lattice.Extra{{Action: group.Relabel(c.cluster.Sites(), []int{0, 2, 1, 3})}}
			}
		}
		op := must(c.model(space, c.cluster))(t)
		list := must(must(c.cluster.SpaceGroup(opts))(t).Sectors())(t)
		checkSpectrum(t, fmt.Sprintf("%v, %v", c.cluster, c.site), op, space, sector, list)
	}
}

// The ground state of the 4×4 square lattice, -0.7017802 a site (H. J. Schulz,
// T. A. L. Ziman, D. Poilblanc, J. Phys. I France 6, 675, 1996), is fully
// symmetric; the lowest triplet lies at M.
func TestLevelsOfTheSquareLatticeHaveTheirNames(t *testing.T) {
	c := must(lattice.Torus(lattice.Square(), 4, 4))(t)
	space := must(basis.Uniform(16, basis.SpinHalf()))(t)
	op := must(model.Heisenberg(space, c, []float64{1}))(t)
	list := must(must(c.SpaceGroup(&lattice.SymmetryOptions{Extra: []lattice.Extra{inversion(16)}}))(t).Sectors())(t)
	sector := basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}}
	found := map[string][]float64{}
	for _, k := range list {
		if k.Multiplicity == 1 {
			sector.Symmetries = k.Symmetries
			found[k.String()] = levels(t, op, space, sector)
		}
	}
	if e := found["Γ A1 even"][0] / 16; math.Abs(e+0.7017802) > 5e-8 {
		t.Errorf("%.7f a site", e)
	}
	for name, e := range found {
		if len(e) > 0 && (name != "Γ A1 even" && e[0] < found["M A1 odd"][0]-1e-9) {
			t.Errorf("%s lies below the triplet at M: %v, %v", name, e[0], found["M A1 odd"][0])
		}
	}
}

func TestOrthogonalDimers(t *testing.T) {
	for _, p := range []struct {
		t1, t2     [2]int
		order, two int
	}{{[2]int{1, 1}, [2]int{-1, 1}, 16, 0}, {[2]int{2, 0}, [2]int{0, 2}, 32, 10}, {[2]int{2, 0}, [2]int{0, 1}, 8, 4}} {
		c := must(lattice.New(shastrySutherland(), p.t1, p.t2))(t)
		var bonds []lattice.Bond
		for site := range c.Sites() {
			_, from := c.CellOf(site)
			next := [][][3]int{{{0, 0, 1}, {0, 0, 2}}, {{1, 0, 0}, {0, 0, 3}}, {{0, 0, 3}, {0, 1, 0}}, {{1, 0, 2}, {0, 1, 1}}}[from]
			for _, to := range next {
				if b, ok := c.BondTo(site, [2]int{to[0], to[1]}, to[2]); ok {
					bonds = append(bonds, b)
				}
			}
		}
		diagonal := dimers(t, c)
		opts := &lattice.SymmetryOptions{Bonds: [][]lattice.Bond{bonds, diagonal}}
		n := c.Sites()
		charge := 2*p.two - n
		if p.two == 0 {
			charge = 0
			opts.Extra = []lattice.Extra{inversion(n)}
		}
		s := must(c.SpaceGroup(opts))(t)
		if want := p.order * (1 + len(opts.Extra)); s.Group.Order() != want {
			t.Errorf("%v: %d symmetries, want %d", c, s.Group.Order(), want)
		}
		glides := 0
		for _, o := range s.Operations {
			if o.Reflects() {
				glides++
			}
		}
		if 2*glides != len(s.Operations) {
			t.Errorf("%v: %d reflections and glides of %d", c, glides, len(s.Operations))
		}
		list := must(s.Sectors())(t)
		if p.order == 32 {
			// p4g: on the boundary of the zone the states of two momenta or two
			// dimensions stick together; no one-dimensional representation at X.
			for _, k := range list {
				if k.Point == "X" && k.Multiplicity != 4 {
					t.Errorf("%v has the multiplicity %d", k, k.Multiplicity)
				}
			}
			charge = 16 - 2*3
		}
		space := must(basis.Uniform(n, basis.SpinHalf()))(t)
		square := must(model.Exchange(space, bonds, 0.6, 0.6, nil))(t)
		cross := must(model.Exchange(space, diagonal, 1, 1, nil))(t)
		checkSpectrum(t, c.String(), square.Plus(cross), space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(charge)}}, list)
	}
}

// Character tables of C2v, C3v, C4v and C6v by class, from textbooks: identity,
// the rotations, σv, σd.
func textbook(operation lattice.Isometry, reflections []float64, order int) map[string]float64 {
	if operation.Reflects() {
		first := math.Inf(1)
		for _, a := range reflections {
			first = min(first, a)
		}
		steps := int(math.Round((operation.Angle() - first) / (math.Pi / float64(order))))
		if steps%2 == 0 || order == 3 {
			return map[int]map[string]float64{
				2: {"A1": 1, "A2": -1, "B1": 1, "B2": -1},
				3: {"A1": 1, "A2": -1, "E": 0},
				4: {"A1": 1, "A2": -1, "B1": 1, "B2": -1, "E": 0},
				6: {"A1": 1, "A2": -1, "B1": 1, "B2": -1, "E1": 0, "E2": 0},
			}[order]
		}
		return map[int]map[string]float64{
			2: {"A1": 1, "A2": -1, "B1": -1, "B2": 1},
			4: {"A1": 1, "A2": -1, "B1": -1, "B2": 1, "E": 0},
			6: {"A1": 1, "A2": -1, "B1": -1, "B2": 1, "E1": 0, "E2": 0},
		}[order]
	}
	turn := operation.Turn()
	return map[int]map[int64]map[string]float64{
		2: {
			1: {"A1": 1, "A2": 1, "B1": 1, "B2": 1},
			2: {"A1": 1, "A2": 1, "B1": -1, "B2": -1},
		},
		3: {
			1: {"A1": 1, "A2": 1, "E": 2},
			3: {"A1": 1, "A2": 1, "E": -1},
		},
		4: {
			1: {"A1": 1, "A2": 1, "B1": 1, "B2": 1, "E": 2},
			2: {"A1": 1, "A2": 1, "B1": 1, "B2": 1, "E": -2},
			4: {"A1": 1, "A2": 1, "B1": -1, "B2": -1, "E": 0},
		},
		6: {
			1: {"A1": 1, "A2": 1, "B1": 1, "B2": 1, "E1": 2, "E2": 2},
			2: {"A1": 1, "A2": 1, "B1": -1, "B2": -1, "E1": -2, "E2": 2},
			3: {"A1": 1, "A2": 1, "B1": 1, "B2": 1, "E1": -1, "E2": -1},
			6: {"A1": 1, "A2": 1, "B1": -1, "B2": -1, "E1": 1, "E2": -1},
		},
	}[order][turn.Den]
}

// The row of a sector must be in the representation of its name once, and in
// the others of the table not at all.
func TestNamesFollowTheCharacterTables(t *testing.T) {
	points := map[string]int{}
	for _, c := range []*lattice.Cluster{
		must(lattice.Torus(lattice.Square(), 4, 4))(t),
		must(lattice.New(lattice.Square(), [2]int{2, 2}, [2]int{-2, 2}))(t),
		must(lattice.Torus(lattice.Triangular(), 6, 6))(t),
		must(lattice.Torus(lattice.Kagome(), 2, 2))(t),
		must(lattice.New(lattice.Kagome(), [2]int{4, -2}, [2]int{2, 2}))(t),
		must(lattice.Torus(lattice.Honeycomb(), 3, 3))(t),
		must(lattice.Open(lattice.Square(), 3, 3))(t),
		must(lattice.Open(lattice.Square(), 3, 4))(t),
	} {
		s := must(c.SpaceGroup(nil))(t)
		for _, k := range must(s.Sectors())(t) {
			little := must(s.LittleGroup(k.Momentum))(t)
			order := len(little) / c.Cells() / 2
			if first, _ := c.Periodic(); !first {
				order = len(little) / 2
			}
			var axes []float64
			for _, i := range little {
				if m := s.Motion(i); m.Reflects() {
					axes = append(axes, m.Angle())
				}
			}
			if len(axes) == 0 || order < 2 {
				continue
			}
			points[fmt.Sprintf("%s C%dv", k.Point, order)]++
			sums := map[string]complex128{}
			elements := must(group.Generate(k.Symmetries))(t)
			for _, e := range elements {
				i, ok := s.Group.Find(e.Action)
				if !ok {
					t.Fatalf("%v, %v: a symmetry outside of the group", c, k)
				}
				m := s.Motion(i)
				at := [2]float64{}
				for d := range 2 {
					at[d] = m.Linear[d][0]*s.Origin[0] + m.Linear[d][1]*s.Origin[1] + m.Translation[d] - s.Origin[d]
				}
				// D(g) = D(R) exp(-ik·τ)
				phase := cmplx.Exp(complex(0, -k.Momentum.K[0]*at[0]-k.Momentum.K[1]*at[1])) * cmplx.Conj(e.Turn.Complex())
				for name, value := range textbook(m, axes, order) {
					sums[name] += phase * complex(value/float64(len(elements)), 0)
				}
			}
			for name, sum := range sums {
				want := complex(0, 0)
				if name == k.Irrep {
					want = 1
				}
				if cmplx.Abs(sum-want) > 1e-9 {
					t.Errorf("%v, %v: the row is in %s %.3f times", c, k, name, sum)
				}
			}
		}
	}
	for point, count := range map[string]int{"Γ C4v": 10, "M C4v": 10, "X C2v": 8, "Γ C6v": 24, "K C3v": 9, "M C2v": 12, " C4v": 5, " C2v": 4} {
		if points[point] != count {
			t.Errorf("%d sectors at %s, want %d", points[point], point, count)
		}
	}
}

func TestRotationsAloneKeepAHandedness(t *testing.T) {
	c := must(lattice.Torus(lattice.Triangular(), 3, 3))(t)
	list := must(must(c.SpaceGroup(&lattice.SymmetryOptions{NoReflections: true}))(t).Sectors())(t)
	var names []string
	for _, k := range list {
		names = append(names, fmt.Sprintf("%v×%d", k, k.Multiplicity))
	}
	want := "[Γ A×1 Γ B×1 Γ E1+×1 Γ E1-×1 Γ E2+×1 Γ E2-×1 (1/3, 0/1) A×6 K A×2 K E+×2 K E-×2]"
	if fmt.Sprint(names) != want {
		t.Errorf("%v, want %s", names, want)
	}
	// In E1+ the rotation by a sixth of a turn is exp(2πi/6).
	turn := must(c.Rotation([2]float64{}, 6))(t)
	for _, k := range list {
		if k.String() == "Γ E1+" {
			for _, e := range must(group.Generate(k.Symmetries))(t) {
				if e.Action.Equal(turn) && !e.Turn.Equal(group.NewTurn(1, 6)) {
					t.Errorf("the rotation has the turn %v", e.Turn)
				}
			}
		}
	}
}

// Fermions on the honeycomb lattice with phases ±φ of the second neighbours
// (F. D. M. Haldane, Phys. Rev. Lett. 61, 2015, 1988): rotations stay
// symmetries, reflections do not.
func TestHandedHamiltonian(t *testing.T) {
	c := must(lattice.Torus(lattice.Honeycomb(), 3, 3))(t)
	space := must(basis.Uniform(18, basis.Fermion()))(t)
	far := must(c.Bonds(2))(t)
	phases := make([]complex128, len(far))
	for i, b := range far {
		_, orbital := c.CellOf(b.From)
		sign := 1.0
		if (b.Cells == [2]int{0, 1}) != (orbital == 1) {
			sign = -1
		}
		phases[i] = cmplx.Exp(complex(0, sign*0.9))
	}
	op := must(model.TV(space, c, []float64{1}, []float64{2}, nil))(t).Plus(must(model.Hops(space, far, 0.3, phases))(t))
	sector := basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(2)}}
	list := must(must(c.SpaceGroup(&lattice.SymmetryOptions{NoReflections: true}))(t).Sectors())(t)
	checkSpectrum(t, c.String(), op, space, sector, list)
	for _, k := range must(must(c.SpaceGroup(nil))(t).Sectors())(t) {
		if k.String() != "Γ A1" {
			continue
		}
		sector.Symmetries = k.Symmetries
		b := must(basis.New(context.Background(), space, sector, nil))(t)
		if _, err := matrix.New(context.Background(), op, b, nil); err == nil {
			t.Error("reflections were taken for symmetries")
		}
	}
}

func TestConjugateSectorsHaveTheSameLevels(t *testing.T) {
	for _, c := range []*lattice.Cluster{must(lattice.Torus(lattice.Triangular(), 3, 3))(t), must(lattice.New(lattice.Square(), [2]int{3, 1}, [2]int{-1, 3}))(t), must(lattice.Ring(9))(t)} {
		space := must(basis.Uniform(c.Sites(), basis.Fermion()))(t)
		op := must(model.TV(space, c, []float64{1}, []float64{0.7}, nil))(t)
		for _, opts := range []*lattice.SymmetryOptions{{NoReflections: true}, {OnlyTranslations: true}, {}} {
			list := must(must(c.SpaceGroup(opts))(t).Sectors())(t)
			pairs := 0
			sector := basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(4)}}
			for i, k := range list {
				if list[k.Conjugate].Conjugate != i {
					t.Fatalf("%v: %v and %v", c, k, list[k.Conjugate])
				}
				if k.Conjugate == i {
					continue
				}
				pairs++
				sector.Symmetries = k.Symmetries
				mine := levels(t, op, space, sector)
				sector.Symmetries = list[k.Conjugate].Symmetries
				other := levels(t, op, space, sector)
				if len(mine) != len(other) {
					t.Fatalf("%v: %v and %v have %d and %d levels", c, k, list[k.Conjugate], len(mine), len(other))
				}
				for j := range mine {
					if math.Abs(mine[j]-other[j]) > 1e-9 {
						t.Errorf("%v: level %d of %v and %v: %v, %v", c, j, k, list[k.Conjugate], mine[j], other[j])
					}
				}
			}
			if !opts.NoReflections && !opts.OnlyTranslations && c.Orbitals() == 1 && c.Sites() == 9 && pairs > 0 {
				t.Errorf("%v: with reflections all representations are real, but there are %d pairs", c, pairs)
			}
			if opts.OnlyTranslations && pairs == 0 {
				t.Errorf("%v: no pairs of opposite momenta", c)
			}
		}
	}
}

// Magnetic translations of two fermions in a flux of a third a cell.
func TestMagneticTranslationsGiveTheSpectrum(t *testing.T) {
	c := must(lattice.Torus(lattice.Square(), 3, 3))(t)
	space := must(basis.Uniform(9, basis.Fermion()))(t)
	bonds := must(c.Bonds(1))(t)
	phases := make([]complex128, len(bonds))
	for i, b := range bonds {
		phases[i] = 1
		if cell, _ := c.CellOf(b.From); b.Cells[0] == 1 {
			phases[i] = group.NewTurn(int64(cell[1]), 3).Complex()
		}
	}
	op := must(model.Hops(space, bonds, 1, phases))(t)
	op = op.Plus(must(model.Repulsion(space, bonds, 2))(t))
	shifts := c.Translations()
	shifts[1].Phases = make([][]group.Turn, 9)
	for i := range 9 {
		cell, _ := c.CellOf(i)
		shifts[1].Phases[i] = []group.Turn{{}, group.NewTurn(int64(cell[0]), 3)}
	}
	g := must(group.Span(shifts))(t)
	if g.Order() != 27 {
		t.Errorf("%d magnetic translations", g.Order())
	}
	var list []lattice.Sector
	for _, r := range must(g.Representations(nil))(t) {
		list = append(list, lattice.Sector{Irrep: r.Name, Multiplicity: r.Dimension, Symmetries: r.Row})
	}
	for n := 1; n <= 4; n++ {
		checkSpectrum(t, fmt.Sprintf("%d fermions", n), op, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(n)}}, list)
	}
}

func TestWrongSymmetriesAreRefused(t *testing.T) {
	c := must(lattice.Torus(lattice.Square(), 4, 4))(t)
	bonds := must(c.Bonds(1))(t)
	stagger := make([]group.Turn, 16)
	row := make([]group.Turn, 16)
	for i := range 16 {
		cell, _ := c.CellOf(i)
		stagger[i] = group.NewTurn(int64(cell[0]+cell[1]), 2)
		row[i] = group.NewTurn(int64(cell[0]*cell[0]), 4)
	}
	for name, w := range map[string]struct {
		opts lattice.SymmetryOptions
		says string
	}{
		"bonds of one site":   {lattice.SymmetryOptions{Bonds: [][]lattice.Bond{bonds[:2]}}, "translation by a1 is no symmetry: it carries the bond from 0 to 1"},
		"a bond outside":      {lattice.SymmetryOptions{Bonds: [][]lattice.Bond{{{From: 0, To: 16}}}}, "bond 0 joins the sites 0 and 16"},
		"kinds":               {lattice.SymmetryOptions{Kinds: []int{0, 1}}, "2 kinds for the 1 sites"},
		"extra that moves":    {lattice.SymmetryOptions{Extra: []lattice.Extra{{Action: group.Gauge(row, 2)}}}, "does not commute with translation 0"},
		"extra of other size": {lattice.SymmetryOptions{Extra: []lattice.Extra{inversion(9)}}, "acts on 9 sites"},
		"no permutation":      {lattice.SymmetryOptions{Extra: []lattice.Extra{{Action: group.Relabel(16, []int{0, 0})}}}, "not relabelled one to one"},
		"labels":              {lattice.SymmetryOptions{Extra: []lattice.Extra{{Action: group.Relabel(16, []int{1, 0}), Labels: []string{"+"}}}}, "1 labels"},
		"two extras":          {lattice.SymmetryOptions{Extra: []lattice.Extra{inversion(16), {Action: group.Relabel(16, []int{0, 1}), Labels: nil}, {Action: group.Action{Sites: group.Identity(16), Phases: halfTurns(16)}}}}, "symmetries 0 and 2 do not commute"},
		"mirror as an extra":  {lattice.SymmetryOptions{Extra: []lattice.Extra{{Action: must(c.Reflection([2]float64{}, [2]float64{1, 0}))(t)}}}, "does not commute with translation 1"},
	} {
		if _, err := c.SpaceGroup(&w.opts); err == nil || !strings.Contains(err.Error(), w.says) {
			t.Errorf("%s: error %v, want one that says %q", name, err, w.says)
		}
	}
	long := must(lattice.Ring(1 << 15))(t)
	if _, err := long.SpaceGroup(nil); err == nil || !strings.Contains(err.Error(), "take a smaller cluster") {
		t.Errorf("a long ring: %v", err)
	}
	open := must(lattice.Open(lattice.Square(), 3, 3))(t)
	turn := must(open.Rotation([2]float64{1, 1}, 4))(t)
	if _, err := open.SpaceGroup(&lattice.SymmetryOptions{Extra: []lattice.Extra{{Action: turn}}}); err == nil || !strings.Contains(err.Error(), "reflection") {
		t.Errorf("a rotation beside the reflections: %v", err)
	}
	s := must(c.SpaceGroup(nil))(t)
	k := must(lattice.Torus(lattice.Square(), 3, 3))(t).Momentum(1, 0)
	if _, err := s.LittleGroup(k); err == nil {
		t.Error("a momentum of another cluster was accepted")
	}
}

// halfTurns are phases ±i on the two levels of each site, which spin inversion
// exchanges.
func halfTurns(n int) [][]group.Turn {
	list := make([][]group.Turn, n)
	for i := range list {
		list[i] = []group.Turn{{}, group.NewTurn(1, 4)}
	}
	return list
}

func TestKindsAndBondsReduceTheGroup(t *testing.T) {
	c := must(lattice.Torus(lattice.Checkerboard(), 2, 2))(t)
	all := must(c.SpaceGroup(nil))(t)
	kinds := must(c.SpaceGroup(&lattice.SymmetryOptions{Kinds: []int{0, 1}}))(t)
	if len(all.Operations) != 16 || len(kinds.Operations) != 8 {
		t.Errorf("%d and %d operations, want 16 and 8", len(all.Operations), len(kinds.Operations))
	}
	for _, k := range must(kinds.Sectors())(t) {
		if strings.HasPrefix(k.Irrep, "Γ") {
			t.Errorf("%v has no name", k)
		}
	}
	// A uniform ring with bonds of alternating strength in a cell of two sites.
	ring := must(lattice.Torus(lattice.Lattice{Name: "alternating", Dimension: 1, A1: [2]float64{2, 0}, Sites: [][2]float64{{0, 0}, {1, 0}}}, 4, 1))(t)
	var strong []lattice.Bond
	for i := 0; i < 8; i += 2 {
		strong = append(strong, lattice.Bond{From: i, To: i + 1})
	}
	if s := must(ring.SpaceGroup(&lattice.SymmetryOptions{Bonds: [][]lattice.Bond{strong}}))(t); s.Group.Order() != 8 {
		t.Errorf("%d symmetries of the alternating ring, want 8", s.Group.Order())
	}
	if s := must(ring.SpaceGroup(nil))(t); s.Group.Order() != 16 {
		t.Errorf("%d symmetries of the uniform ring, want 16", s.Group.Order())
	}
}

func TestPointGroupLeavesTheOriginInPlace(t *testing.T) {
	for c := range clusters(t) {
		s := must(c.SpaceGroup(nil))(t)
		list := s.PointGroup()
		if got := s.Group.Subgroup(list); len(got) != len(list) {
			t.Errorf("%v: %d elements keep the origin and span %d", c, len(list), len(got))
		}
		for element := range s.Group.Order() {
			// The permutation is what the motion does to the sites.
			p := s.Group.At(element).Sites
			m := s.Motion(element)
			for i, to := range p {
				x := c.Position(i)
				at := [2]float64{m.Linear[0][0]*x[0] + m.Linear[0][1]*x[1] + m.Translation[0], m.Linear[1][0]*x[0] + m.Linear[1][1]*x[1] + m.Translation[1]}
				y := c.Position(to)
				if d := distance(c, at, y); d > 1e-6 {
					t.Fatalf("%v: %v carries site %d to %v, not to site %d", c, m, i, at, to)
				}
			}
		}
	}
}

// distance is that of two points modulo the periods.
func distance(c *lattice.Cluster, a, b [2]float64) float64 {
	l := c.Lattice()
	t1, t2 := c.Periods()
	first, second := c.Periodic()
	best := math.Inf(1)
	for x := -8; x <= 8; x++ {
		for y := -8; y <= 8; y++ {
			if x != 0 && !first || y != 0 && !second {
				continue
			}
			n1, n2 := float64(x*t1[0]+y*t2[0]), float64(x*t1[1]+y*t2[1])
			if l.Dimension == 1 {
				n2 = 0
			}
			best = min(best, math.Hypot(a[0]-b[0]+n1*l.A1[0]+n2*l.A2[0], a[1]-b[1]+n1*l.A1[1]+n2*l.A2[1]))
		}
	}
	return best
}

// The time for the group and all sectors of 36 sites, in units of that for the
// group alone by its generators.
func BenchmarkSectors36(b *testing.B) {
	c, err := lattice.Torus(lattice.Triangular(), 6, 6)
	if err != nil {
		b.Fatal(err)
	}
	var generators []group.Action
	var span, all time.Duration
	for range b.N {
		start := time.Now()
		s, err := c.SpaceGroup(&lattice.SymmetryOptions{Extra: []lattice.Extra{inversion(36)}})
		if err != nil {
			b.Fatal(err)
		}
		if _, err := s.Sectors(); err != nil {
			b.Fatal(err)
		}
		all += time.Since(start)
		generators = generators[:0]
		for _, i := range s.Group.Generators() {
			generators = append(generators, s.Group.At(i))
		}
		start = time.Now()
		if _, err := group.Span(generators); err != nil {
			b.Fatal(err)
		}
		span += time.Since(start)
	}
	b.ReportMetric(float64(all)/float64(span), "spans")
}

func ExampleSpaceGroup_Sectors() {
	c, err := lattice.Torus(lattice.Triangular(), 3, 3)
	if err != nil {
		fmt.Println(err)
		return
	}
	s, err := c.SpaceGroup(nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	sectors, err := s.Sectors()
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(s.Group.Order(), "symmetries")
	for _, k := range sectors {
		fmt.Println(k, "of multiplicity", k.Multiplicity)
	}
	// Output:
	// 108 symmetries
	// Γ A1 of multiplicity 1
	// Γ A2 of multiplicity 1
	// Γ B1 of multiplicity 1
	// Γ B2 of multiplicity 1
	// Γ E1 of multiplicity 2
	// Γ E2 of multiplicity 2
	// (1/3, 0/1) A′ of multiplicity 6
	// (1/3, 0/1) A″ of multiplicity 6
	// K A1 of multiplicity 2
	// K A2 of multiplicity 2
	// K E of multiplicity 4
}
