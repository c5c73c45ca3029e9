package check

import (
	"bytes"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"footing/plan"
	"footing/plan/edition"
	"footing/plan/result"
	"footing/reports"
)

const sheet = `study,year,n treatment,mean treatment,sd treatment,n control,mean control,sd control
A,2004,30,12.1,4.0,31,10.2,4.2
B,2008,45,11.8,3.9,44,10.9,4.1
C,2011,60,12.6,4.4,58,10.8,4.3
D,2016,25,11.1,4.1,27,10.6,3.8
E,2019,80,12.0,4.2,79,10.9,4.0
`

const planText = `title: Trial plan
date: 2026-11-03
evidence: {file: EVIDENCE, higher is better: true}
range:
  smallest worthwhile effect: {value: 0.2, source: panel, who: board}
target: {power: 0.8, size for: smallest-worthwhile}
`

// written is a report with the plan and the evidence in it, as the command writes it.
func written(t *testing.T, evidence string) []byte {
	t.Helper()
	dir := t.TempDir()
	text := []byte(strings.Replace(planText, "EVIDENCE", evidence, 1))
	for name, data := range map[string][]byte{"plan.yaml": text, "evidence.csv": []byte(sheet)} {
		if err := os.WriteFile(filepath.Join(dir, name), data, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	f, err := plan.Load(filepath.Join(dir, "plan.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	f.Evidence.File = "evidence.csv"
	p, err := plan.Run(f)
	if err != nil {
		t.Fatal(err)
	}
	page, err := reports.HTML(p, reports.Enclose("plan.yaml", text), reports.Enclose(evidence, []byte(sheet)))
	if err != nil {
		t.Fatal(err)
	}
	return page
}

func checked(t *testing.T, page []byte) *result.Check {
	t.Helper()
	c, err := Report("report.html", page)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func TestEveryPrintedNumberComesOutAgain(t *testing.T) {
	c := checked(t, written(t, "evidence.csv"))
	if c.Numbers < 300 || c.Reproduced != c.Numbers || len(c.Differs) > 0 {
		t.Errorf("%d of %d reproduced: %+v", c.Reproduced, c.Numbers, c.Differs)
	}
	if c.Plan.Name != "plan.yaml" || c.Evidence == nil || c.Evidence.Name != "evidence.csv" || len(c.Evidence.SHA256) != 64 {
		t.Errorf("%+v %+v", c.Plan, c.Evidence)
	}
}

// One digit of one number changed by hand is found, wherever it stands.
func TestAChangedDigitIsFound(t *testing.T) {
	page := written(t, "evidence.csv")
	numbers, err := reports.PrintedNumbers(page)
	if err != nil {
		t.Fatal(err)
	}
	tried := 0
	for i := 0; i < len(numbers); i += len(numbers)/25 + 1 {
		n := numbers[i]
		if len(n.Text) < 3 {
			continue
		}
		last := n.Text[len(n.Text)-1]
		if last < '0' || last > '9' {
			continue
		}
		forged := n.Text[:len(n.Text)-1] + string('0'+(last-'0'+1)%10)
		changed := changedOnce(t, page, numbers, n.Text, forged)
		if changed == nil {
			continue
		}
		if c := checked(t, changed); len(c.Differs) == 0 || c.Reproduced == c.Numbers {
			t.Errorf("%q under %q changed to %q: not found", n.Text, n.Label, forged)
		}
		tried++
	}
	if tried < 5 {
		t.Errorf("only %d numbers were changed", tried)
	}
}

// changedOnce writes forged in place of one number of the list, where that stands alone in its element; nil where it does not. Drawings for telephones and the
// panel repeat numbers and are not read: a place that changes nothing in the list is one of theirs.
func changedOnce(t *testing.T, page []byte, numbers []reports.PrintedNumber, text, forged string) []byte {
	t.Helper()
	at := bytes.Index(page, []byte("<body"))
	for {
		next := bytes.Index(page[at:], []byte(">"+text+"<"))
		if next < 0 {
			return nil
		}
		at += next + 1
		changed := append([]byte{}, page...)
		copy(changed[at:], forged)
		list, err := reports.PrintedNumbers(changed)
		if err != nil {
			t.Fatal(err)
		}
		if !slices.Equal(list, numbers) {
			return changed
		}
	}
}

func TestEnclosedFilesThatWereChangedAreRefused(t *testing.T) {
	page := written(t, "evidence.csv")
	at := bytes.Index(page, []byte(`"data":"`))
	if at < 0 {
		at = bytes.Index(page, []byte(`class="enclosed"`)) + 60
	}
	changed := append([]byte{}, page...)
	if changed[at+20] == 'A' {
		changed[at+20] = 'B'
	} else {
		changed[at+20] = 'A'
	}
	if _, err := Report("report.html", changed); err == nil {
		t.Error("a changed file was taken")
	}
	for _, bad := range []string{"", "<p>no report</p>"} {
		if _, err := Report("report.html", []byte(bad)); err == nil || !strings.Contains(err.Error(), "carries no plan") {
			t.Errorf("%q: %v", bad, err)
		}
	}
}

// A plan reaches no file outside the report, whatever path it names.
func TestAPlanReachesNothingOutside(t *testing.T) {
	secret := filepath.Join(t.TempDir(), "secret.csv")
	if err := os.WriteFile(secret, []byte("study,estimate,standard error\nX,9,1\nY,9,1\nZ,9,1\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"../../evidence.csv", secret, `..\evidence.csv`} {
		c := checked(t, written(t, filepath.ToSlash(name)))
		if c.Numbers < 300 {
			t.Errorf("%s: %d numbers", name, c.Numbers)
		}
		for _, d := range c.Differs {
			if strings.HasPrefix(d.Computed, "9") {
				t.Errorf("%s: %+v", name, d)
			}
		}
	}
}

func TestSafeName(t *testing.T) {
	for given, want := range map[string]string{"a/b.csv": "b.csv", `..\x.csv`: "x.csv", "..": "f", ".": "f", "/": "f", "": "f", ".hidden": "f", "a\x00b": "f", "plan.yaml": "plan.yaml"} {
		if got := safeName(given, "f"); got != want {
			t.Errorf("%q: %q", given, got)
		}
	}
}

// A report that compares itself with kept editions carries them, and its comparison comes out again too.
func TestComparisonWithEditionsComesOutAgain(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "plan.yaml")
	text := []byte(strings.Replace(planText, "EVIDENCE", "evidence.csv", 1))
	put := func(name string, data []byte) {
		if err := os.WriteFile(filepath.Join(dir, name), data, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	load := func() *plan.File {
		f, err := plan.Load(path)
		if err != nil {
			t.Fatal(err)
		}
		return f
	}
	put("plan.yaml", text)
	put("evidence.csv", []byte(sheet))
	if _, err := plan.Freeze(load(), "2026-11-03", "AB", "first", false); err != nil {
		t.Fatal(err)
	}
	more := []byte(sheet + "F,2022,70,11.5,4.0,70,10.9,4.1\n")
	put("evidence.csv", more)
	p, err := plan.RunSince(load())
	if err != nil {
		t.Fatal(err)
	}
	if p.Since == nil || len(p.Since.Added) != 1 {
		t.Fatalf("no comparison: %+v", p.Since)
	}
	pack, err := edition.Beside(path).Pack()
	if err != nil {
		t.Fatal(err)
	}
	page, err := reports.HTML(p, reports.Enclose("plan.yaml", text), reports.Enclose("evidence.csv", more), reports.Enclose("plan"+edition.PackEnding, pack))
	if err != nil {
		t.Fatal(err)
	}
	c := checked(t, page)
	if c.Editions == nil || c.Reproduced != c.Numbers || len(c.Differs) > 0 {
		t.Errorf("%d of %d reproduced: %+v", c.Reproduced, c.Numbers, c.Differs)
	}
	without, err := reports.HTML(p, reports.Enclose("plan.yaml", text), reports.Enclose("evidence.csv", more))
	if err != nil {
		t.Fatal(err)
	}
	if c := checked(t, without); len(c.Differs) == 0 {
		t.Error("a comparison without its editions can't come out again, and was not told")
	}
}
