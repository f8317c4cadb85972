package page

import (
	"fmt"
	"html"
	"strings"
	"unicode"
)

// deepest is how many groups of a formula may stand in each other.
const deepest = 60

// formula translates TeX into one MathML element that carries its source.
func formula(tex string, display bool) (string, error) {
	f := &reader{tex: []rune(strings.TrimSpace(tex))}
	if err := checkText("formula", tex); err != nil {
		return "", fmt.Errorf("%w %q: %w", ErrFormula, shortened(tex), err)
	}
	if len(f.tex) == 0 {
		return "", f.fault(0, "it is empty; write something between the dollar signs")
	}
	f.next()
	row, err := f.row()
	if err == nil && f.tok.kind != end {
		err = f.fault(f.tok.at, "%s has no partner before it", f.tok)
	}
	if err != nil {
		return "", err
	}
	how := ""
	if display {
		how = ` display="block"`
	}
	return `<math xmlns="http://www.w3.org/1998/Math/MathML"` + how + `><semantics>` + group(row) +
		`<annotation encoding="application/x-tex">` + html.EscapeString(string(f.tex)) + `</annotation></semantics></math>`, nil
}

// kind tells tokens apart.
type kind int

const (
	end kind = iota
	character
	number
	command // text is the name without the backslash
	open
	shut
	upper
	lower
	ampersand
	newline
	prime
)

type lexeme struct {
	kind kind
	text string
	at   int // index of its first character
}

