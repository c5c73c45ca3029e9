package plan

import (
	"fmt"
	"math"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
	"footing/plan/result"
)

// scaleOrder lists the scales in the order in which people are told of them.
var scaleOrder = []effect.Scale{effect.StandardizedMeanDifference, effect.MeanDifference, effect.LogRatioOfMeans, effect.LogVariabilityRatio,
	effect.LogOddsRatio, effect.LogRiskRatio, effect.RiskDifference, effect.LogHazardRatio, effect.LogRateRatio, effect.RateDifference,
	effect.FisherZ, effect.PartialFisherZ, effect.LogitProportion, effect.Mean, effect.LogSD, effect.LogRate, effect.ICC, effect.CronbachAlpha, effect.AsGiven}

// parseScale reads the scale of a plan file: its name, or the words that people use for it.
func parseScale(f *File) (effect.Scale, error) {
	s, err := effect.ParseScale(f.Pool.Scale)
	if err == nil {
		return s, nil
	}
	names := make([]string, len(scaleOrder))
	for i, s := range scaleOrder {
		names[i] = string(s)
	}
	return "", &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: "scale-unknown", Place: finding.Place{File: f.Path},
		What: fmt.Sprintf("pool: scale: %q is no effect scale", f.Pool.Scale), Mend: "use one of " + strings.Join(names, ", ")}}
}

// scaleInfo describes the scale of the analysis.
func scaleInfo(s effect.Scale, e Evidence) result.ScaleInfo {
	info := result.ScaleInfo{Name: string(s), Words: s.Words(), Log: s.IsLog(), HigherBetter: true, Favours: e.Favours}
	if e.HigherBetter != nil {
		info.HigherBetter = *e.HigherBetter
	}
	return info
}

// shownOf gives an estimate and its limits on the scale that people read; nil where that leaves the range of a double.
func shownOf(s effect.Scale, estimate, lower, upper float64) *result.Shown {
	out := result.Shown{Scale: s.Words(), Estimate: s.ToShown(estimate)}
	lo, hi := s.ToShown(lower), s.ToShown(upper)
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

// toShown turns a value of the analysed scale into the one that people read.
func toShown(s effect.Scale, v float64) float64 { return s.ToShown(v) }
