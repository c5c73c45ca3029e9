package importers

import (
	"archive/zip"
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

func TestFileProblems(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "evidence.csv"), []byte("study,estimate,standard error\nA,1,1\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	_, err := Read(filepath.Join(dir, "evidense.csv"), Options{})
	wantProblem(t, err, "file-not-found", `did you mean "evidence.csv"`)
	_, err = Read(dir, Options{})
	wantProblem(t, err, "file-is-folder")
	for name, c := range map[string]struct{ content, kind, word string }{
		"empty":     {" \n", "file-empty", ""},
		"pdf":       {"%PDF-1.4\n", "file-not-a-sheet", "PDF"},
		"html":      {"<html><table><tr><td>study</td></tr></table></html>", "file-not-a-sheet", "web page"},
		"junk":      {"\x00\x01\x02\x03\x04\x05\x06\x07junk\x00\x00", "file-not-a-sheet", "save it as .xlsx or .csv"},
		"png":       {"\x89PNG\r\n\x1a\n\x00\x00\x00\rIHDR", "file-not-a-sheet", ""},
		"cut zip":   {"PK\x03\x04abcdef", "file-damaged", "cut short"},
		"no heads":  {"a,b\n1,2\n3,4\n", "no-headings", `"a"`},
		"near miss": {"studdy,estimatee,standrad error\nA,1,2\n", "no-headings", "did you mean"},
		"no rows":   {"study,estimate,standard error\n", "no-records", ""},
		"quote":     {"study,estimate,standard error\n\"A,1,2\nB,2,3\n", "text-damaged", "quote"},
		"bad utf8":  {"\xef\xbb\xbfstudy,estimate,standard error\nM\xfcller,1,2\n", "encoding-damaged", "line 2"},
	} {
		_, err := Read(write(t, "sheet", []byte(c.content)), Options{})
		t.Run(name, func(t *testing.T) { wantProblem(t, err, c.kind, c.word) })
	}
}

func TestOptionProblems(t *testing.T) {
	p := workbook(t, "Studies", [][]any{{"study", "estimate", "standard error"}, {"A", 1, 2}})
	_, err := Read(p, Options{SheetName: "Studys"})
	wantProblem(t, err, "sheet-not-found", `"Studies"`, "did you mean")
	_, err = Read(p, Options{Columns: map[string]string{"treatment maen": "estimate"}})
	wantProblem(t, err, "meaning-unknown", `did you mean "treatment mean"`)
	_, err = Read(p, Options{Columns: map[string]string{"estimate": "efect"}})
	wantProblem(t, err, "heading-not-found", "efect", "the sheet has")
	_, err = Read(p, Options{Columns: map[string]string{"estimate": "estimat"}})
	wantProblem(t, err, "heading-not-found", `did you mean "estimate"`)
	_, err = Read(p, Options{Columns: map[string]string{"estimate": "estimate", "variance": "Estimate "}})
	wantProblem(t, err, "heading-mapped-twice")
	csv := write(t, "a.csv", []byte("study,estimate,standard error\nA,1,2\n"))
	_, err = Read(csv, Options{Encoding: "klingon"})
	wantProblem(t, err, "encoding-unknown")
	_, err = Read(csv, Options{SheetName: "x"})
	wantProblem(t, err, "sheet-not-found")
	_, err = Read(csv, Options{Delimiter: "ab"})
	wantProblem(t, err, "delimiter-unusable")
	_, err = Read(csv, Options{MaxBytes: 10})
	wantProblem(t, err, "file-too-large")
}

// repack copies a workbook and changes one of its parts.
func repack(t testing.TB, path, part string, change func(string) string) string {
	t.Helper()
	in, err := zip.OpenReader(path)
	if err != nil {
		t.Fatal(err)
	}
	defer in.Close()
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	changed := false
	for _, f := range in.File {
		rc, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		var b bytes.Buffer
		if _, err := b.ReadFrom(rc); err != nil {
			t.Fatal(err)
		}
		s := b.String()
		if f.Name == part {
			n := change(s)
			changed = n != s
			s = n
		}
		fw, err := w.Create(f.Name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := fw.Write([]byte(s)); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	if !changed {
		t.Fatalf("the part %s was not changed", part)
	}
	return write(t, "changed.xlsx", out.Bytes())
}

// A workbook that lost a study must never read as a shorter one.
func TestDamagedWorkbooks(t *testing.T) {
	rows := [][]any{{"study", "estimate", "standard error"}}
	for i := range 50 {
		rows = append(rows, []any{"Study " + string(rune('A'+i%26)) + string(rune('a'+i/26)), float64(i) / 10, 0.1})
	}
	p := workbook(t, "Studies", rows)
	const sheet, strs = "xl/worksheets/sheet1.xml", "xl/sharedStrings.xml"
	sub := func(old, by string) func(string) string {
		return func(s string) string { return strings.Replace(s, old, by, 1) }
	}
	for name, c := range map[string]struct {
		part   string
		change func(string) string
		word   string
	}{
		"cut short":          {sheet, func(s string) string { return s[:len(s)/2] }, ""},
		"cut at a row":       {sheet, func(s string) string { return s[:strings.Index(s, `<row r="20"`)] }, ""},
		"bad tag":            {sheet, sub(`<c r="B20"`, `<c r="B20`), ""},
		"bad nesting":        {sheet, sub(`</row><row r="20"`, `</c></row><row r="20"`), ""},
		"document type":      {sheet, sub(`<worksheet`, `<!DOCTYPE w [<!ENTITY a "b">]><worksheet`), "document type"},
		"bad address":        {sheet, sub(`r="B20"`, `r="20B"`), "20B"},
		"address elsewhere":  {sheet, sub(`r="B20"`, `r="B21"`), "B21"},
		"double cell":        {sheet, sub(`<c r="B20"`, `<c r="A20"`), "A20"},
		"double row":         {sheet, sub(`<row r="20"`, `<row r="19"`), "twice"},
		"row out of order":   {sheet, sub(`<row r="20"`, `<row r="5"`), "behind"},
		"row number":         {sheet, sub(`<row r="20"`, `<row r="x"`), "row"},
		"shared index":       {sheet, sub(`t="s"><v>`, `t="s"><v>9`), "points to text"},
		"negative index":     {sheet, sub(`t="s"><v>`, `t="s"><v>-1`), "points to text"},
		"cell type":          {sheet, sub(`t="s"`, `t="q"`), "type"},
		"shared cut":         {strs, func(s string) string { return s[:len(s)/2] }, ""},
		"shared lost":        {strs, sub(`<si><t>Study Aa</t></si>`, ``), ""},
		"empty sheet part":   {sheet, func(string) string { return "" }, ""},
		"second root":        {sheet, func(s string) string { return s + "<a/>" }, ""},
		"workbook cut":       {"xl/workbook.xml", func(s string) string { return s[:len(s)/2] }, ""},
		"styles cut":         {"xl/styles.xml", func(s string) string { return s[:len(s)/2] }, ""},
		"relations cut":      {"xl/_rels/workbook.xml.rels", func(s string) string { return s[:len(s)/2] }, ""},
		"no worksheet named": {"_rels/.rels", func(string) string { return "<a/>" }, "names no workbook"},
	} {
		t.Run(name, func(t *testing.T) {
			s, err := Read(repack(t, p, c.part, c.change), Options{})
			if err == nil {
				t.Fatalf("read without an error: %d records", len(s.Records))
			}
			wantProblem(t, err, "file-damaged", c.word)
		})
	}
}

func TestCellFindings(t *testing.T) {
	f := excelize.NewFile()
	defer f.Close()
	put := func(cell string, v any) {
		if err := f.SetCellValue("Sheet1", cell, v); err != nil {
			t.Fatal(err)
		}
	}
	for i, h := range []string{"study", "estimate", "standard error", "p", "n1", "risk of bias", "year"} {
		put(address(i+1, 1), h)
	}
	for i, r := range [][]any{
		{"A", "about 0.3", 0.1, 0.03, 20, "low", 2001}, {"B", 0.2, -0.1, 1.2, 20.5, "awful", 12}, {"C", 0.3, 0.1, "<.001", 20, "", "2004a"},
		{"D", 0.4, 0.1, "n.s.", 20, "?", nil}, {"E", 0.5, 0.1, 0, 20, nil, nil}, {"F", 0.5, true, "0,000", 20, nil, nil}, {"G", 1, nil, nil, nil, nil, nil},
	} {
		for j, v := range r {
			if v != nil {
				put(address(j+1, i+2), v)
			}
		}
	}
	for cell, formula := range map[string]string{"C8": "1/10"} {
		if err := f.SetCellFormula("Sheet1", cell, formula); err != nil {
			t.Fatal(err)
		}
	}
	style, err := f.NewStyle(&excelize.Style{NumFmt: 16}) // d-mmm
	if err != nil {
		t.Fatal(err)
	}
	put("B7", 46361)
	if err := f.SetCellStyle("Sheet1", "B7", "B7", style); err != nil {
		t.Fatal(err)
	}
	if err := f.SetRowVisible("Sheet1", 4, false); err != nil {
		t.Fatal(err)
	}
	p := filepath.Join(t.TempDir(), "a.xlsx")
	if err := f.SaveAs(p); err != nil {
		t.Fatal(err)
	}
	s := mustRead(t, p, Options{})
	want := "arms-by-number@A1 mixed-decimal-marks@D7 text-in-number-cell@B2 value-out-of-range@C3 value-out-of-range@D3 count-not-whole@E3 risk-of-bias-not-understood@F3 year-not-understood@G3 " +
		"value-out-of-range@D6 date-in-number-cell@B7 text-in-number-cell@C7 p-of-zero@D7 formula-without-value@C8 hidden-rows formulas"
	if got := kindsOf(s.Findings); got != want {
		t.Errorf("findings\n%s\nwant\n%s", got, want)
	}
	for _, f := range s.Findings {
		switch f.Kind {
		case "text-in-number-cell":
			if f.Place.Cell == "B2" && (f.Text != "about 0.3" || f.Study != "A" || f.ID() != "text-in-number-cell@Sheet1!B2") {
				t.Errorf("%+v", f)
			}
		case "date-in-number-cell":
			if f.Text != "2026-12-05" {
				t.Errorf("%+v", f)
			}
		case "hidden-rows":
			if !strings.Contains(f.What, ": 4") {
				t.Errorf("%+v", f)
			}
		}
	}
	if r := s.Records[3].Reported(); !r.NotSignificant || r.P.Given {
		t.Errorf("n.s.: %+v", r)
	}
	if r := s.Records[2]; r.Year != 2004 || r.Reported().P.Bound >= 0 && r.Reported().P.Value != 0.001 {
		t.Errorf("%+v", r)
	}
	if s.Records[0].Reported().Estimate.Given {
		t.Error("a text was taken for a number")
	}
}

func TestHostileLabels(t *testing.T) {
	labels := []string{`=HYPERLINK("http://x","y")`, "</script><script>alert(1)</script>", "\u202eevil", strings.Repeat("long ", 2000), "\x1b[31mred", "'quoted", `a "b" c`, "__f__x__f__", "@SUM(1)", "+1+1", "Ünïcödé 研究"}
	rows := [][]any{{"study", "estimate", "standard error"}}
	var text strings.Builder
	text.WriteString("study,estimate,standard error\n")
	for i, l := range labels {
		rows = append(rows, []any{l, float64(i), 0.1})
		text.WriteString(`"` + strings.ReplaceAll(l, `"`, `""`) + "\"," + strings.Repeat("1", i+1) + ",0.1\n")
	}
	for name, s := range map[string]*Sheet{"xlsx": mustRead(t, workbook(t, "S", rows), Options{}), "csv": readCSVText(t, text.String(), Options{})} {
		if len(s.Records) != len(labels) {
			t.Fatalf("%s: %d records", name, len(s.Records))
		}
		for i, l := range labels {
			want := strings.TrimSpace(l)
			if name == "xlsx" {
				want = strings.ReplaceAll(want, "\x1b", "\ufffd") // a workbook can't store it
			}
			if s.Records[i].Study != want {
				t.Errorf("%s: label %.40q became %.40q", name, want, s.Records[i].Study)
			}
		}
	}
}

func TestColumnsOfThePlan(t *testing.T) {
	p := write(t, "a.csv", []byte("who,Wert X,Wert Y,Z\nA,12.3 (4.5),10 (4),20\nB,11 (4),9 (5),30\n"))
	s := mustRead(t, p, Options{Columns: map[string]string{"study": "Who", "treatment mean + treatment sd": "wert x", "control mean + control sd": "Wert Y", "Treatment N": "Z"}})
	if got := figuresOf(s.Records[0]); got["treatment sd"] != 4.5 || got["control mean"] != 10 || got["treatment n"] != 20 || s.Records[1].Study != "B" || s.Headings[1].Why != "by the plan's columns:" {
		t.Errorf("%v %+v", got, s.Headings)
	}
}

func TestOverrides(t *testing.T) {
	p := write(t, "a.csv", []byte("study,estimate,se\nA,x,0.1\nB,0.2,\n"))
	s := mustRead(t, p, Options{Overrides: map[string]string{"B2": "0.3", "C3": "0.2", "A3": ""}})
	a, b := s.Records[0].Reported(), s.Records[1].Reported()
	if a.Estimate.Value != 0.3 || b.StandardError.Value != 0.2 || s.Records[1].Study != "A" {
		t.Errorf("%+v %s", s.Records, kindsOf(s.Findings))
	}
}
