package meta

import (
	"math"

	"footing/internal/num"
)

// Mean is the inverse-variance weighted mean under one tau-squared.
type Mean struct {
	Estimate      float64
	StandardError float64 // normal theory: 1/sqrt(sum w*)
	TauSquared    float64
	Q             float64 // sum w* (y - mean)^2
}

// MeanAt pools with weights 1/(v + tau2); tau2 = 0 is the common effect.
func (d Data) MeanAt(tau2 float64) Mean {
	sw, swy := num.Accumulator{}, num.Accumulator{}
	// Taken from the first estimate on, so that a common offset costs no digits.
	origin := d.Y[0]
	for i, y := range d.Y {
		w := 1 / (d.V[i] + tau2)
		sw.Add(w)
		swy.Add(w * (y - origin))
	}
	shift := swy.Value() / sw.Value()
	m := Mean{Estimate: origin + shift, StandardError: 1 / math.Sqrt(sw.Value()), TauSquared: tau2}
	q := num.Accumulator{}
	for i, y := range d.Y {
		r := (y - origin) - shift
		q.Add(r * r / (d.V[i] + tau2))
	}
	m.Q = q.Value()
	return m
}

// Shares are the studies' weights under tau2 as shares of 1.
func (d Data) Shares(tau2 float64) []float64 {
	out := make([]float64, d.K())
	for i, v := range d.V {
		out[i] = 1 / (v + tau2)
	}
	total := num.Sum(out)
	for i := range out {
		out[i] /= total
	}
	return out
}

// powers gives sum w, sum w^2 and sum w^3 of the common-effect weights.
func (d Data) powers() (w1, w2, w3 float64) {
	var a, b, c num.Accumulator
	for _, v := range d.V {
		w := 1 / v
		a.Add(w)
		b.Add(w * w)
		c.Add(w * w * w)
	}
	return a.Value(), b.Value(), c.Value()
}
