// Command generate writes the symbol tables of package symbols: it reads the
// lists in packages.go, type-checks each package from source and writes one Go
// file a package. It needs the Go tool, for the location of the packages.
//
//	go generate ./script/symbols
//
// With the flag -check it writes nothing and fails if a table is stale. It may
// import nothing of Ketloom.
package main

import (
	"bytes"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"sort"
)

func main() {
	check := flag.Bool("check", false, "compare instead of writing")
	dir := flag.String("dir", ".", "folder of package symbols")
	flag.Parse()
	if err := run(*dir, *check); err != nil {
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
