package machine

import (
	"bytes"
	"go/token"
	"runtime"
	"runtime/debug"
	"strconv"
)

// A function of the script may be called by compiled code in a goroutine that
// the script did not start: by a timer, or by a worker that reports progress. A
// panic there would end the whole program, with a stack dump. So where a panic
// begins the machine asks whose goroutine it is; in a foreign one, outside of
// deferred calls, the panic ends the run instead.

// goroutine returns the number of the present goroutine.
func goroutine() uint64 {
	var buf [40]byte
	b := bytes.TrimPrefix(buf[:runtime.Stack(buf[:], false)], []byte("goroutine "))
	if i := bytes.IndexByte(b, ' '); i > 0 {
		n, err := strconv.ParseUint(string(b[:i]), 10, 64)
		if err == nil {
			return n
		}
	}
	return 0
}

// enter notes that the present goroutine has someone who handles its panics.
func (r *Run) enter() (leave func()) {
	id := goroutine()
	r.mutex.Lock()
	if r.homes == nil {
		r.homes = map[uint64]int{}
	}
	r.homes[id]++
	r.mutex.Unlock()
	return func() {
		r.mutex.Lock()
		if r.homes[id]--; r.homes[id] == 0 {
			delete(r.homes, id)
		}
		r.mutex.Unlock()
	}
}

func (r *Run) foreign() bool {
	id := goroutine()
	r.mutex.Lock()
	defer r.mutex.Unlock()
	return r.homes[id] == 0
}

// raise lets a panic go on, or ends the run if nobody would handle it.
func (r *Run) raise(p any) {
	if !r.foreign() {
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
