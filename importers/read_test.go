package importers

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"footing/internal/finding"
)

// write puts content into a file of a test folder.
func write(t testing.TB, name string, content []byte) string {
	t.Helper()
	p := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(p, content, 0o600); err != nil {
		t.Fatal(err)
	}
	return p
}

// workbook writes rows to a new workbook; strings starting with "=" are formulas with the value behind "|".
func workbook(t testing.TB, sheet string, rows [][]any) string {
	t.Helper()
	f := excelize.NewFile()
	defer f.Close()
	if err := f.SetSheetName("Sheet1", sheet); err != nil {
		t.Fatal(err)
	}
	for i, r := range rows {
		for j, v := range r {
			if v == nil {
				continue
			}
			if err := f.SetCellValue(sheet, address(j+1, i+1), v); err != nil {
				t.Fatal(err)
			}
		}
	}
	p := filepath.Join(t.TempDir(), "evidence.xlsx")
	if err := f.SaveAs(p); err != nil {
		t.Fatal(err)
	}
	return p
}

func mustRead(t testing.TB, p string, opt Options) *Sheet {
	t.Helper()
	s, err := Read(p, opt)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// readCSVText reads a text as a .csv file.
func readCSVText(t testing.TB, text string, opt Options) *Sheet {
	t.Helper()
	return mustRead(t, write(t, "evidence.csv", []byte(text)), opt)
}

// kindsOf lists the findings as kind@cell.
func kindsOf(fs []finding.Finding) string {
	var out []string
	for _, f := range fs {
		k := f.Kind
		if f.Place.Cell != "" {
			k += "@" + f.Place.Cell
		}
		out = append(out, k)
	}
	return strings.Join(out, " ")
}

func wantProblem(t testing.TB, err error, kind string, words ...string) {
	t.Helper()
	var p *finding.Problem
	var ps finding.Problems
	switch {
	case errors.As(err, &p):
		if p.Kind != kind {
			t.Errorf("problem %s (%v), want %s", p.Kind, err, kind)
		}
	case errors.As(err, &ps):
		if ps[0].Kind != kind {
			t.Errorf("problem %s (%v), want %s", ps[0].Kind, err, kind)
		}
	default:
		t.Fatalf("error %v, want a problem of kind %s", err, kind)
	}
	for _, w := range words {
		if !strings.Contains(err.Error(), w) {
			t.Errorf("message %q lacks %q", err, w)
		}
	}
	if strings.Contains(err.Error(), "\n\n") {
		t.Errorf("message %q has an empty line", err)
	}
}

func TestReadWorkbook(t *testing.T) {
	s := mustRead(t, workbook(t, "Studies", [][]any{
		{"Rest breaks: what the literature says"}, {}, {"Study", "Year", "M (break)", "SD (break)", "n (break)", "M control", "SD control", "n control", "Risk of bias", "Shift length", "notes"},
		{"Adams", 2009, 12.3, 4.5, 24, 10.1, 4.75, "25", "low", 8, "=not a formula"}, {},
		{"Brown (2011)", nil, 11, 4, 30, "10,5", 4.2, 30, "Some concerns", 12},
		{"Source: invented"},
	}), Options{})
	if len(s.Records) != 2 || s.Name != "Studies" || len(s.SHA256) != 64 {
		t.Fatalf("%+v", s)
	}
	a, b := s.Records[0], s.Records[1]
	if a.Row != 4 || a.Study != "Adams" || a.Year != 2009 || a.RiskOfBias != "low" || a.Other()["Shift length"] != "8" {
		t.Errorf("%+v", a)
	}
	if m := a.Reported().Treatment.Mean; m.Value != 12.3 || m.Cell != "C4" || !m.Given || m.Decimals != 1 {
		t.Errorf("mean %+v", m)
	}
	if n := a.Reported().Control.N; n.Value != 25 || n.Cell != "H4" {
		t.Errorf("n %+v", n)
	}
	if b.Year != 2011 || b.Reported().Control.Mean.Value != 10.5 || b.Reported().Control.SD.Value != 4.2 || b.RiskOfBias != "some concerns" {
		t.Errorf("%+v", b)
	}
	if got := kindsOf(s.Findings); got != "decimal-comma@F6 row-without-figures@row 7" {
		t.Errorf("findings %s", got)
	}
	if s.Headings[2].Meaning != "treatment mean" || !strings.Contains(s.Headings[2].Why, `"break"`) {
		t.Errorf("heading %+v", s.Headings[2])
	}
}

func TestReadText(t *testing.T) {
	for name, text := range map[string]string{
		"comma":         "study,estimate,standard error,year\nA,0.31,0.12,2009\nB,-0.05,0.2,2011\n",
		"semicolon":     "study;estimate;standard error;year\nA;0,31;0,12;2009\nB;-0,05;0,2;2011\n",
		"tab":           "study\testimate\tstandard error\tyear\r\nA\t0.31\t.12\t2009\r\nB\t\u22120.05\t0.2\t2011",
		"bom":           "\xef\xbb\xbfstudy,estimate,standard error,year\nA,0.31,0.12,2009\nB,-0.05,0.2,2011\n",
		"title":         "My studies,,,\n\nstudy,estimate,standard error,year\nA,0.31,0.12,2009\nB,-0.05,0.2,2011\n",
		"sep":           "sep=;\nstudy;estimate;SE;year\nA;0.31;0.12;2009\nB;-0.05;0.2;2011\n",
		"any order":     "Year,Std. Error,Effect size,Author\n2009,0.12,0.31,A\n2011,0.2,-0.05,B\n",
		"carriage":      "study,estimate,standard error,year\rA,0.31,0.12,2009\rB,-0.05,0.2,2011\r",
		"quoted commas": "study;estimate;standard error;year\n\"A\";\"0,31\";\"0,12\";2009\n\"B\";\"-0,05\";\"0,2\";2011\n",
		"utf16":         "\xff\xfe" + utf16LE("study,estimate,standard error,year\nA,0.31,0.12,2009\nB,-0.05,0.2,2011\n"),
		"utf16 bare":    utf16LE("study,estimate,standard error,year\nA,0.31,0.12,2009\nB,-0.05,0.2,2011\n"),
	} {
		s := readCSVText(t, text, Options{})
		if len(s.Records) != 2 {
			t.Errorf("%s: %d records", name, len(s.Records))
			continue
		}
		a, b := s.Records[0], s.Records[1]
		if a.Study != "A" || a.Reported().Estimate.Value != 0.31 || a.Reported().Estimate.Decimals != 2 || a.Reported().StandardError.Value != 0.12 || a.Year != 2009 {
			t.Errorf("%s: %+v", name, a)
		}
		if b.Study != "B" || b.Reported().Estimate.Value != -0.05 || b.Reported().StandardError.Value != 0.2 || b.Year != 2011 {
			t.Errorf("%s: %+v", name, b)
		}
	}
}

func utf16LE(s string) string {
	var b strings.Builder
	for _, r := range s {
		b.WriteByte(byte(r))
		b.WriteByte(byte(r >> 8))
	}
	return b.String()
}

func TestRowNumbersOfText(t *testing.T) {
	s := readCSVText(t, "study,estimate,standard error,notes\n\nA,0.31,0.12,\"two\nlines\"\n\nB,0.2,0.1,\n", Options{})
	if s.Records[0].Row != 3 || s.Records[1].Row != 5 || s.Records[1].Cells()[1].Address != "B5" {
		t.Errorf("%+v", s.Records)
	}
}

func TestWindows1252(t *testing.T) {
	s := readCSVText(t, "study,estimate,standard error\nM\xfcller,0.3,0.1\nGar\xe7on,0.2,0.1\n", Options{})
	if s.Records[0].Study != "Müller" || kindsOf(s.Findings) != "encoding-guessed" || !strings.Contains(s.Findings[0].What, `"Müller"`) {
		t.Errorf("%q %+v", s.Records[0].Study, s.Findings)
	}
	s = readCSVText(t, "study,estimate,standard error\nM\xfcller,0.3,0.1\n", Options{Encoding: "windows-1252"})
	if s.Records[0].Study != "Müller" || len(s.Findings) != 0 {
		t.Errorf("%+v", s)
	}
}
