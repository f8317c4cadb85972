package symbols

import "reflect"

// Table maps an import path to the exported names of that package.
//
// A function or typed constant is its value; an untyped constant is a
// constant.Value; a variable is an addressable value; a type T is a nil *T; an
// interface T has in addition the entry _T, a nil pointer to a struct with the
// field IValue and one function field WMethod for each method. The table is
// filled by init functions and must not be changed afterwards.
var Table = map[string]map[string]reflect.Value{}
