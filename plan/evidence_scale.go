package plan

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"footing/importers"
	"footing/internal/finding"
	"footing/internal/num"
	"footing/meta/effect"
	"footing/plan/result"
)

// dataClass is a kind of figures that a record can hold, and the scale that it leads to when the plan names none.
type dataClass struct {
	scale effect.Scale
	words string
	held  func(*effect.Reported) bool
}

func given(fs ...effect.Figure) bool {
	for _, f := range fs {
		if !f.Given {
			return false
		}
	}
	return true
}

func some(fs ...effect.Figure) bool {
	for _, f := range fs {
		if f.Given {
			return true
		}
	}
	return false
}

// dataClasses stand in order of preference: counts, then means, then printed effects, then test statistics.
var dataClasses = []dataClass{
	{effect.LogOddsRatio, "counts in two groups", func(r *effect.Reported) bool {
		return some(r.Treatment.Events, r.Treatment.Proportion) && some(r.Control.Events, r.Control.Proportion) && given(r.Treatment.N, r.Control.N)
	}},
	{effect.LogRateRatio, "events and person-time in two groups", func(r *effect.Reported) bool {
		return given(r.Treatment.PersonTime, r.Control.PersonTime) && some(r.Treatment.Events, r.Treatment.Rate)
	}},
	{effect.LogHazardRatio, "log-rank figures", func(r *effect.Reported) bool {
		return given(r.ObservedMinusExpected, r.LogRankVariance) || given(r.LogRank, r.EventsTotal)
	}},
	{effect.StandardizedMeanDifference, "means or medians in two groups", func(r *effect.Reported) bool {
		return some(r.Treatment.Mean, r.Treatment.Median, r.Treatment.ChangeMean) && some(r.Control.Mean, r.Control.Median, r.Control.ChangeMean)
	}},
	{effect.MeanDifference, "mean differences", func(r *effect.Reported) bool {
		return r.DifferenceMean.Given && some(r.DifferenceSE, r.DifferenceLower, r.DifferenceSD)
	}},
	{effect.FisherZ, "correlations", func(r *effect.Reported) bool { return r.R.Given && !r.PointBiserial }},
	{effect.AsGiven, "estimates", func(r *effect.Reported) bool { return r.Estimate.Given || r.CILower.Given && r.CIUpper.Given }},
	{effect.StandardizedMeanDifference, "test statistics", func(r *effect.Reported) bool {
		return some(r.T, r.F, r.P, r.R, r.EtaSquared, r.Beta)
	}},
	{effect.LogitProportion, "counts in a single group", func(r *effect.Reported) bool {
		return given(r.Treatment.N) && some(r.Treatment.Events, r.Treatment.Proportion) && !some(r.Control.N, r.Control.Events)
	}},
	{effect.Mean, "means of a single group", func(r *effect.Reported) bool { return r.Treatment.Mean.Given && !some(r.Control.Mean, r.Control.N) }},
	{effect.LogRate, "rates of a single group", func(r *effect.Reported) bool {
		return given(r.Treatment.PersonTime) && some(r.Treatment.Events, r.Treatment.Rate)
	}},
	{effect.ICC, "intracluster correlations", func(r *effect.Reported) bool { return r.ICC.Given }},
	{effect.CronbachAlpha, "Cronbach alphas", func(r *effect.Reported) bool { return r.Alpha.Given }},
}

// chooseScale takes the plan's scale, else the one that most rows lead to by what they hold; of equals the one that
// stands first in dataClasses. A scale on which no row has an estimate gives way to the next.
func (r *evidenceReader) chooseScale() (effect.Scale, error) {
	if r.file.Pool.Scale != "" {
		return parseScale(r.file)
	}
	held := make([]int, len(dataClasses))
	for i := range r.sheet.Records {
		rep := r.sheet.Records[i].Reported()
		for k, c := range dataClasses {
			if c.held(&rep) {
				held[k]++
			}
		}
	}
	var order []int
	for k, n := range held {
		if n > 0 {
			order = append(order, k)
		}
	}
	if len(order) == 0 {
		return effect.AsGiven, nil
	}
	slices.SortStableFunc(order, func(a, b int) int { return held[b] - held[a] })
	best := order[0]
	for _, k := range order {
		if r.leads(r.scaleOf(dataClasses[k])) {
			best = k
			break
		}
	}
	scale := r.scaleOf(dataClasses[best])
	r.sayScale(dataClasses[best], scale, held[best])
	return scale, nil
}

// scaleOf is the scale that a class of figures leads to.
func (r *evidenceReader) scaleOf(c dataClass) effect.Scale {
	if c.scale == effect.AsGiven {
		return r.namedScale()
	}
	return c.scale
}

// leads reports whether any record has an estimate on the scale.
func (r *evidenceReader) leads(scale effect.Scale) bool {
	for i := range r.sheet.Records {
		opt := r.options
		opt.Scale = scale
		if effect.Compute("", r.sheet.Records[i].Reported(), opt).Best != nil {
			return true
		}
	}
	return false
}

// namedScale is the scale that the estimates themselves name, where they agree.
func (r *evidenceReader) namedScale() effect.Scale {
	found := effect.AsGiven
	for i := range r.sheet.Records {
		rep := r.sheet.Records[i].Reported()
		if !rep.Estimate.Given && !rep.CILower.Given || rep.EstimateScale == "" {
			continue
		}
		if found != effect.AsGiven && found != rep.EstimateScale {
			return effect.AsGiven
		}
		found = rep.EstimateScale
	}
	return found
}

