package qualify

import (
	"math"

	"footing/internal/num"
	"footing/meta"
	"footing/meta/effect"
	"footing/meta/smallstudy"
	"footing/power"
	"footing/testdata/published"
)

// worked follows the worked examples of Borenstein et al. 2009.
var worked = effect.Options{Scale: effect.StandardizedMeanDifference, SMDVariance: effect.VarianceJSquared, ApproximateJ: true}

const workedWords = "variance J^2 var(d), printed approximation of J"

func best(r effect.Reported, opt effect.Options) effect.Estimate {
	if o := effect.Compute("", r, opt); o.Best != nil {
		return *o.Best
	}
	return effect.Estimate{Value: math.NaN(), Variance: math.NaN()}
}

func table(e1, n1, e2, n2 float64) effect.Reported {
	return effect.Reported{Treatment: effect.Arm{Events: effect.Of(e1), N: effect.Of(n1)}, Control: effect.Arm{Events: effect.Of(e2), N: effect.Of(n2)}}
}

func means(m1, s1, n1, m2, s2, n2 float64) effect.Reported {
	return effect.Reported{Treatment: effect.Arm{Mean: effect.Of(m1), SD: effect.Of(s1), N: effect.Of(n1)}, Control: effect.Arm{Mean: effect.Of(m2), SD: effect.Of(s2), N: effect.Of(n2)}}
}

// study is one record of a published dataset.
func study(name string, row int) effect.Reported {
	d := published.Data(name)
	x := func(i int) float64 { return d.Rows[row][i].(float64) }
	switch name {
	case "six_continuous":
		return means(x(1), x(2), x(3), x(4), x(5), x(6))
	case "six_correlations":
		return effect.Reported{R: effect.Of(x(1)), N: effect.Of(x(2))}
	case "beta_blockers":
		return table(x(2), x(3), x(0), x(1))
	case "bcg":
		return table(x(2), x(3), x(4), x(5))
	case "china_smoking":
		return table(x(1), x(1)+x(2), x(3), x(3)+x(4))
	}
	return table(x(1), x(2), x(3), x(4)) // six_binary, magnesium7, lidocaine
}

// pooledSet turns a dataset into estimates on a scale.
func pooledSet(name string, opt effect.Options) (meta.Data, []effect.Table) {
	var es []effect.Estimate
	var tables []effect.Table
	if name == "teacher_expectancy" {
		t := published.Data(name)
		for i, d := range t.Column("d") {
			se := t.Column("se")[i]
			es = append(es, best(effect.Reported{Estimate: effect.Of(d), StandardError: effect.Of(se)}, effect.Options{Scale: effect.StandardizedMeanDifference}))
		}
	} else {
		for i := range published.Data(name).Rows {
			e := best(study(name, i), opt)
			es = append(es, e)
			if e.Table != nil {
				tables = append(tables, *e.Table)
			}
		}
	}
	d, err := meta.NewData(es)
	if err != nil {
		return meta.Data{Y: []float64{math.NaN()}, V: []float64{1}}, tables
	}
	return d, tables
}

func tau(d meta.Data, name string) float64 {
	e, _ := meta.EstimatorByName(name)
	return e.Estimate(d).Value
}

