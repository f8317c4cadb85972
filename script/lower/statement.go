package lower

import (
	"go/ast"
	"go/token"
	"go/types"
	"strings"
)

func (f *fn) block(list []ast.Stmt) {
	for _, s := range list {
		f.stmt(s)
	}
}

// stmt lowers one statement; a refusal inside ends that statement alone.
func (f *fn) stmt(s ast.Stmt) {
	mark := len(f.taken)
	saved := f.buf
	defer func() {
		if r := recover(); r != nil {
			if _, ok := r.(stop); !ok {
				panic(r)
			}
			f.buf = saved
		}
		f.release(mark)
	}()
	f.pos = s.Pos()
	f.one(s)
}

func (f *fn) one(s ast.Stmt) {
	switch s := s.(type) {
	case *ast.EmptyStmt:
	case *ast.BlockStmt:
		f.line("{")
		f.block(s.List)
		f.line("}")
	case *ast.ExprStmt:
		f.exprStmt(s)
	case *ast.AssignStmt:
		f.assignStmt(s)
	case *ast.IncDecStmt:
		f.incDec(s)
	case *ast.DeclStmt:
		f.declStmt(s)
	case *ast.ReturnStmt:
		f.returnStmt(s)
	case *ast.IfStmt:
		f.ifStmt(s)
	case *ast.ForStmt:
		f.forStmt(s)
	case *ast.RangeStmt:
		f.rangeStmt(s)
	case *ast.SwitchStmt:
		f.switchStmt(s)
	case *ast.TypeSwitchStmt:
		f.typeSwitch(s)
	case *ast.SelectStmt:
		f.selectStmt(s)
	case *ast.BranchStmt:
		f.branch(s)
	case *ast.LabeledStmt:
		f.labeled(s)
	case *ast.DeferStmt:
		f.deferStmt(s)
	case *ast.GoStmt:
		f.goStmt(s)
	case *ast.SendStmt:
		f.sendStmt(s)
	default:
		f.refuse(s, "this statement is not available in a script")
	}
}

func (f *fn) exprStmt(s *ast.ExprStmt) {
	switch e := ast.Unparen(s.X).(type) {
	case *ast.CallExpr:
		if _, ok := f.builtinName(e.Fun); ok || f.info.Types[e.Fun].IsType() {
			f.callValue(e)()
			return
		}
		f.call(e)
	case *ast.UnaryExpr:
		f.receive(e, false)
	}
}

func (f *fn) declStmt(s *ast.DeclStmt) {
	d := s.Decl.(*ast.GenDecl)
	if d.Tok != token.VAR {
		return
	}
	for _, spec := range d.Specs {
		f.varSpec(spec.(*ast.ValueSpec))
	}
}

func (f *fn) varSpec(s *ast.ValueSpec) {
	if len(s.Values) == 0 {
		for _, name := range s.Names {
			if obj := f.info.Defs[name]; obj != nil && name.Name != "_" {
				f.initialise(f.declare(obj), "")
			}
		}
		return
	}
	var lhs []ast.Expr
	for _, name := range s.Names {
		lhs = append(lhs, name)
	}
	var t types.Type
	if s.Type != nil {
		t = f.typeOf(s.Type)
	}
	f.assignAll(lhs, s.Values, true, t)
}

// returnStmt returns values, or puts them where the function around finds them.
func (f *fn) returnStmt(s *ast.ReturnStmt) {
	if f.yield != nil {
		f.yieldReturn(s)
		return
	}
	if len(s.Results) == 0 {
		if f.inner || len(f.results) == 0 {
			f.line("return")
			return
		}
		f.returnBoxes()
		return
	}
	values := f.returnValues(s)
	if f.inner {
		f.setBoxes(values)
		f.line("return")
		return
	}
	f.line("return %s", strings.Join(values, ", "))
}

// returnValues computes the results of a return statement.
func (f *fn) returnValues(s *ast.ReturnStmt) []string {
	var values []string
	if len(s.Results) == 1 && len(f.results) > 1 {
		call := ast.Unparen(s.Results[0]).(*ast.CallExpr)
		from := f.tuple(f.info.TypeOf(call).(*types.Tuple))
		for i, v := range f.call(call) {
			values = append(values, f.variable(f.implicit(v, from[i], f.results[i]), f.results[i]))
		}
		return values
	}
	var lates []late
	for i, e := range s.Results {
		lates = append(lates, f.orderAs(e, f.results[i]))
	}
	for i, l := range lates {
		values = append(values, f.variable(l(), f.results[i]))
	}
	return values
}

// variable moves an expression into a variable, literals too.
func (f *fn) variable(s string, t types.Type) string {
	if isAtom(s) && s[0] > '9' && s != "true" && s != "false" {
		return s
	}
	r := f.temp(f.text(t))
	f.line("%s = %s", r, s)
	return r
}

func (f *fn) setBoxes(values []string) {
	for i, v := range f.boxes {
		f.line("*%s = %s", f.pointer(v), values[i])
	}
}

func (f *fn) ifStmt(s *ast.IfStmt) {
	if s.Init != nil {
		f.line("{")
		f.stmt(s.Init)
		f.pos = s.Pos()
	}
	cond := f.now(s.Cond)
	f.line("if %s {", cond)
	f.block(s.Body.List)
	if s.Else != nil {
		f.line("} else {")
		if b, ok := s.Else.(*ast.BlockStmt); ok {
			f.block(b.List)
		} else {
			f.stmt(s.Else)
		}
	}
	f.line("}")
	if s.Init != nil {
		f.line("}")
	}
}
