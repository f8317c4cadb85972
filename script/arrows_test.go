package script_test

import (
	"bufio"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// The folders follow the path from states to scripts, and no import turns back:
// testdata/arrows.txt is the law.
func TestImportsFollowTheTableOfArrows(t *testing.T) {
	root := ".."
	allowed := readArrows(t, filepath.Join(root, "testdata", "arrows.txt"))
	used := map[string]bool{}
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		name := d.Name()
		if d.IsDir() {
			if path != root && (name == "testdata" || strings.HasPrefix(name, ".")) {
				return filepath.SkipDir
			}
			return nil
		}
		if !strings.HasSuffix(name, ".go") || strings.HasSuffix(name, "_test.go") {
			return nil
		}
		folder, err := filepath.Rel(root, filepath.Dir(path))
		if err != nil {
			return err
		}
		checkImports(t, path, filepath.ToSlash(folder), allowed, used)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	for row := range allowed {
		if !used[row] {
			t.Errorf("the table speaks of %s, where there is no package", row)
		}
	}
}

func checkImports(t *testing.T, path, folder string, allowed map[string][]string, used map[string]bool) {
	t.Helper()
	row := folder
	if strings.HasPrefix(folder, "examples/") {
		row = "examples/*"
	}
	list, known := allowed[row]
	if !known {
		t.Errorf("%s: package %s has no line in the table of arrows", path, folder)
		return
	}
	used[row] = true
	file, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
	if err != nil {
		t.Error(err)
		return
	}
	for _, i := range file.Imports {
		imported, err := strconv.Unquote(i.Path.Value)
		if err != nil {
			t.Error(err)
			continue
		}
		ours, is := strings.CutPrefix(imported, "ketloom/")
		if !is {
			continue
		}
		permitted := false
		for _, p := range list {
			permitted = permitted || p == ours || p == "*"
		}
		if !permitted {
			t.Errorf("%s: %s must not import %s", path, folder, ours)
		}
	}
}

func readArrows(t *testing.T, path string) map[string][]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows := map[string][]string{}
	for lines := bufio.NewScanner(f); lines.Scan(); {
		line := strings.TrimSpace(lines.Text())
		if line == "" || strings.HasPrefix(line, "#") {
			continue
		}
		name, list, ok := strings.Cut(line, ":")
		if !ok {
			t.Fatalf("%s: no colon in %q", path, line)
		}
		rows[name] = strings.Fields(list)
	}
	return rows
}
