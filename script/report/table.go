package report

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"reflect"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Column describes a column of a table.
type Column struct {
	Title string
	// Unit stands in brackets below the title; empty means none.
	Unit string
	// Format is the fmt format of the cells in plain text, such as "%.6f"; empty
	// means the shortest text that gives the number back. CSV always has that.
	Format string
}

// Table is a table of numbers and words. Columns that hold numbers alone, or
// nothing, are aligned at the right, others at the left.
//
//	t := report.Table{Columns: []report.Column{{Title: "k"}, {Title: "Energy", Unit: "V", Format: "%.6f"}}}
//	t.Add(0, -24.439397399)
//	t.Save("levels.csv")
type Table struct {
	// Title is the first line; empty means none. CSV does not have it.
	Title   string
	Columns []Column
	// Rows of cells, each row as long as Columns. A cell is an integer, a
	// floating-point number, a bool, a string, or nil for what is missing.
	Rows [][]any
}

// Add appends a row; its cells are checked when the table is written.
func (t *Table) Add(cells ...any) { t.Rows = append(t.Rows, cells) }

// Save writes the table to a file; the ending txt or csv is its format.
func (t Table) Save(path string) error {
	data, err := t.render(ending(path))
	if err != nil {
		return err
	}
	if err := replace(path, data); err != nil {
		return fmt.Errorf("report: Table: %w", err)
	}
	return nil
}

// Write writes the table in the format txt, plain text for the terminal, or csv
// (RFC 4180, with line feeds), whose first record is the titles with their units.
// A missing cell is a dash in txt and empty in csv.
func (t Table) Write(w io.Writer, format string) error {
	data, err := t.render(format)
	if err != nil {
		return err
	}
	if _, err := w.Write(data); err != nil {
		return fmt.Errorf("report: Table: %w", err)
	}
	return nil
}

// String is the plain text of the table, or the reason why there is none.
func (t Table) String() string {
	data, err := t.render("txt")
	if err != nil {
		return err.Error()
	}
	return string(data)
}

func (t Table) render(format string) ([]byte, error) {
	if format != "txt" && format != "csv" {
		return nil, fmt.Errorf("report: Table: %w %q; give txt or csv, as the ending of the file", ErrFormat, format)
	}
	if err := t.check(); err != nil {
		return nil, fmt.Errorf("report: Table: %w", err)
	}
	if format == "csv" {
		return t.csv()
	}
	cells, err := t.formatted()
	if err != nil {
		return nil, fmt.Errorf("report: Table: %w", err)
	}
	return t.plain(cells), nil
}

func (t Table) check() error {
	if len(t.Columns) == 0 {
		return fmt.Errorf("%w: no columns; give at least one", ErrData)
	}
	if err := checkLine("title", t.Title); err != nil {
		return err
	}
	for i, c := range t.Columns {
		if err := checkLine(fmt.Sprintf("title of column %d", i), c.Title); err != nil {
			return err
		}
		if err := checkLine(fmt.Sprintf("unit of column %d", i), c.Unit); err != nil {
			return err
		}
	}
	for i, row := range t.Rows {
		if len(row) != len(t.Columns) {
			return fmt.Errorf("%w: row %d has %d cells for %d columns; give one for each, nil for a missing one", ErrData, i, len(row), len(t.Columns))
		}
		for j, cell := range row {
			if err := checkCell(cell); err != nil {
				return fmt.Errorf("%w: row %d, %s: %v", ErrData, i, called("column", j, t.Columns[j].Title), err)
			}
		}
	}
	return nil
}

func checkLine(what, text string) error {
	if !utf8.ValidString(text) || strings.ContainsFunc(text, unicode.IsControl) {
		return fmt.Errorf("%w: the %s %q is not one line of UTF-8 text", ErrData, what, text)
	}
	return nil
}

func checkCell(cell any) error {
	switch v := reflect.ValueOf(cell); v.Kind() {
	case reflect.Invalid, reflect.Bool:
		return nil
	case reflect.Float32, reflect.Float64:
		if f := v.Float(); math.IsNaN(f) || math.IsInf(f, 0) {
			return fmt.Errorf("%v; give a finite number, or nil for a missing one", cell)
		}
		return nil
	case reflect.String:
		if text := v.String(); !utf8.ValidString(text) || strings.ContainsFunc(text, unicode.IsControl) {
			return fmt.Errorf("%q is not one line of UTF-8 text", text)
		}
		return nil
	default:
		if v.CanInt() || v.CanUint() {
			return nil
		}
		return fmt.Errorf("a cell of type %T; give a number, a bool, a string or nil", cell)
	}
}

