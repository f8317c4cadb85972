package machine

import (
	"cmp"
	"reflect"
	"sort"
)

// sortedKeys returns the keys of a map in the order in which fmt prints them.
func sortedKeys(m reflect.Value) []reflect.Value {
	keys := m.MapKeys()
	sort.SliceStable(keys, func(i, j int) bool { return compare(keys[i], keys[j]) < 0 })
	return keys
}

func compare(a, b reflect.Value) int {
	switch {
	case a.CanInt():
		return cmp.Compare(a.Int(), b.Int())
	case a.CanUint():
		return cmp.Compare(a.Uint(), b.Uint())
	case a.CanFloat():
		return cmp.Compare(a.Float(), b.Float())
	case a.CanComplex():
		x, y := a.Complex(), b.Complex()
		return cmp.Or(cmp.Compare(real(x), real(y)), cmp.Compare(imag(x), imag(y)))
	}
	switch a.Kind() {
	case reflect.String:
		return cmp.Compare(a.String(), b.String())
	case reflect.Bool:
		return cmp.Compare(truth(a), truth(b))
	case reflect.Pointer, reflect.UnsafePointer, reflect.Chan:
		return cmp.Compare(a.Pointer(), b.Pointer())
	case reflect.Struct:
		for i := range a.NumField() {
			if c := compare(a.Field(i), b.Field(i)); c != 0 {
				return c
			}
		}
	case reflect.Array:
		for i := range a.Len() {
			if c := compare(a.Index(i), b.Index(i)); c != 0 {
				return c
			}
		}
	case reflect.Interface:
		return compareInner(a, b)
	}
	return 0
}

func compareInner(a, b reflect.Value) int {
	if a.IsNil() || b.IsNil() {
		return cmp.Compare(truth(reflect.ValueOf(!a.IsNil())), truth(reflect.ValueOf(!b.IsNil())))
	}
	a, b = inside(a), inside(b)
	if a.Type() != b.Type() {
		return cmp.Compare(a.Type().String(), b.Type().String())
	}
	return compare(a, b)
}

func inside(v reflect.Value) reflect.Value {
	if s, ok := v.Interface().(Value); ok {
		return s.reflected()
	}
	return v.Elem()
}

func truth(v reflect.Value) int {
	if v.Bool() {
		return 1
	}
	return 0
}
