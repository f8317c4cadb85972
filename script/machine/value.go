package machine

import (
	"encoding/json"
	"go/types"
	"reflect"
	"sync"
)

// Type is a type of the script (or built on one) as it is known at run time.
type Type struct {
	Checked types.Type   // the type
	Stored  reflect.Type // the form in which the interpreter keeps its values
	run     *Run
	mutex   sync.RWMutex
	methods map[string]reflect.Value // function with the receiver first
}

// Value is a value of a script's type inside an interface. Two Values are equal
// exactly if the compiled interfaces would be. V holds the stored form.
type Value struct {
	T *Type
	V any
}

// SetMethod enters the function f, which takes the stored receiver first.
func (t *Type) SetMethod(name string, f reflect.Value) {
	t.mutex.Lock()
	defer t.mutex.Unlock()
	if t.methods == nil {
		t.methods = map[string]reflect.Value{}
	}
	t.methods[name] = f
}

// Method returns the function entered under name.
func (t *Type) Method(name string) (reflect.Value, bool) {
	t.mutex.RLock()
	defer t.mutex.RUnlock()
	f, ok := t.methods[name]
	return f, ok
}

// Call calls a method of the value.
func (v Value) Call(name string, args []reflect.Value) []reflect.Value {
	f, _ := v.T.Method(name)
	in := append([]reflect.Value{v.reflected()}, args...)
	if f.Type().IsVariadic() {
		return f.CallSlice(in)
	}
	return f.Call(in)
}

// reflected returns the stored form, also where it is a nil interface.
func (v Value) reflected() reflect.Value {
	if v.V == nil {
		return reflect.Zero(v.T.Stored)
	}
	return reflect.ValueOf(v.V)
}

// MarshalJSON writes the stored form, or what the script's own method says.
func (v Value) MarshalJSON() ([]byte, error) {
	if _, ok := v.T.Method("MarshalJSON"); ok {
		out := v.Call("MarshalJSON", nil)
		err, _ := out[1].Interface().(error)
		return out[0].Bytes(), err
	}
	return json.Marshal(v.V)
}

// Failure is a script's value behind the interface error. It is comparable as
// the compiled error would be.
type Failure struct{ Value }

// Error calls the script's method.
func (f Failure) Error() string { return f.Call("Error", nil)[0].String() }

// Unwrap calls the script's method if there is one.
func (f Failure) Unwrap() error {
	m, ok := f.T.Method("Unwrap")
	if !ok || m.Type().NumOut() != 1 {
		return nil
	}
	err, _ := f.Call("Unwrap", nil)[0].Interface().(error)
	return err
}

// Is calls the script's method if there is one.
func (f Failure) Is(target error) bool {
	m, ok := f.T.Method("Is")
	if !ok || m.Type().NumIn() != 2 || m.Type().In(1) != errorType {
		return false
	}
	return f.Call("Is", []reflect.Value{asError(target)})[0].Bool()
}

// Unwrapped returns the Value.
func (f Failure) Unwrapped() any { return f.Value }

var errorType = reflect.TypeFor[error]()

func asError(err error) reflect.Value {
	v := reflect.New(errorType).Elem()
	if err != nil {
		v.Set(reflect.ValueOf(err))
	}
	return v
}

// Plain takes away what stands between an interface with methods and the
// script's value behind it.
func Plain(x any) any {
	if w, ok := x.(interface{ Unwrapped() any }); ok {
		return w.Unwrapped()
	}
	return x
}
