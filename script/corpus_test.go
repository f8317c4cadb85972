package script

import (
	"bytes"
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// corpus are the files of programs with the compiled program's output.
var corpus = []string{"language.txt", "numbers.txt", "isolated.txt", "results.txt", "maps.txt", "captures.txt", "random.txt", "types.txt", "errors.txt", "ketloom.txt", "wide.txt"}

// interpret runs a script and returns its standard output.
func interpret(t testing.TB, src string) (string, error) {
	t.Helper()
	var out bytes.Buffer
	err := Run(context.Background(), Options{Path: "x.go", Source: src, Stdout: &out})
	return out.String(), err
}

func TestCorpusEqualsCompiledOutput(t *testing.T) {
	for _, file := range corpus {
		t.Run(strings.TrimSuffix(file, ".txt"), func(t *testing.T) {
			t.Parallel()
			for _, c := range readCases(t, file) {
				got, err := interpret(t, c.parts["go"])
				if err != nil {
					t.Errorf("%s: %v", c.name, err)
					continue
				}
				want := c.parts["out"]
				if strings.TrimSuffix(got, "\n") != strings.TrimSuffix(want, "\n") {
					t.Errorf("%s: line %s", c.name, firstDifference(got, want))
				}
			}
		})
	}
}

func firstDifference(got, want string) string {
	a, b := strings.Split(got, "\n"), strings.Split(want, "\n")
	for i := range max(len(a), len(b)) {
		x, y := "nothing", "nothing"
		if i < len(a) {
			x = a[i]
		}
		if i < len(b) {
			y = b[i]
		}
		if x != y {
			return "\n\tgot  " + x + "\n\twant " + y
		}
	}
	return ""
}

// TestStoredOutputsComeFromTheCompiler compiles a sample of the corpus; with
// KETLOOM_ORACLE=all it compiles everything, in some minutes.
func TestStoredOutputsComeFromTheCompiler(t *testing.T) {
	tool, err := exec.LookPath("go")
	if err != nil {
		t.Skip("no Go tool: the stored outputs are not compared with the compiler's")
	}
	all := os.Getenv("KETLOOM_ORACLE") == "all"
	if testing.Short() && !all {
		t.Skip("short")
	}
	n := 0
	for _, file := range corpus {
		for i, c := range readCases(t, file) {
			if !all && i%60 != 30 {
				continue
			}
			n++
			if got := compiled(t, tool, c); strings.TrimSuffix(got, "\n") != strings.TrimSuffix(c.parts["out"], "\n") {
				t.Errorf("%s %s: stored output differs from the compiler's: %s", file, c.name, firstDifference(c.parts["out"], got))
			}
		}
	}
	if n == 0 {
		t.Error("no case was compiled")
	}
}

// compiled returns what the compiled program prints.
func compiled(t *testing.T, tool string, c *testCase) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), c.name+".go")
	if err := os.WriteFile(path, []byte(c.parts["go"]), 0o666); err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(tool, "run", path)
	var out, errs bytes.Buffer
	cmd.Stdout, cmd.Stderr = &out, &errs
	if err := cmd.Run(); err != nil {
		t.Fatalf("%s: %v\n%s", c.name, err, errs.String())
	}
	return out.String()
}
