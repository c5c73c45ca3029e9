package effect

import (
	"fmt"
	"math"
)

// fromSingleProportion: logit of events/n with variance 1/e + 1/(n - e); 1/2 is added to both where one is none.
func fromSingleProportion(w *work) {
	if w.r.Control.N.Given && w.r.Control.Events.Given {
		return
	}
	e, n, ok := w.arm(w.r.Treatment)
	if !ok {
		return
	}
	a, b := e, n-e
	if a == 0 || b == 0 {
		a, b = a+0.5, b+0.5
		w.note("none or all have the event: 1/2 added to both")
	}
	w.n = [2]float64{n, 0}
	w.give(math.Log(a)-math.Log(b), 1/a+1/b, fmt.Sprintf("ln(%s/%s); variance 1/%s + 1/%s", plain(a), plain(b), plain(a), plain(b)))
}

// fromSingleMean: the mean of one group, variance s^2/n; or the logarithm of its SD: ln s + 1/(2(n-1)), variance 1/(2(n-1)) (Raudenbush & Bryk 1987, recalled from memory).
func fromSingleMean(w *work) {
	a := w.r.Treatment
	if w.r.Control.N.Given || w.r.Control.Mean.Given || !a.hasSpread() || !a.N.Given {
		return
	}
	if w.opt.Scale == Mean && (!a.Mean.Given || !w.need(a.Mean)) {
		return
	}
	if !w.need(a.N) {
		return
	}
	n := a.N.Value
	if !(n >= 2) || n != math.Trunc(n) {
		w.refuse(a.N, "too-few-people", fmt.Sprintf("%s people in a group give no variance", a.N.text()), "at least 2 are needed; check the cell")
		return
	}
	s, ok := w.spread(a)
	if !ok {
		return
	}
	w.n = [2]float64{n, 0}
	if w.opt.Scale == Mean {
		w.give(a.Mean.Value, s*s/n, fmt.Sprintf("%s; variance %s^2/%s", a.Mean.text(), plain(s), plain(n)))
		return
	}
	v := 1 / (2 * (n - 1))
	w.give(math.Log(s)+v, v, fmt.Sprintf("ln %s + 1/(2(%s - 1))", plain(s), plain(n)))
}

// fromVariability: ln(s1/s2) with the small-sample terms, variance 1/(2(n1-1)) + 1/(2(n2-1)) (Hedges & Nowell 1995; Nakagawa et al. 2015).
func fromVariability(w *work) {
	a, b := w.r.Treatment, w.r.Control
	if !a.hasSpread() || !b.hasSpread() {
		return
	}
	n1, n2, ok := w.people(2)
	if !ok {
		return
	}
	s1, ok1 := w.spread(a)
	s2, ok2 := w.spread(b)
	if !ok1 || !ok2 {
		return
	}
	v1, v2 := 1/(2*(n1-1)), 1/(2*(n2-1))
	w.give(math.Log(s1/s2)+v1-v2, v1+v2, fmt.Sprintf("ln(%s/%s) + 1/(2(%s-1)) - 1/(2(%s-1))", plain(s1), plain(s2), plain(n1), plain(n2)))
}

// fromSingleRate: ln(events/person-time), variance 1/events.
func fromSingleRate(w *work) {
	if w.r.Control.PersonTime.Given {
		return
	}
	e, t, ok := w.timed(w.r.Treatment)
	if !ok {
		return
	}
	if e == 0 {
		e = 0.5
		w.note("no events: 1/2 is used")
	}
	w.give(math.Log(e/t), 1/e, fmt.Sprintf("ln(%s/%s); variance 1/%s", plain(e), plain(t), plain(e)))
}

