package lower

import (
	"go/ast"
	"go/token"
	"go/types"
	"reflect"

	"ketloom/script/machine"
)

// equality makes == and !=.
func (f *fn) equality(e *ast.BinaryExpr) late {
	for _, side := range [2][2]ast.Expr{{e.X, e.Y}, {e.Y, e.X}} {
		if f.info.Types[side[1]].IsNil() {
			return f.nilTest(side[0], e.Op)
		}
	}
	tx, ty := f.operandType(e), f.typeOf(e.Y)
	if isUntyped(ty) {
		ty = tx
	}
	if isInterface(tx) != isInterface(ty) {
		t := tx
		if isInterface(ty) {
			t = ty
		}
		x, y := f.orderAs(e.X, t), f.orderAs(e.Y, t)
		return func() string { a := x(); return f.equal(a, y(), t, e.Op, e) }
	}
	x, y := f.orderOperand(e.X, tx), f.orderOperand(e.Y, tx)
	return func() string { a := x(); return f.equal(a, y(), tx, e.Op, e) }
}

func (f *fn) nilTest(e ast.Expr, op token.Token) late {
	if f.info.Types[e].IsNil() {
		return ready("true")
	}
	x := f.order(e)
	return func() string {
		a := f.atomOf(x(), f.text(f.typeOf(e)))
		return "(" + a + " " + op.String() + " nil)"
	}
}

// equal compares two values of type t.
func (f *fn) equal(a, b string, t types.Type, op token.Token, n ast.Node) string {
	if basic, ok := t.Underlying().(*types.Basic); ok && basic.Info()&types.IsComplex == 0 {
		return "(" + a + " " + op.String() + " " + b + ")"
	}
	form := f.form(t)
	name := f.c.once("equal "+f.c.text(form), func() string { return f.c.symbol("E", f.c.equalFunc(form)) })
	a, b = f.atomOf(a, f.c.text(form)), f.atomOf(b, f.c.text(form))
	r := f.temp("bool")
	f.line("%s = %s(%d, %s, %s)", r, name, n.Pos(), a, b)
	if op == token.NEQ {
		return "(!" + r + ")"
	}
	return r
}

// equalFunc compares as compiled code does, after taking away what stands
// between interfaces and a script's values.
func (c *compiler) equalFunc(form reflect.Type) reflect.Value {
	typ := reflect.FuncOf([]reflect.Type{reflect.TypeFor[int](), form, form}, []reflect.Type{reflect.TypeFor[bool]()}, false)
	return reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
		defer c.in.Run.Mark(token.Pos(in[0].Int()))
		return []reflect.Value{reflect.ValueOf(machine.Plain(in[1].Interface()) == machine.Plain(in[2].Interface()))}
	})
}
