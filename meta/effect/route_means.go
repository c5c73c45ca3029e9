package effect

import (
	"fmt"
	"math"

	"footing/internal/num"
)

// fromMeans: means, SDs and sizes of two groups.
//
// Standardized mean difference: d = (m1 - m2)/s with the pooled SD, g = J d. Mean difference: m1 - m2, variance s1^2/n1 + s2^2/n2. Log ratio of means:
// ln(m1/m2), variance s1^2/(n1 m1^2) + s2^2/(n2 m2^2) (Hedges, Gurevitch & Curtis 1999).
func fromMeans(w *work) {
	a, b := w.r.Treatment, w.r.Control
	if !a.Mean.Given || !b.Mean.Given || !a.hasSpread() || !b.hasSpread() || !a.N.Given || !b.N.Given {
		return
	}
	if !w.need(a.Mean, b.Mean) {
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
	m1, m2 := a.Mean.Value, b.Mean.Value
	switch w.opt.Scale {
	case StandardizedMeanDifference:
		if n1+n2 < 4 {
			w.refuse(a.N, "too-few-people", "two people a group give no small-sample factor", "the row is left out")
			return
		}
		if w.opt.Glass {
			w.glass(m1, s1, n1, m2, s2, n2)
			return
		}
		s := PooledSD(s1, n1, s2, n2)
		d := (m1 - m2) / s
		g, v := w.opt.hedgesG(d, n1, n2)
		w.give(g, v, fmt.Sprintf("(%s - %s)/%s = %s, times J(%s) = %s", plain(m1), plain(m2), plain(s), plain(d), plain(n1+n2-2), plain(w.opt.smallSample(n1+n2-2))))
		if ratio := math.Max(s1/s2, s2/s1); ratio > 1.5 && n1 != n2 {
			w.note("the SDs differ by a factor of %.2f and the groups in size: the variance by the pooled SD may be off by up to twice", ratio)
		}
	case MeanDifference:
		w.give(m1-m2, s1*s1/n1+s2*s2/n2, fmt.Sprintf("%s - %s; variance %s^2/%s + %s^2/%s", plain(m1), plain(m2), plain(s1), plain(n1), plain(s2), plain(n2)))
	case LogRatioOfMeans:
		if !(m1 > 0) || !(m2 > 0) {
			f := a.Mean
			if m1 > 0 {
				f = b.Mean
			}
			w.refuse(f, "mean-not-positive", fmt.Sprintf("a ratio of means needs means above 0; this one is %s", f.text()), "use a mean difference, or check the cell")
			return
		}
		w.give(math.Log(m1)-math.Log(m2), s1*s1/(n1*m1*m1)+s2*s2/(n2*m2*m2), fmt.Sprintf("ln(%s/%s); variance %s^2/(%s %s^2) + %s^2/(%s %s^2)", plain(m1), plain(m2), plain(s1), plain(n1), plain(m1), plain(s2), plain(n2), plain(m2)))
	}
}

// glass standardizes by the control group's SD: (m1 - m2)/s2, J with n2 - 1 degrees of freedom, and the variance that allows for unequal SDs: s1^2/(s2^2 n1) + 1/n2 + g^2/(2(n2 - 1)) (Glass 1976; Bonett 2008).
func (w *work) glass(m1, s1, n1, m2, s2, n2 float64) {
	if n2 < 3 {
		w.refuse(w.r.Control.N, "too-few-people", "two people in the control group give no small-sample factor", "the row is left out")
		return
	}
	g := w.opt.smallSample(n2-1) * (m1 - m2) / s2
	ratio := s1 / s2
	w.give(g, ratio*ratio/n1+1/n2+g*g/(2*(n2-1)), fmt.Sprintf("(%s - %s)/%s (control group's SD), times J(%s)", plain(m1), plain(m2), plain(s2), plain(n2-1)))
}

func (a Arm) hasSpread() bool {
	return a.SD.Given || a.SE.Given || a.CILower.Given && a.CIUpper.Given
}

// spread is the SD of one group: as printed, or from the SE (SE sqrt n), or from the CI of the mean (half its width over the t quantile with
// n - 1 degrees of freedom, times sqrt n; Cochrane Handbook 6.5.2.2).
func (w *work) spread(a Arm) (sd float64, ok bool) {
	switch n := a.N.Value; {
	case a.SD.Given:
		return w.positive(a.SD, a.SD.Value, "SD")
	case a.SE.Given:
		w.note("SD from the standard error %s: times the root of %s", a.SE.text(), a.N.text())
		return w.positive(a.SE, a.SE.Value*math.Sqrt(n), "standard error")
	default:
		if !w.need(a.CILower, a.CIUpper) {
			return 0, false
		}
		level := w.level()
		t := num.StudentTQuantileUpper((1-level)/2, n-1)
		w.note("SD from the %s%% interval %s to %s of the mean, t quantile with %s df", plain(100*level), a.CILower.text(), a.CIUpper.text(), plain(n-1))
		return w.positive(a.CIUpper, (a.CIUpper.Value-a.CILower.Value)/(2*t)*math.Sqrt(n), "width of the interval")
	}
}

func (w *work) positive(f Figure, v float64, what string) (float64, bool) {
	if !w.need(f) {
		return 0, false
	}
	if !(v > 0) || math.IsInf(v, 0) {
		mend := "give the SD; a group without any spread can't be standardized or weighted"
		w.refuse(f, "sd-not-positive", fmt.Sprintf("the %s is %s, and must be above 0", what, f.text()), mend)
		return 0, false
	}
	return v, true
}

// level is the level of the record's intervals.
func (w *work) level() float64 {
	if f := w.r.CILevel; f.Given && f.Value > 0 && f.Value < 1 {
		w.use(f)
		return f.Value
	}
	return w.opt.CILevel
}
