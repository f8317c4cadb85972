package page

import (
	"bytes"
	"encoding/base64"
	"encoding/xml"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
	"time"

	"ketloom/script/report"
)

var update = flag.Bool("update", false, "write the pages of testdata anew")

// written saves a page and returns its bytes.
func written(t *testing.T, p *Page, folder string) []byte {
	t.Helper()
	path := filepath.Join(folder, "page.html")
	if err := p.Save(path); err != nil {
		t.Fatal(err)
	}
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// node is an element of a page.
type node struct {
	name string
	attr map[string]string
}

// elements parses a page strictly, as XML, and fails if it is not well formed.
func elements(t *testing.T, page []byte) (list []node, words string) {
	t.Helper()
	d := xml.NewDecoder(bytes.NewReader(page))
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			return list, words
		}
		if err != nil {
			t.Fatalf("not well formed: %v", err)
		}
		switch token := token.(type) {
		case xml.StartElement:
			n := node{token.Name.Local, map[string]string{}}
			for _, a := range token.Attr {
				if _, twice := n.attr[a.Name.Local]; twice {
					t.Errorf("%s has %s twice", n.name, a.Name.Local)
				}
				n.attr[a.Name.Local] = a.Value
			}
			list = append(list, n)
		case xml.CharData:
			words += string(token)
		}
	}
}

// sound fails unless a page is well formed, its ids are unique, and nothing in it
// runs or loads anything.
func sound(t *testing.T, page []byte) ([]node, string) {
	t.Helper()
	list, words := elements(t, page)
	ids := map[string]bool{}
	for _, n := range list {
		switch n.name {
		case "script", "iframe", "object", "embed", "link", "base", "form", "img", "foreignObject":
			t.Errorf("the page has an element %s", n.name)
		}
		for name, value := range n.attr {
			low := strings.ToLower(value)
			switch {
			case strings.HasPrefix(name, "on"), name == "style", name == "src", name == "srcset":
				t.Errorf("%s has %s=%q", n.name, name, value)
			case strings.Contains(low, "javascript:"), strings.Contains(low, "url(") && !strings.Contains(low, "url(#"):
				t.Errorf("%s has %s=%q", n.name, name, value)
			case name == "xmlns" || n.name == "a" && name == "href":
			case strings.Contains(low, "http:"), strings.Contains(low, "https:"), strings.HasPrefix(low, "//"):
				t.Errorf("%s has %s=%q", n.name, name, value)
			}
		}
		if id, ok := n.attr["id"]; ok {
			if ids[id] {
				t.Errorf("the id %s is there twice", id)
			}
			ids[id] = true
		}
	}
	for _, n := range list {
		if to, ok := strings.CutPrefix(n.attr["href"], "#"); ok && !ids[to] {
			t.Errorf("a link leads to #%s, which is not there", to)
		}
	}
	return list, words
}

