package entangle

import (
	"fmt"
	"math/bits"
	"slices"
)

// Exclusion is a generalised exclusion rule on a ring of orbitals: at most Most
// particles in any Range consecutive orbitals (Haldane, Phys. Rev. Lett. 67, 937,
// 1991; Bernevig and Haldane, Phys. Rev. Lett. 100, 246802, 2008). With Most = 1
// and Range = 3 it counts the quasihole states of the 1/3 state, and with them
// the levels below the gap of a particle cut (Regnault and Bernevig, Phys. Rev. X
// 1, 021014, 2011). Fermions sit at most one in an orbital; set Bosons for up to
// Most.
type Exclusion struct {
	Most, Range int
	Orbitals    int
	Bosons      bool
}

// OrbitalCharge is what a particle carries in each orbital of a ring, such as the
// momentum j of Landau orbital j, or a lattice momentum: folded onto a lattice of
// lx × ly cells, orbital j = ky + ly·kx has the values kx modulo lx and ky modulo ly
// (Bernevig and Regnault, Phys. Rev. B 85, 075128, 2012). [Exclusion.OnTorus]
// counts by the momenta of many particles on such a lattice.
type OrbitalCharge struct {
	Modulus int // 0 for an integer charge
	Values  []int
}

// SectorCount is the number of admissible configurations with given charges.
type SectorCount struct {
	Charges []int
	Count   uint64
}

// Bounds of an exclusion rule that can be counted.
const (
	// MostOrbitals is the largest number of orbitals of a ring.
	MostOrbitals = 1024
	// MostWindows is the largest number of admissible fillings of Range-1
	// consecutive orbitals.
	MostWindows = 4096
	// MostSteps is the largest number of steps of a count: fillings of one more
	// orbital, by what was filled before. They take seconds, or up to a minute where
	// charges make many sectors.
	MostSteps = 2e8
	// MostListed is the largest number of configurations that are listed.
	MostListed = 1 << 20
	// LargestCarried is the largest magnitude of a value or modulus.
	LargestCarried = 1 << 20
)

// check reports why the rule cannot be counted.
func (e Exclusion) check(particles int, charges []OrbitalCharge) error {
	switch {
	case e.Most < 1 || e.Range < 1 || e.Most > MostWindows:
		return fmt.Errorf("entangle: at most %d particles in %d consecutive orbitals; give positive numbers, of particles up to %d", e.Most, e.Range, MostWindows)
	case e.Orbitals < 1 || e.Orbitals > MostOrbitals:
		return fmt.Errorf("entangle: a ring of %d orbitals; 1 … %d are possible", e.Orbitals, MostOrbitals)
	case e.Range > e.Orbitals:
		return fmt.Errorf("entangle: a rule over %d consecutive orbitals on a ring of %d; give a range that fits on the ring", e.Range, e.Orbitals)
	case particles < 0:
		return fmt.Errorf("entangle: %d particles; give 0 or more", particles)
	}
	for i, q := range charges {
		if len(q.Values) != e.Orbitals {
			return fmt.Errorf("entangle: charge %d has %d values for %d orbitals; give one an orbital", i, len(q.Values), e.Orbitals)
		}
		if q.Modulus < 0 || q.Modulus > LargestCarried {
			return fmt.Errorf("entangle: charge %d is taken modulo %d; use 0 (an integer charge) or 1 … %d", i, q.Modulus, LargestCarried)
		}
		for _, v := range q.Values {
			if v > LargestCarried || v < -LargestCarried {
				return fmt.Errorf("entangle: charge %d has the value %d; the largest is %d", i, v, LargestCarried)
			}
		}
	}
	return nil
}

// highest is the largest number of particles in one orbital.
func (e Exclusion) highest() int {
	if e.Bosons {
		return e.Most
	}
	return 1
}

// Count returns the number of admissible configurations of the particles. For
// Most = 1 it is, with r = Range,
//
//	Orbitals·(Orbitals-(r-1)·n-1)! / (n!·(Orbitals-r·n)!).
//
// Errors: as of [Exclusion.BySector].
func (e Exclusion) Count(particles int) (uint64, error) {
	counts, err := e.BySector(particles, nil)
	if err != nil || len(counts) == 0 {
		return 0, err
	}
	return counts[0].Count, nil
}

// BySector returns the number of admissible configurations by the total charges
// of the particles, ascending in the charges; sectors without any are left out.
// With Orbitals = 3·particles the rule (1,3) has three configurations in all, the
// thin-torus patterns of the three ground states.
//
// A window of Range-1 orbitals is carried along the ring, once for each window
// that the ring can begin with, so that configurations are counted, not visited.
//
// Errors: an impossible rule, charges for another number of orbitals, more than
// MostWindows windows or MostSteps steps, a number that 64 bits do not hold, be it
// one of beginnings that the rule does not let close around the ring.
func (e Exclusion) BySector(particles int, charges []OrbitalCharge) ([]SectorCount, error) {
	if err := e.check(particles, charges); err != nil {
		return nil, err
	}
	windows, err := e.windows()
	if err != nil {
		return nil, err
	}
	c := newCounter(e, particles, charges, windows)
	for begin := range windows {
		if err := c.around(begin); err != nil {
			return nil, err
		}
	}
	return c.counts(), nil
}

