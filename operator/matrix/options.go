package matrix

import "runtime"

// Form is how a matrix is kept.
type Form int

// The forms of a matrix.
const (
	Auto     Form = iota // Stored where it fits the memory, else OnTheFly
	Stored               // columns and coded values of every element
	OnTheFly             // rows computed at each product
)

// String names the form.
func (f Form) String() string {
	return [...]string{"auto", "stored", "on the fly"}[f]
}

// Options tunes how a matrix is made. A nil *Options and zero fields stand for
// the defaults.
type Options struct {
	// Form chooses the form; default Auto. Stored is an error where it would
	// pass Memory.
	Form Form
	// Memory is the largest number of bytes that the stored form may take;
	// default DefaultMemory.
	Memory int64
	// Workers is the number of goroutines of building and of each product;
	// default GOMAXPROCS. Results do not depend on it.
	Workers int
	// Progress, if not nil, is told how many rows have been built.
	Progress func(what string, done, total int64, rate float64)
}

// DefaultMemory is the default limit on the stored form: 4 GiB.
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
