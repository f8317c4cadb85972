// Package symbols holds the tables through which a script reaches compiled
// code: for every covered package its functions, variables, constants and
// types as reflect values, and for every interface a struct of functions with
// which a script's own type can stand behind it.
//
//	v := symbols.Table["math"]["Sqrt"]       // a reflect.Value
//	t := symbols.Table["time"]["Duration"]   // a nil *time.Duration
//
// The tables are generated; packages.go lists what they cover. After a change
// of the public API run
//
//	go generate ./script/symbols
//
// which needs the Go tool. The output depends on the sources alone, so a second
// run changes nothing, and a test fails while the tables are stale.
//
// Constants without a type are exact go/constant values. Generic functions and
// types are absent: reflection cannot show them.
//
// The package may import every public package of Ketloom.
package symbols

//go:generate go run ./generate
