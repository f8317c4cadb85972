package script

import (
	"errors"
	"fmt"
	"go/token"
)

// LimitError is the error of a script that was stopped at a limit of Options.
type LimitError struct {
	What  string // "time" or "steps"
	Limit string
	File  string
	Line  int // where the script was; 0 if that is not known
}

// Error returns "file:line: stopped: more than 10s".
func (e *LimitError) Error() string {
	at := e.File
	if e.Line > 0 {
		at = fmt.Sprintf("%s:%d", e.File, e.Line)
	}
	return fmt.Sprintf("%s: stopped: the script took more than its limit of %s", at, e.Limit)
}

// errTime is the cause of the end at Options.Time.
var errTime = errors.New("the time of the script is over")

// limit makes a LimitError with the place pos.
func (s *source) limit(what, text string, pos token.Pos) *LimitError {
	e := &LimitError{What: what, Limit: text, File: s.name}
	if pos.IsValid() {
		p := s.fset.Position(pos)
		e.File, e.Line = p.Filename, p.Line
	}
	return e
}
