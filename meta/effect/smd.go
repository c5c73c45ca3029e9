package effect

import (
	"math"

	"footing/internal/num"
)

// SmallSampleFactor is Hedges' J for df degrees of freedom, df >= 2: Gamma(df/2) / (sqrt(df/2) Gamma((df-1)/2)), exactly (Hedges 1981, eq. 6e). The
// printed approximation 1 - 3/(4 df - 1) differs from it in the fourth decimal below about 20 df. Outside its domain it gives NaN.
func SmallSampleFactor(df float64) float64 {
	if !(df >= 2) || math.IsInf(df, 0) {
		return math.NaN()
	}
	return math.Exp(num.LogGammaHalfRatio(df)) * math.Sqrt(2/df)
}

// hedgesG turns Cohen's d into Hedges' g with its variance.
func (o Options) hedgesG(d, n1, n2 float64) (g, variance float64) {
	df := n1 + n2 - 2
	j := o.smallSample(df)
	g = j * d
	spread := (n1 + n2) / (n1 * n2)
	switch o.SMDVariance {
	case VarianceJSquared:
		variance = j * j * (spread + d*d/(2*(n1+n2)))
	case VarianceUnbiased:
		variance = spread + (1-(df-2)/(df*j*j))*g*g
	default:
		variance = spread + g*g/(2*(n1+n2))
	}
	return g, variance
}

// PooledSD is the SD within groups, pooled over two groups.
func PooledSD(sd1, n1, sd2, n2 float64) float64 {
	return math.Sqrt(((n1-1)*sd1*sd1 + (n2-1)*sd2*sd2) / (n1 + n2 - 2))
}
