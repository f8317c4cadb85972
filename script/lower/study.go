package lower

import (
	"go/ast"
	"go/token"
	"go/types"
)

// fact is what the lowering must know about a variable before it meets it.
type fact struct {
	home      ast.Node // function in which it is declared
	captured  bool     // used in a function inside home
	assigned  bool     // changed after its declaration
	addressed bool     // its address is taken
}

// shared says that the variable must live behind a pointer.
func (f *fact) shared() bool { return f != nil && (f.addressed || f.captured && f.assigned) }

// study walks a file and records the facts about its variables.
func (c *compiler) study(f *ast.File, info *types.Info) {
	s := &student{c: c, info: info}
	for _, d := range f.Decls {
		switch d := d.(type) {
		case *ast.FuncDecl:
			s.function(d, d.Recv, d.Type, d.Body)
		case *ast.GenDecl:
			s.walk(d)
		}
	}
}

type student struct {
	c     *compiler
	info  *types.Info
	stack []ast.Node      // enclosing functions, innermost last
	typs  []*ast.FuncType // of declared functions and literals around
}

func (s *student) home() ast.Node {
	if len(s.stack) == 0 {
		return nil
	}
	return s.stack[len(s.stack)-1]
}

func (s *student) fact(obj types.Object) *fact {
	f := s.c.facts[obj]
	if f == nil {
		f = &fact{home: s.home()}
		s.c.facts[obj] = f
	}
	return f
}

// function studies one function. A body with deferred calls is lowered to a
// function of its own, inside the one that holds parameters and results.
func (s *student) function(n ast.Node, recv *ast.FieldList, typ *ast.FuncType, body *ast.BlockStmt) {
	s.stack = append(s.stack, n)
	s.typs = append(s.typs, typ)
	if recv != nil {
		s.walk(recv)
	}
	s.walk(typ)
	if body != nil {
		if defers(body) {
			s.stack = append(s.stack, body)
			s.results(typ)
			s.walk(body)
			s.stack = s.stack[:len(s.stack)-1]
		} else {
			s.walk(body)
		}
	}
	s.stack = s.stack[:len(s.stack)-1]
	s.typs = s.typs[:len(s.typs)-1]
}

// results marks named results of a function with deferred calls: they are set
// inside and read outside.
func (s *student) results(typ *ast.FuncType) {
	if typ.Results == nil {
		return
	}
	for _, f := range typ.Results.List {
		for _, name := range f.Names {
			if obj := s.info.Defs[name]; obj != nil {
				f := s.fact(obj)
				f.captured, f.assigned = true, true
			}
		}
	}
}

// returns marks named results that a return in the body of a range over a
// function sets from inside.
func (s *student) returns() {
	if _, ok := s.home().(*ast.BlockStmt); ok {
		s.results(s.typs[len(s.typs)-1])
	}
}

// defers says that the body itself, not a function inside it, defers calls.
func defers(body *ast.BlockStmt) bool {
	found := false
	ast.Inspect(body, func(n ast.Node) bool {
		switch n.(type) {
		case *ast.FuncLit:
			return false
		case *ast.DeferStmt:
			found = true
		}
		return !found
	})
	return found
}

func (s *student) walk(n ast.Node) {
	ast.Inspect(n, func(n ast.Node) bool {
		switch n := n.(type) {
		case *ast.FuncLit:
			s.function(n, nil, n.Type, n.Body)
			return false
		case *ast.Ident:
			s.ident(n)
		case *ast.AssignStmt:
			for _, l := range n.Lhs {
				s.assign(l, n.Tok == token.DEFINE)
			}
		case *ast.IncDecStmt:
			s.assign(n.X, false)
		case *ast.RangeStmt:
			if s.rangeStmt(n) {
				return false
			}
		case *ast.UnaryExpr:
			if n.Op == token.AND {
				s.address(n.X)
			}
		case *ast.SliceExpr:
			if _, ok := s.under(n.X).(*types.Array); ok {
				s.address(n.X)
			}
		case *ast.SelectorExpr:
			s.selector(n)
		case *ast.BranchStmt:
			if n.Tok == token.GOTO {
				s.c.targets[s.info.Uses[n.Label]] = true
			}
		case *ast.ReturnStmt:
			s.returns()
		case *ast.CaseClause:
			if obj := s.info.Implicits[n]; obj != nil {
				s.fact(obj)
			}
		}
		return true
	})
}

func (s *student) under(e ast.Expr) types.Type {
	t := s.info.TypeOf(e)
	if t == nil {
		return nil
	}
	return t.Underlying()
}

func (s *student) ident(n *ast.Ident) {
	if obj := s.info.Defs[n]; obj != nil {
		if _, ok := obj.(*types.Var); ok {
			s.fact(obj)
		}
		return
	}
	obj, ok := s.info.Uses[n].(*types.Var)
	if !ok || obj.IsField() {
		return
	}
	f := s.fact(obj)
	if f.home != s.home() {
		f.captured = true
	}
}

// assign records an assignment to e; in a definition new variables are not
// assigned to.
func (s *student) assign(e ast.Expr, define bool) {
	if id, ok := e.(*ast.Ident); ok && define && s.info.Defs[id] != nil {
		return
	}
	if obj := s.root(e); obj != nil {
		s.fact(obj).assigned = true
	}
}

// rangeStmt studies a range statement. Over a function its body becomes a
// function of its own.
func (s *student) rangeStmt(n *ast.RangeStmt) bool {
	for _, e := range []ast.Expr{n.Key, n.Value} {
		if e != nil {
			s.assign(e, n.Tok == token.DEFINE)
		}
	}
	t := s.under(n.X)
	if p, ok := t.(*types.TypeParam); ok {
		t = p.Underlying()
	}
	if _, ok := t.(*types.Signature); !ok {
		return false
	}
	s.walk(n.X)
	s.stack = append(s.stack, n.Body)
	for _, e := range []ast.Expr{n.Key, n.Value} {
		if e != nil {
			s.walk(e)
		}
	}
	s.walk(n.Body)
	s.stack = s.stack[:len(s.stack)-1]
	return true
}

func (s *student) selector(n *ast.SelectorExpr) {
	sel := s.info.Selections[n]
	if sel == nil || sel.Kind() != types.MethodVal {
		return
	}
	sig := sel.Obj().(*types.Func).Signature()
	if sig.Recv() == nil {
		return
	}
	if _, ok := sig.Recv().Type().(*types.Pointer); ok {
		s.address(n.X)
	}
}

func (s *student) address(e ast.Expr) {
	if obj := s.root(e); obj != nil {
		s.fact(obj).addressed = true
	}
}

// root returns the variable of which e is a part, or nil.
func (s *student) root(e ast.Expr) types.Object {
	switch e := e.(type) {
	case *ast.Ident:
		obj := s.info.Uses[e]
		if obj == nil {
			obj = s.info.Defs[e]
		}
		if v, ok := obj.(*types.Var); ok {
			return v
		}
	case *ast.ParenExpr:
		return s.root(e.X)
	case *ast.SelectorExpr:
		if sel := s.info.Selections[e]; sel != nil && sel.Kind() == types.FieldVal && !sel.Indirect() {
			return s.root(e.X)
		}
	case *ast.IndexExpr:
		if _, ok := s.under(e.X).(*types.Array); ok {
			return s.root(e.X)
		}
	}
	return nil
}
