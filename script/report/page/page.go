package page

import (
	"errors"
	"fmt"
	"html"
	"io"
	"os"
	"runtime"
	"slices"
	"time"

	"ketloom/script/report"
)

var (
	// ErrFormula is wrapped by errors about formulas.
	ErrFormula = errors.New("formula")
	// ErrContent is wrapped by errors about words, links, pictures and names.
	ErrContent = errors.New("unfit content")
)

// Page is a page in the making. Its methods append to it, in order, and are not
// to be called by several goroutines at a time.
//
// Text, Table, Figure, Seed, Timing and Note return nothing: the first error of
// them is kept, and Write and Save return it and write nothing. Archive and Save,
// which touch files, return their errors at once.
type Page struct {
	// Reproducible leaves out what differs from run to run and from machine to
	// machine, so that the same content gives the same bytes: time of writing,
	// timings, versions, machine.
	Reproducible bool
	// Language is that of the words, as in the attribute lang of HTML; "" means "en".
	Language string
	// Script is what writes the page; New fills it. With nil, or without files,
	// the page says that the source was not at hand.
	Script *Script

	title    string
	body     []part
	contents []heading
	ids      map[string]bool
	targets  []string // ids that links of the prose lead to
	tables   int
	figures  int
	texts    int
	archives int
	seeds    []pair
	timings  []pair
	notes    []pair
	err      error
	now      func() time.Time
}

// part is a piece of the page: HTML, or a link to a file.
type part struct {
	html    string
	archive *archive
}

type pair struct{ name, value string }

// New returns an empty page with a title. Its Script is the one that calls New: the
// interpreter knows its source; a compiled program reads the Go files of the
// calling package from where it was built, if they are still there.
func New(title string) *Page {
	_, caller, _, _ := runtime.Caller(1) // "" if it is not known
	return By(title, &Script{Files: packageOf(caller), Args: slices.Clone(os.Args[1:])})
}

// By returns an empty page with a title that the given script writes.
func By(title string, script *Script) *Page {
	p := &Page{title: title, Script: script, ids: map[string]bool{}, now: time.Now}
	if title == "" {
		p.fail(fmt.Errorf("page: %w: no title; give one to New", ErrContent))
	}
	if err := checkText("title", title); err != nil {
		p.fail(fmt.Errorf("page: %w", err))
	}
	return p
}

// fail keeps the first error.
func (p *Page) fail(err error) {
	if p.err == nil {
		p.err = err
	}
}

// ready says that the page comes from New.
func (p *Page) ready() bool {
	if p.ids == nil {
		p.fail(fmt.Errorf("page: %w: a Page that New did not make; begin with page.New", ErrContent))
		return false
	}
	return true
}

func (p *Page) add(markup string) { p.body = append(p.body, part{html: markup}) }

// Text appends prose in Markdown (CommonMark, with tables and ~~struck~~ words).
// $...$ is a formula in the line, $$...$$ one of its own, \$ the sign; a formula in
// code is code. Headings take ids of their words, "section-the-gap", and stand one
// level below the title of the page. HTML is shown, not used.
//
// Errors: formulas (ErrFormula, with line and character), images, and links that
// are neither http, https, relative nor the id of a part of the page (ErrContent).
func (p *Page) Text(markdown string) {
	if !p.ready() {
		return
	}
	p.texts++
	out, err := p.prose(markdown)
	if err != nil {
		p.fail(fmt.Errorf("page: text %d: %w", p.texts, err))
		return
	}
	p.add(out)
}

// Seed notes the seed of a random start among what made the page.
func (p *Page) Seed(name string, seed uint64) {
	p.remember(&p.seeds, "seed", name, fmt.Sprint(seed))
}

// Timing notes how long a step took, to three digits. Reproducible leaves it out.
func (p *Page) Timing(name string, d time.Duration) {
	p.remember(&p.timings, "timing", name, rounded(d).String())
}

// Note notes anything else about the making of the page.
func (p *Page) Note(name, value string) { p.remember(&p.notes, "note", name, value) }

func (p *Page) remember(list *[]pair, what, name, value string) {
	if !p.ready() {
		return
	}
	err := errors.Join(checkText("name of a "+what, name), checkText(what+" "+name, value))
	if name == "" {
		err = fmt.Errorf("%w: a %s without a name", ErrContent, what)
	}
	if err != nil {
		p.fail(fmt.Errorf("page: %w", err))
		return
	}
	*list = append(*list, pair{name, value})
}

// rounded keeps three digits of a duration.
func rounded(d time.Duration) time.Duration {
	unit := time.Duration(1)
	for d/unit >= 1000 || d/unit <= -1000 {
		unit *= 10
	}
	return d.Round(unit)
}

// Table appends a table with its title as caption and a link to it as CSV. Columns
// of numbers are aligned at the right; in titles and units _{...} lowers and
// ^{...} raises. Its id is table-1, table-2 and so on.
func (p *Page) Table(t report.Table) {
	if !p.ready() {
		return
	}
	p.tables++
	out, err := tabular(t, fmt.Sprintf("table-%d", p.tables))
	if err != nil {
		p.fail(fmt.Errorf("page: table %d: %w", p.tables, err))
		return
	}
	p.add(out)
}

// Drawing is a figure of package report, or anything else that writes itself as
// SVG. If it has a method Data() (report.Table, error), its numbers are offered as
// CSV.
type Drawing interface {
	Write(w io.Writer, format string) error
}

// Figure appends a figure with a caption of one paragraph of Markdown and links to
// it as SVG and, if it has them, to its data. Its id is figure-1, figure-2 and
// so on. The picture must be a drawing alone: no scripts, no styles of their own,
// nothing from other files.
func (p *Page) Figure(figure Drawing, caption string) {
	if !p.ready() {
		return
	}
	p.figures++
	out, err := p.drawn(figure, caption, fmt.Sprintf("figure-%d", p.figures))
	if err != nil {
		p.fail(fmt.Errorf("page: figure %d: %w", p.figures, err))
		return
	}
	p.add(out)
}

// Write writes the page. Links to archives are relative to the current folder.
//
// Errors: the first one of the methods before, links to parts that the page does
// not have, or what w returns.
func (p *Page) Write(w io.Writer) error {
	data, err := p.render(".")
	if err != nil {
		return err
	}
	if _, err := w.Write(data); err != nil {
		return fmt.Errorf("page: %w", err)
	}
	return nil
}

func escape(s string) string { return html.EscapeString(s) }
