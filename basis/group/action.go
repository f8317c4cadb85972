package group

import (
	"fmt"
	"strconv"
)

// Action is a monomial symmetry: it sends every product state to one product
// state times a phase,
//
//	U |s⟩_i = exp(2πi·Phases[i][s]) |Levels[i][s]⟩_{Sites[i]},
//
// that is, the level s of site i becomes the level Levels[i][s] of the site
// Sites[i]. A nil Levels (or Levels[i]) keeps the level, a nil Phases (or
// Phases[i]) gives no phase. On fermionic sites the sign of the reordering
// comes in addition; package basis supplies it.
//
// Actions are values that nothing in Ketloom modifies; their slices are shared.
type Action struct {
	Sites  Permutation `json:"sites"`
	Levels [][]int     `json:"levels,omitempty"`
	Phases [][]Turn    `json:"phases,omitempty"`
}

// Translate returns the action that moves sites by p and does nothing else.
func Translate(p Permutation) Action { return Action{Sites: p} }

// Relabel returns the action that applies the same relabelling of levels to
// every one of n sites and moves none. Relabel(n, []int{1, 0}) inverts the
// spin of n spins 1/2.
func Relabel(n int, levels []int) Action {
	all := make([][]int, n)
	for i := range all {
		all[i] = levels
	}
	return Action{Sites: Identity(n), Levels: all}
}

// Gauge returns the action that multiplies every particle (level above the
// lowest) on site i by exp(2πi·phase[i]), on sites of the given number of
// levels, and moves none.
func Gauge(phase []Turn, levels int) Action {
	all := make([][]Turn, len(phase))
	for i, t := range phase {
		all[i] = make([]Turn, levels)
		for s := range all[i] {
			all[i][s] = t.Times(int64(s))
		}
	}
	return Action{Sites: Identity(len(phase)), Phases: all}
}

// Check reports the first reason for which a is not an action: Sites no
// permutation, a relabelling that is not one to one, a phase that is no
// fraction, or slices of the wrong length.
func (a Action) Check() error {
	if err := a.Sites.Check(); err != nil {
		return err
	}
	if a.Levels != nil && len(a.Levels) != len(a.Sites) {
		return fmt.Errorf("group: relabellings are given for %d of %d sites; give one a site, or none", len(a.Levels), len(a.Sites))
	}
	if a.Phases != nil && len(a.Phases) != len(a.Sites) {
		return fmt.Errorf("group: phases are given for %d of %d sites; give one list a site, or none", len(a.Phases), len(a.Sites))
	}
	for i, l := range a.Levels {
		if l == nil {
			continue
		}
		if err := Permutation(l).Check(); err != nil {
			return fmt.Errorf("group: the levels %v of site %d are not relabelled one to one", l, i)
		}
		if a.Phases != nil && a.Phases[i] != nil && len(a.Phases[i]) != len(l) {
			return fmt.Errorf("group: site %d has %d levels but %d phases", i, len(l), len(a.Phases[i]))
		}
	}
	for i, list := range a.Phases {
		for s, t := range list {
			if err := t.Check(); err != nil {
				return fmt.Errorf("site %d, level %d: %w", i, s, err)
			}
		}
	}
	return nil
}

// Level returns what level s of site i becomes.
func (a Action) Level(i, s int) int {
	if a.Levels == nil || s >= len(a.Levels[i]) {
		return s
	}
	return a.Levels[i][s]
}

// Phase returns the phase that level s of site i is multiplied by.
func (a Action) Phase(i, s int) Turn {
	if a.Phases == nil || s >= len(a.Phases[i]) {
		return Turn{0, 1}
	}
	return a.Phases[i][s].normal()
}

// levelsAt is the number of levels that a speaks of at site i, 0 if none.
func (a Action) levelsAt(i int) int {
	n := 0
	if a.Levels != nil {
		n = len(a.Levels[i])
	}
	if a.Phases != nil {
		n = max(n, len(a.Phases[i]))
	}
	return n
}