// The page was looked at in a browser when it was stored; the test keeps it.
func TestPageIsAsStored(t *testing.T) {
	p, folder := sample(t)
	p.Reproducible = true
	got := written(t, p, folder)
	path := filepath.Join("testdata", "page.html")
	if *update {
		if err := os.WriteFile(path, got, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Errorf("the page differs from %s; look at it in a browser, then run the test with -update", path)
	}
	if again := written(t, p, folder); !bytes.Equal(again, got) {
		t.Error("saving again gives other bytes")
	}
}

func TestPageIsSound(t *testing.T) {
	p, folder := sample(t)
	list, words := sound(t, written(t, p, folder))
	count := map[string]int{}
	for _, n := range list {
		count[n.name]++
	}
	for name, want := range map[string]int{"h1": 1, "h2": 2, "nav": 1, "table": 2, "caption": 1, "figure": 2, "figcaption": 1, "svg": 1, "details": 1, "summary": 1, "main": 1} {
		if count[name] != want {
			t.Errorf("%d elements %s; want %d", count[name], name, want)
		}
	}
	for _, want := range []string{"<b>tags</b>", "code $x$", "−24.439397", "−7", "–", "1.23s", "2001-02-03T04:05:06Z", `-l "3 x 4"`,
		"func main() {} // a < b && c", "two <of> them", "3 bytes",
		// SHA-256 of "abc": FIPS 180-2 (2002), appendix B.1
		"ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"} {
		if !strings.Contains(words, want) {
			t.Errorf("the page does not say %q", want)
		}
	}
}

func TestReproducibleLeavesOutWhatChanges(t *testing.T) {
	p, folder := sample(t)
	p.Reproducible = true
	_, words := sound(t, written(t, p, folder))
	for _, not := range []string{"1.23s", "2001-", "Machine", "Modules"} {
		if strings.Contains(words, not) {
			t.Errorf("the page says %q", not)
		}
	}
	if !strings.Contains(words, "Seed of lanczos") {
		t.Error("the page does not say the seed")
	}
}

func TestDownloadsHoldTheData(t *testing.T) {
	p, folder := sample(t)
	list, _ := elements(t, written(t, p, folder))
	got := map[string]string{}
	for _, n := range list {
		if name, ok := n.attr["download"]; ok {
			_, data, _ := strings.Cut(n.attr["href"], ";base64,")
			b, err := base64.StdEncoding.DecodeString(data)
			if err != nil {
				t.Fatal(err)
			}
			got[name] = string(b)
		}
	}
	want := "Sector,Energy (V_{1}),Residual of the pair (V_{1}),Products,Converged\n\"(0,0)\",-24.439397399,1e-12,120,true\n(1,0) & <more>,3.5,,-7,false\n"
	if got["table-1.csv"] != strings.Replace(want, "(1,0) & <more>", `"(1,0) & <more>"`, 1) {
		t.Errorf("CSV:\n%s", got["table-1.csv"])
	}
	if !strings.HasPrefix(got["figure-1.svg"], "<?xml") || !strings.Contains(got["figure-1.svg"], "</svg>") {
		t.Errorf("SVG: %.80q", got["figure-1.svg"])
	}
}

// square is a figure that gives its numbers, too.
type square struct{ svg string }

func (s square) Write(w io.Writer, format string) error {
	if format != "svg" {
		return errors.New("only svg")
	}
	_, err := io.WriteString(w, s.svg)
	return err
}

func (s square) Data() (report.Table, error) {
	if s.svg == "" {
		return report.Table{}, errors.New("no numbers")
	}
	return report.Table{Columns: []report.Column{{Title: "x"}}, Rows: [][]any{{1}}}, nil
}

const svgStart = `<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" width="10" height="20px">`

func TestFiguresStandInThePage(t *testing.T) {
	p := New("t")
	picture := svgStart + `<defs><clipPath id="c"><rect width="1" height="2"/></clipPath></defs>` +
		`<g fill="red" style="fill: blue; clip-path: url(#c)"><use xlink:href="#c"/><text font-family="a">1 &lt; 2 &amp; "3"</text></g></svg>`
	p.Figure(square{picture}, "")
	p.Figure(square{picture}, "again")
	var b bytes.Buffer
	if err := p.Write(&b); err != nil {
		t.Fatal(err)
	}
	sound(t, b.Bytes())
	want := `<svg xmlns="http://www.w3.org/2000/svg" role="img" viewBox="0 0 10 20" width="10" height="20px"><defs><clipPath id="figure-2-c"><rect width="1" height="2"></rect></clipPath></defs>` +
		`<g fill="blue" clip-path="url(#figure-2-c)"><use href="#figure-2-c"></use><text font-family="a">1 &lt; 2 &amp; &#34;3&#34;</text></g></svg>`
	if !strings.Contains(b.String(), want) {
		t.Errorf("want %s in\n%s", want, b.String())
	}
	if !strings.Contains(b.String(), `<a download="figure-1.csv" aria-label="figure-1.csv" href="data:text/csv;charset=utf-8;base64,eAoxCg==">CSV</a>`) {
		t.Error("no link to the numbers")
	}
}

func TestPicturesThatReachOutAreRefused(t *testing.T) {
	for _, inner := range []string{
		`<script>alert(1)</script>`, `<style>rect{}</style>`, `<foreignObject/>`, `<a href="#x"/>`, `<animate/>`, `<set attributeName="href"/>`,
		`<rect onclick="x()"/>`, `<rect ONLOAD="x()"/>`, `<image href="http://x.example/a.png"/>`, `<image xlink:href="//x.example/a.png"/>`,
		`<image href="data:image/svg+xml;base64,AA=="/>`, `<use href="other.svg#a"/>`, `<rect fill="url(http://x.example#a)"/>`,
		`<rect style="fill:url(//x.example)"/>`, `<rect style="fill:u\72l(//x.example)"/>`, `<rect style="behavior:x"/>`, `<rect style="fill"/>`,
		`<rect fill="url(#a) URL(http://x.example)"/>`, `<h:script xmlns:h="http://www.w3.org/1999/xhtml"/>`, `<rect xmlns:q="q" q:href="x"/>`,
		`<rect`, `</g>`, `&nosuch;`,
	} {
		p := New("t")
		p.Figure(square{svgStart + inner + `</svg>`}, "c")
		if err := p.Write(io.Discard); !errors.Is(err, ErrContent) {
			t.Errorf("%s: error %v", inner, err)
		}
	}
	for _, whole := range []string{"no svg", "<html></html>", svgStart + "</svg>" + svgStart + "</svg>", svgStart} {
		p := New("t")
		p.Figure(square{whole}, "c")
		if err := p.Write(io.Discard); !errors.Is(err, ErrContent) {
			t.Errorf("%s: error %v", whole, err)
		}
	}
}

func TestProse(t *testing.T) {
	for source, want := range map[string]string{
		"# A\n\n## A":                        `<h2 id="section-a">A</h2>` + "\n" + `<h3 id="section-a-2">A</h3>` + "\n",
		"###### Über *die* Lücke!":           `<h6 id="section-über-die-lücke">Über <em>die</em> Lücke!</h6>` + "\n",
		"<script>alert('x')</script>":        "<p>&lt;script&gt;alert('x')&lt;/script&gt;</p>\n",
		"<div>\n\n*a*</div> <H> <!-- c -->":  "<p>&lt;div&gt;</p>\n<p><em>a</em>&lt;/div&gt; &lt;H&gt; &lt;!-- c --&gt;</p>\n",
		"`$x$` and\n\n    $y$\n":             "<p><code>$x$</code> and</p>\n<pre><code>$y$\n</code></pre>\n",
		"a \\$5 and \\$6":                    "<p>a $5 and $6</p>\n",
		"[a](b/c.ket \"q'<\")":               `<p><a href="b/c.ket" title="q'&lt;">a</a></p>` + "\n",
		"<https://example.org/>":             `<p><a href="https://example.org/">https://example.org/</a></p>` + "\n",
		"~~a~~  \nb":                         "<p><del>a</del><br />\nb</p>\n",
		"&copy; &nbsp; &quot;":               "<p>© \u00a0 &quot;</p>\n",
		"a $x$ b $$y$$ c":                    "<p>a " + math(t, "x", false) + " b " + math(t, "y", true) + " c</p>\n",
		"a\n$$\n1\n+ 2\n= 3\n$$\nb":          "<p>a</p>\n<div class=\"formula\" tabindex=\"0\">" + math(t, "1\n+ 2\n= 3", true) + "</div>\n<p>b</p>\n",
		"> $$\n> 1\n> - 2 $$\n\n- $a\n  *b$": "<blockquote>\n<div class=\"formula\" tabindex=\"0\">" + math(t, "1\n- 2", true) + "</div>\n</blockquote>\n<ul>\n<li>" + math(t, "a\n*b", false) + "</li>\n</ul>\n",
		"|a|b|\n|:-:|--:|\n|1|2|":            "<div class=\"box\" tabindex=\"0\"><table>\n<thead>\n<tr>\n<th class=\"centre\" scope=\"col\">a</th>\n<th class=\"right\" scope=\"col\">b</th>\n</tr>\n</thead>\n<tbody>\n<tr>\n<td class=\"centre\">1</td>\n<td class=\"right\">2</td>\n</tr>\n</tbody>\n</table></div>\n",
	} {
		p := New("t")
		got, err := p.prose(source)
		if err != nil || got != want {
			t.Errorf("%q:\n%s%v\nwant\n%s", source, got, err, want)
		}
	}
}

// math is a formula as the translator gives it, which has tests of its own.
func math(t *testing.T, tex string, display bool) string {
	t.Helper()
	out, err := formula(tex, display)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func TestContents(t *testing.T) {
	p := New("t")
	p.Text("# One `c` &amp; [two](#made)\n\n## $x$ **b**")
	if p.list() != "" {
		t.Error("a list of two headings")
	}
	p.Text("# Three")
	want := "<nav aria-label=\"Contents\">\n<ul>\n<li class=\"level2\"><a href=\"#section-one-c-amp-two\">One c &amp; two</a></li>\n" +
		"<li class=\"level3\"><a href=\"#section-b\">" + math(t, "x", false) + " b</a></li>\n<li class=\"level2\"><a href=\"#section-three\">Three</a></li>\n</ul>\n</nav>\n"
	if got := p.list(); got != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
}

func TestErrorsOfContent(t *testing.T) {
	one := report.Table{Columns: []report.Column{{Title: "x"}}}
	for want, do := range map[string]func(p *Page){
		`page: text 2: line 3: formula "\\foo", character 1: unknown command \foo`:                         func(p *Page) { p.Text("a"); p.Text("a\n\n b $\\foo$") },
		`page: text 1: line 2: formula: this $$ has no end`:                                                func(p *Page) { p.Text("\n$$ a") },
		`page: text 1: line 1: formula: $ begins one that has no end in this paragraph`:                    func(p *Page) { p.Text("costs $5\n\nand $6") },
		`page: text 1: line 2: formula: words follow the $$ that ends it`:                                  func(p *Page) { p.Text("$$\na $$ b") },
		`page: text 1: line 1: formula "", character 1: it is empty`:                                       func(p *Page) { p.Text("a $ $") },
		`page: text 1: unfit content: the image "a.png"`:                                                   func(p *Page) { p.Text("![x](a.png)") },
		`page: text 1: unfit content: the link "javascript:alert(1)" has the scheme`:                       func(p *Page) { p.Text("[x](javascript:alert(1))") },
		`page: text 1: unfit content: the link "JAVASCRIPT:alert(1)" has the scheme`:                       func(p *Page) { p.Text("[x](<JAVASCRIPT:alert(1)>)") },
		`page: text 1: unfit content: the link "javascript:alert(1)" has the scheme javascript; give http`: func(p *Page) { p.Text("[x](javascript&colon;alert(1))") },
		`page: text 1: unfit content: the link "data:text/html,x" has the scheme`:                          func(p *Page) { p.Text("[y](data:text/html,x)") },
		`page: text 1: unfit content: the link "//example.org/x" is not relative`:                          func(p *Page) { p.Text("[x](//example.org/x)") },
		`page: text 1: unfit content: the link "//entities.example" is not relative`:                       func(p *Page) { p.Text("[x](&#47;&#47;entities.example)") },
		`page: text 1: unfit content: the link "java%09script:x" cannot be read`:                           func(p *Page) { p.Text("[x](java&Tab;script&colon;x)") },
		`page: text 1: unfit content: the link "/etc/passwd" is not relative`:                              func(p *Page) { p.Text("[x](/etc/passwd)") },
		`page: text 1: unfit content: the link "mailto:a@example.org" has the scheme`:                      func(p *Page) { p.Text("<a@example.org>") },
		`page: unfit content: a link leads to #nowhere, which the page does not have`:                      func(p *Page) { p.Text("[x](#nowhere)") },
		`page: unfit content: a link leads to #table-2`:                                                    func(p *Page) { p.Table(one); p.Text("[x](#table-2)") },
		`page: text 1: unfit content: the text has the control character`:                                  func(p *Page) { p.Text("a\x00b") },
		`page: text 1: unfit content: the text is not UTF-8 text`:                                          func(p *Page) { p.Text("a\xff") },
		`page: table 1: report: Table: unfit data: no columns`:                                             func(p *Page) { p.Table(report.Table{}) },
		`page: figure 1: unfit content: nil`:                                                               func(p *Page) { p.Figure(nil, "x") },
		`page: figure 2: report: EntropyProfile`:                                                           func(p *Page) { p.Figure(square{svgStart + "</svg>"}, ""); p.Figure(report.EntropyProfile{}, "x") },
		`page: figure 1: caption: unfit content: "a\n\nb" is not one paragraph`:                            func(p *Page) { p.Figure(square{svgStart + "</svg>"}, "a\n\nb") },
		`page: figure 1: caption: unfit content: "# a" is not one paragraph`:                               func(p *Page) { p.Figure(square{svgStart + "</svg>"}, "# a") },
		`page: unfit content: a seed without a name`:                                                       func(p *Page) { p.Seed("", 1) },
		`page: unfit content: the note x has the control character`:                                        func(p *Page) { p.Note("x", "\x01") },
		`page: unfit content: the language "en\" x"`:                                                       func(p *Page) { p.Language = `en" x` },
		`page: unfit content: the source a.go has the control character`:                                   func(p *Page) { p.Script = &Script{Files: []File{{"a.go", "\x02"}}} },
		`page: unfit content: the argument is not UTF-8 text`:                                              func(p *Page) { p.Script = &Script{Args: []string{"\xff"}} },
		`page: unfit content: a Page that New did not make`:                                                func(p *Page) { *p = Page{}; p.Text("a") },
	} {
		p := New("t")
		do(p)
		path := filepath.Join(t.TempDir(), "p.html")
		err := p.Save(path)
		if err == nil || !strings.HasPrefix(err.Error(), want) {
			t.Errorf("error %v\nwant  %s", err, want)
		}
		if _, err := os.Stat(path); err == nil {
			t.Errorf("%s: a file is there", want)
		}
	}
	if err := New("").Write(io.Discard); err == nil {
		t.Error("a page without a title")
	}
}

// The first error is the one that is reported, and it stays.
func TestTheFirstErrorStays(t *testing.T) {
	p := New("t")
	p.Text("$\\one$")
	p.Text("$\\two$")
	for range 2 {
		if err := p.Write(io.Discard); !errors.Is(err, ErrFormula) || !strings.Contains(err.Error(), "one") {
			t.Errorf("error %v", err)
		}
	}
}

func TestFilesOfErrors(t *testing.T) {
	folder := t.TempDir()
	p := New("t")
	if err := p.Archive(filepath.Join(folder, "absent.ket"), "x"); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("error %v", err)
	}
	if err := p.Archive(folder, "x"); !errors.Is(err, ErrContent) {
		t.Errorf("error %v", err)
	}
	for _, path := range []string{filepath.Join(folder, "none", "p.html"), filepath.Join(folder, "p.pdf"), "", folder + "/x.html/"} {
		if err := p.Save(path); err == nil {
			t.Errorf("saved as %q", path)
		}
	}
	if err := os.Mkdir(filepath.Join(folder, "d.html"), 0o777); err != nil {
		t.Fatal(err)
	}
	if err := p.Save(filepath.Join(folder, "d.html")); !errors.Is(err, os.ErrExist) {
		t.Errorf("error %v", err)
	}
	entries, err := os.ReadDir(folder)
	if err != nil || len(entries) != 1 {
		t.Errorf("left behind: %v %v", entries, err)
	}
}

// A link is relative to the page, wherever the two are, and its name is quoted.
func TestArchiveLinks(t *testing.T) {
	folder := t.TempDir()
	if err := os.Mkdir(filepath.Join(folder, "out"), 0o777); err != nil {
		t.Fatal(err)
	}
	for name, want := range map[string]string{
		"a b#c?.ket": `<a href="../a%20b%23c%3F.ket">../a b#c?.ket</a>: <em>x</em>`,
		`"<&>.ket`:   `<a href="../%22%3C&amp;%3E.ket">../&#34;&lt;&amp;&gt;.ket</a>`,
		"out/x:y":    `<a href="./x:y">x:y</a>`,
	} {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, nil, 0o666); err != nil {
			t.Fatal(err)
		}
		p := New("t")
		if err := p.Archive(path, "*x*"); err != nil {
			t.Fatal(err)
		}
		if page := written(t, p, filepath.Join(folder, "out")); !strings.Contains(string(page), want) {
			t.Errorf("%s: no %s in %s", name, want, page)
		} else {
			sound(t, page)
		}
	}
}

