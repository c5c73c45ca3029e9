package plan

import (
	"math"
	"testing"

	"footing/meta/effect"
)

// The limits were found with mpmath at 25 digits, with the noncentral t as the integral of a normal probability over the
// chi-square distribution of the variance (a different route from the one in the code).
func TestSMDInterval(t *testing.T) {
	for _, c := range []struct{ d, n1, n2, lower, upper float64 }{
		{0.5, 20, 20, -0.1330181132288743723555274, 1.126661275294288159577578},
		{2, 8, 12, 0.8768475147658213941283496, 3.086684629921181542955948},
		{-0.5, 20, 20, -1.126661275294288159577578, 0.1330181132288743723555274},
	} {
		g := c.d * effect.SmallSampleFactor(c.n1+c.n2-2)
		e := &effect.Estimate{Scale: effect.StandardizedMeanDifference, Route: "means-and-sds", Value: g, Variance: (c.n1+c.n2)/(c.n1*c.n2) + g*g/(2*(c.n1+c.n2)), N: [2]float64{c.n1, c.n2}}
		lower, upper, ok := smdInterval(e, 0.95)
		if !ok || math.Abs(lower-c.lower) > 1e-10 || math.Abs(upper-c.upper) > 1e-10 {
			t.Errorf("d %v: %.15g to %.15g (%v), want %.15g to %.15g", c.d, lower, upper, ok, c.lower, c.upper)
		}
	}
	for name, e := range map[string]effect.Estimate{"bare": {Scale: effect.StandardizedMeanDifference, Route: "estimate-with-se", Value: 0.5, N: [2]float64{20, 20}},
		"no sizes": {Scale: effect.StandardizedMeanDifference, Route: "means-and-sds", Value: 0.5}, "other scale": {Scale: effect.MeanDifference, Route: "means-and-sds", Value: 0.5, N: [2]float64{20, 20}},
		"adjusted": {Scale: effect.StandardizedMeanDifference, Route: "means-and-sds", Value: 0.5, Variance: 0.2, N: [2]float64{20, 20}},
		"far":      {Scale: effect.StandardizedMeanDifference, Route: "means-and-sds", Value: 1e6, Variance: 0.1 + 1e12/80, N: [2]float64{20, 20}}} {
		if _, _, ok := smdInterval(&e, 0.95); ok {
			t.Errorf("%s: an exact interval", name)
		}
	}
}

func TestSMDIntervalIsUsed(t *testing.T) {
	e := mustReadEvidence(t, evidencePlan(t, "study,n1,mean1,sd1,n2,mean2,sd2\nA,20,11,2,20,10,2\n"))
	if i := e.Studies[0].Interval; i.Method != "noncentral-t" || math.Abs(i.Lower+0.1330181132288743723555274) > 1e-9 || math.Abs(*e.Studies[0].Shown.Upper-1.126661275294288159577578) > 1e-9 {
		t.Errorf("%+v", i)
	}
}
