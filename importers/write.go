package importers

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"time"
	"unicode/utf8"

	"github.com/xuri/excelize/v2"
)

// Table is a new evidence sheet: headings and rows.
type Table struct {
	Sheet   string // "": Studies
	Title   string // put into the properties of a workbook
	Date    string // of the properties, yyyy-mm-dd; "": 2000-01-01, so that the bytes never depend on the clock
	Columns []NewColumn
	Rows    [][]any // string, float64, int or nil (left empty); a string is always written as text, never as a formula
}

// NewColumn is one heading of a new sheet and what it is for.
type NewColumn struct {
	Heading string
	Explain string // a sentence for the sheet of explanations; "" leaves it out there
}

// WriteWorkbook writes the table as an .xlsx workbook with a second sheet that explains the headings. The same table
// gives the same bytes.
func WriteWorkbook(w io.Writer, t Table) error {
	f := excelize.NewFile()
	defer f.Close()
	sheet := t.Sheet
	if sheet == "" {
		sheet = "Studies"
	}
	if err := f.SetSheetName("Sheet1", sheet); err != nil {
		return fmt.Errorf("importers: sheet name %q: %w", sheet, err)
	}
	styles, err := newStyles(f)
	if err != nil {
		return err
	}
	if err := t.fill(f, sheet, styles); err != nil {
		return err
	}
	if err := t.explain(f, styles); err != nil {
		return err
	}
	date := "2000-01-01"
	if t.Date != "" {
		date = t.Date
	}
	day, err := time.Parse("2006-01-02", date)
	if err != nil {
		return fmt.Errorf("importers: date %q: want yyyy-mm-dd", date)
	}
	stamp := day.Format(time.RFC3339)
	if err := f.SetDocProps(&excelize.DocProperties{Title: t.Title, Creator: "footing", LastModifiedBy: "footing", Created: stamp, Modified: stamp}); err != nil {
		return err
	}
	var b bytes.Buffer
	if err := f.Write(&b); err != nil {
		return err
	}
	_, err = w.Write(b.Bytes())
	return err
}

type newSheetStyles struct{ heading, text, wrap int }

func newStyles(f *excelize.File) (s newSheetStyles, err error) {
	if s.heading, err = f.NewStyle(&excelize.Style{
		Font: &excelize.Font{Bold: true}, Alignment: &excelize.Alignment{WrapText: true, Vertical: "top"},
		Border: []excelize.Border{{Type: "bottom", Color: "444444", Style: 1}},
	}); err != nil {
		return s, err
	}
	if s.text, err = f.NewStyle(&excelize.Style{NumFmt: 49}); err != nil { // "@": entries such as 5/12 stay as typed
		return s, err
	}
	s.wrap, err = f.NewStyle(&excelize.Style{Alignment: &excelize.Alignment{WrapText: true, Vertical: "top"}})
	return s, err
}

// fill writes headings and rows.
func (t *Table) fill(f *excelize.File, sheet string, styles newSheetStyles) error {
	for j, c := range t.Columns {
		at := address(j+1, 1)
		if err := f.SetCellStr(sheet, at, c.Heading); err != nil {
			return err
		}
		if err := f.SetCellStyle(sheet, at, at, styles.heading); err != nil {
			return err
		}
		width := 12.0
		if j == 0 {
			width = 26
		}
		if err := f.SetColWidth(sheet, columnName(j+1), columnName(j+1), width); err != nil {
			return err
		}
	}
	for i, r := range t.Rows {
		for j, v := range r {
			if err := setCell(f, sheet, address(j+1, i+2), v, styles.text); err != nil {
				return err
			}
		}
	}
	return f.SetPanes(sheet, &excelize.Panes{Freeze: true, XSplit: 1, YSplit: 1, TopLeftCell: "B2", ActivePane: "bottomRight"})
}