func effectRecipes() {
	two := func(v published.Value) effect.Reported {
		return means(v.Input("mean1"), v.Input("sd1"), v.Input("n1"), v.Input("mean2"), v.Input("sd2"), v.Input("n2"))
	}
	add("", func(v published.Value) float64 {
		return effect.PooledSD(v.Input("sd1"), v.Input("n1"), v.Input("sd2"), v.Input("n2"))
	}, "borenstein2009-01")
	add(workedWords, func(v published.Value) float64 { return best(two(v), worked).Value }, "borenstein2009-05")
	add(workedWords, func(v published.Value) float64 { return math.Sqrt(best(two(v), worked).Variance) }, "borenstein2009-06")
	for i, ids := 0, span("borenstein2009", 31, 42); i < 6; i++ {
		row := i
		add(workedWords, func(published.Value) float64 { return best(study("six_continuous", row), worked).Value }, ids[2*i])
		add(workedWords, func(published.Value) float64 { return best(study("six_continuous", row), worked).Variance }, ids[2*i+1])
	}
	four := func(v published.Value) effect.Reported {
		return table(v.Input("events1"), v.Input("n1"), v.Input("events2"), v.Input("n2"))
	}
	on := func(s effect.Scale) effect.Options { return effect.Options{Scale: s} }
	for id, f := range map[string]func(published.Value) float64{
		"borenstein2009-13": func(v published.Value) float64 { return best(four(v), on(effect.LogRiskRatio)).Variance },
		"borenstein2009-14": func(v published.Value) float64 { return math.Sqrt(best(four(v), on(effect.LogRiskRatio)).Variance) },
		"borenstein2009-15": func(v published.Value) float64 { return best(four(v), on(effect.LogRiskRatio)).Value },
		"borenstein2009-16": func(v published.Value) float64 { return math.Exp(best(four(v), on(effect.LogOddsRatio)).Value) },
		"borenstein2009-17": func(v published.Value) float64 { return best(four(v), on(effect.LogOddsRatio)).Value },
		"borenstein2009-18": func(v published.Value) float64 { return best(four(v), on(effect.LogOddsRatio)).Variance },
		"borenstein2009-19": func(v published.Value) float64 { return math.Sqrt(best(four(v), on(effect.LogOddsRatio)).Variance) },
		"borenstein2009-20": func(v published.Value) float64 { return best(four(v), on(effect.RiskDifference)).Value },
		"borenstein2009-21": func(v published.Value) float64 { return best(four(v), on(effect.RiskDifference)).Variance },
		"borenstein2009-22": func(v published.Value) float64 { return math.Sqrt(best(four(v), on(effect.RiskDifference)).Variance) },
	} {
		add("", f, id)
	}
	for i, id := range span("borenstein2009", 49, 54) {
		row := i
		add("", func(published.Value) float64 { return best(study("six_binary", row), on(effect.LogOddsRatio)).Value }, id)
	}
	for i := 0; i < 22; i++ {
		row := i
		ids := span("gelmanBDA", 2*i+1, 2*i+2)
		add("", func(published.Value) float64 { return best(study("beta_blockers", row), on(effect.LogOddsRatio)).Value }, ids[0])
		add("", func(published.Value) float64 {
			return math.Sqrt(best(study("beta_blockers", row), on(effect.LogOddsRatio)).Variance)
		}, ids[1])
	}
	r := func(v published.Value) effect.Reported {
		return effect.Reported{R: effect.Of(v.Input("r")), N: effect.Of(v.Input("n"))}
	}
	add("", func(v published.Value) float64 { return best(r(v), on(effect.FisherZ)).Value }, "borenstein2009-24")
	add("", func(v published.Value) float64 { return best(r(v), on(effect.FisherZ)).Variance }, "borenstein2009-25")
	add("", func(v published.Value) float64 { return math.Sqrt(best(r(v), on(effect.FisherZ)).Variance) }, "borenstein2009-26")
	for _, v := range published.Topic("effect size: small-sample correction") {
		add("", func(v published.Value) float64 { return effect.SmallSampleFactor(v.Input("m")) }, v.ID)
	}
	interval := func(v published.Value) effect.Estimate {
		return best(effect.Reported{Estimate: effect.Of(v.Input("ratio")), CILower: effect.Of(v.Input("lower")), CIUpper: effect.Of(v.Input("upper")), CILevel: effect.Of(0.95)}, on(effect.LogRiskRatio))
	}
	add("", func(v published.Value) float64 { return math.Sqrt(interval(v).Variance) }, "altmanbland2011-09")
	add("", func(v published.Value) float64 { e := interval(v); return e.Value / math.Sqrt(e.Variance) }, "altmanbland2011-10")
	add("exact normal p", func(v published.Value) float64 {
		e := interval(v)
		return 2 * num.NormalSurvival(math.Abs(e.Value)/math.Sqrt(e.Variance))
	}, "altmanbland2011-11")
}

