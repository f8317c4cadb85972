package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"

	"ketloom/script"
)

// runCompiled builds the script with the go command and runs the program in the
// current folder, with the script's path as its first argument, as interpreted.
// The script's folder has to lie in a module that requires ketloom, since the
// command does not carry its own sources.
func runCompiled(ctx context.Context, f *runFlags) error {
	o := f.options
	if err := script.Check(o); err != nil {
		return err
	}
	tool, err := exec.LookPath("go")
	if err != nil {
		return errors.New("ketloom: -compiled needs the go command, which is not on this machine; leave the flag out")
	}
	folder, err := os.MkdirTemp("", "ketloom-")
	if err != nil {
		return fmt.Errorf("ketloom: %w", err)
	}
	defer os.RemoveAll(folder)
	binary := filepath.Join(folder, "program.exe")
	if err := build(ctx, tool, o.Path, binary); err != nil {
		return err
	}
	if o.Time > 0 {
		var cancel context.CancelFunc
		ctx, cancel = context.WithTimeout(ctx, o.Time)
		defer cancel()
	}
	cmd := exec.CommandContext(ctx, binary, o.Args...)
	cmd.Args[0] = o.Path
	cmd.Stdin, cmd.Stdout, cmd.Stderr = o.Stdin, o.Stdout, o.Stderr
	cmd.Cancel = func() error { return cmd.Process.Signal(syscall.SIGTERM) }
	cmd.WaitDelay = grace
	err = cmd.Run()
	var exit *exec.ExitError
	switch {
	case errors.Is(ctx.Err(), context.DeadlineExceeded):
		return &script.LimitError{What: "time", Limit: o.Time.String(), File: o.Path}
	case errors.As(err, &exit) && exit.ExitCode() >= 0:
		return &script.ExitError{Code: exit.ExitCode()}
	}
	return err
}

// build compiles the script from its own folder, whose module counts.
func build(ctx context.Context, tool, path, binary string) error {
	info, err := os.Stat(path)
	if err != nil {
		return fmt.Errorf("ketloom: %w", err)
	}
	folder, target := path, "."
	if !info.IsDir() {
		folder, target = filepath.Dir(path), filepath.Base(path)
	}
	cmd := exec.CommandContext(ctx, tool, "build", "-o", binary, target)
	cmd.Dir = folder
	if out, err := cmd.CombinedOutput(); err != nil {
		return fmt.Errorf("ketloom: -compiled: %s\nthe folder of the script has to lie in a module that requires ketloom; without one, leave the flag out", strings.TrimSpace(string(out)))
	}
	return nil
}
