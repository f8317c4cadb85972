package script

import (
	"context"
	"fmt"
	"io"
	"reflect"

	"github.com/traefik/yaegi/interp"

	"ketloom/script/lower"
)

// halter is an interpreter whose goroutines can be stopped. The interpreter
// stops them only when a program it executes under a context is cancelled, and
// then writes its result from two goroutines. So the script is executed without
// a context, and to stop it a second program, which does nothing but wait, is
// executed and cancelled; it goes on only when the cancelling has returned.
type halter struct {
	interp  *interp.Interpreter
	waiting *interp.Program
	release chan struct{}
}

const haltSource = "package halt\n\nimport \"h\"\n\nfunc init() { h.Wait() }\n"

// newHalter returns an interpreter that has the symbols of p.
func newHalter(p *lower.Program) (*halter, error) {
	h := &halter{release: make(chan struct{})}
	h.interp = interp.New(interp.Options{Stdin: nothing{}, Stdout: io.Discard, Stderr: io.Discard})
	symbols := map[string]reflect.Value{"Wait": reflect.ValueOf(func() { <-h.release })}
	for name, v := range p.Symbols {
		symbols[name] = v
	}
	if err := h.interp.Use(interp.Exports{"h/h": symbols}); err != nil {
		return nil, fmt.Errorf("script: %w", err)
	}
	var err error
	h.waiting, err = compile(h.interp, haltSource)
	return h, err
}

// halt stops everything that the interpreter still executes. Calls into compiled
// code end by themselves.
func (h *halter) halt() {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	// The error is that of the context.
	_, _ = h.interp.ExecuteWithContext(ctx, h.waiting)
	close(h.release)
}

// nothing is an empty stream.
type nothing struct{}

func (nothing) Read([]byte) (int, error) { return 0, io.EOF }
