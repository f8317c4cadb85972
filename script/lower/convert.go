package lower

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"

	"ketloom/script/machine"
)

// implicit converts an expression from one type to another to which Go assigns
// it without a conversion.
func (f *fn) implicit(s string, from, to types.Type) string {
	if from == to || types.Identical(from, to) {
		return s
	}
	a, b := f.form(from), f.form(to)
	if isInterface(to) {
		if isInterface(from) && a == b {
			return s
		}
		return f.convert(s, from, to)
	}
	if a == b {
		return s
	}
	return f.convert(s, from, to)
}

// convert passes s through compiled code that makes the form of to.
func (f *fn) convert(s string, from, to types.Type) string {
	a, b := f.form(from), f.form(to)
	v := f.atomOf(s, f.c.text(a))
	key := fmt.Sprintf("convert %s|%s|%s|%s", f.c.text(a), f.c.text(b), types.TypeString(from, nil), types.TypeString(to, nil))
	local := f.c.hasLocal(from) || f.c.hasLocal(to)
	make := func() string {
		conv := f.converter(from, b)
		typ := reflect.FuncOf([]reflect.Type{a}, []reflect.Type{b}, false)
		return f.c.symbol("C", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
			return []reflect.Value{conv(in[0])}
		}))
	}
	var name string
	if local {
		name = make()
	} else {
		name = f.c.once(key, make)
	}
	t := f.temp(f.c.text(b))
	f.line("%s = %s(%s)", t, name, v)
	return t
}

// hasLocal says that the text of t may not tell it from another type.
func (c *compiler) hasLocal(t types.Type) bool {
	seen := map[*types.TypeName]bool{}
	c.reach(t, seen)
	for name := range seen {
		if name.Parent() != c.in.Package.Scope() {
			return true
		}
	}
	return false
}

// converter returns what turns a stored value of type from into the compiled
// type to.
func (f *fn) converter(from types.Type, to reflect.Type) func(reflect.Value) reflect.Value {
	c := f.c
	form := f.form(from)
	switch {
	case to.Kind() == reflect.Interface:
		return c.toInterface(from, to, f.pos)
	case form == to:
		return func(v reflect.Value) reflect.Value { return v }
	case form.Kind() == reflect.Func && to.Kind() == reflect.Func:
		return functionConverter(form, to)
	case form.ConvertibleTo(to):
		return func(v reflect.Value) reflect.Value { return v.Convert(to) }
	}
	c.refuse(f.pos, "a value of type %s cannot be passed to compiled code as %s; convert it first", from, to)
	return func(v reflect.Value) reflect.Value { return reflect.Zero(to) }
}

// functionConverter adapts a function to a type that differs in its name or in
// being variadic.
func functionConverter(from, to reflect.Type) func(reflect.Value) reflect.Value {
	return func(v reflect.Value) reflect.Value {
		if v.IsNil() {
			return reflect.Zero(to)
		}
		if from.ConvertibleTo(to) {
			return v.Convert(to)
		}
		return reflect.MakeFunc(to, func(in []reflect.Value) []reflect.Value {
			if from.IsVariadic() {
				return v.CallSlice(in)
			}
			return v.Call(in)
		})
	}
}

// toInterface puts a value of type from behind the interface type to.
func (c *compiler) toInterface(from types.Type, to reflect.Type, pos token.Pos) func(reflect.Value) reflect.Value {
	if isInterface(from) {
		return func(v reflect.Value) reflect.Value {
			if v.IsNil() {
				return reflect.Zero(to)
			}
			return c.behind(machine.Plain(v.Interface()), to)
		}
	}
	if !c.mentions(from) {
		return func(v reflect.Value) reflect.Value {
			r := reflect.New(to).Elem()
			r.Set(v)
			return r
		}
	}
	typ := c.runType(from)
	return func(v reflect.Value) reflect.Value {
		return c.behind(machine.Value{T: typ, V: v.Interface()}, to)
	}
}

// behind puts x, a compiled value or a machine.Value, behind to.
func (c *compiler) behind(x any, to reflect.Type) reflect.Value {
	r := reflect.New(to).Elem()
	v, ok := x.(machine.Value)
	switch {
	case !ok || to.NumMethod() == 0:
		r.Set(reflect.ValueOf(x))
	case to == errorType:
		r.Set(reflect.ValueOf(machine.Failure{Value: v}))
	default:
		r.Set(c.wrap(v, to))
	}
	return r
}

// wrap makes the struct of functions through which a script's value stands
// behind a compiled interface.
func (c *compiler) wrap(v machine.Value, to reflect.Type) reflect.Value {
	w := c.in.Universe.Wrapper(to)
	s := reflect.New(w)
	s.Elem().Field(0).Set(reflect.ValueOf(v))
	for i := 1; i < w.NumField(); i++ {
		name := w.Field(i).Name[1:]
		s.Elem().Field(i).Set(reflect.MakeFunc(w.Field(i).Type, func(in []reflect.Value) []reflect.Value {
			return v.Call(name, in)
		}))
	}
	return s
}

