package machine

import (
	"go/token"
	"reflect"
	"runtime"
	"runtime/debug"
)

// A function of the script may be called by compiled code in a goroutine that
// the script did not start: by a timer, or by a worker that reports progress. A
// panic there would end the whole program, with a stack dump. So where a panic
// begins the machine looks down the stack; where nobody would handle the panic,
// it ends the run instead.

// handlers are the entries of the functions below which panics are handled.
var handlers = map[uintptr]bool{
	reflect.ValueOf(guarded).Pointer():   true,
	reflect.ValueOf(protected).Pointer(): true,
}

// foreign says that no function on the stack handles panics.
func foreign() bool {
	for size := 64; ; size *= 4 {
		pcs := make([]uintptr, size)
		n := runtime.Callers(2, pcs)
		for _, pc := range pcs[:n] {
			if f := runtime.FuncForPC(pc - 1); f != nil && handlers[f.Entry()] {
				return false
			}
		}
		if n < size {
			return true
		}
	}
}

// raise lets a panic go on, or ends the run if nobody would handle it.
func (r *Run) raise(p any) {
	if !foreign() {
		panic(p)
	}
	if e, ok := p.(exit); ok {
		r.end(outcome{code: e.code})
	} else {
		r.end(outcome{panic: thrown(p)})
	}
	runtime.Goexit()
}

// Mark is deferred around calls into compiled code: a panic that began there
// gets the place of the call.
func (r *Run) Mark(pos token.Pos) {
	p := recover()
	if p == nil {
		return
	}
	switch p.(type) {
	case *Thrown, exit:
	default:
		p = &Thrown{Value: p, Pos: pos, Stack: debug.Stack()}
	}
	r.raise(p)
}

// Raise calls f, which panics, and ends the run if nobody would handle that.
func (r *Run) Raise(f func()) {
	defer func() {
		if p := recover(); p != nil {
			r.raise(p)
		}
	}()
	f()
}
