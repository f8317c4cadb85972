package script

import (
	"context"
	"errors"
	"go/constant"
	"os"
	"os/exec"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"
)

// The energy at 0.5 is -3/8 a site: Majumdar and Ghosh, J. Math. Phys. 10, 1388
// (1969). At 0 it is that of the ring of 12 sites in the tests of package
// lanczos.
const embedded = `coupling 0     energy -5.387390917  said "-0.448949 a site"
coupling 0.25  energy -4.857511005  said "-0.404793 a site"
coupling 0.5   energy -4.500000000  said "-0.375000 a site"
`

// TestEmbeddingExample builds and runs the host of examples/embedding, which is
// a module of its own, against this tree.
func TestEmbeddingExample(t *testing.T) {
	if testing.Short() {
		t.Skip("builds a program")
	}
	tool := goTool(t)
	dir := filepath.Join(moduleFolder, "..", "examples", "embedding")
	run := func(args ...string) string {
		cmd := exec.Command(tool, args...)
		cmd.Dir = dir
		cmd.Env = append(os.Environ(), "GOFLAGS=-mod=readonly", "GOWORK=off")
		out, err := cmd.CombinedOutput()
		if err != nil {
			if strings.Contains(string(out), "module lookup disabled") || strings.Contains(string(out), "dial tcp") {
				t.Skipf("modules are not at hand: %s", out)
			}
			t.Fatalf("go %v: %v\n%s", args, err, out)
		}
		return string(out)
	}
	run("run", "ketloom/script/symbols/generate", "-check", "-package", "example.org/couplings/chain", "-out", "symbols_chain.go")
	run("build", "-o", filepath.Join(t.TempDir(), "scan"), "scan.go") // the script compiles, too
	if got := run("run", "."); got != embedded {
		t.Errorf("%s", firstDifference(got, embedded))
	}
}

func TestValuesReturnToTheHost(t *testing.T) {
	var names []string
	var values []any
	err := Run(context.Background(), Options{
		Source: `package main
import "ketloom/script/host"
func main() {
	host.Return("energy", -1.5)
	f := host.Return
	f("list", []float64{1, 2})
	var x any = map[string]int{"a": 1}
	host.Return("map", x)
	host.Return("nothing", nil)
}`,
		Return: func(name string, value any) { names, values = append(names, name), append(values, value) },
	})
	if err != nil {
		t.Fatal(err)
	}
	want := []any{-1.5, []float64{1, 2}, map[string]int{"a": 1}, nil}
	if !reflect.DeepEqual(values, want) || strings.Join(names, " ") != "energy list map nothing" {
		t.Errorf("%v %v, want %v", names, values, want)
	}
	err = Run(context.Background(), Options{Source: "package main\nimport \"ketloom/script/host\"\ntype own struct{ A int }\nfunc main() {\n\thost.Return(\"x\", own{1})\n}\n"})
	if err == nil || !strings.Contains(err.Error(), "script's type own") {
		t.Errorf("a value of a script's type: %v", err)
	}
}

// Speed is a type of a host's package.
type Speed float64

// Twice doubles it.
func (s Speed) Twice() Speed { return 2 * s }

func TestPackagesOfTheHost(t *testing.T) {
	count := 0
	tables := map[string]map[string]reflect.Value{"example.org/host/physics": {
		"Speed": reflect.ValueOf((*Speed)(nil)),
		"Limit": reflect.ValueOf(constant.MakeFloat64(2.5)),
		"Count": reflect.ValueOf(&count).Elem(),
		"Add":   reflect.ValueOf(func(a, b Speed) Speed { count++; return a + b }),
	}}
	out := strings.Builder{}
	err := Run(context.Background(), Options{Stdout: &out, Packages: tables, Source: `package main
import ("fmt"; "example.org/host/physics")
func main() {
	s := physics.Add(physics.Limit, 1).Twice()
	fmt.Printf("%v %T %d\n", s, s, physics.Count)
}`})
	if err != nil || out.String() != "7 script.Speed 1\n" || count != 1 {
		t.Errorf("%q, %v, %d calls", out.String(), err, count)
	}
	for _, path := range []string{"os", "slices", "ketloom/basis", "unsafe"} {
		err := Check(Options{Source: "package main\nfunc main() {}\n", Packages: map[string]map[string]reflect.Value{path: {}}})
		if err == nil || !strings.Contains(err.Error(), path) {
			t.Errorf("a host replaced %s: %v", path, err)
		}
	}
	if err := Check(Options{Source: "package main\nimport _ \"example.org/host/physics\"\nfunc main() {}\n"}); err == nil {
		t.Error("the package of one host is there for another")
	}
}

