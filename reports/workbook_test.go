package reports

import (
	"archive/zip"
	"bytes"
	"io"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"footing/plan"
	"footing/plan/result"
	"footing/testdata/published"
)

// opened is a workbook read back.
type opened struct {
	t *testing.T
	f *excelize.File
}

func openWorkbook(t *testing.T, p *result.Plan) opened {
	t.Helper()
	data, err := Workbook(p)
	if err != nil {
		t.Fatal(err)
	}
	return reopen(t, data)
}

func reopen(t *testing.T, data []byte) opened {
	t.Helper()
	f, err := excelize.OpenReader(bytes.NewReader(data), excelize.Options{RawCellValue: true})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { f.Close() })
	return opened{t, f}
}

func (o opened) text(sheet, cell string) string {
	o.t.Helper()
	s, err := o.f.GetCellValue(sheet, cell)
	if err != nil {
		o.t.Fatal(err)
	}
	return s
}

func (o opened) number(sheet, cell string) float64 {
	o.t.Helper()
	x, err := strconv.ParseFloat(o.text(sheet, cell), 64)
	if err != nil {
		o.t.Fatalf("%s!%s: %v", sheet, cell, err)
	}
	return x
}

// bcgPlan pools the thirteen trials of Colditz et al. 1994 through the same way that a plan goes, from a sheet of counts.
func bcgPlan(t *testing.T) *result.Plan {
	t.Helper()
	d := published.Data("bcg")
	var sheet strings.Builder
	sheet.WriteString("study,year,events treatment,n treatment,events control,n control\n")
	for i, trial := range d.Labels("trial") {
		cells := []string{trial}
		for _, c := range []string{"year", "cases_vaccinated", "n_vaccinated", "cases_control", "n_control"} {
			cells = append(cells, strconv.FormatFloat(d.Column(c)[i], 'f', -1, 64))
		}
		sheet.WriteString(strings.Join(cells, ",") + "\n")
	}
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "evidence.csv"), []byte(sheet.String()), 0o600); err != nil {
		t.Fatal(err)
	}
	no := false
	pool, err := plan.Pooled(&plan.File{Path: filepath.Join(dir, "plan.yaml"), Evidence: plan.Evidence{File: "evidence.csv", HigherBetter: &no}, Pool: plan.Pool{Scale: "log-risk-ratio"}})
	if err != nil {
		t.Fatal(err)
	}
	return &result.Plan{Title: "Thirteen trials", Date: "2026-11-17", Pool: pool, Size: result.Size{Why: "not asked for"}}
}

// The values beside the live formulas are those that Colditz et al. 1994 print; the row of each is found by its words.
func TestWorkbookPoolingHoldsPublishedValues(t *testing.T) {
	o := openWorkbook(t, bcgPlan(t))
	at := map[string]int{}
	for row := 1; row < firstStudy; row++ {
		at[o.text("Pooling", "A"+strconv.Itoa(row))] = row
	}
	for id, words := range map[string]string{"colditz1994-01": "random-effects mean", "colditz1994-02": "normal interval, lower", "colditz1994-03": "normal interval, upper", "borenstein2009-74": "Q", "borenstein2009-79": "tau², cut at 0"} {
		row, ok := at[words]
		if !ok {
			t.Errorf("no row %q", words)
			continue
		}
		x := o.number("Pooling", "B"+strconv.Itoa(row))
		if strings.HasPrefix(id, "colditz") {
			x = math.Exp(x)
		}
		if v := published.Must(id); !v.Meets(x) {
			t.Errorf("%s (%s): printed %s, in the workbook %.8g", id, words, v.Printed, x)
		}
		if f, err := o.f.GetCellFormula("Pooling", "B"+strconv.Itoa(row)); err != nil || f == "" {
			t.Errorf("%s is no formula (%v)", words, err)
		}
	}
}

func TestWorkbookKeepsEveryDigit(t *testing.T) {
	p := inventedPlan(12, false)
	third := 2.0 / 3
	p.Pool.Studies[0].Estimate, p.Pool.Studies[1].Variance = &third, num(1.2345678901234567e-5)
	p.Pool.Studies[2].StandardError = num(math.NaN())
	o := openWorkbook(t, p)
	if x := o.number("Estimates", "F2"); x != third {
		t.Errorf("2/3 was written as %.17g", x)
	}
	if x := o.number("Estimates", "G3"); x != 1.2345678901234567e-5 {
		t.Errorf("%.17g", x)
	}
	if s := o.text("Estimates", "H4"); s != "" {
		t.Errorf("NaN was written as %q", s)
	}
	for i, s := range p.Pool.Studies {
		if s.Used && o.number("Estimates", "A"+strconv.Itoa(i+2)) != float64(s.Row) {
			t.Errorf("row of study %d", i)
		}
	}
}