// conversion is an explicit conversion T(x).
func (f *fn) conversion(e *ast.CallExpr) late {
	to, arg := f.typeOf(e), e.Args[0]
	tv := f.info.Types[arg]
	if tv.IsNil() {
		return func() string { return f.zero(to) }
	}
	from := f.typeOf(arg)
	if tv.Value != nil {
		if l := f.constantConversion(tv, from, to); l != nil {
			return l
		}
		from = types.Default(from)
	}
	if isUntyped(from) {
		from = types.Default(from)
		if !isInterface(to) {
			from = to
		}
	}
	x := f.orderAs(arg, from)
	return func() string { return f.explicit(x(), from, to, e) }
}

// constantConversion converts a constant in a generic function, where the
// result is none.
func (f *fn) constantConversion(tv types.TypeAndValue, from, to types.Type) late {
	b, ok := to.Underlying().(*types.Basic)
	if !ok || isInterface(to) {
		return nil
	}
	fb, ok := from.Underlying().(*types.Basic)
	if !ok || b.Info()&types.IsNumeric == 0 || fb.Info()&types.IsNumeric == 0 {
		return nil
	}
	return func() string { return f.c.constant(tv.Value, to, f.pos) }
}

// explicit converts s.
func (f *fn) explicit(s string, from, to types.Type, n ast.Node) string {
	if isInterface(to) || types.Identical(from, to) {
		return f.implicit(s, from, to)
	}
	a, b := f.form(from), f.form(to)
	if a == b {
		return s
	}
	if isNumeric(a) && isNumeric(b) && a.PkgPath() == "" && b.PkgPath() == "" && simpleNumber(a) && simpleNumber(b) {
		s = f.atomOf(s, f.c.text(a))
		return b.Name() + "(" + s + ")"
	}
	if b.Kind() == reflect.Array || b.Kind() == reflect.Pointer && b.Elem().Kind() == reflect.Array && a.Kind() == reflect.Slice {
		return f.toArray(s, a, b, n)
	}
	if from, ok := from.Underlying().(*types.Struct); ok && f.c.mentions(from) {
		f.refuse(n, "a conversion between struct types that are not the same in memory is not available; copy the fields")
	}
	return f.convert(s, from, to)
}

func isNumeric(r reflect.Type) bool {
	return r.Kind() >= reflect.Int && r.Kind() <= reflect.Complex128
}

func simpleNumber(r reflect.Type) bool {
	return r.Kind() >= reflect.Int && r.Kind() <= reflect.Float64 && r.Kind() != reflect.Uintptr
}

// toArray converts a slice to an array or a pointer to one.
func (f *fn) toArray(s string, a, b reflect.Type, n ast.Node) string {
	if a.Kind() != reflect.Slice {
		return f.convertForms(s, a, b)
	}
	arr := b
	if b.Kind() == reflect.Pointer {
		arr = b.Elem()
	}
	s = f.atomOf(s, f.c.text(a))
	l := f.temp("int")
	f.line("%s = len(%s)", l, s)
	f.line("if %s < %d { h.Array(%d, %s, %d) }", l, arr.Len(), n.Pos(), l, arr.Len())
	return f.convertForms(s, a, b)
}

// convertForms converts between two stored forms as reflection does.
func (f *fn) convertForms(s string, a, b reflect.Type) string {
	s = f.atomOf(s, f.c.text(a))
	name := f.c.once("form "+f.c.text(a)+"|"+f.c.text(b), func() string {
		typ := reflect.FuncOf([]reflect.Type{a}, []reflect.Type{b}, false)
		return f.c.symbol("C", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
			return []reflect.Value{in[0].Convert(b)}
		}))
	})
	t := f.temp(f.c.text(b))
	f.line("%s = %s(%s)", t, name, s)
	return t
}

// fold puts a value into the interface in which a recursive field is kept.
func (c *compiler) fold(form reflect.Type) string {
	return c.once("fold "+c.text(form), func() string {
		typ := reflect.FuncOf([]reflect.Type{form}, []reflect.Type{anyType}, false)
		return c.symbol("C", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
			r := reflect.New(anyType).Elem()
			if !in[0].IsZero() {
				r.Set(in[0])
			}
			return []reflect.Value{r}
		}))
	})
}

// unfold takes it out again.
func (c *compiler) unfold(form reflect.Type) string {
	return c.once("unfold "+c.text(form), func() string {
		typ := reflect.FuncOf([]reflect.Type{anyType}, []reflect.Type{form}, false)
		return c.symbol("C", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
			if in[0].IsNil() {
				return []reflect.Value{reflect.Zero(form)}
			}
			return []reflect.Value{in[0].Elem()}
		}))
	})
}
