package model

import (
	"math"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/operator"
)

// compass returns Kitaev's honeycomb model (Ann. Phys. 321, 2, 2006) on a torus:
// z-bonds A(r)-B(r), x-bonds A(r)-B(r-a1), y-bonds A(r)-B(r-a2).
func compass(t *testing.T, l1, l2 int, k [3]float64) (*lattice.Cluster, operator.Operator) {
	t.Helper()
	c := built[*lattice.Cluster](t)(lattice.Torus(lattice.Honeycomb(), l1, l2))
	o := operator.On(onSites(t, c, basis.SpinHalf()))
	var terms []operator.Operator
	for _, b := range built[[]lattice.Bond](t)(c.Bonds(1)) {
		var product operator.Operator
		switch b.Cells {
		case [2]int{-1, 0}:
			product = o.Sx(b.From).Times(o.Sx(b.To)).Scale(complex(k[0], 0))
		case [2]int{0, -1}:
			product = o.Sy(b.From).Times(o.Sy(b.To)).Scale(complex(k[1], 0))
		case [2]int{0, 0}:
			product = o.Sz(b.From).Times(o.Sz(b.To)).Scale(complex(k[2], 0))
		default:
			t.Fatalf("a bond over %v cells", b.Cells)
		}
		terms = append(terms, product)
	}
	return c, operator.Sum(terms).NormalOrdered()
}

// spinInversion exchanges up and down on n spins 1/2, with the eigenvalue +1 or -1
// for turn = 0 or 1: that of Π σˣ.
func spinInversion(n int, turn int64) group.Eigenvalue {
	return group.Eigenvalue{Generator: group.Relabel(n, []int{1, 0}), Turn: group.NewTurn(turn, 2)}
}

// signOfUp is Π -σᶻ, which changes the sign for every spin up.
func signOfUp(n int, turn int64) group.Eigenvalue {
	phases := make([][]group.Turn, n)
	for i := range phases {
		phases[i] = []group.Turn{{}, group.NewTurn(1, 2)}
	}
	return group.Eigenvalue{Generator: group.Action{Sites: group.Identity(n), Phases: phases}, Turn: group.NewTurn(turn, 2)}
}

// compassSectors returns the levels by momentum and by the rotations through π about
// x and z. The operator is real, so that k and -k have the same levels and one of them
// is solved.
func compassSectors(t *testing.T, c *lattice.Cluster, solve func(basis.Sector) []float64) (all [][]float64) {
	t.Helper()
	for _, k := range c.Momenta() {
		opposite := c.Momentum(-k.Index[0], -k.Index[1]).Index
		if slices.Compare(opposite[:], k.Index[:]) < 0 {
			continue
		}
		for x := range int64(2) {
			for z := range int64(2) {
				levels := solve(basis.Sector{Symmetries: append(c.Sector(k), spinInversion(c.Sites(), x), signOfUp(c.Sites(), z))})
				all = append(all, levels)
				if opposite != k.Index {
					all = append(all, levels)
				}
			}
		}
	}
	return all
}

// The records list four lowest energies of the whole space, found by a method that
// misses members of multiplets; their distinct energies hold. The multiplicities here
// are of complete spectra on twelve sites: the ground level, listed twice, is threefold,
// once at each momentum along a1. On eighteen sites Lanczos finds it threefold at
// K = (1, 1, 1), as listed, and 18-fold at K = (-1, -1, -2.5), where it is listed three
// times: at each of the nine momenta it occurs once with Π σᶻ = -1 and either Π σˣ.
func TestCompassModel(t *testing.T) {
	for _, c := range []struct {
		id             string
		l1, l2         int
		k              [3]float64
		multiplicities []int // of the distinct energies
	}{
		{"B4-kitaev-12-z2.5", 3, 2, [3]float64{1, 1, 2.5}, []int{3, 1, 1}},
		{"B4-kitaev-12-negative-z2.5", 3, 2, [3]float64{-1, -1, -2.5}, []int{3, 1, 1}},
		{"B4-kitaev-18-iso", 3, 3, [3]float64{1, 1, 1}, []int{3}},
		{"B4-kitaev-18-negative-z2.5", 3, 3, [3]float64{-1, -1, -2.5}, []int{18}},
	} {
		large := c.l1*c.l2 > 6
		if large && testing.Short() {
			continue
		}
		cluster, h := compass(t, c.l1, c.l2, c.k)
		all := merged(compassSectors(t, cluster, func(s basis.Sector) []float64 {
			if large {
				return lowest(t, h, s, 2)
			}
			return spectrum(t, h, s)
		}))
		if !large && len(all) != 1<<12 {
			t.Fatalf("%s: %d levels", c.id, len(all))
		}
		want, r := value[[]float64](t, c.id)
		want = distinct(want)
		expect(t, r, "distinct energies", distinct(slices.Clone(all)), want)
		for i, n := range c.multiplicities {
			found := 0
			for _, e := range all {
				if math.Abs(e-want[i]) < 1e-8 {
					found++
				}
			}
			if found != n {
				t.Errorf("%s: the level %v is %d-fold, want %d", c.id, want[i], found, n)
			}
		}
	}
}
