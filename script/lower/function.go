package lower

import (
	"bytes"
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"
	"sort"
	"strings"
)

// variable is a variable of the lowered program.
type variable struct {
	name  string
	form  string // text of its stored form
	boxed bool   // name is a pointer to it
}

// held is the text of the type of name.
func (v *variable) held() string {
	if v.boxed {
		return "*" + v.form
	}
	return v.form
}

// read is the expression for its value.
func (v *variable) read() string {
	if v.boxed {
		return "(*" + v.name + ")"
	}
	return v.name
}

// fn is a function being emitted.
type fn struct {
	c        *compiler
	info     *types.Info
	with     map[*types.TypeParam]types.Type // instance of a generic function
	parent   *fn
	buf      *bytes.Buffer
	pos      token.Pos // place of the statement being lowered
	vars     map[types.Object]*variable
	captures []*variable
	captured map[*variable]bool
	own      map[*variable]bool
	temps    map[string][]string // form -> names declared at the top
	free     map[string][]string
	taken    []taken
	results  []types.Type
	named    []types.Object // named results, if the results have names
	boxes    []*variable    // results, where they are kept in variables
	defers   *variable      // list of deferred calls of this body
	recover  *variable      // list whose panic recover stops
	yield    *yield         // this is the body of a range over a function
	inner    bool           // results go into boxes that belong to a function around
	loops    []*loop
	copying  bool   // variables are copied where an atom is wanted
	label    string // label of the next statement
}

type taken struct{ form, name string }

func (c *compiler) newFn(parent *fn, info *types.Info) *fn {
	f := &fn{
		c: c, info: info, parent: parent, buf: &bytes.Buffer{}, vars: map[types.Object]*variable{}, captured: map[*variable]bool{},
		own: map[*variable]bool{}, temps: map[string][]string{}, free: map[string][]string{},
	}
	if parent != nil {
		f.with = parent.with
		f.pos = parent.pos
	}
	return f
}

// line emits one statement.
func (f *fn) line(format string, args ...any) {
	fmt.Fprintf(f.buf, format, args...)
	fmt.Fprintf(f.buf, " //%d\n", f.pos)
}

// stop ends the lowering of the present statement with a refusal.
type stop struct{}

func (f *fn) refuse(n ast.Node, format string, args ...any) {
	f.c.refuse(n.Pos(), format, args...)
	panic(stop{})
}

// temp returns a temporary of the given form, free again after the statement.
func (f *fn) temp(form string) string {
	var name string
	if free := f.free[form]; len(free) > 0 {
		name = free[len(free)-1]
		f.free[form] = free[:len(free)-1]
	} else {
		name = f.hold(form)
	}
	f.taken = append(f.taken, taken{form, name})
	return name
}

// hold returns a temporary that is never used again for anything else.
func (f *fn) hold(form string) string {
	name := f.c.fresh("t")
	f.temps[form] = append(f.temps[form], name)
	return name
}

// release frees the temporaries taken since mark.
func (f *fn) release(mark int) {
	for _, t := range f.taken[mark:] {
		f.free[t.form] = append(f.free[t.form], t.name)
	}
	f.taken = f.taken[:mark]
}

// lookup finds the variable of obj, capturing it from the functions around.
func (f *fn) lookup(obj types.Object) *variable {
	if v, ok := f.c.globals[obj]; ok {
		return v
	}
	if v, ok := f.vars[obj]; ok {
		return v
	}
	if f.parent == nil {
		return nil
	}
	v := f.parent.lookup(obj)
	if v == nil {
		return nil
	}
	f.capture(v)
	f.vars[obj] = v
	return v
}

// capture makes v, a variable of a function around, an argument of the function
// that makes this one.
func (f *fn) capture(v *variable) {
	if f.own[v] || f.captured[v] {
		return
	}
	f.captured[v] = true
	f.captures = append(f.captures, v)
	if f.parent != nil {
		f.parent.capture(v)
	}
}

// declare makes the variable of obj, without a statement.
func (f *fn) declare(obj types.Object) *variable {
	t := f.typ(obj.Type())
	v := &variable{name: f.c.fresh(plainName(obj.Name())), form: f.text(t), boxed: f.c.facts[obj].shared()}
	f.vars[obj] = v
	f.own[v] = true
	return v
}

// synthetic makes a variable that the script does not have.
func (f *fn) synthetic(prefix, form string, boxed bool) *variable {
	v := &variable{name: f.c.fresh(prefix), form: form, boxed: boxed}
	f.own[v] = true
	return v
}

// plainName keeps the part of a script's name that is safe, for reading.
func plainName(name string) string {
	var b strings.Builder
	for _, r := range name {
		if r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' {
			b.WriteRune(r)
		}
	}
	return "v" + b.String() + "_"
}

