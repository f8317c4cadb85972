package basis

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"

	"ketloom/basis/group"
)

// ErrNoFormula is wrapped by the errors of [Dimension] for sectors that must be
// enumerated to be counted.
var ErrNoFormula = errors.New("the sector has no closed count")

// Dimension returns the number of states of a sector without enumerating it, by
// the formula of Burnside for characters,
//
//	dim = |G|⁻¹ Σ_g χ(g)* Σ_c ⟨c|g|c⟩,
//
// with c over the configurations of the charges; those that g keeps are products
// over the cycles of its permutation.
//
// Errors: an impossible sector; [ErrNoFormula] for constraints and for symmetries
// that exchange occupied and empty fermion modes; counts beyond 2^53/|G|.
//
// Cost: |G| × modes × values of the charges on the way.
func Dimension(space *Space, sector Sector) (int64, error) {
	if space == nil {
		return 0, fmt.Errorf("basis: no space; make one with NewSpace or Uniform")
	}
	if err := sector.Check(space); err != nil {
		return 0, err
	}
	if len(sector.Constraints) > 0 {
		return 0, fmt.Errorf("basis: %w: it has constraints; make the basis and ask for its Len", ErrNoFormula)
	}
	elements, err := group.Generate(sector.Symmetries)
	if err != nil {
		return 0, err
	}
	if len(sector.Symmetries) == 0 {
		elements[0].Action = group.Translate(group.Identity(space.Sites()))
	}
	trace := newTracer(space, sector.Charges)
	var sum complex128
	for _, e := range elements {
		mv, err := space.Resolve(e.Action)
		if err != nil {
			return 0, err
		}
		if anyFlipped([]*Mover{mv}) {
			return 0, fmt.Errorf("basis: %w: a symmetry exchanges occupied and empty fermion modes; make the basis and ask for its Len", ErrNoFormula)
		}
		sum += e.Turn.Neg().Complex() * trace.of(mv)
	}
	dimension := real(sum) / float64(len(elements))
	if !(cmplx.Abs(sum) < 1<<53) {
		return 0, fmt.Errorf("basis: the sector has about %.3g states, too many to be counted exactly", dimension)
	}
	if math.Abs(dimension-math.Round(dimension)) > 1e-3 {
		return 0, fmt.Errorf("basis: the count comes out as %v, which is no integer; the eigenvalues are no representation on these modes", dimension)
	}
	return int64(math.Round(dimension)), nil
}

// tracer sums ⟨c|g|c⟩ over the configurations of the charges.
type tracer struct {
	space   *Space
	charges []ChargeValue
	weights [][][]int // by charge, mode, level
	target  string
}

func newTracer(space *Space, charges []ChargeValue) *tracer {
	t := &tracer{space: space, charges: charges, weights: make([][][]int, len(charges))}
	target := make([]int, len(charges))
	for j, q := range charges {
		var constant int
		t.weights[j], constant = q.Charge.ModeWeights(space)
		target[j] = q.Charge.reduce(q.Value - constant)
	}
	t.target = remainderKey(target)
	return t
}

// partial is the sum of phases of the configurations, of the modes done so far,
// that have the same charges.
type partial struct {
	charges []int
	sum     complex128
}

// of returns the trace of a symmetry over the configurations of the charges.
func (t *tracer) of(mv *Mover) complex128 {
	sums := map[string]partial{}
	zero := make([]int, len(t.charges))
	sums[remainderKey(zero)] = partial{zero, 1}
	done := make([]bool, len(mv.To))
	for m := range mv.To {
		if done[m] {
			continue
		}
		var cycle []int
		for at := m; !done[at]; at = mv.To[at] {
			done[at] = true
			cycle = append(cycle, at)
		}
		sums = t.extended(sums, mv, cycle)
	}
	return sums[t.target].sum
}

// extended multiplies the sums by the fixed configurations of a cycle.
func (t *tracer) extended(sums map[string]partial, mv *Mover, cycle []int) map[string]partial {
	next := map[string]partial{}
	for first := range t.space.modes[cycle[0]].Levels {
		charges, phase, fixed := t.around(mv, cycle, first)
		if !fixed {
			continue
		}
		for _, p := range sums {
			total := make([]int, len(charges))
			for j := range total {
				total[j] = t.charges[j].Charge.reduce(p.charges[j] + charges[j])
			}
			key := remainderKey(total)
			next[key] = partial{total, next[key].sum + p.sum*phase}
		}
	}
	return next
}

// around follows a cycle from a level of its first mode; fixed is false where
// another level comes back. A cycle of occupied fermion modes of even length is
// an odd permutation of them.
func (t *tracer) around(mv *Mover, cycle []int, first int) (charges []int, phase complex128, fixed bool) {
	charges = make([]int, len(t.charges))
	level, turn := first, group.Turn{}
	for _, m := range cycle {
		for j := range charges {
			charges[j] += t.weights[j][m][level]
		}
		turn = turn.Add(mv.Phases[m][level])
		level = mv.Levels[m][level]
	}
	if t.space.modes[cycle[0]].Fermionic && first == 1 && len(cycle)%2 == 0 {
		turn = turn.Add(group.NewTurn(1, 2))
	}
	return charges, turn.Complex(), level == first
}
