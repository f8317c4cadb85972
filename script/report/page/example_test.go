package page_test

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"ketloom/script/report"
	"ketloom/script/report/page"
)

// A page about an imaginary film; its numbers are invented.
func Example() {
	folder, err := os.MkdirTemp("", "page")
	if err != nil {
		fmt.Println(err)
		return
	}
	defer os.RemoveAll(folder)

	levels := report.Table{Title: "Levels of the film", Columns: []report.Column{{Title: "Sector"}, {Title: "Energy", Unit: "V", Format: "%.2f"}}}
	levels.Add("(0,0)", -3.1)
	levels.Add("(1,0)", -2.75)

	p := page.New("A film at one third")
	p.Reproducible = true
	p.Text("The gap is $\\Delta = E_1 - E_0 = 0.35\\,V$, see [the levels](#table-1).")
	p.Table(levels)
	p.Seed("lanczos", 1)
	fmt.Println(p.Save(filepath.Join(folder, "film.html")))

	data, err := os.ReadFile(filepath.Join(folder, "film.html"))
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, line := range strings.Split(string(data), "\n") {
		if strings.HasPrefix(line, "<h1>") || strings.HasPrefix(line, "<tr>") {
			fmt.Println(line)
		}
	}
	// Output:
	// <nil>
	// <h1>A film at one third</h1>
	// <tr><td>(0,0)</td><td class="right">−3.10</td></tr>
	// <tr><td>(1,0)</td><td class="right">−2.75</td></tr>
}

// The first error of the content is the one that Save returns.
func ExamplePage_Text() {
	p := page.New("A film at one third")
	p.Text("The gap is\n$\\Detla = 0.35$.")
	fmt.Println(p.Save("film.html"))
	// Output:
	// page: text 1: line 2: formula "\\Detla = 0.35", character 1: unknown command \Detla; the documentation of package page lists what there is, any Unicode sign can stand for itself
}