// top declares v at the top of the function: its place in the text is the
// same for every turn of a loop.
func (f *fn) top(v *variable) { f.temps[v.held()] = append(f.temps[v.held()], v.name) }

// initialise emits the declaration of v with a value, or zero.
func (f *fn) initialise(v *variable, value string) {
	switch {
	case v.boxed:
		f.top(v)
		f.line("%s = new(%s)", v.name, v.form)
		if value != "" {
			f.line("*%s = %s", v.name, value)
		}
	case value == "":
		f.line("var %s %s", v.name, v.form)
	default:
		f.top(v)
		f.line("%s = %s", v.name, value)
	}
}

// typ returns t with the type arguments of the instance.
func (f *fn) typ(t types.Type) types.Type { return f.c.substitute(t, f.with) }

func (f *fn) typeOf(e ast.Expr) types.Type { return f.typ(f.info.TypeOf(e)) }

func (f *fn) text(t types.Type) string { return f.c.text(f.c.form(t, f.pos)) }

func (f *fn) form(t types.Type) reflect.Type { return f.c.form(t, f.pos) }

// header writes the declarations of the function's temporaries.
func (f *fn) header() string {
	var b strings.Builder
	forms := make([]string, 0, len(f.temps))
	for form := range f.temps {
		forms = append(forms, form)
	}
	sort.Strings(forms)
	for _, form := range forms {
		fmt.Fprintf(&b, "var %s %s\n", strings.Join(f.temps[form], ", "), form)
	}
	return b.String()
}

// signature is what the emission of a function needs.
type signature struct {
	params  []*types.Var // receiver first
	results *types.Tuple
	body    *ast.BlockStmt
}

// emit lowers a function and returns its text from the parameters on.
func (f *fn) emit(s signature) string {
	f.pos = s.body.Pos()
	params := f.parameters(s.params)
	var results []string
	for v := range s.results.Variables() {
		t := f.typ(v.Type())
		f.results = append(f.results, t)
		results = append(results, f.text(t))
	}
	entry := f.buf.String()
	f.buf.Reset()
	f.count()
	switch {
	case defers(s.body):
		f.deferring(s)
	default:
		f.plainResults(s)
		f.block(s.body.List)
		f.fallOff(s)
	}
	return fmt.Sprintf("(%s) (%s) {\n%s%s%s}", strings.Join(params, ", "), strings.Join(results, ", "), f.header(), entry, f.buf.String())
}

// parameters declares the parameters; a shared one is moved behind a pointer.
func (f *fn) parameters(vars []*types.Var) []string {
	var list []string
	for _, p := range vars {
		if p.Name() == "" || p.Name() == "_" {
			list = append(list, f.c.fresh("p")+" "+f.text(f.typ(p.Type())))
			continue
		}
		v := f.declare(p)
		if !v.boxed {
			list = append(list, v.name+" "+v.form)
			continue
		}
		arg := f.c.fresh("p")
		list = append(list, arg+" "+v.form)
		f.initialise(v, arg)
	}
	return list
}

// plainResults declares named results.
func (f *fn) plainResults(s signature) {
	for r := range s.results.Variables() {
		if r.Name() == "" {
			break
		}
		if r.Name() == "_" {
			v := f.synthetic("r", f.text(f.typ(r.Type())), false)
			f.initialise(v, "")
			f.boxes = append(f.boxes, v)
			continue
		}
		v := f.declare(r)
		f.initialise(v, "")
		f.boxes = append(f.boxes, v)
	}
	if f.boxes == nil && returnsFromRange(s.body, f) {
		f.resultBoxes(s)
	}
}

// resultBoxes keeps unnamed results in variables behind pointers.
func (f *fn) resultBoxes(s signature) {
	for r := range s.results.Variables() {
		v := f.synthetic("r", f.text(f.typ(r.Type())), true)
		f.initialise(v, "")
		f.boxes = append(f.boxes, v)
	}
}

// returns says that the last statement of the body is a return.
func returns(body *ast.BlockStmt) bool {
	if len(body.List) == 0 {
		return false
	}
	_, ok := body.List[len(body.List)-1].(*ast.ReturnStmt)
	return ok
}

// fallOff ends a function whose last statement may be reached.
func (f *fn) fallOff(s signature) {
	if len(f.results) > 0 && !returns(s.body) {
		f.line("%s", f.zeroReturn())
	}
}

// zeroReturn returns something of the right types where the script's function
// cannot end; the interpreter asks for it.
func (f *fn) zeroReturn() string {
	var values []string
	for _, t := range f.results {
		values = append(values, f.zeroVariable(f.text(t)))
	}
	return "return " + strings.Join(values, ", ")
}
