// Package lower turns a checked script into a program of the few forms that the
// interpreter computes exactly as the Go compiler does.
//
//	p, refused := lower.Compile(lower.Input{...})
//	// p.Source for the interpreter, p.Symbols for its package h
//
// The lowered program is in three-address form. Calls leave expressions in the
// order of evaluation, everything else is computed where it is used, as the
// compiler does it. What is left has
//
//   - functions, no methods: a method is a function of its receiver;
//   - types made of Go's basic types, of compiled types, and of structs whose
//     fields all have upper-case names; a script's named type is kept as the
//     type below it, and package machine adds the name in an interface;
//   - no closures over variables: a function literal is made by a function
//     that gets what it uses as arguments, a variable that is shared becomes a
//     pointer;
//   - no defer, recover, select, switch, range over integers or functions,
//     generics, constants without a type or named results;
//   - a test before every operation that can panic, with the place of the
//     operation, so that errors have Go's wording and the script's line;
//   - one symbol for each call into compiled code, which converts arguments and
//     knows the place of the call.
//
// What cannot be brought into this form is refused with its place, the construct
// and what to write instead. One rule of rewriting is one file.
//
// The package may import script/universe and script/machine.
package lower
