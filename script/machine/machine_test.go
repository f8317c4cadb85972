package machine

import (
	"bytes"
	"errors"
	"fmt"
	"go/types"
	"io"
	"os"
	"reflect"
	"runtime"
	"strings"
	"testing"
)

// level is the type Level int of an imaginary script, with a String method.
func level(r *Run) *Type {
	pkg := types.NewPackage("main", "main")
	named := types.NewNamed(types.NewTypeName(0, pkg, "Level", nil), types.Typ[types.Int], nil)
	r.Compiled = func(o types.Object) bool { return o.Pkg() != pkg }
	return r.Type(named, func(t *Type) {
		t.Stored = reflect.TypeFor[int]()
		t.SetMethod("String", reflect.ValueOf(func(i int) string { return fmt.Sprint("L", i) }))
	})
}

func TestValuesPrintAsTheirType(t *testing.T) {
	r := New(Streams{}, nil)
	defer r.Close()
	v := Value{T: level(r), V: 3}
	for format, want := range map[string]string{
		"%v": "L3", "%d": "3", "%5s|": "   L3|", "%q": `"L3"`, "%T": "main.Level", "%#v": "3", "%03d": "003", "%[1]T %[1]v": "main.Level L3", "%*[1]d": "  3", "%e": "%!e(main.Level=3)",
	} {
		if got := sprintf(format, v); got != want {
			t.Errorf("%s: %q, want %q", format, got, want)
		}
	}
	if got := sprintln([]any{v, 4}, map[string]any{"a": v}); got != "[L3 4] map[a:L3]\n" {
		t.Errorf("inside a list: %q", got)
	}
	if got := line([]any{v, v, "s", 1, 2}); got != "L3 L3s1 2" {
		t.Errorf("Print: %q", got)
	}
}

func TestEqualTypesOnly(t *testing.T) {
	r := New(Streams{}, nil)
	defer r.Close()
	a := level(r)
	if r.Type(a.Checked, func(*Type) { t.Error("made twice") }) != a {
		t.Error("one type has two forms")
	}
	other := &Type{Checked: types.Typ[types.Int]}
	if any(Value{a, 1}) == any(Value{other, 1}) || any(Value{a, 1}) != any(Value{a, 1}) {
		t.Error("values are equal across types, or differ within one")
	}
}

func TestDefers(t *testing.T) {
	var log []string
	note := func(s string) func() { return func() { log = append(log, s) } }
	r := New(Streams{}, nil)
	defer r.Close()
	d := r.NewDefers()
	r.NewDefers().Do(func() {
		defer func() {
			if th, ok := recover().(*Thrown); !ok || th.Value != "second" {
				t.Errorf("panic %v, want the second", th)
			}
		}()
		d.Do(func() {
			d.Push(note("a"))
			d.Push(func() { Throw(1, "second") })
			d.Push(note("b"))
			Throw(1, "first")
		})
	})
	if got := strings.Join(log, ""); got != "ba" {
		t.Errorf("deferred calls ran as %q", got)
	}
	d = r.NewDefers()
	d.Do(func() {
		d.Push(func() {
			if r := d.Recover(); r != "x" {
				t.Errorf("recovered %v", r)
			}
			if d.Recover() != nil {
				t.Error("recovered twice")
			}
		})
		panic("x")
	})
}

func TestExitSkipsDeferredCallsAndRecover(t *testing.T) {
	r := New(Streams{}, nil)
	defer r.Close()
	r.Main(func() {
		d := r.NewDefers()
		d.Do(func() {
			d.Push(func() { t.Error("a deferred call ran") })
			r.Exit(5)
		})
	})
	if o := <-r.Ended(); o.Code() != 5 || o.Panic() != nil {
		t.Errorf("ended with %d, %v", o.Code(), o.Panic())
	}
}