// String is the token as it was written.
func (t lexeme) String() string {
	switch t.kind {
	case end:
		return "the end of the formula"
	case command:
		return `\` + t.text
	}
	return t.text
}

// reader reads a formula token by token.
type reader struct {
	tex   []rune
	pos   int // behind tok
	tok   lexeme
	depth int
	open  int // \left without \right
}

func (f *reader) fault(at int, format string, args ...any) error {
	return fmt.Errorf("%w %q, character %d: %s", ErrFormula, shortened(string(f.tex)), at+1, fmt.Sprintf(format, args...))
}

// shortened is the beginning of a long formula.
func shortened(tex string) string {
	const most = 120
	if r := []rune(tex); len(r) > most {
		return string(r[:most]) + "…"
	}
	return tex
}

var single = map[rune]kind{'{': open, '}': shut, '^': upper, '_': lower, '&': ampersand, '\'': prime}

// next moves to the next token; spaces mean nothing.
func (f *reader) next() {
	for f.pos < len(f.tex) && unicode.IsSpace(f.tex[f.pos]) {
		f.pos++
	}
	from := f.pos
	if from == len(f.tex) {
		f.tok = lexeme{end, "", from}
		return
	}
	c := f.tex[from]
	f.pos++
	what := character
	switch k, special := single[c]; {
	case special:
		what = k
	case c == '\\':
		f.name(from)
		return
	case digit(c):
		what = number
		for f.pos < len(f.tex) && (digit(f.tex[f.pos]) || f.tex[f.pos] == '.' && f.pos+1 < len(f.tex) && digit(f.tex[f.pos+1])) {
			f.pos++
		}
	}
	f.tok = lexeme{what, string(f.tex[from:f.pos]), from}
}

func digit(c rune) bool { return c >= '0' && c <= '9' }

func letter(c rune) bool { return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' }

// name reads what stands behind a backslash.
func (f *reader) name(from int) {
	if f.pos == len(f.tex) {
		f.tok = lexeme{command, "", from}
		return
	}
	f.pos++
	if letter(f.tex[f.pos-1]) {
		for f.pos < len(f.tex) && letter(f.tex[f.pos]) {
			f.pos++
		}
	}
	f.tok = lexeme{command, string(f.tex[from+1 : f.pos]), from}
	if f.tok.text == `\` {
		f.tok = lexeme{newline, `\\`, from}
	}
}

// raw takes the characters of a group in braces as they are; tok is the lexeme
// before the brace.
func (f *reader) raw(of lexeme) (string, error) {
	for f.pos < len(f.tex) && unicode.IsSpace(f.tex[f.pos]) {
		f.pos++
	}
	if f.pos < len(f.tex) && (letter(f.tex[f.pos]) || digit(f.tex[f.pos])) {
		f.pos++
		text := string(f.tex[f.pos-1 : f.pos])
		f.next()
		return text, nil
	}
	if f.pos == len(f.tex) || f.tex[f.pos] != '{' {
		return "", f.fault(of.at, "%s wants its words in braces, as in %s{abc}", of, of)
	}
	from := f.pos + 1
	for f.pos = from; f.pos < len(f.tex); f.pos++ {
		switch f.tex[f.pos] {
		case '{', '\\', '$':
			return "", f.fault(f.pos, "%s takes plain words; write commands and groups outside of it", of)
		case '}':
			text := string(f.tex[from:f.pos])
			f.pos++
			f.next()
			return text, nil
		}
	}
	return "", f.fault(of.at, "the brace of %s is not closed", of)
}

// atom is a piece of a formula with what scripts at it need to know.
type atom struct {
	text   string
	limits bool // scripts stand below and above
	word   bool // the name of a function: a space follows
}

// row reads atoms up to a token that ends one.
func (f *reader) row() ([]string, error) {
	if err := f.descend(); err != nil {
		return nil, err
	}
	defer f.ascend()
	var out []string
	for {
		switch f.tok.kind {
		case end, shut, ampersand, newline:
			return out, nil
		case command:
			if f.tok.text == "right" || f.tok.text == "end" || f.tok.text == "middle" && f.open > 0 {
				return out, nil
			}
		}
		a, err := f.scripted()
		if err != nil {
			return nil, err
		}
		out = append(out, a.text)
		if a.word && f.spaced() {
			out = append(out, space("0.1667em"))
		}
	}
}

func (f *reader) descend() error {
	if f.depth++; f.depth > deepest {
		return f.fault(f.tok.at, "more than %d groups in each other", deepest)
	}
	return nil
}

func (f *reader) ascend() { f.depth-- }

// spaced says that what follows the name of a function is set off from it.
func (f *reader) spaced() bool {
	switch f.tok.kind {
	case number, open:
		return true
	case character:
		return !strings.ContainsAny(f.tok.text, "([|,;.=+-<>)]/!")
	case command:
		_, is := identifiers[f.tok.text]
		return is || f.tok.text == "frac" || f.tok.text == "sqrt" || functions[f.tok.text] != 0
	}
	return false
}

// scripted reads an atom with the scripts at it.
func (f *reader) scripted() (atom, error) {
	var a atom
	var err error
	switch f.tok.kind {
	case upper, lower, prime:
		a.text = "<mrow></mrow>"
	default:
		if a, err = f.atom(); err != nil {
			return a, err
		}
	}
	var below, above, primes string
	for {
		at := f.tok
		switch at.kind {
		case prime:
			primes += "′"
			f.next()
			continue
		case upper, lower:
		default:
			return attached(a, below, above, primes), nil
		}
		f.next()
		s, err := f.argument(at)
		if err != nil {
			return a, err
		}
		slot := &above
		if at.kind == lower {
			slot = &below
		}
		if *slot != "" {
			return a, f.fault(at.at, "a second %s at the same place; put the first in braces with what it belongs to", at)
		}
		*slot = s
	}
}

func attached(a atom, below, above, primes string) atom {
	if primes != "" {
		above = group([]string{"<mo>" + primes + "</mo>", above})
	}
	tag, parts := "", a.text+below+above
	switch {
	case below != "" && above != "":
		tag = choose(a.limits, "munderover", "msubsup")
	case below != "":
		tag = choose(a.limits, "munder", "msub")
	case above != "":
		tag = choose(a.limits, "mover", "msup")
	default:
		return a
	}
	a.text = element(tag, parts)
	return a
}

func choose(yes bool, a, b string) string {
	if yes {
		return a
	}
	return b
}

// argument reads what a script or a command applies to: one atom or a group.
func (f *reader) argument(of lexeme) (string, error) {
	switch f.tok.kind {
	case end, shut, upper, lower, ampersand, newline, prime:
		return "", f.fault(of.at, "%s wants something behind it, in braces if it is more than one sign", of)
	}
	if err := f.descend(); err != nil {
		return "", err
	}
	defer f.ascend()
	a, err := f.atom()
	return a.text, err
}

// atom reads one piece without scripts.
func (f *reader) atom() (atom, error) {
	t := f.tok
	switch t.kind {
	case number:
		f.next()
		return atom{text: element("mn", t.text)}, nil
	case character:
		f.next()
		return f.sign(t)
	case open:
		return f.braces(t)
	case command:
		return f.command(t)
	}
	return atom{}, f.fault(t.at, "%s does not belong here", t)
}

func (f *reader) braces(from lexeme) (atom, error) {
	f.next()
	row, err := f.row()
	if err != nil {
		return atom{}, err
	}
	if f.tok.kind != shut {
		return atom{}, f.fault(from.at, "this brace is not closed before %s", f.tok)
	}
	f.next()
	return atom{text: group(row)}, nil
}

func element(tag, content string) string { return "<" + tag + ">" + content + "</" + tag + ">" }

func space(width string) string { return `<mspace width="` + width + `"></mspace>` }

// group is one element for a row.
func group(row []string) string {
	var parts []string
	for _, r := range row {
		if r != "" {
			parts = append(parts, r)
		}
	}
	if len(parts) == 1 {
		return parts[0]
	}
	return element("mrow", strings.Join(parts, ""))
}
