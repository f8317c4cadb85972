package main

import (
	"fmt"
	"math"
	"sort"

	"ketloom/lanczos/entangle"
)

// level is one level of all sectors together.
type level struct {
	energy float64
	sector int // number in the list of sectors
}

// manifold is what lies below the largest gap.
type manifold struct {
	below     int     // number of levels
	gap       float64 // from the highest of them to the next
	spread    float64 // from the lowest of them to the highest
	top       float64 // energy of the highest
	counts    []int   // how many of them are in each sector
	predicted [][2]int
	agree     bool
}

// findManifold looks for the largest gap among the levels that are known
// without omission: those up to the lowest of the highest levels computed in
// each sector.
func findManifold(s settings, sectors []sector) (manifold, error) {
	var all []level
	known := math.Inf(1)
	for i, sec := range sectors {
		for _, l := range sec.result.Levels {
			all = append(all, level{l.Energy, i})
		}
		n := len(sec.result.Levels)
		if n < sec.basis.Len() {
			known = math.Min(known, sec.result.Levels[n-1].Energy)
		}
	}
	sort.SliceStable(all, func(a, b int) bool { return all[a].energy < all[b].energy })
	m := manifold{counts: make([]int, len(sectors))}
	for i := 0; i+1 < len(all); i++ {
		if all[i+1].energy > known {
			break
		}
		if gap := all[i+1].energy - all[i].energy; gap > m.gap {
			m.gap, m.below = gap, i+1
		}
	}
	for i := 0; i < m.below; i++ {
		m.counts[all[i].sector]++
		m.top = all[i].energy
		m.spread = all[i].energy - all[0].energy
	}
	return m, m.predict(s, sectors)
}

// predict lists the momenta of the states with at most one particle in three
// consecutive orbitals, the rule of the 1/3 state on the torus, and compares them
// with where the levels below the gap are.
func (m *manifold) predict(s settings, sectors []sector) error {
	m.predicted = [][2]int{}
	if s.lx*s.ly < 3 {
		return nil
	}
	rule := entangle.Exclusion{Most: 1, Range: 3, Orbitals: s.lx * s.ly}
	counts, err := rule.OnTorus(s.particles, s.lx, s.ly)
	if err != nil {
		return err
	}
	expected := map[[2]int]int{}
	for _, c := range counts {
		k := [2]int{c.Charges[0], c.Charges[1]}
		expected[k] = int(c.Count)
		for n := 0; n < int(c.Count); n++ {
			m.predicted = append(m.predicted, k)
		}
	}
	m.agree = len(m.predicted) == m.below
	for i, sec := range sectors {
		m.agree = m.agree && m.counts[i] == expected[[2]int{sec.kx, sec.ky}]
	}
	return nil
}

// printManifold states what was found.
func printManifold(sectors []sector, m manifold) {
	if m.below == 0 {
		fmt.Println("\nno gap can be stated: too few levels are known without omission; ask for more -levels")
		return
	}
	fmt.Printf("\nlevels below the largest gap: %d\n", m.below)
	fmt.Printf("gap        %.10f V\n", m.gap)
	fmt.Printf("spread     %.10f V\n", m.spread)
	found := ""
	for i, sec := range sectors {
		for n := 0; n < m.counts[i]; n++ {
			found += fmt.Sprintf(" (%d,%d)", sec.kx, sec.ky)
		}
	}
	predicted := ""
	for _, k := range m.predicted {
		predicted += fmt.Sprintf(" (%d,%d)", k[0], k[1])
	}
	if len(m.predicted) > 24 {
		predicted = fmt.Sprintf(" %d states, more than are listed here", len(m.predicted))
	}
	fmt.Printf("sectors   %s\npredicted %s   (at most 1 particle in 3 consecutive orbitals)\n", found, predicted)
	if m.agree {
		fmt.Println("number and sectors agree with the prediction: yes")
	} else {
		fmt.Println("number and sectors agree with the prediction: no")
	}
}
