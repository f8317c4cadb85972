package page

import (
	"bytes"
	"fmt"

	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/renderer"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"
)

// kindFormula and kindDisplay mark formulas in the tree of a text.
var (
	kindFormula = ast.NewNodeKind("Formula")
	kindDisplay = ast.NewNodeKind("DisplayFormula")
)

// inlineFormula is a formula in a line of text.
type inlineFormula struct {
	ast.BaseInline
	mathml string
}

func (n *inlineFormula) Kind() ast.NodeKind            { return kindFormula }
func (n *inlineFormula) Dump(source []byte, level int) { ast.DumpHelper(n, source, level, nil, nil) }

// displayFormula is a formula in lines of its own.
type displayFormula struct {
	ast.BaseBlock
	start  int // in the source
	closed bool
	mathml string
}

func (n *displayFormula) Kind() ast.NodeKind            { return kindDisplay }
func (n *displayFormula) Dump(source []byte, level int) { ast.DumpHelper(n, source, level, nil, nil) }
func (n *displayFormula) IsRaw() bool                   { return true }

// faults is where parsers of formulas leave their first error.
var faults = parser.NewContextKey()

func leave(pc parser.Context, source []byte, at int, err error) {
	if err != nil && pc.Get(faults) == nil {
		pc.Set(faults, fmt.Errorf("line %d: %w", 1+bytes.Count(source[:min(at, len(source))], []byte("\n")), err))
	}
}

// dollarParser finds $...$ and $$...$$ in lines of text.
type dollarParser struct{}

func (dollarParser) Trigger() []byte { return []byte{'$'} }

func (dollarParser) Parse(parent ast.Node, block text.Reader, pc parser.Context) ast.Node {
	line, segment := block.PeekLine()
	mark := []byte("$")
	if bytes.HasPrefix(line, []byte("$$")) {
		mark = []byte("$$")
	}
	row, position := block.Position()
	var tex []byte
	from := len(mark)
	for {
		if i := closing(line, from, mark); i >= 0 {
			tex = append(tex, line[from:i]...)
			block.Advance(i + len(mark))
			out, err := formula(string(tex), len(mark) == 2)
			leave(pc, block.Source(), segment.Start, err)
			return &inlineFormula{mathml: out}
		}
		tex = append(tex, line[from:]...)
		block.AdvanceLine()
		if line, _ = block.PeekLine(); line == nil {
			break
		}
		from = 0
	}
	block.SetPosition(row, position)
	leave(pc, block.Source(), segment.Start, fmt.Errorf(`%w: %s begins one that has no end in this paragraph; close it, or write \$ for the sign`, ErrFormula, mark))
	return nil
}

// closing is the place of mark in line from a byte on, -1 if there is none. A
// backslash keeps what follows it.
func closing(line []byte, from int, mark []byte) int {
	for i := from; i < len(line); i++ {
		switch {
		case line[i] == '\\':
			i++
		case bytes.HasPrefix(line[i:], mark):
			return i
		}
	}
	return -1
}

// displayParser finds formulas whose $$ begins a line and whose other $$ ends
// one, before lists and headings look at the lines between.
type displayParser struct{}

func (displayParser) Trigger() []byte { return []byte{'$'} }

func (displayParser) Open(parent ast.Node, reader text.Reader, pc parser.Context) (ast.Node, parser.State) {
	line, segment := reader.PeekLine()
	pos := pc.BlockOffset()
	if pos < 0 || !bytes.HasPrefix(line[pos:], []byte("$$")) {
		return nil, parser.NoChildren
	}
	n := &displayFormula{start: segment.Start + pos}
	if !n.take(line, segment, pos+2) {
		return nil, parser.NoChildren // words follow: a formula in a line of text
	}
	reader.AdvanceToEOL()
	return n, parser.NoChildren
}

// take adds the line from a byte on and looks for the end of the formula. It is
// false if something follows the end.
func (n *displayFormula) take(line []byte, segment text.Segment, from int) bool {
	stop := closing(line, from, []byte("$$"))
	if stop < 0 {
		n.Lines().Append(text.NewSegment(segment.Start+from-segment.Padding, segment.Stop))
		return true
	}
	n.closed = true
	n.Lines().Append(text.NewSegment(segment.Start+from-segment.Padding, segment.Start+stop-segment.Padding))
	return util.IsBlank(line[stop+2:])
}

func (displayParser) Continue(node ast.Node, reader text.Reader, pc parser.Context) parser.State {
	n := node.(*displayFormula)
	if n.closed {
		return parser.Close
	}
	line, segment := reader.PeekLine()
	if !n.take(line, segment, segment.Padding) {
		leave(pc, reader.Source(), segment.Start, fmt.Errorf("%w: words follow the $$ that ends it; begin a new line", ErrFormula))
	}
	reader.AdvanceToEOL()
	return parser.Continue | parser.NoChildren
}

func (displayParser) Close(node ast.Node, reader text.Reader, pc parser.Context) {
	n := node.(*displayFormula)
	if !n.closed {
		leave(pc, reader.Source(), n.start, fmt.Errorf("%w: this $$ has no end; close it with $$ at the end of a line", ErrFormula))
		return
	}
	out, err := formula(string(n.Lines().Value(reader.Source())), true)
	leave(pc, reader.Source(), n.start, err)
	n.mathml = out
}

func (displayParser) CanInterruptParagraph() bool { return true }
func (displayParser) CanAcceptIndentedLine() bool { return false }

// formulaRenderer writes formulas that have been translated.
type formulaRenderer struct{}

func (formulaRenderer) RegisterFuncs(r renderer.NodeRendererFuncRegisterer) {
	r.Register(kindFormula, func(w util.BufWriter, source []byte, n ast.Node, entering bool) (ast.WalkStatus, error) {
		if entering {
			_, _ = w.WriteString(n.(*inlineFormula).mathml)
		}
		return ast.WalkSkipChildren, nil
	})
	r.Register(kindDisplay, func(w util.BufWriter, source []byte, n ast.Node, entering bool) (ast.WalkStatus, error) {
		if entering {
			_, _ = w.WriteString(`<div class="formula" tabindex="0">` + n.(*displayFormula).mathml + "</div>\n")
		}
		return ast.WalkSkipChildren, nil
	})
}
