package machine

import (
	"fmt"
	"go/types"
	"io"
	"reflect"
	"strings"
)

// Format prints the value as fmt would print the compiled one.
func (v Value) Format(f fmt.State, verb rune) {
	p := printer{state: f, verb: verb, run: v.T.run}
	p.print(v.T.Checked, v.reflected(), 0, true)
}

// printer writes one value for one verb.
type printer struct {
	state fmt.State
	verb  rune
	run   *Run
}

func (p *printer) sharp() bool { return p.verb == 'v' && p.state.Flag('#') }
func (p *printer) plus() bool  { return p.verb == 'v' && p.state.Flag('+') }

func (p *printer) text(s string) { _, _ = io.WriteString(p.state, s) }

// print writes v of type t. Below the top, depth > 0; methods is false below an
// unexported field, where fmt calls none.
func (p *printer) print(t types.Type, v reflect.Value, depth int, methods bool) {
	if methods && p.method(t, v) {
		return
	}
	if !p.run.mentions(t) {
		p.native(v, depth, methods)
		return
	}
	switch u := t.Underlying().(type) {
	case *types.Struct:
		p.structure(t, u, v, depth, methods)
	case *types.Slice:
		p.list(t, u.Elem(), v, depth, methods)
	case *types.Array:
		p.list(t, u.Elem(), v, depth, methods)
	case *types.Map:
		p.table(t, u, v, depth, methods)
	case *types.Pointer:
		p.pointer(t, u, v, depth, methods)
	case *types.Interface:
		p.inner(t, v, depth, methods)
	default:
		p.basic(t, v)
	}
}

// basic prints a number, truth value or string of a script's type; a verb that
// does not fit is answered with the name of the type.
func (p *printer) basic(t types.Type, v reflect.Value) {
	s := fmt.Sprintf(fmt.FormatString(p.state, p.verb), v.Interface())
	bad := fmt.Sprintf("%%!%c(%s=", p.verb, v.Type())
	if rest, ok := strings.CutPrefix(s, bad); ok {
		s = fmt.Sprintf("%%!%c(%s=%s", p.verb, typeName(t), rest)
	}
	p.text(s)
}

// native leaves the printing to fmt.
func (p *printer) native(v reflect.Value, depth int, methods bool) {
	format := fmt.FormatString(p.state, p.verb)
	x := v.Interface()
	if depth == 0 {
		fmt.Fprintf(p.state, format, x)
		return
	}
	// A field puts fmt below the top; an unexported one also keeps it from
	// calling methods.
	var s string
	if methods {
		s = fmt.Sprintf(format, struct{ V any }{x})
	} else {
		s = fmt.Sprintf(format, struct{ v any }{x})
	}
	s = s[strings.IndexByte(s, '{')+1:]
	switch {
	case p.sharp():
		s = s[strings.IndexByte(s, '{')+1:]
		s = s[strings.IndexByte(s, '{')+1:]
		s = s[strings.IndexByte(s, ':')+1:]
	case p.plus():
		s = s[2:]
	}
	p.text(strings.TrimSuffix(s, "}"))
}

func (p *printer) structure(t types.Type, u *types.Struct, v reflect.Value, depth int, methods bool) {
	if p.sharp() {
		p.text(typeName(t))
	}
	p.text("{")
	for i := range u.NumFields() {
		if i > 0 {
			p.text(p.separator())
		}
		f := u.Field(i)
		if p.plus() || p.sharp() {
			p.text(f.Name() + ":")
		}
		p.print(f.Type(), v.Field(i), depth+1, methods && f.Exported())
	}
	p.text("}")
}

func (p *printer) separator() string {
	if p.sharp() {
		return ", "
	}
	return " "
}

func (p *printer) list(t, elem types.Type, v reflect.Value, depth int, methods bool) {
	open, end := "[", "]"
	if p.sharp() {
		if v.Kind() == reflect.Slice && v.IsNil() {
			p.text(typeName(t) + "(nil)")
			return
		}
		open, end = typeName(t)+"{", "}"
	}
	if b, ok := elem.(*types.Basic); ok && b.Kind() == types.Uint8 && !p.sharp() {
		p.native(v, depth, methods)
		return
	}
	p.text(open)
	for i := range v.Len() {
		if i > 0 {
			p.text(p.separator())
		}
		p.print(elem, v.Index(i), depth+1, methods)
	}
	p.text(end)
}

