package main

import (
	"context"
	"os"
	"os/signal"
	"syscall"
	"time"
)

// grace is the time that a script has to end by itself after an interrupt.
const grace = 700 * time.Millisecond

// interruptible returns a context that ends some time after the first interrupt
// or request to end, so that a script can end by itself, and at once with the
// second.
func interruptible() (context.Context, func()) {
	ctx, cancel := context.WithCancel(context.Background())
	signals := make(chan os.Signal, 2)
	signal.Notify(signals, os.Interrupt, syscall.SIGTERM)
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
