package lower

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"
	"strings"

	"ketloom/script/machine"
)

// methodValue binds a method to the present value of its receiver.
func (f *fn) methodValue(e *ast.SelectorExpr, sel *types.Selection) late {
	recv := f.typ(sel.Recv())
	method, path := f.method(sel, recv)
	var base receiver
	if isInterface(recv) {
		base = receiver{value: f.order(e.X), typ: recv, form: f.text(recv), dynamic: true}
	} else {
		base = f.receiver(e.X, method, path)
	}
	return func() string {
		r := f.atomOf(base.value(), base.form)
		if base.dynamic {
			f.line("if %s == nil { h.Nil(%d) }", r, e.Pos())
		}
		return f.bind(r, base, method, e)
	}
}

// bind makes a closure over the receiver r.
func (f *fn) bind(r string, base receiver, method *types.Func, n ast.Node) string {
	call, sig := f.methodFunction(base, method, n)
	form := f.text(sig)
	lit := f.c.fresh("lit")
	params, args, results := f.c.shape(f, sig)
	if args != "" {
		args = ", " + args
	}
	fmt.Fprintf(&f.c.out, "func %s(r %s) %s { return func(%s) (%s) {\n%s } }\n", lit, base.form, form, params, strings.Join(results, ", "), forward("return ", call+"r"+args+")", len(results)))
	t := f.temp(form)
	f.line("%s = %s(%s)", t, lit, r)
	return t
}

// methodFunction returns the start of a call of a method, up to its receiver,
// and the method's signature without receiver.
func (f *fn) methodFunction(base receiver, method *types.Func, n ast.Node) (string, *types.Signature) {
	if base.dynamic {
		sig := f.typ(method.Type()).(*types.Signature)
		return fmt.Sprintf("%s(%d, ", f.dynamic(base.typ, method.Name(), sig), n.Pos()), sig
	}
	if _, ok := f.c.bodies[method.Origin()]; ok {
		name, sig := f.methodInstance(method, base.typ)
		return name + "(", sig
	}
	sig := f.typ(method.Type()).(*types.Signature)
	sig = types.NewSignatureType(nil, nil, nil, sig.Params(), sig.Results(), sig.Variadic())
	form := f.form(base.typ)
	m := f.compiledMethodOf(n, form, method)
	return f.c.symbol("M", f.c.compiledMethod(m, form, f.c.funcForm(sig, f.pos), n.Pos())) + "(", sig
}

// compiledMethod is a compiled method as a function of its receiver.
func (c *compiler) compiledMethod(m reflect.Value, recv, form reflect.Type, pos token.Pos) reflect.Value {
	in, out := []reflect.Type{recv}, []reflect.Type{}
	for i := range form.NumIn() {
		in = append(in, form.In(i))
	}
	for i := range form.NumOut() {
		out = append(out, form.Out(i))
	}
	return reflect.MakeFunc(reflect.FuncOf(in, out, false), func(in []reflect.Value) []reflect.Value {
		defer c.in.Run.Mark(pos)
		for i := range in {
			in[i] = fitted(in[i], m.Type().In(i))
		}
		var res []reflect.Value
		if m.Type().IsVariadic() {
			res = m.CallSlice(in)
		} else {
			res = m.Call(in)
		}
		for i := range res {
			res[i] = fitted(res[i], out[i])
		}
		return res
	})
}

// methodExpr is a method as a function of its receiver.
func (f *fn) methodExpr(e *ast.SelectorExpr, sel *types.Selection) late {
	recv := f.typ(sel.Recv())
	method, _ := f.method(sel, recv)
	sig := f.typeOf(e).(*types.Signature)
	return func() string {
		form := f.text(sig)
		lit := f.c.fresh("lit")
		params, _, results := f.c.shape(f, sig)
		body := f.throughReceiver(recv, sel, method, sig, e)
		fmt.Fprintf(&f.c.out, "func %s() %s { return func(%s) (%s) {\n%s } }\n", lit, form, params, strings.Join(results, ", "), body)
		t := f.temp(form)
		f.line("%s = %s()", t, lit)
		return t
	}
}

// throughReceiver is the body of a function whose first parameter a0 has the
// type recv and that calls the method, reached through embedded fields.
func (f *fn) throughReceiver(recv types.Type, sel *types.Selection, method *types.Func, sig *types.Signature, n ast.Node) string {
	g := f.c.newFn(f, f.info)
	g.pos = f.pos
	path := sel.Index()
	path = path[:len(path)-1]
	v := g.synthetic("r", f.text(recv), true)
	g.initialise(v, "a0")
	var base receiver
	p := place{s: v.read(), typ: recv}
	if isInterface(recv) {
		base = receiver{typ: recv, form: f.text(recv), dynamic: true, value: ready(v.read())}
	} else {
		base = g.receiverAt(p, path, method, n)
	}
	call, msig := g.methodFunction(base, method, n)
	r := g.atomOf(base.value(), base.form)
	var args []string
	for i := 1; i < sig.Params().Len(); i++ {
		args = append(args, fmt.Sprintf(", a%d", i))
	}
	text := forward("return ", call+r+strings.Join(args, "")+")", msig.Results().Len())
	return g.header() + g.buf.String() + text
}

