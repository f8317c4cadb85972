package script

import (
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"testing"
)

// TestRandomProgramsRunAsCompiled generates well-typed programs and compares
// the interpreted output with the compiled one. KETLOOM_RANDOM sets how many;
// each takes about a second to compile.
func TestRandomProgramsRunAsCompiled(t *testing.T) {
	tool, err := exec.LookPath("go")
	if err != nil {
		t.Skip("no Go tool: nothing to compare with")
	}
	count, start := 2, uint64(1)
	if n, err := strconv.Atoi(os.Getenv("KETLOOM_RANDOM")); err == nil {
		count = n
	}
	if n, err := strconv.ParseUint(os.Getenv("KETLOOM_RANDOM_SEED"), 10, 64); err == nil {
		start = n
	}
	if testing.Short() {
		t.Skip("short")
	}
	for seed := start; seed < start+uint64(count); seed++ {
		src := newGenerator(seed).program()
		want := compiled(t, tool, &testCase{name: fmt.Sprint("random", seed), parts: map[string]string{"go": src}})
		got, err := interpret(t, src)
		if err != nil {
			t.Errorf("seed %d: %v", seed, err)
		} else if got != want {
			t.Errorf("seed %d: %s", seed, firstDifference(got, want))
		} else {
			continue
		}
		if dir := os.Getenv("KETLOOM_RANDOM_KEEP"); dir != "" {
			if err := os.WriteFile(fmt.Sprintf("%s/random%d.go", dir, seed), []byte(src), 0o666); err != nil {
				t.Error(err)
			}
		}
	}
}

// generator writes random programs. Every loop is short, every index is in
// range unless a panic is wanted and recovered, and every change is printed.
type generator struct {
	*rand.Rand
	out    strings.Builder
	depth  int
	vars   []genVar
	count  int
	funcs  []genFunc
	loops  int
	inFunc bool
}

type genVar struct{ name, typ string }

type genFunc struct {
	name   string
	params []string
	result string
}

var genTypes = []string{"int", "uint8", "int32", "uint64", "float64", "string", "bool", "complex128", "Level", "Pair", "*Pair", "[]int", "[3]int", "map[string]int", "func(int) int", "Shape", "any", "error", "Tree", "[]Pair", "Stack[int]", "[2]Pair"}

const genHead = `package main

import (
	"errors"
	"fmt"
	"sort"
)

type Level int8

func (l Level) String() string { return fmt.Sprintf("L%d", int8(l)) }
func (l *Level) Up()           { *l += 3 }

type Pair struct {
	A int
	b float64
	in [2]int
}

func (p Pair) Area() float64      { return float64(p.A) * p.b }
func (p Pair) With(a int) Pair    { p.A = a; p.in[0]++; return p }
func (p *Pair) Add(n int) *Pair   { p.A += n; p.in[1] += n; return p }

type Shape interface{ Area() float64 }
type Disc float64

func (d Disc) Area() float64 { return float64(d) * 3 }

type Fault struct{ n int }

func (f Fault) Error() string { return fmt.Sprint("fault", f.n) }

type Tree struct {
	v    int
	kids []*Tree
	up   *Tree
}

func (t *Tree) grow(v int) *Tree { k := &Tree{v: v, up: t}; t.kids = append(t.kids, k); return t }
func (t *Tree) sum() int {
	if t == nil {
		return 0
	}
	s := t.v
	for _, k := range t.kids {
		s += k.sum()
	}
	return s
}

type Stack[T any] struct{ items []T }

func (s *Stack[T]) push(x T) int { s.items = append(s.items, x); return len(s.items) }
func (s Stack[T]) top(d T) T {
	if len(s.items) == 0 {
		return d
	}
	return s.items[len(s.items)-1]
}
func pick[T any](c bool, a, b T) T {
	if c {
		return a
	}
	return b
}

var total = start * 2
var start = first()

func first() int { return 21 }

func iabs(i int) int {
	if i < 0 {
		i = -i
	}
	if i < 0 {
		return 0
	}
	return i
}
func note(s string, i int) int { fmt.Print(s, i, " "); total += i; return i }
func seq(n int) func(func(int) bool) {
	return func(yield func(int) bool) {
		for i := 0; i < n; i++ {
			if !yield(i) {
				return
			}
		}
	}
}
func keys(m map[string]int) []string {
	var r []string
	for k := range m {
		r = append(r, k)
	}
	sort.Strings(r)
	return r
}
func guard(name string, f func()) {
	defer func() {
		if r := recover(); r != nil {
			fmt.Println(name, "recovered:", r)
		}
	}()
	f()
}
func show(name string, x any) {
	switch v := x.(type) {
	case *Pair:
		if v != nil {
			fmt.Println(name, "&", *v)
		}
	case Tree:
		fmt.Println(name, v.v, v.sum())
	case func(int) int:
		fmt.Println(name, v(3))
	case Shape:
		fmt.Printf("%s %.4g\n", name, v.Area())
	default:
		fmt.Println(name, v)
	}
}
`

