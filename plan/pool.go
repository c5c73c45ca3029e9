package plan

import (
	"fmt"
	"math"

	"footing/internal/finding"
	"footing/meta"
	"footing/meta/effect"
	"footing/plan/result"
)

// PoolStudies pools the usable records of an evidence sheet and describes everything that `footing pool` shows. The error says what can't be pooled
// at all: no usable study, an unknown estimator or interval.
func PoolStudies(f *File, ev *EvidenceRead) (*result.Pool, error) {
	p, err := newPooler(f, ev)
	if err != nil {
		return nil, err
	}
	out := &result.Pool{Schema: "footing/pool/1", Evidence: ev.Evidence, Scale: ev.Info, Level: p.level, K: p.data.K(), Findings: []finding.Finding{}}
	out.Studies = append([]result.Study{}, ev.Studies...)
	p.weights(out)
	out.Participants = participants(out.Studies)
	out.Common = p.pooled("common-effect", p.data.Interval(meta.Normal, 0, p.level), nil)
	tau := p.tau.Value
	out.Random = p.pooled(p.estimator.Name, p.mean(p.method, tau), &tau)
	p.tables(out)
	out.Heterogeneity = p.heterogeneity()
	out.Prediction = p.prediction(p.tau)
	out.Estimators = p.estimators()
	out.SmallStudy = p.smallStudies()
	out.Influence = p.influence()
	p.groups(out)
	out.Cumulative = p.cumulative()
	out.Findings = p.findings(out)
	out.Sentences = poolSentences(out)
	return out, nil
}

// pooler holds what pooling one sheet needs.
type pooler struct {
	file      *File
	ev        *EvidenceRead
	data      meta.Data
	estimator meta.Estimator
	method    string
	level     float64
	tau       meta.TauSquared
	found     []finding.Finding
}

func newPooler(f *File, ev *EvidenceRead) (*pooler, error) {
	p := &pooler{file: f, ev: ev, level: defaultLevel}
	if f.Pool.Level != nil {
		p.level = *f.Pool.Level
	}
	var err error
	if p.estimator, err = meta.EstimatorByName(f.Pool.Heterogeneity); err != nil {
		return nil, planProblem(f, "estimator-unknown", "pool: heterogeneity: "+err.Error(), "use one of those")
	}
	if p.method, err = meta.ParseIntervalMethod(f.Pool.Interval); err != nil {
		return nil, planProblem(f, "interval-unknown", "pool: interval: "+err.Error(), "use one of those")
	}
	if p.method == meta.ProfileLikelihood && p.estimator.Name != "maximum-likelihood" {
		return nil, planProblem(f, "interval-without-its-estimator", "pool: interval: profile-likelihood goes with the maximum-likelihood estimate, not with "+p.estimator.Name, "write heterogeneity: maximum-likelihood under pool:")
	}
	if p.data, err = meta.NewData(ev.Estimates); err != nil {
		what := fmt.Sprintf("none of %d rows has a usable estimate, so there is nothing to pool", len(ev.Studies))
		if len(ev.Estimates) > 0 {
			what = err.Error()
		}
		fs := finding.Problems{{Severity: finding.Error, Kind: "nothing-to-pool", Place: finding.Place{File: ev.Evidence.File, Sheet: ev.Evidence.Sheet}, What: what,
			Mend: "footing read says for each row what is missing"}}
		for _, x := range ev.Findings {
			if x.Severity == finding.Error && len(fs) < 6 {
				fs = append(fs, x)
			}
		}
		return nil, fs
	}
	p.tau = p.estimator.Estimate(p.data)
	return p, nil
}

func planProblem(f *File, kind, what, mend string) error {
	return &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: kind, Place: finding.Place{File: f.Path}, What: what, Mend: mend}}
}

func (p *pooler) weights(out *result.Pool) {
	random, common := p.data.Shares(p.tau.Value), p.data.Shares(0)
	for i, at := range p.ev.Index {
		a, b := random[i], common[i]
		out.Studies[at].Weight, out.Studies[at].WeightCommon = &a, &b
	}
}

func participants(studies []result.Study) *float64 {
	total := 0.0
	for _, s := range studies {
		if !s.Used {
			continue
		}
		if s.NTreatment == nil {
			return nil
		}
		total += *s.NTreatment
		if s.NControl != nil {
			total += *s.NControl
		}
	}
	return &total
}

// mean is the interval of the mean by a method, or the normal one where that is not available.
func (p *pooler) mean(method string, tau2 float64) meta.Interval {
	in := p.data.Interval(method, tau2, p.level)
	if !in.Available {
		why := in.Why
		in = p.data.Interval(meta.Normal, tau2, p.level)
		in.Why = "the " + method + " interval is not available (" + why + "); the normal one stands in for it"
	}
	return in
}

// number gives a pointer to a finite number and nil for what can't be shown.
func number(x float64) *float64 {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return nil
	}
	return &x
}

func (p *pooler) pooled(method string, in meta.Interval, tau2 *float64) result.Pooled {
	out := result.Pooled{Method: method, TauSquared: tau2, Why: in.Why}
	if !in.Available {
		return out
	}
	out.Estimate, out.StandardError = number(in.Estimate), number(in.StandardError)
	out.Interval = &result.Interval{Level: in.Level, Lower: in.Lower, Upper: in.Upper, Method: in.Method}
	out.Shown = shownOf(p.ev.Scale, in.Estimate, in.Lower, in.Upper)
	if in.HasTest {
		out.Statistic, out.P = number(in.Statistic), number(in.P)
	}
	out.DF = number(in.DF)
	return out
}

