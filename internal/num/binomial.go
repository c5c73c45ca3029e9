package num

import "math"

// BinomialPMF is P(X = k) for n trials of chance p (Loader 2000: no factorials, full accuracy for large n).
func BinomialPMF(k, n int, p float64) float64 {
	switch {
	case n < 0 || !(p >= 0 && p <= 1):
		domain("BinomialPMF", float64(k), float64(n), p)
	case k < 0 || k > n:
		return 0
	case p == 0 || p == 1:
		if (p == 0 && k == 0) || (p == 1 && k == n) {
			return 1
		}
		return 0
	case k == 0:
		return math.Exp(float64(n) * math.Log1p(-p))
	case k == n:
		return math.Exp(float64(n) * math.Log(p))
	}
	a, b, m := float64(k), float64(n-k), float64(n)
	// m!/(a! b!) p^a q^b with Gamma(x+1) = x Gamma(x) in Stirling's form.
	e := stirlingError(m) - stirlingError(a) - stirlingError(b) + betaDeviance(p, 1-p, a, b)
	return math.Exp(e) * math.Sqrt(m/(2*math.Pi*a*b))
}

// BinomialCDF is P(X <= k).
func BinomialCDF(k, n int, p float64) float64 {
	lower, _ := binomialTails(k, n, p)
	return lower
}

// BinomialSurvival is P(X > k).
func BinomialSurvival(k, n int, p float64) float64 {
	_, upper := binomialTails(k, n, p)
	return upper
}

func binomialTails(k, n int, p float64) (lower, upper float64) {
	switch {
	case n < 0 || !(p >= 0 && p <= 1):
		domain("BinomialCDF", float64(k), float64(n), p)
	case k < 0:
		return 0, 1
	case k >= n:
		return 1, 0
	}
	// P(X > k) = I_p(k+1, n-k)
	l, u := BetaTails(p, 1-p, float64(k+1), float64(n-k))
	return u, l
}
