package lower

import (
	"bytes"
	"fmt"
	"go/ast"
	"go/constant"
	"go/token"
	"go/types"
	"reflect"
)

func (f *fn) binary(e *ast.BinaryExpr) late {
	switch e.Op {
	case token.LAND, token.LOR:
		return f.logical(e)
	case token.EQL, token.NEQ:
		return f.equality(e)
	case token.LSS, token.LEQ, token.GTR, token.GEQ:
		t := f.operandType(e)
		x, y := f.orderOperand(e.X, t), f.orderOperand(e.Y, t)
		return func() string {
			a, b := x(), y()
			return "(" + a + " " + e.Op.String() + " " + b + ")"
		}
	case token.SHL, token.SHR:
		x := f.orderAs(e.X, f.typeOf(e))
		y := f.order(e.Y)
		return func() string { a := x(); return f.shift(a, e.Op, y(), e.Y, f.typeOf(e)) }
	}
	t := f.typeOf(e)
	x, y := f.orderOperand(e.X, t), f.orderOperand(e.Y, t)
	return func() string { a := x(); return f.arithmetic(a, e.Op, y(), t, e.Y, e.OpPos) }
}

// operandType is the type in which a comparison is made.
func (f *fn) operandType(e *ast.BinaryExpr) types.Type {
	x, y := f.typeOf(e.X), f.typeOf(e.Y)
	if isUntyped(x) {
		if isUntyped(y) {
			return types.Default(x)
		}
		return y
	}
	return x
}

// orderOperand orders an operand of type t; a constant becomes a literal where
// the interpreter reads it rightly beside a variable.
func (f *fn) orderOperand(e ast.Expr, t types.Type) late {
	if v := f.info.Types[e].Value; v != nil {
		if s, ok := operand(v, t); ok {
			return ready(s)
		}
	}
	return f.orderAs(e, t)
}

// arithmetic combines two values of type t. y is the source of the second, or
// nil; it is asked whether it is a constant.
func (f *fn) arithmetic(a string, op token.Token, b string, t types.Type, y ast.Expr, pos token.Pos) string {
	basic := t.Underlying().(*types.Basic)
	info := basic.Info()
	if info&types.IsInteger != 0 && (op == token.QUO || op == token.REM) && !f.nonZero(y) {
		b = f.atomOf(b, f.text(t))
		f.line("if %s == 0 { h.Divide(%d) }", b, pos)
	}
	if info&types.IsComplex != 0 {
		return f.complexArithmetic(a, op, b, t)
	}
	s := "(" + a + " " + op.String() + " " + b + ")"
	if info&types.IsString != 0 {
		s = f.atomOf(s, f.text(t))
		f.bounded("len("+s+")", reflect.TypeFor[byte]())
	}
	return s
}

func (f *fn) nonZero(y ast.Expr) bool {
	if y == nil {
		return false
	}
	v := f.info.Types[y].Value
	return v != nil && constant.Sign(v) != 0
}

// complexArithmetic is made by compiled code: the interpreter computes complex64
// in double precision.
func (f *fn) complexArithmetic(a string, op token.Token, b string, t types.Type) string {
	form := f.form(t)
	if form.Kind() == reflect.Complex128 {
		r := f.temp(f.text(t))
		f.line("%s = %s %s %s", r, f.atomOf(a, f.text(t)), op, f.atomOf(b, f.text(t)))
		return r
	}
	name := f.c.once("complex64 "+op.String(), func() string {
		return f.c.symbol("F", reflect.ValueOf(map[token.Token]any{
			token.ADD: func(x, y complex64) complex64 { return x + y },
			token.SUB: func(x, y complex64) complex64 { return x - y },
			token.MUL: func(x, y complex64) complex64 { return x * y },
			token.QUO: func(x, y complex64) complex64 { return x / y },
		}[op]))
	})
	r := f.temp(f.text(t))
	a, b = f.atomOf(a, f.text(t)), f.atomOf(b, f.text(t))
	f.line("%s = %s(%s, %s)", r, name, a, b)
	return r
}

