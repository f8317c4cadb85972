package lower

import (
	"fmt"
	"go/ast"
	"go/types"
	"strings"
)

// instance returns the emitted name and the signature of a script's function,
// for the type arguments at id.
func (f *fn) instance(obj *types.Func, id *ast.Ident) (string, *types.Signature) {
	inst, generic := f.info.Instances[id]
	if !generic {
		return f.c.function(obj, nil, ""), f.typ(obj.Type()).(*types.Signature)
	}
	var args []types.Type
	for a := range inst.TypeArgs.Types() {
		args = append(args, f.typ(a))
	}
	sig := f.typ(inst.Type).(*types.Signature)
	return f.c.instantiate(obj.Origin(), obj.Signature().TypeParams(), args), sig
}

// methodInstance returns the emitted name and the signature, without receiver,
// of a method of a script's type.
func (f *fn) methodInstance(method *types.Func, recv types.Type) (string, *types.Signature) {
	if p, ok := recv.(*types.Pointer); ok {
		recv = p.Elem()
	}
	named := types.Unalias(recv).(*types.Named)
	origin := method.Origin()
	if named.TypeArgs().Len() == 0 {
		return f.c.function(origin, nil, ""), plainSignature(f.typ(origin.Type()).(*types.Signature))
	}
	var args []types.Type
	for a := range named.TypeArgs().Types() {
		args = append(args, a)
	}
	params := origin.Signature().RecvTypeParams()
	with := map[*types.TypeParam]types.Type{}
	for i := range params.Len() {
		with[params.At(i)] = args[i]
	}
	return f.c.instantiate(origin, params, args), plainSignature(f.c.substitute(origin.Type(), with).(*types.Signature))
}

func plainSignature(s *types.Signature) *types.Signature {
	return types.NewSignatureType(nil, nil, nil, s.Params(), s.Results(), s.Variadic())
}

func (c *compiler) instantiate(obj *types.Func, params *types.TypeParamList, args []types.Type) string {
	with := map[*types.TypeParam]types.Type{}
	var key []string
	for i := range params.Len() {
		with[params.At(i)] = args[i]
		key = append(key, c.typeKey(args[i]))
	}
	return c.function(obj, with, "["+strings.Join(key, ",")+"]")
}

// typeKey tells types apart, also local ones of one name.
func (c *compiler) typeKey(t types.Type) string {
	seen := map[*types.TypeName]bool{}
	c.reach(t, seen)
	key := types.TypeString(t, nil)
	if c.hasLocal(t) {
		for name := range seen {
			key += fmt.Sprintf("@%d", name.Pos())
		}
	}
	return key
}

// function returns the emitted name of a function and queues its emission.
func (c *compiler) function(obj *types.Func, with map[*types.TypeParam]types.Type, key string) string {
	id := fmt.Sprintf("%p%s", obj, key)
	if name, ok := c.names[id]; ok {
		return name
	}
	name := c.fresh("f" + plainName(obj.Name()))
	c.names[id] = name
	if len(c.names) > 5000 {
		c.refuse(obj.Pos(), "the generic function %s asks for more than 5000 instances; let it not call itself with ever new types", obj.Name())
		return name
	}
	c.work = append(c.work, func() { c.emitFunction(obj, with, name) })
	return name
}

func (c *compiler) emitFunction(obj *types.Func, with map[*types.TypeParam]types.Type, name string) {
	b := c.bodies[obj]
	f := c.newFn(nil, b.info)
	f.with = with
	defer f.recoverStop()
	var params []*types.Var
	params = append(params, f.namedParams(b.decl.Recv)...)
	params = append(params, f.namedParams(b.decl.Type.Params)...)
	text := f.emit(signature{params: params, results: obj.Signature().Results(), body: b.decl.Body})
	fmt.Fprintf(&c.out, "func %s%s\n", name, text)
}

