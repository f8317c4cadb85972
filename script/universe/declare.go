package universe

import (
	"go/constant"
	"go/token"
	"go/types"
	"reflect"
)

// declare enters one symbol of a table into its package.
func (u *Universe) declare(pkg *types.Package, name string, v reflect.Value) {
	scope := pkg.Scope()
	if c, typ := untyped(v); c != nil {
		scope.Insert(types.NewConst(token.NoPos, pkg, name, typ, c))
		return
	}
	switch {
	case isType(v):
		u.declareType(pkg, name, v.Type().Elem())
	case v.CanAddr():
		obj := types.NewVar(token.NoPos, pkg, name, u.Type(v.Type()))
		u.values[obj] = v
		scope.Insert(obj)
	case v.Kind() == reflect.Func:
		obj := types.NewFunc(token.NoPos, pkg, name, u.signature(v.Type(), nil, 0))
		u.values[obj] = v
		scope.Insert(obj)
	default:
		if c := typed(v); c != nil {
			scope.Insert(types.NewConst(token.NoPos, pkg, name, u.Type(v.Type()), c))
		}
	}
}

// isType tells the nil *T that stands for a type from other values.
func isType(v reflect.Value) bool {
	return v.Kind() == reflect.Pointer && !v.CanAddr() && v.IsNil()
}

func (u *Universe) declareType(pkg *types.Package, name string, t reflect.Type) {
	typ := u.Type(t)
	if named, ok := typ.(*types.Named); ok && named.Obj().Pkg() == pkg && named.Obj().Name() == name {
		if pkg.Scope().Lookup(name) == nil {
			pkg.Scope().Insert(named.Obj())
		}
		return
	}
	obj := types.NewTypeName(token.NoPos, pkg, name, nil)
	types.NewAlias(obj, typ)
	pkg.Scope().Insert(obj)
}

// untyped returns the exact value and type of an untyped constant.
func untyped(v reflect.Value) (constant.Value, types.Type) {
	if !v.CanInterface() {
		return nil, nil
	}
	if s, ok := v.Interface().(interface{ Constant() constant.Value }); ok {
		return s.Constant(), types.Typ[types.UntypedRune]
	}
	c, ok := v.Interface().(constant.Value)
	if !ok || v.CanAddr() {
		return nil, nil
	}
	kinds := map[constant.Kind]types.BasicKind{
		constant.Bool: types.UntypedBool, constant.String: types.UntypedString, constant.Int: types.UntypedInt,
		constant.Float: types.UntypedFloat, constant.Complex: types.UntypedComplex,
	}
	kind, ok := kinds[c.Kind()]
	if !ok {
		return nil, nil
	}
	return c, types.Typ[kind]
}

// typed returns the constant value of a typed constant.
func typed(v reflect.Value) constant.Value {
	switch v.Kind() {
	case reflect.Bool:
		return constant.MakeBool(v.Bool())
	case reflect.String:
		return constant.MakeString(v.String())
	case reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64:
		return constant.MakeInt64(v.Int())
	case reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64, reflect.Uintptr:
		return constant.MakeUint64(v.Uint())
	case reflect.Float32, reflect.Float64:
		return constant.ToFloat(constant.MakeFloat64(v.Float()))
	case reflect.Complex64, reflect.Complex128:
		z := v.Complex()
		return constant.BinaryOp(constant.MakeFloat64(real(z)), token.ADD, constant.MakeImag(constant.MakeFloat64(imag(z))))
	}
	return nil
}
