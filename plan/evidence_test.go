package plan

import (
	"errors"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"footing/internal/finding"
	"footing/meta/effect"
)

// evidencePlan writes a sheet and gives a plan beside it.
func evidencePlan(t *testing.T, sheet string) *File {
	t.Helper()
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "evidence.csv"), []byte(sheet), 0o600); err != nil {
		t.Fatal(err)
	}
	yes := true
	return &File{Path: filepath.Join(dir, "plan.yaml"), Evidence: Evidence{File: "evidence.csv", HigherBetter: &yes}}
}

func mustReadEvidence(t *testing.T, f *File) *EvidenceRead {
	t.Helper()
	e, err := ReadEvidence(f)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

func findingKinds(fs []finding.Finding) string {
	var out []string
	for _, f := range fs {
		out = append(out, f.ID())
	}
	return strings.Join(out, " ")
}

const bareSheet = "study,year,estimate,standard error,risk of bias,setting,status\nA,2001,0.31,0.12,low,ward,\nB,2005,0.10,0.20,high,home,\nC,2009,0.25,0.1,,ward,excluded\nD,,0.4,0.3,some concerns,office,example\n"

func TestReadEvidenceBare(t *testing.T) {
	e := mustReadEvidence(t, evidencePlan(t, bareSheet))
	if e.Scale != effect.AsGiven || len(e.Studies) != 4 || len(e.Estimates) != 3 || e.Index[2] != 3 {
		t.Fatalf("%v %d %d %v", e.Scale, len(e.Studies), len(e.Estimates), e.Index)
	}
	a := e.Studies[0]
	// Interval by hand: 0.31 -+ 1.959963984540054 x 0.12.
	if *a.Estimate != 0.31 || *a.StandardError != 0.12 || math.Abs(a.Interval.Lower-0.07480432185519354) > 1e-15 || a.Interval.Method != "normal" || *a.Year != 2001 {
		t.Errorf("%+v %+v", a, a.Interval)
	}
	if len(a.Cells) != 6 || a.Cells[2].Address != "C2" || a.Cells[2].Text != "0.31" || a.Cells[2].Meaning != "estimate" || strings.Join(a.From, " ") != "C2 D2" {
		t.Errorf("%+v from %v", a.Cells, a.From)
	}
	if a.Place.String() != "evidence.csv, row 2" || a.Shown.Estimate != 0.31 || a.Weight != nil {
		t.Errorf("%+v", a)
	}
	if c := e.Studies[2]; c.Used || c.Why != `its status is "excluded"` || c.Estimate == nil {
		t.Errorf("%+v", c)
	}
	if ev := e.Evidence; ev.Rows != 4 || ev.Used != 3 || ev.File != "evidence.csv" || len(ev.SHA256) != 64 || len(ev.Headings) != 7 || strings.Join(ev.Examples, "") != "D" {
		t.Errorf("%+v", ev)
	}
}

func TestKeepWhere(t *testing.T) {
	for cond, want := range map[string]string{
		"year >= 2005": "B", "year > 2001": "B", "year < 2005": "A", "year = 2001": "A", "year != 2001": "BD", "risk of bias != high": "AD", "risk of bias = low": "A",
		"setting in ward, home": "AB", "setting in [ward, office]": "AD", "setting not in (ward)": "BD", `setting = "Ward"`: "A", "estimate <= 0.31": "AB", "standard error<0.25": "AB", "year ≥ 2005": "B",
	} {
		f := evidencePlan(t, bareSheet)
		f.Evidence.KeepWhere = []string{cond}
		var got string
		for _, s := range mustReadEvidence(t, f).Studies {
			if s.Used {
				got += s.Study
			} else if s.Why == "" {
				t.Errorf("%s: %s is left out without a reason", cond, s.Study)
			}
		}
		if got != want {
			t.Errorf("%s keeps %s, want %s", cond, got, want)
		}
	}
	for _, cond := range []string{"year", "colour = red", "setting > ward", "= 3"} {
		f := evidencePlan(t, bareSheet)
		f.Evidence.KeepWhere = []string{cond, "nothing"}
		var ps finding.Problems
		if _, err := ReadEvidence(f); !errors.As(err, &ps) || len(ps) != 2 {
			t.Errorf("%s: %v", cond, err)
		}
	}
}

func TestScaleByWhatTheColumnsHold(t *testing.T) {
	for name, c := range map[string]struct {
		sheet string
		scale effect.Scale
		value float64
	}{
		// ln((12/36)/(18/30)) by hand.
		"counts":    {"study,events treatment,n treatment,events control,n control\nA,12,48,18,48\n", effect.LogOddsRatio, math.Log(12.0 / 36 / (18.0 / 30))},
		"ratio":     {"study,odds ratio,ci lower,ci upper\nA,0.5,0.25,1\n", effect.LogOddsRatio, math.Log(0.5)},
		"log":       {"study,log HR,se\nA,-0.2,0.1\n", effect.LogHazardRatio, -0.2},
		"r":         {"study,r,n\nA,0.5,28\n", effect.FisherZ, math.Atanh(0.5)},
		"bareSheet": {"study,estimate,se\nA,0.2,0.1\n", effect.AsGiven, 0.2},
		// g = J(38) x (11 - 10)/2 with both SDs 2; J(38) = Gamma(19)/(sqrt(19) Gamma(18.5)) (Hedges 1981), its value by mpmath.
		"means": {"study,n1,mean1,sd1,n2,mean2,sd2\nA,20,11,2,20,10,2\n", effect.StandardizedMeanDifference, 0.5 * 0.980110402130946272803435806123},
	} {
		f := evidencePlan(t, c.sheet)
		e := mustReadEvidence(t, f)
		if e.Scale != c.scale || len(e.Estimates) != 1 {
			t.Errorf("%s: scale %s, %d estimates, %s", name, e.Scale, len(e.Estimates), findingKinds(e.Findings))
			continue
		}
		if got := e.Estimates[0].Value; math.Abs(got-c.value) > 1e-12 {
			t.Errorf("%s: %.15g, want %.15g", name, got, c.value)
		}
		if e.Info.Log && math.Abs(e.Studies[0].Shown.Estimate-math.Exp(c.value)) > 1e-12 {
			t.Errorf("%s: shown %+v", name, e.Studies[0].Shown)
		}
	}
	f := evidencePlan(t, bareSheet)
	f.Pool.Scale = "odd ratio"
	if _, err := ReadEvidence(f); err == nil || !strings.Contains(err.Error(), "log-odds-ratio") {
		t.Errorf("%v", err)
	}
}

func TestDecisions(t *testing.T) {
	sheet := "study,estimate,standard error\nA,about 0.3,0.12\nB,0.1,0.2\nC,0.2,x\n"
	f := evidencePlan(t, sheet)
	f.Evidence.Decisions = []Decision{{Finding: "text-in-number-cell@B2", Value: "0.3", Why: "table 2", By: "AB", Seen: "about 0.3", Study: "A"}, {Finding: "text-in-number-cell@C4", Accept: true, Why: "not reported", Seen: "x", Study: "C"}}
	e := mustReadEvidence(t, f)
	if a := e.Studies[0]; !a.Used || *a.Estimate != 0.3 || a.Cells[1].Text != "about 0.3" || !strings.Contains(strings.Join(a.Notes, " "), "0.3 in place of about 0.3, by decision: table 2 (AB)") {
		t.Errorf("%+v", a)
	}
	decided := 0
	for _, x := range e.Findings {
		if x.Decision != nil {
			decided++
		}
	}
	if decided != 2 || e.Studies[2].Used {
		t.Errorf("%d decided, %s", decided, findingKinds(e.Findings))
	}
	if w := e.Studies[2].Why; !strings.HasPrefix(w, `C4: "x" stands where`) {
		t.Error(w)
	}
	// The study moves to another row: the decision follows it. A changed text: it no longer holds.
	moved := evidencePlan(t, "study,estimate,standard error\nB,0.1,0.2\nA,about 0.3,0.12\n")
	moved.Evidence.Decisions = f.Evidence.Decisions[:1]
	if e := mustReadEvidence(t, moved); !e.Studies[1].Used || *e.Studies[1].Estimate != 0.3 {
		t.Errorf("%+v", e.Studies[1])
	}
	changed := evidencePlan(t, strings.Replace(sheet, "about 0.3", "about 0.5", 1))
	changed.Evidence.Decisions = f.Evidence.Decisions[:1]
	if e := mustReadEvidence(t, changed); e.Studies[0].Used || !strings.Contains(findingKinds(e.Findings), "decision-out-of-date") {
		t.Errorf("%+v %s", e.Studies[0], findingKinds(e.Findings))
	}
	unused := evidencePlan(t, bareSheet)
	unused.Evidence.Decisions = f.Evidence.Decisions[:1]
	if e := mustReadEvidence(t, unused); !strings.Contains(findingKinds(e.Findings), "decision-unused") {
		t.Errorf("%s", findingKinds(e.Findings))
	}
	out := evidencePlan(t, sheet)
	out.Evidence.Decisions = []Decision{{Finding: "text-in-number-cell@B2", Why: "no figure"}}
	if e := mustReadEvidence(t, out); e.Studies[0].Used || !strings.Contains(e.Studies[0].Why, "left out by the decision on B2: no figure") {
		t.Errorf("%+v", e.Studies[0])
	}
}

func TestDirections(t *testing.T) {
	f := evidencePlan(t, "study,estimate,se,higher is better\nA,0.2,0.1,yes\nB,-0.3,0.1,no\n")
	e := mustReadEvidence(t, f)
	if e.Estimates[0].Value != 0.2 || e.Estimates[1].Value != 0.3 || !e.Studies[1].Flipped || e.Studies[0].Flipped {
		t.Errorf("%+v", e.Estimates)
	}
	f.Evidence.HigherBetter = nil
	if e := mustReadEvidence(t, f); !strings.Contains(findingKinds(e.Findings), "direction-assumed") || !e.Info.HigherBetter {
		t.Errorf("%s", findingKinds(e.Findings))
	}
}

func TestSubgroupsAndRelevance(t *testing.T) {
	f := evidencePlan(t, "study,estimate,se,setting,closeness to us\nA,0.2,0.1,ward,0.5\nB,0.3,0.1,home,1\n")
	f.Pool.SubgroupBy, f.Pool.Relevance = "setting", "closeness to us"
	e := mustReadEvidence(t, f)
	if e.Studies[0].Subgroup != "ward" || *e.Studies[0].Relevance != 0.5 {
		t.Errorf("%+v", e.Studies[0])
	}
	f.Pool.SubgroupBy = "colour"
	if _, err := ReadEvidence(f); err == nil || !strings.Contains(err.Error(), `"setting"`) {
		t.Errorf("%v", err)
	}
}

func TestFindingsCarryCells(t *testing.T) {
	e := mustReadEvidence(t, evidencePlan(t, "study,estimate,se\nA,0.2,0\nB,0.3,0.1\nC,0.3,\n"))
	if e.Studies[0].Used || e.Studies[0].Why == "" || e.Studies[2].Used || e.Studies[2].Why == "" {
		t.Errorf("%+v", e.Studies)
	}
	for _, f := range e.Findings {
		if f.Severity != finding.Note && (f.Place.File != "evidence.csv" || f.Place.Cell == "" || f.Study == "" || f.What == "") {
			t.Errorf("%+v", f)
		}
	}
	if e, err := ReadSheet("no such file.csv", ""); err == nil {
		t.Errorf("%+v", e)
	}
	if _, err := ReadEvidence(&File{}); err == nil {
		t.Error("no file named, no error")
	}
}

func TestChecksAcrossEstimates(t *testing.T) {
	f := evidencePlan(t, "study,estimate,se\nA,0.5,0.1\nB,0.4,0.1\nC,-0.5,0.1\nD,0.3,0.1\nE,3.2,0.5\nF,0.1,0.2\nF,-0.6,0.2\n")
	f.Pool.Scale = "standardized-mean-difference"
	e := mustReadEvidence(t, f)
	got := findingKinds(e.Findings)
	if !strings.Contains(got, "effect-beyond-3-sd@B6") || !strings.Contains(got, "signs-differ-within-study@B8") || strings.Contains(got, "sign-against-the-rest") {
		t.Error(got) // C and the second F are clearly below 0: no single one stands alone
	}
	f = evidencePlan(t, "study,estimate,se\nA,0.5,0.1\nB,0.4,0.1\nC,-0.5,0.1\nD,0.3,0.1\nE,0.6,0.1\nF,-0.1,0.2\n")
	e = mustReadEvidence(t, f)
	if got := findingKinds(e.Findings); !strings.Contains(got, "sign-against-the-rest@B4") {
		t.Error(got)
	}
	for _, x := range e.Findings {
		if x.Kind == "sign-against-the-rest" && (x.Text != "-0.5" || x.Study != "C") {
			t.Errorf("%+v", x)
		}
	}
}

func TestChangeScores(t *testing.T) {
	f := evidencePlan(t, "study,mean treatment,sd treatment,mean change treatment,sd change treatment,n treatment,mean control,sd control,mean change control,sd change control,n control\nA,11,2,,,20,10,2,,,20\nB,,,5,3,20,,,4,3,20\nC,12,2,,,20,10,2,,,20\n")
	f.Pool.Scale = "mean-difference"
	e := mustReadEvidence(t, f)
	if b := e.Studies[1]; !b.Used || *b.Estimate != 1 || !strings.Contains(strings.Join(b.Notes, " "), "change scores") || strings.Contains(findingKinds(e.Findings), "change-among-final-scores") {
		t.Errorf("%+v %s", b, findingKinds(e.Findings))
	}
	f.Pool.Scale = "standardized-mean-difference"
	if got := findingKinds(mustReadEvidence(t, f).Findings); !strings.Contains(got, "change-among-final-scores@D3") {
		t.Error(got)
	}
}

func TestOptionsOfTheRoutes(t *testing.T) {
	const sheet = "study,mean treatment,sd treatment,n treatment,mean control,sd control,n control,cluster size\nA,11,2,20,10,2,20,5\nB,12,2,30,10,2,30,\n"
	f := evidencePlan(t, sheet)
	plain := mustReadEvidence(t, f)
	f.Evidence.ICC, f.Pool.Variance = &Assumed{Value: 0.05}, "unbiased"
	changed := mustReadEvidence(t, f)
	// The design effect of clusters of 5 is 1 + 4 x 0.05 = 1.2 (Cochrane Handbook 23.1.4).
	if a, b := *plain.Studies[0].Variance, *changed.Studies[0].Variance; !(b > 1.1*a) {
		t.Errorf("clusters: %v and %v", a, b)
	}
	// Unbiased (Hedges 1983): 1/15 + [1 - 56/(58 J(58)^2)] g^2, g = J(58), J(58) = 0.98700358102797740142 (mpmath).
	if got, want := *changed.Studies[1].Variance, 2.0/30+(1-56/(58*0.98700358102797740142*0.98700358102797740142))*0.98700358102797740142*0.98700358102797740142; math.Abs(got-want) > 1e-12 {
		t.Errorf("unbiased: %v, want %v", got, want)
	}
	f.Evidence.ICC, f.Evidence.Reliability, f.Pool.Variance = &Assumed{Value: 2}, &Assumed{Value: -1}, "best"
	var ps finding.Problems
	if _, err := ReadEvidence(f); !errors.As(err, &ps) || len(ps) != 3 {
		t.Error(err)
	}
}
