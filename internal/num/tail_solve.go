package num

import "math"

// solveTail finds v with tail(v) equal to the smaller of (lower, upper). tails gives the lower tail, the upper tail and the density, all
// in terms of v. Newton's steps are taken on the logarithm of the smaller tail, which is concave for the distributions here,
// inside a bracket that only shrinks.
func solveTail(lower, upper, start float64, tails func(v float64) (lower, upper, density float64)) float64 {
	lo, hi := math.Inf(-1), math.Inf(1)
	v := start
	for i := 0; i < 200; i++ {
		l, u, f := tails(v)
		var miss float64 // log(tail/target), signed so that a positive miss means v is too large
		var size float64
		if lower < upper {
			miss, size = math.Log(l/lower), l
		} else {
			miss, size = -math.Log(u/upper), u
		}
		if miss > 0 {
			hi = v
		} else {
			lo = v
		}
		step := -miss * size / f
		if math.Abs(step) <= 1e-9 {
			return v + step // Newton's error is of the order of the step squared
		}
		next := v + step
		if math.IsNaN(next) || next <= lo || next >= hi || math.Abs(step) > 30 {
			next = fallback(v, miss, lo, hi)
		}
		if next == v {
			return v // the bracket has no room left
		}
		v = next
	}
	return v
}

func fallback(v, miss, lo, hi float64) float64 {
	switch {
	case math.IsInf(lo, -1) && miss > 0:
		return v - 3 - math.Abs(v)/4
	case math.IsInf(hi, 1) && miss <= 0:
		return v + 3 + math.Abs(v)/4
	case math.IsInf(lo, -1) || math.IsInf(hi, 1):
		return v - math.Copysign(3, miss)
	}
	return lo + (hi-lo)/2
}