// tables pools the counts themselves, where every used study has them.
func (p *pooler) tables(out *result.Pool) {
	if s := p.ev.Scale; s != effect.LogOddsRatio && s != effect.LogRiskRatio && s != effect.RiskDifference {
		return
	}
	var tables []effect.Table
	missing := 0
	for _, s := range p.ev.Studies {
		// A table without information on a ratio is no estimate, but a part of the Mantel-Haenszel sums all the same (it adds 0 to them).
		switch {
		case s.Counts != nil && s.Used:
			tables = append(tables, effect.Table{EventsTreatment: s.Counts.EventsTreatment, TotalTreatment: s.Counts.TotalTreatment, EventsControl: s.Counts.EventsControl, TotalControl: s.Counts.TotalControl})
		case s.Used:
			missing++
		}
	}
	note := ""
	if missing > 0 {
		note = fmt.Sprintf("%s without counts left out", countOf(missing, "study", "studies"))
	}
	if len(tables) == 0 {
		return
	}
	mh := p.pooled("mantel-haenszel", meta.MantelHaenszel(p.ev.Scale, tables, p.level), nil)
	if mh.Why == "" {
		mh.Why = note
	}
	out.MantelHaenszel = &mh
	if p.ev.Scale == effect.LogOddsRatio {
		in, _ := meta.Peto(tables, p.level)
		peto := p.pooled("peto", in, nil)
		if peto.Why == "" {
			peto.Why = note
		}
		out.Peto = &peto
	}
}

func (p *pooler) heterogeneity() result.Heterogeneity {
	h := p.data.Heterogeneity()
	out := result.Heterogeneity{DF: h.DF, Truncated: p.tau.Truncated, Why: h.Why}
	if !h.Available {
		return out
	}
	out.Q, out.P, out.HSquared, out.ISquared = number(h.Q), number(h.P), number(h.HSquared), number(h.ISquared)
	if p.estimator.Name != defaultHeterogeneity {
		out.ISquared = number(h.ISquaredOf(p.tau.Value))
	}
	tau := p.tau.Value
	root := math.Sqrt(tau)
	out.TauSquared, out.Tau = &tau, &root
	q := p.data.QProfile(p.level)
	if !q.Available {
		if out.Why == "" {
			out.Why = q.Why
		}
		return out
	}
	out.TauSquaredInterval = &result.Interval{Level: p.level, Lower: q.Lower, Upper: q.Upper, Method: "q-profile"}
	i := h.ISquaredInterval(q)
	out.ISquaredInterval = &result.Interval{Level: p.level, Lower: i.Lower, Upper: i.Upper, Method: "q-profile"}
	return out
}

func (p *pooler) prediction(tau meta.TauSquared) result.Prediction {
	in := p.data.Prediction(tau.Value, p.level)
	out := result.Prediction{Why: in.Why}
	if !in.Available {
		return out
	}
	out.Interval = &result.Interval{Level: in.Level, Lower: in.Lower, Upper: in.Upper, Method: in.Method}
	out.Shown = shownOf(p.ev.Scale, in.Estimate, in.Lower, in.Upper)
	out.DF = number(in.DF)
	return out
}

// estimators describes every estimator with its intervals and predictions.
func (p *pooler) estimators() []result.Estimator {
	h := p.data.Heterogeneity()
	q := p.data.QProfile(p.level)
	var out []result.Estimator
	for _, e := range meta.Estimators() {
		tau := p.tau
		if e.Name != p.estimator.Name {
			tau = e.Estimate(p.data)
		}
		value := tau.Value
		one := result.Estimator{Name: e.Name, TauSquared: &value, Truncated: tau.Truncated, Converged: tau.Converged, Iterations: tau.Iterations, Why: tau.Why}
		if q.Available {
			one.TauSquaredInterval = &result.Interval{Level: p.level, Lower: q.Lower, Upper: q.Upper, Method: "q-profile"}
		}
		if h.Available {
			one.ISquared = number(h.ISquaredOf(value))
			if e.Name == defaultHeterogeneity {
				one.ISquared = number(h.ISquared)
			}
		}
		one.Estimate = number(p.data.MeanAt(value).Estimate)
		for _, m := range []string{meta.Normal, meta.HartungKnapp, meta.HartungKnappFloored} {
			one.Intervals = append(one.Intervals, estimatorInterval(p.data.Interval(m, value, p.level)))
		}
		one.Predictions = []result.EstimatorInterval{estimatorInterval(p.data.Prediction(value, p.level))}
		out = append(out, one)
	}
	return out
}

func estimatorInterval(in meta.Interval) result.EstimatorInterval {
	out := result.EstimatorInterval{Method: in.Method, Why: in.Why}
	if !in.Available {
		return out
	}
	out.StandardError, out.Lower, out.Upper, out.DF = number(in.StandardError), number(in.Lower), number(in.Upper), number(in.DF)
	if in.HasTest {
		out.Statistic, out.P = number(in.Statistic), number(in.P)
	}
	return out
}

// influenceLimit bounds the studies that are left out in turn: with more, those that weigh most in Cochran's Q and in the mean are taken.
const influenceLimit = 200

// influence leaves each study out in turn.
func (p *pooler) influence() []result.Influence {
	out := []result.Influence{}
	if p.data.K() < 2 {
		return out
	}
	for _, l := range p.data.Influence(p.estimator, p.method, p.level, influenceLimit) {
		at := p.ev.Studies[p.ev.Index[l.Index]]
		tau := l.TauSquared.Value
		one := result.Influence{Row: at.Row, Study: at.Study, TauSquared: &tau, Residual: number(l.Residual), ShareOfQ: number(l.ShareOfQ), Why: l.Interval.Why}
		if l.Interval.Available {
			one.Estimate, one.Lower, one.Upper = number(l.Interval.Estimate), number(l.Interval.Lower), number(l.Interval.Upper)
		}
		out = append(out, one)
	}
	return out
}