func TestSourceOfACompiledProgram(t *testing.T) {
	folder := t.TempDir()
	for name, text := range map[string]string{
		"a.go": "package main\nfunc main() {}\n", "b.go": "package main\nvar x int\n", "b_test.go": "package main\n",
		"c_plan9.go": "package main\n", "d.txt": "no", "e.go": "//go:build never\n\npackage main\n",
	} {
		if err := os.WriteFile(filepath.Join(folder, name), []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	names := func() string {
		var list []string
		for _, f := range packageOf(filepath.Join(folder, "a.go")) {
			list = append(list, f.Name)
		}
		return fmt.Sprint(list)
	}
	if got := names(); got != "[a.go b.go]" {
		t.Error(got)
	}
	if err := os.WriteFile(filepath.Join(folder, "f.go"), []byte("package main\nfunc main() {}\n"), 0o666); err != nil {
		t.Fatal(err)
	}
	if got := names(); got != "[a.go]" {
		t.Error(got)
	}
	if got := packageOf("main/a.go"); got != nil {
		t.Error(got)
	}
	p := New("t")
	if p.Script == nil || !slices.ContainsFunc(p.Script.Files, func(f File) bool { return f.Name == "page_test.go" }) {
		t.Error("the caller of New was not found")
	}
	p.Script.Files = packageOf(filepath.Join(folder, "gone", "a.go"))
	var b bytes.Buffer
	if err := p.Write(&b); err != nil || !strings.Contains(b.String(), "<p>The source of the script was not at hand when the page was written.</p>") {
		t.Errorf("%v\n%s", err, &b)
	}
}

func TestRoundedTimings(t *testing.T) {
	for d, want := range map[time.Duration]string{0: "0s", 999: "999ns", 1234567: "1.23ms", 83*time.Second + 456789*time.Microsecond: "1m23.5s", -1999999: "-2ms", 5 * time.Hour: "5h0m0s"} {
		if got := rounded(d).String(); got != want {
			t.Errorf("%v: %s, want %s", int64(d), got, want)
		}
	}
}

// Every command that the documentation of the package lists is there.
func TestListedCommandsExist(t *testing.T) {
	text, err := os.ReadFile("doc.go")
	if err != nil {
		t.Fatal(err)
	}
	_, list, _ := strings.Cut(string(text), "Unicode may stand for itself, and there are:")
	list, _, _ = strings.Cut(list, "Anything else is an error")
	listed := map[string]bool{}
	for _, c := range regexp.MustCompile(`\\[A-Za-z]+`).FindAllString(list, -1) {
		listed[c[1:]] = true
	}
	for name := range listed {
		tex := `\` + name + `{A}`
		switch name {
		case "left", "middle", "right":
			tex = `\left( a \middle| b \right)`
		case "begin", "end":
			tex = `\begin{matrix} a \end{matrix}`
		case "frac", "binom":
			tex += "b"
		}
		if _, err := formula(tex, false); err != nil {
			t.Error(err)
		}
	}
	for _, table := range []map[string]string{operators, brackets, sums, accents} {
		for name := range table {
			if letter(rune(name[0])) && !listed[name] && !strings.HasPrefix(name, "l") && !strings.HasPrefix(name, "r") {
				t.Errorf("the documentation does not list \\%s", name)
			}
		}
	}
}
