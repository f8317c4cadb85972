// Package examples_test holds the examples to their promise: the same bytes
// compiled and interpreted.
package examples_test

import (
	"bytes"
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"testing"
	"time"

	"ketloom/script"
)

// cases are small runs of every example, in an order in which later ones may
// open the files of earlier ones. Files are what each leaves behind.
var cases = []struct {
	example string
	args    []string
	files   []string
}{
	{"chernband", []string{"-lx", "4", "-ly", "3", "-particles", "4", "-flux", "4", "-out", "small", "-json", "small.json", "-page", "small/study.html", "-plain"},
		[]string{"small.json", "small/spectrum.svg", "small/flow.svg", "small/study.html"}},
	{"particlecut", []string{"-archive", "small/ground.ket", "-part", "2", "-figure", "small/particlecut.svg", "-json", "cut.json"},
		[]string{"cut.json", "small/particlecut.svg"}},
	{"chernband", []string{"-model", "checkerboard-neupert", "-lx", "6", "-ly", "3", "-particles", "6", "-flux", "2", "-direction", "y", "-everywhere", "-levels", "3", "-out", "neupert"}, nil},
	{"chernband", []string{"-model", "haldane", "-lx", "4", "-ly", "3", "-particles", "4", "-flux", "0", "-dispersion", "-out", "haldane", "-json", "haldane.json"},
		[]string{"haldane.json"}},
	{"spinring", []string{"-length", "10", "-anisotropy", "0.5", "-json", "ring.json"}, []string{"ring.json"}},
	{"spinring", []string{"-length", "9", "-up", "3", "-momentum", "2"}, nil},
	{"tower", []string{"-t1", "3,1", "-t2", "-1,3", "-out", "tower", "-json", "tower.json", "-page", "tower.html", "-plain"},
		[]string{"tower.json", "tower.html", "tower/tower.svg", "tower/structure.svg", "tower/bonds.svg"}},
	{"tower", []string{"-lattice", "kagome", "-t1", "2,0", "-t2", "0,1", "-anisotropy", "0.5", "-field", "0.3", "-levels", "1", "-out", "kagome"}, nil},
	{"tower", []string{"-t1", "3"}, nil},
	{"cluster36", []string{"-sites", "16", "-proof", "-archive", "square.ket"}, nil},
	{"cluster36", []string{"-sites", "12", "-lattice", "kagome", "-odd", "-state", "state"}, nil},
	{"cluster36", []string{"-sites", "13"}, nil},
	{"chernband", []string{"-lx", "0"}, nil},
	{"particlecut", []string{"-archive", "nowhere.ket"}, nil},
	{"spinring", []string{"-up", "99", "extra"}, nil},
}

// outcome is everything that a run shows.
type outcome struct {
	stdout, stderr string
	code           int
	files          map[string][]byte
}

// The compiled and the interpreted examples print the same bytes, end with the
// same code and leave the same files.
func TestExamplesCompiledAndInterpreted(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the examples")
	}
	goTool, err := exec.LookPath("go")
	if err != nil {
		t.Skip("no go command on this machine to compile the examples with")
	}
	here, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	compiled, interpreted := t.TempDir(), t.TempDir()
	binaries := t.TempDir()
	for _, c := range cases {
		binary := filepath.Join(binaries, c.example)
		if _, err := os.Stat(binary); err != nil {
			build := exec.Command(goTool, "build", "-o", binary, "./"+c.example)
			build.Dir = here
			if out, err := build.CombinedOutput(); err != nil {
				t.Fatalf("building %s: %v\n%s", c.example, err, out)
			}
		}
		want := runCompiled(t, binary, compiled, c.args)
		got := runInterpreted(t, filepath.Join(here, c.example), interpreted, c.args)
		for _, name := range c.files {
			want.files[name], got.files[name] = read(t, compiled, name), read(t, interpreted, name)
		}
		compare(t, c.example, c.args, got, want)
	}
}

func read(t *testing.T, folder, name string) []byte {
	t.Helper()
	data, err := os.ReadFile(filepath.Join(folder, name))
	if err != nil {
		t.Error(err)
	}
	return data
}

func runCompiled(t *testing.T, binary, folder string, args []string) outcome {
	t.Helper()
	var stdout, stderr bytes.Buffer
	command := exec.Command(binary, args...)
	command.Dir, command.Stdout, command.Stderr = folder, &stdout, &stderr
	code := 0
	if err := command.Run(); err != nil {
		exit, ok := err.(*exec.ExitError)
		if !ok {
			t.Fatal(err)
		}
		code = exit.ExitCode()
	}
	return outcome{stdout.String(), stderr.String(), code, map[string][]byte{}}
}

func runInterpreted(t *testing.T, path, folder string, args []string) outcome {
	t.Helper()
	t.Chdir(folder)
	ctx, cancel := context.WithTimeout(context.Background(), 5*time.Minute)
	defer cancel()
	var stdout, stderr bytes.Buffer
	err := script.Run(ctx, script.Options{Path: path, Args: args, Stdout: &stdout, Stderr: &stderr})
	code := 0
	switch e := err.(type) {
	case nil:
	case *script.ExitError:
		code = e.Code
	default:
		t.Fatalf("%s %v: %v", path, args, err)
	}
	return outcome{stdout.String(), stderr.String(), code, map[string][]byte{}}
}

func compare(t *testing.T, example string, args []string, got, want outcome) {
	t.Helper()
	if got.code != want.code {
		t.Errorf("%s %v: interpreted ends with code %d, compiled with %d", example, args, got.code, want.code)
	}
	if got.stdout != want.stdout {
		t.Errorf("%s %v: interpreted prints\n%s\ncompiled\n%s", example, args, got.stdout, want.stdout)
	}
	if got.stderr != want.stderr {
		t.Errorf("%s %v: interpreted complains\n%s\ncompiled\n%s", example, args, got.stderr, want.stderr)
	}
	for name, data := range want.files {
		if !bytes.Equal(got.files[name], data) {
			t.Errorf("%s %v: %s differs", example, args, name)
		}
	}
}