func TestLimitsNameTheLine(t *testing.T) {
	for _, c := range []struct {
		body string
		o    Options
		what string
		line int
	}{
		{"for {\n\t}", Options{Time: 100 * time.Millisecond}, "time", 4},
		{"for {\n\t}", Options{Steps: 1000}, "steps", 4},
		{"x := 0\n\tfor i := range 10_000_000 {\n\t\tx += i\n\t}", Options{Steps: 1000}, "steps", 5},
		{"again:\n\tx := 1\n\tif x > 0 { goto again }", Options{Steps: 1000}, "steps", 4},
		{"var f func(int) int\n\tf = func(n int) int {\n\t\treturn f(n + 1)\n\t}\n\tf(1)", Options{Steps: 1000}, "steps", 5},
		{"c := make(chan int)\n\tgo func() {\n\t\tfor { c <- 1 }\n\t}()\n\tfor range c {\n\t}", Options{Steps: 1000}, "steps", 0},
		{"seq := func(yield func(int) bool) { for yield(1) {} }\n\tfor range seq {\n\t}", Options{Steps: 1000}, "steps", 0},
		{"m := map[int]int{1: 1}\n\tfor i := 0; ; i++ {\n\t\tfor range m {}\n\t}", Options{Steps: 1000}, "steps", 0},
		{"defer func() { recover() }()\n\tfor {\n\t\tfunc() { defer func() { recover() }() }()\n\t}", Options{Steps: 1000}, "steps", 0},
		{"select {}", Options{Time: 50 * time.Millisecond}, "time", 3},
	} {
		c.o.Path, c.o.Source = "l.go", "package main\n\nfunc main() {\n\t"+c.body+"\n}\n"
		err := Run(context.Background(), c.o)
		var limit *LimitError
		if !errors.As(err, &limit) || limit.What != c.what || c.line > 0 && limit.Line != c.line || limit.Line == 0 {
			t.Errorf("%q: %v, want the limit of %s in line %d", c.body, err, c.what, c.line)
		}
	}
	if err := Run(context.Background(), Options{Steps: 50, Source: "package main\nfunc main() { for range 20 {} }\n"}); err != nil {
		t.Errorf("within the limit: %v", err)
	}
}

// TestAllocationsAreBounded asks for a terabyte in every way there is.
func TestAllocationsAreBounded(t *testing.T) {
	const head = "package main\nimport (\"bufio\"; \"bytes\"; \"math/big\"; \"os\"; \"slices\"; \"strings\")\nvar _ bufio.Reader\nvar _ bytes.Buffer\nvar _ big.Int\nvar _ = os.Args\nvar _ = slices.Max[[]int]\nvar _ = strings.Repeat\nvar n = 1 << 40\nfunc main() {\n"
	for _, body := range []string{
		"_ = make([]byte, n)", "_ = make([]byte, 0, n)", "_ = make([][1024]int, n/1024)", "_ = make(map[int]int, n)", "_ = make(chan int, n)",
		"x := []byte{}; for { x = append(x, x...); x = append(x, 1) }", "x := []byte{}; for { x = append(x, 1, 2); x = append(x, x...) }",
		"x := [][1<<20]byte{}; for { x = append(x, [1<<20]byte{}) }",
		"s := \"x\"; for { s += s }", "s := \"x\"; for { s = s + s + \"y\" }", "_ = strings.Repeat(\"abc\", n)", "_ = bytes.Repeat([]byte(\"abc\"), n)",
		"var b strings.Builder; b.Grow(n)", "f := new(bytes.Buffer).Grow; f(n)", "var g interface{ Grow(int) } = new(bytes.Buffer); g.Grow(n)",
		"_ = bufio.NewReaderSize(os.Stdin, n)", "_ = new(big.Int).Lsh(big.NewInt(1), uint(8*n))", "_ = slices.Repeat([]int{1}, n)",
	} {
		err := Run(context.Background(), Options{Path: "a.go", Source: head + body + "\n}\n", Memory: 64 << 20})
		var p *PanicError
		if !errors.As(err, &p) || !strings.Contains(p.Message, "out of memory") || p.Line == 0 {
			var problems Problems
			if strings.Contains(body, "slices.Repeat") && errors.As(err, &problems) {
				continue // the function is not there
			}
			t.Errorf("%s: %v", body, err)
		}
	}
	if err := Run(context.Background(), Options{Source: head + "var a [1 << 38]byte; _ = a[n-n]\n}\n"}); err == nil || !strings.Contains(err.Error(), "more than a script may allocate") {
		t.Errorf("a large array: %v", err)
	}
}

// TestFatalErrorsArePanics does what would end a compiled program beyond recovery.
func TestFatalErrorsArePanics(t *testing.T) {
	for _, body := range []string{
		"var m sync.Mutex; m.Unlock()", "var m sync.RWMutex; m.Unlock()", "var m sync.RWMutex; m.RUnlock()", "var m sync.Mutex; f := m.Unlock; f()",
		"var l sync.Locker = new(sync.Mutex); l.Unlock()", "var m struct{ sync.Mutex }; m.Unlock()", "sync.NewCond(new(sync.Mutex)).Wait()", "var m sync.Mutex; defer m.Unlock()",
	} {
		err := Run(context.Background(), Options{Path: "f.go", Source: "package main\nimport \"sync\"\nfunc main() {\n" + body + "\n}\n"})
		var p *PanicError
		if !errors.As(err, &p) || !strings.Contains(p.Message, "unlocked") {
			t.Errorf("%s: %v", body, err)
		}
	}
	const good = "package main\nimport \"sync\"\nfunc main() {\n\tvar m sync.RWMutex; var w sync.WaitGroup\n\tfor range 8 { w.Go(func() { for range 50 { m.Lock(); m.Unlock(); m.RLock(); m.RUnlock() } }) }\n\tw.Wait()\n}\n"
	if err := Run(context.Background(), Options{Source: good}); err != nil {
		t.Errorf("locks that are held: %v", err)
	}
}
