package script

import (
	"context"
	"errors"
	"strings"
	"testing"
)

// TestWaysToTheSystemAreRefused names everything that reaches beyond a script
// but for files: nothing of it may run.
func TestWaysToTheSystemAreRefused(t *testing.T) {
	for _, text := range []string{
		`import "net"` + "\nfunc main() { net.Dial(\"tcp\", \"\") }", `import "net/http"` + "\nfunc main() { http.Get(\"\") }",
		`import "os/exec"` + "\nfunc main() { exec.Command(\"x\") }", `import "plugin"` + "\nfunc main() { plugin.Open(\"x\") }",
		`import "syscall"` + "\nfunc main() { syscall.Kill(1, syscall.SIGTERM) }", `import "syscall"` + "\nfunc main() { syscall.Open(\"x\", 0, 0) }",
		`import "reflect"` + "\nfunc main() { reflect.ValueOf(1) }", `import "unsafe"` + "\nfunc main() { _ = unsafe.Sizeof(1) }",
		`import "unsafe"` + "\nfunc main() { x := 1; _ = *(*int)(unsafe.Pointer(&x)) }", `import _ "unsafe"` + "\nfunc main() {}",
		`import "C"` + "\nfunc main() {}", "// #include <stdio.h>\nimport \"C\"\nfunc main() { C.puts(nil) }",
		`import _ "embed"` + "\n//go:embed x.txt\nvar s string\nfunc main() { _ = s }", "//go:embed x.txt\nvar s string\nfunc main() { _ = s }",
		"//go:linkname now time.now\nfunc now() {}\nfunc main() { now() }", "func now()\nfunc main() { now() }", "//export main\nfunc main() {}",
		`import "os"` + "\nfunc main() { os.StartProcess(\"x\", nil, nil) }", `import "os"` + "\nfunc main() { os.FindProcess(1) }",
		`import "os"` + "\nfunc main() { p := os.Process{Pid: 1}; p.Kill() }", `import "os"` + "\nfunc main() { p := &os.Process{Pid: 1}; f := p.Kill; f() }",
		`import "os"` + "\nfunc main() { f := (*os.Process).Kill; f(&os.Process{Pid: 1}) }", `import "os"` + "\nfunc main() { var p struct{ *os.Process }; p.Kill() }",
		`import "os"` + "\nfunc main() { os.NewFile(1, \"x\") }", `import "os"` + "\nfunc main() { f := os.NewFile; f(1, \"x\") }",
		`import "os"` + "\nfunc main() { os.Chdir(\"/\") }", `import "os"` + "\nfunc main() { f, _ := os.Open(\".\"); f.Chdir() }",
		`import "os"` + "\nfunc main() { os.Setenv(\"A\", \"b\") }", `import "os"` + "\nfunc main() { os.Executable() }",
		`import "os/signal"` + "\nfunc main() { signal.Ignore() }", `import "runtime"` + "\nfunc main() { runtime.Breakpoint() }",
		`import "runtime"` + "\nfunc main() { runtime.GOMAXPROCS(1) }", `import "runtime/debug"` + "\nfunc main() { debug.SetMaxStack(1) }",
		`import "flag"` + "\nfunc main() { flag.CommandLine.Init(\"x\", flag.ExitOnError) }", `import "flag"` + "\nfunc main() { var f flag.FlagSet; f.Init(\"x\", flag.ExitOnError) }",
		`import "log"` + "\nfunc main() { f := log.Default().Fatal; f(1) }", `import "ketloom/lanczos/archive"` + "\nfunc main() { archive.DiscardOpen() }",
		`import "ketloom/script"` + "\nfunc main() { script.Run(nil, script.Options{}) }",
	} {
		err := Run(context.Background(), Options{Path: "r.go", Source: "package main\n" + text + "\n"})
		var problems Problems
		if !errors.As(err, &problems) {
			t.Errorf("%s\n\t%v; want that it is refused", text, err)
			continue
		}
		if problems[0].Line == 0 {
			t.Errorf("%s: no line in %v", text, problems)
		}
	}
}