// windows lists the admissible fillings of Range-1 orbitals, ascending.
func (e Exclusion) windows() ([][]int, error) {
	list := [][]int{{}}
	for range e.Range - 1 {
		var longer [][]int
		for _, w := range list {
			for fill := 0; fill <= e.highest() && sum(w)+fill <= e.Most; fill++ {
				longer = append(longer, append(w[:len(w):len(w)], fill))
			}
		}
		if list = longer; len(list) > MostWindows {
			return nil, fmt.Errorf("entangle: %d orbitals can be filled in more than %d ways with at most %d particles; give a shorter range or fewer particles", e.Range-1, MostWindows, e.Most)
		}
	}
	return list, nil
}

func sum(list []int) int {
	total := 0
	for _, v := range list {
		total += v
	}
	return total
}

// counter carries numbers of ways along the ring.
type counter struct {
	rule      Exclusion
	particles int
	charges   []OrbitalCharge
	windows   [][]int
	step      [][]int        // window after another orbital, [window][fill], -1 for none
	sectors   [][]int        // charges by number
	number    map[string]int // of charges
	ways      map[path]uint64
	total     map[int]uint64 // by sector
	steps     float64
}

// path is where the ways end that are counted together.
type path struct{ window, particles, sector int }

func newCounter(e Exclusion, particles int, charges []OrbitalCharge, windows [][]int) *counter {
	c := &counter{rule: e, particles: particles, charges: charges, windows: windows, number: map[string]int{}, total: map[int]uint64{}}
	of := map[string]int{}
	for i, w := range windows {
		of[keyOf(w)] = i
	}
	for _, w := range windows {
		next := make([]int, e.highest()+1)
		for fill := range next {
			next[fill] = -1
			if sum(w)+fill <= e.Most {
				next[fill] = of[keyOf(append(w[:len(w):len(w)], fill)[1:])]
			}
		}
		c.step = append(c.step, next)
	}
	return c
}

// around adds the configurations that begin with a window.
func (c *counter) around(begin int) error {
	first := c.windows[begin]
	sector := c.carried(-1, 0, 0)
	for orbital, fill := range first {
		sector = c.carried(sector, orbital, fill)
	}
	c.ways = map[path]uint64{}
	if n := sum(first); n <= c.particles {
		c.ways[path{begin, n, sector}] = 1
	}
	for orbital := c.rule.Range - 1; orbital < c.rule.Orbitals; orbital++ {
		if err := c.extend(orbital); err != nil {
			return err
		}
	}
	for p, n := range c.ways {
		if p.particles != c.particles || !c.rule.closes(c.windows[p.window], first) {
			continue
		}
		if err := addTo(c.total, p.sector, n); err != nil {
			return err
		}
	}
	return nil
}

// extend fills one more orbital in every way that the rule allows.
func (c *counter) extend(orbital int) error {
	if c.steps += float64(len(c.ways)) * float64(c.rule.highest()+1); c.steps > MostSteps {
		return fmt.Errorf("entangle: counting takes more than %g steps; give fewer charges, particles or orbitals", float64(MostSteps))
	}
	next := make(map[path]uint64, len(c.ways))
	fills := c.rule.highest() + 1
	sectors := make([]int, len(c.sectors)*fills) // after a fill, plus one; 0 where not known
	for p, n := range c.ways {
		for fill, window := range c.step[p.window] {
			if window < 0 || p.particles+fill > c.particles {
				continue
			}
			sector := &sectors[p.sector*fills+fill]
			if *sector == 0 {
				*sector = 1 + c.carried(p.sector, orbital, fill)
			}
			to := path{window, p.particles + fill, *sector - 1}
			if err := addTo(next, to, n); err != nil {
				return err
			}
		}
	}
	c.ways = next
	return nil
}

// carried returns the sector after some particles are put into an orbital; the
// sector -1 stands for no particle yet.
func (c *counter) carried(sector, orbital, fill int) int {
	if sector >= 0 && fill == 0 {
		return sector
	}
	q := make([]int, len(c.charges))
	for i, charge := range c.charges {
		if sector >= 0 {
			q[i] = c.sectors[sector][i] + fill*charge.Values[orbital]
		}
		if charge.Modulus > 0 {
			q[i] = (q[i]%charge.Modulus + charge.Modulus) % charge.Modulus
		}
	}
	key := keyOf(q)
	number, ok := c.number[key]
	if !ok {
		number = len(c.sectors)
		c.number[key] = number
		c.sectors = append(c.sectors, q)
	}
	return number
}

// counts returns the totals, ascending in the charges.
func (c *counter) counts() []SectorCount {
	list := make([]SectorCount, 0, len(c.total))
	for sector, n := range c.total {
		list = append(list, SectorCount{c.sectors[sector], n})
	}
	slices.SortFunc(list, func(a, b SectorCount) int { return slices.Compare(a.Charges, b.Charges) })
	return list
}

// addTo adds exactly. Whether it overflows does not depend on the order, since
// nothing is subtracted.
func addTo[K comparable](ways map[K]uint64, key K, n uint64) error {
	total, carry := bits.Add64(ways[key], n, 0)
	if carry != 0 {
		return fmt.Errorf("entangle: more than 1.8e19 configurations, open ends of the ring included; 64 bits do not hold the number, give fewer particles or orbitals")
	}
	ways[key] = total
	return nil
}

// closes reports whether the last window and the first one obey the rule across
// the end of the ring.
func (e Exclusion) closes(last, first []int) bool {
	around := append(append([]int(nil), last...), first...)
	for i := 0; i+e.Range <= len(around); i++ {
		if sum(around[i:i+e.Range]) > e.Most {
			return false
		}
	}
	return true
}
