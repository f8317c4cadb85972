package main

import (
	"fmt"
	"os"
	"strings"

	"ketloom/script"
)

const helpText = `ketloom runs Go programs for exact diagonalisation of lattice models.
No Go tool is needed; go run gives the same output where there is one.

  ketloom run FILE-OR-FOLDER [-- ARGUMENTS]   check a script and run it
  ketloom check FILE-OR-FOLDER ...            check scripts, run nothing
  ketloom version                             print the version
  ketloom help [run|check|packages]           print more about a command

Examples

  ketloom run chain.go
  ketloom run chain.go -- -sites 12 -out chain.csv
  ketloom check examples/chain
`

const helpRun = `ketloom run FILE-OR-FOLDER [-- ARGUMENTS]

Checks a script as the compiler does, then runs it. A script is a package main:
one Go file, or a folder of them. Everything after -- is given to the script as
os.Args[1:], for package flag; the -- may be left out where no argument could be
taken for one of ketloom.

What the interpreter cannot compute exactly as a compiled program would is
refused before anything runs, with its line and with what to write instead.

Ctrl-C reaches the script first: signal.NotifyContext(context.Background(),
os.Interrupt) gives it a context that ends. A script that is still running 0.7 s
later is stopped; a second Ctrl-C stops it at once.

Exit codes
    0  the script ended well
    1  the script has errors and was not run, or cannot be read
    2  the script panicked; the message has its file and line
   64  the command line is wrong
  130  stopped by Ctrl-C
  any other code is the script's own, from os.Exit

Examples

  ketloom run chain.go
  ketloom run chain.go -- -sites 12
  ketloom run ./study > study.txt
`

const helpCheck = `ketloom check FILE-OR-FOLDER ...

Reports every error of the scripts, each with file:line:column, the message in
the compiler's words and the line. Nothing is run.

Exit codes
    0  no errors
    1  errors
   64  the command line is wrong

Example

  ketloom check chain.go ladder.go
`

// help prints the text of a command.
func help(args []string) int {
	if len(args) == 0 {
		fmt.Print(helpText)
		return exitOK
	}
	switch args[0] {
	case "run":
		fmt.Print(helpRun)
	case "check":
		fmt.Print(helpCheck)
	case "packages":
		ours, standard := script.Packages()
		fmt.Printf("Packages that a script may import\n\n  %s\n\n  %s\n", strings.Join(ours, "\n  "), strings.Join(standard, "\n  "))
	default:
		fmt.Fprintf(os.Stderr, "ketloom: there is no help on %q; there is on run, check and packages\n", args[0])
		return exitUsage
	}
	return exitOK
}

func wantsHelp(args []string) bool {
	return len(args) > 0 && (args[0] == "-h" || args[0] == "-help" || args[0] == "--help")
}