// TestRefusedMethodsBehindInterfaces are found when they are called.
func TestRefusedMethodsBehindInterfaces(t *testing.T) {
	for _, body := range []string{
		`var p interface{ Kill() error } = &os.Process{Pid: 1 << 30}; p.Kill()`,
		`f, err := os.Open("."); if err != nil { panic(err) }; var c interface{ Chdir() error } = f; c.Chdir()`,
		`var l any = log.Default(); l.(interface{ Fatal(...any) }).Fatal("end")`,
		`var l interface{ Fatal(...any) } = log.Default(); f := l.Fatal; f("end")`,
		`var i interface{ Init(string, flag.ErrorHandling) } = flag.CommandLine; i.Init("x", flag.ExitOnError)`,
	} {
		err := Run(context.Background(), Options{Path: "r.go", Source: "package main\nimport (\"flag\"; \"log\"; \"os\")\nvar _, _, _ = flag.Args, log.Flags, os.Args\nfunc main() {\n" + body + "\n}\n"})
		var p *PanicError
		if !errors.As(err, &p) || !strings.Contains(p.Message, "not available in a script") || p.Line != 5 {
			t.Errorf("%s: %v", body, err)
		}
	}
}

// TestTheHostStaysAlive ends scripts in the ways that leave something behind.
func TestTheHostStaysAlive(t *testing.T) {
	for _, c := range []struct{ body, want string }{
		{"go func() { for {} }(); go func() { select {} }(); go func() { time.Sleep(time.Hour) }()", ""},
		{"c := make(chan int); close(c); close(c)", "close of closed channel"},
		{"c := make(chan int); close(c); c <- 1", "send on closed channel"},
		{"var c chan int; close(c)", "close of nil channel"},
		{"sort.Slice([]int{3, 1, 2}, func(i, j int) bool { panic(\"less\") })", "less"},
		{"strings.Map(func(r rune) rune { var p *int; return rune(*p) }, \"abc\")", "nil pointer"},
		{"time.AfterFunc(1, func() { panic(\"late\") }); select {}", "late"},
		{"panic(sort.Slice)", ""},
		{"var w sync.WaitGroup; w.Done()", "negative WaitGroup counter"},
		{"x := []any{}; x = append(x, &x); panic(errors.New(\"loops\"))", "loops"},
		{"x := []any{nil}; x[0] = x; fmt.Println(x)", "contains itself"},
		{"m := map[string]any{}; m[\"a\"] = m; _ = fmt.Sprintf(\"%v\", m)", "contains itself"},
		{"type own struct{ in any }; x := []any{nil}; x[0] = own{x}; fmt.Print(&x)", "contains itself"},
		{"type list []any; x := list{nil, nil}; x[1] = x; panic(x)", "list"},
		{"x := []any{nil}; x[0] = x; panic(x)", "[]interface"},
		{"x := []any{nil}; x[0] = x; log.New(os.Stderr, \"\", 0).Println(x)", "contains itself"},
		{"x := []any{nil}; x[0] = x; var l interface{ Printf(string, ...any) } = log.Default(); l.Printf(\"%v\", x)", "contains itself"},
		{"o := sync.OnceFunc(func() { panic(\"once\") }); o()", "once"},
	} {
		err := Run(context.Background(), Options{Path: "a.go", Source: "package main\nimport (\"errors\"; \"fmt\"; \"log\"; \"os\"; \"sort\"; \"strings\"; \"sync\"; \"time\")\nvar _, _, _ = fmt.Print, log.Print, os.Args\nvar _, _, _, _ = errors.New, sort.Ints, strings.Map, time.Now\nvar _ sync.Mutex\nfunc main() {\n" + c.body + "\n}\n"})
		var p *PanicError
		switch {
		case c.want == "":
			if err != nil && !errors.As(err, &p) {
				t.Errorf("%s: %v", c.body, err)
			}
		case !errors.As(err, &p) || !strings.Contains(p.Message, c.want) || p.Line == 0:
			t.Errorf("%s: %v, want %q", c.body, err, c.want)
		}
	}
}
