package lower

import (
	"go/ast"
	"go/types"
)

// checkJSON refuses what encoding/json would treat by methods or embedding that
// the stored form does not show.
func (f *fn) checkJSON(n ast.Node, t types.Type) {
	f.checkJSONPart(n, t, true, map[types.Type]bool{})
}

func (f *fn) checkJSONPart(n ast.Node, t types.Type, top bool, seen map[types.Type]bool) {
	if seen[t] || !f.c.mentions(t) {
		return
	}
	seen[t] = true
	for _, name := range []string{"MarshalJSON", "UnmarshalJSON", "MarshalText", "UnmarshalText"} {
		if top && name == "MarshalJSON" {
			continue
		}
		if obj, _, _ := types.LookupFieldOrMethod(t, true, f.c.in.Package, name); obj != nil {
			f.refuse(n, "encoding/json does not see the method %s of %s in a script; convert the value to plain fields first", name, t)
		}
	}
	switch u := t.Underlying().(type) {
	case *types.Pointer:
		f.checkJSONPart(n, u.Elem(), top, seen)
	case *types.Slice:
		f.checkJSONPart(n, u.Elem(), false, seen)
	case *types.Array:
		f.checkJSONPart(n, u.Elem(), false, seen)
	case *types.Map:
		f.checkJSONPart(n, u.Key(), false, seen)
		f.checkJSONPart(n, u.Elem(), false, seen)
	case *types.Struct:
		for i := range u.NumFields() {
			field := u.Field(i)
			if field.Embedded() {
				f.refuse(n, "encoding/json does not see that %s is embedded; name the field", field.Name())
			}
			if field.Exported() {
				if f.c.foldedField(t, i) {
					f.refuse(n, "encoding/json of a type that refers to itself is not available in a script")
				}
				f.checkJSONPart(n, f.typ(field.Type()), false, seen)
			}
		}
	}
}
