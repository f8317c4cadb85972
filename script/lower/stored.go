package lower

import (
	"fmt"
	"go/token"
	"go/types"
	"reflect"
	"strings"

	"ketloom/script/machine"
)

var (
	anyType   = reflect.TypeFor[any]()
	errorType = reflect.TypeFor[error]()
)

// form returns the stored form of t: the type of the values that stand for
// values of t in the lowered program.
func (c *compiler) form(t types.Type, pos token.Pos) reflect.Type {
	if r, ok := c.stored[t]; ok {
		return r
	}
	r := c.makeForm(t, pos)
	c.stored[t] = r
	return r
}

// arrayForm refuses arrays that are larger than what a script may allocate.
func (c *compiler) arrayForm(t *types.Array, pos token.Pos) reflect.Type {
	elem := c.form(t.Elem(), pos)
	if most := min(c.in.Run.Elements(max(int(elem.Size()), 1)), 1<<40); t.Len() > most {
		c.refuse(pos, "an array of %d elements of %d bytes is more than a script may allocate at once", t.Len(), elem.Size())
		return reflect.ArrayOf(1, elem)
	}
	return reflect.ArrayOf(int(t.Len()), elem)
}

func (c *compiler) makeForm(t types.Type, pos token.Pos) reflect.Type {
	switch t := types.Unalias(t).(type) {
	case *types.Basic:
		return basicForm(t)
	case *types.Named:
		return c.namedForm(t, pos)
	case *types.Pointer:
		return reflect.PointerTo(c.form(t.Elem(), pos))
	case *types.Slice:
		return reflect.SliceOf(c.form(t.Elem(), pos))
	case *types.Array:
		return c.arrayForm(t, pos)
	case *types.Map:
		key := c.form(t.Key(), pos)
		if holdsMethods(t.Key()) {
			c.refuse(pos, "a map whose keys are or hold an interface with methods (%s) is not available; use a string or a number as key", t.Key())
		}
		return reflect.MapOf(key, c.form(t.Elem(), pos))
	case *types.Chan:
		dirs := map[types.ChanDir]reflect.ChanDir{types.SendRecv: reflect.BothDir, types.SendOnly: reflect.BothDir, types.RecvOnly: reflect.BothDir}
		if !c.mentions(t) {
			dirs[types.SendOnly], dirs[types.RecvOnly] = reflect.SendDir, reflect.RecvDir
		}
		return reflect.ChanOf(dirs[t.Dir()], c.form(t.Elem(), pos))
	case *types.Signature:
		return c.funcForm(t, pos)
	case *types.Struct:
		return c.structForm(t, pos)
	case *types.Interface:
		return anyType
	}
	c.refuse(pos, "the type %s is not available in a script", t)
	return anyType
}

func (c *compiler) namedForm(t *types.Named, pos token.Pos) reflect.Type {
	if r, ok := c.in.Universe.Named(t.Obj()); ok {
		return r
	}
	if t.Obj().Pkg() == nil {
		if t.Obj().Name() == "error" {
			return errorType
		}
		return anyType
	}
	if _, ok := t.Underlying().(*types.Interface); ok {
		return anyType
	}
	if c.open[t.Obj()] {
		c.refuse(t.Obj().Pos(), "the type %s contains itself in a way that is not available; let it be a struct that refers to itself through a pointer, slice or map", t.Obj().Name())
		return anyType
	}
	c.open[t.Obj()] = true
	defer delete(c.open, t.Obj())
	return c.form(t.Underlying(), pos)
}

func (c *compiler) funcForm(t *types.Signature, pos token.Pos) reflect.Type {
	var in, out []reflect.Type
	for v := range t.Params().Variables() {
		in = append(in, c.form(v.Type(), pos))
	}
	for v := range t.Results().Variables() {
		out = append(out, c.form(v.Type(), pos))
	}
	return reflect.FuncOf(in, out, false)
}

func (c *compiler) structForm(t *types.Struct, pos token.Pos) reflect.Type {
	var fields []reflect.StructField
	for i := range t.NumFields() {
		f := t.Field(i)
		sf := reflect.StructField{Name: fieldName(t, i), Tag: reflect.StructTag(t.Tag(i))}
		if c.folded(f.Type()) {
			sf.Type = anyType
		} else {
			sf.Type = c.form(f.Type(), pos)
		}
		if !f.Exported() {
			sf.Tag = `json:"-"`
		}
		fields = append(fields, sf)
	}
	return reflect.StructOf(fields)
}

// fieldName returns the name of field i in the stored form of a script's struct.
func fieldName(t *types.Struct, i int) string {
	f := t.Field(i)
	if f.Exported() {
		return f.Name()
	}
	return fmt.Sprintf("X%d_%s", i, strings.TrimLeft(f.Name(), "_"))
}

