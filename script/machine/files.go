package machine

import (
	"fmt"
	"reflect"

	"ketloom/script/fence"
)

// opener is a compiled function or method that opens a path by itself: its
// first argument, after the receiver. Its last result is an error.
type opener struct {
	op     string
	access fence.Access
}

// openers are Ketloom's functions that take paths; methods are named without the
// star of a pointer.
var openers = map[string]opener{
	"ketloom/lanczos/archive.Create":                    {"create", fence.Write},
	"ketloom/lanczos/archive.Open":                      {"open", fence.Read},
	"ketloom/lanczos.LoadCheckpoint":                    {"open", fence.Read},
	"(ketloom/lanczos.Checkpoint).Save":                 {"save", fence.Write},
	"ketloom/script/sweep.Open":                         {"open", fence.Write},
	"(ketloom/script/report.SectorSpectrum).Save":       {"save", fence.Write},
	"(ketloom/script/report.SpectralFlow).Save":         {"save", fence.Write},
	"(ketloom/script/report.EntanglementSpectrum).Save": {"save", fence.Write},
	"(ketloom/script/report.EntropyProfile).Save":       {"save", fence.Write},
	"(ketloom/script/report.Tower).Save":                {"save", fence.Write},
	"(ketloom/script/report.Convergence).Save":          {"save", fence.Write},
	"(ketloom/script/report.Extrapolation).Save":        {"save", fence.Write},
	"(ketloom/script/report.LevelStatistics).Save":      {"save", fence.Write},
	"(ketloom/script/report.DispersionMap).Save":        {"save", fence.Write},
	"(ketloom/script/report.StructureFactorMap).Save":   {"save", fence.Write},
	"(ketloom/script/report.LatticeDrawing).Save":       {"save", fence.Write},
	"(ketloom/script/report.Table).Save":                {"save", fence.Write},
	"(ketloom/script/report/page.Page).Save":            {"save", fence.Write},
	"(ketloom/script/report/page.Page).Archive":         {"open", fence.Read},
}

// Opens says that a function is known to take a path.
func Opens(name string) bool { _, ok := openers[name]; return ok }

// Guard returns what a script calls in place of a compiled function or method
// target. receiver is the number of arguments before its own.
func (r *Run) Guard(name string, target reflect.Value, receiver int) reflect.Value {
	instead, _ := r.Guarded(name, target, receiver)
	return instead
}

// Guarded is Guard that says whether there is something else than target.
func (r *Run) Guarded(name string, target reflect.Value, receiver int) (instead reflect.Value, other bool) {
	if f, ok := r.contained()[name]; ok {
		return reflect.ValueOf(f), true
	}
	o, ok := openers[name]
	if !ok || r.Fence == nil {
		return target, false
	}
	t := target.Type()
	return reflect.MakeFunc(t, func(in []reflect.Value) []reflect.Value {
		given := in[receiver].String()
		path, err := r.Fence.Path(o.op, given, o.access)
		if err != nil {
			return failed(t, err)
		}
		in[receiver] = reflect.ValueOf(path).Convert(t.In(receiver))
		return target.Call(in)
	}), true
}

// failed returns zero results with an error as the last.
func failed(t reflect.Type, err error) []reflect.Value {
	var out []reflect.Value
	for i := range t.NumOut() {
		out = append(out, reflect.Zero(t.Out(i)))
	}
	out[len(out)-1] = asError(err)
	return out
}

// MethodName is the name of a method of a compiled type, as Guard knows it.
func MethodName(t reflect.Type, method string) string {
	if t.Kind() == reflect.Pointer {
		t = t.Elem()
	}
	return fmt.Sprintf("(%s.%s).%s", t.PkgPath(), t.Name(), method)
}
