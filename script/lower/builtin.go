package lower

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"

	"ketloom/script/machine"
)

func (f *fn) builtinName(e ast.Expr) (string, bool) {
	id, ok := ast.Unparen(e).(*ast.Ident)
	if !ok {
		return "", false
	}
	b, ok := f.info.Uses[id].(*types.Builtin)
	if !ok {
		return "", false
	}
	return b.Name(), true
}

// builtin makes a call of a predeclared function.
func (f *fn) builtin(name string, e *ast.CallExpr) late {
	switch name {
	case "len", "cap":
		return f.length(name, e)
	case "append":
		return ready(f.appendTo(e))
	case "copy":
		return ready(f.copyInto(e))
	case "make":
		return ready(f.make(e))
	case "new":
		return f.newOf(e)
	case "complex":
		return f.complexOf(e)
	case "real", "imag":
		return f.partOf(name, e)
	case "min", "max":
		return f.extreme(name, e)
	case "delete":
		m := f.typeOf(e.Args[0]).Underlying().(*types.Map)
		x, k := f.order(e.Args[0]), f.orderAs(e.Args[1], f.typ(m.Key()))
		s := f.atomOf(x(), f.text(f.typeOf(e.Args[0])))
		f.line("delete(%s, %s)", s, f.atomOf(k(), f.text(f.typ(m.Key()))))
		return ready("")
	case "clear":
		return ready(f.clear(e))
	case "panic":
		x := f.orderAs(e.Args[0], types.NewInterfaceType(nil, nil))
		f.line("h.Throw(%d, %s)", e.Pos(), f.atomOf(x(), "h.Any"))
		return ready("")
	case "recover":
		return ready(f.recovered(e))
	case "close":
		form := f.form(f.typeOf(e.Args[0]))
		x := f.order(e.Args[0])
		f.line("%s(%d, %s)", f.c.channelFunc("close", form), e.Pos(), f.atomOf(x(), f.c.text(form)))
		return ready("")
	case "print", "println":
		f.refuse(e, "%s is not available in a script; use fmt.Print or fmt.Fprintln(os.Stderr, ...)", name)
	}
	f.refuse(e, "%s is not available in a script", name)
	return nil
}

func (f *fn) length(name string, e *ast.CallExpr) late {
	t := f.typeOf(e.Args[0])
	under := t.Underlying()
	if p, ok := under.(*types.Pointer); ok {
		under = p.Elem().Underlying()
	}
	if a, ok := under.(*types.Array); ok { // not constant, since it has calls
		x := f.order(e.Args[0])
		return func() string { x(); return fmt.Sprint(a.Len()) }
	}
	x := f.order(e.Args[0])
	form := f.form(t)
	return func() string {
		s := f.atomOf(x(), f.c.text(form))
		if form.Kind() == reflect.Chan {
			r := f.temp("int")
			f.line("%s = %s(%d, %s)", r, f.c.channelFunc(name, form), e.Pos(), s)
			return r
		}
		r := f.temp("int")
		f.line("%s = %s(%s)", r, name, s)
		return r
	}
}

// appendTo makes append. The slice and the elements are computed before.
func (f *fn) appendTo(e *ast.CallExpr) string {
	t := f.typeOf(e)
	u, ok := t.Underlying().(*types.Slice)
	if !ok {
		f.refuse(e, "this append is not available in a script")
	}
	elem := f.typ(u.Elem())
	x := f.orderAs(e.Args[0], t)
	r := f.hold(f.text(t))
	if e.Ellipsis.IsValid() {
		at := f.typeOf(e.Args[1])
		if isUntyped(at) && !f.info.Types[e.Args[1]].IsNil() {
			at = types.Typ[types.String]
		}
		var y late
		if f.info.Types[e.Args[1]].IsNil() {
			y = func() string { return f.zero(t) }
			at = t
		} else {
			y = f.orderAs(e.Args[1], at)
		}
		name := f.c.once("append "+f.text(t)+"|"+f.text(at), func() string { return f.c.symbol("A", f.c.appendFunc(f.form(t), f.form(at))) })
		s := f.atomOf(x(), f.text(t))
		f.line("%s = %s(%d, %s, %s)", r, name, e.Pos(), s, f.atomOf(y(), f.text(at)))
		return r
	}
	var values []late
	for _, a := range e.Args[1:] {
		values = append(values, f.orderAs(a, elem))
	}
	s := f.atomOf(x(), f.text(t))
	if len(values) == 0 {
		return s
	}
	if len(values) == 1 && f.form(t).PkgPath() == "" && f.form(elem).Kind() != reflect.Func {
		v := f.atomOf(values[0](), f.text(elem))
		f.bounded("len("+s+")", f.form(elem))
		f.line("%s = append(%s, %s)", r, s, v)
		return r
	}
	list := f.sliceOf(values, types.NewSlice(elem))
	name := f.c.once("append "+f.text(t)+"|[]"+f.text(elem), func() string {
		return f.c.symbol("A", f.c.appendFunc(f.form(t), reflect.SliceOf(f.form(elem))))
	})
	f.line("%s = %s(%d, %s, %s)", r, name, e.Pos(), s, list)
	return r
}

