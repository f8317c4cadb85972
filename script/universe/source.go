package universe

import (
	"embed"
	"go/ast"
	"go/parser"
	"go/token"
	"go/types"
)

//go:embed source/*.src
var files embed.FS

// sources names the packages that are supplied as source.
var sources = map[string]bool{"cmp": true, "iter": true, "maps": true, "slices": true}

// Generic is a package that is supplied as source, since reflection cannot
// show generic functions. The functions there do what the standard library's
// do; those whose result shows how a slice grows (slices.Insert, Concat, Grow
// ...) are absent.
type Generic struct {
	Package *types.Package
	Info    *types.Info
	Fset    *token.FileSet
	File    *ast.File
}

// Sources returns the source packages imported so far.
func (u *Universe) Sources() []*Generic {
	var list []*Generic
	for _, path := range []string{"cmp", "iter", "maps", "slices"} {
		if g := u.generic[path]; g != nil {
			list = append(list, g)
		}
	}
	return list
}

func (u *Universe) source(path string) (*Generic, error) {
	if !sources[path] {
		return nil, nil
	}
	if g, ok := u.generic[path]; ok {
		return g, nil
	}
	src, err := files.ReadFile("source/" + path + ".src")
	if err != nil {
		return nil, err
	}
	g := &Generic{Info: NewInfo(), Fset: token.NewFileSet()}
	g.File, err = parser.ParseFile(g.Fset, path+".go", src, parser.SkipObjectResolution)
	if err != nil {
		return nil, err
	}
	conf := types.Config{Importer: u}
	g.Package, err = conf.Check(path, g.Fset, []*ast.File{g.File}, g.Info)
	if err != nil {
		return nil, err
	}
	u.generic[path] = g
	return g, nil
}

// NewInfo returns an Info with every map that the lowering reads.
func NewInfo() *types.Info {
	return &types.Info{
		Types:        map[ast.Expr]types.TypeAndValue{},
		Instances:    map[*ast.Ident]types.Instance{},
		Defs:         map[*ast.Ident]types.Object{},
		Uses:         map[*ast.Ident]types.Object{},
		Implicits:    map[ast.Node]types.Object{},
		Selections:   map[*ast.SelectorExpr]*types.Selection{},
		Scopes:       map[ast.Node]*types.Scope{},
		InitOrder:    nil,
		FileVersions: map[*ast.File]string{},
	}
}