func newGenerator(seed uint64) *generator {
	return &generator{Rand: rand.New(rand.NewPCG(seed, 77))}
}

func (g *generator) line(format string, args ...any) {
	g.out.WriteString(strings.Repeat("\t", g.depth))
	fmt.Fprintf(&g.out, format+"\n", args...)
}

func (g *generator) name() string { g.count++; return fmt.Sprint("v", g.count) }

func (g *generator) program() string {
	g.out.WriteString(genHead)
	g.line("var _ = errors.New")
	for i := range 3 {
		g.function(fmt.Sprint("f", i))
	}
	g.line("func main() {")
	g.depth++
	for range 14 {
		g.statement()
	}
	g.showAll(0)
	g.depth--
	g.line("}")
	return g.out.String()
}

func (g *generator) typ() string { return genTypes[g.IntN(len(genTypes))] }

// function declares a function with named results, deferred calls or none.
func (g *generator) function(name string) {
	f := genFunc{name: name, result: g.typ()}
	var params []string
	saved := g.vars
	for range 1 + g.IntN(2) {
		v := genVar{g.name(), g.typ()}
		f.params = append(f.params, v.typ)
		params = append(params, v.name+" "+v.typ)
		g.vars = append(g.vars, v)
	}
	named := g.IntN(2) == 0
	result := f.result
	if named {
		result = "(res " + f.result + ")"
	}
	g.line("func %s(%s) %s {", name, strings.Join(params, ", "), result)
	g.depth++
	g.inFunc = true
	if named {
		g.vars = append(g.vars, genVar{"res", f.result})
		if g.IntN(2) == 0 {
			g.line("defer func() { if r := recover(); r != nil { fmt.Println(%q, r) }; %s }()", name, g.change(genVar{"res", f.result}))
		}
	}
	for range 4 {
		g.statement()
	}
	if named && g.IntN(2) == 0 {
		g.line("res = %s", g.expr(f.result, 2))
		g.line("return")
	} else {
		g.line("return %s", g.expr(f.result, 2))
	}
	g.inFunc = false
	g.depth--
	g.line("}")
	g.vars = saved
	g.funcs = append(g.funcs, f)
}

// showAll prints the variables declared since from.
func (g *generator) showAll(from int) {
	for _, v := range g.vars[from:] {
		g.line("show(%q, %s)", v.name, v.name)
	}
}

// block writes statements in a scope of their own.
func (g *generator) block(n int) {
	saved := len(g.vars)
	g.depth++
	for range n {
		g.statement()
	}
	g.showAll(saved)
	g.depth--
	g.vars = g.vars[:saved]
}