func (r *evidenceReader) sayScale(c dataClass, scale effect.Scale, rows int) {
	if scale == effect.AsGiven {
		r.note("scale-as-given", "the estimates are pooled as they are given; nothing says which scale they have", "name it in pool: scale:")
		return
	}
	r.note("scale-chosen", fmt.Sprintf("the plan names no scale; %d of %d rows hold %s, so they are pooled as %s", rows, len(r.sheet.Records), c.words, scale), "name another in pool: scale: if that is not meant")
}

// fillEstimate puts the estimate into the study's record.
func (r *evidenceReader) fillEstimate(st *result.Study, e *effect.Estimate) {
	value, variance := e.Value, e.Variance
	se := math.Sqrt(variance)
	st.Estimate, st.Variance, st.StandardError = &value, &variance, &se
	level := 0.95
	if r.file.Pool.Level != nil {
		level = *r.file.Pool.Level
	}
	z := num.NormalQuantileUpper((1 - level) / 2)
	st.Interval = &result.Interval{Level: level, Lower: value - z*se, Upper: value + z*se, Method: "normal"}
	if lower, upper, ok := smdInterval(e, level); ok {
		st.Interval.Lower, st.Interval.Upper, st.Interval.Method = lower, upper, "noncentral-t"
	}
	st.Shown = shownOf(r.scale, value, st.Interval.Lower, st.Interval.Upper)
	st.Route, st.Formula, st.Flipped = e.Route, e.Formula, e.Flipped
	st.Notes = append(st.Notes, e.Notes...)
	if e.Cells != nil {
		st.From = e.Cells
	}
	if e.Table != nil {
		st.Counts = &result.Counts{EventsTreatment: e.Table.EventsTreatment, TotalTreatment: e.Table.TotalTreatment, EventsControl: e.Table.EventsControl, TotalControl: e.Table.TotalControl}
	}
	for k, n := range []**float64{&st.NTreatment, &st.NControl} {
		if *n == nil && e.N[k] > 0 {
			v := e.N[k]
			*n = &v
		}
	}
}

// compute turns one record into an estimate.
func (r *evidenceReader) compute(rec *importers.Record) outcome {
	opt := r.options
	opt.Scale = r.scale
	rep := rec.Reported()
	got := effect.Compute(rec.Study, rep, opt)
	change := got.Best == nil && changeScores(&rep)
	if change {
		got = effect.Compute(rec.Study, rep, opt)
	}
	if got.Best != nil { // a p or F without a sign is no fault where other figures give the effect
		got.Findings = slices.DeleteFunc(got.Findings, func(f finding.Finding) bool { return strings.HasSuffix(f.Kind, "-without-direction") })
	}
	o := outcome{findings: r.locate(rec, got.Findings)}
	if got.Best == nil {
		o.why = "no figure in the row leads to an estimate"
		if wrong := r.wrongCell(rec); wrong != "" {
			o.why = wrong
			return o
		}
		for _, f := range got.Findings {
			if f.Severity == finding.Error {
				o.why = f.What
				break
			}
		}
		return o
	}
	e := *got.Best
	if change {
		e.Notes = append(slices.Clone(e.Notes), "change scores stand in place of final values")
	}
	if rec.HigherBetter != nil && *rec.HigherBetter == opt.LowerBetter {
		e.Value, e.Flipped = -e.Value, true
		e.Formula += "; the sign is turned, since the row's outcome runs the other way"
	}
	o.estimate = &e
	return o
}

// changeScores puts the means and SDs of change in place of final values that are not reported (Cochrane Handbook
// 10.5.2); checkChangeScores says when both are pooled.
func changeScores(rep *effect.Reported) bool {
	done := false
	for _, a := range []*effect.Arm{&rep.Treatment, &rep.Control} {
		if !a.Mean.Given && a.ChangeMean.Given {
			a.Mean, a.SD, a.SE, a.CILower, a.CIUpper = a.ChangeMean, a.ChangeSD, effect.Figure{}, effect.Figure{}, effect.Figure{}
			done = true
		}
	}
	return done
}

// wrongCell is the first cell of the record that could not be read, in words.
func (r *evidenceReader) wrongCell(rec *importers.Record) string {
	for _, c := range rec.Cells() {
		if what, ok := r.wrong[c.Address]; ok {
			return c.Address + ": " + what
		}
	}
	return ""
}

// locate gives the findings of the routes their file, sheet, and the text of the cell as typed.
func (r *evidenceReader) locate(rec *importers.Record, fs []finding.Finding) []finding.Finding {
	if len(fs) == 0 {
		return nil
	}
	cells := rec.Cells()
	out := append([]finding.Finding{}, fs...)
	for i := range out {
		f := &out[i]
		f.Study = rec.Study
		f.Place.File, f.Place.Sheet = r.sheet.File, r.sheet.Name
		if f.Place.Cell == "" {
			f.Place.Cell = fmt.Sprintf("row %d", rec.Row)
		}
		for _, c := range cells {
			if c.Address == f.Place.Cell {
				f.Text = c.Text
			}
		}
	}
	return out
}
