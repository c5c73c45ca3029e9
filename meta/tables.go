package meta

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta/effect"
)

// MantelHaenszel pools 2x2 tables on the counts as they are, without any zero correction, as a log odds ratio, log risk ratio or risk difference
// (Mantel & Haenszel 1959). Variances: Robins, Breslow & Greenland 1986 (odds ratio); Greenland & Robins 1985 (risk ratio, risk difference). The interval is normal.
func MantelHaenszel(scale effect.Scale, tables []effect.Table, level float64) Interval {
	out := Interval{Method: "mantel-haenszel", Level: level, DF: math.Inf(1)}
	if len(tables) == 0 {
		out.Why = "no study has counts"
		return out
	}
	var r, s, rr, rs, ss, top, weight num.Accumulator
	for _, t := range tables {
		a, n1, c, n2 := t.EventsTreatment, t.TotalTreatment, t.EventsControl, t.TotalControl
		b, d, n := n1-a, n2-c, n1+n2
		switch scale {
		case effect.LogOddsRatio:
			p, q := (a+d)/n, (b+c)/n
			ri, si := a*d/n, b*c/n
			r.Add(ri)
			s.Add(si)
			rr.Add(p * ri)
			rs.Add(p*si + q*ri)
			ss.Add(q * si)
		case effect.LogRiskRatio:
			r.Add(a * n2 / n)
			s.Add(c * n1 / n)
			top.Add((n1*n2*(a+c) - a*c*n) / (n * n))
		case effect.RiskDifference:
			r.Add((a*n2 - c*n1) / n)
			weight.Add(n1 * n2 / n)
			top.Add((a*b*n2*n2*n2 + c*d*n1*n1*n1) / (n1 * n2 * n * n))
		default:
			out.Why = "Mantel-Haenszel pools counts on an odds ratio, a risk ratio or a risk difference"
			return out
		}
	}
	var variance float64
	if scale == effect.RiskDifference {
		out.Estimate = r.Value() / weight.Value()
		variance = top.Value() / (weight.Value() * weight.Value())
	} else {
		if !(r.Value() > 0) || !(s.Value() > 0) {
			out.Why = "one of the groups has no events in any study"
			return out
		}
		out.Estimate = math.Log(r.Value()) - math.Log(s.Value())
		variance = rr.Value()/(2*r.Value()*r.Value()) + rs.Value()/(2*r.Value()*s.Value()) + ss.Value()/(2*s.Value()*s.Value())
		if scale == effect.LogRiskRatio {
			variance = top.Value() / (r.Value() * s.Value())
		}
	}
	if !(variance > 0) {
		out.Why = "the counts give no variance"
		return out
	}
	return out.fill(math.Sqrt(variance), num.NormalQuantileUpper((1-level)/2))
}

// Peto pools 2x2 tables as a log odds ratio by observed minus expected events over their hypergeometric variance with N - 1 (Yusuf et al. 1985).
// informative is the number of tables that carry information: those with some events and some people without.
func Peto(tables []effect.Table, level float64) (out Interval, informative int) {
	out = Interval{Method: "peto", Level: level, DF: math.Inf(1)}
	var o, v num.Accumulator
	for _, t := range tables {
		n1, n2 := t.TotalTreatment, t.TotalControl
		n := n1 + n2
		m := t.EventsTreatment + t.EventsControl
		if m == 0 || m == n || n < 2 {
			continue
		}
		informative++
		o.Add(t.EventsTreatment - n1*m/n)
		v.Add(n1 * n2 * m * (n - m) / (n * n * (n - 1)))
	}
	if informative == 0 {
		out.Why = fmt.Sprintf("none of %d tables carries information on a ratio", len(tables))
		return out, 0
	}
	out.Estimate = o.Value() / v.Value()
	return out.fill(1/math.Sqrt(v.Value()), num.NormalQuantileUpper((1-level)/2)), informative
}
