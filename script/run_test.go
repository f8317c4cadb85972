package script

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"
)

func TestArgumentsFlagsAndStreams(t *testing.T) {
	const src = `package main
import ("bufio"; "flag"; "fmt"; "log"; "os")
var n = flag.Int("n", 3, "number")
func main() {
	flag.Parse()
	fmt.Println(len(os.Args), *n, flag.Args(), flag.NArg())
	s := bufio.NewScanner(os.Stdin)
	for s.Scan() { fmt.Println("read", s.Text()) }
	fmt.Fprintln(os.Stdout, "direct")
	fmt.Println("after")
	fmt.Fprintln(os.Stderr, "error stream")
	log.SetFlags(0)
	log.Print("logged")
}`
	before := len(os.Args)
	var out, errs bytes.Buffer
	err := Run(context.Background(), Options{Source: src, Args: []string{"-n", "7", "a", "b"}, Stdin: strings.NewReader("x\ny\n"), Stdout: &out, Stderr: &errs})
	if err != nil {
		t.Fatal(err)
	}
	if got, want := out.String(), "5 7 [a b] 2\nread x\nread y\ndirect\nafter\n"; got != want {
		t.Errorf("stdout %q, want %q", got, want)
	}
	if got, want := errs.String(), "error stream\nlogged\n"; got != want {
		t.Errorf("stderr %q, want %q", got, want)
	}
	if len(os.Args) != before {
		t.Error("the arguments of the program changed")
	}
}

func TestExitCodes(t *testing.T) {
	for src, want := range map[string]int{
		`defer fmt.Println("not run"); os.Exit(7)`: 7,
		`os.Exit(0)`: 0,
		`defer func() { recover() }(); os.Exit(3)`: 3,
		`go os.Exit(4); select {}`:                 4,
		`log.Fatal("end")`:                         1,
		`flag.Parse()`:                             2,
		`sort.Slice([]int{1,2}, func(i, j int) bool { os.Exit(5); return false })`: 5,
	} {
		text := "package main\nimport (\"flag\"; \"fmt\"; \"log\"; \"os\"; \"sort\")\nvar _ = flag.Args\nvar _ = fmt.Sprint\nvar _ = log.Flags\nvar _ = os.Args\nvar _ = sort.Ints\nfunc main() { " + src + " }\n"
		var out bytes.Buffer
		err := Run(context.Background(), Options{Source: text, Args: []string{"-unknown"}, Stdout: &out})
		code := 0
		var exit *ExitError
		if errors.As(err, &exit) {
			code = exit.Code
		} else if err != nil {
			t.Errorf("%s: %v", src, err)
			continue
		}
		if code != want || out.Len() > 0 {
			t.Errorf("%s: code %d and output %q, want %d and none", src, code, out.String(), want)
		}
	}
}

func TestPanicsBecomeErrorsWithTheirLine(t *testing.T) {
	for src, want := range map[string]string{
		"x := []int{1}\n\ti := 3\n\tfmt.Println(x[i])": "p.go:8: panic: runtime error: index out of range [3] with length 1",
		"panic(\"text\")":             "p.go:6: panic: text",
		"panic(errors.New(\"mine\"))": "p.go:6: panic: mine",
		"panic(42)":                   "p.go:6: panic: int(42)",
		"fmt.Println(strings.Repeat(\"a\",\n\t\t-len(\"a\")))":                                                 "p.go:6: panic: strings: negative Repeat count",
		"var wg sync.WaitGroup\n\twg.Add(1)\n\tgo func() {\n\t\tpanic(\"g\")\n\t}()\n\twg.Wait()":              "p.go:9: panic: g",
		"defer fmt.Print()\n\tdefer func() {\n\t\tpanic(fmt.Sprint(\"again \", recover()))\n\t}()\n\tpanic(1)": "p.go:8: panic: again 1",
		"time.AfterFunc(1, func() {\n\t\tpanic(\"timer\")\n\t})\n\tselect {}":                                  "p.go:7: panic: timer",
		"var e error\n\tfmt.Println(e.Error())":                                                                "p.go:7: panic: runtime error: invalid memory address or nil pointer dereference\n[signal SIGSEGV: segmentation violation]",
	} {
		text := "package main\nimport (\"errors\"; \"fmt\"; \"strings\"; \"sync\"; \"time\")\nvar _, _, _, _ = errors.New, fmt.Sprint, strings.Repeat, time.Now\nvar _ sync.Mutex\nfunc main() {\n\t" + src + "\n}\n"
		err := Run(context.Background(), Options{Path: "p.go", Source: text})
		var p *PanicError
		if !errors.As(err, &p) {
			t.Errorf("%s: %v, want a panic", src, err)
			continue
		}
		if p.Error() != want {
			t.Errorf("got  %q\nwant %q", p.Error(), want)
		}
	}
}