func poolingRecipes() {
	g := func() meta.Data { d, _ := pooledSet("six_continuous", worked); return d }
	c := workedWords
	add(c, func(published.Value) float64 { return g().Heterogeneity().Q }, "borenstein2009-43")
	add(c, func(published.Value) float64 { return tau(g(), "") }, "borenstein2009-44")
	add(c, func(published.Value) float64 { return 100 * g().Heterogeneity().ISquared }, "borenstein2009-45")
	add(c, func(published.Value) float64 { return g().MeanAt(tau(g(), "")).Estimate }, "borenstein2009-46")
	add(c, func(published.Value) float64 { return g().Prediction(tau(g(), ""), 0.95).Lower }, "borenstein2009-47")
	add(c, func(published.Value) float64 { return g().Prediction(tau(g(), ""), 0.95).Upper }, "borenstein2009-48")
	or := effect.Options{Scale: effect.LogOddsRatio}
	six := func() meta.Data { d, _ := pooledSet("six_binary", or); return d }
	add("", func(published.Value) float64 { return six().MeanAt(0).Estimate }, "borenstein2009-55")
	add("", func(published.Value) float64 { return six().MeanAt(0).StandardError }, "borenstein2009-56")
	add("", func(published.Value) float64 { return math.Exp(six().MeanAt(0).Estimate) }, "borenstein2009-57")
	add("", func(published.Value) float64 { return tau(six(), "") }, "borenstein2009-58")
	add("", func(published.Value) float64 { return six().MeanAt(tau(six(), "")).Estimate }, "borenstein2009-59")
	z := func() meta.Data {
		d, _ := pooledSet("six_correlations", effect.Options{Scale: effect.FisherZ})
		return d
	}
	add("", func(published.Value) float64 { return tau(z(), "") }, "borenstein2009-60")
	add("", func(published.Value) float64 { return z().MeanAt(tau(z(), "")).Estimate }, "borenstein2009-61")
	add("", func(published.Value) float64 { return effect.FisherZ.ToShown(z().MeanAt(tau(z(), "")).Estimate) }, "borenstein2009-62")

	rr := func() meta.Interval {
		d, _ := pooledSet("bcg", effect.Options{Scale: effect.LogRiskRatio})
		return d.Interval(meta.Normal, tau(d, ""), 0.95)
	}
	add("normal interval", func(published.Value) float64 { return math.Exp(rr().Estimate) }, "colditz1994-01")
	add("normal interval", func(published.Value) float64 { return math.Exp(rr().Lower) }, "colditz1994-02")
	add("normal interval", func(published.Value) float64 { return math.Exp(rr().Upper) }, "colditz1994-03")
	bcg := func() meta.Data { d, _ := pooledSet("bcg", or); return d }
	add("", func(published.Value) float64 { return bcg().Interval(meta.Normal, 0, 0.95).Estimate }, "vanhouwelingen2002-01")
	add("", func(published.Value) float64 { return bcg().Interval(meta.Normal, 0, 0.95).StandardError }, "vanhouwelingen2002-02")
	add("", func(published.Value) float64 { return bcg().Interval(meta.Normal, 0, 0.95).Lower }, "vanhouwelingen2002-03")
	add("", func(published.Value) float64 { return bcg().Interval(meta.Normal, 0, 0.95).Upper }, "vanhouwelingen2002-04")
	ml := "maximum-likelihood"
	add(ml, func(published.Value) float64 { return bcg().MeanAt(tau(bcg(), ml)).Estimate }, "vanhouwelingen2002-05")
	add(ml, func(published.Value) float64 { return bcg().MeanAt(tau(bcg(), ml)).StandardError }, "vanhouwelingen2002-06")
	add(ml, func(published.Value) float64 { return tau(bcg(), ml) }, "vanhouwelingen2002-07")

	te := func() meta.Data { d, _ := pooledSet("teacher_expectancy", effect.Options{}); return d }
	reml := "restricted-maximum-likelihood"
	add("", func(published.Value) float64 { return te().Heterogeneity().Q }, "raudenbush-01")
	add("", func(published.Value) float64 { return te().Heterogeneity().P }, "raudenbush-02")
	add(reml, func(published.Value) float64 { return tau(te(), reml) }, "raudenbush-03")
	add(reml, func(published.Value) float64 { return te().MeanAt(tau(te(), reml)).StandardError }, "raudenbush-04")
	add(reml, func(published.Value) float64 { return te().MeanAt(tau(te(), reml)).Estimate }, "raudenbush-10")
	in := func() meta.Interval { return te().Interval(meta.Normal, tau(te(), ""), 0.95) }
	add("normal interval", func(published.Value) float64 { return in().Estimate }, "duval2005-01")
	add("normal interval", func(published.Value) float64 { return in().Lower }, "duval2005-02")
	add("normal interval", func(published.Value) float64 { return in().Upper }, "duval2005-03")
	add("missing studies below the mean", func(published.Value) float64 {
		dl, _ := meta.EstimatorByName("")
		return float64(smallstudy.TrimFill(te(), dl, meta.Normal, 0.95, smallstudy.TrimFillOptions{}).Missing)
	}, "duval2005-04")

	mh := func(name string) meta.Interval {
		_, t := pooledSet(name, or)
		return meta.MantelHaenszel(effect.LogOddsRatio, t, 0.95)
	}
	for _, x := range []struct{ name, or, lower, upper string }{{"magnesium7", "teo1991-01", "teo1991-02", "teo1991-03"}, {"china_smoking", "agrestiCDA-02", "agrestiCDA-03", "agrestiCDA-04"}} {
		name := x.name
		add("Mantel-Haenszel", func(published.Value) float64 { return math.Exp(mh(name).Estimate) }, x.or)
		add("Mantel-Haenszel", func(published.Value) float64 { return math.Exp(mh(name).Lower) }, x.lower)
		add("Mantel-Haenszel", func(published.Value) float64 { return math.Exp(mh(name).Upper) }, x.upper)
	}
	add("Peto", func(published.Value) float64 {
		_, t := pooledSet("beta_blockers", or)
		i, _ := meta.Peto(t, 0.95)
		return math.Exp(i.Estimate)
	}, "yusuf1985-01")
	rd := func() meta.Data {
		d, _ := pooledSet("lidocaine", effect.Options{Scale: effect.RiskDifference})
		return d
	}
	add("", func(published.Value) float64 { return rd().MeanAt(0).Estimate }, "normand1999-06")
	add("", func(published.Value) float64 { return rd().MeanAt(0).StandardError }, "normand1999-07")

	for _, v := range published.Topic("heterogeneity") {
		switch v.Quantity {
		case "I^2 percent":
			add("", func(v published.Value) float64 { return 100 * math.Max(0, (v.Input("Q")-v.Input("k")+1)/v.Input("Q")) }, v.ID)
		case "I^2 95% lower":
			add("interval by ln H", func(v published.Value) float64 {
				return 100 * meta.ISquaredByLogH(v.Input("Q"), int(v.Input("k")), 0.95).Lower
			}, v.ID)
		case "I^2 95% upper":
			add("interval by ln H", func(v published.Value) float64 {
				return 100 * meta.ISquaredByLogH(v.Input("Q"), int(v.Input("k")), 0.95).Upper
			}, v.ID)
		case "P value of Q":
			add("", func(v published.Value) float64 { return num.ChiSquaredSurvival(v.Input("Q"), v.Input("k")-1) }, v.ID)
		}
	}
}

