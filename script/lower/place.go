package lower

import (
	"go/ast"
	"go/types"
)

// place is a variable or a part of one: an expression that can be read and
// assigned to. In a folded place the value is kept in an interface.
type place struct {
	s      string
	folded types.Type
	// set replaces assignment, for map entries and compiled variables.
	set  func(value string)
	m, k string // map and key of an entry
	key  types.Type
	typ  types.Type
}

// orderPlace makes the calls in e and returns what yields its place.
func (f *fn) orderPlace(e ast.Expr) func() place {
	switch e := e.(type) {
	case *ast.ParenExpr:
		return f.orderPlace(e.X)
	case *ast.Ident:
		return f.identPlace(e)
	case *ast.StarExpr:
		p := f.order(e.X)
		return func() place {
			t := f.typeOf(e.X)
			s := f.atomOf(p(), f.text(t))
			f.checkNil(s, e)
			return place{s: "(*" + s + ")", typ: f.typeOf(e)}
		}
	case *ast.SelectorExpr:
		return f.fieldPlace(e)
	case *ast.IndexExpr:
		return f.indexPlace(e)
	}
	v := f.order(e)
	return func() place {
		t := f.typeOf(e)
		return place{s: f.atomOf(v(), f.text(t)), typ: t}
	}
}

func (f *fn) identPlace(e *ast.Ident) func() place {
	obj := f.info.Uses[e]
	if obj == nil {
		obj = f.info.Defs[e]
	}
	t := f.typ(obj.Type())
	if v := f.lookup(obj); v != nil {
		return func() place { return place{s: v.read(), typ: t} }
	}
	return f.compiledPlace(e, obj)
}

// readPlace reads the place e.
func (f *fn) readPlace(e ast.Expr) late {
	p := f.orderPlace(e)
	return func() string { return f.read(p()) }
}

// read returns the value in a place.
func (f *fn) read(p place) string {
	if p.folded != nil {
		t := f.temp(f.text(p.folded))
		f.line("%s = %s(%s)", t, f.c.unfold(f.form(p.folded)), p.s)
		return t
	}
	return p.s
}

// assign stores an expression of the type of p.
func (f *fn) assign(p place, value string) {
	switch {
	case p.set != nil:
		p.set(value)
	case p.folded != nil:
		v := f.atomOf(value, f.text(p.folded))
		f.line("%s = %s(%s)", p.s, f.c.fold(f.form(p.folded)), v)
	case isAtom(p.s):
		f.line("%s = %s", p.s, value)
	default:
		f.line("%s = %s", p.s, f.atomOf(value, f.text(p.typ)))
	}
}

func (f *fn) checkNil(p string, n ast.Node) {
	f.line("if %s == nil { h.Nil(%d) }", p, n.Pos())
}

// fieldPlace follows a field selection, through embedded fields too.
func (f *fn) fieldPlace(e *ast.SelectorExpr) func() place {
	sel := f.info.Selections[e]
	if sel == nil { // a variable of a package
		return f.identPlace(e.Sel)
	}
	base := f.orderPlace(e.X)
	return func() place {
		return f.follow(base(), sel.Index(), e)
	}
}

// follow goes along a path of fields from p.
func (f *fn) follow(p place, path []int, n ast.Node) place {
	for _, i := range path {
		t := p.typ
		s := f.read(p)
		if ptr, ok := t.Underlying().(*types.Pointer); ok {
			s = f.atomOf(s, f.text(t))
			f.checkNil(s, n)
			t = ptr.Elem()
		} else if len(s) > 3 && s[0] == '(' && s[1] == '*' && isAtom(s[2:len(s)-1]) {
			s = s[2 : len(s)-1] // a field of what a pointer points to
		}
		st, ok := t.Underlying().(*types.Struct)
		if !ok {
			f.refuse(n, "this selection is not available in a script")
		}
		name := st.Field(i).Name()
		ft := f.typ(st.Field(i).Type())
		next := place{typ: ft}
		if f.c.scripted(t) {
			name = fieldName(st, i)
			if f.c.foldedField(t, i) {
				next.folded = ft
			}
		}
		next.s = s + "." + name
		p = next
	}
	return p
}

// scripted says that the struct type t is not a compiled named type, so that
// its stored form has names of our own.
func (c *compiler) scripted(t types.Type) bool {
	n, ok := types.Unalias(t).(*types.Named)
	if !ok {
		return true
	}
	if !c.in.Universe.Compiled(n.Obj()) {
		return true
	}
	return false
}

// foldedField says that field i of t is kept as an interface.
func (c *compiler) foldedField(t types.Type, i int) bool {
	r := c.form(t, 0)
	st := t.Underlying().(*types.Struct)
	return r.Field(i).Type == anyType && !isInterface(st.Field(i).Type())
}

