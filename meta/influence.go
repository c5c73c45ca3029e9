package meta

import "math"

// LeftOut is the pooling without one study.
type LeftOut struct {
	Index      int
	Interval   Interval
	TauSquared TauSquared
	Residual   float64 // (y - mean of the others) / sqrt(v + tau2 + SE^2), tau2 and SE of the others
	ShareOfQ   float64 // its share of Cochran's Q, 0..1
}

// Influence leaves each study out in turn. It needs two studies; with fewer it is empty.
func (d Data) Influence(e Estimator, method string, level float64) []LeftOut {
	if d.K() < 2 {
		return nil
	}
	common := d.MeanAt(0)
	out := make([]LeftOut, d.K())
	for i := range out {
		rest := d.Without(i)
		tau := e.Estimate(rest)
		m := rest.MeanAt(tau.Value)
		used := method
		if rest.K() < 2 {
			used = Normal
		}
		in := rest.Interval(used, tau.Value, level)
		if !in.Available {
			in = rest.Interval(Normal, tau.Value, level)
		}
		r := d.Y[i] - common.Estimate
		out[i] = LeftOut{Index: i, TauSquared: tau, Interval: in, Residual: (d.Y[i] - m.Estimate) / math.Sqrt(d.V[i]+tau.Value+m.StandardError*m.StandardError)}
		if common.Q > 0 {
			out[i].ShareOfQ = r * r / d.V[i] / common.Q
		}
	}
	return out
}
