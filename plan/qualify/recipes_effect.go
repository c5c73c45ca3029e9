package qualify

import (
	"math"

	"footing/meta/effect"
	"footing/testdata/published"
)

func pairedRecipes() {
	opt := effect.Options{Scale: effect.StandardizedMeanDifference, PairedVariance: effect.PairedPrinted, ApproximateJ: true}
	const words = "the printed paired variance, printed approximation of J"
	pairs := func(v published.Value) effect.Estimate {
		return best(effect.Reported{DifferenceMean: effect.Of(v.Input("mean1") - v.Input("mean2")), DifferenceSD: effect.Of(v.Input("sd_diff")), N: effect.Of(v.Input("n_pairs")), PrePostR: effect.Of(v.Input("r"))}, opt)
	}
	add(words, func(v published.Value) float64 { return pairs(v).Value }, "borenstein2009-11")
	add(words, func(v published.Value) float64 { return pairs(v).Variance }, "borenstein2009-12")
	add("", func(v published.Value) float64 {
		return math.Sqrt(best(effect.Reported{DifferenceMean: effect.Of(v.Input("mean_E") - v.Input("mean_C")), DifferenceSD: effect.Of(2), N: effect.Of(v.Input("n"))}, effect.Options{Scale: effect.MeanDifference}).Variance)
	}, "cochraneH-01")
}

func recoveryRecipes() {
	for _, v := range published.Topic("effect size: SD from range") {
		add("", func(v published.Value) float64 { return effect.ExpectedRange(int(v.Input("n"))) }, v.ID)
	}
	for _, v := range published.Topic("effect size: SD from quartiles") {
		add("", func(v published.Value) float64 { return effect.ExpectedQuartileDistance(int(v.Input("Q"))) }, v.ID)
	}
	add("", func(v published.Value) float64 {
		r, _ := effect.CorrelationFromSDs(v.Input("sd_baseline"), v.Input("sd_final"), v.Input("sd_change"))
		return r
	}, "cochraneH-09", "cochraneH-10")
	closed := effect.Options{Scale: effect.AsGiven, ApproximateP: true}
	se := func(v published.Value) effect.Estimate {
		return best(effect.Reported{Estimate: effect.Of(v.Input("difference")), P: effect.Of(v.Input("P"))}, closed)
	}
	const words = "the printed closed form from p to z"
	add(words, func(v published.Value) float64 { e := se(v); return e.Value / math.Sqrt(e.Variance) }, "altmanbland2011-01")
	add(words, func(v published.Value) float64 { return math.Sqrt(se(v).Variance) }, "altmanbland2011-02")
	add(words, func(v published.Value) float64 { e := se(v); return e.Value - 1.96*math.Sqrt(e.Variance) }, "altmanbland2011-03")
	add(words, func(v published.Value) float64 { e := se(v); return e.Value + 1.96*math.Sqrt(e.Variance) }, "altmanbland2011-04")
	add("", func(v published.Value) float64 {
		plainTable := table(v.Input("events1"), v.Input("n1"), v.Input("events2"), v.Input("n2"))
		clustered := plainTable
		clustered.ClusterSize, clustered.ICC = effect.Of(v.Input("mean_cluster")), effect.Of(v.Input("ICC"))
		opt := effect.Options{Scale: effect.LogOddsRatio}
		return best(clustered, opt).Variance / best(plainTable, opt).Variance
	}, "cochraneH-17")
}

func conversionRecipes() {
	add("", func(v published.Value) float64 { x, _ := effect.LogOddsOfD(v.Input("d"), 1); return x }, "borenstein2009-27")
	add("", func(published.Value) float64 { x, _ := effect.LogOddsOfD(1, 1); return x }, "chinn2000-01")
	add("", func(v published.Value) float64 { return 100 * effect.NonOverlap(v.Input("d")) }, "cohen1988-13")
	add("equal groups", func(v published.Value) float64 { r, _ := effect.ROfD(v.Input("d"), 1, 4); return r }, "cohen1988-15", "cohen1988-16")
	add("", func(v published.Value) float64 { return effect.NumberNeeded(0.3+v.Input("RD"), 0.3) }, "cochraneH-11", "cochraneH-12")
	risk := func(v published.Value) (treated, control float64) {
		return effect.TreatedRisk(math.Log(v.Input("OR")), v.Input("control_risk")), v.Input("control_risk")
	}
	add("", func(v published.Value) float64 { t, c := risk(v); return 1000 * (c - t) }, "cochraneH-15")
	add("", func(v published.Value) float64 { t, c := risk(v); return effect.NumberNeeded(t, c) }, "cochraneH-16")
}
