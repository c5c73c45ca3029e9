package plan

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta"
	"footing/meta/effect"
)

// The words by which a plan file asks for a value that is pooled from the sheet itself.
const (
	controlSD   = "control sd"
	controlRisk = "control risk"
)

// poolNuisance pools what the used rows say about the control groups: their SD as its logarithm, their risk as its
// logit, each by random effects (DerSimonian & Laird 1986). Low and high are the 95% limits of a normal on that scale
// which allows for the standard error of the mean and for how far the studies differ, since the planned study is a new
// one: mean -+ 1.96 sqrt(tau2 + SE2). A value that fewer than two rows report is not pooled.
func poolNuisance(e *EvidenceRead) map[string]Assumed {
	out := map[string]Assumed{}
	var sds, risks []effect.Estimate
	for _, i := range e.Index {
		rec := &e.Sheet.Records[i]
		rep := rec.Reported()
		if y, ok := logSD(&rep.Control); ok {
			y.Study = rec.Study
			sds = append(sds, y)
		}
		if y, ok := logit(&rep.Control); ok {
			y.Study = rec.Study
			risks = append(risks, y)
		}
	}
	if a, ok := poolOne(sds, effect.LogSD, "the SDs of the control groups"); ok {
		a.Pool = controlSD
		out[controlSD] = a
	}
	if a, ok := poolOne(risks, effect.LogitProportion, "the risks of the control groups"); ok {
		a.Pool = controlRisk
		out[controlRisk] = a
	}
	return out
}

// logSD is ln s + 1/(2(n-1)) with variance 1/(2(n-1)): the logarithm of a normal sample's SD, its first-order bias taken
// off (Raudenbush & Bryk 1987, recalled from memory).
func logSD(a *effect.Arm) (effect.Estimate, bool) {
	if !a.SD.Given || !a.N.Given || a.SD.Value <= 0 || a.N.Value < 2 {
		return effect.Estimate{}, false
	}
	v := 1 / (2 * (a.N.Value - 1))
	return effect.Estimate{Scale: effect.LogSD, Value: math.Log(a.SD.Value) + v, Variance: v}, true
}

// logit is the log odds of the event with variance 1/events + 1/non-events; half a person is added to both where one of
// them is none (Haldane 1956; Anscombe 1956).
func logit(a *effect.Arm) (effect.Estimate, bool) {
	if !a.N.Given || a.N.Value < 1 {
		return effect.Estimate{}, false
	}
	events := a.Events.Value
	switch {
	case a.Events.Given:
	case a.Proportion.Given:
		events = a.Proportion.Value * a.N.Value
	default:
		return effect.Estimate{}, false
	}
	others := a.N.Value - events
	if events < 0 || others < 0 {
		return effect.Estimate{}, false
	}
	if events == 0 || others == 0 {
		events, others = events+0.5, others+0.5
	}
	return effect.Estimate{Scale: effect.LogitProportion, Value: math.Log(events / others), Variance: 1/events + 1/others}, true
}

// poolOne pools by random effects and gives the value that people read.
func poolOne(es []effect.Estimate, scale effect.Scale, what string) (Assumed, bool) {
	if len(es) < 2 {
		return Assumed{}, false
	}
	d, err := meta.NewData(es)
	if err != nil {
		return Assumed{}, false
	}
	by, err := meta.EstimatorByName("dersimonian-laird")
	if err != nil {
		return Assumed{}, false
	}
	tau2 := by.Estimate(d).Value
	m := d.MeanAt(tau2)
	half := num.NormalQuantileUpper(0.025) * math.Sqrt(tau2+m.StandardError*m.StandardError)
	value, low, high := scale.ToShown(m.Estimate), scale.ToShown(m.Estimate-half), scale.ToShown(m.Estimate+half)
	if math.IsInf(value, 0) || math.IsInf(high, 0) || math.IsNaN(value) {
		return Assumed{}, false
	}
	return Assumed{Value: value, Low: &low, High: &high, Source: fmt.Sprintf("pooled from %d rows of the evidence sheet", len(es)),
		Why: fmt.Sprintf("%s by random effects (DerSimonian-Laird); the range allows for how far the studies differ", what)}, true
}
