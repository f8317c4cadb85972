package basis

import (
	"fmt"
	"math"
	"math/bits"
)

// ladder counts, for the lowest m modes and every remainder of the charges,
// the configurations of those modes that carry exactly that remainder. Walking
// it from the highest mode down enumerates the configurations of a sector in
// ascending order without visiting any other, and numbers them.
//
// Nodes of floor m stand for a remainder; an edge chooses the level of mode
// m-1 and leads to floor m-1. Only nodes from which floor 0 can be reached
// with nothing remaining are kept.
type ladder struct {
	space  *Space
	floors [][]rung // floors[m]; floors[0] holds the single empty rung
	total  uint64   // number of configurations, saturated
}

// rung is one node of a ladder.
type rung struct {
	count  uint64   // configurations below
	next   []int32  // by level: the rung on the floor below, or -1
	before []uint64 // by level: configurations below with a smaller level
}

// mostRungs bounds the nodes of a ladder; only integer charges with many
// different weights come near it.
const mostRungs = 1 << 22

// errTooManyRungs is returned where charges take too many values.
var errTooManyRungs = fmt.Errorf("basis: the charges take more than %d intermediate values; use smaller weights, or a modulus", mostRungs)

// newLadder builds the ladder of the configurations with the given charges.
func newLadder(space *Space, charges []ChargeValue) (*ladder, error) {
	l := &ladder{space: space, floors: make([][]rung, len(space.modes)+1)}
	weights := make([][][]int, len(charges))
	target := make([]int, len(charges))
	for j, q := range charges {
		var constant int
		weights[j], constant = q.Charge.ModeWeights(space)
		target[j] = q.Charge.reduce(q.Value - constant)
	}
	reach := reachable(space, charges, weights)
	if err := l.descend(charges, weights, target, reach); err != nil {
		return nil, err
	}
	l.count()
	return l, nil
}

// bound is the smallest and largest partial sum of a charge.
type bound struct{ low, high int }

// reachable returns, by floor and charge, the range of the sums that the modes
// below can supply.
func reachable(space *Space, charges []ChargeValue, weights [][][]int) [][]bound {
	reach := make([][]bound, len(space.modes)+1)
	reach[0] = make([]bound, len(charges))
	for m := range space.modes {
		reach[m+1] = make([]bound, len(charges))
		for j := range charges {
			low, high := math.MaxInt, math.MinInt
			for _, w := range weights[j][m] {
				low, high = min(low, w), max(high, w)
			}
			reach[m+1][j] = bound{reach[m][j].low + low, reach[m][j].high + high}
		}
	}
	return reach
}

// descend creates the rungs that can be reached from the top.
func (l *ladder) descend(charges []ChargeValue, weights [][][]int, target []int, reach [][]bound) error {
	modes := l.space.modes
	remainders := [][]int{target}
	total := 0
	for m := len(modes); m > 0; m-- {
		mode := modes[m-1]
		var below [][]int
		place := map[string]int32{}
		l.floors[m] = make([]rung, len(remainders))
		for r, remainder := range remainders {
			next := make([]int32, mode.Levels)
			for level := range next {
				next[level] = -1
				rest, ok := subtract(charges, weights, remainder, reach[m-1], m-1, level)
				if !ok {
					continue
				}
				key := remainderKey(rest)
				at, known := place[key]
				if !known {
					at = int32(len(below))
					place[key] = at
					below = append(below, rest)
				}
				next[level] = at
			}
			l.floors[m][r] = rung{next: next, before: make([]uint64, mode.Levels)}
		}
		total += len(below)
		if total > mostRungs {
			return errTooManyRungs
		}
		remainders = below
	}
	l.floors[0] = make([]rung, len(remainders))
	for r, rest := range remainders {
		if allZero(rest) {
			l.floors[0][r].count = 1
		}
	}
	return nil
}

// subtract takes the weight of a level from the remainder; ok is false where
// the modes below cannot supply the rest.
func subtract(charges []ChargeValue, weights [][][]int, remainder []int, reach []bound, mode, level int) (rest []int, ok bool) {
	rest = make([]int, len(remainder))
	for j := range remainder {
		rest[j] = charges[j].Charge.reduce(remainder[j] - weights[j][mode][level])
		if charges[j].Charge.Modulus == 0 && (rest[j] < reach[j].low || rest[j] > reach[j].high) {
			return nil, false
		}
	}
	return rest, true
}

func remainderKey(rest []int) string {
	key := make([]byte, 0, 8*len(rest))
	for _, v := range rest {
		for range 8 {
			key = append(key, byte(v))
			v >>= 8
		}
	}
	return string(key)
}

func allZero(list []int) bool {
	for _, v := range list {
		if v != 0 {
			return false
		}
	}
	return true
}

