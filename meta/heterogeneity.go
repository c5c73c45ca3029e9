package meta

import (
	"math"

	"footing/internal/num"
)

// Heterogeneity is how far the studies differ. With one study only K is filled and Why says so.
type Heterogeneity struct {
	K         int
	Q         float64
	DF        int
	P         float64
	HSquared  float64 // Q/df
	ISquared  float64 // max(0, (Q - df)/Q), 0..1 (Higgins & Thompson 2002)
	Typical   float64 // s2, the typical within-study variance: df sum w/((sum w)^2 - sum w^2)
	Available bool
	Why       string
}

// Heterogeneity gives Cochran's Q with its p, H2 and I2.
func (d Data) Heterogeneity() Heterogeneity {
	h := Heterogeneity{K: d.K(), DF: d.K() - 1}
	if d.K() < 2 {
		h.Why = "one study says nothing about how studies differ"
		return h
	}
	h.Available = true
	h.Q = d.MeanAt(0).Q
	if d.equal() {
		h.Q = 0
	}
	df := float64(h.DF)
	h.P = num.ChiSquaredSurvival(h.Q, df)
	h.HSquared = h.Q / df
	if h.Q > df {
		h.ISquared = (h.Q - df) / h.Q
	}
	h.Typical = df / d.spread()
	switch d.K() {
	case 2:
		h.Why = "two studies tell almost nothing about how far studies differ"
	case 3:
		h.Why = "three studies tell very little about how far studies differ"
	}
	return h
}

// ISquaredOf is I2 under another estimate of tau2: tau2/(tau2 + s2).
func (h Heterogeneity) ISquaredOf(tau2 float64) float64 { return tau2 / (tau2 + h.Typical) }

// Bounds is an interval of a variance component.
type Bounds struct {
	Lower, Upper float64
	Available    bool
	Why          string
}

// QProfile is the interval of tau2 between the points at which the generalised Q meets the chi-square quantiles (Viechtbauer 2007).
// The lower end is 0 when Q(0) lies below the upper quantile; an empty set is not available.
func (d Data) QProfile(level float64) Bounds {
	if d.K() < 2 {
		return Bounds{Why: "one study says nothing about how studies differ"}
	}
	df := float64(d.K() - 1)
	high := num.ChiSquaredQuantileUpper((1-level)/2, df)
	low := num.ChiSquaredQuantile((1-level)/2, df)
	q0 := d.MeanAt(0).Q
	if q0 < low {
		return Bounds{Why: "the studies differ less than chance alone would make them, so that no tau-squared fits"}
	}
	b := Bounds{Available: true}
	if q0 > high {
		b.Lower = d.solveQ(high).Value
	}
	if q0 > low {
		b.Upper = d.solveQ(low).Value
	}
	return b
}

// ISquaredInterval turns an interval of tau2 into one of I2.
func (h Heterogeneity) ISquaredInterval(tau Bounds) Bounds {
	if !tau.Available {
		return tau
	}
	return Bounds{Lower: h.ISquaredOf(tau.Lower), Upper: h.ISquaredOf(tau.Upper), Available: true}
}

// ISquaredByLogH is the interval of I2 by the logarithm of H (Higgins & Thompson 2002, appendix A2). It takes Q and the number of studies alone.
func ISquaredByLogH(q float64, k int, level float64) Bounds {
	if k < 3 {
		return Bounds{Why: "needs at least 3 studies"}
	}
	df := float64(k - 1)
	logH := math.Log(math.Max(q, 1e-300)/df) / 2
	var se float64
	if q > float64(k) {
		se = (math.Log(q) - math.Log(df)) / 2 / (math.Sqrt(2*q) - math.Sqrt(2*df-1))
	} else {
		se = math.Sqrt(1 / (2 * (df - 1)) * (1 - 1/(3*(df-1)*(df-1))))
	}
	if q <= df {
		logH = 0
	}
	z := num.NormalQuantileUpper((1 - level) / 2)
	back := func(l float64) float64 {
		h2 := math.Exp(2 * l)
		return math.Max(0, (h2-1)/h2)
	}
	return Bounds{Lower: back(logH - z*se), Upper: back(logH + z*se), Available: true}
}
