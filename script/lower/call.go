package lower

import (
	"fmt"
	"go/ast"
	"go/types"
	"reflect"
	"strings"
)

// callValue makes a call for its single value.
func (f *fn) callValue(e *ast.CallExpr) late {
	if f.info.Types[e.Fun].IsType() {
		return f.conversion(e)
	}
	if name, ok := f.builtinName(e.Fun); ok {
		return f.builtin(name, e)
	}
	return ready(f.call(e)[0])
}

// call makes a call and returns its results, each in a variable.
func (f *fn) call(e *ast.CallExpr) []string {
	mark := len(f.taken)
	p := f.prepare(e)
	f.release(mark) // the call is made now, and its arguments are not needed again
	return p.emit()
}

// prepared is a call whose function and arguments have been computed. text is
// what the interpreter calls; args are atoms.
type prepared struct {
	f       *fn
	text    string
	args    []string
	forms   []string // of args
	results []types.Type
	// direct says that text is a function of the lowered program or of package
	// h, not a variable; a variable has to be checked for nil.
	direct bool
}

// emit makes the call.
func (p *prepared) emit() []string {
	f := p.f
	call := p.text + "(" + strings.Join(p.args, ", ") + ")"
	switch len(p.results) {
	case 0:
		f.line("%s", call)
		return nil
	case 1:
		t := f.temp(f.text(p.results[0]))
		f.line("%s = %s", t, call)
		return []string{t}
	}
	var names []string
	for range p.results {
		names = append(names, f.c.fresh("m"))
	}
	f.line("%s := %s", strings.Join(names, ", "), call)
	return names
}

// prepare computes the function and the arguments of a call.
func (f *fn) prepare(e *ast.CallExpr) *prepared {
	switch fun := ast.Unparen(e.Fun).(type) {
	case *ast.Ident:
		if obj, ok := f.info.Uses[fun].(*types.Func); ok {
			return f.callFunc(e, obj, fun)
		}
	case *ast.IndexExpr, *ast.IndexListExpr:
		if id, obj := f.genericFunc(fun); obj != nil {
			return f.callFunc(e, obj, id)
		}
	case *ast.SelectorExpr:
		if sel := f.info.Selections[fun]; sel != nil && sel.Kind() == types.MethodVal {
			return f.callMethod(e, fun, sel)
		}
		if obj, ok := f.info.Uses[fun.Sel].(*types.Func); ok && f.info.Selections[fun] == nil {
			return f.callFunc(e, obj, fun.Sel)
		}
	case *ast.FuncLit:
		return f.callLiteral(e, fun)
	}
	return f.callVariable(e)
}

// callVariable calls a function value.
func (f *fn) callVariable(e *ast.CallExpr) *prepared {
	t := f.typeOf(e.Fun)
	sig := t.Underlying().(*types.Signature)
	fun := f.order(e.Fun)
	p := &prepared{f: f, results: f.tuple(sig.Results())}
	args := f.orderArgs(e, sig)
	form := f.form(t)
	s := f.atomOf(fun(), f.c.text(form))
	if form.PkgPath() != "" || form.IsVariadic() {
		s = f.convertFunction(s, form, f.c.funcForm(sig, f.pos))
	}
	// A variable of its own: the call must not see a later change.
	p.text = s
	p.take(args)
	f.line("if %s == nil { h.Nil(%d) }", s, e.Pos())
	return p
}

// convertFunction gives a compiled function type the plain form.
func (f *fn) convertFunction(s string, from, to reflect.Type) string {
	name := f.c.once("function "+f.c.text(from)+"|"+f.c.text(to), func() string {
		conv := functionConverter(from, to)
		typ := reflect.FuncOf([]reflect.Type{from}, []reflect.Type{to}, false)
		return f.c.symbol("C", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value { return []reflect.Value{conv(in[0])} }))
	})
	t := f.temp(f.c.text(to))
	f.line("%s = %s(%s)", t, name, s)
	return t
}

// callLiteral calls a function literal where it stands.
func (f *fn) callLiteral(e *ast.CallExpr, lit *ast.FuncLit) *prepared {
	sig := f.typeOf(lit).(*types.Signature)
	args := f.orderArgs(e, sig)
	fun := f.atomOf(f.funcLit(lit)(), f.text(sig))
	p := &prepared{f: f, text: fun, results: f.tuple(sig.Results())}
	p.take(args)
	return p
}

