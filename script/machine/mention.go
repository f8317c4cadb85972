package machine

import "go/types"

// Mentions says whether t is a type of a script or is built on one; compiled
// tells the packages of the tables from the script's.
func Mentions(t types.Type, compiled func(types.Object) bool) bool {
	m := mentioner{compiled: compiled, seen: map[types.Type]bool{}}
	return m.mentions(t)
}

type mentioner struct {
	compiled func(types.Object) bool
	seen     map[types.Type]bool
}

func (m *mentioner) mentions(t types.Type) bool {
	if t == nil || m.seen[t] {
		return false
	}
	m.seen[t] = true
	switch t := types.Unalias(t).(type) {
	case *types.Named:
		if !m.compiled(t.Obj()) {
			return true
		}
		for a := range t.TypeArgs().Types() {
			if m.mentions(a) {
				return true
			}
		}
	case *types.Pointer:
		return m.mentions(t.Elem())
	case *types.Slice:
		return m.mentions(t.Elem())
	case *types.Array:
		return m.mentions(t.Elem())
	case *types.Chan:
		return m.mentions(t.Elem())
	case *types.Map:
		return m.mentions(t.Key()) || m.mentions(t.Elem())
	case *types.Struct:
		for f := range t.Fields() {
			if !f.Exported() || f.Embedded() || m.mentions(f.Type()) {
				return true
			}
		}
	case *types.Signature:
		return m.tuple(t.Params()) || m.tuple(t.Results())
	case *types.Interface:
		return t.NumMethods() > 0
	}
	return false
}

func (m *mentioner) tuple(t *types.Tuple) bool {
	for v := range t.Variables() {
		if m.mentions(v.Type()) {
			return true
		}
	}
	return false
}

func (r *Run) mentions(t types.Type) bool { return Mentions(t, r.Compiled) }

// find returns the run-time form of t if the script has one.
func (r *Run) find(t types.Type) *Type {
	r.mutex.Lock()
	defer r.mutex.Unlock()
	for _, have := range r.types {
		if types.Identical(have.Checked, t) {
			return have
		}
	}
	return nil
}
