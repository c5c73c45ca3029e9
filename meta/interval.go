package meta

import (
	"fmt"
	"math"
	"strings"

	"footing/internal/num"
)

// Interval is one interval of the mean (or of a new setting's effect). Where Available is false, Why says why and the numbers are 0.
type Interval struct {
	Method        string
	Level         float64
	Estimate      float64
	StandardError float64
	Lower, Upper  float64
	Statistic     float64
	DF            float64 // +Inf for the normal
	P             float64 // two-sided, against no effect
	HasTest       bool    // Statistic and P are there
	Available     bool
	Why           string
}

// Methods of the mean's interval.
const (
	Normal              = "normal"
	HartungKnapp        = "hartung-knapp"
	HartungKnappFloored = "hartung-knapp-floored"
)

// IntervalMethods lists the methods, the default last.
func IntervalMethods() []string {
	return []string{ProfileLikelihood, Normal, HartungKnapp, HartungKnappFloored}
}

// ParseIntervalMethod reads the name of a plan file; "" is the default, the floored Hartung-Knapp interval.
func ParseIntervalMethod(name string) (string, error) {
	want := strings.ToLower(strings.Join(strings.Fields(strings.ReplaceAll(name, "-", " ")), "-"))
	if want == "" {
		return HartungKnappFloored, nil
	}
	for _, m := range IntervalMethods() {
		if m == want {
			return m, nil
		}
	}
	return "", fmt.Errorf("%q is no interval of the mean; there are %s", name, strings.Join(IntervalMethods(), ", "))
}

// Interval is the interval of the mean under tau2 at a level.
//
// normal: mean +- z SE. hartung-knapp: SE^2 times sum w*(y - mean)^2/(k-1), t with k - 1 df (Hartung & Knapp 2001; Sidik & Jonkman 2002).
// hartung-knapp-floored: the same with that factor not below 1 (Roever, Knapp & Friede 2015). profile-likelihood: by maximum likelihood whatever tau2 is given
// (Hardy & Thompson 1996).
func (d Data) Interval(method string, tau2, level float64) Interval {
	m := d.MeanAt(tau2)
	out := Interval{Method: method, Level: level, Estimate: m.Estimate, DF: math.Inf(1)}
	if method == ProfileLikelihood {
		return d.profileInterval(out)
	}
	se := m.StandardError
	quantile := num.NormalQuantileUpper((1 - level) / 2)
	if method != Normal {
		if d.K() < 2 {
			out.Why = "one study has no between-study variation, which this interval rests on"
			return out
		}
		factor := m.Q / float64(d.K()-1)
		if method == HartungKnapp && d.equal() {
			out.Why = "all estimates are equal: the interval would have width 0"
			return out
		}
		if method == HartungKnappFloored {
			factor = math.Max(1, factor)
		}
		se *= math.Sqrt(factor)
		out.DF = float64(d.K() - 1)
		quantile = num.StudentTQuantileUpper((1-level)/2, out.DF)
	}
	return out.fill(se, quantile)
}

// fill completes an interval from its standard error and quantile.
func (i Interval) fill(se, quantile float64) Interval {
	i.StandardError = se
	i.Lower, i.Upper = i.Estimate-quantile*se, i.Estimate+quantile*se
	i.Statistic = i.Estimate / se
	if math.IsInf(i.DF, 1) {
		i.P = 2 * num.NormalSurvival(math.Abs(i.Statistic))
	} else {
		i.P = 2 * num.StudentTSurvival(math.Abs(i.Statistic), i.DF)
	}
	i.HasTest, i.Available = true, true
	if math.IsInf(i.Statistic, 0) || math.IsNaN(i.Statistic) {
		i.Statistic, i.P, i.HasTest = 0, 0, false
	}
	return i
}

// Prediction is the interval for the true effect in a new setting: mean +- t(k-2) sqrt(tau2 + SE^2), SE by normal theory (Higgins, Thompson & Spiegelhalter
// 2009, eq. 12). It needs three studies.
func (d Data) Prediction(tau2, level float64) Interval {
	m := d.MeanAt(tau2)
	out := Interval{Method: "student-t", Level: level, Estimate: m.Estimate}
	if d.K() < 3 {
		out.Why = fmt.Sprintf("a prediction interval needs at least 3 studies; there %s %d", plural(d.K(), "is", "are"), d.K())
		return out
	}
	out.DF = float64(d.K() - 2)
	out = out.fill(math.Sqrt(tau2+m.StandardError*m.StandardError), num.StudentTQuantileUpper((1-level)/2, out.DF))
	out.HasTest, out.Statistic, out.P = false, 0, 0
	if d.K() == 3 {
		out.Why = "with 3 studies the interval rests on t with 1 degree of freedom and is very wide"
	}
	return out
}

func plural(n int, one, many string) string {
	if n == 1 {
		return one
	}
	return many
}
