package machine

import (
	"fmt"
	"go/token"
	"math"
)

// Limits bound what a script may use; zero means no limit.
type Limits struct {
	Steps  int64 // turns of loops and calls of the script's functions
	Memory int64 // bytes of one allocation
	Placed bool  // the place where the script is has to be known
}

// Counted says that Turn wants to be called.
func (r *Run) Counted() bool { return r.Limits.Steps > 0 || r.Limits.Placed }

// Turn counts a turn of a loop or a call. It ends the run when there were too
// many.
func (r *Run) Turn(pos int) {
	r.at.Store(int64(pos))
	if r.Limits.Steps > 0 && r.turns.Add(1) > r.Limits.Steps {
		r.end(outcome{steps: true, pos: token.Pos(pos)})
		r.raise(exit{})
	}
}

// At is the place of the latest turn.
func (r *Run) At() token.Pos { return token.Pos(r.at.Load()) }

// Steps says that the run ended at its limit of steps, and where.
func (o outcome) Steps() (token.Pos, bool) { return o.pos, o.steps }

// allow panics for an allocation of n elements of a size that is too large.
func (r *Run) allow(n, size int) {
	if r.Limits.Memory <= 0 || n <= 0 || size <= 0 || int64(n) <= r.Limits.Memory/int64(size) {
		return
	}
	panic(plainFault(fmt.Sprintf("out of memory: %d elements of %d bytes are more than a script may allocate at once, %d bytes", n, size, r.Limits.Memory)))
}

// Allow is allow with the place.
func (r *Run) Allow(pos, n, size int) {
	defer r.Mark(token.Pos(pos))
	r.allow(n, size)
}

// Elements is the number of elements of a size that a script may allocate at
// once.
func (r *Run) Elements(size int) int64 {
	if r.Limits.Memory <= 0 {
		return math.MaxInt64
	}
	return r.Limits.Memory / int64(max(size, 1))
}
