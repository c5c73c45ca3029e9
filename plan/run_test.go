package plan

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"

	"footing/plan/edition"
	"footing/plan/result"
)

// Invented counts, for tests of the way from file to result.
const (
	inventedCounts = `study,year,treatment events,treatment n,control events,control n,risk of bias
Ash,2001,33,140,49,141,low
Birch,2003,22,120,40,118,high
Cedar,2005,45,150,57,150,low
Elm,2008,31,160,40,158,
Fir,2011,12,80,24,82,some concerns
Hazel,2015,50,210,71,209,low
`
	inventedPlan = `title: Reminders
date: 2026-01-31
evidence: {file: evidence.csv, higher is better: false}
pool: {scale: log-odds-ratio}
range: {smallest worthwhile effect: {value: 0.7, source: panel}}
study: {control risk: {value: 0.3, low: 0.25, high: 0.35}, dropout: 0.1}
target: {size for: smallest-worthwhile, budget: {per participant: 10, fixed: 100}}
`
)

// folder writes a plan and its evidence.
func folder(t *testing.T, plan, evidence string) string {
	t.Helper()
	dir := t.TempDir()
	put(t, filepath.Join(dir, "plan.yaml"), plan)
	put(t, filepath.Join(dir, "evidence.csv"), evidence)
	return filepath.Join(dir, "plan.yaml")
}

func put(t *testing.T, path, text string) {
	t.Helper()
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
}

