package lower

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
)

// loop is a statement that break or continue can leave, being emitted.
type loop struct {
	label    string // the script's label
	stop     string // emitted label of the statement, for break
	turn     string // emitted label of the body, for continue; "" without one
	loops    bool   // continue is allowed
	once     bool   // the statement is emitted as a loop that runs once
	stopUsed bool
}

// takeLabel returns the script's label of the statement being lowered.
func (f *fn) takeLabel() string {
	l := f.label
	f.label = ""
	return l
}

// forStmt makes every loop of these:
//
//	for c { body; post }
//	for { condition; if c { } else { break }; body; post }
//
// The first serves where the condition needs no statements. The body is a loop that runs once if it has to be left for the next turn.
func (f *fn) forStmt(s *ast.ForStmt) {
	label := f.takeLabel()
	f.line("{")
	if s.Init != nil {
		f.stmt(s.Init)
	}
	l := &loop{label: label, loops: true}
	post := func() {
		f.freshTurn(s)
		if s.Post != nil {
			f.stmt(s.Post)
		}
	}
	hasPost := s.Post != nil || f.turnVars(s) != nil
	f.loop(l, hasPost, s.Body, func() string {
		if s.Cond == nil {
			return ""
		}
		f.pos = s.Cond.Pos()
		return f.now(s.Cond)
	}, func() {}, post)
	f.line("}")
}

// loop emits a loop with a condition, or none if that is "", then head, body
// and post.
func (f *fn) loop(l *loop, hasPost bool, body *ast.BlockStmt, condition func() string, head, post func()) {
	l.stop = f.c.fresh("stop")
	once := continues(body, l.label, hasPost)
	if once {
		l.turn = f.c.fresh("turn")
	}
	text, _ := f.apart(func() string {
		mark := len(f.taken)
		before, c := f.apart(condition)
		switch {
		case before == "" && c != "":
			f.line("for %s {", c)
		default:
			f.line("for {")
			f.buf.WriteString(before)
			if c != "" {
				f.line("if %s { } else { break }", c)
			}
		}
		f.release(mark)
		f.count()
		head()
		f.turn(l, once, body)
		post()
		f.line("}")
		return ""
	})
	f.finish(l, text)
}

// turn emits the body of a loop.
func (f *fn) turn(l *loop, once bool, body *ast.BlockStmt) {
	f.loops = append(f.loops, l)
	if once {
		f.buf.WriteString(l.turn + ":\n")
		f.line("for {")
	}
	f.block(body.List)
	if once {
		f.line("break")
		f.line("}")
	}
	f.loops = f.loops[:len(f.loops)-1]
}

// finish emits a collected statement with its label, if that is used.
func (f *fn) finish(l *loop, text string) {
	if l.stopUsed {
		f.buf.WriteString(l.stop + ":\n")
	}
	f.buf.WriteString(text)
}

// continues says whether the body has to be a loop of its own: some continue
// goes to the end of it, where something follows, or comes from inside another
// loop.
func continues(body *ast.BlockStmt, label string, hasPost bool) bool {
	found := false
	var walk func(n ast.Node, inner bool)
	walk = func(n ast.Node, inner bool) {
		ast.Inspect(n, func(m ast.Node) bool {
			switch m := m.(type) {
			case *ast.FuncLit:
				return false
			case *ast.ForStmt:
				if m != n {
					walk(m.Body, true)
					return false
				}
			case *ast.RangeStmt:
				if m != n {
					walk(m.Body, true)
					return false
				}
			case *ast.BranchStmt:
				if m.Tok != token.CONTINUE {
					break
				}
				if m.Label != nil && m.Label.Name == label || m.Label == nil && !inner && hasPost {
					found = true
				}
			case *ast.SwitchStmt, *ast.TypeSwitchStmt, *ast.SelectStmt:
				if !inner && containsContinue(m) {
					found = true
				}
			}
			return true
		})
	}
	walk(body, false)
	return found
}

// containsContinue says that a continue without label leaves the statement:
// a switch may be emitted as a loop that runs once, which such a continue must
// not take for its own.
func containsContinue(n ast.Node) bool {
	found := false
	ast.Inspect(n, func(m ast.Node) bool {
		switch m := m.(type) {
		case *ast.FuncLit, *ast.ForStmt, *ast.RangeStmt:
			return false
		case *ast.BranchStmt:
			if m.Tok == token.CONTINUE && m.Label == nil {
				found = true
			}
		}
		return true
	})
	return found
}

