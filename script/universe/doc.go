// Package universe gives the type checker what a compiled program would give
// it: packages with their types, built from symbol tables by reflection, and
// source for the generic packages that reflection cannot show.
//
//	u := universe.New(symbols.Table)
//	pkg, err := u.Import("math")           // *types.Package
//	obj := pkg.Scope().Lookup("Sqrt")
//	f, ok := u.Value(obj)                  // the compiled function
//	t, ok := u.Reflect(obj.Type())         // a reflect.Type
//
// A Universe belongs to one run and is used by one goroutine at a time.
// Names of parameters are lost; unexported functions and variables are absent.
//
// The package may import nothing of Ketloom.
package universe
