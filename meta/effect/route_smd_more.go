package effect

import (
	"fmt"
	"math"

	"footing/internal/finding"
	"footing/internal/num"
)

// giveG turns Cohen's d of two groups into g with its variance.
func (w *work) giveG(d, n1, n2 float64, formula string) {
	g, v := w.opt.hedgesG(d, n1, n2)
	w.give(g, v, formula+fmt.Sprintf(", times J(%s) = %s", plain(n1+n2-2), plain(w.opt.smallSample(n1+n2-2))))
}

// signed gives a magnitude its direction; without one the row is refused.
func (w *work) signed(f Figure, what string) (float64, bool) {
	s := w.sign()
	if s == 0 {
		w.refuse(f, what+"-without-direction", "this figure does not say which way the result went", "add a column \"direction\" with \"favours treatment\" or \"favours control\"")
		return 0, false
	}
	return s, true
}

// fromF: F with one numerator degree of freedom is t squared; it carries no sign.
func fromF(w *work) {
	f := w.r.F
	if !f.Given || !w.need(f) {
		return
	}
	if d := w.r.DF1; d.Given && d.Value != 1 {
		w.refuse(d, "f-with-several-df", fmt.Sprintf("an F with %s numerator degrees of freedom compares more than two groups", d.text()), "give the comparison of the two groups")
		return
	}
	if !(f.Value >= 0) {
		w.refuse(f, "f-negative", fmt.Sprintf("F can't be %s", f.text()), "check the cell")
		return
	}
	n1, n2, ok := w.groupSizes()
	if !ok {
		return
	}
	s, ok := w.signed(f, "f")
	if !ok {
		return
	}
	d := s * math.Sqrt(f.Value*(1/n1+1/n2))
	w.giveG(d, n1, n2, fmt.Sprintf("sqrt(%s (1/%s + 1/%s)), signed: %s", f.text(), plain(n1), plain(n2), plain(d)))
}

// fromEta: eta squared (or partial, with one numerator df) is t^2/(t^2 + df), so that t^2 = eta^2 df/(1 - eta^2).
func fromEta(w *work) {
	e := w.r.EtaSquared
	if !e.Given || !w.need(e) {
		return
	}
	if !(e.Value >= 0 && e.Value < 1) {
		w.refuse(e, "eta-out-of-range", fmt.Sprintf("eta squared can't be %s", e.text()), "it lies from 0 to below 1")
		return
	}
	n1, n2, ok := w.groupSizes()
	if !ok {
		return
	}
	s, ok := w.signed(e, "eta")
	if !ok {
		return
	}
	t := s * math.Sqrt(e.Value*(n1+n2-2)/(1-e.Value))
	d := t * math.Sqrt(1/n1+1/n2)
	w.giveG(d, n1, n2, fmt.Sprintf("eta squared %s: t(%s) = %s, d = %s", e.text(), plain(n1+n2-2), plain(t), plain(d)))
}

// fromPointBiserial: r between group and outcome: t = r sqrt(df/(1 - r^2)), then as for t.
func fromPointBiserial(w *work) {
	r := w.r.R
	if !r.Given || !w.r.PointBiserial || !w.need(r) {
		return
	}
	if !(math.Abs(r.Value) < 1) {
		w.refuse(r, "correlation-out-of-range", fmt.Sprintf("a correlation of %s has no t", r.text()), "a correlation lies between -1 and 1, both left out")
		return
	}
	n1, n2, ok := w.groupSizes()
	if !ok {
		return
	}
	d := r.Value * math.Sqrt((n1+n2-2)/((1-r.Value)*(1+r.Value))*(1/n1+1/n2))
	w.giveG(d, n1, n2, fmt.Sprintf("point-biserial r %s: d = %s", r.text(), plain(d)))
}

