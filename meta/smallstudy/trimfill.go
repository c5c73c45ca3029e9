package smallstudy

import (
	"fmt"
	"math"
	"sort"

	"footing/meta"
)

// TrimFillOptions say how trim and fill works. The zero value is the default.
type TrimFillOptions struct {
	// MissingAbove says that the suppressed studies are thought to lie above the centre. False: below it, which speaks against a treatment that raises y.
	MissingAbove bool
	// RunEstimator counts the missing studies by R0 in place of L0 (Duval & Tweedie 2000).
	RunEstimator bool
	// CommonCentre takes the common-effect mean as centre and as final estimate in place of the random-effects one.
	CommonCentre bool
}

// TrimFilled is the result of trim and fill.
type TrimFilled struct {
	Missing    int
	Filled     meta.Data // the studies with the imputed ones behind them
	TauSquared float64
	Interval   meta.Interval
	Iterations int
	Converged  bool
	Available  bool
	Why        string
}

// TrimFill estimates how many studies one side of the funnel lacks, mirrors their counterparts and pools again (Duval & Tweedie 2000). L0 = (4T - k(k+1))/(2k - 1)
// with T the rank sum of the studies on the full side, R0 = the length of the rightmost run of ranks - 1; rounded half up, not below 0, until the
// count repeats. Ranks of |y - centre| are averaged over ties.
func TrimFill(d meta.Data, e meta.Estimator, method string, level float64, opt TrimFillOptions) TrimFilled {
	k := d.K()
	if k < 3 {
		return TrimFilled{Why: fmt.Sprintf("trim and fill needs at least 3 studies; there are %d", k)}
	}
	// Worked with the missing side below: the signs are turned for the other side.
	sign := 1.0
	if opt.MissingAbove {
		sign = -1
	}
	y := make([]float64, k)
	order := make([]int, k)
	for i := range y {
		y[i], order[i] = sign*d.Y[i], i
	}
	sort.SliceStable(order, func(a, b int) bool { return y[order[a]] < y[order[b]] })
	centre := func(drop int) float64 {
		kept := meta.Data{}
		for _, i := range order[:k-drop] {
			kept.Y, kept.V = append(kept.Y, y[i]), append(kept.V, d.V[i])
		}
		if opt.CommonCentre {
			return kept.MeanAt(0).Estimate
		}
		return kept.MeanAt(e.Estimate(kept).Value).Estimate
	}
	out := TrimFilled{Available: true}
	missing := 0
	for out.Iterations = 1; out.Iterations <= 200; out.Iterations++ {
		next := countMissing(y, centre(missing), opt.RunEstimator)
		next = min(next, k-2)
		if next == missing {
			out.Converged = true
			break
		}
		missing = next
	}
	out.Missing = missing
	c := centre(missing)
	out.Filled = meta.Data{Y: append([]float64{}, d.Y...), V: append([]float64{}, d.V...)}
	for _, i := range order[k-missing:] {
		out.Filled.Y = append(out.Filled.Y, sign*(2*c-y[i]))
		out.Filled.V = append(out.Filled.V, d.V[i])
	}
	if !opt.CommonCentre {
		out.TauSquared = e.Estimate(out.Filled).Value
	}
	out.Interval = out.Filled.Interval(method, out.TauSquared, level)
	return out
}

// countMissing is L0 or R0 around a centre.
func countMissing(y []float64, centre float64, run bool) int {
	k := len(y)
	ranks := rankAbs(y, centre)
	if run {
		// The rightmost run: ranks above the largest rank of a study on the thin side.
		largest := 0.0
		for i, x := range y {
			if x <= centre {
				largest = math.Max(largest, ranks[i])
			}
		}
		r0 := float64(k) - largest - 1
		return max(0, int(math.Floor(r0+0.5)))
	}
	t := 0.0
	for i, x := range y {
		if x > centre {
			t += ranks[i]
		}
	}
	n := float64(k)
	l0 := (4*t - n*(n+1)) / (2*n - 1)
	return max(0, int(math.Floor(l0+0.5)))
}

// rankAbs ranks |y - centre| from 1, ties averaged.
func rankAbs(y []float64, centre float64) []float64 {
	k := len(y)
	order := make([]int, k)
	dist := make([]float64, k)
	scale := 0.0
	for i, x := range y {
		order[i], dist[i] = i, math.Abs(x-centre)
		scale = math.Max(scale, math.Abs(x))
	}
	sort.SliceStable(order, func(a, b int) bool { return dist[order[a]] < dist[order[b]] })
	ranks := make([]float64, k)
	for i := 0; i < k; {
		j := i
		for j+1 < k && dist[order[j+1]]-dist[order[i]] <= 1e-12*scale {
			j++
		}
		for m := i; m <= j; m++ {
			ranks[order[m]] = float64(i+j)/2 + 1
		}
		i = j + 1
	}
	return ranks
}
