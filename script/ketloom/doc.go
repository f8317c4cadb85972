package main

import (
	"fmt"
	"os"
	"strings"

	"ketloom/script/manual"
)

// page prints the documentation of a subject.
func page(args []string) int {
	if wantsHelp(args) {
		return help([]string{"doc"})
	}
	if len(args) == 0 {
		fmt.Printf("Packages with pages; ketloom doc NAME prints one.\n\n  %s\n", strings.Join(manual.Packages(), "\n  "))
		return exitOK
	}
	for i, subject := range args {
		text, err := manual.Page(subject)
		if err != nil {
			fmt.Fprintln(os.Stderr, "ketloom:", strings.TrimPrefix(err.Error(), "manual: "))
			return exitProblem
		}
		if i > 0 {
			fmt.Println()
		}
		fmt.Print(text)
	}
	return exitOK
}
