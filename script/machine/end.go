package machine

import "time"

// Overflow ends the run as one whose functions call each other without end.
func (r *Run) Overflow() {
	r.end(outcome{panic: &Thrown{Value: plainFault("stack overflow: functions of the script call each other without end")}})
}

// discarder is what leaves nothing behind when it is not closed.
type discarder interface{ Discard() }

// Track remembers a value that the script got from compiled code and that wants
// to be discarded if the script ends without closing it.
func (r *Run) Track(x any) {
	d, ok := x.(discarder)
	if !ok {
		if e, isError := x.(interface{ Discard() error }); isError {
			d, ok = discardError{e}, true
		}
	}
	if !ok {
		return
	}
	r.mutex.Lock()
	defer r.mutex.Unlock()
	r.open = append(r.open, d)
}

type discardError struct{ x interface{ Discard() error } }

func (d discardError) Discard() { _ = d.x.Discard() } // nobody is left to tell

// discardTime bounds the wait for values whose owner is still at work.
const discardTime = 200 * time.Millisecond

// discard calls Discard of everything tracked.
func (r *Run) discard() {
	r.mutex.Lock()
	open := r.open
	r.open = nil
	r.mutex.Unlock()
	if len(open) == 0 {
		return
	}
	done := make(chan struct{})
	go func() {
		defer close(done)
		for _, d := range open {
			func() {
				defer func() { _ = recover() }() // a value in use may object
				d.Discard()
			}()
		}
	}()
	select {
	case <-done:
	case <-time.After(discardTime):
	}
}
