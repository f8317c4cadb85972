package machine

import (
	"io"
	"os"
	"sync"
)

// gate is a stream that is no file: goroutines of the script write to it one at
// a time, and not after the run has ended.
type gate struct {
	mutex  sync.Mutex
	to     io.Writer
	closed bool
}

func (g *gate) Write(b []byte) (int, error) {
	g.mutex.Lock()
	defer g.mutex.Unlock()
	if g.closed {
		return 0, os.ErrClosed
	}
	return g.to.Write(b)
}

// gated puts gates before streams that are no files, one before both if they
// are the same.
func gated(out, err io.Writer) (io.Writer, io.Writer) {
	one := func(w io.Writer) io.Writer {
		if _, ok := w.(*os.File); ok || w == nil {
			return w
		}
		return &gate{to: w}
	}
	first := one(out)
	if same(out, err) {
		return first, first
	}
	return first, one(err)
}

// same compares two streams that may be of a type without equality.
func same(a, b io.Writer) (equal bool) {
	defer func() { _ = recover() }()
	return a == b
}

// shut closes the gates.
func (r *Run) shut() {
	r.mutex.Lock()
	defer r.mutex.Unlock()
	for _, g := range r.gates {
		g.mutex.Lock()
		g.closed = true
		g.mutex.Unlock()
	}
}
