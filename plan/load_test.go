package plan

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"footing/internal/finding"
)

func parse(t *testing.T, text string) (*File, finding.Problems) {
	t.Helper()
	f, err := Parse("plan.yaml", []byte(text))
	var ps finding.Problems
	if err != nil && !errors.As(err, &ps) {
		t.Fatalf("error of type %T: %v", err, err)
	}
	return f, ps
}

const evidenceLine = "evidence: {file: e.xlsx}\n"

func TestParseReportsEverythingAtOnce(t *testing.T) {
	_, ps := parse(t, `titel: x
evidence:
  file: e.xlsx
  higher is better: perhaps
pool:
  heterogenity: dersimonian-laird
study:
  alpha: "0.05"
  sides: tow
target:
  power: [0.8]
  heterogenety: x
`)
	want := []string{
		`plan.yaml:1:1: "titel" is not a key here; did you mean "title"?`,
		`plan.yaml:4:21: evidence: higher is better: "perhaps" stands where true or false belongs; write true or false`,
		`plan.yaml:6:3: "heterogenity" is not a key here; did you mean "heterogeneity"?`,
		`plan.yaml:8:10: study: alpha: "0.05" stands where a number belongs; write a number`,
		`plan.yaml:9:10: study: sides: "tow" is none of the choices; did you mean "two"?`,
		`plan.yaml:11:10: target: power: a list stands where a number belongs; write a number`,
		`plan.yaml:12:3: "heterogenety" is not a key here; did you mean "heterogeneity", which belongs under "pool:"?`,
	}
	got := strings.Split(ps.Error(), "\n")
	if len(got) != len(want) {
		t.Fatalf("got %d problems:\n%s", len(got), ps.Error())
	}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("problem %d:\n got %s\nwant %s", i, got[i], want[i])
		}
	}
}

func TestParseRefuses(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{evidenceLine + "study: {alpha: 5}", "2:16: study: alpha: 5 is not possible; write 0.05 for 5%"},
		{evidenceLine + "study: {alpha: 0}", "study: alpha: 0 is not possible"},
		{evidenceLine + "study: {alpha: .nan}", "stands where a number belongs"},
		{evidenceLine + "study: {alpha: .inf}", "stands where a number belongs"},
		{evidenceLine + "study: {alpha: 0x1p-4}", "stands where a number belongs"},
		{evidenceLine + "target: {power: 0.04}", "does not exceed alpha 0.05"},
		{evidenceLine + "target: {power: 80}", "write 0.8 for 80%"},
		{evidenceLine + "target: {assurance: 1}", "target: assurance: 1 is not possible"},
		{evidenceLine + "target: {size for: smallest-worthwhile}", "no smallest worthwhile effect is given"},
		{evidenceLine + "target: {size for: last}\nrange: {scenarios: {last one: 0.3}}", `"last" is none of the choices`},
		{evidenceLine + "range: {scenarios: {pooled: 0.3}}", "this name belongs to a scenario that always exists"},
		{evidenceLine + "range: {basis: predictve}", `did you mean "predictive"?`},
		{evidenceLine + "range: {smallest worthwhile effect: {low: 0.1, high: 0.2}}", "no value is given"},
		{evidenceLine + "range: {smallest worthwhile effect: {value: 0.3, low: 0.1, high: 0.2}}", "0.3 does not lie between low 0.1 and high 0.2"},
		{evidenceLine + "range: {smallest worthwhile effect: {value: 0.3, low: 0.1}}", "only one of low and high is given"},
		{evidenceLine + "range: {smallest worthwhile effect: {value: 0.3, low: 0.1, high: 0.5, as: rnge}}", `did you mean "range"?`},
		{evidenceLine + "study: {standard deviation: -2}", "study: standard deviation: -2 is not possible"},
		{evidenceLine + "study: {control risk: 1.2}", "study: control risk: 1.2 is not possible"},
		{evidenceLine + "study: {baseline correlation: 1}", "study: baseline correlation: 1 is not possible"},
		{evidenceLine + "study: {dropout: 1}", "study: dropout: 1 is not possible"},
		{evidenceLine + "study: {allocation: 0:1}", "is no allocation"},
		{evidenceLine + "study: {groups: [a]}", "1 names are given"},
		{evidenceLine + "date: 3.11.2026", "is no date"},
		{evidenceLine + "target: {budget: {fixed: 10, at most: 10}}", "leaves nothing after the fixed cost"},
		{evidenceLine + "revise when: {required n moves by: ten}", "is no share"},
		{evidenceLine + "seed: -1", "stands where a whole number from 0 up belongs"},
		{evidenceLine + "title: x\ntitle: y", "stands here a second time (first in line 2)"},
		{evidenceLine + "study: {? [a, b] : 1}", "a key must be words"},
		{"evidence: {searched: {found: 3, screened: 5}}\nrange: {smallest worthwhile effect: 0.2}", "5 is more than the 3 of the step before"},
		{"title: x", "nothing to size for"},
		{"", "it holds no keys"},
		{"- a\n- b", "it holds no keys"},
		{"title: [", "this is no valid YAML"},
		{"title: \"\xff\"", "this is no valid YAML"},
	} {
		_, ps := parse(t, c.text)
		if !strings.Contains(ps.Error(), c.want) {
			t.Errorf("%q:\n got %v\nwant %s", c.text, ps, c.want)
		}
	}
}

