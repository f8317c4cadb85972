package machine

import (
	"reflect"
	"runtime"
)

// Recv receives from ch, or unwinds when the run is stopped.
func (r *Run) Recv(ch reflect.Value) (reflect.Value, bool) {
	i, v, ok := reflect.Select([]reflect.SelectCase{
		{Dir: reflect.SelectRecv, Chan: ch},
		{Dir: reflect.SelectRecv, Chan: reflect.ValueOf(r.done)},
	})
	if i == 1 {
		runtime.Goexit()
	}
	if !ok {
		v = reflect.Zero(ch.Type().Elem())
	}
	return v, ok
}

// Send sends v to ch, or unwinds when the run is stopped.
func (r *Run) Send(ch, v reflect.Value) {
	i, _, _ := reflect.Select([]reflect.SelectCase{
		{Dir: reflect.SelectSend, Chan: ch, Send: v},
		{Dir: reflect.SelectRecv, Chan: reflect.ValueOf(r.done)},
	})
	if i == 1 {
		runtime.Goexit()
	}
}

// Select performs a select statement. It returns the number of the case, the
// value received and whether it came from a sender; without a ready case it
// returns -1 if there is a default.
func (r *Run) Select(cases []reflect.SelectCase, hasDefault bool) (int, reflect.Value, bool) {
	n := len(cases)
	if hasDefault {
		cases = append(cases, reflect.SelectCase{Dir: reflect.SelectDefault})
	}
	cases = append(cases, reflect.SelectCase{Dir: reflect.SelectRecv, Chan: reflect.ValueOf(r.done)})
	i, v, ok := reflect.Select(cases)
	if i == n && hasDefault {
		return -1, reflect.Value{}, false
	}
	if i >= n {
		runtime.Goexit()
	}
	return i, v, ok
}
