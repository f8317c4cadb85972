package page

import (
	"html"
	"strings"
	"unicode"
)

// sign translates a character that is no digit.
func (f *reader) sign(t lexeme) (atom, error) {
	c := []rune(t.text)[0]
	text := html.EscapeString(t.text)
	switch {
	case c == '~':
		return atom{text: space("0.3333em")}, nil
	case c == '-':
		return atom{text: "<mo>−</mo>"}, nil
	case strings.ContainsRune("()[]|‖⟨⟩⌊⌋⌈⌉", c):
		return atom{text: fence(t.text)}, nil
	case unicode.IsLetter(c):
		return atom{text: element("mi", text)}, nil
	case unicode.IsNumber(c):
		return atom{text: element("mn", text)}, nil
	case strings.ContainsRune("#$%", c):
		return atom{}, f.fault(t.at, `%s has a meaning of its own in TeX; write \%s for the sign`, t, t)
	case unicode.IsSymbol(c) || unicode.IsPunct(c):
		return atom{text: element("mo", text)}, nil
	}
	return atom{}, f.fault(t.at, "the character %q is not available", c)
}

// fence is a bracket that keeps its size.
func fence(text string) string {
	if text == "|" || text == "‖" {
		return `<mo stretchy="false" lspace="0" rspace="0">` + text + "</mo>"
	}
	return `<mo stretchy="false">` + text + "</mo>"
}

// command translates what begins with a backslash.
func (f *reader) command(t lexeme) (atom, error) {
	name := t.text
	if text, ok := identifiers[name]; ok {
		f.next()
		return atom{text: element("mi", text)}, nil
	}
	if text, ok := operators[name]; ok {
		f.next()
		return atom{text: element("mo", html.EscapeString(text))}, nil
	}
	if text, ok := brackets[name]; ok {
		f.next()
		return atom{text: fence(text)}, nil
	}
	if text, ok := sums[name]; ok {
		f.next()
		return atom{text: element("mo", text), limits: !strings.Contains("∫∬∮", text)}, nil
	}
	if width, ok := spaces[name]; ok {
		f.next()
		return atom{text: space(width)}, nil
	}
	if where, ok := functions[name]; ok {
		f.next()
		if where == limited {
			return atom{text: `<mo form="prefix" movablelimits="true" lspace="0" rspace="0.1667em">` + name + "</mo>", limits: true}, nil
		}
		return atom{text: element("mi", name), word: true}, nil
	}
	if mark, ok := accents[name]; ok {
		f.next()
		base, err := f.argument(t)
		if name == "underline" {
			return atom{text: element("munder", base+`<mo stretchy="true">_</mo>`)}, err
		}
		stretch := choose(strings.HasPrefix(name, "over") || strings.HasPrefix(name, "wide"), "true", "false")
		return atom{text: `<mover accent="true">` + base + `<mo stretchy="` + stretch + `">` + mark + "</mo></mover>"}, err
	}
	return f.construct(t)
}

// construct translates commands with arguments of their own.
func (f *reader) construct(t lexeme) (atom, error) {
	switch t.text {
	case "frac", "binom":
		return f.fraction(t)
	case "sqrt":
		return f.root(t)
	case "text", "mathrm", "operatorname", "mathbb", "mathcal":
		words, err := f.raw(t)
		if err != nil {
			return atom{}, err
		}
		return f.words(t, words)
	case "mathbf", "boldsymbol":
		f.next()
		a, err := f.argument(t)
		return atom{text: `<mrow class="bold">` + a + "</mrow>"}, err
	case "left":
		return f.brackets(t)
	case "begin":
		return f.table(t)
	case "ket", "bra":
		f.next()
		a, err := f.argument(t)
		if t.text == "ket" {
			return atom{text: group([]string{fence("|"), a, fence("⟩")})}, err
		}
		return atom{text: group([]string{fence("⟨"), a, fence("|")})}, err
	case "right", "end", "middle":
		return atom{}, f.fault(t.at, "%s has no partner before it", t)
	case "":
		return atom{}, f.fault(t.at, "a backslash with nothing behind it")
	}
	return atom{}, f.fault(t.at, "unknown command %s; the documentation of package page lists what there is, any Unicode sign can stand for itself", t)
}

func (f *reader) fraction(t lexeme) (atom, error) {
	f.next()
	a, err := f.argument(t)
	if err != nil {
		return atom{}, err
	}
	b, err := f.argument(t)
	if t.text == "binom" {
		return atom{text: "<mrow><mo>(</mo><mfrac linethickness=\"0\">" + a + b + "</mfrac><mo>)</mo></mrow>"}, err
	}
	return atom{text: element("mfrac", a+b)}, err
}

// root reads \sqrt{a} and \sqrt[n]{a}.
func (f *reader) root(t lexeme) (atom, error) {
	f.next()
	if f.tok.kind != character || f.tok.text != "[" {
		a, err := f.argument(t)
		return atom{text: element("msqrt", a)}, err
	}
	if err := f.descend(); err != nil {
		return atom{}, err
	}
	defer f.ascend()
	f.next()
	var index []string
	for f.tok.kind != character || f.tok.text != "]" {
		if f.tok.kind == end {
			return atom{}, f.fault(t.at, "the bracket of the degree is not closed")
		}
		a, err := f.scripted()
		if err != nil {
			return atom{}, err
		}
		index = append(index, a.text)
	}
	f.next()
	a, err := f.argument(t)
	return atom{text: element("mroot", a+group(index))}, err
}

