// Package machine is the run-time side of a script: what lowered code calls
// for everything the interpreter does not compute as the compiler would.
// Values behind interfaces, printing, panics, deferred calls, channels and the
// process (arguments, streams, exit) live here, for one run each.
//
//	run := machine.New(machine.Streams{Out: os.Stdout, Err: os.Stderr}, []string{"script"})
//	defer run.Close()
//
// A script's own types have no reflected twin: type E int and type F int are
// both int to reflection. A value of such a type therefore enters an interface
// as a Value, which carries the checked type beside the stored form, and
// leaves it through Assert.
//
// The package may import script/fence and script/progress.
package machine
