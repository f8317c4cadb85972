package script

import (
	"bytes"
	"context"
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

const pageScript = `package main

import (
	"fmt"
	"io"
	"os"
	"time"

	"ketloom/script/report"
	"ketloom/script/report/page"
)

// cross is a figure of the script's own.
type cross struct{ size int }

func (c cross) Write(w io.Writer, format string) error {
	_, err := fmt.Fprintf(w, "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"%d\" height=\"%d\"><path style=\"stroke:black\" d=\"M0,0L%d,%d\"/></svg>", c.size, c.size, c.size, c.size)
	return err
}

func main() {
	p := page.New("A page < of a script")
	p.Reproducible = true
	p.Text("# Words\n\n$\\sqrt{x}$")
	t := report.Table{Title: "Levels", Columns: []report.Column{{Title: "n"}, {Title: "E", Unit: "V", Format: "%.3f"}}}
	for n := range 3 {
		t.Add(n, -1.5*float64(n))
	}
	p.Table(t)
	p.Figure(report.SectorSpectrum{Sectors: []report.Sector{{Label: "0", Levels: []float64{-1, 2}}}, Energy: report.Axis{Unit: "V"}}, "Levels.")
	p.Figure(cross{7}, "A cross.")
	if err := os.WriteFile("data.ket", []byte("abc"), 0o666); err != nil {
		panic(err)
	}
	fmt.Println(p.Archive("data.ket", "three bytes"))
	p.Seed("start", 1)
	p.Timing("all", time.Second)
	p.Note("Arguments given", fmt.Sprint(len(os.Args)-1))
	fmt.Println(p.Save("page.html"))
	fmt.Println(p.Save("none/page.html"))
	bad := page.New("bad")
	bad.Text("$\\nothing$")
	fmt.Println(bad.Save("bad.html"))
}
`

func TestPagesAreTheSameInterpretedAndCompiled(t *testing.T) {
	tool := goTool(t)
	folders := map[bool]string{false: t.TempDir(), true: t.TempDir()}
	path, binary := filepath.Join(t.TempDir(), "report.go"), filepath.Join(t.TempDir(), "program")
	if err := os.WriteFile(path, []byte(pageScript), 0o666); err != nil {
		t.Fatal(err)
	}
	t.Chdir(folders[false])
	var out bytes.Buffer
	if err := Run(context.Background(), Options{Path: path, Args: []string{"-n", "a b"}, Stdout: &out}); err != nil {
		t.Fatal(err)
	}
	build := exec.Command(tool, "build", "-o", binary, path)
	build.Dir = moduleFolder
	if text, err := build.CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, text)
	}
	cmd := exec.Command(binary, "-n", "a b")
	cmd.Dir = folders[true]
	text, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	if string(text) != out.String() {
		t.Errorf("interpreted:\n%scompiled:\n%s", &out, text)
	}
	want := "<nil>\n<nil>\npage: none/page.html cannot be saved: there is no folder none; make it first"
	if !strings.HasPrefix(string(text), want) || !strings.Contains(string(text), `unknown command \nothing`) {
		t.Errorf("compiled:\n%s", text)
	}
	pages := map[bool]string{}
	for compiled, folder := range folders {
		b, err := os.ReadFile(filepath.Join(folder, "page.html"))
		if err != nil {
			t.Fatal(err)
		}
		pages[compiled] = string(b)
		if entries, err := os.ReadDir(folder); err != nil || len(entries) != 2 {
			t.Errorf("files %v %v; want data.ket and page.html", entries, err)
		}
	}
	if pages[true] != pages[false] {
		t.Errorf("interpreted:\n%s\ncompiled:\n%s", pages[false], pages[true])
	}
	for _, want := range []string{"Made by report.go", `-n &#34;a b&#34;`, "type cross struct{ size int }", `<h3>report.go</h3>`, `href="data.ket"`, `stroke="black"`} {
		if !strings.Contains(pages[false], want) {
			t.Errorf("the page does not have %q", want)
		}
	}
}

