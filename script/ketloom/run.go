package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/signal"
	"strings"
	"time"

	"ketloom/lanczos/archive"
	"ketloom/script"
)

// grace is the time that a script has to end by itself after an interrupt.
const grace = 700 * time.Millisecond

// run is the command of that name.
func run(args []string) int {
	if wantsHelp(args) {
		return help([]string{"run"})
	}
	if len(args) == 0 || strings.HasPrefix(args[0], "-") {
		fmt.Fprintln(os.Stderr, "ketloom: run wants a script first: ketloom run FILE-OR-FOLDER [-- ARGUMENTS]")
		return exitUsage
	}
	rest := args[1:]
	if len(rest) > 0 && rest[0] == "--" {
		rest = rest[1:]
	}
	ctx, stop := interruptible()
	defer stop()
	err := script.Run(ctx, script.Options{Path: args[0], Args: rest, Stdin: os.Stdin, Stdout: os.Stdout, Stderr: os.Stderr})
	archive.DiscardOpen() // a call into compiled code may still be writing
	return exitCode(ctx, err)
}

// interruptible returns a context that ends some time after the first
// interrupt, so that a script can end by itself, and at once with the second.
func interruptible() (context.Context, func()) {
	ctx, cancel := context.WithCancel(context.Background())
	signals := make(chan os.Signal, 2)
	signal.Notify(signals, os.Interrupt)
	go func() {
		<-signals
		select {
		case <-signals:
		case <-time.After(grace):
		}
		cancel()
	}()
	return ctx, func() { signal.Stop(signals) }
}

// exitCode prints the error and chooses the code.
func exitCode(ctx context.Context, err error) int {
	if err == nil {
		return exitOK
	}
	var exit *script.ExitError
	if errors.As(err, &exit) {
		return exit.Code
	}
	if ctx.Err() != nil {
		return exitInterrupted
	}
	fmt.Fprintln(os.Stderr, err)
	var p *script.PanicError
	if errors.As(err, &p) {
		return exitPanic
	}
	return exitProblem
}
