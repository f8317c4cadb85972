package page

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strconv"
	"strings"
)

const (
	svgSpace   = "http://www.w3.org/2000/svg"
	xmlSpace   = "http://www.w3.org/XML/1998/namespace"
	xlinkSpace = "http://www.w3.org/1999/xlink"
)

// drawing lists the elements that a picture may have.
var drawing = words(`svg g path rect circle ellipse line polyline polygon text tspan title desc defs use symbol
	linearGradient radialGradient stop clipPath mask pattern marker image`)

// looks are the properties that a picture may set with the attribute style; each
// is an attribute as well, and becomes one, since the page permits no styles but
// its own.
var looks = words(`fill fill-opacity fill-rule stroke stroke-width stroke-opacity stroke-dasharray stroke-dashoffset stroke-linecap
	stroke-linejoin stroke-miterlimit opacity color display visibility clip-path clip-rule mask stop-color stop-opacity
	font-family font-size font-style font-weight font-variant font-stretch text-anchor dominant-baseline alignment-baseline
	baseline-shift letter-spacing word-spacing text-decoration text-rendering shape-rendering image-rendering color-interpolation
	marker-start marker-mid marker-end paint-order vector-effect overflow`)

func words(list string) map[string]bool {
	set := map[string]bool{}
	for _, w := range strings.Fields(list) {
		set[w] = true
	}
	return set
}

// inlined writes an SVG picture so that it can stand in the page: without
// declarations, with ids that begin with the id of the figure, and with a size
// that follows the page.
func inlined(svg []byte, id string) (string, error) {
	d := xml.NewDecoder(bytes.NewReader(svg))
	var b strings.Builder
	depth := 0
	for {
		t, err := d.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return "", fmt.Errorf("%w: the picture is not SVG: %v", ErrContent, err)
		}
		switch t := t.(type) {
		case xml.StartElement:
			if depth == 0 && (t.Name.Local != "svg" || b.Len() > 0) {
				return "", fmt.Errorf("%w: the picture is not one element svg but has %s", ErrContent, t.Name.Local)
			}
			if err := start(&b, t, id, depth == 0); err != nil {
				return "", err
			}
			depth++
		case xml.EndElement:
			depth--
			b.WriteString("</" + t.Name.Local + ">")
		case xml.CharData:
			if depth > 0 {
				b.WriteString(escape(string(t)))
			}
		}
	}
	if b.Len() == 0 {
		return "", fmt.Errorf("%w: the picture is empty; Write must write SVG", ErrContent)
	}
	return b.String(), nil
}

func start(b *strings.Builder, t xml.StartElement, id string, root bool) error {
	if t.Name.Space != svgSpace && t.Name.Space != "" || !drawing[t.Name.Local] {
		return fmt.Errorf("%w: the picture has the element %s; a figure is a drawing alone", ErrContent, t.Name.Local)
	}
	var list attributes
	style := ""
	if root {
		list.set("xmlns", svgSpace)
		list.set("role", "img")
		if v := box(t.Attr); v != "" {
			list.set("viewBox", v)
		}
	}
	for _, a := range t.Attr {
		switch {
		case a.Name.Space == "" && a.Name.Local == "style":
			style = a.Value
			continue
		case root && (a.Name.Local == "role" || a.Name.Local == "viewBox"):
			continue
		}
		if err := list.take(t.Name.Local, a, id); err != nil {
			return err
		}
	}
	if err := list.style(style, id); err != nil {
		return err
	}
	b.WriteString("<" + t.Name.Local)
	for _, p := range list {
		b.WriteString(" " + p.name + `="` + escape(p.value) + `"`)
	}
	b.WriteString(">")
	return nil
}

// attributes of an element, in order.
type attributes []pair

func (l *attributes) set(name, value string) {
	for i := range *l {
		if (*l)[i].name == name {
			(*l)[i].value = value
			return
		}
	}
	*l = append(*l, pair{name, value})
}

// box is the viewBox of a picture; where there is none it follows from the size.
func box(attributes []xml.Attr) string {
	size := map[string]string{}
	for _, a := range attributes {
		size[a.Name.Local] = a.Value
	}
	if v := size["viewBox"]; v != "" {
		return v
	}
	w, err := strconv.ParseFloat(strings.TrimSuffix(size["width"], "px"), 64)
	h, err2 := strconv.ParseFloat(strings.TrimSuffix(size["height"], "px"), 64)
	if err != nil || err2 != nil {
		return ""
	}
	return fmt.Sprintf("0 0 %g %g", w, h)
}

var (
	named    = regexp.MustCompile(`^[A-Za-z][A-Za-z0-9-]*$`)
	inside   = regexp.MustCompile(`url\(\s*['"]?#([^)'"]*)['"]?\s*\)`)
	embedded = regexp.MustCompile(`^data:image/(png|jpeg);base64,[A-Za-z0-9+/=\s]*$`)
)

// take adds an attribute of a picture, fitted to the page.
func (l *attributes) take(of string, a xml.Attr, id string) error {
	name, value := a.Name.Local, a.Value
	refused := fmt.Errorf("%w: the picture has %s=%.60q; a figure has no scripts and nothing from other files", ErrContent, name, value)
	switch {
	case a.Name.Space == "xmlns" || a.Name.Space == xmlSpace || name == "xmlns" || name == "class":
		return nil // namespaces are known, classes have no styles here
	case a.Name.Space != "" && !(a.Name.Space == xlinkSpace && name == "href"):
		return refused
	case !named.MatchString(name) || strings.HasPrefix(strings.ToLower(name), "on"):
		return refused
	case name == "id":
		value = id + "-" + value
	case name == "aria-labelledby" || name == "aria-describedby":
		list := strings.Fields(value)
		for i := range list {
			list[i] = id + "-" + list[i]
		}
		value = strings.Join(list, " ")
	case name == "href":
		target, local := strings.CutPrefix(value, "#")
		switch {
		case local:
			value = "#" + id + "-" + target
		case of != "image" || !embedded.MatchString(value):
			return refused
		}
	}
	value = inside.ReplaceAllString(value, "url(#"+id+"-$1)")
	if outside(value) {
		return refused
	}
	l.set(name, value)
	return nil
}

// outside says that a value of a property reaches out of the page.
func outside(value string) bool {
	if strings.Contains(value, `\`) {
		return true // could spell anything
	}
	low := strings.ToLower(value)
	return strings.Count(low, "url(") != strings.Count(value, "url(#") || strings.Contains(low, "javascript:")
}

// style adds the properties of an attribute style, which go before others.
func (l *attributes) style(style, id string) error {
	for _, declaration := range strings.Split(style, ";") {
		if strings.TrimSpace(declaration) == "" {
			continue
		}
		name, value, ok := strings.Cut(declaration, ":")
		name, value = strings.TrimSpace(name), strings.TrimSpace(value)
		if !ok || !looks[name] {
			return fmt.Errorf("%w: the picture has the style %q, which is no attribute of a drawing", ErrContent, strings.TrimSpace(declaration))
		}
		value = inside.ReplaceAllString(value, "url(#"+id+"-$1)")
		if outside(value) {
			return fmt.Errorf("%w: the picture has the style %q; a figure has nothing from other files", ErrContent, strings.TrimSpace(declaration))
		}
		l.set(name, value)
	}
	return nil
}
