package plan

import (
	"math"
	"testing"

	"footing/plan/result"
)

// McGraw & Wong 1992: the heights of men (69.7 inches, SD 2.8) and women (64.3, SD 2.6) give z = 5.4 / sqrt(2.8^2 +
// 2.6^2) = 1.413 and a chance of .92 that a man picked is taller than a woman picked (recalled from memory). For
// d = 5.4 / sqrt((2.8^2 + 2.6^2) / 2) the same chance must come out. Phi(0.2 / sqrt 2) = 0.556231458...: erfc by hand
// computation, 0.5 (1 + erf(0.1)), erf(0.1) = 0.1124629160 (Abramowitz & Stegun 1964, table 7.1).
func TestSayInPeople(t *testing.T) {
	heights := 5.4 / math.Sqrt((2.8*2.8+2.6*2.6)/2)
	info := result.ScaleInfo{Name: "standardized-mean-difference", HigherBetter: true}
	r := &result.Range{Scenarios: []result.Scenario{{Effect: heights}, {Effect: 0.2}, {Effect: 0}}}
	sayInPeople(r, info)
	for i, want := range []struct{ value, within float64 }{{0.92, 0.005}, {(1 + 0.1124629160) / 2, 1e-10}, {0.5, 1e-15}} {
		if got := *r.Scenarios[i].InPeople; math.Abs(got-want.value) > want.within {
			t.Errorf("scenario %d: %v, want %v", i, got, want.value)
		}
	}
	info.HigherBetter = false
	r.Scenarios[1].Effect = -0.2
	sayInPeople(r, info)
	if got := *r.Scenarios[1].InPeople; math.Abs(got-(1+0.1124629160)/2) > 1e-10 {
		t.Errorf("where less is better: %v", got)
	}
	odds := &result.Range{Scenarios: []result.Scenario{{Effect: 0.2}}}
	sayInPeople(odds, result.ScaleInfo{Name: "log-odds-ratio"})
	if odds.Scenarios[0].InPeople != nil {
		t.Error("an odds ratio was said as people")
	}
}
