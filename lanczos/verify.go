package lanczos

import "math"

// slack is the difference below which two energies count as equal.
func (s *search[T]) slack() float64 { return s.Tolerance * s.size }

// verify is one run that looks for missed levels. It adds what it finds below the
// k-th level, or ends the check.
func (s *search[T]) verify() error {
	if !s.randomStart() {
		s.check.Done = true
		s.check.Below = s.found[s.k-1].energy
		s.setNextFromFound()
		return nil
	}
	products := s.spent.products
	top := s.found[s.k-1].energy
	s.watch = newWatch(s.watchpoints(top), s.Krylov)
	err := s.run(func(exhausted bool) (int, bool) { return s.judge(top, exhausted) })
	s.watch = nil
	s.check.Runs++
	s.check.Products += s.spent.products - products
	return err
}

// watchpoints returns energies at which to bound the weight of missed levels: one
// below the multiplet of the k-th level, the k-th level itself plus slack, and a
// geometric sequence above it.
func (s *search[T]) watchpoints(top float64) []float64 {
	lower := top - 1e-3*s.size
	for i := s.k - 1; i >= 0; i-- {
		if e := s.found[i].energy; e < top-10*s.slack() {
			lower = max(lower, (e+top)/2)
			break
		}
	}
	points := []float64{lower, top + s.slack()}
	for i := 40; i >= 0; i-- {
		if d := math.Ldexp(s.size, -i); d > 2*s.slack() {
			points = append(points, top+d)
		}
	}
	return points
}

// judge decides on a checking run. Ritz values below the k-th level are missed
// levels; they are taken when they and what may follow them are converged. Else
// the check ends when the complement's lowest level is known to lie above the
// k-th, by a margin of an eighth of the distance of its Ritz value, or when it has
// settled.
func (s *search[T]) judge(top float64, exhausted bool) (take int, done bool) {
	m := s.matrix
	slack := s.slack()
	below := 0
	for below < m.size && m.values[below] < top-slack {
		below++
	}
	if below > 0 {
		for c := range below {
			if !exhausted && !s.converged(c) {
				return 0, false
			}
		}
		settled := exhausted || below == m.size || s.converged(below) || m.values[below]-m.residual(below) > top
		if !settled {
			return 0, false
		}
		return below, true
	}
	first, tied := m.values[0], m.values[0] <= top+slack
	if !tied && s.chanceAt(s.margin(top, first)) <= s.MissChance {
		s.conclude(s.highest(first), false)
		return 0, true
	}
	if !exhausted && !(s.settled() && s.chanceAt(0) <= s.MissChance) {
		return 0, false
	}
	if exhausted { // what the start vector has no weight on is all that can be missed
		s.watch.weight[0] = min(s.watch.weight[0], exhaustion*exhaustion)
	}
	s.conclude(0, tied)
	return 0, true
}

// settled reports whether the lowest Ritz value is within slack of an eigenvalue,
// by its residual r or by r²/gap with the gap to the next Ritz value.
func (s *search[T]) settled() bool {
	m := s.matrix
	r := m.residual(0)
	if r <= s.slack() {
		return true
	}
	if m.size < 2 {
		return false
	}
	gap := m.values[1] - m.residual(1) - m.values[0]
	return gap > 0 && r*(r/gap) <= s.slack()/2
}

func (s *search[T]) chanceAt(point int) float64 {
	_, isComplex := any(s.f).(complexField)
	return chance(s.watch.weight[point], s.dim-len(s.found), isComplex)
}

// margin returns the highest watchpoint up to an eighth of the way from the k-th
// level to the lowest Ritz value of the complement, at least the k-th level's own.
func (s *search[T]) margin(top, first float64) int {
	point := 1
	for point+1 < len(s.watch.at) && s.watch.at[point+1] <= top+(first-top)/8 {
		point++
	}
	return point
}

// highest returns the highest watchpoint below the lowest Ritz value of the
// complement up to which no level can have been missed.
func (s *search[T]) highest(first float64) int {
	point := 1
	for point+1 < len(s.watch.at) && s.watch.at[point+1] < first && s.chanceAt(point+1) <= s.MissChance {
		point++
	}
	return point
}

// conclude ends the check with the evidence of a watchpoint. Point 0 lies below
// the k-th level; what follows the list is then known by convergence only.
func (s *search[T]) conclude(point int, cut bool) {
	s.cut = cut
	s.check.Done = true
	s.check.Below = s.watch.at[point]
	s.check.Chance = s.chanceAt(point)
	s.check.Next, s.check.HasNext = s.watch.at[point], true
	if point == 0 {
		s.check.Next = s.matrix.values[0] - s.matrix.residual(0)
	}
	s.setNextFromFound()
}

// setNextFromFound lowers the estimate of level k+1 to the next found vector.
func (s *search[T]) setNextFromFound() {
	if len(s.found) <= s.k {
		return
	}
	f := s.found[s.k]
	next := f.energy - f.residual
	if !s.check.HasNext || next < s.check.Next {
		s.check.Next, s.check.HasNext = next, true
	}
	s.cut = s.cut || f.energy <= s.found[s.k-1].energy+s.slack()
}
