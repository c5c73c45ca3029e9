package plan

import (
	"math"

	"footing/internal/num"
	"footing/meta/effect"
)

// exactRoutes are the routes to a standardized mean difference whose figures amount to a two-sample t statistic.
var exactRoutes = map[string]bool{"means-and-sds": true, "t-statistic": true, "p-value": true, "f-statistic": true, "point-biserial-r": true}

// smdInterval is the interval of one standardized mean difference by the noncentral t distribution (Steiger & Fouladi
// 1997; Cumming & Finch 2001): the limits are the effects under which the t statistic found, (g/J) sqrt(n1 n2/(n1+n2)) on
// n1+n2-2 degrees of freedom, is the upper or the lower (1-level)/2 quantile. ok is false for other routes, unknown group
// sizes, a variance that was adjusted (clusters, reliability), and where a limit can't be found; the caller then takes the
// normal interval.
func smdInterval(e *effect.Estimate, level float64) (lower, upper float64, ok bool) {
	n1, n2 := e.N[0], e.N[1]
	if e.Scale != effect.StandardizedMeanDifference || !exactRoutes[e.Route] || n1 < 1 || n2 < 1 || n1+n2 < 4 {
		return 0, 0, false
	}
	if plain := (n1+n2)/(n1*n2) + e.Value*e.Value/(2*(n1+n2)); math.Abs(e.Variance-plain) > 1e-9*plain {
		return 0, 0, false
	}
	df, root := n1+n2-2, math.Sqrt(n1*n2/(n1+n2))
	t := e.Value / effect.SmallSampleFactor(df) * root
	if math.IsNaN(t) || math.Abs(t) > 300 {
		return 0, 0, false
	}
	tail := (1 - level) / 2
	// The noncentrality lies within a few of its own spreads, sqrt(1 + t^2/(2 df)), of t.
	reach := (num.NormalQuantileUpper(tail) + 3) * math.Sqrt(1+t*t/(2*df)) * 2
	low := num.Root(func(delta float64) float64 { return num.NoncentralTSurvival(t, df, delta) - tail }, t-reach, t+1, num.RootOptions{Tolerance: 1e-11})
	high := num.Root(func(delta float64) float64 { return num.NoncentralTCDF(t, df, delta) - tail }, t-1, t+reach, num.RootOptions{Tolerance: 1e-11})
	if !low.Converged || !high.Converged {
		return 0, 0, false
	}
	return low.X / root, high.X / root, true
}
