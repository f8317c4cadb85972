package page

import (
	"crypto/sha256"
	"encoding/base64"
	"fmt"
	"strings"
)

// fromContents is the number of headings from which a page has a list of them.
const fromContents = 3

// render writes the page as it is in a folder.
func (p *Page) render(folder string) ([]byte, error) {
	if !p.ready() || p.err != nil {
		return nil, p.err
	}
	if err := p.reached(); err != nil {
		return nil, err
	}
	language := p.Language
	if language == "" {
		language = "en"
	}
	if !named.MatchString(language) {
		return nil, fmt.Errorf("page: %w: the language %q; give a tag such as en or de-AT", ErrContent, language)
	}
	var b strings.Builder
	fmt.Fprintf(&b, "<!DOCTYPE html>\n<html lang=\"%s\">\n<head>\n<meta charset=\"utf-8\" />\n", language)
	fmt.Fprintf(&b, "<meta http-equiv=\"Content-Security-Policy\" content=\"%s\" />\n", policy())
	b.WriteString("<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\" />\n<meta name=\"color-scheme\" content=\"light dark\" />\n")
	fmt.Fprintf(&b, "<title>%s</title>\n<style>%s</style>\n</head>\n<body>\n<main>\n<h1>%s</h1>\n", escape(p.title), style, escape(p.title))
	b.WriteString(p.list())
	for _, part := range p.body {
		if part.archive == nil {
			b.WriteString(part.html)
			continue
		}
		link, err := part.archive.markup(folder)
		if err != nil {
			return nil, err
		}
		b.WriteString(link)
	}
	b.WriteString("</main>\n<footer>\n")
	end, err := p.made()
	if err != nil {
		return nil, err
	}
	b.WriteString(end + "</footer>\n</body>\n</html>\n")
	return []byte(b.String()), nil
}

// policy permits the page its own style and pictures within itself, and nothing
// else: no scripts, nothing from elsewhere.
func policy() string {
	sum := sha256.Sum256([]byte(style))
	return "default-src 'none'; style-src 'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'; img-src data:; base-uri 'none'; form-action 'none'"
}

// list is the contents of a page that has some.
func (p *Page) list() string {
	if len(p.contents) < fromContents {
		return ""
	}
	var b strings.Builder
	b.WriteString("<nav aria-label=\"Contents\">\n<ul>\n")
	for _, h := range p.contents {
		fmt.Fprintf(&b, "<li class=\"level%d\"><a href=\"#%s\">%s</a></li>\n", h.level, escape(h.id), h.text)
	}
	b.WriteString("</ul>\n</nav>\n")
	return b.String()
}

// reached checks that links within the page lead somewhere.
func (p *Page) reached() error {
	for _, id := range p.targets {
		var n int
		switch {
		case p.ids[id] || id == "made":
			continue
		case scan(id, "table-%d", &n) && n >= 1 && n <= p.tables, scan(id, "figure-%d", &n) && n >= 1 && n <= p.figures:
			continue
		}
		return fmt.Errorf("page: %w: a link leads to #%s, which the page does not have; it has %s", ErrContent, id, p.parts())
	}
	return nil
}

func scan(id, format string, n *int) bool {
	_, err := fmt.Sscanf(id, format, n)
	return err == nil && fmt.Sprintf(format, *n) == id
}

// parts lists the ids that a link may lead to.
func (p *Page) parts() string {
	var list []string
	for _, h := range p.contents {
		list = append(list, "#"+h.id)
	}
	for i := range p.tables {
		list = append(list, fmt.Sprintf("#table-%d", i+1))
	}
	for i := range p.figures {
		list = append(list, fmt.Sprintf("#figure-%d", i+1))
	}
	return strings.Join(append(list, "#made"), ", ")
}
