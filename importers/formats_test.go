package importers

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// dump lists what was read, one cell a line, for comparing file formats.
func dump(s *Sheet) string {
	var b strings.Builder
	for _, r := range s.Records {
		fmt.Fprintf(&b, "%d %q %d %s hidden=%v ns=%v\n", r.Row, r.Study, r.Year, r.RiskOfBias, r.Hidden, r.Reported().NotSignificant)
		for _, c := range r.Cells() {
			fmt.Fprintf(&b, "  %s %s=%q\n", c.Address, c.Meaning, c.Text)
		}
		rep := r.Reported()
		fmt.Fprintf(&b, "  %+v\n  %+v\n  %+v\n", rep.Treatment.Mean, rep.Treatment.SD, rep.P)
	}
	b.WriteString(kindsOf(s.Findings))
	return b.String()
}

// The three files in testdata hold the same invented sheet, saved by a spreadsheet program: formulas with values, an
// error, dates, percentages, a hidden row, column and sheet, merged cells.
func TestFormatsAgree(t *testing.T) {
	want := `4 "Müller & Søn" 2009 low hidden=false ns=false
  A4 study="Müller & Søn"
  B4 year="2009"
  C4 treatment mean="12.3"
  D4 treatment sd="4.5"
  E4 treatment n="24"
  F4 control mean="10.1"
  G4 control sd="4.75"
  H4 control n="25"
  I4 p="0.03"
  J4 risk of bias="low"
  K4 ="2026-12-05"
  L4 ="0.125"
`
	var first string
	for _, ext := range []string{"xlsx", "ods", "xls"} {
		s := mustRead(t, filepath.Join("testdata", "mixed."+ext), Options{Name: "mixed"})
		got := dump(s)
		if !strings.HasPrefix(got, want) {
			t.Errorf("%s: got\n%s\nwant to start with\n%s", ext, got, want)
		}
		if first == "" {
			first = got
		} else if got != first {
			t.Errorf("%s differs from xlsx:\n%s", ext, cmp.Diff(first, got))
		}
		if fmt.Sprint(s.Sheets) != "[Studies Hidden one Notes]" {
			t.Errorf("%s: sheets %q", ext, s.Sheets)
		}
	}
}

// A file that is cut short is refused, or read whole; never read as fewer studies.
func TestCutShort(t *testing.T) {
	for _, ext := range []string{"xlsx", "ods", "xls"} {
		data, err := os.ReadFile(filepath.Join("testdata", "mixed."+ext))
		if err != nil {
			t.Fatal(err)
		}
		whole := len(mustRead(t, filepath.Join("testdata", "mixed."+ext), Options{}).Records)
		for n := 9; n < len(data); n += 97 {
			s, err := Read(write(t, "cut", data[:n]), Options{})
			if err == nil && len(s.Records) != whole {
				t.Fatalf("%s cut at %d of %d bytes: %d records of %d", ext, n, len(data), len(s.Records), whole)
			}
			if err == nil && ext != "xls" {
				t.Fatalf("%s cut at %d of %d bytes was read", ext, n, len(data))
			}
			checkSheet(t, s, err)
		}
	}
}

func FuzzOldWorkbook(f *testing.F) {
	data, err := os.ReadFile("testdata/mixed.xls")
	if err != nil {
		f.Fatal(err)
	}
	f.Add(data)
	f.Fuzz(func(t *testing.T, data []byte) {
		s, err := readBytes("fuzz.xls", data, smallLimits.withDefaults())
		checkSheet(t, s, err)
	})
}

func FuzzOpenDocument(f *testing.F) {
	z, err := zip.OpenReader("testdata/mixed.ods")
	if err != nil {
		f.Fatal(err)
	}
	defer z.Close()
	rc, err := z.Open("content.xml")
	if err != nil {
		f.Fatal(err)
	}
	content, err := io.ReadAll(rc)
	if err != nil {
		f.Fatal(err)
	}
	f.Add(content)
	f.Fuzz(func(t *testing.T, content []byte) {
		var b bytes.Buffer
		w := zip.NewWriter(&b)
		for name, data := range map[string][]byte{"mimetype": []byte("application/vnd.oasis.opendocument.spreadsheet"), "content.xml": content} {
			part, err := w.Create(name)
			if err != nil {
				t.Fatal(err)
			}
			if _, err := part.Write(data); err != nil {
				t.Fatal(err)
			}
		}
		if err := w.Close(); err != nil {
			t.Fatal(err)
		}
		s, err := readBytes("fuzz.ods", b.Bytes(), smallLimits.withDefaults())
		checkSheet(t, s, err)
	})
}