// shortest writes a cell so that reading it gives the same value.
func shortest(cell any) string {
	switch v := reflect.ValueOf(cell); v.Kind() {
	case reflect.Invalid:
		return ""
	case reflect.Float32:
		return strconv.FormatFloat(v.Float(), 'g', -1, 32)
	case reflect.Float64:
		return strconv.FormatFloat(v.Float(), 'g', -1, 64)
	case reflect.String:
		return v.String()
	case reflect.Bool:
		return strconv.FormatBool(v.Bool())
	default:
		if v.CanInt() {
			return strconv.FormatInt(v.Int(), 10)
		}
		return strconv.FormatUint(v.Uint(), 10)
	}
}

func (t Table) csv() ([]byte, error) {
	var buf bytes.Buffer
	w := csv.NewWriter(&buf)
	record := make([]string, len(t.Columns))
	for i, c := range t.Columns {
		record[i] = c.Title
		if c.Unit != "" {
			record[i] += " (" + c.Unit + ")"
		}
	}
	w.Write(record)
	for _, row := range t.Rows {
		for i, cell := range row {
			record[i] = shortest(cell)
		}
		w.Write(record)
	}
	w.Flush()
	if err := w.Error(); err != nil {
		return nil, fmt.Errorf("report: Table: %w", err)
	}
	return buf.Bytes(), nil
}

// formatted returns the cells as plain text.
func (t Table) formatted() ([][]string, error) {
	var out [][]string
	for i, row := range t.Rows {
		line := make([]string, len(row))
		for j, cell := range row {
			c := t.Columns[j]
			switch {
			case cell == nil:
				line[j] = "-"
			case c.Format == "":
				line[j] = shortest(cell)
			default:
				line[j] = fmt.Sprintf(c.Format, cell)
				if _, word := cell.(string); !word && strings.Contains(line[j], "%!") {
					return nil, fmt.Errorf("%w: row %d, %s: the format %q does not fit the cell %v", ErrData, i, called("column", j, c.Title), c.Format, cell)
				}
				if err := checkLine(fmt.Sprintf("cell of row %d, column %d", i, j), line[j]); err != nil {
					return nil, err
				}
			}
		}
		out = append(out, line)
	}
	return out, nil
}

// plain lays the cells out: titles, units, a rule, rows.
func (t Table) plain(cells [][]string) []byte {
	titles, units, rule := make([]string, len(t.Columns)), make([]string, len(t.Columns)), make([]string, len(t.Columns))
	anyUnit := false
	for i, c := range t.Columns {
		titles[i] = c.Title
		if c.Unit != "" {
			units[i], anyUnit = "("+c.Unit+")", true
		}
	}
	widths := make([]int, len(t.Columns))
	for _, line := range append([][]string{titles, units}, cells...) {
		for i, text := range line {
			widths[i] = max(widths[i], utf8.RuneCountInString(text))
		}
	}
	for i, w := range widths {
		rule[i] = strings.Repeat("-", w)
	}
	var buf bytes.Buffer
	if t.Title != "" {
		buf.WriteString(t.Title + "\n\n")
	}
	t.line(&buf, titles, widths)
	if anyUnit {
		t.line(&buf, units, widths)
	}
	t.line(&buf, rule, widths)
	for _, line := range cells {
		t.line(&buf, line, widths)
	}
	return buf.Bytes()
}

func (t Table) line(buf *bytes.Buffer, cells []string, widths []int) {
	var b strings.Builder
	for i, text := range cells {
		pad := strings.Repeat(" ", widths[i]-utf8.RuneCountInString(text))
		if i > 0 {
			b.WriteString("  ")
		}
		if t.numeric(i) {
			b.WriteString(pad + text)
		} else {
			b.WriteString(text + pad)
		}
	}
	buf.WriteString(strings.TrimRight(b.String(), " ") + "\n")
}

// numeric reports whether column i holds numbers, or nothing, alone.
func (t Table) numeric(i int) bool {
	for _, row := range t.Rows {
		switch reflect.ValueOf(row[i]).Kind() {
		case reflect.String, reflect.Bool:
			return false
		}
	}
	return true
}
