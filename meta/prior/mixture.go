package prior

import (
	"fmt"
	"math"

	"footing/internal/num"
)

// Mixture is a weighted mixture of distributions; the weights add up to 1.
type Mixture struct {
	Weights []float64
	Parts   []Distribution
}

// NewMixture checks the weights and scales them to add up to 1.
func NewMixture(weights []float64, parts []Distribution) (Mixture, error) {
	if len(weights) != len(parts) || len(parts) == 0 {
		return Mixture{}, fmt.Errorf("a mixture needs as many weights as parts, and at least one")
	}
	total := 0.0
	for _, w := range weights {
		if !(w >= 0) || math.IsInf(w, 0) {
			return Mixture{}, fmt.Errorf("a mixture's weight can't be %g", w)
		}
		total += w
	}
	if !(total > 0) {
		return Mixture{}, fmt.Errorf("the weights of a mixture add up to 0")
	}
	m := Mixture{Parts: parts}
	for _, w := range weights {
		m.Weights = append(m.Weights, w/total)
	}
	return m, nil
}

func (m Mixture) sum(f func(Distribution) float64) float64 {
	var s num.Accumulator
	for i, p := range m.Parts {
		s.Add(m.Weights[i] * f(p))
	}
	return s.Value()
}

// CDF is the chance that the effect is at most x.
func (m Mixture) CDF(x float64) float64 {
	return m.sum(func(d Distribution) float64 { return d.CDF(x) })
}

// Survival is the chance that the effect is above x.
func (m Mixture) Survival(x float64) float64 {
	return m.sum(func(d Distribution) float64 { return d.Survival(x) })
}

// Density is the density at x.
func (m Mixture) Density(x float64) float64 {
	return m.sum(func(d Distribution) float64 { return d.Density(x) })
}

// Quantile is found by a bracketed root between the parts' own quantiles.
func (m Mixture) Quantile(p float64) float64 {
	lo, hi := math.Inf(1), math.Inf(-1)
	for i, d := range m.Parts {
		if m.Weights[i] == 0 {
			continue
		}
		q := d.Quantile(p)
		lo, hi = math.Min(lo, q), math.Max(hi, q)
	}
	if lo == hi {
		return lo
	}
	f := func(x float64) float64 { return m.CDF(x) - p }
	if p > 0.5 {
		f = func(x float64) float64 { return (1 - p) - m.Survival(x) }
	}
	r := num.Root(f, lo, hi, num.RootOptions{})
	if !r.Bracketed { // one end is the quantile but for rounding
		if math.Abs(f(lo)) < math.Abs(f(hi)) {
			return lo
		}
		return hi
	}
	return r.X
}

// Moments exist where all parts have them.
func (m Mixture) Moments() (mean, sd float64, hasMean, hasSD bool) {
	hasMean, hasSD = true, true
	var first, second num.Accumulator
	for i, d := range m.Parts {
		a, s, okMean, okSD := d.Moments()
		hasMean, hasSD = hasMean && okMean, hasSD && okSD
		first.Add(m.Weights[i] * a)
		second.Add(m.Weights[i] * (a*a + s*s))
	}
	mean = first.Value()
	if hasSD {
		sd = math.Sqrt(math.Max(0, second.Value()-mean*mean))
	}
	return mean, sd, hasMean, hasSD
}

// Words describes the mixture.
func (m Mixture) Words() string { return fmt.Sprintf("mixture of %d distributions", len(m.Parts)) }
