package lower

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"

	"ketloom/script/machine"
)

// pure are packages whose functions do not panic on data; they are called
// without a record of the place.
var pure = map[string]bool{"math": true, "math/cmplx": true, "unicode": true, "unicode/utf8": true}

// callCompiled calls a function of a compiled package.
func (f *fn) callCompiled(e *ast.CallExpr, obj *types.Func) *prepared {
	target := f.compiledFunc(e, obj)
	if pure[obj.Pkg().Path()] && !obj.Signature().Variadic() {
		return f.callPure(e, obj, target)
	}
	if p := f.errorsAs(e, obj); p != nil {
		return p
	}
	return f.site(e, obj.Signature(), nil, target)
}

// compiledFunc finds the function, or what the run has in its place.
func (f *fn) compiledFunc(n ast.Node, obj *types.Func) reflect.Value {
	path := ""
	if obj.Pkg() != nil {
		path = obj.Pkg().Path()
	}
	if why, ok := unavailable[path+"."+obj.Name()]; ok {
		f.refuse(n, "%s.%s is not available in a script: %s", obj.Pkg().Name(), obj.Name(), why)
	}
	v, ok, err := f.c.in.Run.Replace(path, obj.Name())
	if err != nil {
		f.refuse(n, "%s.%s: %v", obj.Pkg().Name(), obj.Name(), err)
	}
	if ok {
		return v
	}
	v, ok = f.c.in.Universe.Value(obj)
	if !ok {
		f.refuse(n, "%s is not available in a script", obj.FullName())
	}
	return f.c.in.Run.Guard(path+"."+obj.Name(), v, 0)
}

// compiledMethodOf finds a method of the compiled type form, or what the run has
// in its place.
func (f *fn) compiledMethodOf(n ast.Node, form reflect.Type, method *types.Func) reflect.Value {
	m, ok := form.MethodByName(method.Name())
	if !ok {
		f.refuse(n, "the method %s is not available in a script", method.Name())
	}
	if why, ok := unavailable[machine.MethodName(form, method.Name())]; ok {
		f.refuse(n, "%s is not available in a script: %s", method.FullName(), why)
	}
	return f.c.in.Run.Guard(machine.MethodName(form, method.Name()), m.Func, 1)
}

// callPure calls a function that needs neither conversions nor a place.
func (f *fn) callPure(e *ast.CallExpr, obj *types.Func, target reflect.Value) *prepared {
	name := f.c.once("pure "+obj.FullName(), func() string { return f.c.symbol("P", target) })
	p := &prepared{f: f, text: name, results: f.tuple(obj.Signature().Results()), direct: true}
	p.take(f.orderArgs(e, obj.Signature()))
	return p
}

// callCompiledMethod calls a method of a compiled type.
func (f *fn) callCompiledMethod(e *ast.CallExpr, base receiver, method *types.Func) *prepared {
	target := f.compiledMethodOf(e, f.form(base.typ), method)
	return f.site(e, method.Signature(), &base, target)
}

// site makes the symbol for one call of compiled code. It takes the arguments
// in their own types, converts them, and marks panics with the place.
func (f *fn) site(e *ast.CallExpr, sig *types.Signature, recv *receiver, target reflect.Value) *prepared {
	args := f.siteArgs(e, sig)
	tt := target.Type()
	offset := 0
	var in []reflect.Type
	var convert []func(reflect.Value) reflect.Value
	if recv != nil {
		offset = 1
		in = append(in, f.form(recv.typ))
		convert = append(convert, func(v reflect.Value) reflect.Value { return v })
	}
	spread := e.Ellipsis.IsValid()
	for i, a := range args {
		want := paramType(tt, i+offset, spread)
		in = append(in, f.form(a.typ))
		convert = append(convert, f.shown(e, a.typ, want, f.converter(a.typ, want)))
	}
	results := f.tuple(sig.Results())
	var out []reflect.Type
	for _, t := range results {
		out = append(out, f.form(t))
	}
	pos := e.Pos()
	track := f.c.tracked(tt)
	typ := reflect.FuncOf(in, out, false)
	fun := reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
		defer f.c.in.Run.Mark(pos)
		for i := range in {
			in[i] = convert[i](in[i])
		}
		var res []reflect.Value
		if spread {
			res = target.CallSlice(in)
		} else {
			res = target.Call(in)
		}
		for i := range res {
			res[i] = fitted(res[i], out[i])
		}
		for _, i := range track {
			f.c.in.Run.Track(res[i].Interface())
		}
		return res
	})
	p := &prepared{f: f, text: f.c.symbol("S", fun), results: results, direct: true}
	if recv != nil {
		p.args = append(p.args, f.atomOf(recv.value(), recv.form))
		p.forms = append(p.forms, recv.form)
	}
	for _, a := range args {
		form := f.text(a.typ)
		p.args = append(p.args, f.atomOf(a.value(), form))
		p.forms = append(p.forms, form)
	}
	return p
}

// keepers are packages whose functions take values as any and either know a
// script's values or only keep them.
var keepers = map[string]bool{
	"fmt": true, "log": true, "errors": true, "sort": true, "container/heap": true, "container/list": true, "context": true,
	"sync": true, "sync/atomic": true, "encoding/json": true,
}