func distributionRecipes() {
	// One-sided normal tolerance factor: the noncentral t quantile over sqrt n, with n - 1 degrees of freedom and noncentrality z sqrt n.
	factor := func(v published.Value) float64 {
		n, cover, level := v.Input("n"), v.Input("coverage"), v.Input("confidence")
		delta := num.NormalQuantile(cover) * math.Sqrt(n)
		r := num.Root(func(t float64) float64 { return num.NoncentralTCDF(t, n-1, delta) - level }, delta/2, delta*4, num.RootOptions{Tolerance: 1e-12})
		return r.X / math.Sqrt(n)
	}
	add("", factor, "nist-06", "owen-01", "owen-02")
	add("", func(v published.Value) float64 { return num.ChiSquaredQuantile(0.01, v.Input("n")-1) }, "nist-04")
	add("", func(published.Value) float64 { return num.HypergeometricSurvival(2, 4, 4, 8) }, "fisherSMRW-02")
	add("", func(published.Value) float64 { return num.HypergeometricSurvival(3, 4, 4, 8) }, "fisherSMRW-03")
}

func design(s power.Study) power.Design {
	d, err := s.Resolve()
	if err != nil {
		panic("qualify: " + err.Error())
	}
	return d
}

func sizeFor(s power.Study, x, target float64) power.Sized {
	z, err := power.SizeFor(design(s), x, target)
	if err != nil {
		return power.Sized{Continuous: math.NaN()}
	}
	return z
}

