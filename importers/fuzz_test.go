package importers

import (
	"errors"
	"math"
	"os"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/xuri/excelize/v2"

	"footing/internal/finding"
)

// checkSheet holds what must be true of every sheet that was read, whatever stood in the file.
func checkSheet(t *testing.T, s *Sheet, err error) {
	t.Helper()
	if err != nil {
		var p *finding.Problem
		var ps finding.Problems
		if !errors.As(err, &p) && !errors.As(err, &ps) {
			t.Fatalf("the error %v is no finding", err)
		}
		if strings.ContainsAny(err.Error(), "\x1b\x00") {
			t.Fatalf("control characters in the message %q", err)
		}
		return
	}
	for _, r := range s.Records {
		for _, c := range r.Cells() {
			col, row, err := excelize.CellNameToCoordinates(c.Address)
			if err != nil || col != c.Column || row != r.Row {
				t.Fatalf("cell %+v of row %d", c, r.Row)
			}
		}
		rep := r.Reported()
		for m, get := range figures {
			f := get(&rep)
			if math.IsNaN(f.Value) || math.IsInf(f.Value, 0) || f.Given && f.Cell == "" {
				t.Fatalf("%s: %+v", m, f)
			}
		}
	}
	for _, f := range s.Findings {
		if f.Kind == "" || f.What == "" || strings.ContainsAny(f.What, "\x1b\x00\n") {
			t.Fatalf("finding %+v", f)
		}
	}
}

var smallLimits = Options{MaxBytes: 1 << 20, MaxUnzip: 4 << 20, MaxRows: 2000, MaxColumns: 100, MaxCells: 20_000}

func FuzzText(f *testing.F) {
	for _, s := range []string{"study,estimate,standard error\nA,0.3,0.1\n", "study;estimate;SE\nA;0,3;0,1\n", "\xff\xfes\x00t\x00", "\"a", "a\"b,c\n", "study,mean 1,sd 1\n=1+1,NaN,0x10\n", "sep=;\na;b\n", "\xef\xbb\xbf"} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		s, err := readBytes("fuzz.csv", data, smallLimits.withDefaults())
		checkSheet(t, s, err)
	})
}

func FuzzCell(f *testing.F) {
	for _, s := range []string{"1,234.5", "<.001", "−0,31", "1e999", "25 %", "NaN", "1 234", "×10", "0.3*", "12,345,678.9e-12", "0.45 [0.20, 0.71]", "t(45) = 2.3, p < .05", "12/48 (25%)", "12.3 ± 4.5"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		for _, mark := range []decimalMark{0, '.', ','} {
			if c, ok := parseComposite(s, mark); ok {
				for _, v := range c.values {
					if math.IsNaN(v.value) || math.IsInf(v.value, 0) {
						t.Fatalf("%q gave %v", s, v.value)
					}
				}
			}
			n, fault := parseNumber(s, mark)
			if math.IsNaN(n.value) || math.IsInf(n.value, 0) {
				t.Fatalf("%q gave %v", s, n.value)
			}
			if fault == numberFine && !strings.ContainsFunc(plainText(s), func(r rune) bool { return r >= '0' && r <= '9' }) {
				t.Fatalf("%q is a number without a digit", s)
			}
		}
		markEvidence(s)
	})
}

func FuzzHeading(f *testing.F) {
	for _, s := range []string{"M (break)", "95% CI lower", "n1", "χ²", "SD control [ms]", "t", "", "((((", "log OR 90% CI upper"} {
		f.Add(s)
	}
	known := map[Meaning]bool{}
	for _, m := range Meanings() {
		known[m] = true
	}
	f.Fuzz(func(t *testing.T, s string) {
		if len(s) > 300 || !utf8.ValidString(s) {
			return
		}
		if u, ok := understand(s, []string{"break", "no break"}); ok {
			for _, p := range u.meaning.parts() {
				if !known[p] && !(u.rest != "" && p == "se") {
					t.Fatalf("%q has the meaning %q, which is none", s, u.meaning)
				}
			}
		}
		nearestPhrase(s)
	})
}

func FuzzWorkbook(f *testing.F) {
	p := workbook(f, "S", [][]any{{"study", "estimate", "standard error"}, {"A", 0.3, "0,1"}})
	data, err := os.ReadFile(p)
	if err != nil {
		f.Fatal(err)
	}
	f.Add(data)
	f.Add(data[:len(data)/2])
	f.Add([]byte("PK\x03\x04"))
	f.Fuzz(func(t *testing.T, data []byte) {
		s, err := readBytes("fuzz.xlsx", data, smallLimits.withDefaults())
		checkSheet(t, s, err)
	})
}
