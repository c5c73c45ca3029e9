package smallstudy

import (
	"fmt"
	"math"
	"sort"

	"footing/internal/num"
	"footing/meta"
)

// RankCorrelation is the rank correlation of (y - mean)/sqrt(v - 1/sum w) with v (Begg & Mazumdar 1994): Kendall's tau-b, with the tie-corrected normal p and no continuity correction. Differences below 1e-12 of the
// scale of the data are ties.
func RankCorrelation(d meta.Data) Test {
	k := d.K()
	if k < 3 {
		return Test{Why: fmt.Sprintf("needs at least 3 studies; there are %d", k)}
	}
	mean := d.MeanAt(0)
	shared := mean.StandardError * mean.StandardError
	x, y := make([]float64, k), append([]float64{}, d.V...)
	for i := range x {
		left := d.V[i] - shared
		if !(left > 0) {
			return Test{Why: "one study carries nearly all the weight, so that its own residual can't be standardized"}
		}
		x[i] = (d.Y[i] - mean.Estimate) / math.Sqrt(left)
	}
	s, tiesX, tiesY := concordance(x, y)
	n := float64(k)
	pairs := n * (n - 1) / 2
	t1, u1, tv, uv, t3, u3 := 0.0, 0.0, 0.0, 0.0, 0.0, 0.0
	for _, t := range tiesX {
		t1, tv, t3 = t1+t*(t-1), tv+t*(t-1)*(2*t+5), t3+t*(t-1)*(t-2)
	}
	for _, u := range tiesY {
		u1, uv, u3 = u1+u*(u-1), uv+u*(u-1)*(2*u+5), u3+u*(u-1)*(u-2)
	}
	bottom := math.Sqrt((pairs - t1/2) * (pairs - u1/2))
	variance := (n*(n-1)*(2*n+5)-tv-uv)/18 + t3*u3/(9*n*(n-1)*(n-2)) + t1*u1/(2*n*(n-1))
	if !(bottom > 0) || !(variance > 0) {
		return Test{Why: "all studies are tied"}
	}
	z := s / math.Sqrt(variance)
	return Test{Statistic: z, DF: math.Inf(1), P: 2 * num.NormalSurvival(math.Abs(z)), Figures: map[string]float64{"tau": s / bottom}, Available: true}
}

// concordance is Kendall's S and the sizes of the groups of ties in either variable.
func concordance(x, y []float64) (s float64, tiesX, tiesY []float64) {
	tolX, tolY := tieWidth(x), tieWidth(y)
	for i := range x {
		for j := i + 1; j < len(x); j++ {
			dx, dy := x[i]-x[j], y[i]-y[j]
			if math.Abs(dx) <= tolX || math.Abs(dy) <= tolY {
				continue
			}
			if (dx > 0) == (dy > 0) {
				s++
			} else {
				s--
			}
		}
	}
	return s, tieGroups(x, tolX), tieGroups(y, tolY)
}

func tieWidth(x []float64) float64 {
	scale := 0.0
	for _, v := range x {
		scale = math.Max(scale, math.Abs(v))
	}
	return 1e-12 * scale
}

func tieGroups(x []float64, tolerance float64) []float64 {
	sorted := append([]float64{}, x...)
	sort.Float64s(sorted)
	var out []float64
	for i := 0; i < len(sorted); {
		j := i
		for j+1 < len(sorted) && sorted[j+1]-sorted[i] <= tolerance {
			j++
		}
		if j > i {
			out = append(out, float64(j-i+1))
		}
		i = j + 1
	}
	return out
}
