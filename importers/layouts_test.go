package importers

import (
	"bytes"
	"fmt"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

// The same invented studies, written down in the ways in which people write them down. Every version must give the
// records of the first.
const plainVersion = `study,year,n treatment,mean treatment,sd treatment,n control,mean control,sd control
Adams,2009,24,12.3,4.5,25,10.1,4.75
Brown,2011,1030,-11,4.2,1025,-12.5,4
Cole,2015,18,10.25,3,17,9,3.5
`

var messyVersions = map[string]string{
	"semicolons, decimal comma":      "Studie X;;;;;;;\nStudy;Year;n (treatment);Mean (treatment);SD (treatment);n (control);Mean (control);SD (control)\nAdams;2009;24;12,3;4,5;25;10,1;4,75\nBrown;2011;1.030;-11;4,2;1.025;-12,5;4\nCole;2015;18;10,25;3;17;9;3,5\n",
	"tabs, other order":              "SD control\tM control\tN control\tS.D. intervention\tM intervention\tN intervention\tPublication year\tFirst author\n4.75\t10.1\t25\t4.5\t12.3\t24\t2009\tAdams\n4\t\u221212.5\t1,025\t4.2\t\u221211\t1,030\t2011\tBrown\n3.5\t9\t17\t3\t10.25\t18\t2015\tCole\n",
	"title, blanks, footer":          "Evidence table,,,,,,,\n,,,,,,,\nextracted by hand,,,,,,,\nstudy,year,n1,mean1,sd1,n2,mean2,sd2\n\nAdams,2009,24,12.3,4.5,25,10.1,4.75\n,,,,,,,\nBrown,2011,1030,-11,4.2,1025,-12.5,4\nCole,2015,18,10.25,3,17,9,3.5\nTotal,,1072,,,1067,,\n\"Note: SDs from table 2, all of them\",,,,,,,\n",
	"two heading rows":               ",,Treatment,,,Control,,\nStudy,Year,n,Mean,SD,n,Mean,SD\nAdams,2009,24,12.3,4.5,25,10.1,4.75\nBrown,2011,1030,-11,4.2,1025,-12.5,4\nCole,2015,18,10.25,3,17,9,3.5\n",
	"figures above groups":           ",,n,,Mean,,SD,\nStudy,Year,Break,Control,Break,Control,Break,Control\nAdams,2009,24,25,12.3,10.1,4.5,4.75\nBrown,2011,1030,1025,-11,-12.5,4.2,4\nCole,2015,18,17,10.25,9,3,3.5\n",
	"group named by the field":       "Study,Year,n (break),M (break),SD (break),n (no break),M (no break),SD (no break)\nAdams,2009,24,12.3,4.5,25,10.1,4.75\nBrown,2011,1030,-11,4.2,1025,-12.5,4\nCole,2015,18,10.25,3,17,9,3.5\n",
	"mean (SD) in one cell":          "Study,Year,n treatment,Mean (SD) treatment,n control,Mean (SD) control\nAdams,2009,24,12.3 (4.5),25,10.1 (4.75)\nBrown,2011,1030,-11 (4.2),1025,-12.5 (4)\nCole,2015,18,10.25 (3),17,9 (3.5)\n",
	"mean ± SD in one cell":          "Study|Year|n treatment|Treatment (mean ± SD)|n control|Control (mean ± SD)\nAdams|2009|24|12.3 ± 4.5|25|10.1±4.75\nBrown|2011|1,030|\u221211 ± 4.2|1,025|\u221212.5 ± 4\nCole|2015|18|10.25 ± 3|17|9 ± 3.5\n",
	"three figures in one cell":      "Study\tYear\tTreatment: n, mean (SD)\tControl: n, mean (SD)\nAdams\t2009\t24, 12.3 (4.5)\t25, 10.1 (4.75)\nBrown\t2011\t1030, -11 (4.2)\t1025, -12.5 (4)\nCole\t2015\t18, 10.25 (3)\t17, 9 (3.5)\n",
	"one row per group":              "Study,Year,Group,n,Mean,SD\nAdams,2009,Break,24,12.3,4.5\nAdams,2009,Control,25,10.1,4.75\nBrown,2011,Break,1030,-11,4.2\nBrown,2011,Control,1025,-12.5,4\nCole,2015,Break,18,10.25,3\nCole,2015,Control,17,9,3.5\n",
	"one row per group, labels once": "Study,Year,Condition,n,Mean,SD\nAdams,2009,Control,25,10.1,4.75\n,,Break,24,12.3,4.5\nBrown,2011,Control,1025,-12.5,4\n,,Break,1030,-11,4.2\nCole,2015,Control,17,9,3.5\n,,Break,18,10.25,3\n",
	"units and notes":                "Study,Year,n treatment,Mean treatment (ms),SD treatment [ms],n control,Mean control (ms),SD control [ms],Comments,Country\nAdams,2009,24,12.3,4.5,25,10.1,4.75,\"two sites, one ward\",X\nBrown,2011,1030,-11,4.2,1025,-12.5,4,,\nCole,2015,18,10.25,3,17,9,3.5,,Y\n",
	"years in the labels":            "Author (year),n treatment,mean treatment,sd treatment,n control,mean control,sd control\nAdams (2009),24,12.3,4.5,25,10.1,4.75\nBrown (2011),1030,-11,4.2,1025,-12.5,4\nCole (2015),18,10.25,3,17,9,3.5\n",
	"codes and camel case":           "studyID,pubYear,nTreat,meanTreat,sdTreat,nCtrl,meanCtrl,sdCtrl\nAdams,2009,24,12.3,4.5,25,10.1,4.75\nBrown,2011,1030,-11,4.2,1025,-12.5,4\nCole,2015,18,10.25,3,17,9,3.5\n",
	"stars, spaces, headings twice":  "Study , Year , N Treatment, Mean Treatment , SD Treatment, N Control, Mean Control, SD Control\n Adams ,2009, 24 , 12.3* ,4.5,25,10.1,4.75 \nStudy , Year , N Treatment, Mean Treatment , SD Treatment, N Control, Mean Control, SD Control\nBrown,2011,\"1 030\",-11,4.2,\"1,025\",-12.5,4\nCole,2015,18,10.25,3,17,9,3.5\n",
}

// gist is what must be the same in all versions.
func gist(s *Sheet) string {
	var b strings.Builder
	for _, r := range s.Records {
		name, _, _ := strings.Cut(r.Study, " (")
		fmt.Fprintf(&b, "%s %d", name, r.Year)
		got := figuresOf(r)
		for _, m := range slices.Sorted(maps.Keys(got)) {
			fmt.Fprintf(&b, " %s=%v", m, got[m])
		}
		b.WriteByte('\n')
	}
	return b.String()
}

func TestMessyVersionsAgree(t *testing.T) {
	want := gist(readCSVText(t, plainVersion, Options{}))
	if !strings.Contains(want, "Brown 2011 control mean=-12.5 control n=1025 control sd=4 treatment mean=-11 treatment n=1030 treatment sd=4.2") {
		t.Fatal(want)
	}
	for name, text := range messyVersions {
		opt := Options{}
		if strings.HasPrefix(name, "group named") {
			opt.Groups = []string{"break", "no break"}
		}
		s := readCSVText(t, text, opt)
		if got := gist(s); got != want {
			t.Errorf("%s:\n%swant\n%s%s", name, got, want, kindsOf(s.Findings))
		}
		for _, f := range s.Findings {
			if f.Severity == "error" {
				t.Errorf("%s: %s", name, f)
			}
		}
	}
}

// The same with cells merged over columns and rows, and in the three workbook formats.
func TestMergedVersionsAgree(t *testing.T) {
	want := gist(readCSVText(t, plainVersion, Options{}))
	f := excelize.NewFile()
	defer f.Close()
	rows := [][]any{{"Evidence table of the review"}, {"Study", "Year", "Group", "n", "Outcome"}, {nil, nil, nil, nil, "Mean", "SD"}}
	for _, r := range [][]any{{"Adams", 2009, 24, 12.3, 4.5, 25, 10.1, 4.75}, {"Brown", 2011, 1030, -11, 4.2, 1025, -12.5, 4}, {"Cole", 2015, 18, 10.25, 3, 17, 9, 3.5}} {
		rows = append(rows, []any{r[0], r[1], "Break", r[2], r[3], r[4]}, []any{nil, nil, "Control", r[5], r[6], r[7]})
	}
	for i, r := range rows {
		for j, v := range r {
			if v != nil {
				if err := f.SetCellValue("Sheet1", address(j+1, i+1), v); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
	for _, m := range []string{"A1:F1", "A2:A3", "B2:B3", "C2:C3", "D2:D3", "E2:F2", "A4:A5", "B4:B5", "A6:A7", "B6:B7", "A8:A9", "B8:B9"} {
		a, b, _ := strings.Cut(m, ":")
		if err := f.MergeCell("Sheet1", a, b); err != nil {
			t.Fatal(err)
		}
	}
	var b bytes.Buffer
	if err := f.Write(&b); err != nil {
		t.Fatal(err)
	}
	if d := os.Getenv("KEEP_MERGED"); d != "" { // to make the other formats from, by a spreadsheet program
		if err := os.WriteFile(filepath.Join(d, "merged.xlsx"), b.Bytes(), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	s := mustRead(t, write(t, "merged.xlsx", b.Bytes()), Options{})
	if got := gist(s); got != want {
		t.Errorf("xlsx:\n%swant\n%s%s", got, want, kindsOf(s.Findings))
	}
	if s.Layout != "one row per group" || !strings.Contains(kindsOf(s.Findings), "merged-cells") {
		t.Errorf("%s %s", s.Layout, kindsOf(s.Findings))
	}
	for _, name := range []string{"merged.ods", "merged.xls"} {
		s := mustRead(t, filepath.Join("testdata", name), Options{})
		if got := gist(s); got != want {
			t.Errorf("%s:\n%swant\n%s%s", name, got, want, kindsOf(s.Findings))
		}
	}
}

func TestSharedControl(t *testing.T) {
	s := readCSVText(t, "study,arm,n,mean,sd\nA,low dose,10,5,2\nA,high dose,11,6,2\nA,placebo,12,4,2\nB,drug,10,5,2\nB,placebo,10,4,2\n", Options{})
	if len(s.Records) != 3 || s.Records[0].Reported().Control.N.Value != 12 || s.Records[1].Reported().Control.N.Value != 12 || !strings.Contains(kindsOf(s.Findings), "shared-control@row 4") {
		t.Errorf("%s %s", gist(s), kindsOf(s.Findings))
	}
}

func TestLabelsToldApart(t *testing.T) {
	s := readCSVText(t, "id,author,year,estimate,se\n1,Smith,2001,0.1,0.1\n2,Smith,2004,0.2,0.1\n3,Jones,2004,0.3,0.1\n4,Jones,2004,0.4,0.1\n", Options{})
	var got []string
	for _, r := range s.Records {
		got = append(got, r.Study)
	}
	if strings.Join(got, ",") != "Smith 2001,Smith 2004,Jones,Jones" || kindsOf(s.Findings) != "several-rows-one-study@row 4" {
		t.Errorf("%q %s", got, kindsOf(s.Findings))
	}
}

func TestSecondTable(t *testing.T) {
	s := readCSVText(t, "study,estimate,se\nA,0.1,0.1\nB,0.2,0.1\n\nstudy,n,p\nC,20,0.3\nD,30,0.2\n", Options{})
	if len(s.Records) != 2 || kindsOf(s.Findings) != "second-table@row 5" || s.Findings[0].Severity != "error" {
		t.Errorf("%s %s", gist(s), kindsOf(s.Findings))
	}
	_, err := Read(write(t, "turned.csv", []byte("study,Adams,Brown\nyear,2001,2002\nestimate,0.1,0.2\nse,0.1,0.1\n")), Options{})
	wantProblem(t, err, "no-headings", "stand in columns")
}

func TestAmbiguousComma(t *testing.T) {
	const sheet = "study;n1;mean1;sd1;n2;mean2;sd2\nA;20;1,234;200;20;1,300;210\n"
	s := readCSVText(t, sheet, Options{})
	if got := kindsOf(s.Findings); got != "arms-by-number@A1 ambiguous-comma@C2 ambiguous-comma@F2" {
		t.Error(got)
	}
	for decimal, want := range map[string]float64{",": 1.234, ".": 1234} {
		r := readCSVText(t, sheet, Options{Decimal: decimal}).Records[0].Reported()
		if r.Treatment.Mean.Value != want {
			t.Errorf("decimal mark %q: %v", decimal, r.Treatment.Mean)
		}
	}
	// A third cell settles it, and a count proves that the comma is a thousands mark.
	for _, more := range []string{"B;20;0,5;2;20;1,5;2\n", "B;1,020;5;2;20;1;2\n"} {
		s := readCSVText(t, sheet+more, Options{})
		want := 1.234
		if strings.Contains(more, "1,020") {
			want = 1234
		}
		if r := s.Records[0].Reported(); r.Treatment.Mean.Value != want || strings.Contains(kindsOf(s.Findings), "ambiguous") {
			t.Errorf("%s: %v %s", more, r.Treatment.Mean, kindsOf(s.Findings))
		}
	}
}

func TestGroupsNamedByThePlan(t *testing.T) {
	s := readCSVText(t, "study,arm,n,mean,sd\nA,Drug Y,10,5,2\nA,Drug X,11,6,2\nB,Drug X,10,5,2\nB,Drug Y,10,4,2\n", Options{Groups: []string{"drug x", "drug y"}})
	if got := gist(s); got != "A 0 control mean=5 control n=10 control sd=2 treatment mean=6 treatment n=11 treatment sd=2\nB 0 control mean=4 control n=10 control sd=2 treatment mean=5 treatment n=10 treatment sd=2\n" {
		t.Error(got, kindsOf(s.Findings))
	}
}

func TestPercentFormats(t *testing.T) {
	f := excelize.NewFile()
	defer f.Close()
	style, err := f.NewStyle(&excelize.Style{NumFmt: 9})
	if err != nil {
		t.Fatal(err)
	}
	for cell, v := range map[string]any{"A1": "study", "B1": "events treatment", "C1": "n treatment", "D1": "risk control", "E1": "n control", "F1": "ci level", "A2": "A", "B2": 0.25, "C2": 40, "D2": 0.3, "E2": 50, "F2": 0.9} {
		if err := f.SetCellValue("Sheet1", cell, v); err != nil {
			t.Fatal(err)
		}
	}
	for _, cell := range []string{"B2", "D2", "F2"} {
		if err := f.SetCellStyle("Sheet1", cell, cell, style); err != nil {
			t.Fatal(err)
		}
	}
	p := filepath.Join(t.TempDir(), "a.xlsx")
	if err := f.SaveAs(p); err != nil {
		t.Fatal(err)
	}
	s := mustRead(t, p, Options{})
	r := s.Records[0].Reported()
	if r.Treatment.Proportion.Value != 0.25 || r.Treatment.Events.Given || r.Control.Proportion.Value != 0.3 || r.CILevel.Value != 0.9 || len(s.Findings) != 0 {
		t.Errorf("%+v %s", r, kindsOf(s.Findings))
	}
}

func TestSections(t *testing.T) {
	s := readCSVText(t, "study,estimate,se\nNights\nA,0.1,0.1\nB,0.2,0.1\nDays,,\nC,0.3,0.1\n", Options{})
	if len(s.Records) != 3 || s.Records[1].Subgroup != "Nights" || s.Records[2].Subgroup != "Days" || kindsOf(s.Findings) != "row-without-figures@row 2 row-without-figures@row 5" {
		t.Errorf("%+v %s", s.Records, kindsOf(s.Findings))
	}
}

func TestLogRankVariance(t *testing.T) {
	r := readCSVText(t, "study,O-E,V\nA,-5.2,20.5\n", Options{}).Records[0].Reported()
	if r.ObservedMinusExpected.Value != -5.2 || r.LogRankVariance.Value != 20.5 || r.Variance.Given {
		t.Errorf("%+v", r)
	}
}
