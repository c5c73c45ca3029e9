package effect

import (
	"fmt"
	"math"

	"footing/internal/finding"
	"footing/internal/num"
)

// sign is +1 or -1 for a direction in words, on the analysed scale; 0 when it is not known.
func (w *work) sign() float64 {
	better := 1.0
	if w.opt.LowerBetter {
		better = -1
	}
	switch w.r.Direction {
	case FavoursTreatment:
		return better
	case FavoursControl:
		return -better
	}
	return 0
}

// groupSizes reads both groups, or halves the whole where only that is known.
func (w *work) groupSizes() (n1, n2 float64, ok bool) {
	if w.r.Treatment.N.Given && w.r.Control.N.Given {
		return w.people(2)
	}
	if !w.r.N.Given || !w.need(w.r.N) {
		return 0, 0, false
	}
	n := w.r.N.Value
	if !(n >= 4) || n != math.Trunc(n) {
		w.refuse(w.r.N, "too-few-people", fmt.Sprintf("%s people in two groups give no variance", w.r.N.text()), "at least 4 are needed; check the cell")
		return 0, 0, false
	}
	w.note("group sizes are not given: two groups of %s are assumed", plain(n/2))
	w.n = [2]float64{n / 2, n / 2}
	return n / 2, n / 2, true
}

// fromT: d = t sqrt(1/n1 + 1/n2), g = J d (Hedges & Olkin 1985). A direction in words gives the sign; else t's own sign does.
func fromT(w *work) {
	if !w.r.T.Given || !w.need(w.r.T) {
		return
	}
	n1, n2, ok := w.groupSizes()
	if !ok {
		return
	}
	t := w.r.T.Value
	if s := w.sign(); s != 0 {
		t = s * math.Abs(t)
		w.note("sign by the stated direction")
	}
	if df := w.r.DF; df.Given && math.Abs(df.Value-(n1+n2-2)) > 0.5 {
		w.say(finding.Warning, df, "df-and-people-disagree", fmt.Sprintf("%s degrees of freedom and %s people do not go together (two groups would have %s)", df.text(), plain(n1+n2), plain(n1+n2-2)), "check both cells; the people are used until then")
	}
	d := t * math.Sqrt(1/n1+1/n2)
	g, v := w.opt.hedgesG(d, n1, n2)
	w.give(g, v, fmt.Sprintf("%s sqrt(1/%s + 1/%s) = %s, times J(%s) = %s", plain(t), plain(n1), plain(n2), plain(d), plain(n1+n2-2), plain(w.opt.smallSample(n1+n2-2))))
}

// exactP reads an exact p value.
func (w *work) exactP() (p float64, sides int, ok bool) {
	f := w.r.P
	if !f.Given || !w.need(f) {
		return 0, 0, false
	}
	if !(f.Value > 0 && f.Value < 1) {
		w.refuse(f, "p-out-of-range", fmt.Sprintf("a p value of %s can't be turned into a statistic", f.text()), "a p value lies between 0 and 1; a printed .000 is a bound: write < .001")
		return 0, 0, false
	}
	sides = w.r.PSides
	if sides == 0 {
		sides = 2
		w.note("p is taken as two-sided")
	}
	return f.Value, sides, true
}

// fromP: the t whose tail is p, with n1 + n2 - 2 degrees of freedom, then as for t. p carries no sign: a direction is needed.
func fromP(w *work) {
	if w.r.T.Given || !w.r.P.Given {
		return
	}
	p, sides, ok := w.exactP()
	if !ok {
		return
	}
	n1, n2, ok := w.groupSizes()
	if !ok {
		return
	}
	s := w.sign()
	if s == 0 {
		w.refuse(w.r.P, "p-without-direction", "a p value does not say which way the result went", "add a column \"direction\" with \"favours treatment\" or \"favours control\"")
		return
	}
	df := n1 + n2 - 2
	t := s * num.StudentTQuantileUpper(p/float64(sides), df)
	d := t * math.Sqrt(1/n1+1/n2)
	g, v := w.opt.hedgesG(d, n1, n2)
	w.give(g, v, fmt.Sprintf("p %s, %d-sided: t(%s) = %s; %s sqrt(1/%s + 1/%s), times J = %s", w.r.P.text(), sides, plain(df), plain(t), plain(t), plain(n1), plain(n2), plain(w.opt.smallSample(df))))
}

// fromEstimateP: standard error = |estimate| over the quantile that p stands for: Student's t for a mean difference with known group sizes, else the normal's.
func fromEstimateP(w *work) {
	r := w.r
	if !r.Estimate.Given || !r.P.Given || r.StandardError.Given || r.Variance.Given || r.CILower.Given && r.CIUpper.Given {
		return
	}
	if !w.need(r.Estimate) {
		return
	}
	p, sides, ok := w.exactP()
	if !ok {
		return
	}
	y, _, ok := w.printed(r.Estimate)
	if !ok {
		return
	}
	w.keepPeople()
	q, law := w.zOfP(p/float64(sides)), "normal"
	if df := w.n[0] + w.n[1] - 2; w.opt.Scale == MeanDifference && w.n[1] > 0 && df >= 1 {
		q, law = num.StudentTQuantileUpper(p/float64(sides), df), fmt.Sprintf("t with %s df", plain(df))
	}
	if y == 0 || !(q > 0) {
		w.refuse(r.P, "p-gives-no-standard-error", fmt.Sprintf("an estimate of %s with p %s has no standard error to be found", r.Estimate.text(), r.P.text()), "give the standard error or the interval")
		return
	}
	se := math.Abs(y) / q
	w.give(y, se*se, w.asPrinted()+fmt.Sprintf("; standard error %s/%s, %s", plain(math.Abs(y)), plain(q), law))
}

// zOfP is the normal quantile of an upper tail; or the printed closed form -.862 + sqrt(.743 - 2.404 ln P) for a two-sided P (Altman & Bland 2011).
func (w *work) zOfP(tail float64) float64 {
	if w.opt.ApproximateP {
		return -0.862 + math.Sqrt(0.743-2.404*math.Log(2*tail))
	}
	return num.NormalQuantileUpper(tail)
}
