package main

import (
	"bytes"
	"encoding/json"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

func writeFile(t *testing.T, path, text string) {
	t.Helper()
	if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
}

// TestFilesThatAScriptReaches runs one script with several permissions.
func TestFilesThatAScriptReaches(t *testing.T) {
	here, other, scripts := t.TempDir(), t.TempDir(), t.TempDir()
	code, err := os.ReadFile("testdata/files.go")
	if err != nil {
		t.Fatal(err)
	}
	script, beside := filepath.Join(scripts, "files.go"), filepath.Join(scripts, "beside.txt")
	far := filepath.Join(other, "far.txt")
	for _, c := range []struct {
		flags, paths []string
		want         string
	}{
		{nil, []string{"new.txt", "../up.txt"}, "\"written\\n\" false false\n\"\" true true\nfalse\n"},
		{nil, []string{beside, far}, "\"kept\" true false\n\"\" true true\nfalse\n"},
		{[]string{"-allow", "read=" + other}, []string{far}, "\"kept\" true false\nfalse\n"},
		{[]string{"-allow", "write=" + other, "-allow=env"}, []string{far}, "\"written\\n\" false false\ntrue\n"},
		{[]string{"-allow", "write=" + filepath.Join(other, "one.txt")}, []string{filepath.Join(other, "one.txt"), far}, "\"written\\n\" false false\n\"\" true true\nfalse\n"},
		{[]string{"-root", other}, []string{"inner.txt", filepath.Join(here, "x.txt")}, "\"written\\n\" false false\n\"\" true true\nfalse\n"},
	} {
		writeFile(t, script, string(code))
		writeFile(t, beside, "kept")
		writeFile(t, far, "kept")
		cmd := invocation(append(append(append([]string{"run"}, c.flags...), script, "--"), c.paths...)...)
		cmd.Dir = here
		out, err := cmd.CombinedOutput()
		if err != nil || string(out) != c.want {
			t.Errorf("%v %v: %v\n%swant\n%s", c.flags, c.paths, err, out, c.want)
		}
	}
	if _, err := os.Stat(filepath.Join(other, "inner.txt")); err != nil {
		t.Errorf("the folder of -root: %v", err)
	}
}

// records reads lines of JSON.
func records(t *testing.T, text string) []map[string]any {
	t.Helper()
	var list []map[string]any
	for line := range strings.Lines(text) {
		var r map[string]any
		if err := json.Unmarshal([]byte(line), &r); err != nil {
			t.Fatalf("%q: %v", line, err)
		}
		if at, ok := r["at"].(string); !ok {
			t.Errorf("%q has no time", line)
		} else if _, err := time.Parse(time.RFC3339Nano, at); err != nil {
			t.Error(err)
		}
		list = append(list, r)
	}
	return list
}

func TestLogOfARun(t *testing.T) {
	for _, c := range []struct {
		args   string
		events string
		code   float64
		last   string // part of the error
	}{
		{"testdata/hello.go -- -n 2 -code 9", "started ended", 9, ""},
		{"testdata/wrong.go", "started refused refused ended", exitProblem, ""},
		{"testdata/panic.go", "started ended", exitPanic, "panic.go:5"},
		{"-steps 100 testdata/endless.go", "started ended", exitLimit, "endless.go:7"},
	} {
		cmd := invocation(append([]string{"run", "-json"}, strings.Fields(c.args)...)...)
		var errs bytes.Buffer
		cmd.Stderr = &errs
		if code := exitOf(t, cmd.Run()); float64(code) != c.code {
			t.Errorf("%s: code %d, want %v", c.args, code, c.code)
		}
		list := records(t, errs.String())
		var events []string
		for _, r := range list {
			events = append(events, r["event"].(string))
			if r["event"] == "refused" && (r["line"].(float64) < 4 || r["message"] == "") {
				t.Errorf("%s: %v", c.args, r)
			}
		}
		last := list[len(list)-1]
		text, _ := last["error"].(string)
		if strings.Join(events, " ") != c.events || last["code"] != c.code || !strings.Contains(text, c.last) || (c.last == "") != (text == "") {
			t.Errorf("%s: %v", c.args, list)
		}
		if _, ok := last["seconds"].(float64); !ok {
			t.Errorf("%s: no duration in %v", c.args, last)
		}
	}
}

func TestCompiledRunIsTheSame(t *testing.T) {
	if _, err := exec.LookPath("go"); err != nil {
		t.Skip("no Go tool: nothing can be compiled")
	}
	for _, args := range []string{"testdata/hello.go -n 2 -code 9", "testdata/hello.go -- -x", "testdata/folder", "testdata/wrong.go"} {
		run := func(flags ...string) (string, string, int) {
			cmd := invocation(append(append([]string{"run"}, flags...), strings.Fields(args)...)...)
			var out, errs bytes.Buffer
			cmd.Stdout, cmd.Stderr = &out, &errs
			code := exitOf(t, cmd.Run())
			return out.String(), errs.String(), code
		}
		out, errs, code := run()
		outC, errsC, codeC := run("-compiled")
		if out != outC || errs != errsC || code != codeC {
			t.Errorf("%s: interpreted %q %q %d, compiled %q %q %d", args, out, errs, code, outC, errsC, codeC)
		}
	}
	lonely := filepath.Join(t.TempDir(), "lonely.go")
	writeFile(t, lonely, "package main\n\nimport \"ketloom/basis\"\n\nfunc main() { _ = basis.SpinHalf() }\n")
	cmd := invocation("run", "-compiled", lonely)
	cmd.Dir = filepath.Dir(lonely)
	if out, err := cmd.CombinedOutput(); exitOf(t, err) != exitProblem || !strings.Contains(string(out), "lie in a module that requires ketloom") {
		t.Errorf("outside a module: %v\n%s", err, out)
	}
}

// TestWatchRunsAgain saves a script while it is watched.
func TestWatchRunsAgain(t *testing.T) {
	script := filepath.Join(t.TempDir(), "watched.go")
	text := func(word string) string {
		return "package main\n\nimport \"fmt\"\n\nfunc main() {\n\tfmt.Println(\"" + word + "\")\n\tselect {}\n}\n"
	}
	writeFile(t, script, text("first"))
	cmd := invocation("run", "-watch", script)
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	defer time.AfterFunc(time.Minute, func() { _ = cmd.Process.Kill() }).Stop() // a test that fails must end
	buf := make([]byte, 100)
	for _, word := range []string{"first", "second version", "third"} {
		if word != "first" {
			writeFile(t, script, text(word))
		}
		n, err := out.Read(buf)
		if err != nil || string(buf[:n]) != word+"\n" {
			t.Errorf("read %q, %v; want %s", buf[:n], err, word)
		}
	}
	if err := cmd.Process.Signal(os.Interrupt); err != nil {
		_ = cmd.Process.Kill()
		t.Skipf("no interrupts here: %v", err)
	}
	if code := exitOf(t, cmd.Wait()); code != exitInterrupted {
		t.Errorf("code %d", code)
	}
}