func (g *generator) statement() {
	if g.depth > 4 {
		g.simple()
		return
	}
	switch g.IntN(16) {
	case 0:
		g.line("if (%s) {", g.expr("bool", 2))
		g.block(2)
		if g.IntN(2) == 0 {
			g.line("} else {")
			g.block(1)
		}
		g.line("}")
	case 1, 2:
		g.loop()
	case 3:
		g.switchStatement()
	case 4:
		g.closures()
	case 5:
		g.line("guard(%q, func() {", g.name())
		g.block(2)
		g.depth++
		g.panics()
		g.depth--
		g.line("})")
	case 6:
		g.line("func() {")
		g.depth++
		g.line("defer note(%q, %s)", g.name(), g.expr("int", 2))
		g.line("defer func(x %[1]s) { show(%[2]q, x) }(%[3]s)", "int", g.name(), g.expr("int", 2))
		if v, ok := g.variable("Pair"); ok {
			g.line("defer show(%q, %s)", g.name(), v)
			g.line("defer func() { show(%q, %s) }()", g.name(), v)
		}
		g.depth--
		g.block(2)
		g.line("}()")
	default:
		g.simple()
	}
}

func (g *generator) simple() {
	switch g.IntN(9) {
	case 0, 1, 2:
		t := g.typ()
		v := genVar{g.name(), t}
		if g.IntN(3) == 0 {
			g.line("var %s %s = %s", v.name, t, g.expr(t, 3))
		} else {
			g.line("%s := %s", v.name, g.typed(t, 3))
		}
		g.line("_ = %s", v.name)
		g.vars = append(g.vars, v)
	case 3:
		a, ok1 := g.anyVar()
		b, ok2 := g.sameType(a)
		if ok1 && ok2 {
			g.line("%s, %s = %s, %s", a.name, b.name, g.expr(a.typ, 2), a.name)
		}
	case 4:
		g.line("fmt.Println(%q, %s, %s)", g.name(), g.expr(g.printable(), 2), g.expr(g.printable(), 2))
	case 5:
		if m, ok := g.variable("map[string]int"); ok {
			g.line("if %s != nil { %s[%s] += %s }", m, m, g.expr("string", 1), g.expr("int", 2))
			g.line("fmt.Println(keys(%s), %s)", m, m)
		}
	case 6:
		if s, ok := g.variable("[]int"); ok {
			g.line("if len(%[1]s) > 0 { %[1]s[iabs(%[2]s)%%len(%[1]s)], total = %[3]s, %[1]s[0] }", s, g.expr("int", 1), g.expr("int", 2))
		}
	default:
		if v, ok := g.anyVar(); ok {
			g.line("%s", g.change(v))
		}
	}
}

func (g *generator) printable() string {
	return []string{"int", "uint8", "string", "bool", "Level", "Pair", "[]int", "[3]int", "float64", "complex128", "[]Pair", "[2]Pair"}[g.IntN(12)]
}

// change changes a variable in place.
func (g *generator) change(v genVar) string {
	n := v.name
	switch v.typ {
	case "int", "int32", "uint64", "uint8":
		return fmt.Sprintf("%s %s= %s", n, []string{"+", "-", "*", "^", "|", "&^"}[g.IntN(6)], g.expr(v.typ, 2))
	case "Level":
		return pickOne(g, n+"++", n+".Up()", n+" -= 2", n+" = -"+n)
	case "float64":
		return fmt.Sprintf("%s %s= %s", n, []string{"+", "-", "*"}[g.IntN(3)], g.expr("float64", 2))
	case "complex128":
		return fmt.Sprintf("%s %s= %s", n, []string{"+", "-", "*"}[g.IntN(3)], g.expr("complex128", 1))
	case "string":
		return fmt.Sprintf("if len(%[1]s) < 40 { %[1]s += %[2]s }", n, g.expr("string", 1))
	case "Pair":
		return pickOne(g, n+".A++", n+".in[1] *= 2", n+" = "+n+".With(4)", n+".Add(2).Add(1)", n+".b /= 2")
	case "*Pair":
		return fmt.Sprintf("if %[1]s != nil { %[1]s.Add(%[2]s); %[1]s.in[0]-- }", n, g.expr("int", 1))
	case "[]int":
		return fmt.Sprintf("%s = append(%s, %s)", n, n, g.expr("int", 2))
	case "[]Pair":
		return fmt.Sprintf("%s = append(%s, %s)", n, n, g.expr("Pair", 2))
	case "[3]int":
		return fmt.Sprintf("%s[iabs(%s)%%3] += %s", n, g.expr("int", 1), g.expr("int", 1))
	case "[2]Pair":
		return fmt.Sprintf("%s[%d].Add(%s)", n, g.IntN(2), g.expr("int", 1))
	case "Tree":
		return fmt.Sprintf("%s.grow(%s).grow(1)", n, g.expr("int", 1))
	case "Stack[int]":
		return fmt.Sprintf("%s.push(%s)", n, g.expr("int", 2))
	}
	return fmt.Sprintf("%s = %s", n, g.expr(v.typ, 2))
}

