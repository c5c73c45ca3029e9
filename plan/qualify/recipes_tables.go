package qualify

import (
	"math"

	"footing/internal/num"
	"footing/meta"
	"footing/meta/effect"
	"footing/meta/prior"
	"footing/plan"
	"footing/power"
	"footing/testdata/published"
)

// multiplierRecipes are printed multiples of (z + z)^2 and tables of normal theory, all from the z test.
func multiplierRecipes() {
	for _, id := range append(span("pocock1983", 1, 8), span("pocock1983", 13, 16)...) {
		add("one side of a two-sided z test, SD known", func(v published.Value) float64 {
			return sizeFor(power.Study{Arrangement: power.SingleGroup, Test: "z", Sides: 1, Alpha: v.Input("alpha") / 2}, 1, 1-v.Input("beta")).Continuous
		}, id)
	}
	add("z test, SD known; printed as the nearest whole number", func(v published.Value) float64 {
		return math.Round(sizeFor(power.Study{Test: "z", Alpha: v.Input("alpha")}, 1, v.Input("power")).Continuous)
	}, "lehr1992-01")
	add("z test, SD known", func(v published.Value) float64 {
		return float64(sizeFor(power.Study{Test: "z", Alpha: v.Input("alpha")}, v.Input("difference")/v.Input("sd"), v.Input("power")).N)
	}, "chow2003-01")
	for _, id := range span("cohen1992", 25, 27) {
		add("z test of the arcsine difference h, whose variance is 1; nearest whole number, as printed", func(v published.Value) float64 {
			return math.Round(sizeFor(power.Study{Test: "z", Alpha: v.Input("alpha")}, v.Input("h"), 0.8).Continuous)
		}, id)
	}
	for _, id := range []string{"goodman1992-01", "goodman1992-02", "goodman1992-04"} {
		add("z test whose true effect is the observed one, significant in the same direction", func(v published.Value) float64 {
			return design(power.Study{Arrangement: power.SingleGroup, Test: "z"}).Power(num.NormalQuantileUpper(v.Input("P")/2), 1).Toward(1)
		}, id)
	}
	add("", func(v published.Value) float64 {
		d, ok := power.Detectable(design(power.Study{Alpha: v.Input("alpha")}), 1, int(v.Input("n_per_group")), v.Input("power"))
		if !ok {
			return math.NaN()
		}
		return d
	}, "simonsohn2015-01")
}

// enrolmentRecipes go through the size of a bare planned study, dropout included.
func enrolmentRecipes() {
	enrolled := func(b plan.BareSpec) float64 {
		s, err := plan.SizeBare(b)
		if err != nil || len(s.Cases) != 1 || s.Cases[0].ToEnrol == nil {
			return math.NaN()
		}
		return float64(s.Cases[0].ToEnrol.Total)
	}
	for id, target := range map[string]float64{"spirit2025ex-03": 0.8, "spirit2025ex-04": 0.9} {
		add("40% loss", func(v published.Value) float64 {
			return enrolled(plan.BareSpec{Scale: string(effect.MeanDifference), Effects: []float64{v.Input("difference")}, SD: v.Input("sd"), Alpha: v.Input("alpha"), Power: target, Dropout: 0.4})
		}, id)
	}
}

// binomialRecipes are two-stage single-group studies: stop when at most r1 of the first n1 respond.
func binomialRecipes() {
	stop := func(v published.Value) float64 {
		return num.BinomialCDF(int(v.Input("r1")), int(v.Input("n1")), v.Input("p0"))
	}
	for _, v := range published.Topic("exact test: two-stage") {
		switch v.Quantity {
		case "probability of early stop under p0":
			add("", stop, v.ID)
		case "expected sample size under p0":
			add("", func(v published.Value) float64 {
				return v.Input("n1") + (1-stop(v))*(v.Input("n")-v.Input("n1"))
			}, v.ID)
		}
	}
	add("", func(v published.Value) float64 {
		x, n, level := v.Input("x"), v.Input("n"), v.Input("level")
		return num.BetaQuantileUpper((1-level)/2, x+1, n-x)
	}, "clopper1934-01")
}

func moreDistributionRecipes() {
	add("", func(v published.Value) float64 {
		n := v.Input("n")
		return num.NormalQuantileUpper((1-v.Input("coverage"))/2) * math.Sqrt((n-1)*(1+1/n)/num.ChiSquaredQuantile(1-v.Input("confidence"), n-1))
	}, "nist-05")
	for id, p := range map[string]float64{"raudenbush-11": 0.025, "raudenbush-12": 0.975} {
		add("true effects normal around the printed mean", func(v published.Value) float64 {
			d, err := prior.NewLocated(v.Input("mean"), math.Sqrt(v.Input("tau2")), math.Inf(1))
			if err != nil {
				return math.NaN()
			}
			return d.Quantile(p)
		}, id)
	}
}

func moreTrialsRecipes() {
	rr := func() meta.Data { d, _ := pooledSet("bcg", effect.Options{Scale: effect.LogRiskRatio}); return d }
	add("", func(published.Value) float64 { return rr().Heterogeneity().Q }, "borenstein2009-74")
	add("", func(published.Value) float64 { return tau(rr(), "") }, "borenstein2009-79")
}
