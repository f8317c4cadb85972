package lower

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"

	"ketloom/script/machine"
)

// support enters what every lowered program may use into package h.
func (c *compiler) support() {
	run := c.in.Run
	raise := func(f func(pos, i, n int)) func(pos, i, n int) {
		return func(pos, i, n int) { run.Raise(func() { f(pos, i, n) }) }
	}
	fail := func(f func(pos int)) func(pos int) {
		return func(pos int) { run.Raise(func() { f(pos) }) }
	}
	for name, v := range map[string]any{
		"Index": raise(machine.Index), "IndexUnsigned": raise(machine.IndexUnsigned), "Array": raise(machine.Array),
		"Divide": fail(machine.Divide), "Shift": fail(machine.Shift), "Nil": fail(machine.Nil),
		"NilMap": fail(machine.NilMap), "Continued": fail(machine.Continued),
		"Throw":     func(pos int, v any) { run.Raise(func() { machine.Throw(token.Pos(pos), v) }) },
		"NewDefers": run.NewDefers,
		"Do":        func(d *machine.Defers, f func()) { d.Do(f) },
		"Push":      func(d *machine.Defers, f func()) { d.Push(f) },
		"Recover":   func(d *machine.Defers) any { return d.Recover() },
		"Go":        run.Go,
		"Main":      run.Main,
		"Turn":      run.Turn,
		"Allow":     run.Allow,
		"Any":       (*any)(nil),
		"Error":     (*error)(nil),
	} {
		c.symbols[name] = reflect.ValueOf(v)
	}
	c.texts[anyType] = "h.Any"
	c.texts[errorType] = "h.Error"
}

// declareGlobals makes the package variables; they are set by entry.
func (c *compiler) declareGlobals() {
	f := c.newFn(nil, c.in.Info)
	scope := c.in.Package.Scope()
	for _, name := range scope.Names() {
		obj, ok := scope.Lookup(name).(*types.Var)
		if !ok {
			continue
		}
		f.pos = obj.Pos()
		v := &variable{name: c.fresh(plainName(name)), form: f.text(obj.Type()), boxed: c.facts[obj] != nil && c.facts[obj].addressed}
		c.globals[obj] = v
		if v.boxed {
			c.setup = append(c.setup, fmt.Sprintf("%s = new(%s)", v.name, v.form))
		}
	}
}

// entry emits main: the constants, the package variables in Go's order of
// initialisation, the init functions, then the script's main.
func (c *compiler) entry() {
	f := c.newFn(nil, c.in.Info)
	for _, init := range c.in.Info.InitOrder {
		f.initialiser(init)
	}
	for _, file := range c.in.Files {
		for _, d := range file.Decls {
			fd, ok := d.(*ast.FuncDecl)
			if ok && fd.Recv == nil && (fd.Name.Name == "init") && fd.Body != nil {
				f.pos = fd.Pos()
				f.line("%s()", c.function(c.in.Info.Defs[fd.Name].(*types.Func), nil, ""))
			}
		}
	}
	if obj, ok := c.in.Package.Scope().Lookup("main").(*types.Func); ok {
		f.pos = obj.Pos()
		f.line("%s()", c.function(obj, nil, ""))
	}
	// The setup is complete only when every function has been emitted.
	c.last = func() {
		fmt.Fprintf(&c.out, "func setup() {\n")
		for _, s := range c.setup {
			fmt.Fprintln(&c.out, s)
		}
		fmt.Fprintf(&c.out, "}\nfunc start() func() () { return func() {\n%s%s} }\n", f.header(), f.buf.String())
		fmt.Fprintf(&c.out, "func main() {\nsetup()\nrun := start()\nh.Main(run)\n}\n")
	}
}

// initialiser sets the variables of one declaration.
func (f *fn) initialiser(init *types.Initializer) {
	f.pos = init.Rhs.Pos()
	mark := len(f.taken)
	defer f.release(mark)
	defer f.recoverStop()
	if len(init.Lhs) == 1 {
		obj := init.Lhs[0]
		value := f.orderAs(init.Rhs, obj.Type())()
		if v := f.c.globals[obj]; v != nil {
			f.assign(place{s: v.read(), typ: obj.Type()}, value)
		}
		return
	}
	for i, v := range f.several(init.Rhs) {
		obj := init.Lhs[i]
		if g := f.c.globals[obj]; g != nil {
			f.assign(place{s: g.read(), typ: obj.Type()}, f.implicit(v.s, v.t, obj.Type()))
		}
	}
}
