package entangle

import "fmt"

// Configurations lists the admissible configurations of the particles, the
// number of particles in each orbital, in ascending order from orbital 0 on. It
// is meant for small rings; sectors are counted without it. Errors: as of
// [Exclusion.BySector]; more than MostListed configurations.
func (e Exclusion) Configurations(particles int) ([][]int, error) {
	count, err := e.Count(particles)
	if err != nil {
		return nil, err
	}
	if count > MostListed {
		return nil, fmt.Errorf("entangle: a list of %d configurations; at most %d are listed, count them instead", count, MostListed)
	}
	if count == 0 {
		return nil, nil
	}
	l := lister{rule: e, filled: make([]int, e.Orbitals), list: make([][]int, 0, count)}
	l.fill(0, particles)
	return l.list, nil
}

// lister fills orbital after orbital.
type lister struct {
	rule   Exclusion
	filled []int
	list   [][]int
	dead   map[string]bool // beginnings that the rule does not let close
}

func (l *lister) fill(orbital, left int) {
	window := l.rule.Range - 1
	if orbital == window {
		l.dead = map[string]bool{} // of the first window that is now complete
	}
	if orbital < window {
		l.next(orbital, left)
		return
	}
	key := keyOf(append([]int{orbital, left}, l.filled[orbital-window:orbital]...))
	if l.dead[key] {
		return
	}
	before := len(l.list)
	l.next(orbital, left)
	if len(l.list) == before {
		l.dead[key] = true
	}
}

func (l *lister) next(orbital, left int) {
	if orbital == l.rule.Orbitals {
		if left == 0 && l.closes() {
			l.list = append(l.list, append([]int(nil), l.filled...))
		}
		return
	}
	before := sum(l.filled[max(0, orbital-l.rule.Range+1):orbital])
	for n := 0; n <= min(left, l.rule.highest(), l.rule.Most-before); n++ {
		l.filled[orbital] = n
		if l.fits(orbital+1, left-n) {
			l.fill(orbital+1, left-n)
		}
	}
	l.filled[orbital] = 0
}

// fits reports whether the orbitals from one on can hold the particles that are
// left: at most Most in every Range of them.
func (l *lister) fits(orbital, left int) bool {
	rest := l.rule.Orbitals - orbital
	groups := (rest + l.rule.Range - 1) / l.rule.Range
	return left <= groups*l.rule.Most
}

func (l *lister) closes() bool {
	w := l.rule.Range - 1
	return l.rule.closes(l.filled[l.rule.Orbitals-w:], l.filled[:w])
}
