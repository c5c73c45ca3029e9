package effect

import (
	"fmt"
	"math"

	"footing/internal/finding"
)

// within is the correlation within pairs: as printed, from the three SDs, or the plan's assumption, which is a finding.
func (w *work) within(pre, post, change Figure) (float64, bool) {
	if r := w.r.PrePostR; r.Given {
		if !w.need(r) {
			return 0, false
		}
		if !(math.Abs(r.Value) < 1) {
			w.refuse(r, "correlation-out-of-range", fmt.Sprintf("a correlation within pairs of %s is impossible", r.text()), "it lies between -1 and 1")
			return 0, false
		}
		return r.Value, true
	}
	if pre.Given && post.Given && change.Given {
		if r, ok := CorrelationFromSDs(pre.Value, post.Value, change.Value); ok {
			w.use(pre, post, change)
			w.note("correlation within pairs %s from the SDs before, after and of the change", plain(r))
			return r, true
		}
	}
	if w.opt.PrePostR == nil {
		return 0, false
	}
	r := *w.opt.PrePostR
	w.say(finding.Warning, Figure{Cell: first(w.cells)}, "correlation-assumed", fmt.Sprintf("the correlation within pairs is not given; the plan's %s is used", plain(r)), "give it under a heading \"correlation\"; the plan's sensitivity table varies it")
	return r, true
}

// CorrelationFromSDs is the correlation of two measures from their SDs and that of their difference (Cochrane Handbook 6.5.2.8); false where the three are impossible together.
func CorrelationFromSDs(first, second, difference float64) (float64, bool) {
	if !(first > 0 && second > 0 && difference >= 0) {
		return 0, false
	}
	r := (first*first + second*second - difference*difference) / (2 * first * second)
	return r, math.Abs(r) < 1
}

// pairedG gives Hedges' g of paired measures with its variance: n pairs, d in raw-score SDs, r within pairs, n - 1 degrees of freedom.
func (o Options) pairedG(d, n, r float64) (g, variance float64) {
	df := n - 1
	j := o.smallSample(df)
	g = j * d
	switch o.PairedVariance {
	case PairedPrinted:
		return g, j * j * 2 * (1 - r) * (1/n + d*d/(2*n))
	case PairedUnbiased:
		// d sqrt(n/(2(1-r))) is noncentral t with n - 1 df when the SD is that of the first measure alone: var g = J^2 df/(df-2) (1/a + delta^2) - delta^2, a = n/(2(1-r));
		// delta^2 is replaced by its unbiased estimate.
		if df > 2 {
			k := j * j * df / (df - 2)
			square := (d*d*(df-2)/df - 2*(1-r)/n)
			return g, math.Max(k*2*(1-r)/n+(k-1)*square, 2*(1-r)/n*0.5)
		}
	}
	return g, 2*(1-r)/n + g*g/(2*n)
}

// fromPrePost: one group measured before and after, standardized by the SD before (Becker 1988), or matched pairs by the SD within: mean change over SD, variance with the correlation.
func fromPrePost(w *work) {
	t := w.r.Treatment
	if w.r.Control.N.Given || w.r.Control.Mean.Given {
		return
	}
	var change Figure
	switch {
	case t.PreMean.Given && t.Mean.Given:
		if !w.need(t.PreMean, t.Mean) {
			return
		}
		change = Of(t.Mean.Value - t.PreMean.Value)
	case t.ChangeMean.Given:
		if !w.need(t.ChangeMean) {
			return
		}
		change = t.ChangeMean
	case w.r.DifferenceMean.Given:
		if !w.need(w.r.DifferenceMean) {
			return
		}
		change = w.r.DifferenceMean
	default:
		return
	}
	n := t.N
	if !n.Given {
		n = w.r.N
	}
	if !n.Given || !w.need(n) {
		return
	}
	if !(n.Value >= 3) || n.Value != math.Trunc(n.Value) {
		w.refuse(n, "too-few-people", fmt.Sprintf("%s pairs give no variance", n.text()), "at least 3 are needed; check the cell")
		return
	}
	changeSD := t.ChangeSD
	if !changeSD.Given {
		changeSD = w.r.DifferenceSD
	}
	if w.opt.Scale == MeanDifference {
		w.pairedMean(change, changeSD, n)
		return
	}
	r, ok := w.within(t.PreSD, t.SD, changeSD)
	if !ok {
		return
	}
	var sd float64
	switch {
	case t.PreSD.Given:
		if sd, ok = w.positive(t.PreSD, t.PreSD.Value, "SD before"); !ok {
			return
		}
	case changeSD.Given:
		if sd, ok = w.positive(changeSD, changeSD.Value/math.Sqrt(2*(1-r)), "SD of the differences"); !ok {
			return
		}
		w.note("SD within pairs %s from the SD of the differences and r = %s", plain(sd), plain(r))
	default:
		return
	}
	w.n = [2]float64{n.Value, 0}
	d := change.Value / sd
	g, v := w.opt.pairedG(d, n.Value, r)
	w.give(g, v, fmt.Sprintf("%s/%s = %s, times J(%s); r = %s", plain(change.Value), plain(sd), plain(d), plain(n.Value-1), plain(r)))
}

// pairedMean is a mean difference within pairs, with the SD of the differences.
func (w *work) pairedMean(change, sd, n Figure) {
	if !sd.Given {
		return
	}
	s, ok := w.positive(sd, sd.Value, "SD of the differences")
	if !ok {
		return
	}
	w.n = [2]float64{n.Value, 0}
	w.give(change.Value, s*s/n.Value, fmt.Sprintf("%s; variance %s^2/%s", plain(change.Value), plain(s), plain(n.Value)))
}

// fromPrePostControl: the difference of two mean changes over the pooled SD before (Morris 2008, eq. 8), with his variance (eq. 25).
func fromPrePostControl(w *work) {
	t, c := w.r.Treatment, w.r.Control
	if !t.PreMean.Given || !c.PreMean.Given || !t.Mean.Given || !c.Mean.Given || !t.PreSD.Given || !c.PreSD.Given {
		return
	}
	if !w.need(t.PreMean, c.PreMean, t.Mean, c.Mean) {
		return
	}
	n1, n2, ok := w.people(3)
	if !ok {
		return
	}
	s1, ok1 := w.positive(t.PreSD, t.PreSD.Value, "SD before")
	s2, ok2 := w.positive(c.PreSD, c.PreSD.Value, "SD before")
	if !ok1 || !ok2 {
		return
	}
	r, ok := w.within(t.PreSD, t.SD, t.ChangeSD)
	if !ok {
		return
	}
	sd := PooledSD(s1, n1, s2, n2)
	df := n1 + n2 - 2
	j := w.opt.smallSample(df)
	d := ((t.Mean.Value - t.PreMean.Value) - (c.Mean.Value - c.PreMean.Value)) / sd
	g := j * d
	spread := 2 * (1 - r) * (n1 + n2) / (n1 * n2)
	v := j*j*df/(df-2)*(spread+g*g) - g*g
	w.give(g, v, fmt.Sprintf("((%s - %s) - (%s - %s))/%s = %s, times J(%s); r = %s", plain(t.Mean.Value), plain(t.PreMean.Value), plain(c.Mean.Value), plain(c.PreMean.Value), plain(sd), plain(d), plain(df), plain(r)))
}
