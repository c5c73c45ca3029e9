package importers

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime"
	"strconv"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

// bigRows makes n rows of 12 columns (invented figures from a fixed rule).
func bigRows(n int) (head []string, row func(i int) []any) {
	head = []string{"study", "year", "n treatment", "mean treatment", "sd treatment", "n control", "mean control", "sd control", "p", "risk of bias", "setting", "notes"}
	return head, func(i int) []any {
		return []any{"Study " + strconv.Itoa(i), 1980 + i%45, 20 + i%50, 10 + float64(i%37)/8, 2 + float64(i%11)/4, 21 + i%50, 9 + float64(i%41)/8, 2 + float64(i%13)/4, float64(1+i%99) / 100,
			[]string{"low", "some concerns", "high"}[i%3], []string{"ward", "home"}[i%2], "row " + strconv.Itoa(i)}
	}
}

func bigWorkbook(b testing.TB, n int) string {
	f := excelize.NewFile()
	defer f.Close()
	w, err := f.NewStreamWriter("Sheet1")
	if err != nil {
		b.Fatal(err)
	}
	head, row := bigRows(n)
	cells := make([]any, len(head))
	for i, h := range head {
		cells[i] = h
	}
	if err := w.SetRow("A1", cells); err != nil {
		b.Fatal(err)
	}
	for i := range n {
		if err := w.SetRow("A"+strconv.Itoa(i+2), row(i)); err != nil {
			b.Fatal(err)
		}
	}
	if err := w.Flush(); err != nil {
		b.Fatal(err)
	}
	p := filepath.Join(b.TempDir(), "big.xlsx")
	if err := f.SaveAs(p); err != nil {
		b.Fatal(err)
	}
	return p
}

func bigText(n int) []byte {
	var b bytes.Buffer
	head, row := bigRows(n)
	b.WriteString(strings.Join(head, ",") + "\n")
	for i := range n {
		for j, v := range row(i) {
			if j > 0 {
				b.WriteByte(',')
			}
			fmt.Fprint(&b, v)
		}
		b.WriteByte('\n')
	}
	return b.Bytes()
}

const bigN = 100_000

func BenchmarkReadWorkbook(b *testing.B) {
	p := bigWorkbook(b, bigN)
	b.ResetTimer()
	for b.Loop() {
		s, err := Read(p, Options{})
		if err != nil || len(s.Records) != bigN {
			b.Fatal(err)
		}
		reportHeap(b, s)
	}
}

// BenchmarkRawWorkbook streams the same rows through the library alone, for comparison.
func BenchmarkRawWorkbook(b *testing.B) {
	p := bigWorkbook(b, bigN)
	b.ResetTimer()
	for b.Loop() {
		f, err := excelize.OpenFile(p, excelize.Options{RawCellValue: true})
		if err != nil {
			b.Fatal(err)
		}
		rows, err := f.Rows("Sheet1")
		if err != nil {
			b.Fatal(err)
		}
		n := 0
		for rows.Next() {
			if _, err := rows.Columns(); err != nil {
				b.Fatal(err)
			}
			n++
		}
		rows.Close()
		f.Close()
		if n != bigN+1 {
			b.Fatal(n)
		}
	}
}

func BenchmarkReadText(b *testing.B) {
	p := write(b, "big.csv", bigText(bigN))
	b.ResetTimer()
	for b.Loop() {
		s, err := Read(p, Options{})
		if err != nil || len(s.Records) != bigN {
			b.Fatal(err)
		}
		reportHeap(b, s)
	}
}

func BenchmarkRawText(b *testing.B) {
	p := write(b, "big.csv", bigText(bigN))
	b.ResetTimer()
	for b.Loop() {
		f, err := os.Open(p)
		if err != nil {
			b.Fatal(err)
		}
		r := csv.NewReader(f)
		for {
			if _, err := r.Read(); err == io.EOF {
				break
			} else if err != nil {
				b.Fatal(err)
			}
		}
		f.Close()
	}
}

// reportHeap says how much memory the sheet holds.
func reportHeap(b *testing.B, s *Sheet) {
	b.StopTimer()
	var m runtime.MemStats
	runtime.GC()
	runtime.ReadMemStats(&m)
	b.ReportMetric(float64(m.HeapAlloc)/1e6, "MB-held")
	runtime.KeepAlive(s)
	b.StartTimer()
}

// A sheet too large for memory (16 MiB) is unpacked into a temporary file, which must be gone afterwards.
func TestNoFilesLeft(t *testing.T) {
	f := excelize.NewFile()
	defer f.Close()
	w, err := f.NewStreamWriter("Sheet1")
	if err != nil {
		t.Fatal(err)
	}
	rows := [][]any{{"study", "estimate", "se", "notes"}}
	for i := range 2000 {
		rows = append(rows, []any{"Study " + strconv.Itoa(i), i, 1, strings.Repeat("note ", 1800)})
	}
	for i, r := range rows {
		if err := w.SetRow("A"+strconv.Itoa(i+1), r); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Flush(); err != nil {
		t.Fatal(err)
	}
	p := filepath.Join(t.TempDir(), "big.xlsx")
	if err := f.SaveAs(p); err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	t.Setenv("TMPDIR", dir)
	s := mustRead(t, p, Options{})
	left, err := os.ReadDir(dir)
	if err != nil || len(left) > 0 || len(s.Records) != 2000 {
		t.Errorf("%d files left (%v)", len(left), err)
	}
}