// receiverAt is receiver for a place that is already known.
func (f *fn) receiverAt(p place, path []int, method *types.Func, n ast.Node) receiver {
	t, path := f.walkTypes(p.typ, path)
	p = f.follow(p, path, n)
	if isInterface(t) {
		return receiver{value: ready(f.read(p)), typ: t, form: f.text(t), dynamic: true}
	}
	_, want := method.Signature().Recv().Type().Underlying().(*types.Pointer)
	ptr, is := t.Underlying().(*types.Pointer)
	switch {
	case want && !is:
		pt := types.NewPointer(t)
		return receiver{value: ready(f.addressOf(p, n)), typ: pt, form: f.text(pt)}
	case !want && is:
		s := f.atomOf(f.read(p), f.text(t))
		f.checkNil(s, n)
		return receiver{value: ready("(*" + s + ")"), typ: ptr.Elem(), form: f.text(ptr.Elem())}
	}
	return receiver{value: ready(f.read(p)), typ: t, form: f.text(t)}
}

// hostValue brings a compiled value into the program.
func (f *fn) hostValue(v reflect.Value, form string) string {
	get := f.c.symbol("V", reflect.MakeFunc(reflect.FuncOf(nil, []reflect.Type{v.Type()}, false), func([]reflect.Value) []reflect.Value {
		return []reflect.Value{v}
	}))
	t := f.temp(form)
	f.line("%s = %s()", t, get)
	return t
}

// runType returns the run-time form of a script's type and sees to it that its
// methods are known before the script starts.
func (c *compiler) runType(t types.Type) *machine.Type {
	return c.in.Run.Type(t, func(rt *machine.Type) {
		rt.Stored = c.form(t, 0)
		c.methodsOf(t, rt)
		c.inside(t)
	})
}

// inside makes the types known on which t is built: printing meets them.
func (c *compiler) inside(t types.Type) {
	switch t := types.Unalias(t).(type) {
	case *types.Named:
		if c.in.Universe.Compiled(t.Obj()) || isInterface(t) {
			return
		}
		if hasMethods(t) {
			c.runType(t)
			c.runType(types.NewPointer(t))
		}
		if key := c.typeKey(t); !c.met[key] {
			c.met[key] = true
			c.inside(t.Underlying())
		}
	case *types.Pointer:
		c.inside(t.Elem())
	case *types.Slice:
		c.inside(t.Elem())
	case *types.Array:
		c.inside(t.Elem())
	case *types.Map:
		c.inside(t.Key())
		c.inside(t.Elem())
	case *types.Struct:
		for f := range t.Fields() {
			c.inside(f.Type())
		}
	}
}

func hasMethods(t types.Type) bool { return types.NewMethodSet(types.NewPointer(t)).Len() > 0 }

// methodsOf emits a function for each method of t and enters it in rt.
func (c *compiler) methodsOf(t types.Type, rt *machine.Type) {
	set := types.NewMethodSet(t)
	if isInterface(t) || set.Len() == 0 {
		return
	}
	c.work = append(c.work, func() {
		for sel := range set.Methods() {
			c.methodEntry(t, rt, sel)
		}
	})
}

func (c *compiler) methodEntry(t types.Type, rt *machine.Type, sel *types.Selection) {
	f := c.newFn(nil, c.in.Info)
	f.pos = sel.Obj().Pos()
	defer f.recoverStop()
	method := sel.Obj().(*types.Func)
	sig := method.Signature()
	var params []*types.Var
	params = append(params, types.NewParam(0, nil, "", t))
	for v := range sig.Params().Variables() {
		params = append(params, types.NewParam(0, nil, "", v.Type()))
	}
	full := types.NewSignatureType(nil, nil, nil, types.NewTuple(params...), sig.Results(), false)
	ps, _, results := c.shape(f, full)
	body := f.throughReceiver(t, sel, method, full, at(method.Pos()))
	lit := c.fresh("lit")
	form := c.funcForm(full, f.pos)
	fmt.Fprintf(&c.out, "func %s() %s { return func(%s) (%s) {\n%s } }\n", lit, c.text(form), ps, strings.Join(results, ", "), body)
	set := c.symbol("R", reflect.MakeFunc(reflect.FuncOf([]reflect.Type{form}, nil, false), func(in []reflect.Value) []reflect.Value {
		rt.SetMethod(method.Name(), in[0])
		return nil
	}))
	g := c.fresh("g")
	c.globals[types.NewVar(0, nil, g, nil)] = &variable{name: g, form: c.text(form)}
	c.setup = append(c.setup, fmt.Sprintf("%s = %s()\n%s(%s)", g, lit, set, g))
}

// at is a place in the script as a node.
type at token.Pos

func (a at) Pos() token.Pos { return token.Pos(a) }
func (a at) End() token.Pos { return token.Pos(a) }

// recoverStop ends a refusal outside of a statement.
func (f *fn) recoverStop() {
	if r := recover(); r != nil {
		if _, ok := r.(stop); !ok {
			panic(r)
		}
	}
}