// folded says that a struct field of type t closes a cycle of types: reflection
// cannot build such a type, and the field is kept as an interface.
func (c *compiler) folded(t types.Type) bool {
	var start []*types.TypeName
	reach := func(t types.Type) map[*types.TypeName]bool {
		seen := map[*types.TypeName]bool{}
		c.reach(t, seen)
		return seen
	}
	for name := range c.open {
		start = append(start, name)
	}
	seen := reach(t)
	for _, name := range start {
		if seen[name] && reach(name.Type().Underlying())[name] {
			return true
		}
	}
	return false
}

// reach collects the script's named types that t is built on.
func (c *compiler) reach(t types.Type, seen map[*types.TypeName]bool) {
	switch t := types.Unalias(t).(type) {
	case *types.Named:
		if c.in.Universe.Compiled(t.Obj()) || seen[t.Obj()] {
			return
		}
		if _, ok := t.Underlying().(*types.Interface); ok {
			return
		}
		seen[t.Obj()] = true
		c.reach(t.Underlying(), seen)
	case *types.Pointer:
		c.reach(t.Elem(), seen)
	case *types.Slice:
		c.reach(t.Elem(), seen)
	case *types.Array:
		c.reach(t.Elem(), seen)
	case *types.Chan:
		c.reach(t.Elem(), seen)
	case *types.Map:
		c.reach(t.Key(), seen)
		c.reach(t.Elem(), seen)
	case *types.Signature:
		c.reachTuple(t.Params(), seen)
		c.reachTuple(t.Results(), seen)
	case *types.Struct:
		for f := range t.Fields() {
			c.reach(f.Type(), seen)
		}
	}
}

func (c *compiler) reachTuple(t *types.Tuple, seen map[*types.TypeName]bool) {
	for v := range t.Variables() {
		c.reach(v.Type(), seen)
	}
}

func basicForm(t *types.Basic) reflect.Type {
	switch t.Kind() {
	case types.Bool, types.UntypedBool:
		return reflect.TypeFor[bool]()
	case types.String, types.UntypedString:
		return reflect.TypeFor[string]()
	case types.Int, types.UntypedInt:
		return reflect.TypeFor[int]()
	case types.Int8:
		return reflect.TypeFor[int8]()
	case types.Int16:
		return reflect.TypeFor[int16]()
	case types.Int32, types.UntypedRune:
		return reflect.TypeFor[int32]()
	case types.Int64:
		return reflect.TypeFor[int64]()
	case types.Uint:
		return reflect.TypeFor[uint]()
	case types.Uint8:
		return reflect.TypeFor[uint8]()
	case types.Uint16:
		return reflect.TypeFor[uint16]()
	case types.Uint32:
		return reflect.TypeFor[uint32]()
	case types.Uint64:
		return reflect.TypeFor[uint64]()
	case types.Uintptr:
		return reflect.TypeFor[uintptr]()
	case types.Float32:
		return reflect.TypeFor[float32]()
	case types.Float64, types.UntypedFloat:
		return reflect.TypeFor[float64]()
	case types.Complex64:
		return reflect.TypeFor[complex64]()
	case types.Complex128, types.UntypedComplex:
		return reflect.TypeFor[complex128]()
	}
	return anyType
}

// text writes a stored form in the lowered program.
func (c *compiler) text(r reflect.Type) string {
	if s, ok := c.texts[r]; ok {
		return s
	}
	s := c.makeText(r)
	c.texts[r] = s
	return s
}

func (c *compiler) makeText(r reflect.Type) string {
	if r.PkgPath() == "" && r.Name() != "" && r != errorType {
		return r.Name() // a basic type
	}
	switch {
	case r.Name() != "":
	case r.Kind() == reflect.Pointer:
		return "*" + c.text(r.Elem())
	case r.Kind() == reflect.Slice:
		return "[]" + c.text(r.Elem())
	case r.Kind() == reflect.Array:
		return fmt.Sprintf("[%d]%s", r.Len(), c.text(r.Elem()))
	case r.Kind() == reflect.Map:
		return "map[" + c.text(r.Key()) + "]" + c.text(r.Elem())
	case r.Kind() == reflect.Func && !r.IsVariadic():
		return c.funcText(r)
	}
	return c.symbol("T", reflect.Zero(reflect.PointerTo(r)))
}

func (c *compiler) funcText(r reflect.Type) string {
	var in, out []string
	for i := range r.NumIn() {
		in = append(in, c.text(r.In(i)))
	}
	for i := range r.NumOut() {
		out = append(out, c.text(r.Out(i)))
	}
	return "func(" + strings.Join(in, ", ") + ") (" + strings.Join(out, ", ") + ")"
}

// mentions says that t is the script's own or built on such a type.
func (c *compiler) mentions(t types.Type) bool { return machine.Mentions(t, c.in.Universe.Compiled) }

// holdsMethods says that a value of t is or contains an interface with methods.
func holdsMethods(t types.Type) bool {
	switch u := t.Underlying().(type) {
	case *types.Interface:
		return u.NumMethods() > 0
	case *types.Array:
		return holdsMethods(u.Elem())
	case *types.Struct:
		for f := range u.Fields() {
			if holdsMethods(f.Type()) {
				return true
			}
		}
	}
	return false
}
