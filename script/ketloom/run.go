package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"time"

	"ketloom/lanczos/archive"
	"ketloom/script"
)

// run is the command of that name.
func run(args []string) int {
	if wantsHelp(args) {
		return help([]string{"run"})
	}
	f, err := parseRun(args)
	if err != nil {
		fmt.Fprintf(os.Stderr, "ketloom: run: %v\n", err)
		return exitUsage
	}
	ctx, stop := interruptible()
	defer stop()
	if f.watch {
		return watch(ctx, f)
	}
	return once(ctx, f)
}

// once runs the script and returns the exit code of the command.
func once(ctx context.Context, f *runFlags) int {
	begun := time.Now()
	log := runLog{on: f.json}
	log.started(f)
	err := f.execute(ctx)
	code := codeOf(ctx, err)
	log.ended(code, err, time.Since(begun))
	if err != nil && !f.json && !silent(ctx, err) {
		fmt.Fprintln(os.Stderr, err)
	}
	return code
}

// execute runs the script, interpreted or compiled.
func (f *runFlags) execute(ctx context.Context) error {
	if f.compiled {
		return runCompiled(ctx, f)
	}
	err := script.Run(ctx, f.options)
	archive.DiscardOpen() // a call into compiled code may still be writing
	return err
}

// codeOf chooses the exit code.
func codeOf(ctx context.Context, err error) int {
	var exit *script.ExitError
	var panicked *script.PanicError
	var limit *script.LimitError
	switch {
	case err == nil:
		return exitOK
	case errors.As(err, &exit):
		return exit.Code
	case errors.As(err, &panicked):
		return exitPanic
	case errors.As(err, &limit):
		return exitLimit
	case ctx.Err() != nil:
		return exitInterrupted
	}
	return exitProblem
}

// silent says that the code alone tells how the script ended.
func silent(ctx context.Context, err error) bool {
	var exit *script.ExitError
	return errors.As(err, &exit) || codeOf(ctx, err) == exitInterrupted
}
