package examples_test

import (
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"testing"
	"time"

	"ketloom/script"
)

// BenchmarkInterpreted runs examples compiled and interpreted in turn; the limit is the
// compiled program as a process of its own.
func BenchmarkInterpreted(b *testing.B) {
	goTool, err := exec.LookPath("go")
	if err != nil {
		b.Skip("no go command on this machine to compile the examples with")
	}
	here, err := os.Getwd()
	if err != nil {
		b.Fatal(err)
	}
	for _, c := range []struct {
		example string
		args    []string
	}{
		{"spinring", []string{"-length", "16"}},
		{"chernband", []string{"-lx", "5", "-ly", "4", "-particles", "6", "-flux", "2", "-out", "bench"}},
	} {
		b.Run(c.example, func(b *testing.B) {
			binary := filepath.Join(b.TempDir(), c.example)
			build := exec.Command(goTool, "build", "-o", binary, "./"+c.example)
			build.Dir = here
			if out, err := build.CombinedOutput(); err != nil {
				b.Fatalf("%v\n%s", err, out)
			}
			b.Chdir(b.TempDir())
			var compiled, interpreted time.Duration
			for b.Loop() {
				begun := time.Now()
				if err := exec.Command(binary, c.args...).Run(); err != nil {
					b.Fatal(err)
				}
				compiled += time.Since(begun)
				begun = time.Now()
				if err := script.Run(context.Background(), script.Options{Path: filepath.Join(here, c.example), Args: c.args}); err != nil {
					b.Fatal(err)
				}
				interpreted += time.Since(begun)
			}
			b.ReportMetric(interpreted.Seconds()/compiled.Seconds(), "times-compiled")
		})
	}
}
