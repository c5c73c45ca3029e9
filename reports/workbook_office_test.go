package reports

import (
	"archive/zip"
	"bytes"
	"io"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"testing"
)

// formulaValue is the value that the file holds beside a formula.
var formulaValue = regexp.MustCompile(`(</f>)<v>[^<]*</v>`)

// withoutValues takes the values from all formulas of a workbook, so that a spreadsheet program has to compute them.
func withoutValues(t *testing.T, data []byte) ([]byte, int) {
	t.Helper()
	in, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	w, taken := zip.NewWriter(&out), 0
	for _, f := range in.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		part, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		r.Close()
		taken += len(formulaValue.FindAll(part, -1))
		dst, err := w.Create(f.Name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := dst.Write(formulaValue.ReplaceAll(part, []byte("$1"))); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes(), taken
}

// recalculated is the workbook as a spreadsheet program saves it after computing every formula. Without one the test is skipped and says so, unless
// FOOTING_REQUIRE_OFFICE is 1.
func recalculated(t *testing.T, data []byte) opened {
	t.Helper()
	office, err := exec.LookPath("soffice")
	if err != nil {
		if os.Getenv("FOOTING_REQUIRE_OFFICE") == "1" {
			t.Fatal("FOOTING_REQUIRE_OFFICE is 1 and there is no soffice")
		}
		t.Skip("no soffice on this machine: the formulas were not recalculated by a spreadsheet program")
	}
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "in.xlsx"), data, 0o600); err != nil {
		t.Fatal(err)
	}
	cmd := exec.Command(office, "-env:UserInstallation=file://"+filepath.Join(dir, "profile"), "--headless", "--convert-to", "xlsx:Calc MS Excel 2007 XML", "--outdir", filepath.Join(dir, "out"), filepath.Join(dir, "in.xlsx"))
	if said, err := cmd.CombinedOutput(); err != nil {
		t.Fatalf("%v: %s", err, said)
	}
	back, err := os.ReadFile(filepath.Join(dir, "out", "in.xlsx"))
	if err != nil {
		t.Fatal(err)
	}
	return reopen(t, back)
}

// A spreadsheet program that computes the formulas afresh comes to the values that footing wrote beside them: two programs, one arithmetic.
func TestWorkbookFormulasRecalculated(t *testing.T) {
	if testing.Short() {
		t.Skip("takes seconds")
	}
	p := bcgPlan(t)
	data, err := Workbook(p)
	if err != nil {
		t.Fatal(err)
	}
	bare, taken := withoutValues(t, data)
	ours, theirs := reopen(t, data), recalculated(t, bare)
	compared, worst := 0, 0.0
	for row := 1; row < firstStudy+len(p.Pool.Studies); row++ {
		for _, col := range []string{"B", "C", "D", "E", "F", "G", "H", "I", "J", "K"} {
			cell := col + strconv.Itoa(row)
			if f, err := ours.f.GetCellFormula("Pooling", cell); err != nil || f == "" {
				continue
			}
			want, got := ours.number("Pooling", cell), theirs.number("Pooling", cell)
			off := math.Abs(got-want) / math.Max(1e-3, math.Abs(want))
			worst = math.Max(worst, off)
			if off > 1e-9 {
				t.Errorf("%s is %.15g recalculated, %.15g as written", cell, got, want)
			}
			compared++
		}
	}
	if compared != taken || compared < 13*9+15 {
		t.Errorf("%d cells compared, %d formulas in the file", compared, taken)
	}
	t.Logf("%d formulas recalculated, largest relative difference %.1e", compared, worst)
}
