package main

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"time"
)

// glance is how often the files of a watched script are looked at.
const glance = 300 * time.Millisecond

// watch runs the script again whenever one of its files is saved, until the
// command is interrupted.
func watch(ctx context.Context, f *runFlags) int {
	for {
		state := saved(f.options.Path)
		turn, cancel := context.WithCancel(ctx)
		ended := make(chan int, 1)
		go func() { ended <- once(turn, f) }()
		changed := waitForSave(ctx, f.options.Path, state)
		cancel()
		<-ended
		if !changed {
			return exitInterrupted
		}
		if !f.json {
			fmt.Fprintf(os.Stderr, "ketloom: %s was saved; it runs again\n", f.options.Path)
		}
	}
}

// waitForSave returns true when the files differ from state, and false when ctx
// ends.
func waitForSave(ctx context.Context, path, state string) bool {
	t := time.NewTicker(glance)
	defer t.Stop()
	for {
		select {
		case <-ctx.Done():
			return false
		case <-t.C:
			if now := saved(path); now != "" && now != state {
				return true
			}
		}
	}
}

// saved tells the states of the files of a script apart; "" while there are none.
func saved(path string) string {
	files := []string{path}
	if info, err := os.Stat(path); err == nil && info.IsDir() {
		if files, err = filepath.Glob(filepath.Join(path, "*.go")); err != nil {
			return ""
		}
	}
	var b strings.Builder
	for _, name := range files {
		if info, err := os.Stat(name); err == nil {
			fmt.Fprintf(&b, "%s %d %d\n", name, info.Size(), info.ModTime().UnixNano())
		}
	}
	return b.String()
}
