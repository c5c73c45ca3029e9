package meta

import (
	"math"
	"sort"

	"footing/internal/num"
)

// LeftOut is the pooling without one study.
type LeftOut struct {
	Index      int
	Interval   Interval
	TauSquared TauSquared
	Residual   float64 // (y - mean of the others) / sqrt(v + tau2 + SE^2), tau2 and SE of the others
	ShareOfQ   float64 // its share of Cochran's Q, 0..1
}

// Influence leaves each study out in turn, in order. It needs two studies; with fewer it is empty. limit bounds how many studies are left out: 0 means all; with
// more studies than that, those are taken whose leaving out would move the common-effect mean most.
func (d Data) Influence(e Estimator, method string, level float64, limit int) []LeftOut {
	if d.K() < 2 {
		return nil
	}
	common := d.MeanAt(0)
	chosen := d.mostInfluential(common.Estimate, limit)
	out := make([]LeftOut, len(chosen))
	num.Chunks(len(chosen), func(at int) {
		i := chosen[at]
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
		out[at] = LeftOut{Index: i, TauSquared: tau, Interval: in, Residual: (d.Y[i] - m.Estimate) / math.Sqrt(d.V[i]+tau.Value+m.StandardError*m.StandardError)}
		if common.Q > 0 {
			out[at].ShareOfQ = r * r / d.V[i] / common.Q
		}
	})
	return out
}

// mostInfluential gives the indices to leave out, ascending.
func (d Data) mostInfluential(mean float64, limit int) []int {
	all := make([]int, d.K())
	for i := range all {
		all[i] = i
	}
	if limit <= 0 || d.K() <= limit {
		return all
	}
	move := func(i int) float64 { return math.Abs(d.Y[i]-mean) / d.V[i] }
	sort.SliceStable(all, func(a, b int) bool { return move(all[a]) > move(all[b]) })
	all = all[:limit]
	sort.Ints(all)
	return all
}