func TestWorkbookDataSheetHoldsEveryCellUnderItsAddress(t *testing.T) {
	p := inventedPlan(12, false)
	o := openWorkbook(t, p)
	rows, err := o.f.GetRows("Data as read", excelize.Options{RawCellValue: true})
	if err != nil {
		t.Fatal(err)
	}
	column := map[string]int{}
	for i, head := range rows[1] {
		column[strings.SplitN(head, ":", 2)[0]] = i
	}
	seen := 0
	for i, s := range p.Pool.Studies {
		row := rows[i+2]
		if row[0] != strconv.Itoa(s.Row) {
			t.Errorf("study %d stands under row %s", i, row[0])
		}
		for _, c := range s.Cells {
			if got := row[column[strings.TrimRight(c.Address, "0123456789")]]; got != c.Text {
				t.Errorf("%s: %q in place of %q", c.Address, got, c.Text)
			}
			seen++
		}
	}
	if seen < 12*7 {
		t.Errorf("only %d cells", seen)
	}
}

// Text that a spreadsheet program would take for a formula stays text, in every sheet.
func TestWorkbookTextIsNeverAFormula(t *testing.T) {
	hostile := []string{"=HYPERLINK(\"http://example.invalid\",\"x\")", "+1+1", "-2+3", "@SUM(A1:A9)", "\t=1+1", "=cmd|' /C calc'!A1", "a\x00b\x1b[31m", strings.Repeat("x", 40000)}
	p := inventedPlan(len(hostile), false)
	for i, h := range hostile {
		p.Pool.Studies[i].Study, p.Pool.Studies[i].Cells[0].Text = h, h
		p.Pool.Studies[i].Notes = []string{h}
	}
	p.Title, p.Question, p.Findings[0].What, p.Assumptions[0].Source, p.Threats[0].Head = hostile[0], hostile[1], hostile[2], hostile[3], hostile[5]
	p.Size.Study.Groups[0] = hostile[0]
	o := openWorkbook(t, p)
	for _, sheet := range o.f.GetSheetList() {
		rows, err := o.f.GetRows(sheet)
		if err != nil {
			t.Fatal(err)
		}
		for r, row := range rows {
			for c := range row {
				cell, _ := excelize.CoordinatesToCellName(c+1, r+1)
				f, err := o.f.GetCellFormula(sheet, cell)
				if err != nil {
					t.Fatal(err)
				}
				if f != "" && sheet != "Pooling" {
					t.Errorf("%s!%s holds the formula %q", sheet, cell, f)
				}
				if f != "" && (strings.Contains(f, "HYPERLINK") || strings.Contains(f, "cmd")) {
					t.Errorf("%s!%s: %q", sheet, cell, f)
				}
			}
		}
	}
	if got := o.text("Answer", "A1"); got != hostile[0] {
		t.Errorf("the title reads %q", got)
	}
	if got := o.text("Estimates", "B4"); got != hostile[2] {
		t.Errorf("a label reads %q", got)
	}
}

func TestWorkbookGivesTheSameBytes(t *testing.T) {
	a, err := Workbook(inventedPlan(12, true))
	if err != nil {
		t.Fatal(err)
	}
	for range 8 { // the library orders some lines by chance, so that one comparison may miss it
		if b, err := Workbook(inventedPlan(12, true)); err != nil || !bytes.Equal(a, b) {
			t.Fatalf("two runs differ (%v)", err)
		}
	}
}

func TestWorkbookOfFewStudies(t *testing.T) {
	for _, k := range []int{1, 2, 3} {
		o := openWorkbook(t, inventedPlan(k, false))
		if got := o.number("Pooling", "B2"); got != float64(k) {
			t.Errorf("k = %d: %v", k, got)
		}
	}
	p := inventedPlan(3, false)
	p.Pool, p.Range, p.Size.Assurance = nil, nil, nil
	if o := openWorkbook(t, p); strings.Contains(strings.Join(o.f.GetSheetList(), "|"), "Pooling") {
		t.Error("a plan without evidence has no pooling")
	}
}

// The charts are the spreadsheet's own: they name the cells of the table beside them.
func TestWorkbookChartsFollowTheirCells(t *testing.T) {
	data, err := Workbook(inventedPlan(12, false))
	if err != nil {
		t.Fatal(err)
	}
	z, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	charts := ""
	for _, f := range z.File {
		if strings.HasPrefix(f.Name, "xl/charts/chart") {
			r, err := f.Open()
			if err != nil {
				t.Fatal(err)
			}
			part, err := io.ReadAll(r)
			if err != nil {
				t.Fatal(err)
			}
			r.Close()
			charts += string(part)
		}
	}
	for _, want := range []string{"'Power over n'!$C$1", "'Power over n'!$B$2:$B$62", "'Power over n'!$C$2:$C$62", "'Assurance over n'!$C$2:$C$62", "'Assurance over n'!$D$2:$D$62"} {
		if !strings.Contains(strings.ReplaceAll(charts, "&#39;", "'"), want) {
			t.Errorf("no chart names %s", want)
		}
	}
}
