package lower

import (
	"go/ast"
	"go/constant"
	"go/token"
	"go/types"
	"reflect"
)

// typedValue is a computed value and its type.
type typedValue struct {
	s string
	t types.Type
}

func (f *fn) assignStmt(s *ast.AssignStmt) {
	switch s.Tok {
	case token.ASSIGN, token.DEFINE:
		f.assignAll(s.Lhs, s.Rhs, s.Tok == token.DEFINE, nil)
	default:
		f.opAssign(s.Lhs[0], operators[s.Tok], s.Rhs[0], s.TokPos)
	}
}

var oneConstant = constant.MakeInt64(1)

var operators = map[token.Token]token.Token{
	token.ADD_ASSIGN: token.ADD, token.SUB_ASSIGN: token.SUB, token.MUL_ASSIGN: token.MUL, token.QUO_ASSIGN: token.QUO,
	token.REM_ASSIGN: token.REM, token.AND_ASSIGN: token.AND, token.OR_ASSIGN: token.OR, token.XOR_ASSIGN: token.XOR,
	token.SHL_ASSIGN: token.SHL, token.SHR_ASSIGN: token.SHR, token.AND_NOT_ASSIGN: token.AND_NOT,
}

// assignAll assigns or defines. declared is the type of a var declaration.
func (f *fn) assignAll(lhs, rhs []ast.Expr, define bool, declared types.Type) {
	if len(lhs) > 1 && len(rhs) == 1 {
		f.storeAs(lhs, f.several(rhs[0]), define, declared)
		return
	}
	if len(lhs) == 1 {
		f.assignOne(lhs[0], rhs[0], define, declared)
		return
	}
	f.assignTuple(lhs, rhs, define, declared)
}

// targetType is the type to which the value for one target is converted.
func (f *fn) targetType(lhs, rhs ast.Expr, declared types.Type) types.Type {
	if declared != nil {
		return declared
	}
	if id, ok := lhs.(*ast.Ident); ok {
		if id.Name == "_" {
			return types.Default(f.typeOf(rhs))
		}
		if obj := f.info.Defs[id]; obj != nil {
			return f.typ(obj.Type())
		}
	}
	return f.typeOf(lhs)
}

func (f *fn) assignOne(lhs, rhs ast.Expr, define bool, declared types.Type) {
	t := f.targetType(lhs, rhs, declared)
	if id, ok := lhs.(*ast.Ident); ok {
		if id.Name == "_" {
			if !f.info.Types[rhs].IsNil() {
				f.atomOf(f.orderAs(rhs, t)(), f.text(t))
			}
			return
		}
		if obj := f.info.Defs[id]; obj != nil && define {
			value := f.orderAs(rhs, t)()
			if f.c.facts[obj].shared() {
				value = f.atomOf(value, f.text(t))
			}
			f.initialise(f.declare(obj), value)
			return
		}
	}
	p := f.orderPlace(lhs)
	v := f.orderAs(rhs, t)
	value := v()
	if _, ok := ast.Unparen(lhs).(*ast.Ident); ok {
		f.assign(p(), value)
		return
	}
	value = f.atomOf(value, f.text(t))
	f.assign(p(), value)
}

// assignTuple is a parallel assignment: all operands first, then the values,
// then the stores from left to right.
func (f *fn) assignTuple(lhs, rhs []ast.Expr, define bool, declared types.Type) {
	places := make([]func() place, len(lhs))
	lates := make([]late, len(rhs))
	ts := make([]types.Type, len(rhs))
	for i := range lhs {
		ts[i] = f.targetType(lhs[i], rhs[i], declared)
		places[i] = f.target(lhs[i], define)
	}
	for i := range rhs {
		if id, ok := lhs[i].(*ast.Ident); ok && id.Name == "_" && f.info.Types[rhs[i]].IsNil() {
			lates[i] = ready("0")
			continue
		}
		lates[i] = f.orderAs(rhs[i], ts[i])
	}
	// What a place is found by must not change before it is stored to.
	f.copying = true
	found := make([]place, len(lhs))
	for i := range lhs {
		if places[i] != nil {
			found[i] = places[i]()
		}
	}
	f.copying = false
	values := make([]typedValue, len(rhs))
	for i, l := range lates {
		v := f.hold(f.text(ts[i]))
		f.line("%s = %s", v, l())
		values[i] = typedValue{v, ts[i]}
	}
	for i, v := range values {
		f.storeTo(lhs[i], found[i], v, define)
	}
}

// target returns what yields the place of a target, or nil for a new variable
// and for the blank name.
func (f *fn) target(e ast.Expr, define bool) func() place {
	if id, ok := e.(*ast.Ident); ok {
		if id.Name == "_" || define && f.info.Defs[id] != nil {
			return nil
		}
	}
	return f.orderPlace(e)
}

// store assigns computed values to targets.
func (f *fn) store(lhs []ast.Expr, values []typedValue, define bool) {
	f.storeAs(lhs, values, define, nil)
}