func (f *fn) tuple(t *types.Tuple) []types.Type {
	var list []types.Type
	for v := range t.Variables() {
		list = append(list, f.typ(v.Type()))
	}
	return list
}

// argument is an argument after its calls have been made.
type argument struct {
	value late
	form  string
}

// take computes the arguments.
func (p *prepared) take(args []argument) {
	for _, a := range args {
		p.args = append(p.args, p.f.atomOf(a.value(), a.form))
		p.forms = append(p.forms, a.form)
	}
}

// orderArgs orders the arguments of a call of a script's function, converted
// to its parameters; the arguments of a variadic parameter become one slice.
func (f *fn) orderArgs(e *ast.CallExpr, sig *types.Signature) []argument {
	if list := f.spreadCall(e, sig); list != nil {
		return list
	}
	n := sig.Params().Len()
	var list []argument
	for i := range n {
		t := f.typ(sig.Params().At(i).Type())
		if sig.Variadic() && i == n-1 && !e.Ellipsis.IsValid() {
			list = append(list, f.variadic(e.Args[i:], t))
			break
		}
		list = append(list, argument{f.orderAs(e.Args[i], t), f.text(t)})
	}
	return list
}

// variadic makes the slice for a variadic parameter.
func (f *fn) variadic(args []ast.Expr, t types.Type) argument {
	elem := f.typ(t.Underlying().(*types.Slice).Elem())
	var values []late
	for _, a := range args {
		values = append(values, f.orderAs(a, elem))
	}
	return argument{func() string { return f.sliceOf(values, t) }, f.text(t)}
}

// sliceOf makes a slice of type t.
func (f *fn) sliceOf(values []late, t types.Type) string {
	if len(values) == 0 {
		return f.zero(t)
	}
	elem := f.text(f.typ(t.Underlying().(*types.Slice).Elem()))
	s := f.hold(f.text(t))
	f.line("%s = make(%s, %d)", s, f.text(t), len(values))
	for i, v := range values {
		f.line("%s[%d] = %s", s, i, f.atomOf(v(), elem))
	}
	return s
}

// spreadCall handles f(g()) where g has several results.
func (f *fn) spreadCall(e *ast.CallExpr, sig *types.Signature) []argument {
	if len(e.Args) != 1 {
		return nil
	}
	tuple, ok := f.info.TypeOf(e.Args[0]).(*types.Tuple)
	if !ok {
		return nil
	}
	values := f.call(ast.Unparen(e.Args[0]).(*ast.CallExpr))
	from := f.tuple(tuple)
	n := sig.Params().Len()
	var list []argument
	for i := range n {
		t := f.typ(sig.Params().At(i).Type())
		if !sig.Variadic() || i < n-1 {
			list = append(list, argument{ready(f.implicit(values[i], from[i], t)), f.text(t)})
			continue
		}
		elem := f.typ(t.Underlying().(*types.Slice).Elem())
		var rest []late
		for k := i; k < len(values); k++ {
			rest = append(rest, ready(f.implicit(values[k], from[k], elem)))
		}
		list = append(list, argument{func() string { return f.sliceOf(rest, t) }, f.text(t)})
	}
	if list == nil {
		list = []argument{}
	}
	return list
}

// callFunc calls a declared function, of the script or compiled.
func (f *fn) callFunc(e *ast.CallExpr, obj *types.Func, id *ast.Ident) *prepared {
	if _, ok := f.c.bodies[obj.Origin()]; !ok {
		return f.callCompiled(e, obj)
	}
	if l := f.special(e, obj); l != nil {
		return l
	}
	name, sig := f.instance(obj, id)
	p := &prepared{f: f, text: name, results: f.tuple(sig.Results()), direct: true}
	p.take(f.orderArgs(e, sig))
	return p
}

// special is reserved for functions that need the types of their arguments.
func (f *fn) special(e *ast.CallExpr, obj *types.Func) *prepared { return nil }

// genericFunc returns the function of an explicit instance.
func (f *fn) genericFunc(e ast.Expr) (*ast.Ident, *types.Func) {
	var x ast.Expr
	switch e := e.(type) {
	case *ast.IndexExpr:
		x = e.X
	case *ast.IndexListExpr:
		x = e.X
	}
	var id *ast.Ident
	switch x := x.(type) {
	case *ast.Ident:
		id = x
	case *ast.SelectorExpr:
		id = x.Sel
	default:
		return nil, nil
	}
	obj, _ := f.info.Uses[id].(*types.Func)
	return id, obj
}

