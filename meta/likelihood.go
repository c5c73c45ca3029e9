package meta

import (
	"math"

	"footing/internal/num"
)

// profile holds the log-likelihood of tau2, maximised over the mean, and its slope; restricted adds the REML term.
type profile struct {
	d          Data
	restricted bool
}

// at is the log-likelihood (without its constant) and its derivative by tau2.
//
// ML: -1/2 sum log(v + tau2) - 1/2 sum w* (y - mu)^2, slope 1/2 [sum w*^2 (y - mu)^2 - sum w*]; REML adds -1/2 log sum w*, slope 1/2 sum w*^2/sum w*.
func (p profile) at(tau2 float64) (value, slope float64) {
	mean := p.d.MeanAt(tau2).Estimate
	var logs, q, q2, w1, w2 float64
	for i, y := range p.d.Y {
		w := 1 / (p.d.V[i] + tau2)
		r := y - mean
		logs += math.Log(p.d.V[i] + tau2)
		q += w * r * r
		q2 += w * w * r * r
		w1 += w
		w2 += w * w
	}
	value = -(logs + q) / 2
	slope = (q2 - w1) / 2
	if p.restricted {
		value -= math.Log(w1) / 2
		slope += w2 / w1 / 2
	}
	return value, slope
}

func maximumLikelihood(d Data) TauSquared           { return profile{d, false}.maximum() }
func restrictedMaximumLikelihood(d Data) TauSquared { return profile{d, true}.maximum() }

// maximum is the global maximum over tau2 >= 0. The likelihood can have two maxima, so it is profiled on a grid from 0 to a bound that the data give, each
// local maximum is refined by a bracketed root of the slope, and the highest is compared with 0.
func (p profile) maximum() TauSquared {
	if t, only := single(p.d); only {
		return t
	}
	grid := p.grid()
	values, slopes := make([]float64, len(grid)), make([]float64, len(grid))
	for i, t := range grid {
		values[i], slopes[i] = p.at(t)
	}
	best := TauSquared{Truncated: slopes[0] < 0, Converged: true}
	top := values[0]
	for i := 1; i < len(grid); i++ {
		if !(slopes[i-1] > 0 && slopes[i] <= 0) {
			continue
		}
		r := num.Root(func(t float64) float64 { _, s := p.at(t); return s }, grid[i-1], grid[i], num.RootOptions{Tolerance: 1e-15 * grid[i]})
		if value, _ := p.at(r.X); value > top {
			top = value
			best = TauSquared{Value: r.X, Converged: r.Converged, Iterations: r.Iterations}
		}
	}
	return best
}

// grid runs from 0 over the range in which a maximum can lie. At a maximum sum w*^2 (y-mu)^2 >= sum w* (less for REML), so tau2 is below the largest squared
// deviation, (max - min)^2; and features narrower than a fraction of the smallest variance don't exist.
func (p profile) grid() []float64 {
	lo, hi := p.d.Y[0], p.d.Y[0]
	smallest := math.Inf(1)
	for i, y := range p.d.Y {
		lo, hi = math.Min(lo, y), math.Max(hi, y)
		smallest = math.Min(smallest, p.d.V[i])
	}
	bound := (hi - lo) * (hi - lo)
	if bound == 0 {
		return []float64{0}
	}
	bound *= 2
	from := math.Min(smallest/100, bound/1e4)
	const points = 64
	grid := make([]float64, points+1)
	ratio := math.Pow(bound/from, 1/float64(points-1))
	t := from
	for i := 1; i <= points; i++ {
		grid[i] = t
		t *= ratio
	}
	return grid
}