// TestEndlessScriptsStop stops scripts that would never end by themselves.
func TestEndlessScriptsStop(t *testing.T) {
	for _, src := range []string{
		"for {}", "n := 0; for { n++ }", "select {}", "c := make(chan int); <-c", "time.Sleep(time.Hour)",
		"var wg sync.WaitGroup; wg.Add(1); wg.Wait()", "f := func() bool { return true }; for f() {}",
		"for i := 0; ; i++ { defer func() {}() }", "c := make(chan int); for { select { case <-c: default: } }",
		"sort.Slice([]int{1, 2, 3}, func(i, j int) bool { for {} })",
	} {
		text := "package main\nimport (\"sort\"; \"sync\"; \"time\")\nvar _ = sort.Ints\nvar _ sync.Mutex\nvar _ = time.Now\nfunc main() { " + src + " }\n"
		ctx, cancel := context.WithCancel(context.Background())
		time.AfterFunc(30*time.Millisecond, cancel)
		if err := Run(ctx, Options{Source: text}); !errors.Is(err, context.Canceled) {
			t.Errorf("%s: %v, want that it was stopped", src, err)
		}
	}
}

func TestEndlessRecursionIsAnError(t *testing.T) {
	if testing.Short() {
		t.Skip("needs half a gigabyte")
	}
	err := Run(context.Background(), Options{Source: "package main\nfunc f(n int) int { return f(n+1) + 1 }\nfunc main() { f(0) }\n"})
	var p *PanicError
	if !errors.As(err, &p) || !strings.Contains(p.Message, "stack overflow") {
		t.Errorf("%v, want a stack overflow", err)
	}
}

func TestSeveralScriptsAtOnce(t *testing.T) {
	const src = `package main
import ("flag"; "fmt"; "os"; "sync")
var n = flag.Int("n", 0, "")
var total int
func main() {
	flag.Parse()
	var wg sync.WaitGroup
	var mu sync.Mutex
	for i := range 20 {
		wg.Add(1)
		go func() { defer wg.Done(); mu.Lock(); total += i * *n; mu.Unlock() }()
	}
	wg.Wait()
	fmt.Println(*n, total, len(os.Args))
	if *n%2 == 1 { os.Exit(*n) }
}`
	var wg sync.WaitGroup
	for n := range 8 {
		wg.Add(1)
		go func() {
			defer wg.Done()
			var out bytes.Buffer
			err := Run(context.Background(), Options{Source: src, Args: []string{"-n", fmt.Sprint(n)}, Stdout: &out})
			var exit *ExitError
			if n%2 == 1 && (!errors.As(err, &exit) || exit.Code != n) || n%2 == 0 && err != nil {
				t.Errorf("script %d: %v", n, err)
			}
			if got, want := out.String(), fmt.Sprintf("%d %d 3\n", n, 190*n); got != want {
				t.Errorf("script %d: %q, want %q", n, got, want)
			}
		}()
	}
	wg.Wait()
}

func TestFolderIsOneScript(t *testing.T) {
	dir := t.TempDir()
	for name, text := range map[string]string{
		"a.go":      "package main\nvar x = y + 1\nfunc main() { show(x) }\n",
		"b.go":      "package main\nimport \"fmt\"\nvar y = 2\nfunc init() { fmt.Println(\"init\", x) }\nfunc show(n int) { fmt.Println(n) }\n",
		"b_test.go": "package main\nthis is no Go\n",
		"notes.txt": "nothing",
	} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	var out bytes.Buffer
	if err := Run(context.Background(), Options{Path: dir, Stdout: &out}); err != nil {
		t.Fatal(err)
	}
	if got, want := out.String(), "init 3\n3\n"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func ExampleRun() {
	err := Run(context.Background(), Options{
		Path: "sum.go",
		Source: `package main

import "fmt"

func main() {
	total := 0
	for i := range 5 {
		total += i
	}
	fmt.Println("total", total)
}
`,
		Stdout: os.Stdout,
	})
	fmt.Println("error:", err)
	// Output:
	// total 10
	// error: <nil>
}

func ExampleCheck() {
	err := Check(Options{Path: "sum.go", Source: "package main\n\nfunc main() {\n\tx := total\n}\n"})
	fmt.Println(err)
	// Output:
	// sum.go:4:2: declared and not used: x
	// 	x := total
	// sum.go:4:7: undefined: total
	// 	x := total
}

// Many short stacks are not one that is too deep, whoever they belong to.
func TestManyStacksAreNoOverflow(t *testing.T) {
	if testing.Short() {
		t.Skip("needs half a gigabyte")
	}
	var wg sync.WaitGroup
	hold := make(chan struct{})
	defer wg.Wait()
	defer close(hold)
	go func() {
		time.Sleep(50 * time.Millisecond)
		for range 1000 {
			wg.Go(func() { bulky(hold, 4) })
		}
	}()
	src := "package main\nimport \"time\"\nfunc main() { time.Sleep(600 * time.Millisecond) }\n"
	if err := Run(context.Background(), Options{Source: src}); err != nil {
		t.Error(err)
	}
}

// bulky waits on a stack of half a megabyte.
//
//go:noinline
func bulky(hold chan struct{}, calls int) byte {
	var frame [100 << 10]byte
	if calls > 0 {
		return bulky(hold, calls-1)
	}
	<-hold
	return frame[len(hold)]
}
