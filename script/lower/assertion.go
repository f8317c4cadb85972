package lower

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"

	"ketloom/script/machine"
)

// assertion makes x.(T); with two results it does not panic.
func (f *fn) assertion(e *ast.TypeAssertExpr, two bool) []string {
	from, to := f.typeOf(e.X), f.typeOf(e.Type)
	x := f.order(e.X)
	s := f.atomOf(x(), f.text(from))
	return f.assert(s, from, to, two, e.Pos())
}

// assert asks whether the interface s of type from holds a to.
func (f *fn) assert(s string, from, to types.Type, two bool, pos token.Pos) []string {
	form := f.form(to)
	match := f.c.matcher(to, form)
	in := f.form(from)
	num := reflect.TypeFor[int]()
	if two {
		typ := reflect.FuncOf([]reflect.Type{in}, []reflect.Type{form, reflect.TypeFor[bool]()}, false)
		name := f.c.symbol("B", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
			v, ok := match(plain(in[0]))
			return []reflect.Value{v, reflect.ValueOf(ok)}
		}))
		v, ok := f.c.fresh("m"), f.c.fresh("m")
		f.line("%s, %s := %s(%s)", v, ok, name, s)
		return []string{v, ok}
	}
	typ := reflect.FuncOf([]reflect.Type{num, in}, []reflect.Type{form}, false)
	name := f.c.symbol("B", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
		at := token.Pos(in[0].Int())
		defer f.c.in.Run.Mark(at)
		x := plain(in[1])
		v, ok := match(x)
		if !ok {
			f.c.assertionPanic(at, x, from, to)
		}
		return []reflect.Value{v}
	}))
	t := f.temp(f.c.text(form))
	f.line("%s = %s(%d, %s)", t, name, pos, s)
	return []string{t}
}

func plain(v reflect.Value) any {
	if v.IsNil() {
		return nil
	}
	return machine.Plain(v.Interface())
}

// matcher returns what tells whether a value has the type to and brings it into
// the stored form.
func (c *compiler) matcher(to types.Type, form reflect.Type) func(any) (reflect.Value, bool) {
	zero := reflect.Zero(form)
	if isInterface(to) {
		iface := to.Underlying().(*types.Interface)
		return func(x any) (reflect.Value, bool) {
			if x == nil || !c.implements(x, iface, to) {
				return zero, false
			}
			return c.behind(x, form), true
		}
	}
	if c.mentions(to) {
		typ := c.runType(to)
		return func(x any) (reflect.Value, bool) {
			v, ok := x.(machine.Value)
			if !ok || v.T != typ {
				return zero, false
			}
			r := reflect.New(form).Elem()
			r.Set(reflect.ValueOf(v.V))
			return r, true
		}
	}
	return func(x any) (reflect.Value, bool) {
		if x == nil || reflect.TypeOf(x) != form {
			return zero, false
		}
		return reflect.ValueOf(x), true
	}
}

// implements says whether the dynamic type of x has the methods of iface.
func (c *compiler) implements(x any, iface *types.Interface, to types.Type) bool {
	if iface.NumMethods() == 0 {
		return true
	}
	if v, ok := x.(machine.Value); ok {
		c.mutex.Lock()
		defer c.mutex.Unlock()
		return types.Implements(v.T.Checked, iface)
	}
	if form := c.form(to, 0); form.Kind() == reflect.Interface && form.NumMethod() > 0 {
		return reflect.TypeOf(x).Implements(form)
	}
	c.mutex.Lock()
	defer c.mutex.Unlock()
	return types.Implements(c.in.Universe.Type(reflect.TypeOf(x)), iface)
}

// assertionPanic panics as a failed assertion does.
func (c *compiler) assertionPanic(pos token.Pos, x any, from, to types.Type) {
	name := func(t types.Type) string {
		if i, ok := t.(*types.Interface); ok && i.NumMethods() == 0 {
			return "interface {}"
		}
		if t == types.Universe.Lookup("any").Type() {
			return "interface {}"
		}
		return types.TypeString(t, func(p *types.Package) string { return p.Name() })
	}
	dynamic := "nil"
	if v, ok := x.(machine.Value); ok {
		dynamic = v.T.String()
	} else if x != nil {
		dynamic = reflect.TypeOf(x).String()
	}
	text := fmt.Sprintf("interface conversion: %s is %s, not %s", name(from), dynamic, name(to))
	if iface, ok := to.Underlying().(*types.Interface); ok {
		text = fmt.Sprintf("interface conversion: interface is nil, not %s", name(to))
		if x != nil {
			text = fmt.Sprintf("interface conversion: %s is not %s: missing method %s", dynamic, name(to), c.missing(x, iface))
		}
	}
	machine.Throw(pos, machine.Assertion(text))
}

func (c *compiler) missing(x any, iface *types.Interface) string {
	var t types.Type
	if v, ok := x.(machine.Value); ok {
		t = v.T.Checked
	} else {
		c.mutex.Lock()
		defer c.mutex.Unlock()
		t = c.in.Universe.Type(reflect.TypeOf(x))
	}
	m, _ := types.MissingMethod(t, iface, true)
	if m == nil {
		return ""
	}
	return m.Name()
}

// errorsAs makes errors.As, whose target decides what to look for.
func (f *fn) errorsAs(e *ast.CallExpr, obj *types.Func) *prepared {
	if obj.FullName() != "errors.As" || len(e.Args) != 2 {
		return nil
	}
	ptr, ok := f.typeOf(e.Args[1]).Underlying().(*types.Pointer)
	if !ok {
		return nil
	}
	target := ptr.Elem()
	if !f.c.mentions(target) {
		return nil
	}
	form := f.form(target)
	match := f.c.matcher(target, form)
	typ := reflect.FuncOf([]reflect.Type{errorType, reflect.PointerTo(form)}, []reflect.Type{reflect.TypeFor[bool]()}, false)
	name := f.c.symbol("S", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
		err, _ := in[0].Interface().(error)
		return []reflect.Value{reflect.ValueOf(find(err, match, in[1].Elem()))}
	}))
	errType := types.Universe.Lookup("error").Type()
	x, y := f.orderAs(e.Args[0], errType), f.order(e.Args[1])
	p := &prepared{f: f, text: name, results: []types.Type{types.Typ[types.Bool]}, direct: true}
	p.args = []string{f.atomOf(x(), f.text(errType)), f.atomOf(y(), f.text(f.typeOf(e.Args[1])))}
	return p
}

// find looks through a tree of errors for one that matches.
func find(err error, match func(any) (reflect.Value, bool), target reflect.Value) bool {
	for err != nil {
		if v, ok := match(machine.Plain(err)); ok {
			target.Set(v)
			return true
		}
		switch x := err.(type) {
		case interface{ Unwrap() error }:
			err = x.Unwrap()
		case interface{ Unwrap() []error }:
			for _, e := range x.Unwrap() {
				if find(e, match, target) {
					return true
				}
			}
			return false
		default:
			return false
		}
	}
	return false
}
