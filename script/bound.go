package script

import (
	"path/filepath"
	"slices"
	"strings"

	"ketloom/script/machine"
	"ketloom/script/report/page"
)

// bound are the functions of Ketloom that know the script which calls them: a
// page carries its source and its arguments.
func bound(src *source, run *machine.Run) map[string]any {
	return map[string]any{
		"ketloom/script/report/page.New": func(title string) *page.Page {
			by := &page.Script{Files: src.pageFiles()}
			if len(run.Args) > 0 {
				by.Args = slices.Clone(run.Args[1:])
			}
			return page.By(title, by)
		},
	}
}

// pageFiles are the files of the script in the order of their names.
func (s *source) pageFiles() []page.File {
	var files []page.File
	for path, lines := range s.text {
		files = append(files, page.File{Name: filepath.Base(path), Text: strings.Join(lines, "\n")})
	}
	slices.SortFunc(files, func(a, b page.File) int { return strings.Compare(a.Name, b.Name) })
	return files
}