// fromDifference: a mean difference printed without the arms' means, with its SD within groups, its standard error or its interval. A difference's interval uses t with
// n1 + n2 - 2 degrees of freedom (Cochrane Handbook 6.5.2.3).
func fromDifference(w *work) {
	r := w.r
	if !r.DifferenceMean.Given || !w.need(r.DifferenceMean) {
		return
	}
	n1, n2, ok := w.groupSizes()
	if !ok {
		return
	}
	df := n1 + n2 - 2
	var se float64
	var how string
	switch {
	case r.DifferenceSE.Given:
		if !w.need(r.DifferenceSE) {
			return
		}
		se, how = r.DifferenceSE.Value, "standard error "+r.DifferenceSE.text()
	case r.DifferenceLower.Given && r.DifferenceUpper.Given:
		if !w.need(r.DifferenceLower, r.DifferenceUpper) {
			return
		}
		q := num.StudentTQuantileUpper((1-w.level())/2, df)
		se = (r.DifferenceUpper.Value - r.DifferenceLower.Value) / (2 * q)
		how = fmt.Sprintf("standard error %s from the interval, t with %s df", plain(se), plain(df))
	case r.DifferenceSD.Given && r.Treatment.N.Given && r.Control.N.Given && !r.PrePostR.Given: // without two groups it is the SD of differences within pairs
		if !w.need(r.DifferenceSD) {
			return
		}
		se, how = r.DifferenceSD.Value*math.Sqrt(1/n1+1/n2), "SD "+r.DifferenceSD.text()
	default:
		return
	}
	if !(se > 0) || math.IsInf(se, 0) {
		w.refuse(r.DifferenceMean, "se-not-positive", fmt.Sprintf("the standard error of the difference is %s, and must be above 0", plain(se)), "check the cells "+joinCells(w.cells))
		return
	}
	y := r.DifferenceMean.Value
	if w.opt.Scale == MeanDifference {
		w.give(y, se*se, fmt.Sprintf("%s; %s", r.DifferenceMean.text(), how))
		return
	}
	sd := se / math.Sqrt(1/n1+1/n2)
	w.giveG(y/sd, n1, n2, fmt.Sprintf("%s/%s (%s) = %s", r.DifferenceMean.text(), plain(sd), how, plain(y/sd)))
}

func joinCells(cells []string) string {
	out := ""
	for i, c := range cells {
		if i > 0 {
			out += ", "
		}
		out += c
	}
	return out
}

// fromCoefficient: an unstandardized coefficient of the group over the outcome's SD, or a standardized one where the predictor is a group indicator (beta = r there).
func fromCoefficient(w *work) {
	r := w.r
	switch {
	case r.Coefficient.Given && r.OutcomeSD.Given:
		if !w.need(r.Coefficient, r.OutcomeSD) {
			return
		}
		n1, n2, ok := w.groupSizes()
		if !ok {
			return
		}
		sd, ok := w.positive(r.OutcomeSD, r.OutcomeSD.Value, "SD of the outcome")
		if !ok {
			return
		}
		d := r.Coefficient.Value / sd
		w.note("a coefficient over the outcome's SD: the SD must be that within groups")
		w.giveG(d, n1, n2, fmt.Sprintf("%s/%s = %s", r.Coefficient.text(), r.OutcomeSD.text(), plain(d)))
	case r.Beta.Given:
		if !w.need(r.Beta) {
			return
		}
		n1, n2, ok := w.groupSizes()
		if !ok {
			return
		}
		if !(math.Abs(r.Beta.Value) < 1) {
			w.refuse(r.Beta, "beta-out-of-range", fmt.Sprintf("a standardized coefficient of a group indicator can't be %s", r.Beta.text()), "it lies between -1 and 1; only the coefficient of a two-group indicator can be used")
			return
		}
		b := r.Beta.Value
		d := b * math.Sqrt((n1+n2-2)/((1-b)*(1+b))*(1/n1+1/n2))
		w.note("a standardized coefficient counts as a correlation with the group: right only without other predictors that go with the group")
		w.giveG(d, n1, n2, fmt.Sprintf("beta %s: d = %s", r.Beta.text(), plain(d)))
	}
}

// fromTwoByTwoToSMD: a log odds ratio (from counts, or printed as such) times sqrt 3/pi (Hasselblad & Hedges 1995; Chinn 2000); its variance times 3/pi^2.
func fromTwoByTwoToSMD(w *work) {
	opt := w.opt
	opt.Scale = LogOddsRatio
	inner := &work{r: w.r, opt: opt, study: w.study}
	if fromCounts(inner); !inner.ok && w.r.EstimateScale == LogOddsRatio {
		for _, f := range []func(*work){fromEstimateSE, fromEstimateVariance, fromEstimateCI, fromEstimateP} {
			inner = &work{r: w.r, opt: opt, study: w.study}
			if f(inner); inner.ok {
				break
			}
		}
	}
	if !inner.ok {
		return
	}
	w.cells, w.n, w.notes = inner.cells, inner.n, append(w.notes, inner.notes...)
	c := math.Sqrt(3) / math.Pi
	w.note("from an odds ratio: right if the outcome is a cut of a logistic one")
	w.say(finding.Note, Figure{Cell: first(w.cells)}, "converted-from-odds-ratio", "the standardized difference is converted from an odds ratio, which assumes that the outcome was cut from a logistic one", "see what the plan is without this row")
	w.give(c*inner.value, c*c*inner.variance, inner.formula+fmt.Sprintf("; times sqrt 3/pi = %s", plain(c*inner.value)))
}
