package meta

import (
	"math"
	"testing"

	"footing/meta/effect"
	"footing/testdata/published"
)

// must fails unless the computed value reproduces the published one at its printed digits.
func must(t *testing.T, id string, computed float64) {
	t.Helper()
	v := published.Must(id)
	if !v.Meets(computed) {
		t.Errorf("%s (%s, %s): printed %s, computed %.8g", id, published.SourceOf(v).Citation, v.Quantity, v.Printed, computed)
	}
}

func counts(name, e1, n1, e2, n2 string) []effect.Reported {
	d := published.Data(name)
	a, b, c, e := d.Column(e1), d.Column(n1), d.Column(e2), d.Column(n2)
	out := make([]effect.Reported, len(a))
	for i := range out {
		out[i].Treatment = effect.Arm{Events: effect.Of(a[i]), N: effect.Of(b[i])}
		out[i].Control = effect.Arm{Events: effect.Of(c[i]), N: effect.Of(e[i])}
	}
	return out
}

func pooled(t *testing.T, rs []effect.Reported, opt effect.Options) (Data, []effect.Table) {
	t.Helper()
	var es []effect.Estimate
	var tables []effect.Table
	for _, r := range rs {
		o := effect.Compute("", r, opt)
		if o.Best == nil {
			t.Fatal(o.Findings)
		}
		es = append(es, *o.Best)
		if o.Best.Table != nil {
			tables = append(tables, *o.Best.Table)
		}
	}
	d, err := NewData(es)
	if err != nil {
		t.Fatal(err)
	}
	return d, tables
}

func estimate(t *testing.T, name string, d Data) TauSquared {
	t.Helper()
	e, err := EstimatorByName(name)
	if err != nil {
		t.Fatal(err)
	}
	tau := e.Estimate(d)
	if !tau.Converged {
		t.Fatalf("%s did not converge", name)
	}
	return tau
}

func TestThirteenTrialsOfBCG(t *testing.T) {
	table := counts("bcg", "cases_vaccinated", "n_vaccinated", "cases_control", "n_control")
	rr, _ := pooled(t, table, effect.Options{Scale: effect.LogRiskRatio})
	in := rr.Interval(Normal, estimate(t, "dersimonian-laird", rr).Value, 0.95)
	must(t, "colditz1994-01", math.Exp(in.Estimate))
	must(t, "colditz1994-02", math.Exp(in.Lower))
	must(t, "colditz1994-03", math.Exp(in.Upper))

	or, _ := pooled(t, table, effect.Options{Scale: effect.LogOddsRatio})
	common := or.Interval(Normal, 0, 0.95)
	must(t, "vanhouwelingen2002-01", common.Estimate)
	must(t, "vanhouwelingen2002-02", common.StandardError)
	must(t, "vanhouwelingen2002-03", common.Lower)
	must(t, "vanhouwelingen2002-04", common.Upper)
	ml := estimate(t, "maximum-likelihood", or)
	m := or.MeanAt(ml.Value)
	must(t, "vanhouwelingen2002-05", m.Estimate)
	must(t, "vanhouwelingen2002-06", m.StandardError)
	must(t, "vanhouwelingen2002-07", ml.Value)
}

func TestSixStudiesWorked(t *testing.T) {
	d := published.Data("six_continuous")
	cols := map[string][]float64{}
	for _, c := range d.Columns[1:] {
		cols[c] = d.Column(c)
	}
	rs := make([]effect.Reported, len(d.Rows))
	for i := range rs {
		rs[i].Treatment = effect.Arm{Mean: effect.Of(cols["mean1"][i]), SD: effect.Of(cols["sd1"][i]), N: effect.Of(cols["n1"][i])}
		rs[i].Control = effect.Arm{Mean: effect.Of(cols["mean2"][i]), SD: effect.Of(cols["sd2"][i]), N: effect.Of(cols["n2"][i])}
	}
	// The book's values use the variance J^2 var(d) and the printed approximation of J.
	g, _ := pooled(t, rs, effect.Options{Scale: effect.StandardizedMeanDifference, SMDVariance: effect.VarianceJSquared, ApproximateJ: true})
	h := g.Heterogeneity()
	tau := estimate(t, "dersimonian-laird", g)
	must(t, "borenstein2009-43", h.Q)
	must(t, "borenstein2009-44", tau.Value)
	must(t, "borenstein2009-45", 100*h.ISquared)
	must(t, "borenstein2009-46", g.MeanAt(tau.Value).Estimate)
	p := g.Prediction(tau.Value, 0.95)
	must(t, "borenstein2009-47", p.Lower)
	must(t, "borenstein2009-48", p.Upper)

	b, _ := pooled(t, counts("six_binary", d2(0), d2(1), d2(2), d2(3)), effect.Options{Scale: effect.LogOddsRatio})
	c := b.Interval(Normal, 0, 0.95)
	must(t, "borenstein2009-55", c.Estimate)
	must(t, "borenstein2009-56", c.StandardError)
	must(t, "borenstein2009-57", math.Exp(c.Estimate))
	bt := estimate(t, "dersimonian-laird", b)
	must(t, "borenstein2009-58", bt.Value)
	must(t, "borenstein2009-59", b.MeanAt(bt.Value).Estimate)

	cor := published.Data("six_correlations")
	rs = nil
	for i, r := range cor.Column("r") {
		rs = append(rs, effect.Reported{R: effect.Of(r), N: effect.Of(cor.Column("n")[i])})
	}
	z, _ := pooled(t, rs, effect.Options{Scale: effect.FisherZ})
	zt := estimate(t, "dersimonian-laird", z)
	must(t, "borenstein2009-60", zt.Value)
	must(t, "borenstein2009-61", z.MeanAt(zt.Value).Estimate)
	must(t, "borenstein2009-62", math.Tanh(z.MeanAt(zt.Value).Estimate))
}