// callMethod calls a method of a script's type, of a compiled one, or of what
// an interface holds.
func (f *fn) callMethod(e *ast.CallExpr, fun *ast.SelectorExpr, sel *types.Selection) *prepared {
	recv := f.typ(sel.Recv())
	method, path := f.method(sel, recv)
	if isInterface(recv) {
		return f.callDynamic(e, fun.X, recv, method)
	}
	base := f.receiver(fun.X, method, path)
	if base.dynamic {
		return f.callDynamicOn(e, base.value, base.typ, method)
	}
	if _, ok := f.c.bodies[method.Origin()]; !ok {
		return f.callCompiledMethod(e, base, method)
	}
	name, sig := f.methodInstance(method, base.typ)
	p := &prepared{f: f, text: name, results: f.tuple(sig.Results()), direct: true}
	args := f.orderArgs(e, sig)
	p.args = append(p.args, f.atomOf(base.value(), base.form))
	p.forms = append(p.forms, base.form)
	p.take(args)
	return p
}

// receiver is a receiver brought to the type that the method has.
type receiver struct {
	value   late
	form    string
	typ     types.Type // T or *T, where the method is declared
	dynamic bool       // an interface, reached through an embedded field
}

// method returns the method that a selection finds and the embedded fields on
// the way to it. In a generic function the method of a constraint stands for
// that of the type argument recv.
func (f *fn) method(sel *types.Selection, recv types.Type) (*types.Func, []int) {
	method, path := sel.Obj().(*types.Func), sel.Index()
	if r := method.Signature().Recv(); r != nil && isInterface(r.Type()) && !isInterface(recv) && len(path) == 1 {
		obj, index, _ := types.LookupFieldOrMethod(recv, true, method.Pkg(), method.Name())
		if m, ok := obj.(*types.Func); ok {
			method, path = m, index
		}
	}
	return method, path[:len(path)-1]
}

// receiver goes along embedded fields and takes or follows an address.
func (f *fn) receiver(x ast.Expr, method *types.Func, path []int) receiver {
	base := f.orderPlace(x)
	_, wantPointer := method.Signature().Recv().Type().Underlying().(*types.Pointer)
	start := f.typeOf(x)
	t, path := f.walkTypes(start, path)
	if isInterface(t) {
		return receiver{value: func() string { return f.read(f.follow(base(), path, x)) }, typ: t, form: f.text(t), dynamic: true}
	}
	ptr, isPointer := t.Underlying().(*types.Pointer)
	switch {
	case wantPointer && !isPointer:
		pt := types.NewPointer(t)
		return receiver{value: func() string { return f.addressOf(f.follow(base(), path, x), x) }, typ: pt, form: f.text(pt)}
	case !wantPointer && isPointer:
		et := ptr.Elem()
		return receiver{value: func() string {
			s := f.atomOf(f.read(f.follow(base(), path, x)), f.text(t))
			f.checkNil(s, x)
			return "(*" + s + ")"
		}, typ: et, form: f.text(et)}
	}
	return receiver{value: func() string { return f.read(f.follow(base(), path, x)) }, typ: t, form: f.text(t)}
}

// walkTypes returns the type at the end of a path of fields. It stops at a
// compiled type, whose promoted methods reflection knows.
func (f *fn) walkTypes(t types.Type, path []int) (types.Type, []int) {
	for k, i := range path {
		u := t
		if p, ok := t.Underlying().(*types.Pointer); ok {
			u = p.Elem()
		}
		if !f.c.scripted(u) {
			return t, path[:k]
		}
		t = f.typ(u.Underlying().(*types.Struct).Field(i).Type())
	}
	return t, path
}

// callDynamic calls a method through an interface.
func (f *fn) callDynamic(e *ast.CallExpr, x ast.Expr, t types.Type, method *types.Func) *prepared {
	return f.callDynamicOn(e, f.order(x), t, method)
}

func (f *fn) callDynamicOn(e *ast.CallExpr, x late, t types.Type, method *types.Func) *prepared {
	sig := f.typ(method.Type()).(*types.Signature)
	args := f.orderArgs(e, sig)
	p := &prepared{f: f, results: f.tuple(sig.Results()), direct: true}
	p.text = f.dynamic(t, method.Name(), sig)
	p.args = []string{fmt.Sprint(e.Pos()), f.atomOf(x(), f.text(t))}
	p.forms = []string{"int", f.text(t)}
	p.take(args)
	return p
}
