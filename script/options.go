package script

import (
	"io"
	"reflect"
	"time"
)

// DefaultMemory is the most bytes that one make, append, string or the like of a
// script may take.
const DefaultMemory = 8 << 30

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

	// Root is the current folder of the script and what it may read and write;
	// "" means the current folder of the program. Everything outside is refused,
	// see package fence.
	Root string
	// NoFiles closes Root: without Read and Write the script has no files but its
	// temporary ones.
	NoFiles bool
	// Read and Write are further files and folders; what may be written may be
	// read. Those to read must exist.
	Read, Write []string
	// Env shows the script the environment of the program. Without it every
	// variable is empty.
	Env bool

	// Time is how long the script may run; 0 means no limit.
	Time time.Duration
	// Steps is how many turns of loops and calls of its own functions the script
	// may make; 0 means no limit. Counting costs some tenths of a microsecond a step.
	Steps int64
	// Memory is the most bytes of one allocation; 0 means DefaultMemory, a
	// negative number no limit.
	Memory int64

	// Packages are symbol tables of the host's own packages, by import path and
	// name, as script/symbols/generate writes them. Their functions run unfenced.
	Packages map[string]map[string]reflect.Value
	// Return is called with what the script gives to host.Return, on the
	// goroutine of the script; nil drops it.
	Return func(name string, value any)
	// Quiet draws no progress on a terminal.
	Quiet bool
}