// setCell writes one value: all digits of a number, a text as text.
func setCell(f *excelize.File, sheet, at string, v any, textStyle int) error {
	switch v := v.(type) {
	case nil:
		return nil
	case string:
		if v == "" {
			return nil
		}
		if err := f.SetCellStr(sheet, at, v); err != nil {
			return err
		}
		return f.SetCellStyle(sheet, at, at, textStyle)
	case int:
		return f.SetCellInt(sheet, at, int64(v))
	case float64:
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("importers: cell %s: %v is no number", at, v)
		}
		return f.SetCellDefault(sheet, at, strconv.FormatFloat(v, 'g', -1, 64))
	}
	return fmt.Errorf("importers: cell %s: values of type %T can't be written", at, v)
}

// explain adds the sheet that says what each heading is for.
func (t *Table) explain(f *excelize.File, styles newSheetStyles) error {
	const sheet = "About the columns"
	row := 1
	for _, c := range t.Columns {
		if c.Explain == "" {
			continue
		}
		if row == 1 {
			if _, err := f.NewSheet(sheet); err != nil {
				return err
			}
			if err := f.SetSheetRow(sheet, "A1", &[]any{"Column", "What it is for"}); err != nil {
				return err
			}
			if err := f.SetCellStyle(sheet, "A1", "B1", styles.heading); err != nil {
				return err
			}
			if err := f.SetColWidth(sheet, "A", "A", 22); err != nil {
				return err
			}
			if err := f.SetColWidth(sheet, "B", "B", 90); err != nil {
				return err
			}
		}
		row++
		if err := f.SetCellStr(sheet, address(1, row), c.Heading); err != nil {
			return err
		}
		if err := f.SetCellStr(sheet, address(2, row), c.Explain); err != nil {
			return err
		}
		if err := f.SetCellStyle(sheet, address(1, row), address(2, row), styles.wrap); err != nil {
			return err
		}
	}
	return nil
}

// WriteText writes the table as comma-separated text in UTF-8. A text cell that a spreadsheet program would take for a
// formula gets an apostrophe in front.
func WriteText(w io.Writer, t Table) error {
	out := csv.NewWriter(w)
	head := make([]string, len(t.Columns))
	for j, c := range t.Columns {
		head[j] = guardText(c.Heading)
	}
	if err := out.Write(head); err != nil {
		return err
	}
	for i, r := range t.Rows {
		line := make([]string, len(t.Columns))
		for j, v := range r {
			if j >= len(line) {
				return fmt.Errorf("importers: row %d has more cells than there are headings", i+1)
			}
			switch v := v.(type) {
			case nil:
			case string:
				line[j] = guardText(v)
			case int:
				line[j] = strconv.Itoa(v)
			case float64:
				if math.IsNaN(v) || math.IsInf(v, 0) {
					return fmt.Errorf("importers: row %d: %v is no number", i+1, v)
				}
				line[j] = strconv.FormatFloat(v, 'g', -1, 64)
			default:
				return fmt.Errorf("importers: row %d: values of type %T can't be written", i+1, v)
			}
		}
		if err := out.Write(line); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}

// formulaStarts are the characters by which a spreadsheet program takes a text for a formula.
const formulaStarts = "=+-@\t\r\n|＝＋－＠"

// unguarded takes the apostrophe off that guardText put on; spreadsheet programs use it in the same sense.
func unguarded(s string) string {
	if len(s) > 1 && s[0] == '\'' {
		if r, _ := utf8.DecodeRuneInString(s[1:]); strings.ContainsRune(formulaStarts, r) {
			return s[1:]
		}
	}
	return s
}

// guardText keeps a spreadsheet program from computing a text (advice of OWASP on CSV injection, recalled from memory).
func guardText(s string) string {
	if r, _ := utf8.DecodeRuneInString(s); s == "" || !strings.ContainsRune(formulaStarts, r) {
		return s
	}
	if _, fault := parseNumber(s, '.'); fault == numberFine {
		return s
	}
	return "'" + s
}
