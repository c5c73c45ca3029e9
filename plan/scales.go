package plan

import (
	"fmt"
	"math"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
	"footing/plan/result"
)

// scaleWords says what people read in place of each analysed scale.
var scaleWords = map[effect.Scale]string{
	effect.AsGiven:                    "effect as given",
	effect.StandardizedMeanDifference: "standardized mean difference",
	effect.MeanDifference:             "mean difference",
	effect.LogRatioOfMeans:            "ratio of means",
	effect.LogVariabilityRatio:        "variability ratio",
	effect.LogOddsRatio:               "odds ratio",
	effect.LogRiskRatio:               "risk ratio",
	effect.RiskDifference:             "risk difference",
	effect.LogHazardRatio:             "hazard ratio",
	effect.LogRateRatio:               "rate ratio",
	effect.RateDifference:             "rate difference",
	effect.FisherZ:                    "correlation",
	effect.PartialFisherZ:             "partial correlation",
	effect.LogitProportion:            "proportion",
	effect.Mean:                       "mean",
	effect.LogSD:                      "standard deviation",
	effect.LogRate:                    "rate",
	effect.ICC:                        "intracluster correlation",
	effect.CronbachAlpha:              "Cronbach alpha",
}

// scaleOrder lists the scales in the order in which people are told of them.
var scaleOrder = []effect.Scale{effect.StandardizedMeanDifference, effect.MeanDifference, effect.LogRatioOfMeans, effect.LogVariabilityRatio,
	effect.LogOddsRatio, effect.LogRiskRatio, effect.RiskDifference, effect.LogHazardRatio, effect.LogRateRatio, effect.RateDifference,
	effect.FisherZ, effect.PartialFisherZ, effect.LogitProportion, effect.Mean, effect.LogSD, effect.LogRate, effect.ICC, effect.CronbachAlpha, effect.AsGiven}

// isLog reports whether the scale is analysed as a natural logarithm.
func isLog(s effect.Scale) bool {
	switch s {
	case effect.LogRatioOfMeans, effect.LogVariabilityRatio, effect.LogOddsRatio, effect.LogRiskRatio, effect.LogHazardRatio, effect.LogRateRatio, effect.LogSD, effect.LogRate:
		return true
	}
	return false
}

// parseScale reads the scale of a plan file: its name, or the words that people use for it.
func parseScale(f *File) (effect.Scale, error) {
	want := strings.NewReplacer(" ", "-", "_", "-").Replace(foldWords(f.Pool.Scale))
	names := make([]string, len(scaleOrder))
	for i, s := range scaleOrder {
		names[i] = string(s)
		words := strings.ReplaceAll(strings.ToLower(scaleWords[s]), " ", "-")
		if want == string(s) || want == words || want == strings.ReplaceAll(words, "standardized", "standardised") {
			return s, nil
		}
	}
	return "", &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: "scale-unknown", Place: finding.Place{File: f.Path},
		What: fmt.Sprintf("pool: scale: %q is no effect scale", f.Pool.Scale), Mend: "use one of " + strings.Join(names, ", ")}}
}

// scaleInfo describes the scale of the analysis.
func scaleInfo(s effect.Scale, e Evidence) result.ScaleInfo {
	info := result.ScaleInfo{Name: string(s), Words: scaleWords[s], Log: isLog(s), HigherBetter: true, Favours: e.Favours}
	if e.HigherBetter != nil {
		info.HigherBetter = *e.HigherBetter
	}
	return info
}

// toShown turns a value of the analysed scale into the one that people read.
func toShown(s effect.Scale, v float64) float64 {
	switch {
	case isLog(s):
		return math.Exp(v)
	case s == effect.FisherZ || s == effect.PartialFisherZ:
		return math.Tanh(v)
	case s == effect.LogitProportion:
		return 1 / (1 + math.Exp(-v))
	}
	return v
}

// shownOf gives an estimate and its limits on the scale that people read; nil where that leaves the range of a double.
func shownOf(s effect.Scale, estimate, lower, upper float64) *result.Shown {
	out := result.Shown{Scale: scaleWords[s], Estimate: toShown(s, estimate)}
	lo, hi := toShown(s, lower), toShown(s, upper)
	if math.IsInf(out.Estimate, 0) || math.IsNaN(out.Estimate) {
		return nil
	}
	if !math.IsInf(lo, 0) && !math.IsNaN(lo) {
		out.Lower = &lo
	}
	if !math.IsInf(hi, 0) && !math.IsNaN(hi) {
		out.Upper = &hi
	}
	return &out
}
