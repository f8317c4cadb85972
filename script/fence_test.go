package script

import (
	"bytes"
	"context"
	"errors"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"ketloom/script/fence"
	"ketloom/script/lower"
	"ketloom/script/machine"
	"ketloom/script/symbols"
)

// yard is a folder for a script beside a secret that it must not reach.
type yard struct{ inside, outside string }

func newYard(t *testing.T) yard {
	t.Helper()
	top := t.TempDir()
	y := yard{filepath.Join(top, "inside"), filepath.Join(top, "outside")}
	for _, err := range []error{
		os.Mkdir(y.inside, 0o777), os.Mkdir(y.outside, 0o777), os.Mkdir(filepath.Join(y.inside, "sub"), 0o777),
		os.WriteFile(filepath.Join(y.outside, "secret.txt"), []byte("the secret"), 0o666),
		os.WriteFile(filepath.Join(y.inside, "open.txt"), []byte("open to all"), 0o666),
	} {
		if err != nil {
			t.Fatal(err)
		}
	}
	for name, target := range map[string]string{
		"file-link": filepath.Join(y.outside, "secret.txt"), "folder-link": y.outside, "up-link": "../outside",
		"dangling": filepath.Join(y.outside, "new.txt"), "chain-link": "sub/next",
	} {
		if err := os.Symlink(target, filepath.Join(y.inside, name)); err != nil {
			t.Skipf("no links here: %v", err)
		}
	}
	if err := os.Symlink("../folder-link", filepath.Join(y.inside, "sub", "next")); err != nil {
		t.Fatal(err)
	}
	return y
}

// source is a program of the statements of its main.
func (y yard) source(body string) string {
	return `package main
import ("errors"; "fmt"; "io"; "os"; "path/filepath"; "ketloom/lanczos/archive"; "ketloom/script/report"; "ketloom/script/sweep")
var _, _, _, _, _ = errors.New, fmt.Sprint, io.EOF, os.Args, filepath.Join
var _, _ = archive.Open, sweep.Open
var _ report.Table
const secret = ` + "`" + filepath.Join(y.outside, "secret.txt") + "`" + `
const outside = ` + "`" + y.outside + "`" + `
func main() {
` + body + `
}`
}

// run runs statements in the folder of the yard.
func (y yard) run(t *testing.T, body string, o Options) (string, error) {
	t.Helper()
	if o.Root == "" {
		o.Root = y.inside
	}
	o.Path = "y.go"
	o.Source = y.source(body)
	var out bytes.Buffer
	o.Stdout = &out
	err := Run(context.Background(), o)
	return out.String(), err
}

