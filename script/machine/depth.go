package machine

import (
	"bytes"
	"runtime"
	"strconv"
)

// tooDeep is the number of frames of compiled code, some for each call of the
// script, from which on its functions are taken to call each other without end.
const tooDeep = 50_000

// stackText bounds the text of all stacks; the runtime leaves out the middle of
// deep ones.
const stackText = 8 << 20

// TooDeep says whether some goroutine of the run has a very deep stack. It stops
// the whole program for up to a second, so ask only with good reason.
func (r *Run) TooDeep() bool {
	buf := make([]byte, stackText)
	buf = buf[:runtime.Stack(buf, true)]
	r.mutex.Lock()
	defer r.mutex.Unlock()
	for g := range bytes.SplitSeq(buf, []byte("\n\n")) {
		if elided(g) > tooDeep && r.own[number(g)] {
			return true
		}
	}
	return false
}

// enter notes a goroutine of the run while its stack is still short.
func (r *Run) enter() (leave func()) {
	var buf [40]byte
	id := number(buf[:runtime.Stack(buf[:], false)])
	r.mutex.Lock()
	defer r.mutex.Unlock()
	r.own[id] = true
	return func() {
		r.mutex.Lock()
		defer r.mutex.Unlock()
		delete(r.own, id)
	}
}

// number reads the number of a goroutine from the text of its stack.
func number(g []byte) uint64 {
	rest, _ := bytes.CutPrefix(g, []byte("goroutine "))
	i := bytes.IndexByte(rest, ' ')
	if i < 0 {
		return 0
	}
	n, err := strconv.ParseUint(string(rest[:i]), 10, 64)
	if err != nil {
		return 0
	}
	return n
}

// elided reads how many frames were left out of the text of a stack.
func elided(g []byte) uint64 {
	i := bytes.Index(g, []byte(" frames elided"))
	if i < 0 {
		return 0
	}
	j := bytes.LastIndex(g[:i], []byte("..."))
	if j < 0 {
		return 0
	}
	n, err := strconv.ParseUint(string(g[j+3:i]), 10, 64)
	if err != nil {
		return 0
	}
	return n
}
