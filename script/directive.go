package script

import (
	"strings"
)

// Imports that the type checker would take without a table.
var closed = map[string]string{
	`"unsafe"`: "package unsafe is not available in a script: memory is reached through values only",
	`"C"`:      "cgo is not available in a script; write it in Go",
}

// directives of the compiler that would change what the script means.
var directives = map[string]string{
	"//go:linkname": "go:linkname is not available in a script; call exported functions",
	"//go:embed":    "go:embed is not available in a script; read the file with os.ReadFile",
	"//go:cgo_":     "cgo is not available in a script; write it in Go",
	"//go:wasm":     "go:wasmimport and go:wasmexport are not available in a script",
	"//export ":     "cgo is not available in a script; write it in Go",
}

// forbidden reports imports and directives that no script may have.
func (s *source) forbidden() Problems {
	var problems Problems
	for _, f := range s.files {
		for _, i := range f.Imports {
			if why, ok := closed[i.Path.Value]; ok {
				problems = append(problems, s.at(i.Pos(), "%s", why))
			}
		}
		for _, group := range f.Comments {
			for _, c := range group.List {
				for start, why := range directives {
					if strings.HasPrefix(c.Text, start) {
						problems = append(problems, s.at(c.Pos(), "%s", why))
					}
				}
			}
		}
	}
	return problems
}
