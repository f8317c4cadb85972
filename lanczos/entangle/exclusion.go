package entangle

import (
	"fmt"
	"math/bits"
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

// OrbitalCharge is what each orbital of a ring carries, such as a lattice
// momentum modulo a length (Bernevig and Regnault, Phys. Rev. B 85, 075128,
// 2012).
type OrbitalCharge struct {
	Modulus int // 0 for an integer charge
	Values  []int
}

// SectorCount is the number of admissible configurations with given charges.
type SectorCount struct {
	Charges []int
	Count   uint64
}

// mostWindows bounds the work of a count: the number of ways to fill Range-1
// orbitals.
const mostWindows = 1 << 16

// check reports why the rule cannot be counted.
func (e Exclusion) check(particles int, charges []OrbitalCharge) error {
	if e.Most < 1 || e.Range < 1 || e.Orbitals < 1 || e.Orbitals > 64 {
		return fmt.Errorf("entangle: at most %d particles in %d consecutive of %d orbitals; give positive numbers and at most 64 orbitals", e.Most, e.Range, e.Orbitals)
	}
	if e.Range > e.Orbitals {
		return fmt.Errorf("entangle: a rule over %d consecutive orbitals on a ring of %d", e.Range, e.Orbitals)
	}
	if particles < 0 {
		return fmt.Errorf("entangle: %d particles", particles)
	}
	windows := 1
	for range e.Range - 1 {
		if windows *= e.highest() + 1; windows > mostWindows {
			return fmt.Errorf("entangle: a rule over %d orbitals has too many windows to count", e.Range)
		}
	}
	for i, q := range charges {
		if len(q.Values) != e.Orbitals || q.Modulus < 0 {
			return fmt.Errorf("entangle: charge %d has %d values modulo %d for %d orbitals; give one an orbital and a modulus of at least 0", i, len(q.Values), q.Modulus, e.Orbitals)
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

// Count returns the number of admissible configurations of the particles.
func (e Exclusion) Count(particles int) (uint64, error) {
	counts, err := e.BySector(particles, nil)
	if err != nil || len(counts) == 0 {
		return 0, err
	}
	return counts[0].Count, nil
}

// BySector returns the number of admissible configurations by the total charges
// of the particles, sorted by charges; sectors without any are left out. It
// carries the window of the last Range-1 orbitals along the ring, once for each
// window that the ring can begin with, so that configurations are counted, not
// visited.
func (e Exclusion) BySector(particles int, charges []OrbitalCharge) ([]SectorCount, error) {
	if err := e.check(particles, charges); err != nil {
		return nil, err
	}
	total := map[string]*SectorCount{}
	for _, begin := range e.windows() {
		paths := map[string]*path{}
		if !e.addPath(paths, e.begin(begin, charges), particles) {
			continue
		}
		for orbital := e.Range - 1; orbital < e.Orbitals; orbital++ {
			next := map[string]*path{}
			for _, key := range sortedKeys(paths) {
				for fill := 0; fill <= e.highest(); fill++ {
					if err := e.extend(next, paths[key], orbital, fill, charges, particles); err != nil {
						return nil, err
					}
				}
			}
			paths = next
		}
		for _, key := range sortedKeys(paths) {
			p := paths[key]
			if p.particles == particles && e.closes(p.window, begin) {
				if err := addCount(total, p); err != nil {
					return nil, err
				}
			}
		}
	}
	counts := make([]SectorCount, 0, len(total))
	for _, c := range total {
		counts = append(counts, *c)
	}
	sortCounts(counts)
	return counts, nil
}

// path is a number of ways to fill the orbitals so far that end in the same
// window with the same particles and charges.
type path struct {
	window    []int
	particles int
	charges   []int
	count     uint64
}

// windows lists the admissible fillings of Range-1 orbitals.
func (e Exclusion) windows() [][]int {
	list := [][]int{{}}
	for range e.Range - 1 {
		var longer [][]int
		for _, w := range list {
			for fill := 0; fill <= e.highest() && sum(w)+fill <= e.Most; fill++ {
				longer = append(longer, append(w[:len(w):len(w)], fill))
			}
		}
		list = longer
	}
	return list
}

func sum(list []int) int {
	total := 0
	for _, v := range list {
		total += v
	}
	return total
}

// begin is the path over the first window.
func (e Exclusion) begin(window []int, charges []OrbitalCharge) *path {
	p := &path{window: window, charges: make([]int, len(charges)), count: 1}
	for orbital, fill := range window {
		p.particles += fill
		p.charges = carried(p.charges, charges, orbital, fill)
	}
	return p
}

// carried adds the charges of the particles in an orbital.
func carried(old []int, charges []OrbitalCharge, orbital, fill int) []int {
	out := make([]int, len(charges))
	for i, q := range charges {
		out[i] = old[i] + fill*q.Values[orbital]
		if q.Modulus > 0 {
			out[i] = (out[i]%q.Modulus + q.Modulus) % q.Modulus
		}
	}
	return out
}

// extend adds the path with one more orbital filled, if the rule allows.
func (e Exclusion) extend(next map[string]*path, p *path, orbital, fill int, charges []OrbitalCharge, particles int) error {
	if sum(p.window)+fill > e.Most {
		return nil
	}
	longer := &path{
		window:    append(append([]int(nil), p.window...), fill)[1:],
		particles: p.particles + fill,
		charges:   carried(p.charges, charges, orbital, fill),
		count:     p.count,
	}
	key := fmt.Sprint(longer.window, longer.particles, longer.charges)
	if known := next[key]; known != nil {
		s, carry := bits.Add64(known.count, longer.count, 0)
		if carry != 0 {
			return errOverflow
		}
		known.count = s
		return nil
	}
	e.addPath(next, longer, particles)
	return nil
}

func (e Exclusion) addPath(paths map[string]*path, p *path, particles int) bool {
	if p.particles > particles {
		return false
	}
	paths[fmt.Sprint(p.window, p.particles, p.charges)] = p
	return true
}

var errOverflow = fmt.Errorf("entangle: more than 1.8e19 admissible configurations")

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

func addCount(total map[string]*SectorCount, p *path) error {
	key := fmt.Sprint(p.charges)
	if total[key] == nil {
		total[key] = &SectorCount{Charges: p.charges}
	}
	s, carry := bits.Add64(total[key].Count, p.count, 0)
	if carry != 0 {
		return errOverflow
	}
	total[key].Count = s
	return nil
}
