package num

import "math"

// HypergeometricPMF is P(X = k): k successes among draws, from a population that holds successes of them.
func HypergeometricPMF(k, successes, draws, population int) float64 {
	if successes < 0 || draws < 0 || successes > population || draws > population {
		domain("HypergeometricPMF", float64(k), float64(successes), float64(draws), float64(population))
	}
	if k < 0 || k > successes || k > draws || draws-k > population-successes {
		return 0
	}
	if population == 0 || draws == 0 || draws == population {
		return 1
	}
	// C(s,k) C(N-s,d-k) / C(N,d) as a product of binomials with the common chance d/N (Loader 2000).
	p := float64(draws) / float64(population)
	return BinomialPMF(k, successes, p) * BinomialPMF(draws-k, population-successes, p) / BinomialPMF(draws, population, p)
}

// HypergeometricCDF is P(X <= k).
func HypergeometricCDF(k, successes, draws, population int) float64 {
	low, high := hypergeometricSupport(successes, draws, population)
	switch {
	case k < low:
		return 0
	case k >= high:
		return 1
	}
	if float64(k) > float64(successes)*float64(draws)/float64(population) {
		return 1 - hypergeometricUp(k+1, high, successes, draws, population)
	}
	return hypergeometricDown(k, low, successes, draws, population)
}

// HypergeometricSurvival is P(X > k).
func HypergeometricSurvival(k, successes, draws, population int) float64 {
	low, high := hypergeometricSupport(successes, draws, population)
	switch {
	case k < low:
		return 1
	case k >= high:
		return 0
	}
	if float64(k) > float64(successes)*float64(draws)/float64(population) {
		return hypergeometricUp(k+1, high, successes, draws, population)
	}
	return 1 - hypergeometricDown(k, low, successes, draws, population)
}

func hypergeometricSupport(successes, draws, population int) (low, high int) {
	return max(0, draws-(population-successes)), min(successes, draws)
}

// hypergeometricDown is the sum of the probabilities from k down to low, by the ratio of neighbours.
func hypergeometricDown(k, low, successes, draws, population int) float64 {
	s, d, n := float64(successes), float64(draws), float64(population)
	term, sum := 1.0, 1.0
	for i := float64(k); i > float64(low); i-- {
		term *= i * (n - s - d + i) / ((s - i + 1) * (d - i + 1))
		sum += term
		if term < sum*1e-17 {
			break
		}
	}
	return math.Min(1, sum*HypergeometricPMF(k, successes, draws, population))
}

func hypergeometricUp(k, high, successes, draws, population int) float64 {
	s, d, n := float64(successes), float64(draws), float64(population)
	term, sum := 1.0, 1.0
	for i := float64(k); i < float64(high); i++ {
		term *= (s - i) * (d - i) / ((i + 1) * (n - s - d + i + 1))
		sum += term
		if term < sum*1e-17 {
			break
		}
	}
	return math.Min(1, sum*HypergeometricPMF(k, successes, draws, population))
}