func pickOne(g *generator, list ...string) string { return list[g.IntN(len(list))] }

func (g *generator) anyVar() (genVar, bool) {
	if len(g.vars) == 0 {
		return genVar{}, false
	}
	v := g.vars[g.IntN(len(g.vars))]
	return v, v.typ != counter
}

// counter marks the variable of a loop that counts, which is not changed.
const counter = "counter"

func (g *generator) variable(t string) (string, bool) {
	var list []string
	for _, v := range g.vars {
		if v.typ == t {
			list = append(list, v.name)
		}
	}
	if len(list) == 0 {
		return "", false
	}
	return list[g.IntN(len(list))], true
}

func (g *generator) sameType(a genVar) (genVar, bool) {
	for _, v := range g.vars {
		if v.typ == a.typ && v.name != a.name {
			return v, true
		}
	}
	return genVar{}, false
}

// loop writes a loop of one of the forms, often with break and continue.
func (g *generator) loop() {
	g.loops++
	label := ""
	if g.IntN(3) == 0 {
		label = fmt.Sprint("L", g.loops)
		g.line("%s:", label)
	}
	i, e := g.name(), g.name()
	saved := len(g.vars)
	switch g.IntN(6) {
	case 0:
		g.line("for %s := 0; %s < %d; %s++ {", i, i, 2+g.IntN(3), i)
		g.vars = append(g.vars[:len(g.vars):len(g.vars)], genVar{i, counter})
	case 1:
		g.line("for %s := range %d {", i, 2+g.IntN(3))
	case 2:
		g.line("for %s, %s := range (%s) {", i, e, g.expr("[]int", 1))
		g.vars = append(g.vars[:len(g.vars):len(g.vars)], genVar{e, "int"})
	case 3:
		g.line("for %s, %s := range (%s) {", i, e, g.expr("[2]Pair", 1))
		g.vars = append(g.vars[:len(g.vars):len(g.vars)], genVar{e, "Pair"})
	case 4:
		g.line("for %s := range seq(%d) {", i, 2+g.IntN(3))
		g.vars = append(g.vars[:len(g.vars):len(g.vars)], genVar{i, "int"})
	default:
		g.line("for %s, %s := range (%s) {", i, e, g.expr("string", 1))
		g.vars = append(g.vars[:len(g.vars):len(g.vars)], genVar{e, "int32"})
	}
	g.depth++
	g.line("_ = %s", i)
	for _, v := range g.vars[saved:] {
		if v.name == e {
			g.line("_ = %s", e)
		}
	}
	g.line("total++; if total > 2000 { break }")
	if g.IntN(2) == 0 {
		g.line("if (%s) { %s %s }", g.expr("bool", 2), []string{"continue", "break"}[g.IntN(2)], pickOne(g, "", label))
	}
	g.depth--
	g.block(2)
	if label != "" {
		g.depth++
		g.line("if total < 0 { continue %s }", label)
		g.depth--
	}
	g.line("}")
	g.vars = g.vars[:saved]
}

