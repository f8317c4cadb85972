package main

import (
	_ "embed"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
)

//go:embed starter/script.go.txt
var starter string

// newScript writes a commented script to begin with.
func newScript(args []string) int {
	if wantsHelp(args) {
		return help([]string{"new"})
	}
	if len(args) != 1 || strings.HasPrefix(args[0], "-") {
		fmt.Fprintln(os.Stderr, "ketloom: new wants one name: ketloom new NAME")
		return exitUsage
	}
	path := args[0]
	if !strings.HasSuffix(path, ".go") {
		path += ".go"
	}
	name := strings.TrimSuffix(filepath.Base(path), ".go")
	if name == "" || name == "." || strings.ContainsAny(name, "\"\\\n\r`") {
		fmt.Fprintf(os.Stderr, "ketloom: %q cannot be the name of a script; use letters and digits\n", args[0])
		return exitUsage
	}
	text := strings.ReplaceAll(strings.ReplaceAll(starter, "NAME", name), "PATH", path)
	file, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if errors.Is(err, fs.ErrExist) {
		fmt.Fprintf(os.Stderr, "ketloom: %s exists; choose another name\n", path)
		return exitProblem
	}
	if err == nil {
		_, err = file.WriteString(text)
		err = errors.Join(err, file.Close())
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "ketloom:", err)
		return exitProblem
	}
	fmt.Printf("%s is written; run it with\n\n  ketloom run %s\n", path, path)
	return exitOK
}
