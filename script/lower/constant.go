package lower

import (
	"fmt"
	"go/constant"
	"go/token"
	"go/types"
	"reflect"
	"strconv"
	"strings"
)

// constant writes a constant of type t. Whatever the interpreter might read
// with another type or value becomes a variable that is set before the script
// starts.
func (c *compiler) constant(v constant.Value, t types.Type, pos token.Pos) string {
	t = types.Default(t)
	b, ok := t.Underlying().(*types.Basic)
	if !ok {
		// A constant converted to an interface by its context.
		b = types.Default(kindOf(v)).(*types.Basic)
		t = b
	}
	switch {
	case b.Info()&types.IsBoolean != 0:
		return fmt.Sprint(constant.BoolVal(v))
	case b.Kind() == types.Int:
		if n, exact := constant.Int64Val(constant.ToInt(v)); exact && n >= 0 {
			return strconv.FormatInt(n, 10)
		}
	}
	form := c.form(t, pos)
	value := constantValue(v, form)
	return c.once(fmt.Sprintf("const %s %s %x", form, exactText(value), constant.ToInt(v)), func() string {
		k := &variable{name: c.fresh("k"), form: c.text(form)}
		c.globals[types.NewVar(token.NoPos, nil, k.name, nil)] = k
		get := reflect.MakeFunc(reflect.FuncOf(nil, []reflect.Type{form}, false), func([]reflect.Value) []reflect.Value { return []reflect.Value{value} })
		c.setup = append(c.setup, fmt.Sprintf("%s = %s()", k.name, c.symbol("K", get)))
		return k.name
	})
}

func exactText(v reflect.Value) string {
	switch {
	case v.CanFloat():
		return strconv.FormatFloat(v.Float(), 'x', -1, 64)
	case v.CanComplex():
		return strconv.FormatComplex(v.Complex(), 'x', -1, 128)
	}
	return fmt.Sprintf("%#v", v.Interface())
}

func kindOf(v constant.Value) types.Type {
	switch v.Kind() {
	case constant.Bool:
		return types.Typ[types.UntypedBool]
	case constant.String:
		return types.Typ[types.UntypedString]
	case constant.Int:
		return types.Typ[types.UntypedInt]
	case constant.Float:
		return types.Typ[types.UntypedFloat]
	}
	return types.Typ[types.UntypedComplex]
}

// constantValue returns the constant as a value of a basic form.
func constantValue(v constant.Value, form reflect.Type) reflect.Value {
	r := reflect.New(form).Elem()
	switch {
	case r.Kind() == reflect.String:
		r.SetString(constant.StringVal(v))
	case r.Kind() == reflect.Bool:
		r.SetBool(constant.BoolVal(v))
	case r.CanInt():
		n, _ := constant.Int64Val(constant.ToInt(v))
		r.SetInt(n)
	case r.CanUint():
		n, _ := constant.Uint64Val(constant.ToInt(v))
		r.SetUint(n)
	case r.Kind() == reflect.Float32:
		x, _ := constant.Float32Val(v)
		r.SetFloat(float64(x))
	case r.CanFloat():
		x, _ := constant.Float64Val(v)
		r.SetFloat(x)
	case r.CanComplex():
		v = constant.ToComplex(v)
		if r.Kind() == reflect.Complex64 {
			re, _ := constant.Float32Val(constant.Real(v))
			im, _ := constant.Float32Val(constant.Imag(v))
			r.SetComplex(complex128(complex(re, im)))
			break
		}
		re, _ := constant.Float64Val(constant.Real(v))
		im, _ := constant.Float64Val(constant.Imag(v))
		r.SetComplex(complex(re, im))
	}
	return r
}

// operand writes a constant as an operand beside a variable of type t, where
// the interpreter takes a literal for what it says.
func operand(v constant.Value, t types.Type) (string, bool) {
	b, ok := t.Underlying().(*types.Basic)
	if !ok {
		return "", false
	}
	switch {
	case b.Info()&types.IsInteger != 0:
		if n, exact := constant.Int64Val(constant.ToInt(v)); exact && n >= 0 && n < 1<<31 {
			return strconv.FormatInt(n, 10), true
		}
	case b.Kind() == types.Float64:
		x, _ := constant.Float64Val(v)
		if x > 0 && x < 1e15 && x > 1e-9 {
			s := strconv.FormatFloat(x, 'f', -1, 64)
			if !strings.Contains(s, ".") {
				s += ".0"
			}
			return s, true
		}
	case b.Info()&types.IsString != 0:
		return strconv.Quote(constant.StringVal(v)), true
	}
	return "", false
}
