package main

import (
	"fmt"
	"go/token"
	"go/types"
	"strings"
)

const subtract = token.SUB

// wrapper writes a struct of functions that implements iface, and its entry.
func (w *writer) wrapper(name string, iface *types.Interface) {
	typ := "_" + strings.NewReplacer("/", "_", ".", "_", "-", "_").Replace(w.pkg.Path()) + "_" + name
	fmt.Fprintf(&w.entries, "%q: reflect.ValueOf((*%s)(nil)),\n", "_"+name, typ)
	fmt.Fprintf(&w.wrappers, "\n// %s lets a script's type stand behind %s.%s.\ntype %s struct {\nIValue any\n", typ, w.pkg.Name(), name, typ)
	for m := range iface.Methods() {
		fmt.Fprintf(&w.wrappers, "W%s func%s\n", m.Name(), w.signature(m.Signature(), false))
	}
	fmt.Fprintf(&w.wrappers, "}\n\n")
	for m := range iface.Methods() {
		sig := m.Signature()
		ret := ""
		if sig.Results().Len() > 0 {
			ret = "return "
		}
		fmt.Fprintf(&w.wrappers, "func (w *%s) %s%s { %sw.W%s(%s) }\n", typ, m.Name(), w.signature(sig, true), ret, m.Name(), arguments(sig))
	}
	fmt.Fprintf(&w.wrappers, "func (w *%s) Unwrapped() any { return w.IValue }\n", typ)
}

// signature writes parameters and results, the parameters named on request.
func (w *writer) signature(sig *types.Signature, named bool) string {
	var params []string
	for i := range sig.Params().Len() {
		t := types.TypeString(sig.Params().At(i).Type(), w.qualify)
		if sig.Variadic() && i == sig.Params().Len()-1 {
			t = "..." + strings.TrimPrefix(t, "[]")
		}
		if named {
			t = fmt.Sprintf("a%d %s", i, t)
		}
		params = append(params, t)
	}
	var results []string
	for r := range sig.Results().Variables() {
		results = append(results, types.TypeString(r.Type(), w.qualify))
	}
	return "(" + strings.Join(params, ", ") + ") (" + strings.Join(results, ", ") + ")"
}

func arguments(sig *types.Signature) string {
	var args []string
	for i := range sig.Params().Len() {
		a := fmt.Sprintf("a%d", i)
		if sig.Variadic() && i == sig.Params().Len()-1 {
			a += "..."
		}
		args = append(args, a)
	}
	return strings.Join(args, ", ")
}