// shift shifts a of type t; y is the source of the count.
func (f *fn) shift(a string, op token.Token, count string, y ast.Expr, t types.Type) string {
	if f.info.Types[y].Value == nil {
		ct := f.typeOf(y)
		count = f.atomOf(count, f.text(ct))
		if b := ct.Underlying().(*types.Basic); b.Info()&types.IsUnsigned == 0 {
			f.line("if %s < 0 { h.Shift(%d) }", count, y.Pos())
		}
		count = "uint64(" + count + ")"
		count = f.atomOf(count, "uint64")
	} else if v, ok := constant.Uint64Val(constant.ToInt(f.info.Types[y].Value)); ok {
		count = fmt.Sprint(min(v, 64))
	}
	a = f.atomOf(a, f.text(t))
	r := f.temp(f.text(t))
	f.line("%s = %s %s %s", r, a, op, count)
	return r
}

// logical makes && and ||. If the second operand has nothing to do first, the
// interpreter's own operator serves.
func (f *fn) logical(e *ast.BinaryExpr) late {
	x := f.order(e.X)
	second, y := f.apart(func() string { return f.now(e.Y) })
	if second == "" {
		return func() string { a := x(); return "(" + a + " " + e.Op.String() + " " + y + ")" }
	}
	r := f.hold("bool")
	f.line("%s = %s", r, x())
	if e.Op == token.LAND {
		f.line("if %s {", r)
	} else {
		f.line("if !%s {", r)
	}
	f.buf.WriteString(second)
	f.line("%s = %s", r, y)
	f.line("}")
	return ready(r)
}

// apart collects what do emits instead of emitting it. Temporaries taken
// inside stay taken.
func (f *fn) apart(do func() string) (string, string) {
	saved := f.buf
	f.buf = &bytes.Buffer{}
	defer func() { f.buf = saved }()
	s := do()
	return f.buf.String(), s
}

func (f *fn) unary(e *ast.UnaryExpr) late {
	switch e.Op {
	case token.AND:
		return f.address(e)
	case token.ARROW:
		return ready(f.receive(e, false)[0])
	}
	t := f.typeOf(e)
	x := f.order(e.X)
	return func() string {
		a := f.atomOf(x(), f.text(t))
		switch e.Op {
		case token.NOT:
			return "(!" + a + ")"
		case token.SUB:
			return f.negate(a, t)
		case token.XOR:
			return f.complement(a, t)
		}
		return a
	}
}

func (f *fn) negate(a string, t types.Type) string {
	info := t.Underlying().(*types.Basic).Info()
	switch {
	case info&types.IsInteger != 0:
		return "(0 - " + a + ")"
	case info&types.IsComplex != 0:
		name := f.c.once("negate "+f.text(t), func() string {
			if f.form(t).Kind() == reflect.Complex64 {
				return f.c.symbol("F", reflect.ValueOf(func(z complex64) complex64 { return -z }))
			}
			return f.c.symbol("F", reflect.ValueOf(func(z complex128) complex128 { return -z }))
		})
		r := f.temp(f.text(t))
		f.line("%s = %s(%s)", r, name, a)
		return r
	}
	return "(-" + a + ")"
}

// complement is the exclusive or with all ones.
func (f *fn) complement(a string, t types.Type) string {
	b := t.Underlying().(*types.Basic)
	ones := constant.MakeInt64(-1)
	if b.Info()&types.IsUnsigned != 0 {
		size := uint(f.form(t).Bits())
		ones = constant.BinaryOp(constant.Shift(constant.MakeInt64(1), token.SHL, size), token.SUB, constant.MakeInt64(1))
	}
	return "(" + a + " ^ " + f.c.constant(ones, t, f.pos) + ")"
}

// address is &x for a place or a literal.
func (f *fn) address(e *ast.UnaryExpr) late {
	if lit, ok := ast.Unparen(e.X).(*ast.CompositeLit); ok {
		return f.pointerLiteral(lit)
	}
	p := f.orderPlace(e.X)
	return func() string { return f.addressOf(p(), e) }
}

// addressOf returns a pointer to p.
func (f *fn) addressOf(p place, n ast.Node) string {
	if p.folded != nil {
		f.refuse(n, "the address of a field whose type refers to its own struct is not available; take the address of the struct")
	}
	if len(p.s) > 3 && p.s[0] == '(' && p.s[1] == '*' && isAtom(p.s[2:len(p.s)-1]) {
		return p.s[2 : len(p.s)-1]
	}
	if isAtom(p.s) {
		f.refuse(n, "the address of this expression is not available; put it in a variable first")
	}
	t := f.temp("*" + f.text(p.typ))
	f.line("%s = &%s", t, p.s)
	return t
}
