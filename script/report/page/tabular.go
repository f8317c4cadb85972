package page

import (
	"bytes"
	"fmt"
	"io"
	"reflect"
	"regexp"
	"strconv"
	"strings"

	"ketloom/script/report"
)

// tabular is a table as HTML.
func tabular(t report.Table, id string) (string, error) {
	if err := t.Write(io.Discard, "txt"); err != nil {
		return "", err
	}
	numeric := make([]bool, len(t.Columns))
	var b strings.Builder
	fmt.Fprintf(&b, "<figure id=%q class=\"table\">\n<div class=\"box\" tabindex=\"0\"><table>\n", id)
	if t.Title != "" {
		fmt.Fprintf(&b, "<caption>%s</caption>\n", marked(t.Title))
	}
	b.WriteString("<thead><tr>")
	for i, c := range t.Columns {
		numeric[i] = numbers(t, i)
		title := marked(c.Title)
		if c.Unit != "" {
			title += "<span class=\"unit\"> (" + marked(c.Unit) + ")</span>"
		}
		b.WriteString("<th scope=\"col\"" + aligned(numeric[i]) + ">" + title + "</th>")
	}
	b.WriteString("</tr></thead>\n<tbody>\n")
	for _, row := range t.Rows {
		b.WriteString("<tr>")
		for i, cell := range row {
			b.WriteString("<td" + aligned(numeric[i]) + ">" + escape(shown(cell, t.Columns[i].Format)) + "</td>")
		}
		b.WriteString("</tr>\n")
	}
	b.WriteString("</tbody>\n</table></div>\n")
	link, err := spreadsheet(t, id)
	if err != nil {
		return "", err
	}
	b.WriteString("<p class=\"files\">" + link + "</p>\n</figure>\n")
	return b.String(), nil
}

// spreadsheet is a link to the numbers as CSV.
func spreadsheet(t report.Table, id string) (string, error) {
	var data bytes.Buffer
	if err := t.Write(&data, "csv"); err != nil {
		return "", err
	}
	return download("CSV", id+".csv", "text/csv;charset=utf-8", data.Bytes()), nil
}

func aligned(right bool) string { return choose(right, ` class="right"`, "") }

// numbers says that column i holds numbers, or nothing, alone.
func numbers(t report.Table, i int) bool {
	for _, row := range t.Rows {
		switch reflect.ValueOf(row[i]).Kind() {
		case reflect.String, reflect.Bool:
			return false
		}
	}
	return true
}

// shown is a cell as plain text has it, with a real minus sign for numbers and a
// dash for what is missing.
func shown(cell any, format string) string {
	v := reflect.ValueOf(cell)
	var text string
	switch {
	case cell == nil:
		return "–"
	case format != "":
		text = fmt.Sprintf(format, cell)
	case v.Kind() == reflect.Float64:
		text = strconv.FormatFloat(v.Float(), 'g', -1, 64)
	case v.Kind() == reflect.Float32:
		text = strconv.FormatFloat(v.Float(), 'g', -1, 32)
	case v.Kind() == reflect.String:
		return v.String()
	default:
		text = fmt.Sprint(cell)
	}
	if v.CanFloat() || v.CanInt() {
		text = strings.ReplaceAll(text, "-", "−")
	}
	return text
}

var scripts = regexp.MustCompile(`([_^])\{([^{}]*)\}`)

// marked is a label with _{...} lowered and ^{...} raised.
func marked(label string) string {
	return scripts.ReplaceAllStringFunc(escape(label), func(s string) string {
		return element(choose(s[0] == '_', "sub", "sup"), s[2:len(s)-1])
	})
}