func (c *compiler) appendFunc(t, from reflect.Type) reflect.Value {
	run := c.in.Run
	return reflect.MakeFunc(reflect.FuncOf([]reflect.Type{reflect.TypeFor[int](), t, from}, []reflect.Type{t}, false), func(in []reflect.Value) []reflect.Value {
		x, y := in[1], in[2]
		run.Allow(int(in[0].Int()), x.Len()+y.Len(), int(t.Elem().Size()))
		if y.Kind() == reflect.String {
			y = y.Convert(reflect.SliceOf(t.Elem()))
		}
		if y.Type() != t {
			y = y.Convert(t)
		}
		return []reflect.Value{reflect.AppendSlice(x, y)}
	})
}

func (f *fn) copyInto(e *ast.CallExpr) string {
	a, b := f.typeOf(e.Args[0]), f.typeOf(e.Args[1])
	if isUntyped(b) {
		b = types.Typ[types.String]
	}
	x, y := f.order(e.Args[0]), f.orderAs(e.Args[1], b)
	name := f.c.once("copy "+f.text(a)+"|"+f.text(b), func() string {
		typ := reflect.FuncOf([]reflect.Type{f.form(a), f.form(b)}, []reflect.Type{reflect.TypeFor[int]()}, false)
		return f.c.symbol("A", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
			return []reflect.Value{reflect.ValueOf(reflect.Copy(in[0], in[1]))}
		}))
	})
	s := f.atomOf(x(), f.text(a))
	r := f.temp("int")
	f.line("%s = %s(%s, %s)", r, name, s, f.atomOf(y(), f.text(b)))
	return r
}

func (f *fn) make(e *ast.CallExpr) string {
	t := f.typeOf(e)
	form := f.form(t)
	var sizes []late
	for _, a := range e.Args[1:] {
		sizes = append(sizes, f.orderInt(a))
	}
	var n []string
	for _, s := range sizes {
		n = append(n, f.atomOf(s(), "int"))
	}
	for len(n) < 2 {
		if len(n) == 0 {
			n = append(n, "0")
		} else {
			n = append(n, n[0])
		}
	}
	name := f.c.once("make "+f.c.text(form), func() string { return f.c.symbol("N", f.c.makeFunc(form)) })
	r := f.hold(f.c.text(form))
	f.line("%s = %s(%d, %s, %s)", r, name, e.Pos(), n[0], n[1])
	return r
}

// orderInt orders an integer of any type as an int.
func (f *fn) orderInt(e ast.Expr) late {
	t := f.typeOf(e)
	if isUntyped(t) || f.info.Types[e].Value != nil {
		return f.orderAs(e, types.Typ[types.Int])
	}
	x := f.order(e)
	return func() string { return f.explicit(x(), t, types.Typ[types.Int], e) }
}

func (c *compiler) makeFunc(form reflect.Type) reflect.Value {
	run, num := c.in.Run, reflect.TypeFor[int]()
	typ := reflect.FuncOf([]reflect.Type{num, num, num}, []reflect.Type{form}, false)
	return reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
		pos, n, room := int(in[0].Int()), int(in[1].Int()), int(in[2].Int())
		defer run.Mark(token.Pos(pos))
		switch form.Kind() {
		case reflect.Slice:
			limit := 1 << 47
			if size := int(form.Elem().Size()); size > 0 {
				limit /= size
			}
			if n < 0 || n > limit {
				machine.Make(pos, "len")
			}
			if room < n || room > limit {
				machine.Make(pos, "cap")
			}
			run.Allow(pos, room, int(form.Elem().Size()))
			return []reflect.Value{reflect.MakeSlice(form, n, room)}
		case reflect.Map:
			run.Allow(pos, n, int(form.Key().Size()+form.Elem().Size()))
			return []reflect.Value{reflect.MakeMapWithSize(form, max(n, 0))}
		}
		if n < 0 {
			machine.Throw(token.Pos(pos), machine.Fault("makechan: size out of range"))
		}
		run.Allow(pos, n, int(form.Elem().Size()))
		plain := reflect.ChanOf(reflect.BothDir, form.Elem())
		return []reflect.Value{reflect.MakeChan(plain, n).Convert(form)}
	})
}

