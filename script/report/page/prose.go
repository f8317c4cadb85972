package page

import (
	"bytes"
	"fmt"
	"html"
	"net/url"
	"strings"
	"unicode"
	"unicode/utf8"

	"github.com/yuin/goldmark"
	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/extension"
	table "github.com/yuin/goldmark/extension/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/renderer"
	xhtml "github.com/yuin/goldmark/renderer/html"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"
)

// markdown reads prose. It has no parsers for HTML: tags are text, and are shown
// as they were written.
func markdown() goldmark.Markdown {
	return goldmark.New(
		goldmark.WithParser(parser.NewParser(
			parser.WithBlockParsers(
				util.Prioritized(displayParser{}, 50),
				util.Prioritized(parser.NewSetextHeadingParser(), 100),
				util.Prioritized(parser.NewThematicBreakParser(), 200),
				util.Prioritized(parser.NewListParser(), 300),
				util.Prioritized(parser.NewListItemParser(), 400),
				util.Prioritized(parser.NewCodeBlockParser(), 500),
				util.Prioritized(parser.NewATXHeadingParser(), 600),
				util.Prioritized(parser.NewFencedCodeBlockParser(), 700),
				util.Prioritized(parser.NewBlockquoteParser(), 800),
				util.Prioritized(parser.NewParagraphParser(), 1000),
			),
			parser.WithInlineParsers(
				util.Prioritized(dollarParser{}, 50),
				util.Prioritized(parser.NewCodeSpanParser(), 100),
				util.Prioritized(parser.NewLinkParser(), 200),
				util.Prioritized(parser.NewAutoLinkParser(), 300),
				util.Prioritized(parser.NewEmphasisParser(), 500),
			),
			parser.WithParagraphTransformers(parser.DefaultParagraphTransformers()...),
		)),
		goldmark.WithExtensions(
			extension.NewTable(extension.WithTableCellAlignMethod(extension.TableCellAlignNone)),
			extension.Strikethrough,
		),
		goldmark.WithRendererOptions(
			xhtml.WithXHTML(),
			renderer.WithNodeRenderers(util.Prioritized(formulaRenderer{}, 100), util.Prioritized(boxRenderer{}, 100)),
		),
	)
}

// boxRenderer puts wide things into boxes that scroll.
type boxRenderer struct{}

func (boxRenderer) RegisterFuncs(r renderer.NodeRendererFuncRegisterer) {
	r.Register(table.KindTable, func(w util.BufWriter, source []byte, n ast.Node, entering bool) (ast.WalkStatus, error) {
		_, _ = w.WriteString(choose(entering, "<div class=\"box\" tabindex=\"0\"><table>\n", "</table></div>\n"))
		return ast.WalkContinue, nil
	})
}

// heading is an entry of the list of contents.
type heading struct {
	level    int
	id, text string // text is HTML
}

// prose translates Markdown; headings go to the contents.
func (p *Page) prose(source string) (string, error) {
	if err := checkText("text", source); err != nil {
		return "", err
	}
	md, pc, src := markdown(), parser.NewContext(), []byte(source)
	doc := md.Parser().Parse(text.NewReader(src), parser.WithContext(pc))
	if err, ok := pc.Get(faults).(error); ok {
		return "", err
	}
	if err := ast.Walk(doc, func(n ast.Node, entering bool) (ast.WalkStatus, error) {
		if !entering {
			return ast.WalkContinue, nil
		}
		return ast.WalkContinue, p.adapt(n, src)
	}); err != nil {
		return "", err
	}
	var out bytes.Buffer
	if err := md.Renderer().Render(&out, src, doc); err != nil {
		return "", err
	}
	// References such as &#12; have become characters.
	if err := checkText("text", out.String()); err != nil {
		return "", err
	}
	return out.String(), nil
}

// line is the caption of something: Markdown of one paragraph.
func (p *Page) line(source string) (string, error) {
	out, err := p.prose(source)
	if err != nil {
		return "", err
	}
	out = strings.TrimSpace(out)
	inner, ok := strings.CutPrefix(out, "<p>")
	inner, end := strings.CutSuffix(inner, "</p>")
	if out != "" && (!ok || !end || strings.Contains(inner, "<p>")) {
		return "", fmt.Errorf("%w: %q is not one paragraph; give a caption without headings, lists and empty lines", ErrContent, source)
	}
	return inner, nil
}

