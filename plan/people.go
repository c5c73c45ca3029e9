package plan

import (
	"math"

	"footing/internal/num"
	"footing/meta/effect"
	"footing/plan/result"
)

// sayInPeople says each scenario of a standardized mean difference d as people: the chance that one person picked from
// the treatment group does better than one from the control group, Phi(d / sqrt 2) for normal outcomes of equal
// variance, d counted in the favoured direction (McGraw & Wong 1992, Psychological Bulletin 111:361-365).
func sayInPeople(r *result.Range, info result.ScaleInfo) {
	if r == nil || effect.Scale(info.Name) != effect.StandardizedMeanDifference {
		return
	}
	for i := range r.Scenarios {
		d := r.Scenarios[i].Effect
		if !info.HigherBetter {
			d = -d
		}
		share := num.NormalCDF(d / math.Sqrt2)
		r.Scenarios[i].InPeople = &share
	}
}
