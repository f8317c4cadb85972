package lower

import (
	"go/ast"
	"go/token"
	"go/types"
	"reflect"
	"strings"
)

// receive makes <-ch.
func (f *fn) receive(e *ast.UnaryExpr, two bool) []string {
	t := f.typeOf(e.X)
	form := f.form(t)
	x := f.order(e.X)
	s := f.atomOf(x(), f.c.text(form))
	if two {
		v, ok := f.c.fresh("m"), f.c.fresh("m")
		f.line("%s, %s := %s(%s)", v, ok, f.c.channelFunc("receive", form), s)
		return []string{v, ok}
	}
	r := f.temp(f.c.text(form.Elem()))
	f.line("%s = %s(%s)", r, f.c.channelFunc("take", form), s)
	return []string{r}
}

func (f *fn) sendStmt(s *ast.SendStmt) {
	form := f.form(f.typeOf(s.Chan))
	elem := f.typ(f.typeOf(s.Chan).Underlying().(*types.Chan).Elem())
	ch, v := f.order(s.Chan), f.orderAs(s.Value, elem)
	c := f.atomOf(ch(), f.c.text(form))
	f.line("%s(%d, %s, %s)", f.c.channelFunc("send", form), s.Pos(), c, f.atomOf(v(), f.text(elem)))
}

// channelFunc returns the symbol for an operation on channels of one form.
func (c *compiler) channelFunc(op string, form reflect.Type) string {
	return c.once(op+" "+c.text(form), func() string {
		run, num := c.in.Run, reflect.TypeFor[int]()
		make := func(in, out []reflect.Type, f func([]reflect.Value) []reflect.Value) string {
			return c.symbol("H", reflect.MakeFunc(reflect.FuncOf(in, out, false), f))
		}
		switch op {
		case "take":
			return make([]reflect.Type{form}, []reflect.Type{form.Elem()}, func(in []reflect.Value) []reflect.Value {
				v, _ := run.Recv(in[0])
				return []reflect.Value{v}
			})
		case "receive":
			return make([]reflect.Type{form}, []reflect.Type{form.Elem(), reflect.TypeFor[bool]()}, func(in []reflect.Value) []reflect.Value {
				v, ok := run.Recv(in[0])
				return []reflect.Value{v, reflect.ValueOf(ok)}
			})
		case "send":
			return make([]reflect.Type{num, form, form.Elem()}, nil, func(in []reflect.Value) []reflect.Value {
				defer run.Mark(token.Pos(in[0].Int()))
				run.Send(in[1], in[2])
				return nil
			})
		case "close":
			return make([]reflect.Type{num, form}, nil, func(in []reflect.Value) []reflect.Value {
				defer run.Mark(token.Pos(in[0].Int()))
				in[1].Close()
				return nil
			})
		case "len":
			return make([]reflect.Type{num, form}, []reflect.Type{num}, func(in []reflect.Value) []reflect.Value {
				return []reflect.Value{reflect.ValueOf(in[1].Len())}
			})
		}
		return make([]reflect.Type{num, form}, []reflect.Type{num}, func(in []reflect.Value) []reflect.Value {
			return []reflect.Value{reflect.ValueOf(in[1].Cap())}
		})
	})
}

// selectStmt makes a select statement: the machine chooses the case, and the
// bodies follow as a chain of tests.
func (f *fn) selectStmt(s *ast.SelectStmt) {
	label := f.takeLabel()
	var in []reflect.Type
	var args []string
	var cases []reflect.SelectDir
	var bodies []*ast.CommClause
	var other *ast.CommClause
	var elems []reflect.Type
	for _, c := range s.Body.List {
		cc := c.(*ast.CommClause)
		if cc.Comm == nil {
			other = cc
			continue
		}
		bodies = append(bodies, cc)
		dir, chForm, parts := f.commCase(cc.Comm)
		cases = append(cases, dir)
		in = append(in, chForm)
		args = append(args, parts[0])
		elems = append(elems, chForm.Elem())
		if dir == reflect.SelectSend {
			in = append(in, chForm.Elem())
			args = append(args, parts[1])
		}
	}
	name := f.c.selectFunc(in, cases, elems, other != nil)
	which, ok := f.c.fresh("m"), f.c.fresh("m")
	values := []string{}
	for range elems {
		values = append(values, f.c.fresh("m"))
	}
	f.line("%s := %s(%s)", strings.Join(append([]string{which, ok}, values...), ", "), name, strings.Join(args, ", "))
	f.breakable(label, s.Body, func() {
		for i, cc := range bodies {
			f.line("if %s == %d {", which, i)
			f.received(cc.Comm, values[i], ok)
			f.block(cc.Body)
			f.line("} else {")
		}
		if other != nil {
			f.block(other.Body)
		}
		f.buf.WriteString(strings.Repeat("}\n", len(bodies)))
	})
}

// commCase computes channel and value of one case.
func (f *fn) commCase(s ast.Stmt) (reflect.SelectDir, reflect.Type, []string) {
	if send, ok := s.(*ast.SendStmt); ok {
		form := f.form(f.typeOf(send.Chan))
		elem := f.typ(f.typeOf(send.Chan).Underlying().(*types.Chan).Elem())
		ch, v := f.order(send.Chan), f.orderAs(send.Value, elem)
		c := f.atomOf(ch(), f.c.text(form))
		return reflect.SelectSend, form, []string{c, f.atomOf(v(), f.text(elem))}
	}
	x := receiveOf(s)
	form := f.form(f.typeOf(x.X))
	return reflect.SelectRecv, form, []string{f.atom(x.X)}
}

func receiveOf(s ast.Stmt) *ast.UnaryExpr {
	switch s := s.(type) {
	case *ast.ExprStmt:
		return ast.Unparen(s.X).(*ast.UnaryExpr)
	case *ast.AssignStmt:
		return ast.Unparen(s.Rhs[0]).(*ast.UnaryExpr)
	}
	return nil
}

// received stores what a receive case got.
func (f *fn) received(s ast.Stmt, value, ok string) {
	as, isAssign := s.(*ast.AssignStmt)
	if !isAssign {
		return
	}
	elem := f.typ(f.typeOf(receiveOf(s).X).Underlying().(*types.Chan).Elem())
	vals := []typedValue{{value, elem}}
	if len(as.Lhs) == 2 {
		vals = append(vals, typedValue{ok, types.Typ[types.Bool]})
	}
	f.store(as.Lhs, vals, as.Tok == token.DEFINE)
}

func (c *compiler) selectFunc(in []reflect.Type, dirs []reflect.SelectDir, elems []reflect.Type, other bool) string {
	out := append([]reflect.Type{reflect.TypeFor[int](), reflect.TypeFor[bool]()}, elems...)
	run := c.in.Run
	return c.symbol("H", reflect.MakeFunc(reflect.FuncOf(in, out, false), func(in []reflect.Value) []reflect.Value {
		var cases []reflect.SelectCase
		k := 0
		for _, dir := range dirs {
			sc := reflect.SelectCase{Dir: dir, Chan: in[k]}
			k++
			if dir == reflect.SelectSend {
				sc.Send = in[k]
				k++
			}
			cases = append(cases, sc)
		}
		i, v, ok := run.Select(cases, other)
		res := []reflect.Value{reflect.ValueOf(i), reflect.ValueOf(ok)}
		for j, t := range elems {
			if j == i && ok {
				res = append(res, v)
			} else {
				res = append(res, reflect.Zero(t))
			}
		}
		return res
	}))
}
