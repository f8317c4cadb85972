// Command ketloom checks and runs Go scripts for lattice models on machines
// without a Go tool.
//
//	ketloom run chain.go -- -sites 12
//	ketloom check chain.go
//
// Run ketloom help for all of it.
package main

import (
	"fmt"
	"os"
	"strings"
)

// Exit codes of the command. A script's own code is passed on.
const (
	exitOK          = 0
	exitProblem     = 1   // the script is wrong or cannot be read
	exitPanic       = 2   // the script panicked, as with a compiled program
	exitUsage       = 64  // the command line is wrong
	exitLimit       = 124 // stopped at a limit of time or steps
	exitInterrupted = 130 // stopped by Ctrl-C or a request to end
)

func main() { os.Exit(command(os.Args[1:])) }

// command runs one subcommand and returns the exit code.
func command(args []string) int {
	if len(args) == 0 {
		fmt.Fprint(os.Stderr, helpText)
		return exitUsage
	}
	switch args[0] {
	case "run":
		return run(args[1:])
	case "check":
		return check(args[1:])
	case "new":
		return newScript(args[1:])
	case "doc":
		return page(args[1:])
	case "completion":
		return completion(args[1:])
	case "version", "-version", "--version":
		return version()
	case "help", "-h", "-help", "--help":
		return help(args[1:])
	}
	fmt.Fprintf(os.Stderr, "ketloom: there is no command %q; the commands are %s\n", args[0], strings.Join(commands, ", "))
	return exitUsage
}
