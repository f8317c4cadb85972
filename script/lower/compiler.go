package lower

import (
	"bytes"
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"reflect"
	"sort"
	"strings"
	"sync"

	"ketloom/script/machine"
	"ketloom/script/universe"
)

// Input is a script that type-checks, and the run it is lowered for.
type Input struct {
	Fset     *token.FileSet
	Files    []*ast.File
	Info     *types.Info
	Package  *types.Package
	Universe *universe.Universe
	Run      *machine.Run
}

// Program is a lowered script. Symbols is the content of the package h that
// Source imports; its values belong to the run.
type Program struct {
	Source  string
	Symbols map[string]reflect.Value
}

// Refusal is a construct that is not lowered.
type Refusal struct {
	Pos     token.Pos
	Message string // the construct and what to write instead
}

// compiler lowers one script.
type compiler struct {
	in       Input
	out      bytes.Buffer             // finished functions
	symbols  map[string]reflect.Value // package h
	shared   map[string]string        // key -> symbol or global that serves it
	count    int
	bodies   map[types.Object]body // declared functions
	names    map[string]string     // function or instance -> emitted name
	work     []func()              // functions still to be emitted
	globals  map[types.Object]*variable
	setup    []string // statements before the script's own initialisation
	stored   map[types.Type]reflect.Type
	open     map[*types.TypeName]bool
	refusals []Refusal
	refused  map[Refusal]bool
	facts    map[types.Object]*fact
	targets  map[types.Object]bool // labels that a goto names
	last     func()                // emits setup and main, after everything else
	texts    map[reflect.Type]string
	met      map[string]bool // types whose parts are known at run time
	methods  sync.Map        // what the run has in place of compiled methods
	mutex    sync.Mutex      // guards the universe while the script runs
}

// body is the source of a declared function.
type body struct {
	decl *ast.FuncDecl
	info *types.Info
}

// Compile lowers a script. If anything is refused the program is nil.
func Compile(in Input) (*Program, []Refusal) {
	c := &compiler{
		in: in, symbols: map[string]reflect.Value{}, shared: map[string]string{}, bodies: map[types.Object]body{},
		names: map[string]string{}, globals: map[types.Object]*variable{}, stored: map[types.Type]reflect.Type{},
		open: map[*types.TypeName]bool{}, refused: map[Refusal]bool{}, facts: map[types.Object]*fact{}, targets: map[types.Object]bool{}, texts: map[reflect.Type]string{}, met: map[string]bool{},
	}
	in.Run.Compiled = in.Universe.Compiled
	c.support()
	for _, f := range in.Files {
		c.collect(f, in.Info)
	}
	for _, g := range in.Universe.Sources() {
		c.collect(g.File, g.Info)
	}
	c.declareGlobals()
	c.entry()
	for len(c.work) > 0 {
		next := c.work[0]
		c.work = c.work[1:]
		next()
	}
	c.last()
	if len(c.refusals) > 0 {
		sort.SliceStable(c.refusals, func(i, j int) bool { return c.refusals[i].Pos < c.refusals[j].Pos })
		return nil, c.refusals
	}
	return &Program{Source: c.source(), Symbols: c.symbols}, nil
}

// collect finds the declared functions of a file and the facts about variables.
func (c *compiler) collect(f *ast.File, info *types.Info) {
	for _, d := range f.Decls {
		if fd, ok := d.(*ast.FuncDecl); ok {
			if obj := info.Defs[fd.Name]; obj != nil && fd.Body != nil {
				c.bodies[obj] = body{fd, info}
			}
			if fd.Body == nil {
				c.refuse(fd.Pos(), "a function without a body is not available; give it one")
			}
		}
	}
	c.study(f, info)
}

// source puts the emitted parts together.
func (c *compiler) source() string {
	var b strings.Builder
	b.WriteString("package main\n\nimport \"h\"\n\n")
	vars := make([]*variable, 0, len(c.globals))
	for _, v := range c.globals {
		vars = append(vars, v)
	}
	sort.Slice(vars, func(i, j int) bool { return vars[i].name < vars[j].name })
	for _, v := range vars {
		fmt.Fprintf(&b, "var %s %s\n", v.name, v.held())
	}
	b.WriteString(c.out.String())
	return b.String()
}

func (c *compiler) refuse(pos token.Pos, format string, args ...any) {
	r := Refusal{pos, fmt.Sprintf(format, args...)}
	if !c.refused[r] {
		c.refused[r] = true
		c.refusals = append(c.refusals, r)
	}
}

// fresh returns a new name.
func (c *compiler) fresh(prefix string) string {
	c.count++
	return fmt.Sprintf("%s%d", prefix, c.count)
}

// symbol enters v into package h under a new name and returns h.name.
func (c *compiler) symbol(prefix string, v reflect.Value) string {
	name := c.fresh(prefix)
	c.symbols[name] = v
	return "h." + name
}

// once returns what make returned for the first use of key.
func (c *compiler) once(key string, make func() string) string {
	if s, ok := c.shared[key]; ok {
		return s
	}
	s := make()
	c.shared[key] = s
	return s
}