func (g *generator) switchStatement() {
	switch g.IntN(3) {
	case 0:
		t := []string{"int", "string", "Level", "any"}[g.IntN(4)]
		g.line("switch (%s) {", g.typed(t, 2))
		for range 2 {
			g.line("case %s, %s:", g.nonConst(t), g.nonConst(t))
			g.block(1)
			if g.IntN(3) == 0 {
				g.depth++
				g.line("fallthrough")
				g.depth--
			}
		}
		g.line("default:")
		g.block(1)
		g.line("}")
	case 1:
		g.line("switch {")
		g.line("case %s:", g.expr("bool", 2))
		g.block(1)
		g.line("case %s, %s:", g.expr("bool", 2), g.expr("bool", 1))
		g.block(1)
		g.line("}")
	default:
		g.line("switch x := (any(%s)).(type) {", g.expr(g.typ(), 2))
		g.line("case int, Level:")
		g.line("\tfmt.Println(\"number\", x)")
		g.line("case Shape:")
		g.line("\tfmt.Println(\"shape\", x.Area() > 5)")
		g.line("case error:")
		g.line("\tfmt.Println(\"error\", x.Error())")
		g.line("case []int:")
		g.line("\tfmt.Println(len(x))")
		g.line("case nil:")
		g.line("default:")
		g.line("\t_ = x")
		g.line("}")
	}
}

// nonConst is an expression that is no constant, so that cases cannot repeat.
func (g *generator) nonConst(t string) string {
	return fmt.Sprintf("pick(total > 0, %s, %s)", g.typed(t, 1), g.typed(t, 1))
}

// closures makes functions that share variables, in a loop, and calls them.
func (g *generator) closures() {
	fs, i, x := g.name(), g.name(), g.name()
	t := []string{"int", "Pair", "[3]int", "Level"}[g.IntN(4)]
	g.line("var %s []func()", fs)
	g.line("for %s := 0; %s < 3; %s++ {", i, i, i)
	g.depth++
	g.line("%s := %s", x, g.typed(t, 2))
	g.line("%s = append(%s, func() { %s; show(%q, %s); note(%q, %s) })", fs, fs, g.change(genVar{x, t}), x, x, i, i)
	if g.IntN(2) == 0 {
		g.line("if %s == 1 { continue }", i)
	}
	if g.IntN(2) == 0 {
		g.line("%s", g.change(genVar{x, t}))
	}
	g.depth--
	g.line("}")
	g.line("for _, f := range %s { f(); f() }", fs)
	g.line("fmt.Println()")
}

// panics writes a statement that may panic.
func (g *generator) panics() {
	switch g.IntN(6) {
	case 0:
		g.line("fmt.Println(%s[%s])", g.nonConst("[]int"), g.nonConst("int"))
	case 1:
		g.line("fmt.Println(7 / %s)", g.nonConst("int"))
	case 2:
		g.line("panic(%s)", g.expr("error", 2))
	case 3:
		g.line("fmt.Println(any(%s).(Shape).Area() > 1)", g.expr("any", 1))
	case 4:
		g.line("fmt.Println(%s[%s:])", g.nonConst("[]int"), g.nonConst("int"))
	default:
		g.line("fmt.Println(%s.A)", g.nonConst("*Pair"))
	}
}

// typed is an expression whose own type is t.
func (g *generator) typed(t string, d int) string {
	switch t {
	case "*Pair", "func(int) int", "map[string]int", "[]int", "[]Pair":
		return fmt.Sprintf("(%s)(%s)", t, g.expr(t, d))
	}
	return fmt.Sprintf("%s(%s)", t, g.expr(t, d))
}

