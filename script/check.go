package script

import (
	"errors"
	"fmt"
	"go/types"
	"io"
	"sort"
	"strings"

	"ketloom/script/lower"
	"ketloom/script/machine"
	"ketloom/script/universe"
)

// Check reads a script and reports everything that would keep it from running,
// as Problems: syntax, types, unused variables and imports in the compiler's
// words, and constructs that are not available. It runs nothing.
func Check(o Options) error {
	run := machine.New(machine.Streams{In: strings.NewReader(""), Out: io.Discard, Err: io.Discard}, []string{o.Path})
	defer run.Close()
	o = o.filled()
	run.Limits = machine.Limits{Memory: o.Memory}
	_, _, err := prepare(o, run)
	return err
}

// prepare checks and lowers a script for a run.
func prepare(o Options, run *machine.Run) (*source, *lower.Program, error) {
	src, problems, err := read(o)
	if err != nil {
		return nil, nil, err
	}
	if len(problems) > 0 {
		return src, nil, problems
	}
	if problems := src.forbidden(); len(problems) > 0 {
		return src, nil, problems
	}
	table, err := o.tables()
	if err != nil {
		return src, nil, err
	}
	u := universe.New(table)
	info := universe.NewInfo()
	pkg, problems := src.check(u, info)
	if len(problems) > 0 {
		return src, nil, problems
	}
	run.Bound = bound(src, run)
	p, refused := lower.Compile(lower.Input{Fset: src.fset, Files: src.files, Info: info, Package: pkg, Universe: u, Run: run})
	for _, r := range refused {
		problems = append(problems, src.at(r.Pos, "%s", r.Message))
	}
	if len(problems) > 0 {
		return src, nil, problems
	}
	return src, p, nil
}

// check type-checks the script and collects all errors.
func (s *source) check(u *universe.Universe, info *types.Info) (*types.Package, Problems) {
	var problems Problems
	conf := types.Config{
		Importer:  u,
		GoVersion: "go1.26",
		Sizes:     types.SizesFor("gc", "amd64"),
		Error: func(err error) {
			var e types.Error
			if !errors.As(err, &e) {
				return
			}
			p := s.typeError(e)
			if rest, ok := strings.CutPrefix(p.Message, "\t"); ok && len(problems) > 0 { // more about the error before
				last := &problems[len(problems)-1]
				last.Message += fmt.Sprintf("\n\t%s:%d:%d: %s", p.File, p.Line, p.Column, rest)
				return
			}
			problems = append(problems, p)
		},
	}
	pkg, err := conf.Check("main", s.fset, s.files, info)
	if err != nil && len(problems) == 0 {
		problems = append(problems, Problem{File: s.name, Message: err.Error()})
	}
	for _, f := range s.files {
		if f.Name.Name != "main" {
			problems = append(problems, s.at(f.Name.Pos(), "package %s is not a main package; a script is a package main", f.Name.Name))
		}
	}
	if len(problems) == 0 && pkg.Scope().Lookup("main") == nil {
		problems = append(problems, Problem{File: s.name, Message: "function main is undeclared in the main package"})
	}
	sort.SliceStable(problems, func(i, j int) bool {
		a, b := problems[i], problems[j]
		if a.File != b.File {
			return a.File < b.File
		}
		if a.Line != b.Line {
			return a.Line < b.Line
		}
		return a.Column < b.Column
	})
	return pkg, problems
}

// typeError words an error of the checker as the compiler does.
func (s *source) typeError(e types.Error) Problem {
	msg := e.Msg
	if strings.HasPrefix(msg, "could not import ") {
		if i := strings.Index(msg, "("); i >= 0 {
			msg = strings.TrimSuffix(msg[i+1:], ")")
		}
	}
	switch {
	case msg == "break not in for, switch, or select statement":
		msg = "break is not in a loop, switch, or select"
	case msg == "continue not in for statement":
		msg = "continue is not in a loop"
	case strings.HasPrefix(msg, "label ") && strings.HasSuffix(msg, " declared and not used"):
		msg = strings.TrimSuffix(msg, " declared and not used") + " defined and not used"
	}
	return s.at(e.Pos, "%s", msg)
}