// TestPagesStayInside: neither the page, nor what it leads to, nor its source lies
// outside of what the script may reach.
func TestPagesStayInside(t *testing.T) {
	y := newYard(t)
	for _, path := range []string{"secret", `"../outside/secret.txt"`, `"file-link"`, `"folder-link/secret.txt"`, `"chain-link/secret.txt"`} {
		out, err := y.page(t, "fmt.Println(p.Archive("+path+`, "x")); f := p.Archive; fmt.Println(f(`+path+`, "x")); fmt.Println(p.Save("p.html"))`, Options{})
		if err != nil || strings.Count(out, "a script may not") != 2 {
			t.Errorf("%s: %v\n%s", path, err, out)
		}
		b, err := os.ReadFile(filepath.Join(y.inside, "p.html"))
		if err != nil || strings.Contains(string(b), "SHA-256") {
			t.Errorf("%s: %v, or the page knows the file", path, err)
		}
	}
	for _, path := range []string{`outside+"/p.html"`, `"../outside/p.html"`, `"folder-link/p.html"`, `"sub/../../outside/p.html"`} {
		out, err := y.page(t, "fmt.Println(p.Save("+path+`)); f := (*page.Page).Save; fmt.Println(f(p, `+path+`))
	var s interface{ Save(string) error } = p; fmt.Println(s.Save(`+path+`)); e := struct{ *page.Page }{p}; fmt.Println(e.Save(`+path+`))
	s = e; fmt.Println(s.Save(`+path+`))`, Options{})
		if err != nil || strings.Count(out, "a script may not") != 5 {
			t.Errorf("%s: %v\n%s", path, err, out)
		}
		if _, err := os.Stat(filepath.Join(y.outside, "p.html")); err == nil {
			t.Fatalf("%s: written outside", path)
		}
	}
	out, err := y.page(t, `p.Script = nil; fmt.Println(p.Save("p.html")); var q page.Page; q.Text("a"); fmt.Println(q.Save("q.html"))`, Options{})
	if b, _ := os.ReadFile(filepath.Join(y.inside, "p.html")); err != nil || !strings.Contains(string(b), "was not at hand") || strings.Contains(string(b), "package script") {
		t.Errorf("%v\n%s\n%s", err, out, b)
	}
	if !strings.Contains(out, "a Page that New did not make") {
		t.Error(out)
	}
	if out, err = y.page(t, `fmt.Println(p.Save("p.html"))`, Options{NoFiles: true}); err != nil || !strings.Contains(out, "a script may not") {
		t.Errorf("%v\n%s", err, out)
	}
	if out, err = y.page(t, `fmt.Println(p.Archive(secret, "x"), p.Save("p.html"))`, Options{Read: []string{y.outside}}); err != nil || out != "<nil> <nil>\n" {
		t.Errorf("%v\n%s", err, out)
	}
	if b, err := os.ReadFile(filepath.Join(y.inside, "p.html")); err != nil || !strings.Contains(string(b), `href="../outside/secret.txt"`) {
		t.Errorf("%v\n%s", err, b)
	}
	if _, err := os.Stat(filepath.Join(y.outside, "p.html")); !errors.Is(err, os.ErrNotExist) {
		t.Error(err)
	}
}

// page runs statements that have a page p.
func (y yard) page(t *testing.T, body string, o Options) (string, error) {
	t.Helper()
	var out bytes.Buffer
	o.Root, o.Stdout = y.inside, &out
	o.Source = "package main\nimport (\"fmt\"; \"ketloom/script/report/page\")\nconst secret = `" + filepath.Join(y.outside, "secret.txt") + "`\nconst outside = `" + y.outside +
		"`\nvar _, _ = secret, outside\nfunc main() {\n\tp := page.New(\"t\")\n\tp.Text(\"x\")\n" + body + "\n}\n"
	err := Run(context.Background(), o)
	return out.String(), err
}
