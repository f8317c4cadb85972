// Package cookbook_test runs every recipe compiled and interpreted and compares
// both with the output that is stored.
package cookbook_test

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

// recipes returns the folders that hold one.
func recipes(t *testing.T) []string {
	t.Helper()
	files, err := filepath.Glob("*/main.go")
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, f := range files {
		names = append(names, filepath.Dir(f))
	}
	if len(names) < 12 {
		t.Fatalf("%d recipes found, at least 12 were written", len(names))
	}
	return names
}

func stored(t *testing.T, name string) string {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("testdata", name+".txt"))
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

func TestRecipesInterpreted(t *testing.T) {
	for _, name := range recipes(t) {
		want := stored(t, name)
		t.Run(name, func(t *testing.T) {
			path, err := filepath.Abs(name)
			if err != nil {
				t.Fatal(err)
			}
			t.Chdir(t.TempDir())
			ctx, cancel := context.WithTimeout(context.Background(), 2*time.Minute)
			defer cancel()
			var out bytes.Buffer
			if err := script.Run(ctx, script.Options{Path: path, Stdout: &out, Stderr: &out}); err != nil {
				t.Fatal(err)
			}
			if out.String() != want {
				t.Errorf("interpreted it prints\n%s\nstored is\n%s", out.String(), want)
			}
		})
	}
}

func TestRecipesCompiled(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the recipes")
	}
	goTool, err := exec.LookPath("go")
	if err != nil {
		t.Skip("no go command on this machine to compile the recipes with")
	}
	binaries := t.TempDir()
	build := exec.Command(goTool, append([]string{"build", "-o", binaries + string(filepath.Separator)}, folders(recipes(t))...)...)
	if out, err := build.CombinedOutput(); err != nil {
		t.Fatalf("building: %v\n%s", err, out)
	}
	for _, name := range recipes(t) {
		command := exec.Command(filepath.Join(binaries, name))
		command.Dir = t.TempDir()
		out, err := command.CombinedOutput()
		if err != nil {
			t.Errorf("%s: %v", name, err)
		}
		if string(out) != stored(t, name) {
			t.Errorf("%s: compiled it prints\n%s\nstored is\n%s", name, out, stored(t, name))
		}
	}
}

func folders(names []string) []string {
	var list []string
	for _, name := range names {
		list = append(list, "./"+name)
	}
	return list
}
