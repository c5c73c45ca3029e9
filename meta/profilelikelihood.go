package meta

import (
	"math"

	"footing/internal/num"
)

// ProfileLikelihood names the interval of the mean by profile likelihood; it goes with the maximum-likelihood estimate of tau-squared.
const ProfileLikelihood = "profile-likelihood"

// profileInterval is the set of means whose profile likelihood, tau2 maximised again at each, lies within half the chi-square quantile (1.9207 at 95%) of the top
// (Hardy & Thompson 1996, Stat Med 15:619). Its standard error is half its width over the normal quantile; the test is the likelihood ratio's, with the signed root as statistic.
func (d Data) profileInterval(out Interval) Interval {
	if d.K() < 2 {
		out.Why = "one study has no between-study variation, which this interval rests on"
		return out
	}
	ml := maximumLikelihood(d)
	if !ml.Converged {
		out.Why = "the likelihood has no clear maximum"
		return out
	}
	m := d.MeanAt(ml.Value)
	top := d.meanLogLikelihood(m.Estimate)
	z := num.NormalQuantileUpper((1 - out.Level) / 2)
	drop := func(mu float64) float64 { return top - d.meanLogLikelihood(mu) - z*z/2 }
	limit := func(side float64) (float64, bool) {
		far := z * m.StandardError
		for i := 0; drop(m.Estimate+side*far) < 0; i++ {
			if i > 200 {
				return 0, false
			}
			far *= 1.5
		}
		r := num.Root(drop, m.Estimate, m.Estimate+side*far, num.RootOptions{Tolerance: 1e-12 * m.StandardError})
		return r.X, r.Converged && r.Bracketed
	}
	lower, ok1 := limit(-1)
	upper, ok2 := limit(1)
	if !ok1 || !ok2 {
		out.Why = "a limit of the profile likelihood could not be found"
		return out
	}
	out.Estimate, out.Lower, out.Upper = m.Estimate, lower, upper
	out.StandardError = (upper - lower) / 2 / z
	ratio := math.Max(0, 2*(top-d.meanLogLikelihood(0)))
	out.Statistic = math.Copysign(math.Sqrt(ratio), m.Estimate)
	out.P = 2 * num.NormalSurvival(math.Sqrt(ratio))
	out.HasTest, out.Available = true, true
	return out
}

// meanLogLikelihood is the log-likelihood at a mean, maximised over tau2 >= 0 (without its constant).
func (d Data) meanLogLikelihood(mu float64) float64 {
	largest, smallest := 0.0, math.Inf(1)
	for i, y := range d.Y {
		largest = math.Max(largest, (y-mu)*(y-mu))
		smallest = math.Min(smallest, d.V[i])
	}
	at := func(t float64) (value, slope float64) {
		for i, y := range d.Y {
			s := d.V[i] + t
			r2 := (y - mu) * (y - mu) / s
			value -= math.Log(s) + r2
			slope += (r2 - 1) / s
		}
		return value / 2, slope / 2
	}
	best, before := at(0)
	// A maximum has sum (r2 - 1)/s = 0, so tau2 lies below the largest squared deviation.
	from, to := math.Min(smallest/100, largest/1e4), largest
	if !(from > 0) {
		return best
	}
	const points = 40
	ratio := math.Pow(to/from, 1/float64(points-1))
	last := 0.0
	for i, t := 0, from; i <= points; i, t = i+1, t*ratio {
		value, slope := at(t)
		if before > 0 && slope <= 0 {
			r := num.Root(func(t float64) float64 { _, s := at(t); return s }, last, t, num.RootOptions{Tolerance: 1e-14 * t})
			value, _ = at(r.X)
		}
		best, before, last = math.Max(best, value), slope, t
	}
	return best
}
