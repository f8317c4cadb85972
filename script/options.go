package script

import "io"

// Options say what to run and with what. Path or Source must be set.
type Options struct {
	// Path is a Go file or a folder of Go files. With Source it only names the
	// script in messages.
	Path string
	// Source is the text of a script in one file; it is used instead of Path.
	Source string
	// Args are the script's arguments, os.Args without its first element.
	Args []string
	// Stdin, Stdout and Stderr are the script's standard streams. A nil Stdin is
	// empty; a nil Stdout or Stderr is discarded.
	Stdin  io.Reader
	Stdout io.Writer
	Stderr io.Writer
}