// words translates the plain words of a command.
func (f *reader) words(t lexeme, words string) (atom, error) {
	if t.text == "text" {
		return atom{text: element("mtext", strings.ReplaceAll(html.EscapeString(words), " ", "\u00a0"))}, f.printable(t, words)
	}
	if strings.TrimSpace(words) == "" {
		return atom{}, f.fault(t.at, "%s holds nothing", t)
	}
	switch t.text {
	case "mathbb", "mathcal":
		var out strings.Builder
		for _, c := range words {
			styled, ok := alphabet(t.text, c)
			if !ok {
				return atom{}, f.fault(t.at, "%s has the capital letters A to Z, not %q", t, c)
			}
			out.WriteRune(styled)
		}
		return atom{text: element("mi", out.String())}, nil
	}
	return atom{text: `<mi mathvariant="normal">` + html.EscapeString(words) + "</mi>", word: t.text == "operatorname"}, f.printable(t, words)
}

func (f *reader) printable(t lexeme, words string) error {
	for _, c := range words {
		if c != '\n' && !unicode.IsPrint(c) {
			return f.fault(t.at, "the character %q is not available", c)
		}
	}
	return nil
}

// brackets reads \left( ... \middle| ... \right), which grow with what they hold.
func (f *reader) brackets(from lexeme) (atom, error) {
	a, err := f.bracket(from)
	if err != nil {
		return atom{}, err
	}
	f.open++
	defer func() { f.open-- }()
	out := []string{a}
	for {
		row, err := f.row()
		if err != nil {
			return atom{}, err
		}
		out = append(out, row...)
		t := f.tok
		if t.kind != command || t.text != "right" && t.text != "middle" {
			return atom{}, f.fault(from.at, `\left without its \right; write \right. for one that is not seen`)
		}
		a, err := f.bracket(t)
		if err != nil {
			return atom{}, err
		}
		out = append(out, a)
		if t.text == "right" {
			return atom{text: element("mrow", strings.Join(out, ""))}, nil
		}
	}
}

// bracket reads the sign behind \left, \middle or \right.
func (f *reader) bracket(of lexeme) (string, error) {
	f.next()
	t := f.tok
	text, ok := brackets[t.text]
	switch {
	case t.kind == command && ok:
	case t.kind == character && t.text == ".":
		text = ""
	case t.kind == character && strings.Contains("()[]|‖⟨⟩⌊⌋⌈⌉/", t.text):
		text = t.text
	case t.kind == character && (t.text == "<" || t.text == ">"):
		text = map[string]string{"<": "⟨", ">": "⟩"}[t.text]
	default:
		return "", f.fault(of.at, `%s wants a bracket behind it, as in \left( or \right\rangle, or a point for none`, of)
	}
	f.next()
	form := map[string]string{"left": "prefix", "middle": "infix", "right": "postfix"}[of.text]
	return `<mo form="` + form + `" fence="true" stretchy="true">` + text + "</mo>", nil
}

// tables are the environments, with their brackets.
var tables = map[string][2]string{
	"matrix": {}, "pmatrix": {"(", ")"}, "bmatrix": {"[", "]"}, "vmatrix": {"|", "|"}, "cases": {"{", ""}, "aligned": {},
}

// table reads \begin{...} with rows of cells.
func (f *reader) table(from lexeme) (atom, error) {
	name, err := f.raw(from)
	if err != nil {
		return atom{}, err
	}
	around, ok := tables[name]
	if !ok {
		return atom{}, f.fault(from.at, "there is no \\begin{%s}; use matrix, pmatrix, bmatrix, vmatrix, cases or aligned", name)
	}
	var rows, cells []string
	for {
		row, err := f.row()
		if err != nil {
			return atom{}, err
		}
		cells = append(cells, element("mtd", group(row)))
		t := f.tok
		switch {
		case t.kind == ampersand:
			f.next()
			continue
		case t.kind == newline:
			f.next()
			rows, cells = append(rows, element("mtr", strings.Join(cells, ""))), nil
			continue
		case t.kind != command || t.text != "end":
			return atom{}, f.fault(from.at, "\\begin{%s} without its \\end{%s}", name, name)
		}
		last, err := f.raw(t)
		if err != nil {
			return atom{}, err
		}
		if last != name {
			return atom{}, f.fault(t.at, "\\end{%s} does not fit \\begin{%s}", last, name)
		}
		rows = append(rows, element("mtr", strings.Join(cells, "")))
		return atom{text: framed(name, around, rows)}, nil
	}
}

func framed(name string, around [2]string, rows []string) string {
	class := ""
	if name == "cases" || name == "aligned" {
		class = ` class="` + name + `"`
	}
	text := "<mtable" + class + ">" + strings.Join(rows, "") + "</mtable>"
	if around[0] != "" {
		text = `<mo form="prefix" fence="true" stretchy="true">` + around[0] + "</mo>" + text
	}
	if around[1] != "" {
		text += `<mo form="postfix" fence="true" stretchy="true">` + around[1] + "</mo>"
	}
	return element("mrow", text)
}
