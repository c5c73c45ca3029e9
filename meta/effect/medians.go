package effect

import (
	"math"
	"sync"

	"footing/internal/num"
)

// ExpectedRange is xi(n), the expected range of n standard normal values, n >= 2: 2 n times the integral of z Phi(z)^(n-1) phi(z) (Wan et al. 2014, table 1), by quadrature.
func ExpectedRange(n int) float64 {
	if n < 2 {
		return math.NaN()
	}
	if v, ok := ranges.Load(n); ok {
		return v.(float64)
	}
	k := float64(n)
	r := num.Integrate(func(z float64) float64 {
		p := num.NormalCDF(z)
		return z * math.Pow(p, k-1) * num.NormalPDF(z)
	}, -12, 12, num.IntegrateOptions{Relative: 1e-11, Breaks: []float64{0}})
	v := 2 * k * r.Value
	ranges.Store(n, v)
	return v
}

var ranges sync.Map

// ExpectedQuartileDistance is eta, the expected distance of the quartiles of n = 4Q + 1 standard normal values: twice the expected (3Q+1)-th order statistic (Wan et al. 2014, table 2).
func ExpectedQuartileDistance(q int) float64 {
	if q < 1 {
		return math.NaN()
	}
	n, i := float64(4*q+1), float64(3*q+1)
	logC := num.LogGamma(n+1) - num.LogGamma(i) - num.LogGamma(n-i+1)
	r := num.Integrate(func(z float64) float64 {
		lower, upper := num.NormalCDF(z), num.NormalSurvival(z)
		if lower == 0 || upper == 0 {
			return 0
		}
		return z * math.Exp(logC+(i-1)*math.Log(lower)+(n-i)*math.Log(upper)) * num.NormalPDF(z)
	}, -12, 12, num.IntegrateOptions{Relative: 1e-11, Breaks: []float64{0, 0.6745}})
	return 2 * r.Value
}

// xi is the divisor of a range: from the table's own integral up to 50 people, from Blom's approximation beyond (Wan et al. 2014, eq. 9).
func xi(n float64) float64 {
	if n <= 50 {
		return ExpectedRange(int(n))
	}
	return 2 * num.NormalQuantile((n-0.375)/(n+0.25))
}

// eta is the divisor of the distance of the quartiles (Wan et al. 2014, eq. 16).
func eta(n float64) float64 { return 2 * num.NormalQuantile((0.75*n-0.125)/(n+0.25)) }

// Summary is what a paper prints in place of mean and SD.
type Summary struct {
	N                     float64
	Median                float64
	Min, Max              float64
	Q1, Q3                float64
	HasRange, HasQuarters bool
}

// MeanAndSD rebuilds mean and SD from a median with its quartiles, its range or both: SD by Wan et al. 2014, mean by Luo et al. 2018. skewed reports the check of Shi et al. 2020 (recalled from
// memory), that the summary is too lopsided for a normal sample. ok is false where neither quartiles nor range are there or their order is impossible.
func (s Summary) MeanAndSD() (mean, sd float64, skewed, ok bool) {
	n, m := s.N, s.Median
	inOrder := (!s.HasRange || s.Min <= m && m <= s.Max && s.Min < s.Max) && (!s.HasQuarters || s.Q1 <= m && m <= s.Q3 && s.Q1 < s.Q3) && (!s.HasRange || !s.HasQuarters || s.Min <= s.Q1 && s.Q3 <= s.Max)
	if !inOrder || !(n >= 3) {
		return 0, 0, false, false
	}
	mid, half := (s.Min+s.Max)/2, (s.Q1+s.Q3)/2
	switch {
	case s.HasRange && s.HasQuarters:
		w1, w2 := 2.2/(2.2+math.Pow(n, 0.75)), 0.7-0.72/math.Pow(n, 0.55)
		mean = w1*mid + w2*half + (1-w1-w2)*m
		sd = (s.Max-s.Min)/(2*xi(n)) + (s.Q3-s.Q1)/(2*eta(n))
		t := math.Max(2.65*math.Log(0.6*n)/math.Sqrt(n)*math.Abs(s.Min+s.Max-2*m)/(s.Max-s.Min), math.Abs(s.Q1+s.Q3-2*m)/(s.Q3-s.Q1))
		skewed = t > 3/math.Sqrt(n)-40/(n*n*n)
	case s.HasRange:
		w := 4 / (4 + math.Pow(n, 0.75))
		mean, sd = w*mid+(1-w)*m, (s.Max-s.Min)/xi(n)
		skewed = math.Abs(s.Min+s.Max-2*m)/(s.Max-s.Min) > 1.01/math.Log(n+9)+2.43/(n+1)
	case s.HasQuarters:
		w := 0.7 + 0.39/n
		mean, sd = w*half+(1-w)*m, (s.Q3-s.Q1)/eta(n)
		skewed = math.Abs(s.Q1+s.Q3-2*m)/(s.Q3-s.Q1) > 2.65/math.Sqrt(n)-6/(n*n)
	default:
		return 0, 0, false, false
	}
	return mean, sd, skewed, sd > 0
}
