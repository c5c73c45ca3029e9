package reports

import (
	"bytes"
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"github.com/xuri/excelize/v2"

	"footing/plan/result"
)

// Workbook writes a result as a spreadsheet: the answer, the data as read, each estimate with its route, the pooling as live formulas that also hold their values, every
// estimator, the small-study panel, the sizes, what was assumed, and the findings. Text never becomes a formula; numbers keep all their digits. The same result gives the
// same bytes.
func Workbook(p *result.Plan) ([]byte, error) {
	b := &book{f: excelize.NewFile(), p: p}
	defer b.f.Close()
	b.styles()
	b.answer()
	if p.Pool != nil {
		b.data()
		b.estimates()
		b.pooling()
		b.estimators()
		b.small()
	}
	b.sizes()
	b.curvesSheet()
	b.assumed()
	b.findingsSheet()
	if b.err != nil {
		return nil, fmt.Errorf("reports: workbook: %w", b.err)
	}
	return b.bytes()
}

// book writes sheets one after another and keeps the first fault.
type book struct {
	f    *excelize.File
	p    *result.Plan
	err  error
	made int

	head, wrap, whole, live int // styles
}

func (b *book) keep(err error) {
	if b.err == nil && err != nil {
		b.err = err
	}
}

func (b *book) styles() {
	make := func(s *excelize.Style) int {
		id, err := b.f.NewStyle(s)
		b.keep(err)
		return id
	}
	rule := []excelize.Border{{Type: "bottom", Color: "1B2430", Style: 1}}
	b.head = make(&excelize.Style{Font: &excelize.Font{Bold: true}, Border: rule, Alignment: &excelize.Alignment{WrapText: true, Vertical: "bottom"}})
	b.wrap = make(&excelize.Style{Alignment: &excelize.Alignment{WrapText: true, Vertical: "top"}})
	whole := "#,##0"
	b.whole = make(&excelize.Style{CustomNumFmt: &whole})
	b.live = make(&excelize.Style{Font: &excelize.Font{Color: "1F5B96"}})
}

// sheet starts a sheet; the first takes the place of the empty one that a new file has.
func (b *book) sheet(name string, widths ...float64) *bookSheet {
	if b.made == 0 {
		b.keep(b.f.SetSheetName("Sheet1", name))
	} else {
		_, err := b.f.NewSheet(name)
		b.keep(err)
	}
	b.made++
	for i, w := range widths {
		col, err := excelize.ColumnNumberToName(i + 1)
		b.keep(err)
		b.keep(b.f.SetColWidth(name, col, col, w))
	}
	landscape, fit, zero := "landscape", 1, 0
	b.keep(b.f.SetPageLayout(name, &excelize.PageLayoutOptions{Orientation: &landscape, FitToWidth: &fit, FitToHeight: &zero}))
	return &bookSheet{b: b, name: name}
}

// bookSheet is one sheet being written, row by row.
type bookSheet struct {
	b    *book
	name string
	row  int
}

// header writes a row of headings and freezes it.
func (s *bookSheet) header(heads ...string) {
	cells := make([]any, len(heads))
	for i, h := range heads {
		cells[i] = h
	}
	s.line(cells...)
	last, err := excelize.CoordinatesToCellName(len(heads), s.row)
	s.b.keep(err)
	s.b.keep(s.b.f.SetCellStyle(s.name, fmt.Sprintf("A%d", s.row), last, s.b.head))
	s.b.keep(s.b.f.SetPanes(s.name, &excelize.Panes{Freeze: true, YSplit: s.row, TopLeftCell: fmt.Sprintf("A%d", s.row+1), ActivePane: "bottomLeft"}))
}

// line writes one row: text, whole numbers, numbers with all their digits, nothing for nil.
func (s *bookSheet) line(cells ...any) {
	s.row++
	for i, c := range cells {
		at, err := excelize.CoordinatesToCellName(i+1, s.row)
		s.b.keep(err)
		s.put(at, c)
	}
}

func (s *bookSheet) put(at string, c any) {
	switch v := c.(type) {
	case nil:
	case string:
		if v != "" {
			s.b.keep(s.b.f.SetCellStr(s.name, at, sheetText(v)))
		}
	case bool:
		word := "no"
		if v {
			word = "yes"
		}
		s.b.keep(s.b.f.SetCellStr(s.name, at, word))
	case int:
		s.b.keep(s.b.f.SetCellInt(s.name, at, int64(v)))
	case float64:
		if !math.IsNaN(v) && !math.IsInf(v, 0) {
			// SetCellValue would cut the number to 15 digits.
			s.b.keep(s.b.f.SetCellDefault(s.name, at, strconv.FormatFloat(v, 'g', 17, 64)))
		}
	case *float64:
		if v != nil {
			s.put(at, *v)
		}
	case *int:
		if v != nil {
			s.put(at, *v)
		}
	}
}

// mostCellText is the longest text that a cell can hold.
const mostCellText = 32767

// sheetText makes text fit for a cell: control characters shown as such, the length that a cell can hold.
func sheetText(s string) string {
	s = strings.Map(func(r rune) rune {
		if r < 0x20 && r != '\n' && r != '\t' || r == 0x7f || r == 0xfffe || r == 0xffff {
			return '\ufffd'
		}
		return r
	}, s)
	if n := []rune(s); len(n) > mostCellText-1 {
		s = string(n[:mostCellText-1]) + "…"
	}
	return s
}

// bytes is the file with fixed dates, so that the same result gives the same bytes.
func (b *book) bytes() ([]byte, error) {
	when := "2000-01-01T00:00:00Z"
	if t, err := time.Parse("2006-01-02", b.p.Date); err == nil {
		when = t.Format(time.RFC3339)
	}
	if err := b.f.SetDocProps(&excelize.DocProperties{Title: clipRunes(sheetText(b.p.Title), 200), Creator: "footing " + b.p.Tool.Version, Created: when, Modified: when}); err != nil {
		return nil, fmt.Errorf("reports: workbook: %w", err)
	}
	b.f.SetActiveSheet(0)
	var out bytes.Buffer
	if err := b.f.Write(&out); err != nil {
		return nil, fmt.Errorf("reports: workbook: %w", err)
	}
	return out.Bytes(), nil
}
