package script

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/traefik/yaegi/interp"

	"ketloom/script/lower"
	"ketloom/script/machine"
)

// Run checks a script and runs it until it ends.
//
// The error is Problems if the script was not run, an *ExitError if it ended
// with a code other than zero, a *PanicError if it panicked, and ctx.Err(),
// wrapped, if it was stopped. When ctx is done the script is stopped at once:
// no further statement of it is executed. A call into compiled code that does
// not watch a context goes on in the background; what it returns is dropped.
func Run(ctx context.Context, o Options) error {
	o = o.filled()
	run := machine.New(machine.Streams{In: o.Stdin, Out: o.Stdout, Err: o.Stderr}, append([]string{o.Path}, o.Args...))
	defer run.Close()
	src, p, err := prepare(o, run)
	if err != nil {
		return err
	}
	return execute(ctx, run, src, p)
}

func (o Options) filled() Options {
	if o.Stdout == nil {
		o.Stdout = io.Discard
	}
	if o.Stderr == nil {
		o.Stderr = io.Discard
	}
	if o.Path == "" {
		o.Path = "script.go"
	}
	return o
}

// execute gives the lowered program to the interpreter.
func execute(ctx context.Context, run *machine.Run, src *source, p *lower.Program) error {
	h, err := newHalter(p)
	if err != nil {
		return src.internal(p, err)
	}
	prog, err := compile(h.interp, p.Source)
	if err != nil {
		return src.internal(p, err)
	}
	done := make(chan struct{})
	defer close(done)
	go watch(run, done)
	failed := make(chan error, 1)
	go func() {
		_, err := h.interp.Execute(prog)
		failed <- err
	}()
	defer h.halt()
	select {
	case o := <-run.Ended():
		return src.outcome(o.Code(), o.Panic())
	case err := <-failed:
		return src.early(run, p, err)
	case <-ctx.Done():
		return fmt.Errorf("script: stopped: %w", context.Cause(ctx))
	}
}

// compile keeps a panic of the interpreter's compiler from the caller.
func compile(i *interp.Interpreter, text string) (prog *interp.Program, err error) {
	defer func() {
		if r := recover(); r != nil {
			err = fmt.Errorf("%v", r)
		}
	}()
	return i.Compile(text)
}

// early is the result of an execution that ended before main was seen to end.
func (s *source) early(run *machine.Run, p *lower.Program, err error) error {
	select {
	case o := <-run.Ended():
		return s.outcome(o.Code(), o.Panic())
	default:
	}
	if err == nil {
		err = errors.New("the interpreter ended early")
	}
	return s.internal(p, err)
}

// outcome turns the end of a run into an error.
func (s *source) outcome(code int, t *machine.Thrown) error {
	if t != nil {
		e := &PanicError{File: s.name, Message: t.Message(), Value: machine.Plain(t.Value), Stack: t.Stack}
		if t.Pos.IsValid() {
			pos := s.fset.Position(t.Pos)
			e.File, e.Line = pos.Filename, pos.Line
		}
		return e
	}
	if code != 0 {
		return &ExitError{code}
	}
	return nil
}
