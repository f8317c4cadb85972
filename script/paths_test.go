package script

import (
	"bytes"
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

var pathWords = regexp.MustCompile(`(?i)path|file|folder|^dir`)

// pathFunctions lists the exported functions and methods of a package of the
// module that have a text named like a path among their parameters.
func pathFunctions(t *testing.T, path string) []string {
	t.Helper()
	dir := filepath.Join("..", strings.TrimPrefix(path, "ketloom/"))
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var list []string
	for _, e := range entries {
		if !strings.HasSuffix(e.Name(), ".go") || strings.HasSuffix(e.Name(), "_test.go") {
			continue
		}
		file, err := parser.ParseFile(token.NewFileSet(), filepath.Join(dir, e.Name()), nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		for _, d := range file.Decls {
			if fd, ok := d.(*ast.FuncDecl); ok && fd.Name.IsExported() && takesPath(fd) {
				list = append(list, fullName(path, fd))
			}
		}
	}
	return list
}

func takesPath(fd *ast.FuncDecl) bool {
	for _, field := range fd.Type.Params.List {
		if id, ok := field.Type.(*ast.Ident); !ok || id.Name != "string" {
			continue
		}
		for _, name := range field.Names {
			if pathWords.MatchString(name.Name) {
				return true
			}
		}
	}
	return false
}

func fullName(path string, fd *ast.FuncDecl) string {
	if fd.Recv == nil {
		return path + "." + fd.Name.Name
	}
	recv := fd.Recv.List[0].Type
	if star, ok := recv.(*ast.StarExpr); ok {
		recv = star.X
	}
	return fmt.Sprintf("(%s.%s).%s", path, recv.(*ast.Ident).Name, fd.Name.Name)
}

func goTool(t *testing.T) string {
	t.Helper()
	tool, err := exec.LookPath("go")
	if err != nil {
		t.Skip("no Go tool: nothing to compare with")
	}
	return tool
}

// compiledIn returns what the compiled program prints when it runs in a folder.
func compiledIn(t *testing.T, tool, folder, src string) string {
	t.Helper()
	path, binary := filepath.Join(t.TempDir(), "main.go"), filepath.Join(t.TempDir(), "program")
	if err := os.WriteFile(path, []byte(src), 0o666); err != nil {
		t.Fatal(err)
	}
	build := exec.Command(tool, "build", "-o", binary, path)
	build.Dir = moduleFolder
	if out, err := build.CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	cmd := exec.Command(binary)
	cmd.Dir = folder
	var out, errs bytes.Buffer
	cmd.Stdout, cmd.Stderr = &out, &errs
	if err := cmd.Run(); err != nil {
		t.Fatalf("%v\n%s", err, errs.String())
	}
	return out.String()
}

// moduleFolder is the folder of this package, wherever a test goes.
var moduleFolder = func() string {
	wd, err := os.Getwd()
	if err != nil {
		panic(err)
	}
	return wd
}()