// instanceValue is an instantiated generic function as a value.
func (f *fn) instanceValue(e, x ast.Expr) late {
	id, obj := f.genericFunc(e)
	if obj == nil {
		f.refuse(e, "this instance of a generic function is not available in a script")
	}
	return f.funcValue(obj, id)
}

// substitute replaces type parameters in t.
func (c *compiler) substitute(t types.Type, with map[*types.TypeParam]types.Type) types.Type {
	if len(with) == 0 || t == nil {
		return t
	}
	s := substitution{with}
	return s.typ(t)
}

type substitution struct {
	with map[*types.TypeParam]types.Type
}

func (s substitution) typ(t types.Type) types.Type {
	switch t := types.Unalias(t).(type) {
	case *types.TypeParam:
		if r, ok := s.with[t]; ok {
			return r
		}
	case *types.Pointer:
		if e := s.typ(t.Elem()); e != t.Elem() {
			return types.NewPointer(e)
		}
	case *types.Slice:
		if e := s.typ(t.Elem()); e != t.Elem() {
			return types.NewSlice(e)
		}
	case *types.Array:
		if e := s.typ(t.Elem()); e != t.Elem() {
			return types.NewArray(e, t.Len())
		}
	case *types.Chan:
		if e := s.typ(t.Elem()); e != t.Elem() {
			return types.NewChan(t.Dir(), e)
		}
	case *types.Map:
		k, e := s.typ(t.Key()), s.typ(t.Elem())
		if k != t.Key() || e != t.Elem() {
			return types.NewMap(k, e)
		}
	case *types.Tuple:
		return s.tuple(t)
	case *types.Signature:
		params, results := s.tuple(t.Params()), s.tuple(t.Results())
		if params != t.Params() || results != t.Results() || t.TypeParams().Len() > 0 || t.RecvTypeParams().Len() > 0 {
			return types.NewSignatureType(nil, nil, nil, params, results, t.Variadic())
		}
	case *types.Struct:
		return s.structure(t)
	case *types.Named:
		return s.named(t)
	case *types.Interface:
		return s.iface(t)
	}
	return t
}

func (s substitution) tuple(t *types.Tuple) *types.Tuple {
	changed := false
	var vars []*types.Var
	for v := range t.Variables() {
		typ := s.typ(v.Type())
		if typ != v.Type() {
			changed = true
			v = types.NewParam(v.Pos(), v.Pkg(), v.Name(), typ)
		}
		vars = append(vars, v)
	}
	if !changed {
		return t
	}
	return types.NewTuple(vars...)
}

func (s substitution) structure(t *types.Struct) types.Type {
	changed := false
	var fields []*types.Var
	var tags []string
	for i := range t.NumFields() {
		v := t.Field(i)
		typ := s.typ(v.Type())
		if typ != v.Type() {
			changed = true
			v = types.NewField(v.Pos(), v.Pkg(), v.Name(), typ, v.Embedded())
		}
		fields = append(fields, v)
		tags = append(tags, t.Tag(i))
	}
	if !changed {
		return t
	}
	return types.NewStruct(fields, tags)
}

func (s substitution) named(t *types.Named) types.Type {
	if t.TypeArgs().Len() == 0 {
		return t
	}
	changed := false
	var args []types.Type
	for a := range t.TypeArgs().Types() {
		n := s.typ(a)
		changed = changed || n != a
		args = append(args, n)
	}
	if !changed {
		return t
	}
	r, err := types.Instantiate(nil, t.Origin(), args, false)
	if err != nil {
		return t
	}
	return r
}

func (s substitution) iface(t *types.Interface) types.Type {
	changed := false
	var methods []*types.Func
	for m := range t.Methods() {
		sig := s.typ(m.Type()).(*types.Signature)
		if sig != m.Type() {
			changed = true
			m = types.NewFunc(m.Pos(), m.Pkg(), m.Name(), sig)
		}
		methods = append(methods, m)
	}
	if !changed {
		return t
	}
	return types.NewInterfaceType(methods, nil).Complete()
}