func isInterface(t types.Type) bool {
	_, ok := t.Underlying().(*types.Interface)
	return ok
}

// indexPlace is the place of an element of an array, slice or map.
func (f *fn) indexPlace(e *ast.IndexExpr) func() place {
	if f.isInstance(e) {
		v := f.order(e)
		return func() place { return place{s: v(), typ: f.typeOf(e)} }
	}
	t := f.typeOf(e.X)
	switch u := t.Underlying().(type) {
	case *types.Map:
		return f.mapPlace(e, u)
	case *types.Array:
		base := f.orderPlace(e.X)
		i := f.order(e.Index)
		return func() place {
			s := f.read(base())
			return place{s: s + "[" + f.checkedIndex(i(), e.Index, int(u.Len()), "") + "]", typ: f.typ(u.Elem())}
		}
	case *types.Pointer:
		arr := u.Elem().Underlying().(*types.Array)
		base := f.order(e.X)
		i := f.order(e.Index)
		return func() place {
			s := f.atomOf(base(), f.text(t))
			k := f.checkedIndex(i(), e.Index, int(arr.Len()), "")
			f.checkNil(s, e)
			return place{s: "(*" + s + ")[" + k + "]", typ: f.typ(arr.Elem())}
		}
	case *types.Slice:
		base := f.order(e.X)
		i := f.order(e.Index)
		return func() place {
			s := f.atomOf(base(), f.text(t))
			return place{s: s + "[" + f.checkedIndex(i(), e.Index, -1, s) + "]", typ: f.typ(u.Elem())}
		}
	case *types.Basic:
		base := f.order(e.X)
		i := f.order(e.Index)
		return func() place {
			s := f.atomOf(base(), f.text(t))
			return place{s: s + "[" + f.checkedIndex(i(), e.Index, -1, s) + "]", typ: types.Typ[types.Uint8]}
		}
	}
	f.refuse(e, "indexing a value of type %s is not available in a script", t)
	return nil
}

// checkedIndex emits the test of an index against a fixed length, or against
// the length of the variable s, and returns the index.
func (f *fn) checkedIndex(i string, e ast.Expr, n int, s string) string {
	t := f.typeOf(e)
	check := "Index"
	if b := t.Underlying().(*types.Basic); b.Kind() != types.Int && !isUntyped(b) {
		if b.Info()&types.IsUnsigned != 0 {
			check = "IndexUnsigned"
		}
		i = "int(" + f.atomOf(i, f.text(t)) + ")"
	}
	i = f.atomOf(i, "int")
	known := f.info.Types[e].Value != nil
	if n >= 0 {
		if !known {
			f.line("if %s < 0 || %s >= %d { h.%s(%d, %s, %d) }", i, i, n, check, e.Pos(), i, n)
		}
		return i
	}
	l := f.temp("int")
	f.line("%s = len(%s)", l, s)
	if known {
		f.line("if %s >= %s { h.%s(%d, %s, %s) }", i, l, check, e.Pos(), i, l)
	} else {
		f.line("if %s < 0 || %s >= %s { h.%s(%d, %s, %s) }", i, i, l, check, e.Pos(), i, l)
	}
	return i
}

// mapPlace is the entry of a map. It is set with a call; reading it is early.
func (f *fn) mapPlace(e *ast.IndexExpr, u *types.Map) func() place {
	m := f.order(e.X)
	key := f.orderAs(e.Index, f.typ(u.Key()))
	return func() place {
		s := f.atomOf(m(), f.text(f.typeOf(e.X)))
		k := f.atomOf(key(), f.text(f.typ(u.Key())))
		et := f.typ(u.Elem())
		p := place{typ: et, m: s, k: k, key: f.typ(u.Key())}
		p.s = s + "[" + k + "]"
		p.set = func(value string) {
			v := f.atomOf(value, f.text(et))
			f.line("if %s == nil { h.NilMap(%d) }", s, e.Pos())
			f.line("%s[%s] = %s", s, k, v)
		}
		return p
	}
}

// index reads an element.
func (f *fn) index(e *ast.IndexExpr) late {
	if f.isInstance(e) {
		return f.instanceValue(e, e.X)
	}
	if u, ok := f.typeOf(e.X).Underlying().(*types.Map); ok {
		return ready(f.current(f.mapPlace(e, u)()))
	}
	return f.readPlace(e)
}

func (f *fn) isInstance(e *ast.IndexExpr) bool {
	_, ok := f.info.TypeOf(e.X).(*types.Signature)
	if !ok {
		return false
	}
	return f.info.Types[e.Index].IsType()
}
