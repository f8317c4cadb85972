package lattice

import (
	"fmt"

	"ketloom/basis/group"
)

// bondSet is a list of bonds by the sites that they join, in both directions,
// with the displacement.
type bondSet map[[2]int][][2]float64

func newBondSet(c *Cluster, bonds []Bond) (bondSet, error) {
	s := bondSet{}
	for i, b := range bonds {
		if b.From < 0 || b.To < 0 || b.From >= c.Sites() || b.To >= c.Sites() {
			return nil, fmt.Errorf("lattice: bond %d joins the sites %d and %d; the cluster has the sites 0 … %d", i, b.From, b.To, c.Sites()-1)
		}
		s[[2]int{b.From, b.To}] = append(s[[2]int{b.From, b.To}], b.Displacement)
		s[[2]int{b.To, b.From}] = append(s[[2]int{b.To, b.From}], scale(-1, b.Displacement))
	}
	return s, nil
}

// carried reports the first bond that the isometry does not carry to one of
// the set, as often as it is there itself.
func (s bondSet) carried(c *Cluster, m Isometry, p group.Permutation, bonds []Bond) (broken int, ok bool) {
	small := 1e-6 * length(c.lattice.A1)
	count := func(pair [2]int, v [2]float64) int {
		n := 0
		for _, d := range s[pair] {
			if length(minus(d, v)) < small {
				n++
			}
		}
		return n
	}
	for i, b := range bonds {
		before := count([2]int{b.From, b.To}, b.Displacement)
		if count([2]int{p[b.From], p[b.To]}, m.turned(b.Displacement)) != before {
			return i, false
		}
	}
	return 0, true
}

// keeper says which isometries keep the kinds of orbitals and lists of bonds.
type keeper struct {
	cluster *Cluster
	kinds   []int
	bonds   [][]Bond
	sets    []bondSet
}

func newKeeper(c *Cluster, o SymmetryOptions) (*keeper, error) {
	k := &keeper{cluster: c, kinds: o.Kinds, bonds: o.Bonds}
	if k.kinds != nil && len(k.kinds) != c.Orbitals() {
		return nil, fmt.Errorf("lattice: %d kinds for the %d sites of a cell; give one each, or none", len(k.kinds), c.Orbitals())
	}
	for i, list := range o.Bonds {
		s, err := newBondSet(c, list)
		if err != nil {
			return nil, fmt.Errorf("list %d of bonds: %w", i, err)
		}
		k.sets = append(k.sets, s)
	}
	return k, nil
}

// check reports what the isometry breaks.
func (k *keeper) check(m Isometry, p group.Permutation) error {
	for i, to := range p {
		if k.kinds != nil && k.kinds[i%len(k.kinds)] != k.kinds[to%len(k.kinds)] {
			return fmt.Errorf("it carries site %d to site %d of another kind", i, to)
		}
	}
	for i, s := range k.sets {
		if n, ok := s.carried(k.cluster, m, p, k.bonds[i]); !ok {
			b := k.bonds[i][n]
			return fmt.Errorf("it carries the bond from %d to %d of list %d to one from %d to %d that is not in the list as often", b.From, b.To, i, p[b.From], p[b.To])
		}
	}
	return nil
}
