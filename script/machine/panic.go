package machine

import (
	"errors"
	"fmt"
	"go/token"
	"reflect"
	"runtime"
	"runtime/debug"
	"strings"
)

// Thrown is a panic on its way through a script: the value as recover returns
// it and the place where it began.
type Thrown struct {
	Value any
	Pos   token.Pos
	// Stack is the stack of compiled code, kept for panics that did not begin
	// in the script.
	Stack []byte
}

// exit is the panic with which os.Exit unwinds; it cannot be recovered.
type exit struct{ code int }

// fault is a run-time error with Go's wording.
type fault string

// Fault returns a run-time error; text is what follows "runtime error: ".
func Fault(text string) error { return fault(text) }

func (f fault) Error() string { return "runtime error: " + string(f) }
func (f fault) RuntimeError() {}

var _ runtime.Error = fault("")

// assertion is the run-time error of a failed type assertion.
type assertion string

// Assertion returns the run-time error of a failed type assertion.
func Assertion(text string) error { return assertion(text) }

func (a assertion) Error() string { return string(a) }
func (a assertion) RuntimeError() {}

// Throw panics with a script's value.
func Throw(pos token.Pos, v any) {
	if v == nil {
		v = new(runtime.PanicNilError)
	}
	panic(&Thrown{Value: v, Pos: pos})
}

func throw(pos int, format string, args ...any) {
	Throw(token.Pos(pos), fault(fmt.Sprintf(format, args...)))
}

// thrown returns r as a panic of the script.
func thrown(r any) *Thrown {
	if t, ok := r.(*Thrown); ok {
		return t
	}
	return &Thrown{Value: r, Stack: debug.Stack()}
}

// IndexUnsigned is Index for an index of an unsigned type.
func IndexUnsigned(pos, i, n int) {
	throw(pos, "index out of range [%d] with length %d", uint(i), n)
}

// Index panics for an index i outside a length n.
func Index(pos, i, n int) {
	if i < 0 {
		throw(pos, "index out of range [%d]", i)
	}
	throw(pos, "index out of range [%d] with length %d", i, n)
}

// Slice panics if x[lo:hi:max] is out of range; n is the length and c the
// capacity of x, text tells a string from a slice. It returns if nothing is wrong.
func Slice(pos, lo, hi, max, n, c int, three, text bool) {
	what := "capacity"
	if text {
		what = "length"
	}
	if three {
		switch {
		case max < 0:
			throw(pos, "slice bounds out of range [::%d]", max)
		case max > c:
			throw(pos, "slice bounds out of range [::%d] with %s %d", max, what, c)
		case hi < 0:
			throw(pos, "slice bounds out of range [:%d:]", hi)
		case hi > max:
			throw(pos, "slice bounds out of range [:%d:%d]", hi, max)
		case lo < 0:
			throw(pos, "slice bounds out of range [%d::]", lo)
		case lo > hi:
			throw(pos, "slice bounds out of range [%d:%d:]", lo, hi)
		}
		return
	}
	switch {
	case hi < 0:
		throw(pos, "slice bounds out of range [:%d]", hi)
	case hi > c:
		throw(pos, "slice bounds out of range [:%d] with %s %d", hi, what, c)
	case lo < 0:
		throw(pos, "slice bounds out of range [%d:]", lo)
	case lo > hi:
		throw(pos, "slice bounds out of range [%d:%d]", lo, hi)
	}
}

// Divide panics for a division of integers by zero.
func Divide(pos int) { throw(pos, "integer divide by zero") }

// Shift panics for a negative shift count.
func Shift(pos int) { throw(pos, "negative shift amount") }

// Nil panics for a nil pointer.
func Nil(pos int) { throw(pos, "invalid memory address or nil pointer dereference") }

// NilMap panics for an assignment to an entry of a nil map.
func NilMap(pos int) { Throw(token.Pos(pos), plainFault("assignment to entry in nil map")) }

// Continued panics for an iterator that goes on after its loop has ended.
func Continued(pos int) {
	throw(pos, "range function continued iteration after function for loop body returned false")
}

// Make panics for a length or capacity that make cannot give.
func Make(pos int, what string) { throw(pos, "makeslice: %s out of range", what) }

// Array panics for a slice too short for an array.
func Array(pos, n, m int) {
	throw(pos, "cannot convert slice with length %d to array or pointer to array with length %d", n, m)
}

// plainFault is a run-time error without the usual first words.
type plainFault string

func (f plainFault) Error() string { return string(f) }
func (f plainFault) RuntimeError() {}

// Message words the panic as the compiled program would, without "panic: ".
func (t *Thrown) Message() string {
	v := Plain(t.Value)
	switch x := t.Value.(type) {
	case plainFault, assertion:
		return x.(error).Error()
	case error:
		s := x.Error()
		if errors.As(x, new(runtime.Error)) && strings.Contains(s, "nil pointer dereference") {
			return s + "\n[signal SIGSEGV: segmentation violation]"
		}
		return s
	case string:
		return x
	case fmt.Stringer:
		return x.String()
	}
	if s, ok := v.(Value); ok {
		return s.panicText()
	}
	rv := reflect.ValueOf(v)
	switch rv.Kind() {
	case reflect.Bool, reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64, reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64,
		reflect.Float32, reflect.Float64, reflect.Complex64, reflect.Complex128, reflect.String:
		if rv.Type().PkgPath() != "" {
			return fmt.Sprintf("%s(%v)", rv.Type(), rv)
		}
		if rv.CanFloat() {
			return fmt.Sprintf("%s(%+e)", rv.Type(), rv.Float())
		}
		return fmt.Sprintf("%s(%v)", rv.Type(), rv)
	}
	if endless(rv, 0) {
		return fmt.Sprintf("(%T)", v)
	}
	return fmt.Sprintf("(%T) %v", v, v)
}

func (v Value) panicText() string {
	if _, ok := v.T.Method("Error"); ok {
		return v.Call("Error", nil)[0].String()
	}
	if _, ok := v.T.Method("String"); ok {
		return v.Call("String", nil)[0].String()
	}
	switch v.reflected().Kind() {
	case reflect.String:
		return fmt.Sprintf("%s(%q)", v.T, v.V)
	case reflect.Bool, reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64, reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64:
		return fmt.Sprintf("%s(%v)", v.T, v.V)
	}
	if endless(v.reflected(), 0) {
		return fmt.Sprintf("(%s)", v.T)
	}
	return fmt.Sprintf("(%s) %v", v.T, v)
}
