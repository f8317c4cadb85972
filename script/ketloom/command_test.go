package main

import (
	"bufio"
	"bytes"
	"errors"
	"os"
	"os/exec"
	"strings"
	"syscall"
	"testing"
)

// TestMain lets the test program be the command.
func TestMain(m *testing.M) {
	if os.Getenv("KETLOOM_COMMAND") == "1" {
		main()
	}
	os.Exit(m.Run())
}

func invocation(args ...string) *exec.Cmd {
	cmd := exec.Command(os.Args[0], args...)
	cmd.Env = append(os.Environ(), "KETLOOM_COMMAND=1")
	return cmd
}

func exitOf(t *testing.T, err error) int {
	t.Helper()
	var exit *exec.ExitError
	switch {
	case err == nil:
		return 0
	case errors.As(err, &exit):
		return exit.ExitCode()
	}
	t.Fatal(err)
	return -1
}

func TestCommands(t *testing.T) {
	for _, c := range []struct {
		args        string
		code        int
		stdout, err string // parts of what is written; "" for nothing at all
	}{
		{"run testdata/hello.go", 0, "hello 0 []\n", ""},
		{"run testdata/hello.go -- -n 2 a", 0, "hello 0 [a]\nhello 1 [a]\n", ""},
		{"run testdata/hello.go -n 2 -code 9", 9, "hello 1 []\n", ""},
		{"run testdata/hello.go -- -x", 2, "", "flag provided but not defined: -x"},
		{"run testdata/folder", 0, "from a folder\n", ""},
		{"run testdata/wrong.go", exitProblem, "", "testdata/wrong.go:4:2: declared and not used: x\n\tx := 1\ntestdata/wrong.go:5:2: undefined: y\n\ty = 2\n"},
		{"run testdata/panic.go", exitPanic, "", "testdata/panic.go:5: panic: assignment to entry in nil map\n"},
		{"run testdata/none.go", exitProblem, "", "no such file"},
		{"check testdata/hello.go testdata/folder", 0, "", ""},
		{"check testdata/hello.go testdata/wrong.go", exitProblem, "", "undefined: y"},
		{"check", exitUsage, "", "wants a script"},
		{"run", exitUsage, "", "wants a script"},
		{"run -x", exitUsage, "", "flag provided but not defined: -x"},
		{"run -quiet", exitUsage, "", "wants a script"},
		{"run -allow all testdata/hello.go", exitUsage, "", "read=PATH, write=PATH or env"},
		{"run -allow read=testdata/none testdata/hello.go", exitProblem, "", "no such file"},
		{"run -root testdata/none testdata/hello.go", exitProblem, "", "no such file"},
		{"run -time -1s testdata/hello.go", exitUsage, "", "positive"},
		{"run -compiled -steps 5 testdata/hello.go", exitUsage, "", "-steps cannot be kept"},
		{"run -time 150ms testdata/endless.go", exitLimit, "ready\n", "testdata/endless.go:7: stopped: the script took more than its limit of 150ms"},
		{"run -steps 1000 testdata/endless.go", exitLimit, "ready\n", "testdata/endless.go:7: stopped: the script took more than its limit of 1000 steps"},
		{"run -memory 0.001 testdata/large.go", exitPanic, "", "testdata/large.go:6: panic: out of memory: 1000000 elements of 8 bytes"},
		{"run -memory 0 testdata/large.go", 0, "1000000\n", ""},
		{"run -quiet testdata/hello.go -- -n 1", 0, "hello 0 []\n", ""},
		{"sing", exitUsage, "", "no command"},
		{"", exitUsage, "", "ketloom run FILE-OR-FOLDER"},
		{"help", 0, "Examples", ""},
		{"help run", 0, "Exit codes", ""},
		{"run -h", 0, "Exit codes", ""},
		{"check -h", 0, "ketloom check", ""},
		{"help packages", 0, "ketloom/basis/group", ""},
		{"help sing", exitUsage, "", "no help"},
		{"version", 0, "Ketloom 0.1.0", ""},
	} {
		cmd := invocation(strings.Fields(c.args)...)
		var out, errs bytes.Buffer
		cmd.Stdout, cmd.Stderr = &out, &errs
		if code := exitOf(t, cmd.Run()); code != c.code {
			t.Errorf("ketloom %s: exit code %d, want %d; %s", c.args, code, c.code, errs.String())
		}
		for _, p := range []struct{ got, want string }{{out.String(), c.stdout}, {errs.String(), c.err}} {
			if p.want == "" && p.got != "" || !strings.Contains(p.got, p.want) {
				t.Errorf("ketloom %s: wrote %q, want %q", c.args, p.got, p.want)
			}
		}
		if strings.Contains(errs.String(), "goroutine ") {
			t.Errorf("ketloom %s: a stack dump: %s", c.args, errs.String())
		}
	}
}

// TestInterrupt interrupts a script that watches for it and one that does not.
func TestInterrupt(t *testing.T) {
	for _, c := range []struct {
		script string
		signal os.Signal
		code   int
		last   string
	}{
		{"testdata/wait.go", os.Interrupt, 0, "stopped by itself"},
		{"testdata/endless.go", os.Interrupt, exitInterrupted, ""},
		{"testdata/endless.go", syscall.SIGTERM, exitInterrupted, ""},
	} {
		cmd := invocation("run", c.script)
		out, err := cmd.StdoutPipe()
		if err != nil {
			t.Fatal(err)
		}
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		lines := bufio.NewScanner(out)
		if !lines.Scan() || lines.Text() != "ready" {
			t.Fatalf("%s: wrote %q", c.script, lines.Text())
		}
		if err := cmd.Process.Signal(c.signal); err != nil {
			t.Skipf("no interrupts here: %v", err)
		}
		last := ""
		for lines.Scan() {
			last = lines.Text()
		}
		if code := exitOf(t, cmd.Wait()); code != c.code || last != c.last {
			t.Errorf("%s: exit code %d and %q, want %d and %q", c.script, code, last, c.code, c.last)
		}
	}
}
