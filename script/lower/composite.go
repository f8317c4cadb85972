package lower

import (
	"go/ast"
	"go/constant"
	"go/types"
)

// composite makes the value of a composite literal.
func (f *fn) composite(e *ast.CompositeLit) late {
	t := f.typeOf(e)
	if p, ok := t.Underlying().(*types.Pointer); ok { // an element &T{} written as {}
		return f.pointerTo(e, p.Elem())
	}
	return f.literal(e, t)
}

// pointerLiteral is &T{...}.
func (f *fn) pointerLiteral(e *ast.CompositeLit) late { return f.pointerTo(e, f.typeOf(e)) }

func (f *fn) pointerTo(e *ast.CompositeLit, t types.Type) late {
	if st, ok := t.Underlying().(*types.Struct); ok {
		fields := f.structFields(e, st)
		return func() string {
			p := f.hold("*" + f.text(t))
			f.line("%s = new(%s)", p, f.text(t))
			f.setFields(place{s: "(*" + p + ")", typ: t}, fields, e)
			return p
		}
	}
	v := f.literal(e, t)
	return func() string {
		s := f.atomOf(v(), f.text(t))
		p := f.hold("*" + f.text(t))
		f.line("%s = new(%s)", p, f.text(t))
		f.line("*%s = %s", p, s)
		return p
	}
}

func (f *fn) literal(e *ast.CompositeLit, t types.Type) late {
	switch u := t.Underlying().(type) {
	case *types.Struct:
		fields := f.structFields(e, u)
		return func() string {
			s := f.c.fresh("t")
			f.line("var %s %s", s, f.text(t))
			f.setFields(place{s: s, typ: t}, fields, e)
			return s
		}
	case *types.Slice:
		elems, n := f.elements(e, f.typ(u.Elem()))
		return func() string {
			s := f.hold(f.text(t))
			f.line("%s = make(%s, %d)", s, f.text(t), n)
			f.setElements(s, elems, f.typ(u.Elem()))
			return s
		}
	case *types.Array:
		elems, _ := f.elements(e, f.typ(u.Elem()))
		return func() string {
			s := f.c.fresh("t")
			f.line("var %s %s", s, f.text(t))
			f.setElements(s, elems, f.typ(u.Elem()))
			return s
		}
	case *types.Map:
		return f.mapLiteral(e, u, t)
	}
	f.refuse(e, "this literal is not available in a script")
	return nil
}

// fieldValue is the value of one field of a literal.
type fieldValue struct {
	index int
	typ   types.Type
	value late
}

func (f *fn) structFields(e *ast.CompositeLit, st *types.Struct) []fieldValue {
	var list []fieldValue
	for i, el := range e.Elts {
		index, value := i, el
		if kv, ok := el.(*ast.KeyValueExpr); ok {
			value = kv.Value
			for k := range st.NumFields() {
				if st.Field(k).Name() == kv.Key.(*ast.Ident).Name {
					index = k
				}
			}
		}
		t := f.typ(st.Field(index).Type())
		list = append(list, fieldValue{index, t, f.orderAs(value, t)})
	}
	return list
}

func (f *fn) setFields(p place, fields []fieldValue, n ast.Node) {
	for _, v := range fields {
		f.assign(f.follow(p, []int{v.index}, n), f.atomOf(v.value(), f.text(v.typ)))
	}
}

// element is the value at one index of a literal.
type element struct {
	index int
	value late
}

// elements orders the elements and returns the length of the literal.
func (f *fn) elements(e *ast.CompositeLit, elem types.Type) ([]element, int) {
	var list []element
	next, n := 0, 0
	for _, el := range e.Elts {
		value := el
		if kv, ok := el.(*ast.KeyValueExpr); ok {
			value = kv.Value
			k, _ := constant.Int64Val(constant.ToInt(f.info.Types[kv.Key].Value))
			next = int(k)
		}
		list = append(list, element{next, f.orderAs(value, elem)})
		next++
		n = max(n, next)
	}
	return list, n
}

func (f *fn) setElements(s string, elems []element, t types.Type) {
	for _, el := range elems {
		v := f.atomOf(el.value(), f.text(t))
		f.line("%s[%d] = %s", s, el.index, v)
	}
}

func (f *fn) mapLiteral(e *ast.CompositeLit, u *types.Map, t types.Type) late {
	kt, et := f.typ(u.Key()), f.typ(u.Elem())
	type entry struct{ key, value late }
	var list []entry
	for _, el := range e.Elts {
		kv := el.(*ast.KeyValueExpr)
		list = append(list, entry{f.orderAs(kv.Key, kt), f.orderAs(kv.Value, et)})
	}
	m := f.hold(f.text(t))
	f.line("%s = make(%s)", m, f.text(t))
	for _, en := range list {
		k := f.atomOf(en.key(), f.text(kt))
		v := f.atomOf(en.value(), f.text(et))
		f.line("%s[%s] = %s", m, k, v)
	}
	return ready(m)
}
