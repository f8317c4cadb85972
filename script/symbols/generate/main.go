// Command generate writes symbol tables, through which scripts reach compiled
// packages. It needs the Go tool, for the location of the packages.
//
// For the program of a host, which embeds package script, it writes one file
// with the tables of the packages named, to be called in the host's module:
//
//	go run ketloom/script/symbols/generate -package example.org/host/physics -out symbols_physics.go
//
// The file belongs to the package that -name says (main, or that of the
// go:generate line) and declares the variable that -var says (scriptPackages), for
// Options.Packages of package script. -package may be repeated.
//
// For package symbols itself it reads the lists in packages.go and writes one file a package:
//
//	go generate ./script/symbols
//
// With the flag -check it writes nothing and fails if a table is stale. It may
// import nothing of Ketloom.
package main

import (
	"bytes"
	"cmp"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"sort"
)

func main() {
	check := flag.Bool("check", false, "compare instead of writing")
	dir := flag.String("dir", ".", "folder of package symbols")
	h := hostFile{}
	flag.Func("package", "import `path` of a package of a host; may be repeated", func(path string) error {
		h.paths = append(h.paths, path)
		return nil
	})
	flag.StringVar(&h.out, "out", "", "`file` for the tables of a host")
	flag.StringVar(&h.name, "name", cmp.Or(os.Getenv("GOPACKAGE"), "main"), "package of that file")
	flag.StringVar(&h.variable, "var", "scriptPackages", "variable in that file")
	flag.Parse()
	err := error(nil)
	if len(h.paths) > 0 || h.out != "" {
		err = h.run(*check)
	} else {
		err = run(*dir, *check)
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
}

func run(dir string, check bool) error {
	files, err := generated(dir)
	if err != nil {
		return err
	}
	names := make([]string, 0, len(files))
	for name := range files {
		names = append(names, name)
	}
	sort.Strings(names)
	for _, name := range names {
		path := filepath.Join(dir, name)
		if check {
			have, err := os.ReadFile(path)
			if err != nil || !bytes.Equal(have, files[name]) {
				return fmt.Errorf("symbols: %s is stale; run go generate ./script/symbols", name)
			}
			continue
		}
		if err := os.WriteFile(path, files[name], 0o666); err != nil {
			return err
		}
	}
	return remove(dir, files, check)
}

// remove deletes generated files that no package on the list stands for.
func remove(dir string, files map[string][]byte, check bool) error {
	have, err := filepath.Glob(filepath.Join(dir, prefix+"*.go"))
	if err != nil {
		return err
	}
	for _, path := range have {
		if _, ok := files[filepath.Base(path)]; ok {
			continue
		}
		if check {
			return fmt.Errorf("symbols: %s belongs to no package on the list; run go generate ./script/symbols", path)
		}
		if err := os.Remove(path); err != nil {
			return err
		}
	}
	return nil
}
