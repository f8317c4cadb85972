// Package script runs Go programs without a Go tool: it checks them as the
// compiler does, lowers them to what the embedded interpreter computes exactly,
// and runs them. A script is either computed as the compiled program would be,
// or refused with the line, the construct and what to write instead.
//
//	err := script.Run(ctx, script.Options{Path: "chain.go", Args: []string{"-sites", "12"}})
//	var problems script.Problems
//	if errors.As(err, &problems) {
//		for _, p := range problems { fmt.Fprintln(os.Stderr, p) }
//	}
//
// A script is an ordinary package main: one file, or the Go files of a folder.
// It may import the packages that symbols.Ketloom and symbols.Standard list,
// and cmp, iter, maps and slices.
//
// # What differs from a compiled program
//
// Constructs that are not lowered are refused; script/lower lists them. A
// script sees no sizes of its own types and none of their addresses in a
// meaningful way. On processors where the compiler fuses a multiplication and
// an addition the compiled program may round differently. A deadlock is not
// detected. A script that reads or writes os.Stdin, os.Stdout or os.Stderr by
// name while the streams in Options are no files goes through a pipe.
//
// Several scripts run at once without disturbing each other: arguments,
// streams, flags, the standard logger and exit belong to the run. The current
// folder and the environment cannot be changed by a script.
//
// The package may import script/symbols and through it every public package.
package script