// count fills in the numbers of configurations from the bottom, and cuts the
// edges that lead to none.
func (l *ladder) count() {
	for m := 1; m < len(l.floors); m++ {
		for r := range l.floors[m] {
			rung := &l.floors[m][r]
			for level, next := range rung.next {
				rung.before[level] = rung.count
				if next < 0 {
					continue
				}
				below := l.floors[m-1][next].count
				if below == 0 {
					rung.next[level] = -1
					continue
				}
				rung.count = saturatingAdd(rung.count, below)
			}
		}
	}
	l.total = l.floors[len(l.floors)-1][0].count
}

func saturatingAdd(a, b uint64) uint64 {
	sum, carry := bits.Add64(a, b, 0)
	if carry != 0 {
		return math.MaxUint64
	}
	return sum
}

// rank returns the number of sector configurations below c; ok is false where
// c does not carry the charges.
func (l *ladder) rank(c Configuration) (rank uint64, ok bool) {
	if l.space.bits < MostBits && c>>l.space.bits != 0 {
		return 0, false
	}
	return l.rankFrom(len(l.floors)-1, 0, c)
}

// rankFrom is rank for the modes below a floor, from one of its rungs.
func (l *ladder) rankFrom(floor int, at int32, c Configuration) (rank uint64, ok bool) {
	for m := floor; m > 0; m-- {
		rung := &l.floors[m][at]
		level := l.space.modes[m-1].Level(c)
		if level >= len(rung.next) || rung.next[level] < 0 {
			return 0, false
		}
		rank += rung.before[level]
		at = rung.next[level]
	}
	return rank, true
}

// unrank returns the configuration of the given rank, which must be below the
// total.
func (l *ladder) unrank(rank uint64) Configuration {
	at := int32(0)
	var c Configuration
	for m := len(l.floors) - 1; m > 0; m-- {
		rung := &l.floors[m][at]
		level := len(rung.next) - 1
		for rung.next[level] < 0 || rung.before[level] > rank {
			level--
		}
		rank -= rung.before[level]
		c |= Configuration(level) << l.space.modes[m-1].Shift
		at = rung.next[level]
	}
	return c
}

// start is a place from which a walk enumerates: the levels of the modes
// m and above are chosen, the rung says what the modes below must supply.
type start struct {
	prefix Configuration
	floor  int
	rung   int32
}

// starts splits the sector into consecutive parts, ascending, of which there
// are at least `wanted` where the sector is large enough.
func (l *ladder) starts(wanted int) []start {
	parts := []start{{0, len(l.floors) - 1, 0}}
	for len(parts) < wanted && parts[0].floor > 0 {
		var finer []start
		for _, p := range parts {
			rung := &l.floors[p.floor][p.rung]
			for level, next := range rung.next {
				if next >= 0 {
					prefix := p.prefix | Configuration(level)<<l.space.modes[p.floor-1].Shift
					finer = append(finer, start{prefix, p.floor - 1, next})
				}
			}
		}
		parts = finer
	}
	return parts
}

// walk calls visit with every configuration below the start, ascending, that
// no constraint forbids. It stops early where visit returns false, and
// reports whether it went through.
func (l *ladder) walk(from start, bans *bans, visit func(Configuration) bool) bool {
	if from.floor == 0 {
		return visit(from.prefix)
	}
	mode := l.space.modes[from.floor-1]
	for level, next := range l.floors[from.floor][from.rung].next {
		if next < 0 {
			continue
		}
		c := from.prefix | Configuration(level)<<mode.Shift
		if level > 0 && bans.forbid(from.floor-1, c) {
			break
		}
		if !l.walk(start{c, from.floor - 1, next}, bans, visit) {
			return false
		}
	}
	return true
}

// bans holds the constraints by the modes that they speak of, so that a walk
// asks only those that the last choice can break. Undecided modes count zero.
type bans struct {
	space       *Space
	constraints []Constraint
	byMode      [][]int
}

// newBans sorts the constraints; nil stands for none.
func newBans(space *Space, constraints []Constraint) *bans {
	if len(constraints) == 0 {
		return nil
	}
	b := &bans{space: space, constraints: constraints, byMode: make([][]int, len(space.modes))}
	for k, c := range constraints {
		for _, site := range c.Sites {
			for _, m := range []int{space.first[site], space.second[site]} {
				if m >= 0 {
					b.byMode[m] = append(b.byMode[m], k)
				}
			}
		}
	}
	return b
}

// forbid reports whether the choice made for the mode breaks a constraint.
func (b *bans) forbid(mode int, c Configuration) bool {
	if b == nil {
		return false
	}
	for _, k := range b.byMode[mode] {
		if !b.constraints[k].Allows(b.space, c) {
			return true
		}
	}
	return false
}

// allow reports whether no constraint forbids c.
func (b *bans) allow(c Configuration) bool {
	if b == nil {
		return true
	}
	for _, k := range b.constraints {
		if !k.Allows(b.space, c) {
			return false
		}
	}
	return true
}