// Compose returns a∘b, which applies b first. Both must be actions on the
// same sites (and, where both speak of levels, of the same numbers of levels).
func (a Action) Compose(b Action) Action {
	n := len(a.Sites)
	c := Action{Sites: a.Sites.Compose(b.Sites)}
	if a.Levels == nil && b.Levels == nil && a.Phases == nil && b.Phases == nil {
		return c
	}
	c.Levels, c.Phases = make([][]int, n), make([][]Turn, n)
	for i := range n {
		levels := max(a.levelsAt(b.Sites[i]), b.levelsAt(i))
		if levels == 0 {
			continue // nothing is done there
		}
		c.Levels[i], c.Phases[i] = make([]int, levels), make([]Turn, levels)
		for s := range levels {
			middle := b.Level(i, s)
			c.Levels[i][s] = a.Level(b.Sites[i], middle)
			c.Phases[i][s] = b.Phase(i, s).Add(a.Phase(b.Sites[i], middle))
		}
	}
	return c.tidy()
}

// tidy drops relabellings and phases that do nothing.
func (a Action) tidy() Action {
	relabels, phases := false, false
	for i := range a.Sites {
		for s := range a.levelsAt(i) {
			relabels = relabels || a.Level(i, s) != s
			phases = phases || !a.Phase(i, s).IsZero()
		}
	}
	if !relabels {
		a.Levels = nil
	}
	if !phases {
		a.Phases = nil
	}
	return a
}

// Inverse returns the action that undoes a.
func (a Action) Inverse() Action {
	c := Action{Sites: a.Sites.Inverse()}
	if a.Levels == nil && a.Phases == nil {
		return c
	}
	c.Levels, c.Phases = make([][]int, len(a.Sites)), make([][]Turn, len(a.Sites))
	for i, to := range a.Sites {
		levels := a.levelsAt(i)
		if levels == 0 {
			continue
		}
		c.Levels[to], c.Phases[to] = make([]int, levels), make([]Turn, levels)
		for s := range levels {
			c.Levels[to][a.Level(i, s)] = s
			c.Phases[to][a.Level(i, s)] = a.Phase(i, s).Neg()
		}
	}
	return c.tidy()
}

// Equal reports whether a and b do the same to every product state.
func (a Action) Equal(b Action) bool { return a.Key() == b.Key() }

// IsIdentity reports whether a changes nothing.
func (a Action) IsIdentity() bool {
	c := a.tidy()
	return c.Sites.IsIdentity() && c.Levels == nil && c.Phases == nil
}

// Key returns a text that is the same for equal actions and only for these.
func (a Action) Key() string {
	a = a.tidy()
	b := make([]byte, 0, 4*len(a.Sites))
	for _, to := range a.Sites {
		b = strconv.AppendInt(append(b, ' '), int64(to), 10)
	}
	for i := range a.Sites {
		for s := range a.levelsAt(i) {
			if to := a.Level(i, s); to != s {
				b = strconv.AppendInt(append(b, '|'), int64(i), 10)
				b = strconv.AppendInt(append(b, ':'), int64(s), 10)
				b = strconv.AppendInt(append(b, '>'), int64(to), 10)
			}
			if t := a.Phase(i, s); !t.IsZero() {
				b = strconv.AppendInt(append(b, '|'), int64(i), 10)
				b = strconv.AppendInt(append(b, ':'), int64(s), 10)
				b = strconv.AppendInt(append(b, '*'), t.Num, 10)
				b = strconv.AppendInt(append(b, '/'), t.Den, 10)
			}
		}
	}
	return string(b)
}

// Order returns the smallest n > 0 with aⁿ = 1, or an error if n would pass
// the largest group order.
func (a Action) Order() (int, error) {
	if err := a.Check(); err != nil {
		return 0, err
	}
	power := a
	for n := 1; n <= LargestOrder; n++ {
		if power.IsIdentity() {
			return n, nil
		}
		power = power.Compose(a)
	}
	return 0, fmt.Errorf("group: an action has an order above %d; use phases that are simpler fractions of a turn", LargestOrder)
}
