package smallstudy

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta"
)

// WorstCaseResult is the mean of the studies that speak for nothing, and how strong a selection would have to be.
type WorstCaseResult struct {
	Interval    meta.Interval // of the non-affirmative studies alone
	Affirmative int
	// Ratio is how many times more likely an affirmative result must be to be published than another one for the corrected mean to be the target; 0 where no ratio does.
	Ratio     float64
	RatioWhy  string // why there is no ratio
	Available bool
	Why       string
}

// WorstCase pools the studies that are not affirmative (two-sided p < .05 in the favoured direction) by DerSimonian-Laird and a normal interval: what is left under
// the strongest selection. The ratio follows from weights 1/(v + tau2), those of the non-affirmative studies times the ratio (Mathur & VanderWeele 2020, J R Stat Soc C
// 69:1091). target is on the analysed scale.
func WorstCase(d meta.Data, favours, target, level float64) WorstCaseResult {
	z := num.NormalQuantileUpper(0.025)
	dl, _ := meta.EstimatorByName("")
	tau2 := dl.Estimate(d).Value
	var rest meta.Data
	var wa, ya, wn, yn num.Accumulator
	out := WorstCaseResult{}
	for i, v := range d.V {
		w := 1 / (v + tau2)
		if favours*d.Y[i]/math.Sqrt(v) > z {
			out.Affirmative++
			wa.Add(w)
			ya.Add(w * d.Y[i])
			continue
		}
		wn.Add(w)
		yn.Add(w * d.Y[i])
		rest.Y, rest.V = append(rest.Y, d.Y[i]), append(rest.V, v)
	}
	if rest.K() == 0 {
		out.Why = fmt.Sprintf("all %d studies are significant in the favoured direction, so that nothing is known of the others", d.K())
		return out
	}
	out.Available = true
	out.Interval = rest.Interval(meta.Normal, dl.Estimate(rest).Value, level)
	out.Interval.Method = "worst-case"
	if out.Affirmative == 0 {
		out.RatioWhy = "no study is significant in the favoured direction"
		return out
	}
	ma, mn := ya.Value()/wa.Value(), yn.Value()/wn.Value()
	switch top, bottom := favours*(ma-target), favours*(target-mn); {
	case bottom <= 0:
		out.RatioWhy = "no selection of significant results brings the mean there: the other studies alone lie beyond it"
	case top <= 0:
		out.RatioWhy = "the significant studies themselves do not reach it"
	default:
		out.Ratio = wa.Value() * top / (wn.Value() * bottom)
		if out.Ratio < 1 {
			out.Ratio, out.RatioWhy = 0, "the mean does not reach it even without selection"
		}
	}
	return out
}
