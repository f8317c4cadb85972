package manual

import (
	_ "embed"
	"encoding/json"
	"errors"
	"fmt"
	"slices"
	"sort"
	"strings"
	"sync"
)

//go:embed pages.json
var pages []byte

// Package is the documentation of one package.
type Package struct {
	Path    string  // import path
	Text    string  // the package comment
	Entries []Entry // exported names, sorted; methods stand as Type.Method
}

// Entry is the documentation of one exported name.
type Entry struct {
	Name        string
	Declaration string // as it stands in the source, without bodies
	Text        string
}

// ErrNoPage is wrapped by the errors for subjects that there is no page of.
var ErrNoPage = errors.New("no such page")

var load = sync.OnceValues(func() ([]Package, error) {
	var list []Package
	if err := json.Unmarshal(pages, &list); err != nil {
		return nil, fmt.Errorf("manual: the pages are damaged: %w", err)
	}
	return list, nil
})

// Packages returns the import paths of all packages with pages, sorted.
func Packages() []string {
	list, err := load()
	if err != nil {
		return nil
	}
	var paths []string
	for _, p := range list {
		paths = append(paths, p.Path)
	}
	sort.Strings(paths)
	return paths
}

// Page returns the page of a subject as plain text: a package by its import path or
// the end of it (basis, operator/matrix, matrix), a name in a package (basis.New) or
// a method (basis.Basis.Len, lanczos.Result.String). Capital letters may be left out.
//
// Errors wrap ErrNoPage and name what comes close.
func Page(subject string) (string, error) {
	list, err := load()
	if err != nil {
		return "", err
	}
	where, name, named := split(subject)
	var close []string
	for _, p := range list {
		if !strings.EqualFold(p.Path, where) && !strings.HasSuffix(strings.ToLower(p.Path), "/"+strings.ToLower(where)) {
			continue
		}
		if !named {
			return p.page(), nil
		}
		for _, e := range p.Entries {
			if strings.EqualFold(e.Name, name) {
				return p.entry(e), nil
			}
			if strings.Contains(strings.ToLower(e.Name), strings.ToLower(name)) {
				close = append(close, where+"."+e.Name)
			}
		}
	}
	return "", noPage(subject, close)
}

// split divides a subject into its package and the name in it.
func split(subject string) (where, name string, named bool) {
	slash := strings.LastIndexByte(subject, '/') + 1
	where, name, named = strings.Cut(subject[slash:], ".")
	return subject[:slash] + where, name, named && name != ""
}

func noPage(subject string, close []string) error {
	switch {
	case len(close) > 0:
		slices.Sort(close)
		return fmt.Errorf("manual: %w: %q; close to it: %s", ErrNoPage, subject, strings.Join(close[:min(len(close), 8)], ", "))
	default:
		return fmt.Errorf("manual: %w: %q; the packages are %s", ErrNoPage, subject, strings.Join(Packages(), ", "))
	}
}

// page writes a package: its comment and the first sentence of every name.
func (p Package) page() string {
	var b strings.Builder
	fmt.Fprintf(&b, "package %s\n\n%s\n", p.Path, strings.TrimSpace(p.Text))
	wide := 0
	for _, e := range p.Entries {
		wide = max(wide, len(e.Name))
	}
	b.WriteString("\nNames\n\n")
	for _, e := range p.Entries {
		fmt.Fprintf(&b, "  %-*s  %s\n", min(wide, 34), e.Name, sentence(e.Text))
	}
	return b.String()
}

// entry writes one name.
func (p Package) entry(e Entry) string {
	var b strings.Builder
	fmt.Fprintf(&b, "package %s\n\n%s\n", p.Path, strings.TrimSpace(e.Declaration))
	if e.Text != "" {
		fmt.Fprintf(&b, "\n%s\n", strings.TrimSpace(e.Text))
	}
	first := true
	for _, m := range p.Entries {
		if strings.HasPrefix(m.Name, e.Name+".") {
			if first {
				b.WriteString("\nMethods\n\n")
				first = false
			}
			fmt.Fprintf(&b, "  %s\n      %s\n", firstLine(m.Declaration), sentence(m.Text))
		}
	}
	return b.String()
}

func firstLine(text string) string {
	line, _, _ := strings.Cut(text, "\n")
	return line
}

// sentence returns the first sentence of a text on one line.
func sentence(text string) string {
	words := strings.Join(strings.Fields(text), " ")
	if end := strings.Index(words, ". "); end >= 0 {
		words = words[:end+1]
	}
	if runes := []rune(words); len(runes) > 110 {
		words = string(runes[:109]) + "…"
	}
	return words
}
