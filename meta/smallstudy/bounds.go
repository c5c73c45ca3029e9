package smallstudy

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta"
)

// WorstCase is the mean of the studies that are not significant in the favoured direction alone: what is left if all others owe their publication to their result (Mathur & VanderWeele 2020). Weights are
// 1/(v + tau2) with the given tau2 of all studies.
func WorstCase(d meta.Data, sign, tau2, level float64) Estimate {
	m := newModel(d, sign)
	var left meta.Data
	for i, seen := range m.seen {
		if !seen {
			left.Y, left.V = append(left.Y, d.Y[i]), append(left.V, d.V[i])
		}
	}
	if left.K() == 0 {
		return Estimate{Why: "all studies are significant in the favoured direction"}
	}
	mean := left.MeanAt(tau2)
	return newEstimate(mean.Estimate, mean.StandardError, math.Inf(1), level, left.K())
}

// SelectionRatio is how many times likelier a result that is significant in the favoured direction would have to be published than another to bring the mean to target (Mathur & VanderWeele 2020, eq. 1, with weights 1/(v + tau2)):
// infinite selection is the worst case. ok is false where even that leaves more than target, or where the mean is there already.
func SelectionRatio(d meta.Data, sign, tau2, target float64) (ratio float64, ok bool, why string) {
	m := newModel(d, sign)
	var above, below num.Accumulator
	for i, y := range m.y {
		w := 1 / (d.V[i] + tau2)
		if m.seen[i] {
			above.Add(w * (y - sign*target))
		} else {
			below.Add(w * (y - sign*target))
		}
	}
	switch a, b := above.Value(), below.Value(); {
	case a+b <= 0:
		return 1, false, "the mean is there without any selection"
	case b >= 0:
		return 0, false, "no selection however strong brings it there: the other studies alone show more"
	default:
		return a / -b, true, ""
	}
}

// ExcessSignificance compares the significant results (two-sided .05, either direction) with the number that the studies' power at the common-effect mean leads to expect: chi-square with 1 df (Ioannidis & Trikalinos 2007).
func ExcessSignificance(d meta.Data) Test {
	k := float64(d.K())
	if d.K() < 2 {
		return Test{Why: "needs at least 2 studies"}
	}
	mean := d.MeanAt(0).Estimate
	z := num.NormalQuantileUpper(0.025)
	observed, expected := 0.0, 0.0
	for i, y := range d.Y {
		s := math.Sqrt(d.V[i])
		if math.Abs(y) >= z*s {
			observed++
		}
		expected += num.NormalSurvival(z-mean/s) + num.NormalCDF(-z-mean/s)
	}
	gap := observed - expected
	x := gap*gap/expected + gap*gap/(k-expected)
	return Test{Statistic: x, DF: 1, P: num.ChiSquaredSurvival(x, 1), Figures: map[string]float64{"observed": observed, "expected": expected}, Available: true}
}

// FailSafeRosenthal is the number of unpublished studies averaging no effect that would bring Stouffer's combined test to one-sided .05 (Rosenthal 1979). History: it assumes that missing studies show nothing, and ignores how far studies
// differ.
func FailSafeRosenthal(d meta.Data, sign float64) float64 {
	var z num.Accumulator
	for i, y := range d.Y {
		z.Add(sign * y / math.Sqrt(d.V[i]))
	}
	c := num.NormalQuantileUpper(0.05)
	if z.Value() <= 0 {
		return 0
	}
	return math.Max(0, z.Value()*z.Value()/(c*c)-float64(d.K()))
}

// FailSafeOrwin is the number of studies of no effect that would bring the plain mean to target, which is nearer to no effect than the mean (Orwin 1983).
func FailSafeOrwin(d meta.Data, target float64) (float64, error) {
	mean := num.Sum(d.Y) / float64(d.K())
	if target == 0 || math.Abs(mean) < math.Abs(target) || (mean > 0) != (target > 0) {
		return 0, fmt.Errorf("the mean %.3g is not beyond the target %.3g", mean, target)
	}
	return float64(d.K()) * (mean - target) / target, nil
}
