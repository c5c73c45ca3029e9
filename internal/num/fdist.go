package num

import "math"

// FCDF is P(X <= x) for an F variable with d1 and d2 degrees of freedom, both above 0.
func FCDF(x, d1, d2 float64) float64 {
	lower, _ := fTails(x, d1, d2)
	return lower
}

// FSurvival is P(X > x).
func FSurvival(x, d1, d2 float64) float64 {
	_, upper := fTails(x, d1, d2)
	return upper
}

func fTails(x, d1, d2 float64) (lower, upper float64) {
	if math.IsNaN(x) {
		domain("FTails", x, d1, d2)
	}
	if x <= 0 {
		return 0, 1
	}
	if math.IsInf(x, 1) {
		return 1, 0
	}
	r := d1 * x / d2
	return BetaTails(r/(1+r), 1/(1+r), d1/2, d2/2)
}

// FQuantile is the x with FCDF(x, d1, d2) = p.
func FQuantile(p, d1, d2 float64) float64 { return fQuantile("FQuantile", p, 1-p, d1, d2) }

// FQuantileUpper is the x with FSurvival(x, d1, d2) = q.
func FQuantileUpper(q, d1, d2 float64) float64 { return fQuantile("FQuantileUpper", 1-q, q, d1, d2) }

func fQuantile(name string, lower, upper, d1, d2 float64) float64 {
	switch {
	case !(lower >= 0 && upper >= 0 && d1 > 0 && d2 > 0):
		domain(name, lower, upper, d1, d2)
	case lower == 0:
		return 0
	case upper == 0:
		return math.Inf(1)
	}
	return d2 / d1 * math.Exp(betaLogit(lower, upper, d1/2, d2/2, betaStart(lower, upper, d1/2, d2/2)))
}