// expr is an expression that can be assigned to t.
func (g *generator) expr(t string, d int) string {
	if v, ok := g.variable(t); ok && g.IntN(3) > 0 {
		return v
	}
	if d <= 0 {
		return g.literal(t)
	}
	if g.IntN(5) == 0 && d > 1 {
		for _, f := range g.funcs {
			if f.result == t && !g.inFunc {
				return g.call(f, d-1)
			}
		}
	}
	e := func(t string) string { return g.expr(t, d-1) }
	switch t {
	case "int":
		return pickOne(g, fmt.Sprintf("(%s %s %s)", e("int"), []string{"+", "-", "*", "&", "|", "^"}[g.IntN(6)], e("int")),
			fmt.Sprintf("note(%q, %s)", "n", e("int")), fmt.Sprintf("len(%s)", e("[]int")), fmt.Sprintf("int(%s)", g.typed("uint8", d-1)),
			fmt.Sprintf("%s[iabs(%s)%%3]", paren(e("[3]int")), e("int")), fmt.Sprintf("%s.A", paren(g.typed("Pair", d-1))),
			fmt.Sprintf("%s(%s)", paren(g.typed("func(int) int", d-1)), e("int")), fmt.Sprintf("pick(%s, %s, %s)", e("bool"), g.typed("int", d-1), e("int")),
			fmt.Sprintf("%s[%s]", paren(g.typed("map[string]int", d-1)), e("string")), fmt.Sprintf("(%s %% (%s|1))", e("int"), e("int")),
			fmt.Sprintf("(%s << (%s & 7))", g.typed("int", d-1), g.typed("uint8", d-1)), fmt.Sprintf("min(%s, %s)", g.typed("int", d-1), e("int")),
			fmt.Sprintf("%s.top(%s)", paren(g.typed("Stack[int]", d-1)), e("int")))
	case "uint8", "int32", "uint64":
		return fmt.Sprintf("(pick(total > 5, %s, %s) %s %s)", g.typed(t, d-1), g.literal(t), []string{"+", "-", "*", "&", "|", "^", "&^"}[g.IntN(7)], g.typed(t, d-1))
	case "float64":
		return pickOne(g, fmt.Sprintf("(%s %s %s)", e(t), []string{"+", "-", "*"}[g.IntN(3)], e(t)), fmt.Sprintf("float64(%s)", g.typed("int", d-1)),
			fmt.Sprintf("%s.Area()", paren(g.typed("Pair", d-1))), fmt.Sprintf("real(%s)", g.typed("complex128", d-1)), fmt.Sprintf("max(%s, %s)", g.typed(t, d-1), e(t)))
	case "complex128":
		return pickOne(g, fmt.Sprintf("(%s %s %s)", e(t), []string{"+", "-", "*"}[g.IntN(3)], e(t)), fmt.Sprintf("complex(%s, %s)", g.typed("float64", d-1), e("float64")))
	case "string":
		return pickOne(g, fmt.Sprintf("fmt.Sprint(%s)", e(g.printable())), fmt.Sprintf("(%s + %s)", g.literal(t), e(t)), fmt.Sprintf("fmt.Sprintf(\"%%v|%%T\", %s, %s)", g.typed(g.printable(), d-1), g.typed(g.printable(), d-1)))
	case "bool":
		return pickOne(g, fmt.Sprintf("(%s < %s)", g.typed("int", d-1), e("int")), fmt.Sprintf("(%s && %s)", e(t), e(t)), fmt.Sprintf("(%s || %s)", e(t), e(t)), "!"+e(t),
			fmt.Sprintf("(%s == %s)", g.typed("Pair", d-1), g.typed("Pair", d-1)), fmt.Sprintf("(%s != %s)", g.typed("any", d-1), e("int")), fmt.Sprintf("(%s == nil)", g.typed("error", d-1)),
			fmt.Sprintf("(%s >= %s)", g.typed("string", d-1), e("string")))
	case "Level":
		return fmt.Sprintf("(%s + Level(%d))", g.typed(t, d-1), g.IntN(5))
	case "Pair":
		return pickOne(g, fmt.Sprintf("Pair{%s, %s, [2]int{%s, 2}}", e("int"), e("float64"), e("int")), fmt.Sprintf("%s.With(%s)", paren(g.typed(t, d-1)), e("int")), fmt.Sprintf("%s[%d]", paren(g.typed("[2]Pair", d-1)), g.IntN(2)))
	case "*Pair":
		return pickOne(g, fmt.Sprintf("&Pair{A: %s}", e("int")), fmt.Sprintf("(&Pair{}).Add(%s)", e("int")))
	case "[]int":
		return pickOne(g, fmt.Sprintf("append([]int{%s}, %s...)", e("int"), e(t)), fmt.Sprintf("[]int{%s, %s}", e("int"), e("int")))
	case "[]Pair":
		return fmt.Sprintf("[]Pair{%s, {A: %s}}", e("Pair"), e("int"))
	case "[3]int":
		return fmt.Sprintf("[3]int{%s, 2: %s}", e("int"), e("int"))
	case "[2]Pair":
		return fmt.Sprintf("[2]Pair{%s, %s}", e("Pair"), e("Pair"))
	case "map[string]int":
		return fmt.Sprintf("map[string]int{\"a\": %s, \"b\": %s}", e("int"), e("int"))
	case "func(int) int":
		n, ok := g.variable("int") // nothing that could call itself
		if !ok {
			n = g.literal("int")
		}
		return fmt.Sprintf("func(a int) int { return a + %s }", n)
	case "Shape":
		return pickOne(g, e("Pair"), fmt.Sprintf("Disc(%s)", e("float64")), "&Pair{A: "+e("int")+"}")
	case "any":
		return e(pickOne(g, "int", "string", "Level", "Pair", "error", "Shape", "bool"))
	case "error":
		return pickOne(g, fmt.Sprintf("Fault{%s}", e("int")), fmt.Sprintf("fmt.Errorf(\"e%%v: %%w\", %s, %s)", e("int"), g.typed("error", d-1)), "errors.New("+e("string")+")")
	case "Tree":
		return fmt.Sprintf("*(&Tree{v: %s}).grow(%s)", e("int"), e("int"))
	case "Stack[int]":
		return fmt.Sprintf("Stack[int]{%s}", e("[]int"))
	}
	return g.literal(t)
}

