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
  ketloom new NAME                            write a commented script to begin with
  ketloom doc [SUBJECT ...]                   print the documentation of a package or name
  ketloom completion bash|zsh|fish            print what the shell needs to complete
  ketloom version                             print the version
  ketloom help [COMMAND|packages]             print more about a command

Examples

  ketloom run chain.go
  ketloom run chain.go -- -sites 12 -out chain.csv
  ketloom check examples/chain
  ketloom new ladder
  ketloom doc basis
`

const helpRun = `ketloom run [FLAGS] FILE-OR-FOLDER [-- ARGUMENTS]

Checks a script as the compiler does, then runs it. A script is a package main:
one Go file, or a folder of them. Everything after -- is given to the script as
os.Args[1:], for package flag; the -- may be left out where no argument could be
taken for one of ketloom.

What the interpreter cannot compute exactly as a compiled program would is
refused before anything runs, with its line and with what to write instead.

A script reads and writes files below the current folder only, and reads those
beside it. It sees no environment, starts no programs and has no network.

Flags, before the script
  -root FOLDER        make FOLDER the script's current folder, and its only one
  -allow read=PATH    let it read a file or folder elsewhere; may be repeated
  -allow write=PATH   let it write there, too
  -allow env          show it the environment
  -time DURATION      stop it after that time, such as 90s or 2h
  -steps NUMBER       stop it after so many turns of loops and calls
  -memory GIB         largest single allocation, 8 if not given; 0 for no limit
  -quiet              draw no progress
  -json               write a line of JSON to standard error when the script is
                      started, for each reason to refuse it, and when it ended
  -watch              run it again whenever it is saved, until Ctrl-C
  -compiled           build it with the go command and run that, unfenced; the
                      script has to lie in a module that requires ketloom

Ctrl-C reaches the script first: signal.NotifyContext(context.Background(),
os.Interrupt) gives it a context that ends. A script that is still running 0.7 s
later is stopped; a second Ctrl-C stops it at once. A request of the system to
end (SIGTERM) is taken in the same way.

Exit codes
    0  the script ended well
    1  the script has errors and was not run, or cannot be read
    2  the script panicked; the message has its file and line
   64  the command line is wrong
  124  stopped at -time or -steps
  130  stopped by Ctrl-C
  any other code is the script's own, from os.Exit

Examples

  ketloom run chain.go
  ketloom run chain.go -- -sites 12
  ketloom run ./study > study.txt
  ketloom run -root out chain.go -- -sites 12
  ketloom run -allow read=/data/couplings.csv -time 10m chain.go
  ketloom run -watch -quiet chain.go
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

const helpNew = `ketloom new NAME

Writes NAME.go, a commented script that runs as it is: flags, a model, its
sectors and their lowest levels. An existing file is never changed.

Exit codes
    0  the file is written
    1  the file exists or cannot be written
   64  the command line is wrong

Example

  ketloom new ladder
  ketloom run ladder.go -- -length 12
`

const helpDoc = `ketloom doc [SUBJECT ...]

Prints the documentation that the packages carry in their source. A subject is a
package (basis, operator/matrix), a name in one (lanczos.Lowest) or a method
(basis.Basis.Len). Without a subject, the packages are listed.

Exit codes
    0  every subject has a page
    1  one has none; the message names what comes close

Examples

  ketloom doc
  ketloom doc basis
  ketloom doc lanczos.Options model.XXZ
`

const helpCompletion = `ketloom completion bash|zsh|fish

Prints a script that lets the shell complete commands, packages and file names.

Examples

  source <(ketloom completion bash)
  ketloom completion fish > ~/.config/fish/completions/ketloom.fish
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
	case "new":
		fmt.Print(helpNew)
	case "doc":
		fmt.Print(helpDoc)
	case "completion":
		fmt.Print(helpCompletion)
	case "packages":
		ours, standard := script.Packages()
		fmt.Printf("Packages that a script may import\n\n  %s\n\n  %s\n", strings.Join(ours, "\n  "), strings.Join(standard, "\n  "))
	default:
		fmt.Fprintf(os.Stderr, "ketloom: there is no help on %q; there is on run, check, new, doc, completion and packages\n", args[0])
		return exitUsage
	}
	return exitOK
}

func wantsHelp(args []string) bool {
	return len(args) > 0 && (args[0] == "-h" || args[0] == "-help" || args[0] == "--help")
}
