package plan

import (
	"math"
	"testing"
)

// The pooled values were computed a second time at 30 digits with mpmath, from the formulas in the documentation of
// poolNuisance (invented data).
func TestNuisance(t *testing.T) {
	near := func(name string, got *float64, want float64) {
		t.Helper()
		if got == nil || math.Abs(*got-want) > 1e-13*want {
			t.Errorf("%s: %v, want %v", name, got, want)
		}
	}
	e := mustReadEvidence(t, evidencePlan(t, "study,n1,mean1,sd1,n2,mean2,sd2\nA,20,11,2,20,10,2\nB,30,11,3,30,10,3\nC,25,12,2,25,11,2.5\n"))
	sd := e.Nuisance["control sd"]
	near("sd", &sd.Value, 2.55879926029216064290454863505)
	near("sd low", sd.Low, 1.8232298837708292460816629908)
	near("sd high", sd.High, 3.59112896994106652503470026292)
	if _, ok := e.Nuisance["control risk"]; ok || sd.Source == "" || sd.Pool != "control sd" {
		t.Errorf("%+v", e.Nuisance)
	}
	e = mustReadEvidence(t, evidencePlan(t, "study,events treatment,n treatment,events control,n control\nA,12,40,10,40\nB,15,50,18,48\nC,3,20,0,20\n"))
	risk := e.Nuisance["control risk"]
	near("risk", &risk.Value, 0.257047724255029458257232032991)
	near("risk low", risk.Low, 0.0696594571355706748942849328952)
	near("risk high", risk.High, 0.615192526830640973561483584817)
	e = mustReadEvidence(t, evidencePlan(t, "study,events treatment,n treatment,events control,n control\nA,12,40,10,40\n"))
	if len(e.Nuisance) != 0 {
		t.Errorf("one row was pooled: %+v", e.Nuisance)
	}
}
