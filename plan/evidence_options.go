package plan

import (
	"fmt"

	"footing/internal/finding"
	"footing/meta/effect"
)

// effectOptions turns what the plan says about its evidence into the options of the routes.
func (f *File) effectOptions() (effect.Options, error) {
	var opt effect.Options
	var ps finding.Problems
	bad := func(key, what, mend string) {
		ps = append(ps, finding.Finding{Severity: finding.Error, Kind: "impossible-value", Place: f.At(key), What: key + ": " + what, Mend: mend})
	}
	e := &f.Evidence
	if e.HigherBetter != nil {
		opt.LowerBetter = !*e.HigherBetter
	}
	take := func(key string, a *Assumed, low, high float64) *float64 {
		if a == nil {
			return nil
		}
		if !(a.Value >= low && a.Value <= high) {
			bad(key, fmt.Sprintf("%v is not possible", a.Value), fmt.Sprintf("write a number from %v to %v", low, high))
			return nil
		}
		v := a.Value
		return &v
	}
	opt.PrePostR = take("evidence: pre-post correlation", e.PrePostR, -0.999, 0.999)
	opt.ICC = take("evidence: intracluster correlation", e.ICC, 0, 0.999)
	if r := take("evidence: reliability", e.Reliability, 0.001, 1); r != nil {
		opt.Reliability = *r
	}
	switch v := effect.SMDVariance(foldWords(f.Pool.Variance)); v {
	case "", effect.VarianceAtG, effect.VarianceJSquared, effect.VarianceUnbiased:
		opt.SMDVariance = v
	default:
		bad("pool: variance", fmt.Sprintf("%q is none of the choices", f.Pool.Variance), fmt.Sprintf("write %s, %s or %s", effect.VarianceAtG, effect.VarianceJSquared, effect.VarianceUnbiased))
	}
	if len(ps) > 0 {
		return opt, ps
	}
	return opt, nil
}
