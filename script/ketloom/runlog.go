package main

import (
	"encoding/json"
	"errors"
	"os"
	"time"

	"ketloom/script"
)

// runLog writes what happens to a script on standard error, a JSON object a
// line.
type runLog struct{ on bool }

func (l runLog) write(record map[string]any) {
	if !l.on {
		return
	}
	record["at"] = time.Now().UTC().Format(time.RFC3339Nano)
	line, err := json.Marshal(record)
	if err != nil {
		line = []byte(`{"event":"unwritable"}`)
	}
	_, _ = os.Stderr.Write(append(line, '\n')) // nobody is left to tell
}

func (l runLog) started(f *runFlags) {
	l.write(map[string]any{"event": "started", "script": f.options.Path, "arguments": append([]string{}, f.options.Args...), "compiled": f.compiled})
}

// ended writes the problems of a script that was not run, and the end.
func (l runLog) ended(code int, err error, took time.Duration) {
	var problems script.Problems
	if errors.As(err, &problems) {
		for _, p := range problems {
			l.write(map[string]any{"event": "refused", "file": p.File, "line": p.Line, "column": p.Column, "message": p.Message})
		}
	}
	record := map[string]any{"event": "ended", "code": code, "seconds": took.Seconds()}
	var exit *script.ExitError
	if err != nil && problems == nil && !errors.As(err, &exit) {
		record["error"] = err.Error()
	}
	l.write(record)
}