func d2(i int) string { return published.Data("six_binary").Columns[i+1] }

func TestTeacherExpectancy(t *testing.T) {
	set := published.Data("teacher_expectancy")
	d := Data{Y: set.Column("d")}
	for _, s := range set.Column("se") {
		d.V = append(d.V, s*s)
	}
	h := d.Heterogeneity()
	must(t, "raudenbush-01", h.Q)
	must(t, "raudenbush-02", h.P)
	reml := estimate(t, "restricted-maximum-likelihood", d)
	must(t, "raudenbush-03", reml.Value)
	must(t, "raudenbush-04", d.MeanAt(reml.Value).StandardError)
	must(t, "raudenbush-10", d.MeanAt(reml.Value).Estimate)
	in := d.Interval(Normal, estimate(t, "", d).Value, 0.95)
	must(t, "duval2005-01", in.Estimate)
	must(t, "duval2005-02", in.Lower)
	must(t, "duval2005-03", in.Upper)
}

func TestPooledTables(t *testing.T) {
	bb := published.Data("beta_blockers")
	var tables []effect.Table
	for i := range bb.Rows {
		tables = append(tables, effect.Table{EventsControl: bb.Column("deaths_control")[i], TotalControl: bb.Column("n_control")[i],
			EventsTreatment: bb.Column(bb.Columns[2])[i], TotalTreatment: bb.Column(bb.Columns[3])[i]})
	}
	peto, informative := Peto(tables, 0.95)
	must(t, "yusuf1985-01", math.Exp(peto.Estimate))
	if informative != 22 {
		t.Errorf("%d informative tables of 22", informative)
	}

	mg := published.Data("magnesium7")
	c := mg.Columns
	var seven []effect.Table
	for i := range mg.Rows {
		seven = append(seven, effect.Table{EventsTreatment: mg.Column(c[1])[i], TotalTreatment: mg.Column(c[2])[i], EventsControl: mg.Column(c[3])[i], TotalControl: mg.Column(c[4])[i]})
	}
	in := MantelHaenszel(effect.LogOddsRatio, seven, 0.95)
	must(t, "teo1991-01", math.Exp(in.Estimate))
	must(t, "teo1991-02", math.Exp(in.Lower))
	must(t, "teo1991-03", math.Exp(in.Upper))

	ch := published.Data("china_smoking")
	var eight []effect.Table
	for i := range ch.Rows {
		a, b, cc, dd := ch.Column(ch.Columns[1])[i], ch.Column(ch.Columns[2])[i], ch.Column(ch.Columns[3])[i], ch.Column(ch.Columns[4])[i]
		// columns: smokers with and without the disease among cases and controls: odds ratio a d / b c with a, c as events
		eight = append(eight, effect.Table{EventsTreatment: a, TotalTreatment: a + b, EventsControl: cc, TotalControl: cc + dd})
	}
	in = MantelHaenszel(effect.LogOddsRatio, eight, 0.95)
	must(t, "agrestiCDA-02", math.Exp(in.Estimate))
	must(t, "agrestiCDA-03", math.Exp(in.Lower))
	must(t, "agrestiCDA-04", math.Exp(in.Upper))
}

func TestISquaredFromQ(t *testing.T) {
	for _, c := range []struct {
		example          string
		i2, lower, upper string
	}{{"tamoxifen", "higgins2003-01", "higgins2003-02", "higgins2003-03"}, {"streptokinase", "higgins2003-05", "higgins2003-06", "higgins2003-07"}} {
		v := published.Must(c.i2)
		q, k := v.Input("Q"), int(v.Input("k"))
		b := ISquaredByLogH(q, k, 0.95)
		must(t, c.i2, 100*math.Max(0, (q-float64(k-1))/q))
		must(t, c.lower, 100*b.Lower)
		must(t, c.upper, 100*b.Upper)
	}
}