func (f *fn) newOf(e *ast.CallExpr) late {
	t := f.typeOf(e).(*types.Pointer).Elem()
	form := f.text(t)
	var value late
	if !f.info.Types[e.Args[0]].IsType() {
		value = f.orderAs(e.Args[0], t)
	}
	return func() string {
		p := f.hold("*" + form)
		f.line("%s = new(%s)", p, form)
		if value != nil {
			f.line("*%s = %s", p, f.atomOf(value(), form))
		}
		return p
	}
}

func (f *fn) complexOf(e *ast.CallExpr) late {
	t := f.typeOf(e)
	part := types.Typ[types.Float64]
	if f.form(t).Kind() == reflect.Complex64 {
		part = types.Typ[types.Float32]
	}
	x, y := f.orderAs(e.Args[0], part), f.orderAs(e.Args[1], part)
	return func() string {
		a := f.atomOf(x(), f.text(part))
		b := f.atomOf(y(), f.text(part))
		r := f.temp(f.text(t))
		f.line("%s = %s(%s, %s)", r, f.c.complexFunc("complex", f.form(t)), a, b)
		return r
	}
}

func (f *fn) partOf(name string, e *ast.CallExpr) late {
	t := f.typeOf(e.Args[0])
	x := f.order(e.Args[0])
	return func() string {
		a := f.atomOf(x(), f.text(t))
		r := f.temp(f.text(f.typeOf(e)))
		f.line("%s = %s(%s)", r, f.c.complexFunc(name, f.form(t)), a)
		return r
	}
}

// complexFunc takes complex numbers apart and puts them together.
func (c *compiler) complexFunc(name string, form reflect.Type) string {
	return c.once(name+" "+form.Kind().String(), func() string {
		funcs := map[string]any{
			"complex complex128": func(x, y float64) complex128 { return complex(x, y) },
			"complex complex64":  func(x, y float32) complex64 { return complex(x, y) },
			"real complex128":    func(z complex128) float64 { return real(z) },
			"imag complex128":    func(z complex128) float64 { return imag(z) },
			"real complex64":     func(z complex64) float32 { return real(z) },
			"imag complex64":     func(z complex64) float32 { return imag(z) },
		}
		return c.symbol("Z", reflect.ValueOf(funcs[name+" "+form.Kind().String()]))
	})
}

// extreme makes min and max, with Go's rules for NaN and signed zeros.
func (f *fn) extreme(name string, e *ast.CallExpr) late {
	t := f.typeOf(e)
	form := f.form(t)
	var args []late
	for _, a := range e.Args {
		args = append(args, f.orderAs(a, t))
	}
	return func() string {
		r := f.atomOf(args[0](), f.c.text(form))
		fun := f.c.once(name+" "+f.c.text(form), func() string { return f.c.symbol("X", extremeFunc(name, form)) })
		for _, a := range args[1:] {
			b := f.atomOf(a(), f.c.text(form))
			next := f.temp(f.c.text(form))
			f.line("%s = %s(%s, %s)", next, fun, r, b)
			r = next
		}
		return r
	}
}

func extremeFunc(name string, form reflect.Type) reflect.Value {
	typ := reflect.FuncOf([]reflect.Type{form, form}, []reflect.Type{form}, false)
	return reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
		a, b := in[0], in[1]
		var second bool // b is the result
		switch {
		case a.CanInt():
			second = (b.Int() < a.Int()) == (name == "min") && a.Int() != b.Int()
		case a.CanUint():
			second = (b.Uint() < a.Uint()) == (name == "min") && a.Uint() != b.Uint()
		case a.CanFloat():
			r := min(a.Float(), b.Float())
			if name == "max" {
				r = max(a.Float(), b.Float())
			}
			v := reflect.New(form).Elem()
			v.SetFloat(r)
			return []reflect.Value{v}
		default:
			second = (b.String() < a.String()) == (name == "min") && a.String() != b.String()
		}
		if second {
			return []reflect.Value{b}
		}
		return []reflect.Value{a}
	})
}

func (f *fn) clear(e *ast.CallExpr) string {
	t := f.typeOf(e.Args[0])
	form := f.form(t)
	x := f.order(e.Args[0])
	name := f.c.once("clear "+f.c.text(form), func() string {
		return f.c.symbol("X", reflect.MakeFunc(reflect.FuncOf([]reflect.Type{form}, nil, false), func(in []reflect.Value) []reflect.Value {
			in[0].Clear()
			return nil
		}))
	})
	f.line("%s(%s)", name, f.atomOf(x(), f.c.text(form)))
	return ""
}
