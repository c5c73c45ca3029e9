package num

import "math"

// ChiSquaredCDF is P(X <= x) for a chi-square variable with df > 0 degrees of freedom.
func ChiSquaredCDF(x, df float64) float64 {
	lower, _ := GammaTails(math.Max(x, 0)/2, df/2)
	return lower
}

// ChiSquaredSurvival is P(X > x).
func ChiSquaredSurvival(x, df float64) float64 {
	_, upper := GammaTails(math.Max(x, 0)/2, df/2)
	return upper
}

// ChiSquaredPDF is the density at x > 0.
func ChiSquaredPDF(x, df float64) float64 {
	if !(x > 0) {
		return 0
	}
	return gammaPrefactor(x/2, df/2) / x
}

// ChiSquaredQuantile is the x with ChiSquaredCDF(x, df) = p.
func ChiSquaredQuantile(p, df float64) float64 { return 2 * GammaQuantile(p, df/2) }

// ChiSquaredQuantileUpper is the x with ChiSquaredSurvival(x, df) = q.
func ChiSquaredQuantileUpper(q, df float64) float64 { return 2 * GammaQuantileUpper(q, df/2) }
