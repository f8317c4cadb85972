package lower

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"
	"strings"
	"unicode/utf8"
)

// rangeStmt makes a range loop from an endless loop with a counter.
func (f *fn) rangeStmt(s *ast.RangeStmt) {
	label := f.takeLabel()
	t := f.typeOf(s.X)
	if isUntyped(t) {
		t = types.Default(t)
		if b := t.(*types.Basic); s.Key != nil && b.Info()&types.IsString == 0 {
			t = f.storeType(s.Key)
		}
	}
	f.line("{")
	l := &loop{label: label, loops: true}
	switch u := t.Underlying().(type) {
	case *types.Basic:
		if u.Info()&types.IsString != 0 {
			f.rangeString(s, l)
		} else {
			f.rangeInteger(s, l, t)
		}
	case *types.Slice:
		x := f.hold(f.text(t))
		f.line("%s = %s", x, f.order(s.X)())
		n := f.hold("int")
		f.line("%s = len(%s)", n, x)
		f.counted(s, l, n, x, f.typ(u.Elem()))
	case *types.Array:
		f.rangeArray(s, l, t, u)
	case *types.Pointer:
		arr := u.Elem().Underlying().(*types.Array)
		p := f.hold(f.text(t))
		f.line("%s = %s", p, f.order(s.X)())
		if !isBlank(s.Value) {
			f.checkNil(p, s.X)
		}
		f.counted(s, l, fmt.Sprint(arr.Len()), "(*"+p+")", f.typ(arr.Elem()))
	case *types.Map:
		f.rangeMap(s, l, t, u)
	case *types.Chan:
		f.rangeChannel(s, l, t, u)
	case *types.Signature:
		f.rangeFunction(s, l, t, u)
	default:
		f.refuse(s, "a range over a value of type %s is not available in a script", t)
	}
	f.line("}")
}

func isBlank(e ast.Expr) bool {
	id, ok := e.(*ast.Ident)
	return e == nil || ok && id.Name == "_"
}

// set gives key and value of a turn to the script's variables.
func (f *fn) set(s *ast.RangeStmt, values ...typedValue) {
	var lhs []ast.Expr
	var vals []typedValue
	for i, e := range []ast.Expr{s.Key, s.Value} {
		if e != nil && i < len(values) {
			lhs = append(lhs, e)
			vals = append(vals, values[i])
		}
	}
	mark := len(f.taken)
	f.store(lhs, vals, s.Tok == token.DEFINE)
	f.release(mark)
}

// counted counts from zero to n over the elements of x.
func (f *fn) counted(s *ast.RangeStmt, l *loop, n, x string, elem types.Type) {
	i := f.hold("int")
	f.line("%s = 0", i)
	below := func() string { return i + " < " + n }
	f.loop(l, true, s.Body, below, func() {
		values := []typedValue{{i, types.Typ[types.Int]}}
		if !isBlank(s.Value) {
			v := f.temp(f.text(elem))
			f.line("%s = %s[%s]", v, x, i)
			values = append(values, typedValue{v, elem})
		} else if s.Value != nil {
			values = append(values, typedValue{"", elem})
		}
		f.set(s, values...)
	}, func() { f.line("%s = %s + 1", i, i) })
}

func (f *fn) rangeArray(s *ast.RangeStmt, l *loop, t types.Type, u *types.Array) {
	x := ""
	if !isBlank(s.Value) {
		x = f.hold(f.text(t))
		f.line("%s = %s", x, f.order(s.X)())
	}
	f.counted(s, l, fmt.Sprint(u.Len()), x, f.typ(u.Elem()))
}

func (f *fn) rangeInteger(s *ast.RangeStmt, l *loop, t types.Type) {
	form := f.text(t)
	n, i := f.hold(form), f.hold(form)
	f.line("%s = %s", n, f.orderAs(s.X, t)())
	f.line("%s = 0", i)
	below := func() string { return i + " < " + n }
	f.loop(l, true, s.Body, below, func() {
		f.set(s, typedValue{i, t})
	}, func() { f.line("%s = %s + 1", i, i) })
}

func (f *fn) rangeString(s *ast.RangeStmt, l *loop) {
	x, i, w, n := f.hold("string"), f.hold("int"), f.hold("int"), f.hold("int")
	t := f.typeOf(s.X)
	if isUntyped(t) {
		t = types.Typ[types.String]
	}
	f.line("%s = %s", x, f.orderAs(s.X, t)())
	f.line("%s = 0", i)
	f.line("%s = len(%s)", n, x)
	decode := f.c.once("rune", func() string {
		return f.c.symbol("U", reflect.ValueOf(func(s string, i int) (rune, int) { return utf8.DecodeRuneInString(s[i:]) }))
	})
	below := func() string { return i + " < " + n }
	f.loop(l, true, s.Body, below, func() {
		r, width := f.c.fresh("m"), f.c.fresh("m")
		f.line("%s, %s := %s(%s, %s)", r, width, decode, x, i)
		f.line("%s = %s", w, width)
		f.set(s, typedValue{i, types.Typ[types.Int]}, typedValue{r, types.Typ[types.Int32]})
	}, func() { f.line("%s = %s + %s", i, i, w) })
}

// rangeMap leaves the iteration to the interpreter.
func (f *fn) rangeMap(s *ast.RangeStmt, l *loop, t types.Type, u *types.Map) {
	m := f.hold(f.text(t))
	f.line("%s = %s", m, f.order(s.X)())
	k, v := f.c.fresh("m"), f.c.fresh("m")
	l.stop = f.c.fresh("stop")
	once := continues(s.Body, l.label, true)
	if once {
		l.turn = f.c.fresh("turn")
	}
	text, _ := f.apart(func() string {
		f.line("for %s, %s := range %s {", k, v, m)
		f.count()
		f.set(s, typedValue{k, f.typ(u.Key())}, typedValue{v, f.typ(u.Elem())})
		f.turn(l, once, s.Body)
		f.line("}")
		return ""
	})
	f.finish(l, text)
}