func TestParseKeepsWhatWasWritten(t *testing.T) {
	f, ps := parse(t, "title: 0123\nevidence: {file: e.xlsx, keep where: year >= 2005}\nstudy:\n  dropout: 0.12\n  baseline correlation: {value: 0.55, low: 0.4, high: 0.7, source: pilot}\n  allocation: 2:1\n")
	if ps != nil {
		t.Fatal(ps)
	}
	if f.Title != "0123" || f.Study.Allocation != "2:1" || len(f.Evidence.KeepWhere) != 1 || f.Evidence.KeepWhere[0] != "year >= 2005" {
		t.Errorf("got %+v", f)
	}
	if d := f.Study.Dropout; d.Value != 0.12 || d.Line != 4 || d.Column != 12 {
		t.Errorf("dropout %+v", d)
	}
	if b := f.Study.BaselineCorrelation; b.Value != 0.55 || *b.Low != 0.4 || *b.High != 0.7 || b.Source != "pilot" || b.Line != 5 {
		t.Errorf("baseline correlation %+v", b)
	}
}

func TestDefaultsAreListedAsAssumed(t *testing.T) {
	f, ps := parse(t, evidenceLine+"study: {alpha: 0.01, dropout: {value: 0.1, source: log of 2024}, control risk: 0.3}")
	if ps != nil {
		t.Fatal(ps)
	}
	full, as := f.WithDefaults()
	if *full.Study.Alpha != 0.01 || *full.Target.Power != 0.8 || full.Target.SizeFor != "cautious" || full.Pool.Interval != "hartung-knapp-floored" || full.Study.Allocation != "1:1" {
		t.Errorf("defaults: %+v", full)
	}
	if f.Target.Power != nil || f.Study.Allocation != "" {
		t.Error("WithDefaults changed the plan as written")
	}
	assumed := map[string]bool{}
	for _, a := range as {
		assumed[a.Name] = a.Assumed
	}
	for name, want := range map[string]bool{"target: power": true, "pool: heterogeneity": true, "evidence: higher is better": true, "study: control risk": true, "study: dropout": false} {
		if got, listed := assumed[name]; !listed || got != want {
			t.Errorf("%s: listed %t, assumed %t, want %t", name, listed, got, want)
		}
	}
	if _, listed := assumed["study: alpha"]; listed {
		t.Error("a value that the plan gives is listed as a default")
	}
}

func TestLoadSaysWhichFile(t *testing.T) {
	dir := t.TempDir()
	for path, want := range map[string]string{filepath.Join(dir, "none.yaml"): "there is no such file", dir: "this is a folder"} {
		if _, err := Load(path); err == nil || !strings.Contains(err.Error(), want) || !strings.HasPrefix(err.Error(), path+": ") {
			t.Errorf("%s: %v", path, err)
		}
	}
	huge := filepath.Join(dir, "huge.yaml")
	if err := os.WriteFile(huge, make([]byte, maxPlanBytes+1), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := Load(huge); err == nil || !strings.Contains(err.Error(), "far too large") {
		t.Errorf("%v", err)
	}
}

// FuzzParse: whatever stands in a file, reading ends with a plan or with problems that lie inside the file.
func FuzzParse(f *testing.F) {
	f.Add([]byte(evidenceLine + "study: {alpha: 0.05}"))
	f.Add([]byte("a: &a [*a]\n"))
	f.Add([]byte("a: &a {b: 1}\nstudy: *a\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		_, err := Parse("plan.yaml", data)
		var ps finding.Problems
		if err != nil && !errors.As(err, &ps) {
			t.Fatalf("error of type %T", err)
		}
		for _, p := range ps {
			if p.Place.Line < 0 || p.Place.Line > strings.Count(string(data), "\n")+strings.Count(string(data), "\r")+strings.Count(string(data), "\u2028")+strings.Count(string(data), "\u2029")+strings.Count(string(data), "\u0085")+2 {
				t.Fatalf("%s lies outside the file", p.Place)
			}
		}
	})
}
