package lower

import (
	"go/ast"
	"go/token"
	"go/types"
	"strings"
)

// late computes the rest of an expression whose calls have been made. It may
// emit tests, and returns an expression that the interpreter computes exactly.
// It is called once, before the next change of any variable.
type late func() string

func ready(s string) late { return func() string { return s } }

// order makes the calls in e, in order, and returns what is left to compute.
// The compiler treats expressions the same way: calls come first.
func (f *fn) order(e ast.Expr) late {
	if tv, ok := f.info.Types[e]; ok && tv.Value != nil {
		return ready(f.c.constant(tv.Value, f.typ(tv.Type), f.pos))
	}
	switch e := e.(type) {
	case *ast.ParenExpr:
		return f.order(e.X)
	case *ast.Ident:
		return f.ident(e)
	case *ast.BasicLit:
		return ready(f.c.constant(f.info.Types[e].Value, f.typeOf(e), f.pos))
	case *ast.FuncLit:
		return f.funcLit(e)
	case *ast.CompositeLit:
		return f.composite(e)
	case *ast.SelectorExpr:
		return f.selector(e)
	case *ast.IndexExpr:
		return f.index(e)
	case *ast.IndexListExpr:
		return f.instanceValue(e, e.X)
	case *ast.SliceExpr:
		return f.sliceExpr(e)
	case *ast.StarExpr:
		return f.readPlace(e)
	case *ast.TypeAssertExpr:
		return ready(f.assertion(e, false)[0])
	case *ast.CallExpr:
		return f.callValue(e)
	case *ast.UnaryExpr:
		return f.unary(e)
	case *ast.BinaryExpr:
		return f.binary(e)
	}
	f.refuse(e, "this expression is not available in a script")
	return nil
}

// orderAs is order with the implicit conversion of e to t.
func (f *fn) orderAs(e ast.Expr, t types.Type) late {
	tv := f.info.Types[e]
	if tv.IsNil() {
		return func() string { return f.zero(t) }
	}
	from := f.typ(tv.Type)
	if tv.Value != nil {
		if _, ok := t.Underlying().(*types.Interface); !ok {
			return ready(f.c.constant(tv.Value, t, f.pos))
		}
		from = types.Default(from)
		return func() string { return f.implicit(f.c.constant(tv.Value, from, f.pos), from, t) }
	}
	l := f.order(e)
	if isUntyped(from) {
		from = t
		if _, ok := t.Underlying().(*types.Interface); ok {
			from = types.Typ[types.Bool]
		}
	}
	return func() string { return f.implicit(l(), from, t) }
}

func isUntyped(t types.Type) bool {
	b, ok := t.(*types.Basic)
	return ok && b.Info()&types.IsUntyped != 0
}

// now computes e completely.
func (f *fn) now(e ast.Expr) string { return f.order(e)() }

// atom computes e into a variable or a small literal.
func (f *fn) atom(e ast.Expr) string {
	return f.atomOf(f.now(e), f.text(f.typeOf(e)))
}

// atomOf moves an expression of the given form into a variable, unless it is
// one or a small literal.
func (f *fn) atomOf(s, form string) string {
	if isAtom(s) && !(f.copying && s[0] > '9' && s != "true" && s != "false") {
		return s
	}
	t := f.temp(form)
	f.line("%s = %s", t, s)
	return t
}

func isAtom(s string) bool {
	if s == "true" || s == "false" {
		return true
	}
	return s != "" && strings.Trim(s, "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ_0123456789") == ""
}

// zero returns the zero value of t as an atom.
func (f *fn) zero(t types.Type) string {
	if b, ok := t.Underlying().(*types.Basic); ok {
		switch {
		case b.Info()&types.IsBoolean != 0:
			return "false"
		case b.Kind() == types.Int:
			return "0"
		}
	}
	return f.zeroVariable(f.text(t))
}

// zeroVariable is a variable of the given form that stays zero.
func (f *fn) zeroVariable(form string) string {
	return f.c.once("zero "+form, func() string {
		v := &variable{name: f.c.fresh("z"), form: form}
		f.c.globals[types.NewVar(token.NoPos, nil, v.name, nil)] = v
		return v.name
	})
}

func (f *fn) ident(e *ast.Ident) late {
	obj := f.info.Uses[e]
	if obj == nil {
		obj = f.info.Defs[e]
	}
	switch obj := obj.(type) {
	case *types.Var:
		if v := f.lookup(obj); v != nil {
			return ready(v.read())
		}
		if l := f.compiledVariable(obj); l != nil {
			return l
		}
		if len(f.c.refusals) > 0 {
			panic(stop{}) // its declaration was refused
		}
	case *types.Func:
		return f.funcValue(obj, e)
	}
	f.refuse(e, "%s is not available as a value in a script", e.Name)
	return nil
}