func (p *printer) table(t types.Type, u *types.Map, v reflect.Value, depth int, methods bool) {
	open, end := "map[", "]"
	if p.sharp() {
		if v.IsNil() {
			p.text(typeName(t) + "(nil)")
			return
		}
		open, end = typeName(t)+"{", "}"
	}
	p.text(open)
	for i, k := range sortedKeys(v) {
		if i > 0 {
			p.text(p.separator())
		}
		p.print(u.Key(), k, depth+1, methods)
		p.text(":")
		p.print(u.Elem(), v.MapIndex(k), depth+1, methods)
	}
	p.text(end)
}

func (p *printer) pointer(t types.Type, u *types.Pointer, v reflect.Value, depth int, methods bool) {
	if v.Kind() == reflect.Interface {
		if v.IsNil() {
			p.nilText(t)
			return
		}
		v = v.Elem()
	}
	if depth == 0 && !v.IsNil() {
		switch u.Elem().Underlying().(type) {
		case *types.Struct, *types.Slice, *types.Array, *types.Map:
			p.text("&")
			p.print(u.Elem(), v.Elem(), depth+1, methods)
			return
		}
	}
	if p.sharp() {
		if v.IsNil() {
			p.text("(" + typeName(t) + ")(nil)")
			return
		}
		p.text(fmt.Sprintf("(%s)(%#x)", typeName(t), v.Pointer()))
		return
	}
	if v.IsNil() && p.verb == 'v' {
		p.nilText(t)
		return
	}
	fmt.Fprintf(p.state, fmt.FormatString(p.state, p.verb), v.Interface())
}

func (p *printer) nilText(t types.Type) {
	if p.sharp() {
		p.text("(" + typeName(t) + ")(nil)")
		return
	}
	fmt.Fprintf(p.state, fmt.FormatString(p.state, p.verb), (*int)(nil))
}

// inner prints what an interface of type t holds.
func (p *printer) inner(t types.Type, v reflect.Value, depth int, methods bool) {
	if v.Kind() == reflect.Interface && v.IsNil() {
		if p.sharp() {
			p.text(typeName(t) + "(nil)")
			return
		}
		p.text("<nil>")
		return
	}
	if s, ok := Plain(v.Interface()).(Value); ok {
		p.print(s.T.Checked, s.reflected(), depth+1, methods)
		return
	}
	p.native(v, depth+1, methods)
}

// method lets a method of the script print the value.
func (p *printer) method(t types.Type, v reflect.Value) (handled bool) {
	typ := p.run.find(t)
	if typ == nil {
		return false
	}
	x := Value{T: typ, V: v.Interface()}
	call := func(name string) bool {
		if _, ok := typ.Method(name); !ok {
			return false
		}
		defer p.catch(v, name)
		switch name {
		case "Format":
			x.Call(name, []reflect.Value{reflect.ValueOf(p.state), reflect.ValueOf(p.verb)})
		case "GoString":
			p.text(x.Call(name, nil)[0].String())
		default:
			fmt.Fprintf(p.state, fmt.FormatString(p.state, p.verb), x.Call(name, nil)[0].String())
		}
		return true
	}
	if call("Format") {
		return true
	}
	if p.sharp() {
		return call("GoString")
	}
	if strings.ContainsRune("vsxXq", p.verb) {
		return call("Error") || call("String")
	}
	return false
}

// catch words a panic of a printing method as fmt does.
func (p *printer) catch(v reflect.Value, name string) {
	switch r := recover().(type) {
	case nil:
	case exit:
		panic(r)
	default:
		if v.Kind() == reflect.Pointer && v.IsNil() {
			p.text("<nil>")
			return
		}
		p.text(fmt.Sprintf("%%!%c(PANIC=%s method: %s)", p.verb, name, thrown(r).Message()))
	}
}

// typeName words t as reflection does.
func typeName(t types.Type) string {
	s := types.TypeString(t, func(p *types.Package) string { return p.Name() })
	if s == "any" {
		return "interface {}"
	}
	s = strings.ReplaceAll(strings.ReplaceAll(s, "]any", "]interface {}"), "interface{}", "interface {}")
	if !strings.Contains(s, ", ") {
		return s
	}
	var out strings.Builder
	var open []byte
	for i := range len(s) {
		switch s[i] {
		case '[', '(', '{':
			open = append(open, s[i])
		case ']', ')', '}':
			open = open[:len(open)-1]
		case ' ': // type arguments stand without spaces
			if s[i-1] == ',' && len(open) > 0 && open[len(open)-1] == '[' {
				continue
			}
		}
		out.WriteByte(s[i])
	}
	return out.String()
}
