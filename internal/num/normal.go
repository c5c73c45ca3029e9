package num

import "math"

// NormalPDF is the standard normal density at z.
func NormalPDF(z float64) float64 { return math.Exp(-z*z/2) / math.Sqrt(2*math.Pi) }

// NormalCDF is P(Z <= z) for a standard normal Z, with full relative accuracy in the lower tail.
func NormalCDF(z float64) float64 { return NormalSurvival(-z) }

// NormalSurvival is P(Z > z) for a standard normal Z, with full relative accuracy in the upper tail (z up to 38, where the
// probability leaves the range of normal floating-point numbers).
//
// The complementary error function's argument z/sqrt 2 is rounded; its rounding error r is put back by the derivative, since in the tail
// it would otherwise be multiplied by z squared.
func NormalSurvival(z float64) float64 {
	x := z / math.Sqrt2
	p := math.Erfc(x) / 2
	if z > 2 {
		// z - x sqrt 2, with sqrt 2 in two parts.
		const sqrt2Low = -9.667293313452913e-17 // sqrt 2 minus its double
		r := math.FMA(-x, math.Sqrt2, z) - x*sqrt2Low
		p *= 1 - z*r
	}
	return p
}

// NormalQuantile is the z with NormalCDF(z) = p, 0 < p < 1; -Inf at 0 and +Inf at 1.
func NormalQuantile(p float64) float64 {
	if !(p >= 0 && p <= 1) {
		domain("NormalQuantile", p)
	}
	if p > 0.5 {
		return NormalQuantileUpper(1 - p) // exact: p is at least a half
	}
	return -NormalQuantileUpper(p)
}

// NormalQuantileUpper is the z with NormalSurvival(z) = q, 0 < q < 1; +Inf at 0 and -Inf at 1.
//
// Start: rational approximation of Hastings (1955, sheet 67); then Halley's steps on the logarithm of the tail, which converge to the last digits.
func NormalQuantileUpper(q float64) float64 {
	switch {
	case !(q >= 0 && q <= 1):
		domain("NormalQuantileUpper", q)
	case q == 0:
		return math.Inf(1)
	case q == 1:
		return math.Inf(-1)
	case q > 0.5:
		return -NormalQuantileUpper(1 - q)
	case q == 0.5:
		return 0
	}
	t := math.Sqrt(-2 * math.Log(q))
	z := t - (2.515517+t*(0.802853+t*0.010328))/(1+t*(1.432788+t*(0.189269+t*0.001308)))
	for i := 0; i < 4; i++ {
		s := NormalSurvival(z)
		hazard := NormalPDF(z) / s
		d := math.Log(s/q) / hazard
		// log S has slope -hazard and second derivative -hazard (hazard - z): Halley's step.
		step := d / (1 + d*(hazard-z)/2)
		z += step
		if math.Abs(step) < 1e-9*(1+math.Abs(z)) {
			break
		}
	}
	return z
}