func (f *fn) rangeChannel(s *ast.RangeStmt, l *loop, t types.Type, u *types.Chan) {
	form := f.form(t)
	ch := f.hold(f.c.text(form))
	f.line("%s = %s", ch, f.order(s.X)())
	none := func() string { return "" }
	f.loop(l, false, s.Body, none, func() {
		v, ok := f.c.fresh("m"), f.c.fresh("m")
		f.line("%s, %s := %s(%s)", v, ok, f.c.channelFunc("receive", form), ch)
		f.line("if %s { } else { break }", ok)
		f.set(s, typedValue{v, f.typ(u.Elem())})
	}, func() {})
}

// yield is the body of a range over a function, lowered to a function. It says
// in control why the loop ended: 0 it did not, 1 break, 2 return, and from 3 on
// a branch of the function around.
type yield struct {
	label   string
	control *variable
	exits   []*ast.BranchStmt
	returns bool // some return statement is inside
}

func (f *fn) rangeFunction(s *ast.RangeStmt, l *loop, t types.Type, u *types.Signature) {
	if defers(s.Body) {
		f.refuse(s, "defer in the body of a range over a function is not available; put the body into a function")
	}
	fun := f.hold(f.c.text(f.c.funcForm(u, f.pos)))
	x := f.order(s.X)
	value := f.atomOf(x(), f.text(t))
	if form := f.form(t); form.PkgPath() != "" {
		value = f.convertFunction(value, form, f.c.funcForm(u, f.pos))
	}
	f.line("%s = %s", fun, value)
	control := f.synthetic("control", "int", true)
	f.initialise(control, "0")
	g := f.c.newFn(f, f.info)
	g.yield = &yield{label: l.label, control: control}
	g.results, g.boxes = f.results, f.boxes
	g.defers, g.recover = nil, nil
	body := u.Params().At(0).Type().Underlying().(*types.Signature)
	text := g.yieldBody(s, body)
	f.line("if %s == nil { h.Nil(%d) }", fun, s.X.Pos())
	f.line("%s(%s)", fun, f.close(g, text, f.c.text(f.c.funcForm(body, f.pos))))
	f.afterYield(g.yield)
}

func (f *fn) yieldBody(s *ast.RangeStmt, sig *types.Signature) string {
	var params []string
	var values []typedValue
	for i, t := range f.tuple(sig.Params()) {
		name := fmt.Sprintf("y%d", i)
		params = append(params, name+" "+f.text(t))
		values = append(values, typedValue{name, t})
	}
	f.line("if %s != 0 { h.Continued(%d) }", f.use(f.yield.control), s.Pos())
	f.count()
	f.set(s, values...)
	f.block(s.Body.List)
	f.line("return true")
	return fmt.Sprintf("(%s) (bool) {\n%s%s}", strings.Join(params, ", "), f.header(), f.buf.String())
}

// leaveYield leaves the body of a range over a function.
func (f *fn) leaveYield(s *ast.BranchStmt) {
	y := f.yield
	if y == nil {
		f.refuse(s, "this %s is not available in a script", s.Tok)
	}
	own := s.Label == nil || s.Label.Name == y.label
	switch {
	case own && s.Tok == token.CONTINUE:
		f.line("return true")
		return
	case own:
		f.line("*%s = 1", f.pointer(y.control))
	default:
		y.exits = append(y.exits, s)
		f.line("*%s = %d", f.pointer(y.control), 2+len(y.exits))
	}
	f.line("return false")
}

// yieldReturn is a return statement in the body of a range over a function.
func (f *fn) yieldReturn(s *ast.ReturnStmt) {
	if len(s.Results) > 0 {
		f.setBoxes(f.returnValues(s))
	}
	f.yield.returns = true
	f.line("*%s = 2", f.pointer(f.yield.control))
	f.line("return false")
}

// afterYield does in the function around what the body asked for.
func (f *fn) afterYield(y *yield) {
	if y.returns {
		f.line("if %s == 2 {", f.use(y.control))
		f.returnOutwards()
		f.line("}")
	}
	for i, s := range y.exits {
		f.line("if %s == %d {", f.use(y.control), 3+i)
		f.leave(s)
		f.line("}")
	}
}

// returnOutwards returns what a body inside has left in the result variables.
func (f *fn) returnOutwards() {
	switch {
	case f.yield != nil:
		f.yield.returns = true
		f.line("*%s = 2", f.pointer(f.yield.control))
		f.line("return false")
	case f.inner:
		f.line("return")
	default:
		f.returnBoxes()
	}
}

// returnsFromRange says that a return statement stands in the body of a range
// over a function.
func returnsFromRange(body *ast.BlockStmt, f *fn) bool {
	found := false
	var walk func(n ast.Node, inside bool)
	walk = func(n ast.Node, inside bool) {
		ast.Inspect(n, func(m ast.Node) bool {
			switch m := m.(type) {
			case *ast.FuncLit:
				return false
			case *ast.RangeStmt:
				t := f.typeOf(m.X)
				if _, ok := t.Underlying().(*types.Signature); ok && m != n {
					walk(m.Body, true)
					return false
				}
			case *ast.ReturnStmt:
				found = found || inside
			}
			return true
		})
	}
	walk(body, false)
	return found
}
