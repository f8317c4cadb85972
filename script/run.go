package script

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/traefik/yaegi/interp"

	"ketloom/script/fence"
	"ketloom/script/lower"
	"ketloom/script/machine"
)

// Run checks a script and runs it until it ends.
//
// The error is Problems if the script was not run, an *ExitError if it ended
// with a code other than zero, a *PanicError if it panicked, a *LimitError if it
// reached Options.Time or Options.Steps, and ctx.Err(), wrapped, if it was
// stopped. When ctx is done the script is stopped at once:
// no further statement of it is executed. A call into compiled code that does
// not watch a context goes on in the background; what it returns is dropped.
func Run(ctx context.Context, o Options) error {
	o = o.filled()
	run := machine.New(machine.Streams{In: o.Stdin, Out: o.Stdout, Err: o.Stderr}, append([]string{o.Path}, o.Args...))
	defer run.Close()
	files, err := fence.New(fence.Options{Folder: o.Root, NoFiles: o.NoFiles, Read: o.Read, Write: o.Write, Env: o.Env})
	if err != nil {
		return fmt.Errorf("script: %w", err)
	}
	defer files.Close()
	run.Fence, run.Return, run.Quiet = files, o.Return, o.Quiet
	run.Limits = machine.Limits{Steps: o.Steps, Memory: o.Memory, Placed: o.Time > 0}
	src, p, err := prepare(o, run)
	if err != nil {
		return err
	}
	if o.Time > 0 {
		var cancel context.CancelFunc
		ctx, cancel = context.WithTimeoutCause(ctx, o.Time, errTime)
		defer cancel()
	}
	return execute(ctx, run, src, p, o)
}

func (o Options) filled() Options {
	if o.Stdout == nil {
		o.Stdout = io.Discard
	}
	if o.Stderr == nil {
		o.Stderr = io.Discard
	}
	if o.Memory == 0 {
		o.Memory = DefaultMemory
	}
	if o.Path == "" {
		o.Path = "script.go"
	}
	return o
}

// execute gives the lowered program to the interpreter.
func execute(ctx context.Context, run *machine.Run, src *source, p *lower.Program, o Options) error {
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
	case end := <-run.Ended():
		if pos, over := end.Steps(); over {
			return src.limit("steps", fmt.Sprintf("%d steps", o.Steps), pos)
		}
		return src.outcome(end.Code(), end.Panic())
	case err := <-failed:
		return src.early(run, p, err, o)
	case <-ctx.Done():
		if context.Cause(ctx) == errTime {
			return src.limit("time", o.Time.String(), run.At())
		}
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
func (s *source) early(run *machine.Run, p *lower.Program, err error, o Options) error {
	select {
	case end := <-run.Ended(): // both were there, and the other was taken
		if pos, over := end.Steps(); over {
			return s.limit("steps", fmt.Sprintf("%d steps", o.Steps), pos)
		}
		return s.outcome(end.Code(), end.Panic())
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