func load(t *testing.T, path string) *File {
	t.Helper()
	f, err := Load(path)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func mustRun(t *testing.T, path string) *result.Plan {
	t.Helper()
	p, err := RunSince(load(t, path))
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func asJSON(t *testing.T, v any) []byte {
	t.Helper()
	data, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	return data
}

func TestRunGivesTheSameBytesOnAnyNumberOfCores(t *testing.T) {
	path := folder(t, inventedPlan, inventedCounts)
	want := asJSON(t, mustRun(t, path))
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(0))
	for _, n := range []int{1, 3, 16} {
		runtime.GOMAXPROCS(n)
		if !bytes.Equal(asJSON(t, mustRun(t, path)), want) {
			t.Errorf("%d cores give other bytes", n)
		}
	}
	if bytes.Contains(want, []byte(filepath.Dir(path))) {
		t.Error("the result holds the folder that it was run in")
	}
}

func TestRunCarriesWhatWasAssumed(t *testing.T) {
	p := mustRun(t, folder(t, inventedPlan, inventedCounts))
	have := map[string]result.Assumption{}
	for _, a := range append(append([]result.Assumption{}, p.Assumptions...), p.Size.Study.Assumptions...) {
		name := strings.TrimPrefix(a.Name, "study: ")
		if _, twice := have[name]; twice {
			t.Errorf("%s is listed twice", a.Name)
		}
		have[name] = a
	}
	for name, assumed := range map[string]bool{"control risk": true, "dropout": true, "alpha": true, "target: power": true, "outcome": true, "range: smallest worthwhile effect": false} {
		a, listed := have[name]
		if !listed || a.Assumed != assumed {
			t.Errorf("%s: listed %t, assumed %t", name, listed, a.Assumed)
		}
	}
	if a := have["control risk"]; a.Place.File != "plan.yaml" || a.Place.Line != 6 || a.Place.Column != 23 {
		t.Errorf("control risk stands at %v", a.Place)
	}
	if p.Size.Study.Outcome != "binary" || p.AnswerNo != "" || p.SHA256 == "" || p.Edition != 0 || len(p.Cautions) < 2 {
		t.Errorf("%+v", p)
	}
}

func TestRunWithoutSizeSaysSo(t *testing.T) {
	p := mustRun(t, folder(t, "evidence: {file: evidence.csv, higher is better: true}\nstudy: {control risk: 0.3}\n", inventedCounts))
	if p.Size.Chosen != nil || p.AnswerNo == "" {
		t.Errorf("chosen %v, answer no %q", p.Size.Chosen, p.AnswerNo)
	}
}

func TestRunWithFewStudies(t *testing.T) {
	lines := strings.SplitAfter(inventedCounts, "\n")
	for k := 1; k <= 3; k++ {
		p := mustRun(t, folder(t, inventedPlan, strings.Join(lines[:k+1], "")))
		if p.Pool.K != k || p.Size.Chosen == nil {
			t.Errorf("%d studies: K %d, chosen %v", k, p.Pool.K, p.Size.Chosen)
		}
		if (p.Pool.Prediction.Interval != nil) != (k >= 3) {
			t.Errorf("%d studies: prediction %v", k, p.Pool.Prediction.Interval)
		}
	}
}

func TestEditionsOfARun(t *testing.T) {
	path := folder(t, inventedPlan+"revise when: {required n moves by: 10%}\n", inventedCounts)
	e, err := Freeze(load(t, path), "2026-02-01", "AB", "first", false)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := Freeze(load(t, path), "2026-02-02", "AB", "again", false); err != edition.Unchanged {
		t.Errorf("got %v", err)
	}
	if e.Number != 1 || e.Result.Size.Grid != nil || e.Evidence.Copy == "" {
		t.Errorf("%+v", e)
	}
	p := mustRun(t, path)
	if p.Edition != 2 || p.Since == nil || p.Since.Triggered || len(p.Since.Added)+len(p.Since.Changed)+len(p.Since.Options) != 0 {
		t.Errorf("edition %d, since %+v", p.Edition, p.Since)
	}
	if f := p.Since; f.FrozenPower == nil || *f.FrozenPower != p.Size.Chosen.Power || f.FrozenAssurance == nil {
		t.Errorf("unchanged, but the frozen power is %v and the attained %v", f.FrozenPower, p.Size.Chosen.Power)
	}
	// a changed cell, a new study and another target, each alone and together
	put(t, filepath.Join(filepath.Dir(path), "evidence.csv"), strings.Replace(inventedCounts, "Elm,2008,31,160", "Elm,2008,39,160", 1)+"Linden,2024,70,200,74,201,low\n")
	put(t, path, strings.Replace(inventedPlan, "size for: smallest-worthwhile", "size for: pooled, power: 0.9", 1)+"revise when: {required n moves by: 10%}\n")
	c, err := Compare(load(t, path), 1, 0, true)
	if err != nil {
		t.Fatal(err)
	}
	if len(c.Added) != 1 || len(c.Changed) != 1 || len(c.Options) != 2 || c.Move == nil || c.Move.Why != "" {
		t.Fatalf("%+v", c)
	}
	sum := 0.0
	for _, x := range c.Move.Parts {
		sum += x.Change
	}
	if d := sum - float64(c.Move.To-c.Move.From); d > 1e-9 || d < -1e-9 {
		t.Errorf("the parts add up to %v, the move is %d", sum, c.Move.To-c.Move.From)
	}
	if v := c.Changed[0].Cells[0]; v.Name != "treatment events (C5)" || v.From != "31" || v.To != "39" {
		t.Errorf("%+v", v)
	}
}

func TestDraftRunsAsItStands(t *testing.T) {
	dir := t.TempDir()
	sheet := filepath.Join(dir, "a \"b\" #1.csv")
	put(t, sheet, inventedCounts)
	path, text, err := DraftFor(sheet, "")
	if err != nil {
		t.Fatal(err)
	}
	put(t, path, string(text))
	p := mustRun(t, path)
	if p.Size.Chosen == nil || p.Pool.Scale.HigherBetter || !strings.Contains(string(text), "assumed") {
		t.Errorf("chosen %v of the draft:\n%s", p.Size.Chosen, text)
	}
}

// TestThePlanWithoutEachStudy: each row's size is that of a sheet from which the study was taken out by hand.
func TestThePlanWithoutEachStudy(t *testing.T) {
	text := strings.Replace(inventedPlan, "size for: smallest-worthwhile", "size for: cautious", 1)
	text = strings.Replace(text, "control risk: {value: 0.3, low: 0.25, high: 0.35}", "control risk: {pool: control risk}", 1)
	text = strings.Replace(text, "range: {smallest worthwhile effect: {value: 0.7, source: panel}}\n", "", 1)
	p := mustRun(t, folder(t, text, inventedCounts))
	lines := strings.SplitAfter(inventedCounts, "\n")
	if len(p.Pool.Influence) != 6 {
		t.Fatalf("%d rows", len(p.Pool.Influence))
	}
	differs := false
	for _, in := range p.Pool.Influence {
		by := mustRun(t, folder(t, text, strings.Join(lines[:in.Row-1], "")+strings.Join(lines[in.Row:], "")))
		c := by.Size.Chosen
		if in.ToEnrol == nil || *in.ToEnrol != c.ToEnrol.Total || in.PerGroup[0] != c.N.Groups[0] || *in.Cost != *c.Cost {
			t.Errorf("without %s: %v to enrol, by hand %d", in.Study, in.ToEnrol, c.ToEnrol.Total)
		}
		differs = differs || c.ToEnrol.Total != p.Size.Chosen.ToEnrol.Total
	}
	if !differs {
		t.Error("no study moves the size: the test can't fail")
	}
}