func TestRunTimeErrorsHaveGoWording(t *testing.T) {
	message := func(f func()) (s string) {
		defer func() {
			th := recover().(*Thrown)
			if _, ok := th.Value.(runtime.Error); !ok {
				t.Errorf("%v is no runtime.Error", th.Value)
			}
			s = th.Message()
		}()
		f()
		return ""
	}
	// Wording: Go runtime, seen from programs compiled with go1.26.
	for want, f := range map[string]func(){
		"runtime error: index out of range [5] with length 2":            func() { Index(1, 5, 2) },
		"runtime error: index out of range [-1]":                         func() { Index(1, -1, 2) },
		"runtime error: integer divide by zero":                          func() { Divide(1) },
		"runtime error: negative shift amount":                           func() { Shift(1) },
		"assignment to entry in nil map":                                 func() { NilMap(1) },
		"runtime error: slice bounds out of range [:9] with capacity 4":  func() { Slice(1, 0, 9, 0, 2, 4, false, false) },
		"runtime error: slice bounds out of range [3:2]":                 func() { Slice(1, 3, 2, 0, 2, 4, false, false) },
		"runtime error: slice bounds out of range [::9] with capacity 4": func() { Slice(1, 0, 2, 9, 2, 4, true, false) },
		"runtime error: slice bounds out of range [:9] with length 4":    func() { Slice(1, 0, 9, 0, 4, 4, false, true) },
		"runtime error: makeslice: len out of range":                     func() { Make(1, "len") },
	} {
		if got := message(f); got != want {
			t.Errorf("got %q, want %q", got, want)
		}
	}
}

func TestFailureIsAnErrorWithTheScriptsMethods(t *testing.T) {
	r := New(Streams{}, nil)
	defer r.Close()
	typ := level(r)
	typ.SetMethod("Error", reflect.ValueOf(func(i int) string { return fmt.Sprint("code ", i) }))
	typ.SetMethod("Unwrap", reflect.ValueOf(func(i int) error { return io.EOF }))
	err := error(Failure{Value{typ, 7}})
	if wrapped := fmt.Errorf("w: %w", err); wrapped.Error() != "w: code 7" || !errors.Is(wrapped, io.EOF) || !errors.Is(wrapped, Failure{Value{typ, 7}}) {
		t.Errorf("%v does not behave as an error", wrapped)
	}
}

func TestStreamsThatAreNoFiles(t *testing.T) {
	var out bytes.Buffer
	r := New(Streams{In: strings.NewReader("text"), Out: &out}, nil)
	f, err := r.File(1)
	if err != nil {
		t.Fatal(err)
	}
	fmt.Fprint(f, "a")
	fmt.Fprint(r.Out(), "b")
	in, err := r.File(0)
	if err != nil {
		t.Fatal(err)
	}
	if b, err := io.ReadAll(in); string(b) != "text" || err != nil {
		t.Errorf("read %q, %v", b, err)
	}
	r.Close()
	if out.String() != "ab" {
		t.Errorf("wrote %q, want ab in order", out.String())
	}
}

// draft has a Discard method, as a file that is being written.
type draft struct{ discarded *int }

func (d *draft) Discard() { *d.discarded++ }

func TestWhatIsLeftOpenIsDiscarded(t *testing.T) {
	n := 0
	r := New(Streams{}, nil)
	r.Track(&draft{&n})
	r.Track(3)
	r.Close()
	if n != 1 {
		t.Errorf("discarded %d times", n)
	}
}

func TestPanicInAForeignGoroutineEndsTheRun(t *testing.T) {
	r := New(Streams{}, nil)
	defer r.Close()
	go r.Raise(func() { Throw(3, "elsewhere") })
	if p := (<-r.Ended()).Panic(); p == nil || p.Value != "elsewhere" || p.Pos != 3 {
		t.Errorf("ended with %v", p)
	}
}

func TestDepthIsFoundOnTheStack(t *testing.T) {
	r, other := New(Streams{}, nil), New(Streams{}, nil)
	defer r.Close()
	defer other.Close()
	deep, end := make(chan bool), make(chan bool)
	var down func(n int) int
	down = func(n int) int {
		if n == 0 {
			deep <- true
			<-end
			return 0
		}
		return down(n-1) + 1
	}
	r.Go(func() { down(2 * tooDeep) })
	other.Go(func() { deep <- true; <-end })
	<-deep
	<-deep
	if !r.TooDeep() || other.TooDeep() {
		t.Errorf("deep %v, other %v", r.TooDeep(), other.TooDeep())
	}
	close(end)
}

func TestNothingIsWrittenAfterTheEnd(t *testing.T) {
	var out bytes.Buffer
	r := New(Streams{Out: &out, Err: &out}, nil)
	fmt.Fprint(r.Out(), "a")
	fmt.Fprint(r.Err(), "b")
	r.Close()
	if _, err := fmt.Fprint(r.Out(), "c"); err == nil || out.String() != "ab" {
		t.Errorf("wrote %q, %v", out.String(), err)
	}
}

func ExampleRun() {
	run := New(Streams{Out: os.Stdout}, []string{"script"})
	defer run.Close()
	run.Main(func() { Throw(0, "not today") })
	fmt.Println((<-run.Ended()).Panic().Message())
	// Output: not today
}
