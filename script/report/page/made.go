package page

import (
	"fmt"
	"runtime"
	"runtime/debug"
	"strconv"
	"strings"
	"time"
)

// made is the folded end of the page: what made it.
func (p *Page) made() (string, error) {
	s := p.Script
	if s == nil {
		s = &Script{}
	}
	var b strings.Builder
	b.WriteString("<details class=\"made\" id=\"made\">\n<summary>" + p.summary(s) + "</summary>\n<dl>\n")
	line := func(term, text string) {
		b.WriteString("<dt>" + escape(term) + "</dt><dd>" + escape(text) + "</dd>\n")
	}
	line("Arguments", quoted(s.Args))
	for _, v := range p.seeds {
		line("Seed of "+v.name, v.value)
	}
	for _, v := range p.notes {
		line(v.name, v.value)
	}
	if !p.Reproducible {
		for _, v := range p.timings {
			line("Time of "+v.name, v.value)
		}
		for _, v := range versions() {
			line(v.name, v.value)
		}
		line("Machine", fmt.Sprintf("%s/%s, %d processors", runtime.GOOS, runtime.GOARCH, runtime.NumCPU()))
		line("Written", p.now().UTC().Format(time.RFC3339))
	}
	b.WriteString("</dl>\n")
	if len(s.Files) == 0 {
		b.WriteString("<p>The source of the script was not at hand when the page was written.</p>\n")
	}
	for _, f := range s.Files {
		if err := checkText("source "+f.Name, f.Text); err != nil {
			return "", fmt.Errorf("page: %w", err)
		}
		text := strings.ReplaceAll(f.Text, "\r\n", "\n")
		b.WriteString("<h3>" + escape(f.Name) + "</h3>\n<pre tabindex=\"0\"><code>" + escape(strings.TrimPrefix(text, "\ufeff")) + "</code></pre>\n")
	}
	b.WriteString("</details>\n")
	for _, a := range s.Args {
		if err := checkText("argument", a); err != nil {
			return "", fmt.Errorf("page: %w", err)
		}
	}
	return b.String(), nil
}

// summary is the line that is seen, and printed, while the end is folded.
func (p *Page) summary(s *Script) string {
	what := "by a script whose source was not at hand"
	if len(s.Files) > 0 {
		var names []string
		for _, f := range s.Files {
			names = append(names, f.Name)
		}
		what = "by " + strings.Join(names, ", ")
	}
	if p.Reproducible {
		return "Made " + escape(what)
	}
	return escape(fmt.Sprintf("Made %s, Ketloom %s, %s", what, ketloom(), p.now().UTC().Format(time.DateOnly)))
}

// quoted lists arguments, in Go's quotes where spaces or nothing would mislead.
func quoted(args []string) string {
	if len(args) == 0 {
		return "none"
	}
	out := make([]string, len(args))
	for i, a := range args {
		out[i] = a
		if a == "" || strings.ContainsAny(a, " \t\n\"'\\`") {
			out[i] = strconv.Quote(a)
		}
	}
	return strings.Join(out, " ")
}

// ketloom is the version of this module in the running program.
func ketloom() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "of unknown version"
	}
	for _, m := range append([]*debug.Module{&info.Main}, info.Deps...) {
		if m.Path == "ketloom" && m.Version != "" && m.Version != "(devel)" {
			return m.Version
		}
	}
	version := "in development"
	if info.Main.Path != "ketloom" {
		return version
	}
	for _, s := range info.Settings {
		switch {
		case s.Key == "vcs.revision":
			version += ", revision " + s.Value
		case s.Key == "vcs.modified" && s.Value == "true":
			version += " with changes"
		}
	}
	return version
}

// versions are those of Ketloom, Go and the other modules of the program.
func versions() []pair {
	list := []pair{{"Ketloom", ketloom()}, {"Go", runtime.Version()}}
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return list
	}
	var modules []string
	for _, m := range info.Deps {
		if m.Path == "ketloom" {
			continue
		}
		text := m.Path + " " + m.Version
		if m.Replace != nil {
			text += " replaced by " + m.Replace.Path + " " + m.Replace.Version
		}
		modules = append(modules, strings.TrimSpace(text))
	}
	if len(modules) > 0 {
		list = append(list, pair{"Modules", strings.Join(modules, ", ")})
	}
	return list
}
