package page

import (
	"go/ast"
	"go/build"
	"go/parser"
	"go/token"
	"os"
	"path/filepath"
	"strings"
)

// Script is what wrote a page.
type Script struct {
	Files []File
	// Args are the arguments without the name of the program.
	Args []string
}

// File is a file of a script: its name without folders, and its text.
type File struct{ Name, Text string }

// packageOf reads the package that a file belongs to: the Go files of its folder for
// this system, without tests. Where several of them have a function main each is
// a script of its own, and the file stands alone.
func packageOf(path string) []File {
	if !filepath.IsAbs(path) {
		return nil // the program was built without the places of its files
	}
	folder := filepath.Dir(path)
	entries, err := os.ReadDir(folder)
	if err != nil {
		return nil
	}
	var own, all []File
	mains := 0
	for _, e := range entries {
		name := e.Name()
		if e.IsDir() || !strings.HasSuffix(name, ".go") || strings.HasSuffix(name, "_test.go") && name != filepath.Base(path) {
			continue
		}
		if fits, err := build.Default.MatchFile(folder, name); !fits || err != nil {
			continue
		}
		text, err := os.ReadFile(filepath.Join(folder, name))
		if err != nil {
			continue
		}
		f := File{name, string(text)}
		all = append(all, f)
		if name == filepath.Base(path) {
			own = append(own, f)
		}
		if hasMain(f.Text) {
			mains++
		}
	}
	if mains > 1 || len(own) == 0 {
		return own
	}
	return all
}

func hasMain(text string) bool {
	file, err := parser.ParseFile(token.NewFileSet(), "", text, parser.SkipObjectResolution)
	if err != nil || file.Name.Name != "main" {
		return false
	}
	for _, d := range file.Decls {
		if f, ok := d.(*ast.FuncDecl); ok && f.Recv == nil && f.Name.Name == "main" {
			return true
		}
	}
	return false
}