// shown guards an argument that compiled code gets as any: code that looks at
// its type or methods would not find those of the script.
func (f *fn) shown(e *ast.CallExpr, from types.Type, to reflect.Type, convert func(reflect.Value) reflect.Value) func(reflect.Value) reflect.Value {
	path, name := f.callee(e)
	if path == "encoding/json" && to == anyType {
		f.checkJSON(e, from)
	}
	if to != anyType || keepers[path] {
		return convert
	}
	if !isInterface(from) {
		if f.c.mentions(from) {
			f.refuse(e, "passing a value of the script's type %s to %s is not available; convert it to a compiled or predeclared type", types.TypeString(from, types.RelativeTo(f.c.in.Package)), name)
		}
		return convert
	}
	pos := e.Pos()
	return func(v reflect.Value) reflect.Value {
		if !v.IsNil() {
			if x, ok := machine.Plain(v.Interface()).(machine.Value); ok {
				machine.Throw(pos, fmt.Sprintf("passing a value of the script's type %s to %s is not available; convert it to a compiled or predeclared type", x.T, name))
			}
		}
		return convert(v)
	}
}

// callee returns package path and name of a called compiled function or method.
func (f *fn) callee(e *ast.CallExpr) (string, string) {
	var id *ast.Ident
	switch fun := ast.Unparen(e.Fun).(type) {
	case *ast.Ident:
		id = fun
	case *ast.SelectorExpr:
		id = fun.Sel
	}
	if obj, ok := f.info.Uses[id].(*types.Func); ok && obj.Pkg() != nil {
		return obj.Pkg().Path(), obj.FullName()
	}
	return "", "compiled code"
}

// tracked returns the results of a compiled function that can be discarded.
func (c *compiler) tracked(t reflect.Type) []int {
	var list []int
	for i := range t.NumOut() {
		if _, ok := t.Out(i).MethodByName("Discard"); ok && t.Out(i).Kind() == reflect.Pointer {
			list = append(list, i)
		}
	}
	return list
}

func paramType(t reflect.Type, i int, spread bool) reflect.Type {
	if t.IsVariadic() && i >= t.NumIn()-1 && !spread {
		return t.In(t.NumIn() - 1).Elem()
	}
	return t.In(i)
}

// typedArg is an argument in its own type.
type typedArg struct {
	value late
	typ   types.Type
}

// siteArgs orders the arguments of a call of compiled code, each in its own
// type; constants and nil take the type of the parameter.
func (f *fn) siteArgs(e *ast.CallExpr, sig *types.Signature) []typedArg {
	if len(e.Args) == 1 {
		if tuple, ok := f.info.TypeOf(e.Args[0]).(*types.Tuple); ok {
			var list []typedArg
			for i, v := range f.call(ast.Unparen(e.Args[0]).(*ast.CallExpr)) {
				list = append(list, typedArg{ready(v), f.typ(tuple.At(i).Type())})
			}
			return list
		}
	}
	var list []typedArg
	for i, a := range e.Args {
		param := f.param(sig, i, e.Ellipsis.IsValid())
		tv := f.info.Types[a]
		t := f.typ(tv.Type)
		switch {
		case tv.IsNil():
			t = param
		case tv.Value != nil || isUntyped(t):
			t = types.Default(t)
			if !isInterface(param) {
				t = param
			}
		case types.Identical(t, param):
			t = param
		}
		list = append(list, typedArg{f.orderAs(a, t), t})
	}
	return list
}

func (f *fn) param(sig *types.Signature, i int, spread bool) types.Type {
	n := sig.Params().Len()
	if sig.Variadic() && i >= n-1 {
		t := f.typ(sig.Params().At(n - 1).Type())
		if spread {
			return t
		}
		return f.typ(t.Underlying().(*types.Slice).Elem())
	}
	return f.typ(sig.Params().At(i).Type())
}

// compiledVariable reads a variable of a compiled package.
func (f *fn) compiledVariable(obj *types.Var) late {
	p := f.compiledStore(obj, f.pos)
	if p == nil {
		return nil
	}
	return func() string { return p().s }
}

// compiledPlace is the place of a variable of a compiled package.
func (f *fn) compiledPlace(n ast.Node, obj types.Object) func() place {
	v, ok := obj.(*types.Var)
	if ok {
		if p := f.compiledStore(v, n.Pos()); p != nil {
			return p
		}
	}
	f.refuse(n, "%s is not available as a variable in a script", obj.Name())
	return nil
}

func (f *fn) compiledStore(obj *types.Var, pos token.Pos) func() place {
	if obj.Pkg() == nil {
		return nil
	}
	v, ok, err := f.c.in.Run.Replace(obj.Pkg().Path(), obj.Name())
	if err != nil || !ok || !v.CanAddr() {
		v, ok = f.c.in.Universe.Value(obj)
		if !ok {
			return nil
		}
	}
	form := v.Type()
	get := f.c.once("get "+obj.Pkg().Path()+"."+obj.Name(), func() string {
		return f.c.symbol("V", reflect.MakeFunc(reflect.FuncOf(nil, []reflect.Type{form}, false), func([]reflect.Value) []reflect.Value {
			return []reflect.Value{v}
		}))
	})
	t := f.typ(obj.Type())
	return func() place {
		p := place{typ: t}
		p.s = f.temp(f.text(t))
		f.line("%s = %s()", p.s, get)
		p.set = func(value string) { f.setCompiled(obj, v, value) }
		return p
	}
}

// setCompiled assigns to a variable that the run has for itself; the variables
// of compiled packages are shared with other runs and stay as they are.
func (f *fn) setCompiled(obj *types.Var, v reflect.Value, value string) {
	if own, ok, _ := f.c.in.Run.Replace(obj.Pkg().Path(), obj.Name()); !ok || own != v {
		f.c.refuse(f.pos, "assigning to %s.%s would change it for the whole program and is not available in a script", obj.Pkg().Name(), obj.Name())
		return
	}
	set := f.c.symbol("V", reflect.MakeFunc(reflect.FuncOf([]reflect.Type{v.Type()}, nil, false), func(in []reflect.Value) []reflect.Value {
		v.Set(in[0])
		return nil
	}))
	f.line("%s(%s)", set, f.atomOf(value, f.text(f.typ(obj.Type()))))
}
