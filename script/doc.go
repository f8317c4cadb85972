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
// Constructs that are not lowered are refused; script/lower lists them. The
// rest is computed as compiled, but for what Go leaves open or shows of itself:
//
//   - the capacity that append gives a slice, which a compiled program chooses by
//     where the slice lives;
//   - addresses, the order of maps, the scheduling of goroutines;
//   - the name of a script's struct in an error of encoding/json;
//   - the last bit of x*y + z on processors where the compiler fuses the two.
//
// A deadlock is not detected. Functions that call each other without end stop
// the script when the stacks of the whole program have grown by 400 MB. A script
// that names os.Stdin, os.Stdout or os.Stderr while the streams in Options are no
// files gets pipes.
//
// Interpreted code is some hundred times slower than compiled: a loop turn or an
// operation takes 50 to 250 ns, a call 1 to 2 microseconds. Scripts steer; what
// runs per state or per element belongs into calls of Ketloom.
//
// Several scripts run at once without disturbing each other: arguments,
// streams, flags, the standard logger and exit belong to the run. The current
// folder and the environment cannot be changed by a script.
//
// # What a script may reach
//
// Files: those below Options.Root, the current folder by default, and what
// Options.Read and Options.Write add; package fence says how paths are judged.
// This holds for packages os and path/filepath and for the functions of Ketloom
// that take paths. Temporary files lie in a folder of the run that goes with it.
// The environment is empty without Options.Env. There are no packages for
// processes, networks, reflection, plugins or system calls, no unsafe, no cgo,
// and the compiler's directives go:embed and go:linkname are refused.
//
// Options.Time and Options.Steps stop a script, with the line at which it was.
// An allocation larger than Options.Memory is a panic with its line, and so is
// what would be fatal to a compiled program: unlocking what is not locked. Many
// small allocations are not bounded, and two goroutines that change one map
// without a lock can still end the whole program, as they end a compiled one.
// Run scripts that are not trusted in a process of their own.
//
// # Embedding
//
// A host gives a script packages of its own by Options.Packages. Their tables
// are written by
//
//	go run ketloom/script/symbols/generate -package example.org/host/physics -out symbols_physics.go
//
// in the host's module. Functions of these packages run as they are: a path that
// a script gives them is theirs to judge. Values come back through
// Options.Return, which is called for each host.Return of the script. The
// folder examples/embedding is such a program.
//
// The package may import script/symbols and through it every public package,
// script/lower, script/machine, script/universe and script/fence.
package script
