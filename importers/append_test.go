package importers

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

// sheetFile writes invented rows as a workbook or text and reads it back.
func sheetFile(t *testing.T, name string, headings []string, rows ...[]any) (string, *Sheet) {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	table := Table{Rows: rows}
	for _, h := range headings {
		table.Columns = append(table.Columns, NewColumn{Heading: h})
	}
	var b bytes.Buffer
	write := WriteWorkbook
	if !strings.HasSuffix(name, ".xlsx") {
		write = WriteText
	}
	if err := write(&b, table); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, b.Bytes(), 0o600); err != nil {
		t.Fatal(err)
	}
	s, err := Read(path, Options{})
	if err != nil {
		t.Fatal(err)
	}
	return path, s
}

var countHeadings = []string{"study", "year", "treatment events", "treatment n", "control events", "control n", "risk of bias"}

func TestAppendKeepsFormattingAndReadsTheSame(t *testing.T) {
	for _, name := range []string{"old.xlsx", "old.csv"} {
		path, old := sheetFile(t, name, countHeadings, []any{"Ash", 2001, 3, 20, 5, 21, "low"}, []any{"Birch", 2003, 4, 30, 9, 31, "high"})
		_, added := sheetFile(t, "new.xlsx", []string{"Risk of bias", "study", "year", "control n", "control events", "treatment n", "treatment events"},
			[]any{"low", "=Cedar", 2020, 41, 12, 40, 7}, []any{"some concerns", "Dogwood", 2021, 51, 8, 50, 6})
		data, err := Append(path, Options{}, old, added)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if err := os.WriteFile(path, data, 0o600); err != nil {
			t.Fatal(err)
		}
		now, err := Read(path, Options{})
		if err != nil || len(now.Records) != 4 {
			t.Fatalf("%s: %d records, %v", name, len(now.Records), err)
		}
		c := now.Records[2]
		if got := strings.TrimPrefix(c.Study, "'"); got != "=Cedar" || c.Year != 2020 || c.Reported().Treatment.Events.Value != 7 || c.Reported().Control.N.Value != 41 || c.Row != 4 {
			t.Errorf("%s: %+v", name, c)
		}
	}
}

func TestAppendPutsRowsAboveWhatStandsBelow(t *testing.T) {
	path, _ := sheetFile(t, "old.xlsx", countHeadings, []any{"Ash", 2001, 3, 20, 5, 21, "low"}, []any{"Birch", 2003, 4, 30, 9, 31, "high"})
	f, err := excelize.OpenFile(path)
	if err != nil {
		t.Fatal(err)
	}
	style, err := f.NewStyle(&excelize.Style{Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{"FFEE00"}}})
	if err != nil {
		t.Fatal(err)
	}
	if err := f.SetCellStyle("Studies", "C3", "C3", style); err != nil {
		t.Fatal(err)
	}
	if err := f.SetCellStr("Studies", "A6", "Note: counts as printed"); err != nil {
		t.Fatal(err)
	}
	if err := f.Save(); err != nil {
		t.Fatal(err)
	}
	f.Close()
	old, err := Read(path, Options{})
	if err != nil {
		t.Fatal(err)
	}
	_, added := sheetFile(t, "new.xlsx", countHeadings, []any{"Cedar", 2020, 7, 40, 12, 41, "low"})
	data, err := Append(path, Options{}, old, added)
	if err != nil {
		t.Fatal(err)
	}
	g, err := excelize.OpenReader(bytes.NewReader(data))
	if err != nil {
		t.Fatal(err)
	}
	defer g.Close()
	if got, _ := g.GetCellStyle("Studies", "C4"); got != style {
		t.Errorf("the new row has format %d, the row above %d", got, style)
	}
	if got, _ := g.GetCellValue("Studies", "A7"); got != "Note: counts as printed" {
		t.Errorf("A7 reads %q", got)
	}
}

func TestAppendRefuses(t *testing.T) {
	path, old := sheetFile(t, "old.xlsx", countHeadings, []any{"Ash", 2001, 3, 20, 5, 21, "low"})
	for name, c := range map[string]struct {
		headings []string
		row      []any
		want     string
	}{
		"same label":   {countHeadings, []any{"ash ", 2002, 1, 2, 1, 2, "low"}, "is there already: row 2"},
		"same figures": {countHeadings, []any{"Aspen", 2001, 3, 20, 5, 21, "low"}, "has the same figures"},
		"more columns": {append([]string{"mean treatment"}, countHeadings...), []any{4.5, "Cedar", 2001, 1, 20, 2, 21, "low"}, `has no column for "mean treatment"`},
	} {
		_, added := sheetFile(t, "new.xlsx", c.headings, c.row)
		if _, err := Append(path, Options{}, old, added); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %s", name, err, c.want)
		}
	}
	_, fine := sheetFile(t, "new.xlsx", countHeadings, []any{"Cedar", 2001, 1, 20, 2, 21, "low"})
	if _, err := Append("old.ods", Options{}, old, fine); err == nil || !strings.Contains(err.Error(), "save it as .xlsx") {
		t.Errorf("got %v", err)
	}
}
