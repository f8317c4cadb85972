package universe

import (
	"go/token"
	"go/types"
	"reflect"
)

var errorType = reflect.TypeFor[error]()

var basics = map[reflect.Kind]types.BasicKind{
	reflect.Bool: types.Bool, reflect.String: types.String,
	reflect.Int: types.Int, reflect.Int8: types.Int8, reflect.Int16: types.Int16, reflect.Int32: types.Int32, reflect.Int64: types.Int64,
	reflect.Uint: types.Uint, reflect.Uint8: types.Uint8, reflect.Uint16: types.Uint16, reflect.Uint32: types.Uint32, reflect.Uint64: types.Uint64, reflect.Uintptr: types.Uintptr,
	reflect.Float32: types.Float32, reflect.Float64: types.Float64,
	reflect.Complex64: types.Complex64, reflect.Complex128: types.Complex128,
	reflect.UnsafePointer: types.UnsafePointer,
}

// Type returns the checked form of t.
func (u *Universe) Type(t reflect.Type) types.Type {
	if typ, ok := u.named[t]; ok {
		return typ
	}
	if t == errorType {
		return types.Universe.Lookup("error").Type()
	}
	if t.Name() != "" && t.PkgPath() != "" {
		return u.namedType(t)
	}
	return u.literal(t)
}

// namedType declares t in its package and then completes it.
func (u *Universe) namedType(t reflect.Type) types.Type {
	pkg := u.pkg(t.PkgPath())
	obj := types.NewTypeName(token.NoPos, pkg, t.Name(), nil)
	named := types.NewNamed(obj, nil, nil)
	u.named[t] = named
	u.reflect[obj] = t
	named.SetUnderlying(u.literal(t))
	u.addMethods(named, t)
	if t.Name()[0] >= 'A' && t.Name()[0] <= 'Z' && pkg.Scope().Lookup(t.Name()) == nil {
		if _, ok := u.table[pkg.Path()][t.Name()]; ok {
			pkg.Scope().Insert(obj)
		}
	}
	return named
}

// addMethods declares the methods of t and *t. Reflection does not tell methods
// of embedded fields from own ones; they are declared as own, which changes no
// call.
func (u *Universe) addMethods(named *types.Named, t reflect.Type) {
	if t.Kind() == reflect.Interface {
		return
	}
	ptr := reflect.PointerTo(t)
	for i := range ptr.NumMethod() {
		m := ptr.Method(i)
		recv := types.Type(named)
		if _, ok := t.MethodByName(m.Name); !ok {
			recv = types.NewPointer(named)
		}
		pkg := named.Obj().Pkg()
		self := types.NewParam(token.NoPos, pkg, "", recv)
		named.AddMethod(types.NewFunc(token.NoPos, pkg, m.Name, u.signature(m.Type, self, 1)))
	}
}

func (u *Universe) literal(t reflect.Type) types.Type {
	switch t.Kind() {
	case reflect.Pointer:
		return types.NewPointer(u.Type(t.Elem()))
	case reflect.Slice:
		return types.NewSlice(u.Type(t.Elem()))
	case reflect.Array:
		return types.NewArray(u.Type(t.Elem()), int64(t.Len()))
	case reflect.Map:
		return types.NewMap(u.Type(t.Key()), u.Type(t.Elem()))
	case reflect.Chan:
		dirs := map[reflect.ChanDir]types.ChanDir{reflect.BothDir: types.SendRecv, reflect.SendDir: types.SendOnly, reflect.RecvDir: types.RecvOnly}
		return types.NewChan(dirs[t.ChanDir()], u.Type(t.Elem()))
	case reflect.Func:
		return u.signature(t, nil, 0)
	case reflect.Struct:
		return u.structType(t)
	case reflect.Interface:
		return u.interfaceType(t)
	}
	return types.Typ[basics[t.Kind()]]
}

// signature converts a function type, leaving out its first skip parameters.
func (u *Universe) signature(t reflect.Type, recv *types.Var, skip int) *types.Signature {
	var params, results []*types.Var
	for i := skip; i < t.NumIn(); i++ {
		params = append(params, types.NewParam(token.NoPos, nil, "", u.Type(t.In(i))))
	}
	for i := range t.NumOut() {
		results = append(results, types.NewParam(token.NoPos, nil, "", u.Type(t.Out(i))))
	}
	return types.NewSignatureType(recv, nil, nil, types.NewTuple(params...), types.NewTuple(results...), t.IsVariadic())
}

func (u *Universe) structType(t reflect.Type) types.Type {
	var fields []*types.Var
	var tags []string
	for i := range t.NumField() {
		f := t.Field(i)
		pkg := u.home(t, f.PkgPath)
		fields = append(fields, types.NewField(token.NoPos, pkg, f.Name, u.Type(f.Type), f.Anonymous))
		tags = append(tags, string(f.Tag))
	}
	return types.NewStruct(fields, tags)
}

func (u *Universe) interfaceType(t reflect.Type) types.Type {
	var methods []*types.Func
	for i := range t.NumMethod() {
		m := t.Method(i)
		methods = append(methods, types.NewFunc(token.NoPos, u.home(t, m.PkgPath), m.Name, u.signature(m.Type, nil, 0)))
	}
	return types.NewInterfaceType(methods, nil).Complete()
}

// home returns the package of a field or method: its own if it is unexported.
func (u *Universe) home(t reflect.Type, path string) *types.Package {
	if path == "" {
		path = t.PkgPath()
	}
	if path == "" {
		return nil
	}
	return u.pkg(path)
}