// adapt fits a node of a text to the page and refuses what has no place in it.
func (p *Page) adapt(n ast.Node, src []byte) error {
	switch n := n.(type) {
	case *ast.Image:
		return fmt.Errorf("%w: the image %q; a page loads nothing from elsewhere: use the method Figure", ErrContent, n.Destination)
	case *ast.Link:
		return p.link(string(util.URLEscape(n.Destination, true))) // as it will be written
	case *ast.AutoLink:
		address := string(n.URL(src))
		if n.AutoLinkType == ast.AutoLinkEmail {
			address = "mailto:" + strings.TrimPrefix(address, "mailto:")
		}
		return p.link(address)
	case *ast.Heading:
		n.Level = min(n.Level+1, 6)
		p.register(n, src)
	case *table.TableCell:
		class := map[table.Alignment]string{table.AlignRight: "right", table.AlignCenter: "centre"}[n.Alignment]
		if class != "" {
			n.SetAttributeString("class", []byte(class))
		}
		if n.Parent().Kind() == table.KindTableHeader {
			n.SetAttributeString("scope", []byte("col"))
		}
	}
	return nil
}

// link accepts addresses of the web, of files beside the page and of its parts.
func (p *Page) link(to string) error {
	refused := func(why string) error {
		return fmt.Errorf("%w: the link %q %s; give http://, https://, a path relative to the page, or # with the id of a part", ErrContent, to, why)
	}
	u, err := url.Parse(to)
	switch {
	case err != nil:
		return refused("cannot be read")
	case u.Scheme != "" && u.Scheme != "http" && u.Scheme != "https":
		return refused("has the scheme " + u.Scheme)
	case u.Scheme != "" && u.Host == "":
		return refused("has no host")
	case u.Scheme == "" && (u.Host != "" || strings.HasPrefix(to, "/") || strings.ContainsAny(to, "\\")):
		return refused("is not relative")
	case to == "" || to == "#":
		return refused("leads nowhere")
	case strings.HasPrefix(to, "#"):
		p.targets = append(p.targets, u.Fragment)
	}
	return nil
}

// register gives a heading an id that no other has.
func (p *Page) register(n *ast.Heading, src []byte) {
	words, markup := visible(n, src)
	id := slug(words)
	for count := 2; p.ids[id]; count++ {
		id = fmt.Sprintf("%s-%d", slug(words), count)
	}
	p.ids[id] = true
	n.SetAttributeString("id", []byte(id))
	p.contents = append(p.contents, heading{n.Level, id, markup})
}

// visible is what a heading says, as words and as HTML without links.
func visible(n ast.Node, src []byte) (words, markup string) {
	for c := n.FirstChild(); c != nil; c = c.NextSibling() {
		switch c := c.(type) {
		case *inlineFormula:
			markup += c.mathml
		case *ast.Text:
			plain := string(util.UnescapePunctuations(c.Value(src)))
			words, markup = words+plain, markup+html.EscapeString(html.UnescapeString(plain))
			if c.SoftLineBreak() {
				words, markup = words+" ", markup+" "
			}
		case *ast.String:
			words, markup = words+string(c.Value), markup+html.EscapeString(string(c.Value))
		default:
			w, m := visible(c, src)
			words, markup = words+w, markup+m
		}
	}
	return words, markup
}

// slug is the id of a heading: its letters and digits, joined by dashes.
func slug(words string) string {
	parts := strings.FieldsFunc(strings.ToLower(words), func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) })
	return strings.Join(append([]string{"section"}, parts...), "-")
}

// checkText refuses what no HTML file can hold.
func checkText(what, s string) error {
	if !utf8.ValidString(s) {
		return fmt.Errorf("%w: the %s is not UTF-8 text: %.60q", ErrContent, what, s)
	}
	for i, r := range s {
		if unicode.IsControl(r) && r != '\n' && r != '\t' && r != '\r' || r&0xFFFE == 0xFFFE {
			return fmt.Errorf("%w: the %s has the control character %q at byte %d; take it out", ErrContent, what, r, i)
		}
	}
	return nil
}
