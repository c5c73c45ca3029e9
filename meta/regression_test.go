package meta

import (
	"math"
	"testing"

	"footing/meta/effect"
	"footing/testdata/published"
)

// TestLatitudeOfBCG: the worked meta-regression of thirteen trials on latitude.
func TestLatitudeOfBCG(t *testing.T) {
	d, _ := pooled(t, counts("bcg", "cases_vaccinated", "n_vaccinated", "cases_control", "n_control"), effect.Options{Scale: effect.LogRiskRatio})
	latitude := published.Data("bcg").Column("abs_latitude")
	must(t, "borenstein2009-74", d.MeanAt(0).Q)
	fit := func(o RegressionOptions) Regression {
		r, err := d.Regress([]string{"latitude"}, [][]float64{latitude}, o)
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	common := fit(RegressionOptions{CommonEffect: true, Normal: true})
	must(t, "borenstein2009-75", common.Coefficients[1].Estimate)
	must(t, "borenstein2009-76", common.Coefficients[1].StandardError)
	must(t, "borenstein2009-77", common.QResidual)
	must(t, "borenstein2009-78", common.QModel)
	random := fit(RegressionOptions{Normal: true})
	must(t, "borenstein2009-80", random.TauSquared.Value)
	must(t, "borenstein2009-81", random.Coefficients[1].Estimate)
	must(t, "borenstein2009-82", random.Coefficients[1].StandardError)
	must(t, "borenstein2009-83", random.QModel)
	must(t, "borenstein2009-84", 100*random.Explained)
	at, err := random.At([]float64{0})
	if err != nil || math.Abs(at.Estimate-random.Coefficients[0].Estimate) > 1e-15 || math.Abs(at.StandardError-random.Coefficients[0].StandardError) > 1e-15 {
		t.Errorf("at latitude 0: %+v, intercept %+v", at, random.Coefficients[0])
	}
}

// TestRegressionWithoutModerators is the plain pooling, with the bare Hartung-Knapp interval.
func TestRegressionWithoutModerators(t *testing.T) {
	d := Data{Y: []float64{0.1, 0.9, -0.4, 0.6, 0.3}, V: []float64{0.01, 0.03, 0.02, 0.05, 0.2}}
	r, err := d.Regress(nil, nil, RegressionOptions{})
	if err != nil {
		t.Fatal(err)
	}
	want := d.Interval(HartungKnapp, dersimonianLaird(d).Value, 0.95)
	c := r.Coefficients[0]
	for _, x := range [][2]float64{{r.TauSquared.Value, dersimonianLaird(d).Value}, {c.Estimate, want.Estimate}, {c.StandardError, want.StandardError}, {c.Lower, want.Lower}, {c.P, want.P}} {
		if math.Abs(x[0]-x[1]) > 1e-13 {
			t.Errorf("%.15g, plain pooling %.15g", x[0], x[1])
		}
	}
}

func TestModeratorsThatCannotBeFitted(t *testing.T) {
	d := Data{Y: []float64{1, 2, 3, 5}, V: []float64{1, 1, 1, 1}}
	for name, columns := range map[string][][]float64{"constant": {{2, 2, 2, 2}}, "twice": {{1, 2, 3, 4}, {2, 4, 6, 8}}, "too many": {{1, 2, 3, 4}, {1, 4, 2, 1}, {0, 1, 0, 3}}, "short": {{1, 2}}, "not finite": {{1, 2, math.NaN(), 4}}} {
		if _, err := d.Regress(make([]string, len(columns)), columns, RegressionOptions{}); err == nil {
			t.Errorf("%s: fitted", name)
		}
	}
}