// fromICC: an intracluster correlation of k clusters of m: variance 2 (1-rho)^2 (1+(m-1)rho)^2 / (m(m-1)(k-1)) (Fisher 1925; Swiger et al. 1964).
func fromICC(w *work) {
	rho, m, k := w.r.ICC, w.r.ClusterSize, w.r.Clusters
	if !rho.Given || !m.Given || !k.Given || !w.need(rho, m, k) {
		return
	}
	if !(m.Value > 1 && k.Value > 1) || !(rho.Value < 1 && rho.Value > -1/(m.Value-1)) {
		w.refuse(rho, "icc-out-of-range", fmt.Sprintf("an intracluster correlation of %s in %s clusters of %s is impossible", rho.text(), k.text(), m.text()), "it lies between -1/(m-1) and 1, with at least 2 clusters of 2")
		return
	}
	a, b := 1-rho.Value, 1+(m.Value-1)*rho.Value
	w.give(rho.Value, 2*a*a*b*b/(m.Value*(m.Value-1)*(k.Value-1)), fmt.Sprintf("%s; %s clusters of %s", rho.text(), k.text(), m.text()))
}

// fromAlpha: Cronbach's alpha as -ln(1 - alpha), variance 2J/((J - 1)(n - 2)) for J items and n people (Bonett 2002).
func fromAlpha(w *work) {
	a, j := w.r.Alpha, w.r.Items
	n := w.r.N
	if !n.Given {
		n = w.r.Treatment.N
	}
	if !a.Given || !j.Given || !n.Given || !w.need(a, j, n) {
		return
	}
	if !(a.Value < 1) || !(j.Value >= 2) || !(n.Value > 2) {
		w.refuse(a, "alpha-out-of-range", fmt.Sprintf("an alpha of %s with %s items and %s people is impossible", a.text(), j.text(), n.text()), "alpha is below 1, with at least 2 items and 3 people")
		return
	}
	w.n = [2]float64{n.Value, 0}
	w.give(-math.Log1p(-a.Value), 2*j.Value/((j.Value-1)*(n.Value-2)), fmt.Sprintf("-ln(1 - %s); variance 2 x %s/((%s - 1)(%s - 2))", a.text(), j.text(), j.text(), n.text()))
}

// fromPartialT: a partial correlation from a coefficient's t and its residual degrees of freedom: r = t/sqrt(t^2 + df), z with variance 1/(df - 1), which is 1/(n - 3 - q) for q covariates.
func fromPartialT(w *work) {
	t, df := w.r.T, w.r.DF
	if !t.Given || !df.Given || !w.need(t, df) {
		return
	}
	if !(df.Value > 1) {
		w.refuse(df, "too-few-people", fmt.Sprintf("%s degrees of freedom give no variance", df.text()), "more than 1 is needed")
		return
	}
	r := t.Value / math.Sqrt(t.Value*t.Value+df.Value)
	w.give(math.Atanh(r), 1/(df.Value-1), fmt.Sprintf("artanh(%s), r = t/sqrt(t^2 + %s)", plain(r), df.text()))
}

// fromPartialR: a printed partial correlation with n people and q covariates: variance 1/(n - 3 - q) (Fisher 1924).
func fromPartialR(w *work) {
	r, q, n := w.r.R, w.r.Covariates, w.r.N
	if !n.Given {
		n = w.r.Treatment.N
	}
	if !r.Given || !q.Given || !n.Given || !w.need(r, q, n) {
		return
	}
	left := n.Value - 3 - q.Value
	if !(math.Abs(r.Value) < 1) || !(left > 0) || !(q.Value >= 0) {
		w.refuse(r, "correlation-out-of-range", fmt.Sprintf("a partial correlation of %s with %s people and %s covariates has no variance", r.text(), n.text(), q.text()), "it lies between -1 and 1, with more than 3 people beyond the covariates")
		return
	}
	w.n = [2]float64{n.Value, 0}
	w.give(math.Atanh(r.Value), 1/left, fmt.Sprintf("artanh(%s); variance 1/(%s - 3 - %s)", r.text(), n.text(), q.text()))
}
