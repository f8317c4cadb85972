package main

import (
	"fmt"
	"os"

	"ketloom/script"
)

// check is the command of that name.
func check(args []string) int {
	if wantsHelp(args) {
		return help([]string{"check"})
	}
	if len(args) == 0 {
		fmt.Fprintln(os.Stderr, "ketloom: check wants a script: ketloom check FILE-OR-FOLDER ...")
		return exitUsage
	}
	code := exitOK
	for _, path := range args {
		if err := script.Check(script.Options{Path: path}); err != nil {
			fmt.Fprintln(os.Stderr, err)
			code = exitProblem
		}
	}
	return code
}
