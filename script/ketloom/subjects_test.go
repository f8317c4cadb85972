package main

import (
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

func TestDocPrintsPages(t *testing.T) {
	for _, c := range []struct {
		args        string
		code        int
		stdout, err string
	}{
		{"doc", 0, "ketloom/basis\n", ""},
		{"doc basis", 0, "package ketloom/basis\n", ""},
		{"doc lanczos.Lowest matrix.New", 0, "func New(", ""},
		{"doc lanczos.Low", exitProblem, "", "close to it: lanczos.Lowest"},
		{"doc nonsense", exitProblem, "", "no such page"},
		{"doc -h", 0, "ketloom doc [SUBJECT ...]", ""},
		{"completion bash", 0, "complete -o filenames", ""},
		{"completion", exitUsage, "", "bash, zsh or fish"},
		{"completion csh", exitUsage, "", "csh"},
		{"new", exitUsage, "", "new wants one name"},
		{"new -x", exitUsage, "", "new wants one name"},
		{"help new", 0, "ketloom new NAME", ""},
	} {
		var stdout, stderr strings.Builder
		cmd := invocation(strings.Fields(c.args)...)
		cmd.Stdout, cmd.Stderr = &stdout, &stderr
		code := exitOf(t, cmd.Run())
		if code != c.code || !strings.Contains(stdout.String(), c.stdout) || !strings.Contains(stderr.String(), c.err) {
			t.Errorf("%s: code %d\n%s\n%s", c.args, code, stdout.String(), stderr.String())
		}
	}
}

// The script that new writes is checked, runs, and is never written over another.
func TestNewWritesAScriptThatRuns(t *testing.T) {
	folder := t.TempDir()
	in := func(args ...string) (string, int) {
		cmd := invocation(args...)
		cmd.Dir = folder
		out, err := cmd.CombinedOutput()
		return string(out), exitOf(t, err)
	}
	if out, code := in("new", "ladder"); code != 0 || !strings.Contains(out, "ketloom run ladder.go") {
		t.Fatalf("code %d: %s", code, out)
	}
	if out, code := in("check", "ladder.go"); code != 0 {
		t.Fatalf("code %d: %s", code, out)
	}
	// Lowest level of the ring of 6 sites: (2+√13)/2 in magnitude, closed formula.
	if out, code := in("run", "ladder.go", "--", "-length", "6"); code != 0 || !strings.Contains(out, "-2.8027756377") {
		t.Errorf("code %d: %s", code, out)
	}
	before, err := os.ReadFile(filepath.Join(folder, "ladder.go"))
	if err != nil {
		t.Fatal(err)
	}
	if out, code := in("new", "ladder"); code != exitProblem || !strings.Contains(out, "exists") {
		t.Errorf("code %d: %s", code, out)
	}
	if after, err := os.ReadFile(filepath.Join(folder, "ladder.go")); err != nil || string(after) != string(before) {
		t.Error("an existing script was changed")
	}
	if out, code := in("new", "missing/ladder"); code != exitProblem {
		t.Errorf("code %d: %s", code, out)
	}
}

// bash accepts the completion that is printed for it.
func TestBashCompletes(t *testing.T) {
	bash, err := exec.LookPath("bash")
	if err != nil {
		t.Skip("no bash on this machine")
	}
	out, err := invocation("completion", "bash").Output()
	if err != nil {
		t.Fatal(err)
	}
	for words, want := range map[string]string{"doc ent": "entangle", "run -al": "-allow", "comp": "completion"} {
		last := len(strings.Fields(words))
		cmd := exec.Command(bash, "-c", fmt.Sprintf("%s\nCOMP_WORDS=(ketloom %s); COMP_CWORD=%d; _ketloom; echo ${COMPREPLY[@]}", out, words, last))
		answer, err := cmd.CombinedOutput()
		if err != nil || strings.TrimSpace(string(answer)) != want {
			t.Errorf("%s: %v: %s", words, err, answer)
		}
	}
}
