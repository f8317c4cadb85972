package lower

import (
	"go/ast"
	"go/token"
	"go/types"
	"strings"
)

// switchStmt makes a chain of tests. With fallthrough the tests find the number
// of a case first, and the bodies follow one another.
func (f *fn) switchStmt(s *ast.SwitchStmt) {
	label := f.takeLabel()
	f.line("{")
	if s.Init != nil {
		f.stmt(s.Init)
		f.pos = s.Pos()
	}
	tag, tagType := "", types.Type(types.Typ[types.Bool])
	if s.Tag != nil {
		tagType = f.typeOf(s.Tag)
		if isUntyped(tagType) {
			tagType = types.Default(tagType)
		}
		tag = f.hold(f.text(tagType))
		f.line("%s = %s", tag, f.orderAs(s.Tag, tagType)())
	}
	var clauses []*ast.CaseClause
	for _, c := range s.Body.List {
		clauses = append(clauses, c.(*ast.CaseClause))
	}
	f.breakable(label, s.Body, func() {
		if falls(clauses) {
			f.numbered(clauses, tag, tagType)
		} else {
			f.chain(clauses, tag, tagType)
		}
	})
	f.line("}")
}

func falls(clauses []*ast.CaseClause) bool {
	for _, c := range clauses {
		if fallsThrough(c) {
			return true
		}
	}
	return false
}

func fallsThrough(c *ast.CaseClause) bool {
	if len(c.Body) == 0 {
		return false
	}
	b, ok := c.Body[len(c.Body)-1].(*ast.BranchStmt)
	return ok && b.Tok == token.FALLTHROUGH
}

// chain is if, else if, ..., else with the bodies inside.
func (f *fn) chain(clauses []*ast.CaseClause, tag string, t types.Type) {
	depth := 0
	var other *ast.CaseClause
	for _, c := range clauses {
		if c.List == nil {
			other = c
			continue
		}
		f.pos = c.Pos()
		f.line("if %s {", f.caseTest(c, tag, t))
		f.block(c.Body)
		f.line("} else {")
		depth++
	}
	if other != nil {
		f.block(other.Body)
	}
	f.buf.WriteString(strings.Repeat("}\n", depth))
}

// numbered finds the case to start with and runs bodies while they fall through.
func (f *fn) numbered(clauses []*ast.CaseClause, tag string, t types.Type) {
	k := f.hold("int")
	other := len(clauses)
	depth := 0
	for i, c := range clauses {
		if c.List == nil {
			other = i
			continue
		}
		f.pos = c.Pos()
		f.line("if %s {", f.caseTest(c, tag, t))
		f.line("%s = %d", k, i)
		f.line("} else {")
		depth++
	}
	f.line("%s = %d", k, other)
	f.buf.WriteString(strings.Repeat("}\n", depth))
	for i, c := range clauses {
		f.line("if %s == %d {", k, i)
		if fallsThrough(c) {
			f.block(c.Body[:len(c.Body)-1])
			f.line("%s = %d", k, i+1)
		} else {
			f.block(c.Body)
		}
		f.line("}")
	}
}

// caseTest is the test of a case. Its expressions are computed one after the
// other, until one fits.
func (f *fn) caseTest(c *ast.CaseClause, tag string, t types.Type) string {
	if len(c.List) == 1 {
		return f.oneTest(c.List[0], tag, t)
	}
	r := f.hold("bool")
	f.line("%s = false", r)
	for i, e := range c.List {
		if i > 0 {
			f.line("if %s { } else {", r)
		}
		f.line("%s = %s", r, f.oneTest(e, tag, t))
	}
	f.buf.WriteString(strings.Repeat("}\n", len(c.List)-1))
	return r
}

func (f *fn) oneTest(e ast.Expr, tag string, t types.Type) string {
	if tag == "" {
		return f.now(e)
	}
	if f.info.Types[e].IsNil() {
		return "(" + tag + " == nil)"
	}
	et := f.typeOf(e)
	if isInterface(et) && !isInterface(t) {
		return f.equal(f.implicit(tag, t, et), f.now(e), et, token.EQL, e)
	}
	return f.equal(tag, f.orderOperand(e, t)(), t, token.EQL, e)
}

// typeSwitch makes a chain of assertions.
func (f *fn) typeSwitch(s *ast.TypeSwitchStmt) {
	label := f.takeLabel()
	f.line("{")
	if s.Init != nil {
		f.stmt(s.Init)
		f.pos = s.Pos()
	}
	var e ast.Expr
	switch a := s.Assign.(type) {
	case *ast.ExprStmt:
		e = ast.Unparen(a.X).(*ast.TypeAssertExpr).X
	case *ast.AssignStmt:
		e = ast.Unparen(a.Rhs[0]).(*ast.TypeAssertExpr).X
	}
	t := f.typeOf(e)
	x := f.hold(f.text(t))
	f.line("%s = %s", x, f.order(e)())
	f.breakable(label, s.Body, func() { f.typeChain(s, x, t) })
	f.line("}")
}

func (f *fn) typeChain(s *ast.TypeSwitchStmt, x string, t types.Type) {
	depth := 0
	var other *ast.CaseClause
	for _, c := range s.Body.List {
		c := c.(*ast.CaseClause)
		if c.List == nil {
			other = c
			continue
		}
		f.pos = c.Pos()
		test, value, vt := f.typeTests(c, x, t)
		f.line("if %s {", test)
		f.symbolic(c, value, vt)
		f.block(c.Body)
		f.line("} else {")
		depth++
	}
	if other != nil {
		f.symbolic(other, x, t)
		f.block(other.Body)
	}
	f.buf.WriteString(strings.Repeat("}\n", depth))
}

// symbolic declares the variable of a clause.
func (f *fn) symbolic(c *ast.CaseClause, value string, t types.Type) {
	if obj := f.info.Implicits[c]; obj != nil {
		f.initialise(f.declare(obj), f.variable(value, t))
	}
}

// typeTests tests the types of a clause; with one type the value has it.
func (f *fn) typeTests(c *ast.CaseClause, x string, t types.Type) (test, value string, vt types.Type) {
	one := func(e ast.Expr) (string, string, types.Type) {
		if f.info.Types[e].IsNil() {
			return "(" + x + " == nil)", x, t
		}
		to := f.typeOf(e)
		r := f.assert(x, t, to, true, e.Pos())
		return r[1], r[0], to
	}
	if len(c.List) == 1 {
		return one(c.List[0])
	}
	r := f.hold("bool")
	f.line("%s = false", r)
	for i, e := range c.List {
		if i > 0 {
			f.line("if %s { } else {", r)
		}
		ok, _, _ := one(e)
		f.line("%s = %s", r, ok)
	}
	f.buf.WriteString(strings.Repeat("}\n", len(c.List)-1))
	return r, x, t
}
