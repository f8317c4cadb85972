package entangle

import (
	"fmt"
	"runtime"
)

// Options tunes a cut. A nil *Options and zero fields stand for the defaults.
type Options struct {
	// Workers is the number of goroutines that unfold states and solve blocks;
	// default GOMAXPROCS. The result does not depend on it.
	Workers int
	// Memory is the largest number of bytes that the matrices of blocks may take
	// at a time; default DefaultMemory. Blocks that do not fit together are made
	// one after the other, one that does not fit alone by its Gram matrix (see
	// Accuracy in the package comment), and one whose Gram matrix is too large is
	// refused. So are cuts with more rows and columns in all than one for 128 bytes
	// of Memory, and 2^20 in any case; numbering them takes that much for every
	// worker.
	Memory int64
	// Error is a bound on the norm of the error of every state, such as the
	// residual of an eigenvector divided by the gap; default 0, errors of rounding
	// alone. Weights up to Error² count as zero.
	Error float64
	// Progress, if not nil, is told how many basis states are unfolded, then how
	// many blocks are solved. It is called by one goroutine at a time.
	Progress func(what string, done, total int64, rate float64)
}

// DefaultMemory is the default limit on the matrices of a cut: 4 GiB.
const DefaultMemory = 4 << 30

func (o *Options) withDefaults() (Options, error) {
	var out Options
	if o != nil {
		out = *o
	}
	if out.Workers <= 0 {
		out.Workers = runtime.GOMAXPROCS(0)
	}
	if out.Memory <= 0 {
		out.Memory = DefaultMemory
	}
	if !(out.Error >= 0 && out.Error < 1) {
		return out, fmt.Errorf("entangle: Options.Error is %v; give a bound on the error of normalised states, between 0 and 1", out.Error)
	}
	return out, nil
}
