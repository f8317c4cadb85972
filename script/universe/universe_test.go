package universe

import (
	"fmt"
	"go/ast"
	"go/constant"
	"go/importer"
	"go/parser"
	"go/token"
	"go/types"
	"math"
	"os/exec"
	"reflect"
	"sort"
	"strings"
	"testing"
	"time"
)

// small is a table in the form of package symbols.
var small = map[string]map[string]reflect.Value{
	"math": {
		"Sqrt":  reflect.ValueOf(math.Sqrt),
		"Pi":    reflect.ValueOf(constant.MakeFloat64(math.Pi)),
		"Large": reflect.ValueOf(uint64(math.MaxUint64)),
	},
	"time": {
		"Duration": reflect.ValueOf((*time.Duration)(nil)),
		"Time":     reflect.ValueOf((*time.Time)(nil)),
		"Second":   reflect.ValueOf(time.Second),
		"Local":    reflect.ValueOf(&time.Local).Elem(),
		"Since":    reflect.ValueOf(time.Since),
	},
	"fmt": {
		"Stringer": reflect.ValueOf((*fmt.Stringer)(nil)),
		"Println":  reflect.ValueOf(fmt.Println),
	},
}

func checked(t *testing.T, u *Universe, src string) (*types.Package, []string) {
	t.Helper()
	fset := token.NewFileSet()
	f, err := parser.ParseFile(fset, "x.go", src, 0)
	if err != nil {
		t.Fatal(err)
	}
	var errs []string
	conf := types.Config{Importer: u, Error: func(err error) { errs = append(errs, err.Error()) }}
	pkg, _ := conf.Check("main", fset, []*ast.File{f}, nil)
	return pkg, errs
}

func TestScriptChecksAgainstReflectedTypes(t *testing.T) {
	_, errs := checked(t, New(small), `package main
import ("fmt"; "math"; "time")
var d time.Duration = 3 * time.Second
var s fmt.Stringer = d
var x float64 = math.Sqrt(2) * math.Pi
const c uint64 = math.Large
func main() { fmt.Println(d.Seconds(), time.Time{}.Add(d).Unix(), s, time.Since(time.Time{})) }
`)
	if len(errs) > 0 {
		t.Errorf("%v", errs)
	}
}

func TestMistakesAgainstReflectedTypes(t *testing.T) {
	_, errs := checked(t, New(small), `package main
import ("fmt"; "math"; "time")
var a int = time.Second
var b fmt.Stringer = 3
var c = math.Sqrt("x")
var d = time.Duration(1).Nothing()
func main() {}
`)
	if len(errs) != 4 {
		t.Errorf("%d errors, want 4: %v", len(errs), errs)
	}
}

func TestValuesAndForms(t *testing.T) {
	u := New(small)
	pkg, err := u.Import("time")
	if err != nil {
		t.Fatal(err)
	}
	if v, ok := u.Value(pkg.Scope().Lookup("Local")); !ok || !v.CanAddr() {
		t.Error("the variable Local is not addressable")
	}
	named := pkg.Scope().Lookup("Duration").Type().(*types.Named)
	if r, ok := u.Named(named.Obj()); !ok || r != reflect.TypeFor[time.Duration]() {
		t.Errorf("Duration is %v", r)
	}
	if !types.Identical(u.Type(reflect.TypeFor[[]time.Duration]()), types.NewSlice(named)) {
		t.Error("the same reflected type gives two checked types")
	}
	if !u.Compiled(named.Obj()) || u.Compiled(types.NewTypeName(0, types.NewPackage("main", "main"), "T", nil)) {
		t.Error("compiled types are not told from a script's")
	}
}

func TestUnknownPackageNamesTheKnown(t *testing.T) {
	_, err := New(small).Import("no/such")
	if err == nil || !strings.Contains(err.Error(), "math") || !strings.Contains(err.Error(), "slices") {
		t.Errorf("got %v; want the packages there are", err)
	}
}

// TestGenericSourcesAgree compares the signatures of the generic packages with
// the standard library's.
func TestGenericSourcesAgree(t *testing.T) {
	if _, err := exec.LookPath("go"); err != nil {
		t.Skip("no Go tool: the standard library is not at hand")
	}
	std := importer.ForCompiler(token.NewFileSet(), "source", nil)
	u := New(map[string]map[string]reflect.Value{"sort": {
		"Slice":       reflect.ValueOf(sort.Slice),
		"SliceStable": reflect.ValueOf(sort.SliceStable),
	}})
	count := 0
	for path := range sources {
		ours, err := u.Import(path)
		if err != nil {
			t.Fatal(err)
		}
		theirs, err := std.Import(path)
		if err != nil {
			t.Fatal(err)
		}
		for _, name := range ours.Scope().Names() {
			count++
			a, b := ours.Scope().Lookup(name), theirs.Scope().Lookup(name)
			if b == nil {
				t.Errorf("%s.%s is not in the standard library", path, name)
				continue
			}
			if x, y := shape(a), shape(b); x != y {
				t.Errorf("%s.%s is %s, in the standard library %s", path, name, x, y)
			}
		}
	}
	if count < 35 {
		t.Errorf("compared only %d names", count)
	}
}

// shape writes an object without the names of its parameters.
func shape(obj types.Object) string {
	sig, ok := obj.Type().(*types.Signature)
	if !ok {
		return types.TypeString(obj.Type().Underlying(), (*types.Package).Name)
	}
	var parts []string
	for p := range sig.TypeParams().TypeParams() {
		parts = append(parts, types.TypeString(p.Constraint(), (*types.Package).Name))
	}
	for v := range sig.Params().Variables() {
		parts = append(parts, v.Type().Underlying().String())
	}
	return fmt.Sprint(len(parts), sig.Params().Len(), sig.Results().Len(), sig.Variadic(), strings.Join(parts[:sig.TypeParams().Len()], ";"))
}

func ExampleNew() {
	u := New(small)
	pkg, err := u.Import("math")
	if err != nil {
		fmt.Println(err)
		return
	}
	obj := pkg.Scope().Lookup("Sqrt")
	f, ok := u.Value(obj)
	fmt.Println(obj, ok, f.Call([]reflect.Value{reflect.ValueOf(9.0)})[0])
	// Output: func math.Sqrt(float64) float64 true 3
}
