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

	title, head, text, wrap int            // styles
	numbers                 map[string]int // of numbers, by format; the cell keeps every digit, the format rounds what is seen
	live                    map[string]int // the same in the colour of a live formula
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
	const family, size = "Calibri", 11
	rule := []excelize.Border{{Type: "bottom", Color: "1B2430", Style: 1}}
	b.title = make(&excelize.Style{Font: &excelize.Font{Bold: true, Family: family, Size: 14}})
	b.head = make(&excelize.Style{Font: &excelize.Font{Bold: true, Family: family, Size: size}, Border: rule, Alignment: &excelize.Alignment{WrapText: true, Vertical: "bottom", Indent: 1}})
	b.text = make(&excelize.Style{Font: &excelize.Font{Family: family, Size: size}, Alignment: &excelize.Alignment{Vertical: "top", Indent: 1}})
	b.wrap = make(&excelize.Style{Font: &excelize.Font{Family: family, Size: size}, Alignment: &excelize.Alignment{WrapText: true, Vertical: "top", Indent: 1}})
	b.numbers, b.live = map[string]int{}, map[string]int{}
	for _, format := range []string{formatWhole, formatFew, formatLarge, formatTiny} {
		top := &excelize.Alignment{Vertical: "top"}
		b.numbers[format] = make(&excelize.Style{CustomNumFmt: &format, Font: &excelize.Font{Family: family, Size: size}, Alignment: top})
		b.live[format] = make(&excelize.Style{CustomNumFmt: &format, Font: &excelize.Font{Family: family, Size: size, Color: "1F5B96"}, Alignment: top})
	}
}

// The formats of numbers as seen.
const (
	formatWhole = "0"
	formatFew   = "0.0000"
	formatLarge = "#,##0.0"
	formatTiny  = "0.00E+00"
)

func formatOf(x float64) string {
	switch size := math.Abs(x); {
	case x == math.Trunc(x) && size < 1e15:
		return formatWhole
	case size < 1e-3 || size >= 1e15:
		return formatTiny
	case size >= 1e4:
		return formatLarge
	}
	return formatFew
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
	landscape, fit, zero, yes := "landscape", 1, 0, true
	b.keep(b.f.SetPageLayout(name, &excelize.PageLayoutOptions{Orientation: &landscape, FitToWidth: &fit, FitToHeight: &zero}))
	b.keep(b.f.SetSheetProps(name, &excelize.SheetPropsOptions{FitToPage: &yes}))
	b.keep(b.f.SetHeaderFooter(name, &excelize.HeaderFooterOptions{OddFooter: "&L&A&RPage &P of &N"}))
	return &bookSheet{b: b, name: name, widths: widths}
}

// bookSheet is one sheet being written, row by row.
type bookSheet struct {
	b      *book
	name   string
	row    int
	widths []float64
	headed int // row of the first headings, which are frozen; 0 before there are any
}

// width is how many characters a column shows.
func (s *bookSheet) width(column int) float64 {
	if column < len(s.widths) {
		return s.widths[column]
	}
	return 8.43 // what a column without a width has
}

// heading writes a line of large text.
func (s *bookSheet) heading(text string) {
	s.line(text)
	at := fmt.Sprintf("A%d", s.row)
	s.b.keep(s.b.f.SetCellStyle(s.name, at, at, s.b.title))
}

// header writes a row of headings, high enough for their words; the first of a sheet is frozen and printed on every page.
func (s *bookSheet) header(heads ...string) {
	cells := make([]any, len(heads))
	lines := 1.0
	for i, h := range heads {
		cells[i] = h
		lines = max(lines, math.Ceil(1.25*float64(len([]rune(h)))/s.width(i)))
	}
	s.line(cells...)
	last, err := excelize.CoordinatesToCellName(len(heads), s.row)
	s.b.keep(err)
	s.b.keep(s.b.f.SetCellStyle(s.name, fmt.Sprintf("A%d", s.row), last, s.b.head))
	s.b.keep(s.b.f.SetRowHeight(s.name, s.row, 15*min(lines, 5)+1))
	if s.headed > 0 {
		return
	}
	s.headed = s.row
	s.b.keep(s.b.f.SetPanes(s.name, &excelize.Panes{Freeze: true, YSplit: s.row, TopLeftCell: fmt.Sprintf("A%d", s.row+1), ActivePane: "bottomLeft"}))
	s.b.keep(s.b.f.SetDefinedName(&excelize.DefinedName{Name: "_xlnm.Print_Titles", RefersTo: fmt.Sprintf("'%s'!$%d:$%d", s.name, s.row, s.row), Scope: s.name}))
}

// line writes one row: text, whole numbers, numbers with all their digits, nothing for nil.
func (s *bookSheet) line(cells ...any) {
	s.row++
	lines := 1.0
	for i, c := range cells {
		at, err := excelize.CoordinatesToCellName(i+1, s.row)
		s.b.keep(err)
		s.put(at, c)
		if text, ok := c.(string); ok && i > 0 && s.width(i) >= wrapFrom && float64(len([]rune(text))) > s.width(i) {
			s.b.keep(s.b.f.SetCellStyle(s.name, at, at, s.b.wrap))
			lines = max(lines, math.Ceil(1.1*float64(len([]rune(text)))/s.width(i)))
		}
	}
	if lines > 1 {
		s.b.keep(s.b.f.SetRowHeight(s.name, s.row, min(15*lines+1, mostRowHeight)))
	}
}

func (s *bookSheet) put(at string, c any) {
	switch v := c.(type) {
	case nil:
	case string:
		if v != "" {
			s.b.keep(s.b.f.SetCellStr(s.name, at, sheetText(v)))
			s.b.keep(s.b.f.SetCellStyle(s.name, at, at, s.b.text))
		}
	case bool:
		word := "no"
		if v {
			word = "yes"
		}
		s.put(at, word)
	case int:
		s.b.keep(s.b.f.SetCellInt(s.name, at, int64(v)))
		s.b.keep(s.b.f.SetCellStyle(s.name, at, at, s.b.numbers[formatWhole]))
	case float64:
		if !math.IsNaN(v) && !math.IsInf(v, 0) {
			// SetCellValue would cut the number to 15 digits.
			s.b.keep(s.b.f.SetCellDefault(s.name, at, strconv.FormatFloat(v, 'g', 17, 64)))
			s.b.keep(s.b.f.SetCellStyle(s.name, at, at, s.b.numbers[formatOf(v)]))
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

// wrapFrom is the width from which a column holds sentences, which wrap; the first column runs on into its neighbours.
const wrapFrom = 34

// mostRowHeight is the height that a row can have, in points.
const mostRowHeight = 409.0

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
	return steady(out.Bytes())
}
