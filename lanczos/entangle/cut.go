package entangle

import (
	"context"
	"fmt"
	"math"
	"sync"
	"sync/atomic"

	"ketloom/basis"
)

// split writes a product state as a sum of products of a state of the part with
// one of the rest, |c⟩ = Σ factor·|part⟩|rest⟩, until emit returns false. It is
// called by many goroutines.
type split func(c uint64, emit func(part, rest uint64, factor float64) bool)

// cut is a division of states into part and rest. Its matrix has a row for every
// configuration of the part and a column for every state and configuration of
// the rest,
//
//	M[a,(s,b)] = n^(-1/2) Σ factor·ψ_s(c),   ρ_A = M M†,
//
// with n states; every element has one c at most.
type cut struct {
	states  []State
	space   *basis.Space
	split   split
	number  int            // of particles that every state must have, or -1
	fixed   []basis.Charge // charges that label blocks
	maybe   []basis.Charge // charges that do where all states conserve them
	ways    float64        // in which a product state is split, at most
	sites   []int          // whose lowest levels count in the charges
	options Options
}

// spectrum finds out which rows and columns there are, sorts them into blocks,
// fills in the matrices of the blocks and solves them.
func (k *cut) spectrum(ctx context.Context) (*Spectrum, error) {
	v, err := k.survey(ctx)
	if err != nil {
		return nil, err
	}
	l := k.arrange(v)
	blocks, err := k.solve(ctx, l)
	if err != nil {
		return nil, err
	}
	floor := 0.0
	for _, b := range blocks {
		floor = max(floor, b.Floor)
	}
	return &Spectrum{Names: l.labels.names, Blocks: blocks, Trust: -math.Log(floor)}, nil
}

// A worker unfolds mostBasisStates basis states at a time, fewer where that makes
// more than mostSplits products of part and rest.
const (
	mostBasisStates = 512
	mostSplits      = 1 << 16
)

// grain is the number of basis states that a worker unfolds at a time.
func (k *cut) grain(s State) int {
	return int(max(1, min(mostBasisStates, mostSplits/(k.ways*float64(s.basis.GroupOrder())))))
}

// sweep calls work with pieces of the basis states of all states, in parallel.
func (k *cut) sweep(ctx context.Context, what string, work func(worker, state, from, to int)) error {
	var total int64
	for _, s := range k.states {
		total += int64(s.basis.Len())
	}
	progress := newReporter(k.options, what, total)
	for n, s := range k.states {
		var next atomic.Int64
		var wg sync.WaitGroup
		length, grain := s.basis.Len(), k.grain(s)
		for w := range k.options.Workers {
			wg.Go(func() {
				for ctx.Err() == nil {
					from := int(next.Add(1)-1) * grain
					if from >= length {
						return
					}
					to := min(from+grain, length)
					work(w, n, from, to)
					progress.add(int64(to - from))
				}
			})
		}
		wg.Wait()
	}
	return ctx.Err()
}

// survey is what a first pass over all product states finds.
type survey struct {
	rows      *table   // configurations of the part
	columns   []*table // of the rest, by state, each with a row that it meets
	conserved []bool   // which charges of cut.maybe all states conserve
}

func (k *cut) survey(ctx context.Context) (*survey, error) {
	workers := make([]*surveyor, k.options.Workers)
	for w := range workers {
		workers[w] = newSurveyor(k)
	}
	err := k.sweep(ctx, "rows and columns", func(w, state, from, to int) { workers[w].look(state, from, to) })
	if err != nil {
		return nil, err
	}
	first := workers[0]
	for _, other := range workers[1:] {
		first.merge(other)
	}
	if first.crowded() {
		return nil, fmt.Errorf("entangle: more than %d rows and columns; cut off a part nearer to half of everything, use smaller sectors, or raise Options.Memory from %d MiB", k.most(), k.options.Memory>>20)
	}
	if first.wrong >= 0 {
		return nil, errNumber(k.number, first.wrong)
	}
	return &first.survey, nil
}

// A part and the rest have leastNumbered rows and columns at most, or one for
// bytesNumbered bytes of Options.Memory where these are more.
const (
	leastNumbered = 1 << 20
	bytesNumbered = 128
)

// most is the largest number of rows and columns.
func (k *cut) most() int { return int(max(leastNumbered, k.options.Memory/bytesNumbered)) }

// crowded reports whether there are more. What one worker finds all of them do
// together, so that the answer does not depend on their number.
func (v *surveyor) crowded() bool {
	n := v.rows.count
	for _, columns := range v.columns {
		n += columns.count
	}
	return n > v.cut.most()
}

// surveyor is a worker of the survey.
type surveyor struct {
	survey
	cut    *cut
	values [][]int // of the charges of cut.maybe, by state
	seen   []bool  // whether the values of a state are set
	wrong  int     // a number of particles that should not be, or -1
}

func newSurveyor(k *cut) *surveyor {
	v := &surveyor{survey: survey{rows: newTable(), conserved: make([]bool, len(k.maybe))}, cut: k, wrong: -1}
	for i := range v.conserved {
		v.conserved[i] = true
	}
	for range k.states {
		v.columns = append(v.columns, newTable())
		v.values = append(v.values, make([]int, len(k.maybe)))
		v.seen = append(v.seen, false)
	}
	return v
}

func (v *surveyor) look(state, from, to int) {
	if v.crowded() {
		return
	}
	columns, most := v.columns[state], v.cut.most()
	emit := func(a, b uint64, factor float64) bool {
		v.rows.add(a, 0)
		columns.add(b, a)
		return v.rows.count+columns.count <= most
	}
	v.cut.states[state].each(from, to, func(c uint64, z complex128) {
		v.check(state, basis.Configuration(c))
		if v.wrong < 0 {
			v.cut.split(c, emit)
		}
	})
}

// check compares the charges of a product state with those of others.
func (v *surveyor) check(state int, c basis.Configuration) {
	if v.cut.number >= 0 {
		if n := particles(v.cut.space, c); n != v.cut.number {
			v.wrong = max(v.wrong, n)
		}
	}
	for i, q := range v.cut.maybe {
		if !v.conserved[i] {
			continue
		}
		value := q.Of(v.cut.space, c)
		if v.seen[state] {
			v.conserved[i] = value == v.values[state][i]
		}
		v.values[state][i] = value
	}
	v.seen[state] = true
}

func (v *surveyor) merge(u *surveyor) {
	v.rows.merge(u.rows)
	v.wrong = max(v.wrong, u.wrong)
	for s := range v.columns {
		v.columns[s].merge(u.columns[s])
	}
	for i := range v.conserved {
		v.conserved[i] = v.conserved[i] && u.conserved[i]
		for s := range v.seen {
			if v.seen[s] && u.seen[s] && v.values[s][i] != u.values[s][i] {
				v.conserved[i] = false
			}
		}
	}
	for s := range v.seen {
		if u.seen[s] {
			v.seen[s], v.values[s] = true, u.values[s]
		}
	}
}
