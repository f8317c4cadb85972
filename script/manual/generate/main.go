// Generate writes the pages of the manual from the doc comments of the packages
// that scripts may import.
package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"go/ast"
	"go/doc"
	"go/doc/comment"
	"go/format"
	"go/parser"
	"go/token"
	"os"
	"path/filepath"
	"sort"
	"strings"

	"ketloom/script/manual"
	"ketloom/script/symbols"
)

func main() {
	data, err := Pages("../..")
	if err == nil {
		err = os.WriteFile("pages.json", data, 0o666)
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "generate:", err)
		os.Exit(1)
	}
}

// Pages returns the JSON of all pages; root is the folder of the module.
func Pages(root string) ([]byte, error) {
	var list []manual.Package
	for _, path := range symbols.Ketloom {
		p, err := read(path, filepath.Join(root, filepath.FromSlash(strings.TrimPrefix(path, "ketloom/"))))
		if err != nil {
			return nil, fmt.Errorf("%s: %w", path, err)
		}
		list = append(list, p)
	}
	data, err := json.MarshalIndent(list, "", " ")
	return append(data, '\n'), err
}

// read takes the documentation of the package in a folder.
func read(path, folder string) (manual.Package, error) {
	files := token.NewFileSet()
	var parsed []*ast.File
	names, err := filepath.Glob(filepath.Join(folder, "*.go"))
	if err != nil {
		return manual.Package{}, err
	}
	for _, name := range names {
		if strings.HasSuffix(name, "_test.go") || strings.HasSuffix(name, "_other.go") {
			continue
		}
		f, err := parser.ParseFile(files, name, nil, parser.ParseComments)
		if err != nil {
			return manual.Package{}, err
		}
		parsed = append(parsed, f)
	}
	d, err := doc.NewFromFiles(files, parsed, path)
	if err != nil {
		return manual.Package{}, err
	}
	r := reader{files, d}
	p := manual.Package{Path: path, Text: r.text(d.Doc)}
	r.values(&p, d.Consts)
	r.values(&p, d.Vars)
	r.functions(&p, "", d.Funcs)
	for _, t := range d.Types {
		if !ast.IsExported(t.Name) {
			continue
		}
		p.Entries = append(p.Entries, manual.Entry{Name: t.Name, Declaration: r.source(t.Decl), Text: r.text(t.Doc)})
		r.values(&p, t.Consts)
		r.values(&p, t.Vars)
		r.functions(&p, "", t.Funcs)
		r.functions(&p, t.Name+".", t.Methods)
	}
	sort.SliceStable(p.Entries, func(a, b int) bool { return p.Entries[a].Name < p.Entries[b].Name })
	return p, nil
}

// reader turns the syntax of one package into text.
type reader struct {
	files *token.FileSet
	doc   *doc.Package
}

func (r reader) text(comments string) string {
	printer := &comment.Printer{TextWidth: 88}
	return string(printer.Text(r.doc.Parser().Parse(comments)))
}

func (r reader) source(node ast.Decl) string {
	if f, ok := node.(*ast.FuncDecl); ok {
		bare := *f
		bare.Body, bare.Doc = nil, nil
		node = &bare
	}
	if g, ok := node.(*ast.GenDecl); ok {
		bare := *g
		bare.Doc = nil
		node = &bare
	}
	var b bytes.Buffer
	if err := format.Node(&b, r.files, node); err != nil {
		return err.Error()
	}
	return b.String()
}

// values adds constants and variables under the first exported name of each
// declaration, the others as entries that show the same declaration.
func (r reader) values(p *manual.Package, list []*doc.Value) {
	for _, v := range list {
		for _, name := range v.Names {
			if ast.IsExported(name) {
				p.Entries = append(p.Entries, manual.Entry{Name: name, Declaration: r.source(v.Decl), Text: r.text(v.Doc)})
			}
		}
	}
}

func (r reader) functions(p *manual.Package, prefix string, list []*doc.Func) {
	for _, f := range list {
		if ast.IsExported(f.Name) {
			p.Entries = append(p.Entries, manual.Entry{Name: prefix + f.Name, Declaration: r.source(f.Decl), Text: r.text(f.Doc)})
		}
	}
}
