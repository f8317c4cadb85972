package entangle

import "runtime"

// Options tunes a cut. A nil *Options and zero fields stand for the defaults.
type Options struct {
	// Workers is the number of goroutines; default GOMAXPROCS. The result does
	// not depend on it.
	Workers int
	// Memory is the largest number of bytes that the matrices of all blocks may
	// take together; default DefaultMemory. A cut that needs more is refused.
	Memory int64
	// Progress, if not nil, is told how many blocks are done.
	Progress func(what string, done, total int64, rate float64)
}

// DefaultMemory is the default limit on the matrices of a cut: 4 GiB.
const DefaultMemory = 4 << 30

func (o *Options) withDefaults() Options {
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
	return out
}
