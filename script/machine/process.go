package machine

import (
	"encoding/json"
	"errors"
	"flag"
	"log"
	"reflect"
	"sort"
	"strings"
	"time"
)

// process holds what a run has instead of the globals of the program.
type process struct {
	replace map[string]reflect.Value // functions and addressable variables
	flags   *flag.FlagSet
	log     *log.Logger
}

// Replace returns what the run has in place of path.name, if it has something:
// a function, or an addressable variable.
func (r *Run) Replace(path, name string) (reflect.Value, bool, error) {
	if r.process == nil {
		r.process = r.newProcess()
	}
	key := path + "." + name
	if v, ok := r.process.replace[key]; ok {
		return v, true, nil
	}
	switch path {
	case "os":
		return r.stream(name)
	case "flag":
		return method(reflect.ValueOf(r.process.flags), name)
	case "log":
		return method(reflect.ValueOf(r.process.log), name)
	}
	return reflect.Value{}, false, nil
}

// method returns the method that the package function of that name stands for.
func method(v reflect.Value, name string) (reflect.Value, bool, error) {
	m := v.MethodByName(name)
	if !m.IsValid() || strings.HasPrefix(name, "New") || name == "Usage" {
		return reflect.Value{}, false, nil
	}
	return m, true, nil
}

func (r *Run) stream(name string) (reflect.Value, bool, error) {
	fd := map[string]int{"Stdin": 0, "Stdout": 1, "Stderr": 2}
	n, ok := fd[name]
	if !ok {
		return reflect.Value{}, false, nil
	}
	f, err := r.File(n)
	if err != nil {
		return reflect.Value{}, false, err
	}
	v := reflect.New(reflect.TypeOf(f)).Elem()
	v.Set(reflect.ValueOf(f))
	r.process.replace["os."+name] = v
	return v, true, nil
}

func (r *Run) newProcess() *process {
	p := &process{replace: map[string]reflect.Value{}}
	p.log = log.New(errWriter{r}, "", log.LstdFlags)
	p.flags = r.newFlags()
	for key, f := range r.printing() {
		p.replace[key] = reflect.ValueOf(f)
	}
	for key, f := range r.others(p) {
		p.replace[key] = reflect.ValueOf(f)
	}
	for key, f := range r.hosted() {
		p.replace[key] = reflect.ValueOf(f)
	}
	if r.Fence != nil {
		for key, f := range r.Fence.Functions() {
			p.replace[key] = reflect.ValueOf(f)
		}
	}
	p.replace["os.Args"] = reflect.ValueOf(&r.Args).Elem()
	usage := p.flags.Usage
	p.replace["flag.Usage"] = reflect.ValueOf(&usage).Elem()
	p.flags.Usage = func() { usage() }
	p.replace["flag.CommandLine"] = reflect.ValueOf(&p.flags).Elem()
	return p
}

// errWriter writes to the standard error the run has at that moment.
type errWriter struct{ run *Run }

func (w errWriter) Write(b []byte) (int, error) { return w.run.Err().Write(b) }

func (r *Run) newFlags() *flag.FlagSet {
	name := ""
	if len(r.Args) > 0 {
		name = r.Args[0]
	}
	fs := flag.NewFlagSet(name, flag.ContinueOnError)
	fs.SetOutput(errWriter{r})
	fs.Usage = func() {
		_, _ = errWriter{r}.Write([]byte("Usage of " + name + ":\n"))
		fs.PrintDefaults()
	}
	return fs
}

// parse does what flag.Parse does: it ends the program on a mistake.
func (r *Run) parse(fs *flag.FlagSet) {
	var args []string
	if len(r.Args) > 1 {
		args = r.Args[1:]
	}
	switch err := fs.Parse(args); {
	case errors.Is(err, flag.ErrHelp):
		r.Exit(0)
	case err != nil:
		r.Exit(2)
	}
}

func (r *Run) others(p *process) map[string]any {
	fatal := func(s string) {
		_ = p.log.Output(3, s) // a full disk behind standard error changes nothing
		r.Exit(1)
	}
	raise := func(s string) {
		_ = p.log.Output(3, s)
		panic(s)
	}
	return map[string]any{
		"os.Exit":                 r.Exit,
		"flag.Parse":              func() { r.parse(p.flags) },
		"log.Default":             func() *log.Logger { return p.log },
		"log.Print":               func(a ...any) { _ = p.log.Output(3, line(a)) },
		"log.Println":             func(a ...any) { _ = p.log.Output(3, sprintln(a...)) },
		"log.Printf":              func(f string, a ...any) { _ = p.log.Output(3, sprintf(f, a...)) },
		"log.Fatal":               func(a ...any) { fatal(line(a)) },
		"log.Fatalln":             func(a ...any) { fatal(sprintln(a...)) },
		"log.Fatalf":              func(f string, a ...any) { fatal(sprintf(f, a...)) },
		"log.Panic":               func(a ...any) { raise(line(a)) },
		"log.Panicln":             func(a ...any) { raise(sprintln(a...)) },
		"log.Panicf":              func(f string, a ...any) { raise(sprintf(f, a...)) },
		"time.Sleep":              r.sleep,
		"sort.Slice":              func(x any, less func(i, j int) bool) { sort.Slice(bare(x), less) },
		"sort.SliceStable":        func(x any, less func(i, j int) bool) { sort.SliceStable(bare(x), less) },
		"sort.SliceIsSorted":      func(x any, less func(i, j int) bool) bool { return sort.SliceIsSorted(bare(x), less) },
		"encoding/json.Unmarshal": func(b []byte, x any) error { return json.Unmarshal(b, bare(x)) },
	}
}

func bare(x any) any { return stored([]any{x})[0] }

// sleep is time.Sleep that ends early when the run is stopped.
func (r *Run) sleep(d time.Duration) {
	t := time.NewTimer(d)
	defer t.Stop()
	select {
	case <-t.C:
	case <-r.done:
	}
}