// TestEscapesAreRefused tries every function that takes a path on every way out.
func TestEscapesAreRefused(t *testing.T) {
	y := newYard(t)
	files := []string{"secret", `"../outside/secret.txt"`, `"sub/../../outside/secret.txt"`, `"file-link"`, `"folder-link/secret.txt"`,
		`"up-link/secret.txt"`, `"chain-link/secret.txt"`, `"./sub/../folder-link/./secret.txt"`, `"/proc/self/environ"`, `"/etc/passwd"`}
	reads := []string{
		"_, err := os.Open(p)", "_, err := os.ReadFile(p)", "_, err := os.Stat(p)", "_, err := os.OpenFile(p, os.O_RDONLY, 0)",
		"_, err := archive.Open(p)", "_, err := filepath.EvalSymlinks(p)", "_, err := os.DirFS(filepath.Dir(p)).Open(filepath.Base(p))",
		"f := os.ReadFile; _, err := f(p)", "_, err := os.OpenInRoot(filepath.Dir(p), filepath.Base(p))",
	}
	writes := []string{
		"_, err := os.Create(p)", "err := os.WriteFile(p, []byte{1}, 0o666)", "_, err := os.OpenFile(p, os.O_RDWR, 0)", "_, err := os.OpenFile(p, os.O_TRUNC, 0)",
		"err := os.Truncate(p, 0)", "err := os.Chmod(p, 0o777)", "_, err := archive.Create(p)", `_, err := sweep.Open(p, "study", nil)`,
		`err := report.Table{}.Save(p)`, `s := report.Table{}.Save; err := s(p)`, `err := report.Table.Save(report.Table{}, p)`,
		`var s interface{ Save(string) error } = report.Table{}; err := s.Save(p)`, `var s interface{ Save(string) error } = &report.Table{}; err := s.Save(p)`,
		`err := struct{ report.Table }{}.Save(p)`, `err := report.SpectralFlow{}.Save(p)`, `err := os.Link(p, "mine")`, `err := os.Rename("open.txt", filepath.Dir(p)+"/x")`,
		`err := os.Symlink(p, "mine")`, `_, err := os.CreateTemp(filepath.Dir(p), "x")`, `_, err := os.MkdirTemp(filepath.Dir(p), "x")`,
		`err := os.Mkdir(filepath.Dir(p)+"/x", 0o777)`, `err := os.MkdirAll(filepath.Dir(p)+"/x/y", 0o777)`, `_, err := os.OpenRoot(filepath.Dir(p))`,
	}
	for _, do := range append(reads, writes...) {
		var body strings.Builder
		for _, p := range files {
			if p == `"file-link"` && (strings.Contains(do, "filepath.Dir(p)") || strings.Contains(do, "os.Link")) {
				continue // about the folder, or the link itself
			}
			body.WriteString("{ p := " + p + "; " + do + "; if !errors.Is(err, os.ErrPermission) { fmt.Println(p, err) } }\n")
		}
		out, err := y.run(t, body.String(), Options{})
		if err != nil || out != "" {
			t.Errorf("%s: %v\n%s", do, err, out)
		}
	}
	entries, err := os.ReadDir(y.outside)
	if err != nil || len(entries) != 1 {
		t.Errorf("outside there is %v, %v; want the secret alone", entries, err)
	}
	if b, err := os.ReadFile(filepath.Join(y.outside, "secret.txt")); string(b) != "the secret" {
		t.Errorf("the secret is %q, %v", b, err)
	}
}

func TestOtherWaysOutAreRefused(t *testing.T) {
	y := newYard(t)
	for _, c := range []struct{ body, want string }{
		{`_, err := os.Create("dangling"); fmt.Println(errors.Is(err, os.ErrPermission))`, "true\n"},
		{`fmt.Println(os.Remove("../outside/secret.txt") != nil, os.RemoveAll(outside) != nil, os.RemoveAll("folder-link/secret.txt") != nil)`, "true true true\n"},
		{`fmt.Println(os.Remove("folder-link"), os.RemoveAll("up-link"))`, "<nil> <nil>\n"}, // the links themselves
		{`m, err := filepath.Glob("../outside/*"); fmt.Println(m, err)`, "[] <nil>\n"},
		{`m, err := filepath.Glob("chain-link/*"); fmt.Println(m, err)`, "[] <nil>\n"},
		{`fmt.Println(filepath.WalkDir(outside, func(p string, d os.DirEntry, err error) error { return err }) != nil)`, "true\n"},
		{`fmt.Println(filepath.Walk("..", func(p string, d os.FileInfo, err error) error { return err }) != nil)`, "true\n"},
		{`_, err := os.ReadDir(".."); fmt.Println(err != nil)`, "true\n"},
		{`r, err := os.OpenRoot("."); if err != nil { panic(err) }; _, err = r.Open("file-link"); fmt.Println(err != nil)`, "true\n"},
		{`_, err := os.DirFS(".").Open("file-link"); fmt.Println(err != nil)`, "true\n"},
		{`fmt.Println(os.Rename("open.txt", "../outside/x") != nil, os.Rename(secret, "x") != nil)`, "true true\n"},
		{`_, err := os.Open("file\x00link"); fmt.Println(err != nil)`, "true\n"},
	} {
		out, err := y.run(t, c.body, Options{})
		if err != nil || out != c.want {
			t.Errorf("%s: %q, %v; want %q", c.body, out, err, c.want)
		}
	}
}

