package script

import (
	"context"
	"errors"
	"go/scanner"
	"go/token"
	"strings"
	"testing"
	"time"
)

// fuzzSeeds are programs of the corpus with some tokens changed and the ways out that are refused.
func fuzzSeeds(f *testing.F) {
	for _, file := range corpus {
		for i, c := range readCases(f, file) {
			if src := c.parts["go"]; len(src) < 4000 && i%5 == 0 {
				f.Add(src, []byte{7, 3, 11, 200, 60, 90, 33, 2, 5, 1, 4, 150})
			}
		}
	}
	for _, src := range []string{
		"", "package main", "package main\nfunc main() {}", "package main\nimport \"unsafe\"\nfunc main() { _ = unsafe.Sizeof(0) }",
		"package main\nimport \"C\"\nfunc main() {}", "package main\n//go:embed x\nvar s string\nfunc main() {}", "package main\ntype T[P any] struct { p *T[T[P]] }\nfunc main() {}",
	} {
		f.Add(src, []byte{})
	}
}

// edited changes whole tokens of a program, so that what comes out is often still
// one: of each three bytes the first two choose tokens and the third says whether
// the second replaces the first, comes before it, or the first is left out.
func edited(src string, edits []byte) string {
	for ; len(edits) >= 3; edits = edits[3:] {
		spans := tokens(src)
		if len(spans) == 0 {
			return src
		}
		a := spans[(int(edits[0])*257+int(edits[2]))%len(spans)]
		b := spans[(int(edits[1])*257+int(edits[2])/3)%len(spans)]
		text := src[b.from:b.to]
		switch edits[2] % 3 {
		case 1:
			text += " " + src[a.from:a.to]
		case 2:
			text = ""
		}
		src = src[:a.from] + text + src[a.to:]
	}
	return src
}

// span is the place of a token.
type span struct{ from, to int }

func tokens(src string) []span {
	var s scanner.Scanner
	set := token.NewFileSet()
	file := set.AddFile("", set.Base(), len(src))
	s.Init(file, []byte(src), func(token.Position, string) {}, 0)
	var list []span
	for {
		pos, tok, text := s.Scan()
		if tok == token.EOF {
			return list
		}
		if text == "" || tok == token.SEMICOLON {
			text = tok.String()
		}
		from := file.Offset(pos)
		list = append(list, span{from, min(from+len(text), len(src))})
	}
}

// FuzzCheck lets any text, and corpus programs with other tokens, through the checker and the lowering: it is accepted or
// refused with problems that have places in it, and never panics.
func FuzzCheck(f *testing.F) {
	fuzzSeeds(f)
	f.Fuzz(func(t *testing.T, src string, edits []byte) {
		src = edited(src, edits)
		if src == "" || len(src) > 20000 {
			return // an empty Source means Path
		}
		err := Check(Options{Path: "f.go", Source: src, Memory: 1 << 24})
		if err == nil {
			return
		}
		var problems Problems
		if !errors.As(err, &problems) || len(problems) == 0 {
			t.Fatalf("%v; want problems", err)
		}
		lines := strings.Count(src, "\n") + 1
		for _, p := range problems {
			if p.Message == "" || p.Line < 0 || p.Line > lines+1 && !strings.Contains(src, "//line") && !strings.Contains(src, "/*line") {
				t.Errorf("a problem without message or place: %+v", p)
			}
		}
	})
}

// FuzzRun runs what the checker accepts within tight limits: whatever it does,
// the host gets an error of a known kind, and no statement is internal to the
// lowering.
func FuzzRun(f *testing.F) {
	fuzzSeeds(f)
	dir := f.TempDir()
	f.Fuzz(func(t *testing.T, src string, edits []byte) {
		src = edited(src, edits)
		if src == "" || len(src) > 20000 {
			return
		}
		err := Run(context.Background(), Options{Path: "f.go", Source: src, Root: dir, NoFiles: true, Memory: 1 << 20, Steps: 20000, Time: 2 * time.Second})
		var problems Problems
		var panicked *PanicError
		var exit *ExitError
		var limit *LimitError
		if err == nil || errors.As(err, &problems) || errors.As(err, &panicked) || errors.As(err, &exit) || errors.As(err, &limit) {
			return
		}
		t.Errorf("%v; want an error of a known kind", err)
	})
}
