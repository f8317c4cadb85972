package script

import (
	"errors"
	"fmt"
	"go/ast"
	"go/parser"
	"go/scanner"
	"go/token"
	"os"
	"path/filepath"
	"sort"
	"strings"
)

// source is a script that has been read.
type source struct {
	name  string // for messages about the whole
	fset  *token.FileSet
	files []*ast.File
	text  map[string][]string // file -> lines
}

// read reads the script of o.
func read(o Options) (*source, Problems, error) {
	s := &source{name: o.Path, fset: token.NewFileSet(), text: map[string][]string{}}
	paths := []string{o.Path}
	if o.Source == "" {
		info, err := os.Stat(o.Path)
		if err != nil {
			return nil, nil, fmt.Errorf("script: %w", err)
		}
		if info.IsDir() {
			if paths, err = goFiles(o.Path); err != nil {
				return nil, nil, err
			}
		}
	} else if s.name == "" {
		s.name = "script.go"
		paths = []string{s.name}
	}
	var problems Problems
	for _, path := range paths {
		p, err := s.parse(path, o.Source)
		if err != nil {
			return nil, nil, err
		}
		problems = append(problems, p...)
	}
	return s, problems, nil
}

// goFiles returns the Go files of a folder, without tests, in order.
func goFiles(dir string) ([]string, error) {
	entries, err := os.ReadDir(dir)
	if err != nil {
		return nil, fmt.Errorf("script: %w", err)
	}
	var paths []string
	for _, e := range entries {
		name := e.Name()
		if e.IsDir() || !strings.HasSuffix(name, ".go") || strings.HasSuffix(name, "_test.go") || name[0] == '_' || name[0] == '.' {
			continue
		}
		paths = append(paths, filepath.Join(dir, name))
	}
	if len(paths) == 0 {
		return nil, fmt.Errorf("script: the folder %s has no Go file; a script is a package main in one file or one folder", dir)
	}
	sort.Strings(paths)
	return paths, nil
}

func (s *source) parse(path, text string) (Problems, error) {
	if text == "" {
		b, err := os.ReadFile(path)
		if err != nil {
			return nil, fmt.Errorf("script: %w", err)
		}
		text = string(b)
	}
	s.text[path] = strings.Split(text, "\n")
	f, err := parser.ParseFile(s.fset, path, text, parser.SkipObjectResolution|parser.AllErrors|parser.ParseComments)
	var list scanner.ErrorList
	if errors.As(err, &list) {
		return s.syntax(list), nil
	}
	if err != nil {
		return nil, fmt.Errorf("script: %w", err)
	}
	s.files = append(s.files, f)
	return nil, nil
}

// syntax words errors of the parser, one for each line. What is missed at the
// end of a file follows from an error before.
func (s *source) syntax(list scanner.ErrorList) Problems {
	list.RemoveMultiples()
	var problems Problems
	for _, e := range list {
		msg := e.Msg
		if want, have, ok := strings.Cut(msg, ", found "); ok && strings.HasPrefix(want, "expected ") {
			if have == "'EOF'" && len(problems) > 0 {
				continue
			}
			msg = "unexpected " + strings.Trim(have, "'") + ", " + strings.ReplaceAll(want, "'", "")
		}
		problems = append(problems, s.problem(e.Pos, "syntax error: "+msg))
	}
	return problems
}

func (s *source) problem(p token.Position, message string) Problem {
	q := Problem{File: p.Filename, Line: p.Line, Column: p.Column, Message: message}
	if lines := s.text[p.Filename]; p.Line > 0 && p.Line <= len(lines) {
		q.Source = lines[p.Line-1]
	}
	if q.File == "" {
		q.File = s.name
	}
	return q
}

func (s *source) at(pos token.Pos, format string, args ...any) Problem {
	return s.problem(s.fset.Position(pos), fmt.Sprintf(format, args...))
}