func (f *fn) storeAs(lhs []ast.Expr, values []typedValue, define bool, declared types.Type) {
	places := make([]func() place, len(lhs))
	for i, e := range lhs {
		places[i] = f.target(e, define)
	}
	f.copying = len(lhs) > 1
	found := make([]place, len(lhs))
	for i := range lhs {
		if places[i] != nil {
			found[i] = places[i]()
		}
	}
	f.copying = false
	for i, v := range values {
		if id, ok := lhs[i].(*ast.Ident); ok && id.Name == "_" {
			continue
		}
		t := declared
		if t == nil {
			t = f.storeType(lhs[i])
		}
		f.storeTo(lhs[i], found[i], typedValue{f.implicit(v.s, v.t, t), t}, define)
	}
}

func (f *fn) storeType(e ast.Expr) types.Type {
	if id, ok := e.(*ast.Ident); ok {
		if obj := f.info.Defs[id]; obj != nil {
			return f.typ(obj.Type())
		}
		if obj := f.info.Uses[id]; obj != nil {
			return f.typ(obj.Type())
		}
	}
	return f.typeOf(e)
}

// storeTo assigns to a place, or declares the variable.
func (f *fn) storeTo(e ast.Expr, p place, v typedValue, define bool) {
	if id, ok := e.(*ast.Ident); ok {
		if id.Name == "_" {
			return
		}
		if obj := f.info.Defs[id]; obj != nil && define {
			f.initialise(f.declare(obj), v.s)
			return
		}
	}
	f.assign(p, v.s)
}

// several computes an expression with several values.
func (f *fn) several(e ast.Expr) []typedValue {
	var names []string
	var ts []types.Type
	switch e := ast.Unparen(e).(type) {
	case *ast.CallExpr:
		names = f.call(e)
		ts = f.tuple(f.info.TypeOf(e).(*types.Tuple))
	case *ast.TypeAssertExpr:
		names = f.assertion(e, true)
		ts = []types.Type{f.typeOf(e.Type), types.Typ[types.Bool]}
	case *ast.UnaryExpr:
		names = f.receive(e, true)
		ts = []types.Type{f.typ(f.typeOf(e.X).Underlying().(*types.Chan).Elem()), types.Typ[types.Bool]}
	case *ast.IndexExpr:
		names, ts = f.entry(e)
	}
	var list []typedValue
	for i, n := range names {
		list = append(list, typedValue{n, ts[i]})
	}
	return list
}

// entry reads a map entry and whether it is there.
func (f *fn) entry(e *ast.IndexExpr) ([]string, []types.Type) {
	u := f.typeOf(e.X).Underlying().(*types.Map)
	p := f.mapPlace(e, u)()
	v, ok := f.c.fresh("t"), f.temp("bool")
	if f.form(p.typ).Kind() == reflect.Func {
		f.line("_, %s = %s", ok, p.s)
		return []string{f.current(p), ok}, []types.Type{p.typ, types.Typ[types.Bool]}
	}
	f.line("var %s %s", v, f.text(p.typ))
	f.line("%s, %s = %s", v, ok, p.s)
	return []string{v, ok}, []types.Type{p.typ, types.Typ[types.Bool]}
}

// opAssign is x op= y; x is found once.
func (f *fn) opAssign(lhs ast.Expr, op token.Token, rhs ast.Expr, pos token.Pos) {
	t := f.typeOf(lhs)
	place := f.orderPlace(lhs)
	var y late
	if op == token.SHL || op == token.SHR {
		y = f.order(rhs)
	} else {
		y = f.orderOperand(rhs, t)
	}
	p := place()
	old := f.current(p)
	b := y()
	var value string
	if op == token.SHL || op == token.SHR {
		value = f.shift(old, op, b, rhs, t)
	} else {
		value = f.arithmetic(old, op, b, t, rhs, pos)
	}
	f.assign(p, value)
}

// current reads a place whose parts have been computed.
func (f *fn) current(p place) string {
	if p.m == "" {
		return f.read(p)
	}
	t := f.temp(f.text(p.typ))
	if f.form(p.typ).Kind() != reflect.Func {
		f.line("%s = %s", t, p.s)
		return t
	}
	f.line("%s = %s(%s, %s)", t, f.c.entryFunc(p, f), p.m, p.k)
	return t
}

// entryFunc reads entries of maps of functions, which the interpreter cannot.
func (c *compiler) entryFunc(p place, f *fn) string {
	m := f.form(p.typ)
	key := f.form(p.key)
	form := reflect.MapOf(key, m)
	return c.once("entry "+c.text(form), func() string {
		return c.symbol("G", reflect.MakeFunc(reflect.FuncOf([]reflect.Type{form, key}, []reflect.Type{m}, false), func(in []reflect.Value) []reflect.Value {
			if v := in[0].MapIndex(in[1]); v.IsValid() {
				return []reflect.Value{v}
			}
			return []reflect.Value{reflect.Zero(m)}
		}))
	})
}

func (f *fn) incDec(s *ast.IncDecStmt) {
	t := f.typeOf(s.X)
	p := f.orderPlace(s.X)()
	op := token.ADD
	if s.Tok == token.DEC {
		op = token.SUB
	}
	one := "1"
	switch b := t.Underlying().(*types.Basic); {
	case b.Info()&types.IsFloat != 0:
		one = "1.0"
	case b.Info()&types.IsComplex != 0:
		one = f.c.constant(oneConstant, t, f.pos)
	}
	f.assign(p, f.arithmetic(f.current(p), op, one, t, nil, s.TokPos))
}
