package lower

import (
	"go/ast"
	"go/token"
	"go/types"
	"reflect"

	"ketloom/script/machine"
)

// sliceExpr makes x[lo:hi:max].
func (f *fn) sliceExpr(e *ast.SliceExpr) late {
	t := f.typeOf(e.X)
	var base late
	var form reflect.Type
	switch u := t.Underlying().(type) {
	case *types.Array:
		p := f.orderPlace(e.X)
		form = reflect.PointerTo(f.form(t))
		base = func() string { return f.addressOf(p(), e.X) }
	case *types.Pointer:
		_ = u
		base, form = f.order(e.X), f.form(t)
	default:
		if isUntyped(t) {
			t = types.Typ[types.String]
		}
		base, form = f.orderAs(e.X, t), f.form(t)
	}
	bound := func(x ast.Expr) late {
		if x == nil {
			return nil
		}
		return f.orderInt(x)
	}
	lo, hi, max := bound(e.Low), bound(e.High), bound(e.Max)
	return func() string {
		s := f.atomOf(base(), f.c.text(form))
		if form.Kind() == reflect.Pointer {
			f.checkNil(s, e)
		}
		result := f.form(f.typeOf(e))
		name := f.c.once("slice "+f.c.text(form)+"|"+f.c.text(result), func() string { return f.c.symbol("L", f.c.sliceFunc(form, result)) })
		args := ""
		for _, b := range []late{lo, hi, max} {
			if b == nil {
				args += ", 0"
				continue
			}
			args += ", " + f.atomOf(b(), "int")
		}
		which := 0
		if lo != nil {
			which |= 1
		}
		if hi != nil {
			which |= 2
		}
		if max != nil {
			which |= 4
		}
		r := f.hold(f.c.text(result))
		f.line("%s = %s(%d, %d, %s%s)", r, name, e.Pos(), which, s, args)
		return r
	}
}

// sliceFunc slices with Go's tests. The first argument after the place says
// which bounds are given.
func (c *compiler) sliceFunc(form, result reflect.Type) reflect.Value {
	num := reflect.TypeFor[int]()
	typ := reflect.FuncOf([]reflect.Type{num, num, form, num, num, num}, []reflect.Type{result}, false)
	return reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
		pos, which, x := int(in[0].Int()), in[1].Int(), in[2]
		defer c.in.Run.Mark(token.Pos(pos))
		lo, hi, max := int(in[3].Int()), int(in[4].Int()), int(in[5].Int())
		if x.Kind() == reflect.Pointer {
			x = x.Elem()
		}
		n := x.Len()
		room := n
		if x.Kind() == reflect.Slice {
			room = x.Cap()
		}
		if which&2 == 0 {
			hi = n
		}
		checkBounds(pos, lo, hi, max, n, room, which, x.Kind())
		var r reflect.Value
		if which&4 != 0 {
			r = x.Slice3(lo, hi, max)
		} else {
			r = x.Slice(lo, hi)
		}
		if r.Type() != result {
			r = r.Convert(result)
		}
		return []reflect.Value{r}
	})
}

// checkBounds words an error of bounds as Go does: an array and a string have
// a length, a slice a capacity.
func checkBounds(pos, lo, hi, max, n, c int, which int64, kind reflect.Kind) {
	fixed := kind != reflect.Slice
	if which&2 == 0 && lo > hi { // x[lo:]
		machine.Slice(pos, lo, hi, max, n, c, false, fixed)
	}
	machine.Slice(pos, lo, hi, max, n, c, which&4 != 0, fixed)
}
