package meta

import (
	"encoding/json"
	"math"
	"os"
	"testing"
)

// TestProfileLikelihood holds the limits to a reference by general-purpose minimisers (testdata/reference/profile_likelihood.py), whose own accuracy at the flat
// top of a likelihood is about 1e-8.
func TestProfileLikelihood(t *testing.T) {
	raw, err := os.ReadFile("../testdata/reference/profile_likelihood.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		Sets []struct {
			Name         string
			Y, V         []float64
			Lower, Upper float64
		}
	}
	if err := json.Unmarshal(raw, &file); err != nil || len(file.Sets) < 5 {
		t.Fatal(err, len(file.Sets))
	}
	for _, s := range file.Sets {
		in := Data{Y: s.Y, V: s.V}.Interval(ProfileLikelihood, 0, 0.95)
		if math.Abs(in.Lower-s.Lower) > 1e-7 || math.Abs(in.Upper-s.Upper) > 1e-7 {
			t.Errorf("%s: %.10f to %.10f, reference %.10f to %.10f", s.Name, in.Lower, in.Upper, s.Lower, s.Upper)
		}
	}
}

// TestProfileLikelihoodOfOneStudy: there is none.
func TestProfileLikelihoodOfOneStudy(t *testing.T) {
	if in := (Data{Y: []float64{1}, V: []float64{1}}).Interval(ProfileLikelihood, 0, 0.95); in.Available || in.Why == "" {
		t.Errorf("%+v", in)
	}
}

// edges are sets that arithmetic handles badly.
var edges = map[string]Data{
	"one":          {Y: []float64{0.3}, V: []float64{0.1}},
	"two":          {Y: []float64{0.3, -0.2}, V: []float64{0.1, 0.4}},
	"three":        {Y: []float64{0.3, -0.2, 5}, V: []float64{0.1, 0.4, 2}},
	"no tau":       {Y: []float64{0.30, 0.31, 0.29, 0.3}, V: []float64{1, 2, 3, 4}},
	"equal":        {Y: []float64{0.3, 0.3, 0.3}, V: []float64{0.1, 0.2, 0.3}},
	"zeros":        {Y: []float64{0, 0, 0}, V: []float64{0.1, 0.2, 0.3}},
	"dominating":   {Y: []float64{0.3, 0.9, -2}, V: []float64{1e-8, 1, 1e4}},
	"huge effects": {Y: []float64{1e8, 1e8 + 1, 1e8 - 1}, V: []float64{1e-8, 1e-8, 1e4}},
}

// TestEdges: nothing is NaN or infinite, intervals hold their estimate, and what is not available says why.
func TestEdges(t *testing.T) {
	finite := func(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
	for name, d := range edges {
		for _, e := range Estimators() {
			tau := e.Estimate(d)
			if !finite(tau.Value) || tau.Value < 0 || !tau.Converged {
				t.Errorf("%s, %s: %+v", name, e.Name, tau)
			}
			for _, in := range append(allIntervals(d, tau.Value), d.Prediction(tau.Value, 0.95)) {
				switch {
				case !in.Available:
					if in.Why == "" {
						t.Errorf("%s, %s, %s: not available without a reason", name, e.Name, in.Method)
					}
				case !finite(in.Lower) || !finite(in.Upper) || !finite(in.P) || !finite(in.Statistic) || !(in.Lower < in.Estimate && in.Estimate < in.Upper):
					t.Errorf("%s, %s, %s: %+v", name, e.Name, in.Method, in)
				}
			}
		}
		if h := d.Heterogeneity(); !finite(h.Q) || !finite(h.P) || !finite(h.ISquared) || h.Available == (d.K() < 2) {
			t.Errorf("%s: %+v", name, h)
		}
		if q := d.QProfile(0.95); !finite(q.Lower) || !finite(q.Upper) || !q.Available && q.Why == "" || q.Lower > q.Upper {
			t.Errorf("%s: %+v", name, q)
		}
	}
}

func allIntervals(d Data, tau2 float64) []Interval {
	var out []Interval
	for _, m := range IntervalMethods() {
		out = append(out, d.Interval(m, tau2, 0.95))
	}
	return out
}