func TestTheMessageNamesPathAndFlag(t *testing.T) {
	y := newYard(t)
	out, err := y.run(t, `_, err := os.ReadFile("../outside/secret.txt"); fmt.Println(err)
	_, err = archive.Create(outside + "/a.ket"); fmt.Println(err)`, Options{})
	if err != nil {
		t.Fatal(err)
	}
	real, err := filepath.EvalSymlinks(y.outside)
	if err != nil {
		t.Fatal(err)
	}
	want := "open ../outside/secret.txt: a script may not read REAL/secret.txt unless it is allowed: -allow read=REAL/secret.txt\n" +
		"create " + y.outside + "/a.ket: a script may not write REAL/a.ket unless it is allowed: -allow write=REAL/a.ket\n"
	if want = strings.ReplaceAll(want, "REAL", real); out != want {
		t.Errorf("got\n%swant\n%s", out, want)
	}
}

func TestAllowedPathsOpen(t *testing.T) {
	y := newYard(t)
	read := `b, err := os.ReadFile(secret); fmt.Println(string(b), err == nil)
	b, err = os.ReadFile("file-link"); fmt.Println(string(b), err == nil)
	fmt.Println(os.WriteFile(secret, nil, 0o666) == nil)`
	for name, o := range map[string]Options{"folder": {Read: []string{y.outside}}, "file": {Read: []string{filepath.Join(y.outside, "secret.txt")}}} {
		if out, err := y.run(t, read, o); err != nil || out != "the secret true\nthe secret true\nfalse\n" {
			t.Errorf("read allowed for the %s: %q, %v", name, out, err)
		}
	}
	write := `fmt.Println(os.WriteFile("folder-link/made.txt", []byte("by script"), 0o666), os.Rename("open.txt", outside+"/moved.txt"))`
	if out, err := y.run(t, write, Options{Write: []string{y.outside}}); err != nil || out != "<nil> <nil>\n" {
		t.Errorf("write allowed: %q, %v", out, err)
	}
	if _, err := y.run(t, "", Options{Read: []string{filepath.Join(y.outside, "none")}}); err == nil {
		t.Error("a path that does not exist was allowed without an error")
	}
	if out, err := y.run(t, `_, err := os.Open("open.txt"); fmt.Println(errors.Is(err, os.ErrPermission))`, Options{NoFiles: true}); err != nil || out != "true\n" {
		t.Errorf("without files: %q, %v", out, err)
	}
}

