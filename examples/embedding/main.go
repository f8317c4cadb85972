// Command couplings runs one script for several couplings at once and prints
// what the scripts return, in the order of the couplings. It shows how a Go
// program embeds package script: own packages for the script, values that come
// back, limits, files, and several interpreters side by side.
//
//	go run . -script scan.go
package main

import (
	"bytes"
	"context"
	"flag"
	"fmt"
	"os"
	"os/signal"
	"strconv"
	"strings"
	"sync"
	"time"

	"ketloom/script"
)

//go:generate go run ketloom/script/symbols/generate -package example.org/couplings/chain -out symbols_chain.go

func main() {
	path := flag.String("script", "scan.go", "script to run for each coupling")
	list := flag.String("second", "0,0.25,0.5", "couplings to second neighbours, in units of the first")
	flag.Parse()
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	defer stop()
	couplings := strings.Split(*list, ",")
	runs := make([]outcome, len(couplings))
	var wait sync.WaitGroup
	for i, c := range couplings {
		wait.Go(func() { runs[i] = run(ctx, *path, c) })
	}
	wait.Wait()
	code := 0
	for i, r := range runs {
		if r.err != nil {
			fmt.Fprintf(os.Stderr, "coupling %s: %v\n", couplings[i], r.err)
			code = 1
			continue
		}
		energy := strconv.FormatFloat(r.numbers["energy"], 'f', 9, 64)
		fmt.Printf("coupling %-4s  energy %s  said %q\n", couplings[i], energy, r.said)
	}
	os.Exit(code)
}

// outcome is what one script left.
type outcome struct {
	numbers map[string]float64
	said    string
	err     error
}

// run gives a script two minutes, ten million steps, no files, and the package
// chain of this program.
func run(ctx context.Context, path, coupling string) outcome {
	r := outcome{numbers: map[string]float64{}}
	var out bytes.Buffer
	r.err = script.Run(ctx, script.Options{
		Path: path, Args: []string{"-second", coupling}, Stdout: &out, Stderr: os.Stderr,
		Packages: scriptPackages,
		NoFiles:  true,
		Time:     2 * time.Minute,
		Steps:    10_000_000,
		Return: func(name string, value any) {
			if x, ok := value.(float64); ok {
				r.numbers[name] = x
			}
		},
	})
	r.said = strings.TrimSpace(out.String())
	return r
}
