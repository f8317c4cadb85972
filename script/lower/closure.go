package lower

import (
	"fmt"
	"go/ast"
	"go/types"
	"strings"
)

// funcLit makes a function literal: a function of its own that gets the
// variables used inside as arguments, by value if they never change and by
// pointer else.
func (f *fn) funcLit(e *ast.FuncLit) late {
	sig := f.typeOf(e).(*types.Signature)
	g := f.c.newFn(f, f.info)
	text := g.emit(signature{params: g.namedParams(e.Type.Params), results: f.info.TypeOf(e).(*types.Signature).Results(), body: e.Body})
	return ready(f.close(g, text, f.text(sig)))
}

// namedParams returns the variables that a list of parameters declares.
func (f *fn) namedParams(list *ast.FieldList) []*types.Var {
	if list == nil {
		return nil
	}
	var vars []*types.Var
	for _, field := range list.List {
		if len(field.Names) == 0 {
			vars = append(vars, types.NewParam(field.Pos(), nil, "", f.paramVarType(field)))
		}
		for _, name := range field.Names {
			v, ok := f.info.Defs[name].(*types.Var)
			if !ok {
				v = types.NewParam(field.Pos(), nil, "_", f.paramVarType(field))
			}
			vars = append(vars, v)
		}
	}
	return vars
}

func (f *fn) paramVarType(field *ast.Field) types.Type {
	if e, ok := field.Type.(*ast.Ellipsis); ok {
		return types.NewSlice(f.info.TypeOf(e.Elt))
	}
	return f.info.TypeOf(field.Type)
}

// close emits the function that makes the closure g and returns a call of it.
func (f *fn) close(g *fn, text, form string) string {
	name := f.c.fresh("lit")
	var params, args []string
	for _, v := range g.captures {
		params = append(params, v.name+" "+v.held())
		args = append(args, v.name)
	}
	fmt.Fprintf(&f.c.out, "func %s(%s) %s { return func%s }\n", name, strings.Join(params, ", "), form, text)
	t := f.temp(form)
	f.line("%s = %s(%s)", t, name, strings.Join(args, ", "))
	return t
}

// use is the value of a variable of this function or one around it.
func (f *fn) use(v *variable) string {
	f.capture(v)
	return v.read()
}

// pointer is the pointer behind a shared variable.
func (f *fn) pointer(v *variable) string {
	f.capture(v)
	return v.name
}

// funcValue is a declared function as a value.
func (f *fn) funcValue(obj *types.Func, id *ast.Ident) late {
	if _, ok := f.c.bodies[obj.Origin()]; !ok {
		return f.compiledFuncValue(obj, id)
	}
	name, sig := f.instance(obj, id)
	return ready(f.functionAsValue(name, sig))
}

// functionAsValue makes a closure that calls an emitted function.
func (f *fn) functionAsValue(name string, sig *types.Signature) string {
	form := f.text(sig)
	lit := f.c.once("value "+name, func() string {
		lit := f.c.fresh("lit")
		params, args, results := f.c.shape(f, sig)
		ret := ""
		if len(results) > 0 {
			ret = "return "
		}
		fmt.Fprintf(&f.c.out, "func %s() %s { return func(%s) (%s) {\n%s } }\n", lit, form, params, strings.Join(results, ", "), forward(ret, name+"("+args+")", len(results)))
		return lit
	})
	t := f.temp(form)
	f.line("%s = %s()", t, lit)
	return t
}

// forward is the body of a function that passes a call on.
func forward(ret, call string, results int) string {
	if results == 0 {
		return call + "\n"
	}
	var names []string
	for i := range results {
		names = append(names, fmt.Sprintf("w%d", i))
	}
	list := strings.Join(names, ", ")
	return list + " := " + call + "\n" + ret + list + "\n"
}

// shape writes parameters, arguments and results of a signature.
func (c *compiler) shape(f *fn, sig *types.Signature) (params, args string, results []string) {
	var ps, as []string
	for i, t := range f.tuple(sig.Params()) {
		ps = append(ps, fmt.Sprintf("a%d %s", i, f.text(t)))
		as = append(as, fmt.Sprintf("a%d", i))
	}
	for _, t := range f.tuple(sig.Results()) {
		results = append(results, f.text(t))
	}
	return strings.Join(ps, ", "), strings.Join(as, ", "), results
}

// compiledFuncValue is a compiled function as a value of the plain form.
func (f *fn) compiledFuncValue(obj *types.Func, n ast.Node) late {
	target := f.compiledFunc(n, obj)
	sig := f.typ(obj.Type()).(*types.Signature)
	return ready(f.hostValue(functionConverter(target.Type(), f.form(sig))(target), f.text(sig)))
}

// selector is a field, a method value, or a name of a package.
func (f *fn) selector(e *ast.SelectorExpr) late {
	sel := f.info.Selections[e]
	if sel == nil {
		return f.ident(e.Sel)
	}
	switch sel.Kind() {
	case types.FieldVal:
		return f.readPlace(e)
	case types.MethodVal:
		return f.methodValue(e, sel)
	}
	return f.methodExpr(e, sel)
}
