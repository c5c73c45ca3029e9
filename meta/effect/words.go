package effect

import (
	"fmt"
	"math"
	"strings"
)

// scaleWords says what people read in place of each analysed scale.
var scaleWords = map[Scale]string{
	AsGiven:                    "effect as given",
	StandardizedMeanDifference: "standardized mean difference",
	MeanDifference:             "mean difference",
	LogRatioOfMeans:            "ratio of means",
	LogVariabilityRatio:        "variability ratio",
	LogOddsRatio:               "odds ratio",
	LogRiskRatio:               "risk ratio",
	RiskDifference:             "risk difference",
	LogHazardRatio:             "hazard ratio",
	LogRateRatio:               "rate ratio",
	RateDifference:             "rate difference",
	FisherZ:                    "correlation",
	PartialFisherZ:             "partial correlation",
	LogitProportion:            "proportion",
	Mean:                       "mean",
	LogSD:                      "standard deviation",
	LogRate:                    "rate",
	ICC:                        "intracluster correlation",
	CronbachAlpha:              "Cronbach alpha",
}

// Words is what people call the scale: "odds ratio" for LogOddsRatio.
func (s Scale) Words() string { return scaleWords[s] }

// IsLog reports whether the scale is analysed as a natural logarithm.
func (s Scale) IsLog() bool {
	switch s {
	case LogRatioOfMeans, LogVariabilityRatio, LogOddsRatio, LogRiskRatio, LogHazardRatio, LogRateRatio, LogSD, LogRate:
		return true
	}
	return false
}

// ToShown turns a value of the analysed scale into the one that people read: a ratio from its logarithm, r from z.
func (s Scale) ToShown(x float64) float64 {
	switch {
	case s.IsLog():
		return math.Exp(x)
	case s == FisherZ || s == PartialFisherZ:
		return math.Tanh(x)
	case s == LogitProportion:
		return 1 / (1 + math.Exp(-x))
	case s == CronbachAlpha:
		return -math.Expm1(-x)
	}
	return x
}

// FromShown is the inverse of ToShown; an x that the scale can't hold (a ratio of 0, a correlation of 1) is an error.
func (s Scale) FromShown(x float64) (float64, error) {
	bad := func(domain string) (float64, error) {
		return 0, fmt.Errorf("%g is no %s: it must be %s", x, s.Words(), domain)
	}
	switch {
	case math.IsNaN(x) || math.IsInf(x, 0):
		return bad("a finite number")
	case s.IsLog():
		if x <= 0 {
			return bad("above 0")
		}
		return math.Log(x), nil
	case s == FisherZ || s == PartialFisherZ:
		if math.Abs(x) >= 1 {
			return bad("between -1 and 1")
		}
		return math.Atanh(x), nil
	case s == LogitProportion:
		if x <= 0 || x >= 1 {
			return bad("between 0 and 1")
		}
		return math.Log(x) - math.Log1p(-x), nil
	case s == CronbachAlpha:
		if x >= 1 {
			return bad("below 1")
		}
		return -math.Log1p(-x), nil
	}
	return x, nil
}

// ParseScale reads a scale by its name or by the words that people use for it, whatever the case and the joints.
func ParseScale(text string) (Scale, error) {
	want := fold(text)
	for s, words := range scaleWords {
		if want == string(s) || want == fold(words) {
			return s, nil
		}
	}
	return "", fmt.Errorf("%q is no effect scale", text)
}

func fold(s string) string {
	s = strings.ToLower(strings.TrimSpace(s))
	s = strings.NewReplacer(" ", "-", "_", "-", "standardised", "standardized").Replace(s)
	return s
}
