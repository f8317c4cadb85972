package machine

import (
	"go/token"
	"go/types"
	"io"
	"os"
	"sync"
	"sync/atomic"

	"ketloom/script/fence"
)

// Streams are the standard streams of a script.
type Streams struct {
	In       io.Reader
	Out, Err io.Writer
}

// Run is the process a script sees: its arguments, streams, types and end.
type Run struct {
	Args    []string
	streams Streams
	done    chan struct{} // closed when the run is stopped
	ended   chan outcome  // one value: how the script ended
	once    sync.Once
	stop    sync.Once
	mutex   sync.Mutex
	types   []*Type
	pipes   []*pipe
	open    []discarder
	gates   []*gate
	own     map[uint64]bool // numbers of the goroutines that the script started
	process *process
	// Fence judges paths; nil judges none, which is for scripts that are only
	// checked. It, Limits, Return, Bound and Quiet are set before the script is lowered.
	Fence  *fence.Fence
	Limits Limits
	// Return takes what the script hands to its host; nil drops it.
	Return func(name string, value any)
	// Bound are functions that the run has in place of those of the same import
	// path and name.
	Bound map[string]any
	// Quiet keeps progress off the terminal.
	Quiet bool
	turns atomic.Int64
	at    atomic.Int64
	// Compiled tells objects of compiled packages from those of the script.
	Compiled func(types.Object) bool
}

type outcome struct {
	code  int
	panic *Thrown
	steps bool // at the limit of steps
	pos   token.Pos
}

// New returns the process for one run. args[0] is the name of the script.
func New(streams Streams, args []string) *Run {
	streams.Out, streams.Err = gated(streams.Out, streams.Err)
	r := &Run{Args: args, streams: streams, own: map[uint64]bool{}, done: make(chan struct{}), ended: make(chan outcome, 1)}
	for _, w := range []io.Writer{streams.Out, streams.Err} {
		if g, ok := w.(*gate); ok {
			r.gates = append(r.gates, g)
		}
	}
	return r
}

// Main runs the script's main function and reports how it ended. A panic is
// returned, not raised.
func (r *Run) Main(main func()) { guarded(r, main, true) }

// Go runs f in its own goroutine; a panic in it ends the run.
func (r *Run) Go(f func()) { go guarded(r, f, false) }

// guarded runs f and ends the run if it panics. It is found on stacks by its
// entry.
//
//go:noinline
func guarded(r *Run, f func(), main bool) {
	finished := false
	defer r.enter()()
	defer func() {
		switch p := recover().(type) {
		case nil:
			if finished && main {
				r.end(outcome{})
			}
		case exit:
			r.end(outcome{code: p.code})
		default:
			r.end(outcome{panic: thrown(p)})
		}
	}()
	f()
	finished = true
}

func (r *Run) end(o outcome) { r.once.Do(func() { r.ended <- o }) }

// Ended yields the exit code and the unrecovered panic, if any, once.
func (r *Run) Ended() <-chan outcome { return r.ended }

// Code is the exit code.
func (o outcome) Code() int { return o.code }

// Panic is the panic that ended the run, or nil.
func (o outcome) Panic() *Thrown { return o.panic }

// Exit ends the run with a code; it does not return.
func (r *Run) Exit(code int) {
	r.end(outcome{code: code})
	panic(exit{code})
}

// Stop makes waiting operations unwind.
func (r *Run) Stop() { r.stop.Do(func() { close(r.done) }) }

// Close stops the run, discards what the script left open, and waits until
// everything written has reached the streams.
func (r *Run) Close() {
	r.Stop()
	r.discard()
	r.mutex.Lock()
	pipes := r.pipes
	r.pipes = nil
	r.mutex.Unlock()
	for _, p := range pipes {
		p.close()
	}
	r.shut()
}

// Type returns the run-time form of t, the same for identical types.
func (r *Run) Type(t types.Type, make func(*Type)) *Type {
	r.mutex.Lock()
	for _, have := range r.types {
		if types.Identical(have.Checked, t) {
			r.mutex.Unlock()
			return have
		}
	}
	n := &Type{Checked: t, run: r}
	r.types = append(r.types, n)
	r.mutex.Unlock()
	make(n)
	return n
}

// String names the type as the compiled program would.
func (t *Type) String() string { return typeName(t.Checked) }

// Out is where the script's standard output goes.
func (r *Run) Out() io.Writer { return r.streams.Out }

// Err is where the script's standard error goes.
func (r *Run) Err() io.Writer { return r.streams.Err }

// File returns a standard stream as a file, which package os promises. A stream
// that is none is joined to a pipe, and everything the script writes to it from
// then on goes through that pipe, in order.
func (r *Run) File(fd int) (*os.File, error) {
	r.mutex.Lock()
	defer r.mutex.Unlock()
	switch fd {
	case 0:
		return r.input()
	case 1:
		return r.output(&r.streams.Out)
	}
	return r.output(&r.streams.Err)
}

func (r *Run) input() (*os.File, error) {
	if f, ok := r.streams.In.(*os.File); ok {
		return f, nil
	}
	if r.streams.In == nil {
		f, err := os.Open(os.DevNull)
		r.streams.In = f
		return f, err
	}
	read, write, err := os.Pipe()
	if err != nil {
		return nil, err
	}
	from := r.streams.In
	go func() {
		_, _ = io.Copy(write, from) // a script that stops reading is no error
		_ = write.Close()
	}()
	r.streams.In = read
	r.pipes = append(r.pipes, &pipe{file: read})
	return read, nil
}

func (r *Run) output(to *io.Writer) (*os.File, error) {
	if f, ok := (*to).(*os.File); ok {
		return f, nil
	}
	read, write, err := os.Pipe()
	if err != nil {
		return nil, err
	}
	p := &pipe{file: write, drained: make(chan struct{})}
	sink := *to
	go func() {
		_, _ = io.Copy(sink, read)
		_ = read.Close()
		close(p.drained)
	}()
	r.pipes = append(r.pipes, p)
	*to = write
	return write, nil
}

// pipe is the script's end of a pipe.
type pipe struct {
	file    *os.File
	drained chan struct{} // nil for input
}

func (p *pipe) close() {
	_ = p.file.Close()
	if p.drained != nil {
		<-p.drained
	}
}
