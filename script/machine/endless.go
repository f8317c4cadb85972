package machine

import (
	"reflect"
	"sync"
)

// deepest is how far values may be nested that are printed. A value that
// contains itself would be printed without end, until the stack of the whole
// program is full.
const deepest = 10_000

// finite panics for a value that cannot be printed.
func finite(x any) {
	if endless(reflect.ValueOf(x), 0) {
		panic(plainFault("stack overflow: a value that contains itself cannot be printed"))
	}
}

// endless looks for nesting as fmt follows it: a pointer only at the top.
func endless(v reflect.Value, depth int) bool {
	if depth > deepest {
		return true
	}
	if !v.IsValid() || !holds(v.Type()) {
		return false
	}
	switch v.Kind() {
	case reflect.Interface:
		return endless(v.Elem(), depth)
	case reflect.Pointer:
		return depth == 0 && !v.IsNil() && endless(v.Elem(), 1)
	case reflect.Struct:
		if v.CanInterface() {
			switch x := v.Interface().(type) {
			case Value:
				return endless(x.reflected(), depth)
			case Failure:
				return false // it prints itself
			}
		}
		for i := range v.NumField() {
			if endless(v.Field(i), depth+1) {
				return true
			}
		}
	case reflect.Slice, reflect.Array:
		for i := range v.Len() {
			if endless(v.Index(i), depth+1) {
				return true
			}
		}
	case reflect.Map:
		for _, k := range v.MapKeys() {
			if endless(v.MapIndex(k), depth+1) {
				return true
			}
		}
	}
	return false
}

var holding sync.Map // reflect.Type -> bool

// holds says that a value of type t can contain an interface, or itself.
func holds(t reflect.Type) bool {
	if known, ok := holding.Load(t); ok {
		return known.(bool)
	}
	h := reaches(t, map[reflect.Type]bool{})
	holding.Store(t, h)
	return h
}

func reaches(t reflect.Type, seen map[reflect.Type]bool) bool {
	if seen[t] {
		return true
	}
	seen[t] = true
	defer delete(seen, t)
	switch t.Kind() {
	case reflect.Interface:
		return true
	case reflect.Pointer, reflect.Slice, reflect.Array, reflect.Map:
		return reaches(t.Elem(), seen)
	case reflect.Struct:
		for i := range t.NumField() {
			if reaches(t.Field(i).Type, seen) {
				return true
			}
		}
	}
	return false
}
