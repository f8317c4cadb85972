package lower

import (
	"fmt"
	"go/ast"
	"go/types"
	"reflect"
	"strings"

	"ketloom/script/machine"
)

// deferring lowers a function with deferred calls: its body becomes a function
// of its own, which the machine runs and follows with the deferred calls. The
// results live in variables that both share.
func (f *fn) deferring(s signature) {
	f.sharedResults(s)
	ds := f.synthetic("ds", f.c.text(reflect.TypeFor[*machine.Defers]()), false)
	f.initialise(ds, "h.NewDefers()")
	g := f.c.newFn(f, f.info)
	g.defers = ds
	g.recover = f.recover
	g.boxes, g.results = f.boxes, f.results
	g.inner = true
	g.block(s.body.List)
	text := fmt.Sprintf("() {\n%s%s}", g.header(), g.buf.String())
	body := f.close(g, text, "func() ()")
	f.line("h.Do(%s, %s)", f.use(ds), body)
	f.returnBoxes()
}

// sharedResults puts every result into a variable behind a pointer.
func (f *fn) sharedResults(s signature) {
	for r := range s.results.Variables() {
		if r.Name() == "" || r.Name() == "_" {
			v := f.synthetic("r", f.text(f.typ(r.Type())), true)
			f.initialise(v, "")
			f.boxes = append(f.boxes, v)
			continue
		}
		v := f.declare(r)
		v.boxed = true
		f.initialise(v, "")
		f.boxes = append(f.boxes, v)
	}
}

// returnBoxes returns what the result variables hold.
func (f *fn) returnBoxes() {
	if len(f.boxes) == 0 {
		f.line("return")
		return
	}
	var list []string
	for _, v := range f.boxes {
		t := f.temp(v.form)
		f.line("%s = %s", t, f.use(v))
		list = append(list, t)
	}
	f.line("return %s", strings.Join(list, ", "))
}

// deferStmt fixes function and arguments now and leaves the call for later.
func (f *fn) deferStmt(s *ast.DeferStmt) {
	if f.defers == nil {
		f.refuse(s, "defer in the body of a range over a function is not available; put the body into a function")
	}
	call := f.delayed(s.Call, true)
	f.line("h.Push(%s, %s)", f.use(f.defers), call)
}

func (f *fn) goStmt(s *ast.GoStmt) {
	f.line("h.Go(%s)", f.delayed(s.Call, false))
}

// delayed makes a closure without parameters that makes the call.
func (f *fn) delayed(e *ast.CallExpr, deferred bool) string {
	if lit, ok := ast.Unparen(e.Fun).(*ast.FuncLit); ok && len(e.Args) == 0 {
		if sig := f.typeOf(lit).(*types.Signature); sig.Results().Len() == 0 {
			return f.delayedLiteral(lit, deferred)
		}
	}
	if lit, ok := ast.Unparen(e.Fun).(*ast.FuncLit); ok && deferred && recovers(lit) {
		f.refuse(e, "recover in a deferred function with parameters or results is not available; defer a function literal without any")
	}
	p := f.delayedCall(e)
	name := f.c.fresh("lit")
	var params, args, inner []string
	if !p.direct {
		p.args = append([]string{p.text}, p.args...)
		p.forms = append([]string{""}, p.forms...)
	}
	for i, a := range p.args {
		if p.forms[i] == "" {
			p.forms[i] = f.text(f.typeOf(e.Fun).Underlying())
		}
		params = append(params, fmt.Sprintf("a%d %s", i, p.forms[i]))
		args = append(args, a)
		inner = append(inner, fmt.Sprintf("a%d", i))
	}
	text := p.text
	if !p.direct {
		text, inner = inner[0], inner[1:]
	}
	call := text + "(" + strings.Join(inner, ", ") + ")"
	if n := len(p.results); n > 0 {
		call = numbered(n) + " := " + call
	}
	fmt.Fprintf(&f.c.out, "func %s(%s) func() () { return func() {\n%s\n} }\n", name, strings.Join(params, ", "), call)
	t := f.temp("func() ()")
	f.line("%s = %s(%s)", t, name, strings.Join(args, ", "))
	return t
}

// numbered is a list of n names.
func numbered(n int) string {
	var list []string
	for i := range n {
		list = append(list, fmt.Sprintf("w%d", i))
	}
	return strings.Join(list, ", ")
}

// delayedCall prepares the call; a predeclared function is put into a literal.
func (f *fn) delayedCall(e *ast.CallExpr) *prepared {
	if name, ok := f.builtinName(e.Fun); ok {
		return f.delayedBuiltin(name, e)
	}
	return f.prepare(e)
}

// delayedBuiltin is a deferred call of a predeclared function.
func (f *fn) delayedBuiltin(name string, e *ast.CallExpr) *prepared {
	switch name {
	case "close":
		form := f.form(f.typeOf(e.Args[0]))
		return &prepared{f: f, text: f.c.channelFunc("close", form), direct: true,
			args: []string{fmt.Sprint(e.Pos()), f.atom(e.Args[0])}, forms: []string{"int", f.c.text(form)}}
	case "panic":
		x := f.orderAs(e.Args[0], types.NewInterfaceType(nil, nil))
		return &prepared{f: f, text: "h.Throw", direct: true,
			args: []string{fmt.Sprint(e.Pos()), f.atomOf(x(), "h.Any")}, forms: []string{"int", "h.Any"}}
	}
	f.refuse(e, "%s cannot be deferred or run in a goroutine in a script; put it into a function literal", name)
	return nil
}

// delayedLiteral is a function literal without parameters. Deferred, its own
// calls of recover stop the panic of the function around.
func (f *fn) delayedLiteral(lit *ast.FuncLit, deferred bool) string {
	g := f.c.newFn(f, f.info)
	if deferred {
		g.recover = f.defers
	}
	text := g.emit(signature{results: types.NewTuple(), body: lit.Body})
	return f.close(g, text, "func() ()")
}

func recovers(lit *ast.FuncLit) bool {
	found := false
	ast.Inspect(lit.Body, func(n ast.Node) bool {
		if c, ok := n.(*ast.CallExpr); ok {
			if id, ok := c.Fun.(*ast.Ident); ok && id.Name == "recover" {
				found = true
			}
		}
		return !found
	})
	return found
}

// recovered makes recover().
func (f *fn) recovered(e *ast.CallExpr) string {
	if f.recover == nil {
		f.refuse(e, "recover is available only in a function literal without parameters that is deferred where it stands: defer func() { ... recover() ... }()")
	}
	t := f.temp("h.Any")
	f.line("%s = h.Recover(%s)", t, f.use(f.recover))
	return t
}
