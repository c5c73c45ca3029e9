package smallstudy

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta"
)

// HenmiCopasResult is the Henmi-Copas interval.
type HenmiCopasResult struct {
	Interval  meta.Interval // StandardError is half its width over Quantile
	Quantile  float64       // t0, in place of 1.96
	Converged bool
	Available bool
	Why       string
}

// HenmiCopas is an interval for the random-effects mean that is centred on the common-effect mean, which selective publication moves less, with a width that allows for
// between-study variance (Henmi & Copas 2010, Stat Med 29:2969).
//
// With W_j = sum w^j and the DerSimonian-Laird tau2 (cut at 0), the pivot is (mean - theta) / sqrt((tau2 W2/W1 + 1)/W1). Its distribution is integrated over R, the
// standardised error of the mean: given R, Cochran's Q is taken as gamma with its exact conditional mean and variance, and tau2 inside the pivot follows from Q. The nominal 95%
// is conservative when weights are very unequal.
func HenmiCopas(d meta.Data, level float64) HenmiCopasResult {
	k := d.K()
	if k < 2 {
		return HenmiCopasResult{Why: fmt.Sprintf("needs at least 2 studies; there are %d", k)}
	}
	h := newConditionalQ(d)
	alpha := 1 - level
	miss := func(t0 float64) float64 { return h.upper(t0) - alpha/2 }
	low, high := num.NormalQuantileUpper(alpha/2)/3, num.NormalQuantileUpper(alpha/2)
	for i := 0; miss(high) > 0 && i < 60; i++ {
		high *= 1.7
	}
	r := num.Root(miss, low, high, num.RootOptions{Tolerance: 1e-11})
	if !r.Bracketed {
		return HenmiCopasResult{Why: "its quantile could not be bracketed"}
	}
	se := math.Sqrt((h.tau2*h.w2/h.w1 + 1) / h.w1)
	out := HenmiCopasResult{Quantile: r.X, Converged: r.Converged, Available: true}
	out.Interval = meta.Interval{Method: "henmi-copas", Level: level, Estimate: h.mean, StandardError: se, DF: math.Inf(1),
		Lower: h.mean - r.X*se, Upper: h.mean + r.X*se, Available: true}
	return out
}

// conditionalQ is the law of Cochran's Q given R.
type conditionalQ struct {
	mean, tau2 float64
	w1, w2     float64
	df         float64
	e0, e2     float64 // E[Q|r] = e0 + e2 r^2
	v0, v2     float64 // Var[Q|r] = v0 + v2 r^2
	factor     float64 // W1 - W2/W1
}

// newConditionalQ derives the moments. The errors e have covariance D = diag(1/w + tau2); R = w'e/s with s^2 = W1 + tau2 W2; given R = r, e is normal around c r, c = Dw/s,
// with covariance D - cc'. Q = e'Ae with A = diag(w) - ww'/W1. Then E = r^2 c'Ac + tr(AD) - c'Ac and Var = 4 r^2 [b'Db - (c'Ac)^2] + 2 [tr(ADAD) - 2 b'Db +
// (c'Ac)^2] with b = Ac, whose elements are w_i tau2 (w_i - W2/W1)/s.
func newConditionalQ(d meta.Data) conditionalQ {
	dl, _ := meta.EstimatorByName("")
	h := conditionalQ{tau2: dl.Estimate(d).Value, mean: d.MeanAt(0).Estimate, df: float64(d.K() - 1)}
	var s1, s2 num.Accumulator
	for _, v := range d.V {
		s1.Add(1 / v)
		s2.Add(1 / (v * v))
	}
	h.w1, h.w2 = s1.Value(), s2.Value()
	h.factor = h.w1 - h.w2/h.w1
	s := h.w1 + h.tau2*h.w2 // s^2
	var cac, bdb, ad, adad1, adad2 num.Accumulator
	for _, v := range d.V {
		w := 1 / v
		di := v + h.tau2
		off := w - h.w2/h.w1
		cac.Add(w * off * off)
		bdb.Add(di * w * w * off * off)
		share := 1 - w/h.w1
		ad.Add(w * di * share)
		adad1.Add(w * w * di * di * (1 - 2*w/h.w1))
		adad2.Add(w * w * di)
	}
	t2 := h.tau2 * h.tau2 / s
	quad := t2 * cac.Value()
	bd := t2 * bdb.Value()
	squared := adad1.Value() + adad2.Value()*adad2.Value()/(h.w1*h.w1)
	h.e0, h.e2 = ad.Value()-quad, quad
	h.v0, h.v2 = 2*(squared-2*bd+quad*quad), 4*(bd-quad*quad)
	return h
}

// upper is P(pivot > t0). The pivot exceeds t0 when 1 + tau2(Q) W2/W1 < r^2 (1 + tau2 W2/W1)/t0^2, that is when Q lies below a bound that grows with r.
func (h conditionalQ) upper(t0 float64) float64 {
	ratio := h.w2 / h.w1
	grow := (1 + h.tau2*ratio) / (t0 * t0)
	from := 1 / math.Sqrt(grow) // below it the bound on tau2 is negative
	r := num.Integrate(func(r float64) float64 {
		g := r*r*grow - 1
		if g < 0 {
			return 0
		}
		bound := h.df + h.factor*g/ratio
		e, v := h.e0+h.e2*r*r, h.v0+h.v2*r*r
		lower, _ := num.GammaTails(bound*e/v, e*e/v)
		return lower * num.NormalPDF(r)
	}, from, from+40, num.IntegrateOptions{Relative: 1e-10, Absolute: 1e-14, Breaks: []float64{from + 1, from + 3, from + 8}})
	return r.Value
}
