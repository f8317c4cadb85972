package universe

import (
	"fmt"
	"go/types"
	"reflect"
	"sort"
	"strings"
)

// Universe converts between reflected and checked types. Create it with New.
type Universe struct {
	table    map[string]map[string]reflect.Value
	packages map[string]*types.Package
	named    map[reflect.Type]types.Type
	reflect  map[types.Object]reflect.Type
	values   map[types.Object]reflect.Value
	generic  map[string]*Generic
}

// New returns a universe over tables as package symbols describes them.
func New(table map[string]map[string]reflect.Value) *Universe {
	return &Universe{
		table:    table,
		packages: map[string]*types.Package{},
		named:    map[reflect.Type]types.Type{},
		reflect:  map[types.Object]reflect.Type{},
		values:   map[types.Object]reflect.Value{},
		generic:  map[string]*Generic{},
	}
}

// Import returns the package of the given path, for go/types. A path without a
// table is an error that names the packages there are.
func (u *Universe) Import(path string) (*types.Package, error) {
	if g, err := u.source(path); g != nil || err != nil {
		if err != nil {
			return nil, err
		}
		return g.Package, nil
	}
	symbols, ok := u.table[path]
	if !ok {
		return nil, fmt.Errorf("package %s is not available in a script; available are %s", path, strings.Join(u.Paths(), " "))
	}
	pkg := u.pkg(path)
	if pkg.Complete() {
		return pkg, nil
	}
	pkg.MarkComplete()
	names := make([]string, 0, len(symbols))
	for name := range symbols {
		names = append(names, name)
	}
	sort.Strings(names)
	for _, name := range names {
		if !strings.HasPrefix(name, "_") {
			u.declare(pkg, name, symbols[name])
		}
	}
	return pkg, nil
}

// Paths returns the import paths of the tables and of the source packages, in
// ascending order.
func (u *Universe) Paths() []string {
	var paths []string
	for path := range u.table {
		paths = append(paths, path)
	}
	for path := range sources {
		paths = append(paths, path)
	}
	sort.Strings(paths)
	return paths
}

// Value returns the compiled function or the addressable variable behind an
// object of a table.
func (u *Universe) Value(obj types.Object) (reflect.Value, bool) {
	v, ok := u.values[obj]
	return v, ok
}

// Wrapper returns the struct of functions that stands for the interface t, or
// nil: see package symbols.
func (u *Universe) Wrapper(t reflect.Type) reflect.Type {
	if t == errorType {
		return nil
	}
	v, ok := u.table[t.PkgPath()]["_"+t.Name()]
	if !ok {
		return nil
	}
	return v.Type().Elem()
}

// Named returns the reflected form of a named type of a table.
func (u *Universe) Named(obj types.Object) (reflect.Type, bool) {
	t, ok := u.reflect[obj]
	return t, ok
}

// Compiled says that the package of obj is one of a table, not a script's.
func (u *Universe) Compiled(obj types.Object) bool {
	if obj.Pkg() == nil {
		return true
	}
	return u.packages[obj.Pkg().Path()] == obj.Pkg()
}

func (u *Universe) pkg(path string) *types.Package {
	if pkg, ok := u.packages[path]; ok {
		return pkg
	}
	pkg := types.NewPackage(path, name(path))
	u.packages[path] = pkg
	return pkg
}

// name returns the package name of an import path: its last element that is
// not a major version.
func name(path string) string {
	parts := strings.Split(path, "/")
	last := parts[len(parts)-1]
	if len(parts) > 1 && len(last) > 1 && last[0] == 'v' && strings.Trim(last[1:], "0123456789") == "" {
		last = parts[len(parts)-2]
	}
	return last
}