// TestFilesInsideBehaveAsCompiled compares results and words of errors with what
// package os itself says in that folder.
func TestFilesInsideBehaveAsCompiled(t *testing.T) {
	const body = `
	show := func(a ...any) { fmt.Println(a...) }
	f, err := os.Create("sub/a.txt"); show(f.Name(), err)
	n, err := f.WriteString("some text\n"); show(n, err, f.Close())
	show(f.Close())
	b, err := os.ReadFile("./sub/a.txt"); show(string(b), err)
	_, err = os.ReadFile("sub/none.txt"); show(err, errors.Is(err, os.ErrNotExist))
	_, err = os.ReadFile("sub"); show(err)
	_, err = os.ReadFile(""); show(err)
	_, err = os.Open("none/x/y"); show(err)
	_, err = os.Open("open.txt/y"); show(err)
	_, err = os.Create("none/x"); show(err)
	_, err = os.Create("sub/"); show(err != nil)
	_, err = os.OpenFile("sub/a.txt", os.O_CREATE|os.O_EXCL, 0o666); show(err)
	show(os.Mkdir("sub", 0o777)); show(os.Mkdir("one/two", 0o777)); show(os.MkdirAll("one/two/three", 0o777)); show(os.MkdirAll(".", 0o777))
	show(os.MkdirAll("open.txt", 0o777) != nil)
	show(os.WriteFile("one/b", []byte("bb"), 0o644), os.Rename("one/b", "one/c"), os.Rename("one/none", "x"))
	show(os.Remove("one")); show(os.Remove("none")); show(os.RemoveAll("none")); show(os.RemoveAll(""))
	info, err := os.Stat("one/c"); show(info.Name(), info.Size(), info.Mode(), info.IsDir(), err)
	info, err = os.Stat("."); show(info.Name(), info.IsDir(), err)
	info, err = os.Lstat("folder-link"); show(info.Name(), info.Mode()&os.ModeSymlink != 0, err)
	_, err = os.Stat("none"); show(err); _, err = os.Lstat("none"); show(err)
	list, err := os.ReadDir("one"); for _, e := range list { i, err := e.Info(); show(e.Name(), e.IsDir(), err == nil && i.Name() == e.Name()) }; show(err)
	_, err = os.ReadDir("none"); show(err)
	d, err := os.Open("one"); names, err2 := d.Readdirnames(-1); show(d.Name(), len(names), err, err2)
	show(os.Symlink("c", "one/link"), os.Link("one/c", "one/hard"))
	target, err := os.Readlink("one/link"); show(target, err)
	_, err = os.Readlink("one/c"); show(err)
	show(os.Symlink("c", "one/link"))
	show(os.Truncate("one/c", 1), os.Truncate("none", 1)); b, err = os.ReadFile("one/link"); show(string(b), err)
	show(os.Chmod("none", 0o600))
	m, err := filepath.Glob("one/*"); show(m, err)
	m, err = filepath.Glob("[x"); show(m, err)
	show(filepath.WalkDir("one", func(p string, d os.DirEntry, err error) error { show(p, d.IsDir(), err); return err }))
	show(filepath.Walk("none", func(p string, d os.FileInfo, err error) error { show(p, err); return nil }))
	e, err := filepath.EvalSymlinks("one/link"); show(e, err)
	_, err = archive.Open("none.ket"); show(err)
	show(os.RemoveAll("one"), os.Remove("sub/a.txt"), os.Remove("folder-link"))
	t, err := os.MkdirTemp(".", "x"); show(len(t) > 2 && t[:2] == "./", err, os.Remove(t))
	g, err := os.OpenFile(os.DevNull, os.O_RDWR, 0); _, err2 = g.Write([]byte{1}); show(g.Name(), err, err2)
	g, err = os.OpenFile("log.txt", os.O_APPEND|os.O_CREATE|os.O_WRONLY, 0o666); io.WriteString(g, "x"); _, err2 = g.Write([]byte("y")); show(err, err2)
	b, err = os.ReadFile("log.txt"); show(string(b), err)
`
	tool := goTool(t)
	a, b := newYard(t), newYard(t)
	t.Chdir(b.inside)
	got, err := b.run(t, body, Options{})
	if err != nil {
		t.Fatal(err)
	}
	want := compiledIn(t, tool, a.inside, a.source(body))
	if got != want {
		t.Errorf("line %s", firstDifference(got, want))
	}
}

