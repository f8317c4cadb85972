package lower

import (
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"go/types"
	"io"
	"strings"
	"testing"

	"ketloom/script/machine"
	"ketloom/script/universe"
)

// lowered lowers a script that imports nothing.
func lowered(t testing.TB, src string) (*Program, []Refusal) {
	t.Helper()
	p, refused, err := compileText(src)
	if err != nil {
		t.Fatal(err)
	}
	return p, refused
}

func compileText(src string) (*Program, []Refusal, error) {
	fset := token.NewFileSet()
	f, err := parser.ParseFile(fset, "x.go", src, parser.SkipObjectResolution)
	if err != nil {
		return nil, nil, err
	}
	u, info := universe.New(nil), universe.NewInfo()
	conf := types.Config{Importer: u}
	pkg, err := conf.Check("main", fset, []*ast.File{f}, info)
	if err != nil {
		return nil, nil, err
	}
	run := machine.New(machine.Streams{Out: io.Discard, Err: io.Discard}, nil)
	defer run.Close()
	p, refused := Compile(Input{Fset: fset, Files: []*ast.File{f}, Info: info, Package: pkg, Universe: u, Run: run})
	return p, refused, nil
}

// TestFormsThatNeverRemain looks for what the interpreter does not compute
// exactly.
func TestFormsThatNeverRemain(t *testing.T) {
	p, refused := lowered(t, `package main

type T struct{ a, b int }

func (t T) Sum() int { return t.a + t.b }

type I interface{ Sum() int }

func pair(n int) (x, y int) {
	defer func() { x++; recover() }()
	switch n {
	case 1, n + 1:
		return 1, 2
	default:
		x = 3
	}
	return
}

func id[K any](k K) K { return k }

func main() {
	var i I = T{1, 2}
	c := make(chan int, 1)
	for k := range 3 {
		select {
		case c <- k:
		default:
		}
		x, _ := pair(k)
		f := func() int { x += k; return x << k }
		go f()
		_ = f() + i.Sum() + id(2)
	}
	m := map[string]int{"a": 1}
	for k, v := range m {
		m[k] = min(v, 2)
	}
	clear(m)
}
`)
	if len(refused) > 0 {
		t.Fatal(refused)
	}
	for _, word := range []string{"defer ", "recover(", "switch", "select", "<-", "go ", "range 3", "min(", "clear(", "[K", ".Sum", "type "} {
		if i := strings.Index(p.Source, word); i >= 0 {
			t.Errorf("%q remains: ...%s", word, p.Source[max(0, i-40):i+len(word)])
		}
	}
}

func TestLoweringIsDeterministic(t *testing.T) {
	const src = `package main

var a, b, c = 1, "x", 2.5

type T struct{ n int }

func (t T) String() string { return "" }

func main() {
	f := func() int { return a }
	var x any = T{f()}
	_, _, _ = b, c, x
}
`
	first, _ := lowered(t, src)
	for range 5 {
		if again, _ := lowered(t, src); again.Source != first.Source {
			t.Fatal("two lowerings of one script differ")
		}
	}
}

func TestRefusalsContinue(t *testing.T) {
	_, refused := lowered(t, `package main

func main() {
	println(1)
	x := 2
	_ = x
	_ = recover()
	print("a")
}
`)
	if len(refused) != 3 {
		t.Errorf("%d refusals, want 3: %v", len(refused), refused)
	}
}

func TestSharedVariables(t *testing.T) {
	p, _ := lowered(t, `package main

func main() {
	kept, shared := 1, 2
	f := func() int { shared++; return kept + shared }
	_ = f()
}
`)
	if !strings.Contains(p.Source, "*int") || strings.Count(p.Source, "new(int)") != 1 {
		t.Errorf("want one variable behind a pointer:\n%s", p.Source)
	}
}

func ExampleCompile() {
	p, refused, err := compileText("package main\n\nfunc main() {\n\tprintln(1)\n}\n")
	fmt.Println(p == nil, err)
	for _, r := range refused {
		fmt.Println(r.Message)
	}
	// Output:
	// true <nil>
	// println is not available in a script; use fmt.Print or fmt.Fprintln(os.Stderr, ...)
}
