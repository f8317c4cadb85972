package main

import (
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"ketloom/script"
)

// runFlags is a parsed command line of ketloom run.
type runFlags struct {
	options  script.Options
	fenced   []string // flags that were given and hold for interpreted scripts only
	json     bool
	compiled bool
	watch    bool
}

var errNoScript = errors.New("it wants a script first: ketloom run [FLAGS] FILE-OR-FOLDER [-- ARGUMENTS]")

// runSet returns the flags of ketloom run, which set f, and the memory in GiB.
func runSet(f *runFlags) (set *flag.FlagSet, memory *float64) {
	o := &f.options
	set = flag.NewFlagSet("run", flag.ContinueOnError)
	set.SetOutput(io.Discard)
	set.Func("allow", "", f.allow)
	set.StringVar(&o.Root, "root", "", "")
	set.BoolVar(&o.Quiet, "quiet", false, "")
	set.DurationVar(&o.Time, "time", 0, "")
	set.Int64Var(&o.Steps, "steps", 0, "")
	memory = set.Float64("memory", script.DefaultMemory>>30, "")
	set.BoolVar(&f.json, "json", false, "")
	set.BoolVar(&f.compiled, "compiled", false, "")
	set.BoolVar(&f.watch, "watch", false, "")
	return set, memory
}

// parseRun reads flags, script and arguments.
func parseRun(args []string) (*runFlags, error) {
	f := &runFlags{options: script.Options{Stdin: os.Stdin, Stdout: os.Stdout, Stderr: os.Stderr}}
	o := &f.options
	set, memory := runSet(f)
	if err := set.Parse(args); err != nil {
		return nil, fmt.Errorf("%w; ketloom help run lists the flags", err)
	}
	rest := set.Args()
	if len(rest) == 0 {
		return nil, errNoScript
	}
	o.Path, o.Args = rest[0], rest[1:]
	if len(o.Args) > 0 && o.Args[0] == "--" {
		o.Args = o.Args[1:]
	}
	if o.Time < 0 || o.Steps < 0 || !(*memory >= 0 && *memory < 1<<30) {
		return nil, errors.New("-time, -steps and -memory are limits; give positive numbers, or 0 for none")
	}
	o.Memory = int64(*memory * (1 << 30))
	if o.Memory == 0 {
		o.Memory = -1
	}
	o.Read = append(o.Read, folderOf(o.Path)...)
	set.Visit(func(g *flag.Flag) {
		switch g.Name {
		case "allow", "root", "steps", "memory", "quiet":
			f.fenced = append(f.fenced, "-"+g.Name)
		}
	})
	if f.compiled && len(f.fenced) > 0 {
		return nil, fmt.Errorf("-compiled runs a program that nothing holds; %s cannot be kept there", strings.Join(f.fenced, ", "))
	}
	return f, nil
}

// allow is one -allow.
func (f *runFlags) allow(value string) error {
	kind, path, _ := strings.Cut(value, "=")
	switch {
	case value == "env":
		f.options.Env = true
	case kind == "read" && path != "":
		f.options.Read = append(f.options.Read, path)
	case kind == "write" && path != "":
		f.options.Write = append(f.options.Write, path)
	default:
		return errors.New("allow read=PATH, write=PATH or env")
	}
	return nil
}

// folderOf is the folder of the script, if there is one.
func folderOf(path string) []string {
	info, err := os.Stat(path)
	switch {
	case err != nil:
		return nil
	case info.IsDir():
		return []string{path}
	}
	return []string{filepath.Dir(path)}
}