func TestRootIsTheCurrentFolder(t *testing.T) {
	y := newYard(t)
	out, err := y.run(t, `wd, err := os.Getwd(); fmt.Println(wd, err)
	fmt.Println(os.WriteFile("made.txt", []byte("x"), 0o666), report.Table{}.Save("none/table.csv") != nil)
	list, err := os.ReadDir("."); fmt.Println(len(list), err)
	for _, e := range list { if _, err := e.Info(); err != nil { fmt.Println(err) } }
	m, err := filepath.Glob("*.txt"); fmt.Println(m, err)
	abs, err := filepath.Abs("made.txt"); _, err2 := os.Stat(abs); fmt.Println(err, err2)
	j, err := sweep.Open("study.journal", "s", nil); fmt.Println(err, j.Close())`, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if want := y.inside + " <nil>\n<nil> true\n8 <nil>\n[made.txt open.txt] <nil>\n<nil> <nil>\n<nil> <nil>\n"; out != want {
		t.Errorf("got\n%swant\n%s", out, want)
	}
	for _, name := range []string{"made.txt", "study.journal"} {
		if _, err := os.Stat(filepath.Join(y.inside, name)); err != nil {
			t.Error(err)
		}
	}
}

func TestTemporaryFilesEndWithTheRun(t *testing.T) {
	y := newYard(t)
	out, err := y.run(t, `f, err := os.CreateTemp("", "mine"); if err != nil { panic(err) }
	d, err := os.MkdirTemp("", ""); if err != nil { panic(err) }
	if err := os.WriteFile(filepath.Join(d, "x"), nil, 0o666); err != nil { panic(err) }
	if filepath.Dir(f.Name()) != os.TempDir() || filepath.Dir(d) != os.TempDir() { panic(d) }
	fmt.Print(os.TempDir())`, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if _, err := os.Stat(out); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("%s is still there: %v", out, err)
	}
}

func TestEnvironmentIsHidden(t *testing.T) {
	t.Setenv("KETLOOM_TEST_SECRET", "hidden")
	const body = `v, ok := os.LookupEnv("KETLOOM_TEST_SECRET"); fmt.Println(os.Getenv("KETLOOM_TEST_SECRET"), v, ok, len(os.Environ()) > 0, os.ExpandEnv("<$KETLOOM_TEST_SECRET>"))
	_, err := os.UserHomeDir(); fmt.Println(err)`
	y := newYard(t)
	out, err := y.run(t, body, Options{})
	if want := "  false false <>\na script does not see the environment unless it is allowed: -allow env\n"; err != nil || out != want {
		t.Errorf("%q, %v", out, err)
	}
	out, err = y.run(t, body, Options{Env: true})
	if err != nil || !strings.HasPrefix(out, "hidden hidden true true <hidden>\n") {
		t.Errorf("allowed: %q, %v", out, err)
	}
}

// TestNothingElseReachesTheSystem holds every function of the tables that is
// given a text against the lists: a new one has to be thought about.
func TestNothingElseReachesTheSystem(t *testing.T) {
	f, err := fence.New(fence.Options{Folder: t.TempDir(), NoFiles: true})
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	instead := f.Functions()
	for _, path := range []string{"os", "path/filepath", "os/signal", "runtime"} {
		for name, v := range symbols.Table[path] {
			key := path + "." + name
			if v.Kind() != reflect.Func || v.CanAddr() || instead[key] != nil || lower.Unavailable(key) || harmless[key] {
				continue
			}
			t.Errorf("%s is neither replaced, nor refused, nor known to be harmless", key)
		}
	}
	for key, fun := range instead {
		path, name := key[:strings.LastIndex(key, ".")], key[strings.LastIndex(key, ".")+1:]
		if have := symbols.Table[path][name]; !have.IsValid() || have.Type() != reflect.TypeOf(fun) {
			t.Errorf("%s is replaced by a %T", key, fun)
		}
	}
}

// harmless functions touch neither files nor processes nor the whole program.
var harmless = map[string]bool{
	"os.Exit":   true, // replaced by the run
	"os.Expand": true, "os.Getegid": true, "os.Geteuid": true, "os.Getgid": true, "os.Getgroups": true, "os.Getpagesize": true, "os.Getpid": true,
	"os.Getppid": true, "os.Getuid": true, "os.IsExist": true, "os.IsNotExist": true, "os.IsPathSeparator": true, "os.IsPermission": true,
	"os.IsTimeout": true, "os.NewSyscallError": true, "os.Pipe": true, "os.SameFile": true,
	"path/filepath.Base": true, "path/filepath.Clean": true, "path/filepath.Dir": true, "path/filepath.Ext": true, "path/filepath.FromSlash": true,
	"path/filepath.HasPrefix": true, "path/filepath.IsAbs": true, "path/filepath.IsLocal": true, "path/filepath.Join": true,
	"path/filepath.Localize": true, "path/filepath.Match": true, "path/filepath.Rel": true, "path/filepath.Split": true,
	"path/filepath.SplitList": true, "path/filepath.ToSlash": true, "path/filepath.VolumeName": true,
	"os/signal.Ignored": true, "os/signal.Notify": true, "os/signal.NotifyContext": true, "os/signal.Stop": true,
	"runtime.CallersFrames": true, "runtime.GC": true, "runtime.GOROOT": true, "runtime.Gosched": true, "runtime.KeepAlive": true,
	"runtime.NumCPU": true, "runtime.NumCgoCall": true, "runtime.NumGoroutine": true, "runtime.ReadMemStats": true, "runtime.Version": true,
}

// TestEveryPathOfKetloomIsGuarded finds exported functions of the listed packages
// with a parameter that is called like a path.
func TestEveryPathOfKetloomIsGuarded(t *testing.T) {
	found := 0
	for _, path := range symbols.Ketloom {
		for _, name := range pathFunctions(t, path) {
			found++
			if !machine.Opens(name) {
				t.Errorf("%s takes a path and is not guarded", name)
			}
		}
	}
	if found < 8 {
		t.Errorf("found only %d functions with paths", found)
	}
}