// turnVars returns the variables of a loop's init statement that closures share:
// every turn has its own.
func (f *fn) turnVars(s *ast.ForStmt) []types.Object {
	init, ok := s.Init.(*ast.AssignStmt)
	if !ok || init.Tok != token.DEFINE {
		return nil
	}
	var list []types.Object
	for _, e := range init.Lhs {
		if id, ok := e.(*ast.Ident); ok {
			if obj := f.info.Defs[id]; obj != nil && f.c.facts[obj].shared() {
				list = append(list, obj)
			}
		}
	}
	return list
}

// freshTurn copies the loop variables for the next turn.
func (f *fn) freshTurn(s *ast.ForStmt) {
	for _, obj := range f.turnVars(s) {
		v := f.vars[obj]
		t := f.temp(v.form)
		f.line("%s = *%s", t, v.name)
		f.line("%s = new(%s)", v.name, v.form)
		f.line("*%s = %s", v.name, t)
	}
}

// breakable emits a statement that break leaves, but that is no loop.
func (f *fn) breakable(label string, body *ast.BlockStmt, emit func()) {
	l := &loop{label: label, stop: f.c.fresh("stop"), once: breaks(body, label)}
	f.loops = append(f.loops, l)
	text, _ := f.apart(func() string { emit(); return "" })
	f.loops = f.loops[:len(f.loops)-1]
	if !l.once {
		f.buf.WriteString(text)
		return
	}
	f.buf.WriteString(l.stop + ":\nfor {\n")
	f.buf.WriteString(text)
	f.line("break")
	f.line("}")
}

// breaks says that some break leaves the statement with this body.
func breaks(body *ast.BlockStmt, label string) bool {
	found := false
	var walk func(n ast.Node, inner bool)
	walk = func(n ast.Node, inner bool) {
		ast.Inspect(n, func(m ast.Node) bool {
			switch m := m.(type) {
			case *ast.FuncLit:
				return false
			case *ast.ForStmt, *ast.RangeStmt, *ast.SwitchStmt, *ast.TypeSwitchStmt, *ast.SelectStmt:
				if m != n {
					walk(m, true)
					return false
				}
			case *ast.BranchStmt:
				if m.Tok == token.BREAK && (m.Label == nil && !inner || m.Label != nil && m.Label.Name == label) {
					found = true
				}
			}
			return true
		})
	}
	for _, s := range body.List {
		walk(&ast.BlockStmt{List: []ast.Stmt{s}}, false)
	}
	return found
}

// branch makes break, continue and goto.
func (f *fn) branch(s *ast.BranchStmt) {
	switch s.Tok {
	case token.GOTO:
		if f.yield != nil {
			f.refuse(s, "goto in the body of a range over a function is not available in a script")
		}
		f.line("goto %s", f.gotoLabel(s.Label))
	case token.BREAK, token.CONTINUE:
		f.leave(s)
	}
}

// leave goes to the end of a loop or of its body.
func (f *fn) leave(s *ast.BranchStmt) {
	innermost := true
	for i := len(f.loops) - 1; i >= 0; i-- {
		l := f.loops[i]
		fits := s.Label == nil && (l.loops || s.Tok == token.BREAK) || s.Label != nil && s.Label.Name == l.label
		if !fits {
			innermost = innermost && !l.once && !l.loops
			continue
		}
		f.leaveLoop(l, s.Tok, innermost)
		return
	}
	f.leaveYield(s)
}

func (f *fn) leaveLoop(l *loop, tok token.Token, innermost bool) {
	switch {
	case tok == token.BREAK && (innermost && l.turn == ""):
		f.line("break")
	case tok == token.BREAK:
		l.stopUsed = true
		f.line("break %s", l.stop)
	case l.turn != "" && innermost:
		f.line("break")
	case l.turn != "":
		f.line("break %s", l.turn)
	default:
		f.line("continue")
	}
}

// labeled lowers a statement with a label.
func (f *fn) labeled(s *ast.LabeledStmt) {
	if f.c.targets[f.info.Defs[s.Label]] {
		f.buf.WriteString(f.gotoLabel(s.Label) + ":\n")
		t := f.hold("int")
		f.line("%s = 0", t)
		f.count()
	}
	f.label = s.Label.Name
	f.stmt(s.Stmt)
	f.label = ""
}

// gotoLabel is the emitted label for a goto.
func (f *fn) gotoLabel(id *ast.Ident) string { return fmt.Sprintf("goto_%x", id.Name) }
