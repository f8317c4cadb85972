package main

import (
	"bytes"
	"fmt"
	"go/constant"
	"go/types"
	"sort"
	"strings"
)

// writer collects the entries and wrapper types of one package.
type writer struct {
	pkg      *types.Package
	imports  map[string]string // path -> name in the file
	entries  bytes.Buffer
	wrappers bytes.Buffer
	rune     string // the type that marks an untyped rune
}

// local returns the name under which path is imported in the generated file.
// It is made from the whole path, so that two packages of one name can meet.
func (w *writer) local(pkg *types.Package) string {
	name := "p_" + strings.NewReplacer("/", "_", ".", "_", "-", "_").Replace(pkg.Path())
	w.imports[pkg.Path()] = name
	return name
}

func (w *writer) qualify(pkg *types.Package) string { return w.local(pkg) }

func (w *writer) object(obj types.Object) {
	name := obj.Name()
	switch obj := obj.(type) {
	case *types.Const:
		w.constant(obj)
	case *types.Func:
		if obj.Signature().TypeParams().Len() == 0 {
			w.entry(name, w.local(w.pkg)+"."+name)
		}
	case *types.Var:
		fmt.Fprintf(&w.entries, "%q: reflect.ValueOf(&%s.%s).Elem(),\n", name, w.local(w.pkg), name)
	case *types.TypeName:
		w.typeName(obj)
	}
}

func (w *writer) entry(name, expr string) {
	fmt.Fprintf(&w.entries, "%q: reflect.ValueOf(%s),\n", name, expr)
}

func (w *writer) constant(c *types.Const) {
	basic, ok := c.Type().(*types.Basic)
	if !ok || basic.Info()&types.IsUntyped == 0 {
		w.entry(c.Name(), w.local(w.pkg)+"."+c.Name())
		return
	}
	w.imports["go/constant"] = "constant"
	w.entry(c.Name(), w.exact(basic, c.Val()))
}

// exact writes an untyped constant without loss.
func (w *writer) exact(basic *types.Basic, v constant.Value) string {
	lit := func(v constant.Value, kind string) string {
		w.imports["go/token"] = "token"
		text := v.ExactString()
		if num, den, ok := strings.Cut(text, "/"); ok {
			return fmt.Sprintf("constant.BinaryOp(constant.MakeFromLiteral(%q, token.INT, 0), token.QUO, constant.MakeFromLiteral(%q, token.INT, 0))", num, den)
		}
		return fmt.Sprintf("constant.MakeFromLiteral(%q, token.%s, 0)", text, kind)
	}
	signed := func(v constant.Value, kind string) string {
		if constant.Sign(v) >= 0 {
			return lit(v, kind)
		}
		w.imports["go/token"] = "token"
		return "constant.UnaryOp(token.SUB, " + lit(constant.UnaryOp(subtract, v, 0), kind) + ", 0)"
	}
	switch basic.Kind() {
	case types.UntypedBool:
		return fmt.Sprintf("constant.MakeBool(%v)", constant.BoolVal(v))
	case types.UntypedString:
		return fmt.Sprintf("constant.MakeString(%q)", constant.StringVal(v))
	case types.UntypedInt:
		return signed(v, "INT")
	case types.UntypedRune:
		return fmt.Sprintf("%s{%s}", w.rune, signed(v, "INT"))
	case types.UntypedFloat:
		return "constant.ToFloat(" + signed(constant.ToFloat(v), "FLOAT") + ")"
	default:
		w.imports["go/token"] = "token"
		im := "constant.MakeImag(" + signed(constant.Imag(v), "FLOAT") + ")"
		return "constant.ToComplex(constant.BinaryOp(" + signed(constant.Real(v), "FLOAT") + ", token.ADD, " + im + "))"
	}
}

func (w *writer) typeName(t *types.TypeName) {
	if named, ok := t.Type().(*types.Named); ok && named.TypeParams().Len() > 0 {
		return
	}
	iface, isInterface := t.Type().Underlying().(*types.Interface)
	if isInterface && !iface.IsMethodSet() {
		return // a constraint
	}
	w.entry(t.Name(), "(*"+w.local(w.pkg)+"."+t.Name()+")(nil)")
	if isInterface && iface.NumMethods() > 0 && open(iface) {
		w.wrapper(t.Name(), iface)
	}
}

// open says that a type of another package can have all methods of iface.
func open(iface *types.Interface) bool {
	for m := range iface.Methods() {
		if !m.Exported() {
			return false
		}
	}
	return true
}

func sorted(m map[string]string) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	return keys
}
