package reports

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

func mustHTML(t *testing.T, k int, log bool) []byte {
	t.Helper()
	b, err := HTML(inventedPlan(k, log))
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestSameInputSameBytes(t *testing.T) {
	a, b := mustHTML(t, 12, false), mustHTML(t, 12, false)
	if !bytes.Equal(a, b) {
		t.Error("the same result gave different bytes")
	}
}

// The report stays small and fast: under a megabyte and under a tenth of a second with twenty studies.
func TestSizeAndSpeed(t *testing.T) {
	p := inventedPlan(20, false)
	if _, err := HTML(p); err != nil { // templates and fonts are read once
		t.Fatal(err)
	}
	took := time.Hour
	var b []byte
	for range 7 { // the best of seven: a busy machine is no fault of the report
		start := time.Now()
		page, err := HTML(p)
		if err != nil {
			t.Fatal(err)
		}
		took, b = min(took, time.Since(start)), page
	}
	t.Logf("20 studies: %d bytes in %v", len(b), took)
	if len(b) > 1_000_000 {
		t.Errorf("%d bytes", len(b))
	}
	if took > 200*time.Millisecond && !testing.Short() { // twice the aim, for slower machines; short runs are those under the race detector
		t.Errorf("took %v", took)
	}
}

func TestReportFetchesNothing(t *testing.T) {
	text := string(mustHTML(t, 12, false))
	start := strings.Index(text, "<script>")
	page := text[:start] // what follows is the chart script, which a browser test watches
	for _, bad := range []string{"http://", "https://", "src=", "@import", "url(", "<link", "<iframe", "style=\""} {
		if strings.Contains(page, bad) {
			t.Errorf("the page holds %q", bad)
		}
	}
}

// TestWriteReports writes reports into the folder that FOOTING_FIGURES names, to be looked at.
func TestWriteReports(t *testing.T) {
	dir := os.Getenv("FOOTING_FIGURES")
	if dir == "" {
		t.Skip("FOOTING_FIGURES names no folder")
	}
	for name, b := range map[string][]byte{"report-12": mustHTML(t, 12, false), "report-or": mustHTML(t, 12, true), "report-3": mustHTML(t, 3, false), "report-80": mustHTML(t, 80, false), "report-1000": mustHTML(t, 1000, false)} {
		if err := os.WriteFile(filepath.Join(dir, name+".html"), b, 0o644); err != nil {
			t.Fatal(err)
		}
		t.Logf("%s: %d bytes", name, len(b))
	}
}
