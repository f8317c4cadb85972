package script

import (
	"fmt"
	"strings"
)

// Problem is one thing wrong with a script, with its place.
type Problem struct {
	File    string // as it was given
	Line    int    // from 1; 0 if the problem has no place
	Column  int    // in bytes, from 1
	Message string // in the compiler's words where it would complain too
	Source  string // the line of the script
}

// String returns "file:line:column: message" and below it the line.
func (p Problem) String() string {
	if p.Line == 0 {
		return fmt.Sprintf("%s: %s", p.File, p.Message)
	}
	s := fmt.Sprintf("%s:%d:%d: %s", p.File, p.Line, p.Column, p.Message)
	if p.Source != "" {
		s += "\n\t" + strings.TrimSpace(p.Source)
	}
	return s
}

// Problems is the error of a script that was not run: everything that is wrong
// with it, in the order of the source.
type Problems []Problem

// Error returns the problems below each other.
func (p Problems) Error() string {
	var lines []string
	for _, q := range p {
		lines = append(lines, q.String())
	}
	return strings.Join(lines, "\n")
}

// ExitError is the error of a script that called os.Exit with a code other than
// zero, directly or through package flag or log.
type ExitError struct{ Code int }

func (e *ExitError) Error() string { return fmt.Sprintf("exit status %d", e.Code) }

// PanicError is the error of a script that ended in a panic.
type PanicError struct {
	File    string
	Line    int // 0 if the place is not known
	Message string
	Value   any    // what the script passed to panic, or a run-time error
	Stack   []byte // of compiled code, where the panic began there
}

// Error returns "file:line: panic: message".
func (e *PanicError) Error() string {
	if e.Line == 0 {
		return fmt.Sprintf("%s: panic: %s", e.File, e.Message)
	}
	return fmt.Sprintf("%s:%d: panic: %s", e.File, e.Line, e.Message)
}
