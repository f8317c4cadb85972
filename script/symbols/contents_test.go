package symbols

import (
	"go/constant"
	"go/token"
	"math"
	"reflect"
	"testing"
)

func TestEveryListedPackageHasATable(t *testing.T) {
	for _, path := range append(append([]string{}, Ketloom...), Standard...) {
		if len(Table[path]) == 0 {
			t.Errorf("%s has no table", path)
		}
	}
	if len(Table) != len(Ketloom)+len(Standard)+1 { // and syscall
		t.Errorf("%d tables for %d packages", len(Table), len(Ketloom)+len(Standard)+1)
	}
}

// Exact values: Go specification and documentation of package math.
func TestUntypedConstantsAreExact(t *testing.T) {
	pi, ok := Table["math"]["Pi"].Interface().(constant.Value)
	if !ok || constant.Compare(constant.ToFloat(pi), token.EQL, constant.MakeFloat64(math.Pi)) {
		t.Errorf("Pi is %v; want more digits than a float64 has", pi)
	}
	if max := Table["math"]["MaxUint64"].Interface().(constant.Value); max.ExactString() != "18446744073709551615" {
		t.Errorf("MaxUint64 is %s", max.ExactString())
	}
	if r, ok := Table["unicode/utf8"]["RuneError"].Interface().(Rune); !ok || r.Constant().ExactString() != "65533" {
		t.Errorf("RuneError is %v; want a rune", Table["unicode/utf8"]["RuneError"])
	}
}

func TestInterfacesHaveWrappers(t *testing.T) {
	w := Table["fmt"]["_Stringer"].Type().Elem()
	v := reflect.New(w)
	v.Elem().FieldByName("WString").Set(reflect.ValueOf(func() string { return "from a function" }))
	if s := v.Interface().(interface{ String() string }).String(); s != "from a function" {
		t.Errorf("got %q", s)
	}
}