func powerRecipes() {
	for _, v := range published.Topic("power table: two means") {
		switch v.Source {
		case "cohen1992":
			add("nearest whole number to the exact solution, as printed", func(v published.Value) float64 {
				return math.Round(sizeFor(power.Study{Alpha: v.Input("alpha")}, v.Input("d"), 0.8).Continuous)
			}, v.ID)
		case "cohen1988":
			add("", func(v published.Value) float64 {
				return design(power.Study{Alpha: v.Input("alpha"), Sides: int(v.Input("tails"))}).Power(v.Input("d"), int(v.Input("n_per_group"))).Any()
			}, v.ID)
		case "julious2004":
			add("", func(v published.Value) float64 {
				return float64(sizeFor(power.Study{Alpha: v.Input("alpha"), Sides: int(v.Input("tails"))}, v.Input("standardised_difference"), v.Input("power")).N)
			}, v.ID)
		}
	}
	spirit := func(target float64) func(published.Value) float64 {
		return func(v published.Value) float64 {
			g := sizeFor(power.Study{}, v.Input("difference")/v.Input("sd"), target).Groups
			return float64(g[0] + g[1])
		}
	}
	add("", spirit(0.8), "spirit2025ex-01")
	add("", spirit(0.9), "spirit2025ex-02")
	add("", func(v published.Value) float64 {
		p1, p2 := v.Input("p1"), v.Input("p2")
		g := sizeFor(power.Study{Outcome: power.Binary, ControlRisk: p1}, power.EffectOf(power.LogOddsRatio, p2, p1), v.Input("power")).Groups
		return float64(g[0] + g[1])
	}, "sedgwick2013-01")
	sm := func(v published.Value) (p, s, m float64) {
		return power.SignMagnitude(v.Input("true_effect"), v.Input("SE"), num.NormalQuantileUpper(v.Input("alpha")/2), 2)
	}
	add("", func(v published.Value) float64 { p, _, _ := sm(v); return p }, "gelmancarlin2014-01")
	add("", func(v published.Value) float64 { _, s, _ := sm(v); return s }, "gelmancarlin2014-02")
	add("", func(v published.Value) float64 { _, _, m := sm(v); return m }, "gelmancarlin2014-03")
	add("z test with known SD", func(v published.Value) float64 {
		return design(power.Study{Test: "z"}).Power(v.Input("prior_mean")/math.Sqrt(v.Input("variance")), int(v.Input("n_per_arm"))).Any()
	}, "ohagan2005-01")
	add("z test with known SD", func(v published.Value) float64 {
		sd := math.Sqrt(v.Input("variance"))
		e := normal{v.Input("prior_mean") / sd, math.Sqrt(v.Input("prior_variance")) / sd}
		return power.Assurer{Design: design(power.Study{Test: "z"}), Sign: 1}.At(int(v.Input("n_per_arm")), e)[0].Value
	}, "ohagan2005-02")
}

// normal is a normal distribution of the effect.
type normal struct{ mean, sd float64 }

func (n normal) CDF(x float64) float64      { return num.NormalCDF((x - n.mean) / n.sd) }
func (n normal) Survival(x float64) float64 { return num.NormalSurvival((x - n.mean) / n.sd) }
func (n normal) Density(x float64) float64  { return num.NormalPDF((x-n.mean)/n.sd) / n.sd }
func (n normal) Quantile(p float64) float64 { return n.mean + n.sd*num.NormalQuantile(p) }

// oneSidedZ is common practice, without a source: a one-sided z test at alpha .05 with an effect of one SD.
func oneSidedZ() []Line {
	d := design(power.Study{Arrangement: power.SingleGroup, Test: "z", Sides: 1})
	var out []Line
	for _, c := range []struct {
		n       int
		printed string
	}{{1, "0.26"}, {7, "0.84"}} {
		p := d.Power(1, c.n).Any()
		out = append(out, Line{ID: "one-sided-z-" + c.printed, Topic: "power: one mean, known SD", Source: "common practice, no source", KnownBy: "common practice, no source",
			Quantity: "power of a one-sided z test, alpha .05, effect of one SD, n = " + string(rune('0'+c.n)), Printed: c.printed, Computed: p, Reproduced: published.Meets(c.printed, p)})
	}
	return out
}
