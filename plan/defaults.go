package plan

import (
	"fmt"
	"path/filepath"
	"strconv"
	"strings"

	"footing/meta/effect"
	"footing/plan/result"
)

// The values that a plan has when it gives none.
const (
	defaultAlpha         = 0.05
	defaultPower         = 0.80
	defaultLevel         = 0.95
	defaultHeterogeneity = "dersimonian-laird"
	defaultInterval      = "hartung-knapp-floored"
	defaultBasis         = "predictive"
	defaultArrangement   = "parallel"
	defaultAllocation    = "1:1"
	defaultAim           = "superiority"
	defaultSides         = "two"
	defaultSizeFor       = "cautious"
)

// WithDefaults gives a copy of the plan with every default filled in, and the list of what went in without being
// computed from the evidence: defaults, and values of the plan with their sources. What has no source is marked.
func (f *File) WithDefaults() (*File, []result.Assumption) {
	c := *f
	var as []result.Assumption
	note := func(name, value, why string) {
		as = append(as, result.Assumption{Name: name, Value: value, Why: why, Assumed: true, Place: result.Place{File: f.Path}})
	}
	word := func(v *string, name, value, why string) {
		if strings.TrimSpace(*v) == "" {
			*v = value
			note(name, value, why)
		}
	}
	number := func(v **float64, name string, value float64, why string) {
		if *v == nil {
			*v = &value
			note(name, strconv.FormatFloat(value, 'g', -1, 64), why)
			n := value
			as[len(as)-1].Number = &n
		}
	}
	if c.Title == "" {
		c.Title = strings.TrimSuffix(filepath.Base(f.Path), filepath.Ext(f.Path))
	}
	if c.Evidence.File != "" {
		if c.Evidence.HigherBetter == nil {
			yes := true
			c.Evidence.HigherBetter = &yes
			note("evidence: higher is better", "true", "the plan does not say which direction is the better one")
		}
		word(&c.Pool.Heterogeneity, "pool: heterogeneity", defaultHeterogeneity, "default")
		word(&c.Pool.Interval, "pool: interval", defaultInterval, "default")
		number(&c.Pool.Level, "pool: level", defaultLevel, "default")
		word(&c.Range.Basis, "range: basis", defaultBasis, "default: the true effect of the next study, not only the mean of the earlier ones")
	}
	word(&c.Study.Arrangement, "study: arrangement", defaultArrangement, "default")
	word(&c.Study.Allocation, "study: allocation", defaultAllocation, "default")
	word(&c.Study.Aim, "study: aim", defaultAim, "default")
	word(&c.Study.Sides, "study: sides", defaultSides, "default")
	number(&c.Study.Alpha, "study: alpha", defaultAlpha, "default")
	if c.Study.Dropout == nil {
		c.Study.Dropout = &Assumed{}
		note("study: dropout", "0", "the plan gives none: everybody who is enrolled is analysed")
	}
	number(&c.Target.Power, "target: power", defaultPower, "default")
	word(&c.Target.SizeFor, "target: size for", sizeForDefault(f), "default")
	as = append(as, f.stated()...)
	return &c, as
}

// sizeForDefault: without evidence only the smallest worthwhile effect or the user's own scenarios exist.
func sizeForDefault(f *File) string {
	if f.Evidence.File != "" {
		return defaultSizeFor
	}
	if names := scenarioNames(f.Range.Scenarios); f.Range.SmallestWorthwhile == nil && len(names) > 0 {
		return names[0]
	}
	return "smallest-worthwhile"
}

// stated lists the assumptions that the plan itself gives.
func (f *File) stated() []result.Assumption {
	var as []result.Assumption
	for _, x := range []struct {
		name string
		a    *Assumed
	}{
		{"evidence: pre-post correlation", f.Evidence.PrePostR},
		{"evidence: intracluster correlation", f.Evidence.ICC},
		{"evidence: reliability", f.Evidence.Reliability},
		{"range: smallest worthwhile effect", f.Range.SmallestWorthwhile},
		{"study: standard deviation", f.Study.SD},
		{"study: control risk", f.Study.ControlRisk},
		{"study: baseline correlation", f.Study.BaselineCorrelation},
		{"study: dropout", f.Study.Dropout},
	} {
		if x.a != nil && x.a.Pool == "" {
			as = append(as, x.a.assumption(f, x.name))
		}
	}
	for _, name := range scenarioNames(f.Range.Scenarios) {
		v := f.Range.Scenarios[name]
		as = append(as, result.Assumption{Name: "range: scenarios: " + name, Value: strconv.FormatFloat(v, 'g', -1, 64), Number: &v, Assumed: true, Place: f.At("range: scenarios: " + name)})
	}
	return as
}

// assumption describes a value of the plan for a result.
func (a *Assumed) assumption(f *File, name string) result.Assumption {
	v := a.Value
	out := result.Assumption{Name: name, Value: strconv.FormatFloat(v, 'g', -1, 64), Number: &v, Low: a.Low, High: a.High,
		Source: a.Source, Why: a.Why, Who: a.Who, Assumed: strings.TrimSpace(a.Source) == "",
		Place: result.Place{File: f.Path, Line: a.Line, Column: a.Column}}
	if a.Low != nil && a.High != nil {
		out.Value += fmt.Sprintf(" (%g to %g)", *a.Low, *a.High)
	}
	return out
}

// outcomeOf says which outcome an effect scale is about, "" when it says nothing.
func outcomeOf(s effect.Scale) string {
	switch s {
	case effect.StandardizedMeanDifference, effect.MeanDifference, effect.LogRatioOfMeans, effect.LogVariabilityRatio, effect.Mean, effect.LogSD:
		return "continuous"
	case effect.LogOddsRatio, effect.LogRiskRatio, effect.RiskDifference, effect.LogitProportion:
		return "binary"
	case effect.LogHazardRatio:
		return "event-time"
	case effect.LogRateRatio, effect.RateDifference, effect.LogRate:
		return "count"
	case effect.FisherZ, effect.PartialFisherZ:
		return "association"
	}
	return ""
}

// scaleOf is the scale on which a plan without evidence is sized.
func scaleOf(outcome string) effect.Scale {
	switch outcome {
	case "binary":
		return effect.LogOddsRatio
	case "event-time":
		return effect.LogHazardRatio
	case "count":
		return effect.LogRateRatio
	case "association":
		return effect.FisherZ
	}
	return effect.StandardizedMeanDifference
}
