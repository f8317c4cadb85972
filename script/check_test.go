package script

import (
	"errors"
	"strings"
	"testing"
)

// report is what Check says, without the file.
func report(err error) string {
	var problems Problems
	if !errors.As(err, &problems) {
		return "not Problems: " + errorText(err)
	}
	var lines []string
	for _, p := range problems {
		p.Source = ""
		lines = append(lines, strings.TrimPrefix(strings.TrimPrefix(p.String(), "x.go:"), " "))
	}
	return strings.Join(lines, "\n")
}

func errorText(err error) string {
	if err == nil {
		return "nothing"
	}
	return err.Error()
}

func TestCheckReportsEverything(t *testing.T) {
	for _, file := range []string{"mistakes.txt", "refused.txt"} {
		for _, c := range readCases(t, file) {
			got := report(Check(Options{Path: "x.go", Source: c.parts["go"]}))
			want := strings.TrimSuffix(c.parts["err"], "\n")
			if c.name == "packages" { // the list of packages follows
				got, _, _ = strings.Cut(got, ";")
			}
			if got != want {
				t.Errorf("%s %s\ngot\n%s\nwant\n%s", file, c.name, got, want)
			}
		}
	}
}

func TestProblemShowsItsLine(t *testing.T) {
	err := Check(Options{Path: "dir/a.go", Source: "package main\n\nfunc main() {\n\tx := 1\n}\n"})
	if got, want := errorText(err), "dir/a.go:4:2: declared and not used: x\n\tx := 1"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestCheckOfWhatIsNotThere(t *testing.T) {
	for _, path := range []string{"testdata/none.go", t.TempDir()} {
		err := Check(Options{Path: path})
		var problems Problems
		if err == nil || errors.As(err, &problems) {
			t.Errorf("%s: %v; want an error that is no list of problems", path, err)
		}
	}
}