func paren(s string) string { return "(" + s + ")" }

func (g *generator) call(f genFunc, d int) string {
	var args []string
	for _, p := range f.params {
		args = append(args, g.expr(p, d))
	}
	return fmt.Sprintf("%s(%s)", f.name, strings.Join(args, ", "))
}

func (g *generator) literal(t string) string {
	n := g.IntN(9)
	switch t {
	case "int", "uint8", "int32", "uint64":
		return fmt.Sprint(n)
	case "Level":
		return fmt.Sprintf("Level(%d)", n)
	case "float64":
		return fmt.Sprintf("%d.5", n)
	case "complex128":
		return fmt.Sprintf("(%d + %di)", n, g.IntN(4))
	case "string":
		return fmt.Sprintf("%q", strings.Repeat(string(rune('a'+n)), g.IntN(3)))
	case "bool":
		return fmt.Sprint(n%2 == 0)
	case "Pair":
		return fmt.Sprintf("Pair{A: %d, b: 1.5}", n)
	case "*Pair":
		return fmt.Sprintf("&Pair{A: %d}", n)
	case "[]int":
		return fmt.Sprintf("[]int{%d, 2, 3}", n)
	case "[]Pair":
		return fmt.Sprintf("[]Pair{{A: %d}}", n)
	case "[3]int":
		return fmt.Sprintf("[3]int{%d}", n)
	case "[2]Pair":
		return fmt.Sprintf("[2]Pair{{A: %d}}", n)
	case "map[string]int":
		return fmt.Sprintf("map[string]int{\"k\": %d}", n)
	case "func(int) int":
		return fmt.Sprintf("func(a int) int { return a * %d }", n)
	case "Shape":
		return fmt.Sprintf("Disc(%d)", n)
	case "any":
		return fmt.Sprint(n)
	case "error":
		return fmt.Sprintf("Fault{%d}", n)
	case "Tree":
		return fmt.Sprintf("Tree{v: %d}", n)
	}
	return fmt.Sprintf("Stack[int]{[]int{%d}}", n)
}
