package plan

import (
	"strings"
	"testing"

	"footing/plan/result"
)

// threatened is an invented result with every threat that the figures of a plan can hold.
func threatened() *result.Plan {
	n := func(x float64) *float64 { return &x }
	p := &result.Plan{Pool: &result.Pool{K: 5, Scale: result.ScaleInfo{Name: "standardized-mean-difference", HigherBetter: true}, Random: result.Pooled{Estimate: n(0.40)},
		Heterogeneity: result.Heterogeneity{TauSquared: n(0.04), ISquared: n(0.5)}, Prediction: result.Prediction{Interval: &result.Interval{Lower: -0.15, Upper: 0.93}},
		Studies: []result.Study{{Used: true, RiskOfBias: "high", Weight: n(0.25)}, {Used: true, RiskOfBias: "low", Weight: n(0.75)}}},
		Range: &result.Range{AdjustedBy: "trim-and-fill", Scenarios: []result.Scenario{{Name: "small-study-adjusted", Effect: 0.20}}}}
	p.Size.Chosen = &result.Chosen{Scenario: "cautious", N: result.N{Total: 500}, ToEnrol: result.N{Total: 600}}
	p.Size.Sensitivity = []result.Sensitivity{{Assumption: "baseline correlation", Value: ".40", ToEnrol: &result.N{Total: 756}, OverBudget: true}, {Assumption: "dropout", Value: "5%", ToEnrol: &result.N{Total: 560}}}
	return p
}

func TestThreatsComeFromTheFigures(t *testing.T) {
	got := threats(threatened())
	want := []string{
		"If the baseline correlation is .40: 756 people have to be enrolled, over the budget.",
		"The studies differ (I² 50%): the true effect in a new setting may be anywhere from -0.15 to 0.93, on either side of no effect.",
		"Small studies show larger effects: allowing for missing studies (trim-and-fill) the average of 0.40 becomes 0.20.",
	}
	if len(got) != len(want) {
		t.Fatalf("%d threats: %v", len(got), got)
	}
	for i := range want {
		if s := got[i].Head + " " + got[i].Text; s != want[i] {
			t.Errorf("threat %d:\n got %s\nwant %s", i+1, s, want[i])
		}
	}
}

func TestThreatsGoWhenTheirFiguresDo(t *testing.T) {
	p := threatened()
	p.Size.Sensitivity = nil
	p.Pool.Heterogeneity.TauSquared = new(float64)
	p.Range.Scenarios[0].Effect = 0.39
	all := ""
	for _, x := range threats(p) {
		all += x.Head + " " + x.Text + "\n"
	}
	if all != "There are only 5 studies: their spread is poorly known, and missing studies can hardly be seen.\n1 study is at high risk of bias: 25% of the weight of the average.\n" {
		t.Errorf("got:\n%s", all)
	}
	p.Pool.K = 40
	p.Pool.Studies = nil
	if got := threats(p); len(got) != 0 {
		t.Errorf("got %v", got)
	}
	p.Size.Chosen.OverBudget = true
	if got := threats(p); len(got) != 1 || !strings.HasPrefix(got[0].Head, "The budget") {
		t.Errorf("got %v", got)
	}
}
