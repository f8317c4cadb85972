package report

import (
	"encoding/csv"
	"errors"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

func TestPlainTable(t *testing.T) {
	table := Table{
		Title:   "Levels",
		Columns: []Column{{Title: "Sector"}, {Title: "n"}, {Title: "ξ", Format: "%.2f"}, {Title: "Residual", Unit: "V", Format: "%.0e"}},
	}
	table.Add("(0,0)", 1, 12.345, 3e-12)
	table.Add("(10,0)", 10, -4.0, nil)
	want := `Levels

Sector   n      ξ  Residual
                        (V)
------  --  -----  --------
(0,0)    1  12.35     3e-12
(10,0)  10  -4.00         -
`
	if got := table.String(); got != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
}

func TestCSVReadsBack(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	table := Table{Title: "not in the file", Columns: []Column{{Title: "a", Unit: "V"}, {Title: `quoted ", name`}, {Title: "c"}}}
	for range 50 {
		table.Add(r.NormFloat64()*math.Pow(10, float64(r.IntN(40)-20)), "x, \"y\"", uint8(r.IntN(256)))
	}
	path := filepath.Join(t.TempDir(), "table.csv")
	if err := table.Save(path); err != nil {
		t.Fatal(err)
	}
	file, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	records, err := csv.NewReader(file).ReadAll()
	if err != nil || len(records) != 51 {
		t.Fatal(len(records), err)
	}
	if got := strings.Join(records[0], "|"); got != `a (V)|quoted ", name|c` {
		t.Errorf("titles %q", got)
	}
	for i, row := range table.Rows {
		v, err := strconv.ParseFloat(records[i+1][0], 64)
		if err != nil || v != row[0] || records[i+1][1] != row[1] || records[i+1][2] != strconv.Itoa(int(row[2].(uint8))) {
			t.Errorf("row %d: %q, want %v", i, records[i+1], row)
		}
	}
}

func TestBadTables(t *testing.T) {
	one := func(c Column, cells ...any) Table { return Table{Columns: []Column{c}, Rows: [][]any{cells}} }
	for _, c := range []struct {
		table Table
		says  string
	}{
		{Table{}, "no columns"},
		{one(Column{}, 1, 2), "row 0 has 2 cells for 1 columns"},
		{one(Column{Title: "E"}, math.NaN()), "row 0, column 0 E: NaN"},
		{one(Column{}, float32(math.Inf(-1))), "-Inf"},
		{one(Column{}, []int{1}), "a cell of type []int"},
		{one(Column{}, 1i), "complex128"},
		{one(Column{}, "a\nb"), "not one line"},
		{one(Column{Title: "a\tb"}, 1), "title of column 0"},
		{one(Column{Title: "E", Format: "%d"}, 1.5), `the format "%d" does not fit the cell 1.5`},
		{one(Column{Format: "%v\n"}, 1.5), "not one line"},
	} {
		err := c.table.Write(io.Discard, "txt")
		if !errors.Is(err, ErrData) || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%+v: error %v, want %q", c.table, err, c.says)
		}
		if c.table.String() != err.Error() {
			t.Errorf("String says %q", c.table.String())
		}
	}
	if err := one(Column{}, 1).Save("table.png"); !errors.Is(err, ErrFormat) {
		t.Errorf("a table saved as png gives %v", err)
	}
	if got := one(Column{Format: "%s"}, "100%!").String(); !strings.Contains(got, "100%!") {
		t.Errorf("a word with the sign of a bad format: %q", got)
	}
}
