package lower

import (
	"fmt"
	"go/token"
	"go/types"
	"reflect"

	"ketloom/script/machine"
)

// dynamic returns the symbol that calls a method of what an interface of type t
// holds. It takes the place of the call, the interface and the arguments.
func (f *fn) dynamic(t types.Type, name string, sig *types.Signature) string {
	form := f.form(t)
	in := []reflect.Type{reflect.TypeFor[int](), form}
	fun := f.c.funcForm(sig, f.pos)
	for i := range fun.NumIn() {
		in = append(in, fun.In(i))
	}
	var out []reflect.Type
	for i := range fun.NumOut() {
		out = append(out, fun.Out(i))
	}
	typ := reflect.FuncOf(in, out, false)
	return f.c.once("dynamic "+name+" "+f.c.text(typ), func() string {
		return f.c.symbol("D", reflect.MakeFunc(typ, func(in []reflect.Value) []reflect.Value {
			pos := token.Pos(in[0].Int())
			defer f.c.in.Run.Mark(pos)
			if in[1].IsNil() {
				machine.Nil(int(pos))
			}
			return f.c.invoke(machine.Plain(in[1].Interface()), name, in[2:], out)
		}))
	})
}

// invoke calls a method of a compiled or a script's value.
func (c *compiler) invoke(x any, name string, args []reflect.Value, out []reflect.Type) []reflect.Value {
	if v, ok := x.(machine.Value); ok {
		return v.Call(name, args)
	}
	m := c.boundMethod(reflect.ValueOf(x), name)
	for i, a := range args {
		if want := m.Type().In(i); a.Type() != want {
			args[i] = fitted(a, want)
		}
	}
	var res []reflect.Value
	if m.Type().IsVariadic() {
		res = m.CallSlice(args)
	} else {
		res = m.Call(args)
	}
	for i := range res {
		res[i] = fitted(res[i], out[i])
	}
	return res
}

// fitted converts between types that differ in name or in being variadic.
func fitted(v reflect.Value, to reflect.Type) reflect.Value {
	switch {
	case v.Type() == to:
		return v
	case v.Kind() == reflect.Interface || to.Kind() == reflect.Interface:
		r := reflect.New(to).Elem()
		if v.Kind() != reflect.Interface || !v.IsNil() {
			r.Set(v)
		}
		return r
	case v.Kind() == reflect.Func:
		return functionConverter(v.Type(), to)(v)
	}
	return v.Convert(to)
}

// boundMethod is a method of a compiled value, or what the run has in its place.
func (c *compiler) boundMethod(x reflect.Value, name string) reflect.Value {
	bound := x.MethodByName(name)
	target, instead := c.methodOf(x.Type(), name)
	if !instead {
		return bound
	}
	return reflect.MakeFunc(bound.Type(), func(in []reflect.Value) []reflect.Value {
		in = append([]reflect.Value{x}, in...)
		if target.Type().IsVariadic() {
			return target.CallSlice(in)
		}
		return target.Call(in)
	})
}

// found is a method that was looked up before.
type found struct {
	target  reflect.Value
	instead bool
}

// methodOf looks up what the run has in place of a compiled method.
func (c *compiler) methodOf(t reflect.Type, name string) (reflect.Value, bool) {
	key := struct {
		t    reflect.Type
		name string
	}{t, name}
	if f, ok := c.methods.Load(key); ok {
		return f.(found).target, f.(found).instead
	}
	full := machine.MethodName(t, name)
	if why, ok := unavailable[full]; ok {
		panic(fmt.Sprintf("%s is not available in a script: %s", full, why))
	}
	var f found
	if m, ok := t.MethodByName(name); ok {
		f.target, f.instead = c.in.Run.Guarded(full, m.Func, 1)
	}
	c.methods.Store(key, f)
	return f.target, f.instead
}
