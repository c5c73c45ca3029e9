package effect

import "math"

// Bounds are the estimates that a record without a usable figure could at most stand for: "p < .001" at p = .001 (Low and High the same), "n.s." anywhere between both edges of significance
// (after Bushman & Wang 1996). OK is false where the record gives no bound either.
type Bounds struct {
	Low, High Estimate // Low is the one further against the treatment
	OK        bool
	Why       string
}

// BoundsOf gives the bounds of a record that Compute found no estimate for. alpha is the level at which "n.s." was judged, two-sided; 0 means .05.
func BoundsOf(study string, r Reported, opt Options, alpha float64) Bounds {
	opt = opt.withDefaults()
	if alpha == 0 {
		alpha = 0.05
	}
	exact := r
	exact.T, exact.F = Figure{}, Figure{}
	switch {
	case r.P.Given && r.P.Bound == Below:
		exact.P.Bound = Exact
		if o := Compute(study, exact, opt); o.Best != nil {
			return Bounds{Low: *o.Best, High: *o.Best, OK: true, Why: "p " + r.P.text() + " at its bound"}
		}
		return Bounds{Why: "p " + r.P.text() + " without a direction or the people in both groups"}
	case r.NotSignificant || r.P.Given && r.P.Bound == Above:
		level := alpha
		if r.P.Given && r.P.Bound == Above {
			level = r.P.Value
		}
		exact.NotSignificant = false
		exact.P = Of(level)
		var edges [2]*Estimate
		for i, d := range []Direction{FavoursControl, FavoursTreatment} {
			exact.Direction = d
			if o := Compute(study, exact, opt); o.Best != nil {
				edges[i] = o.Best
			}
		}
		if edges[0] == nil || edges[1] == nil {
			return Bounds{Why: "not significant, without the people in both groups"}
		}
		return Bounds{Low: *edges[0], High: *edges[1], OK: true, Why: "not significant: anywhere between both edges of significance"}
	}
	return Bounds{Why: "the row has no figure at all"}
}

// Inside is an estimate at a share of the way from Low to High, 0 to 1.
func (b Bounds) Inside(share float64) Estimate {
	e := b.Low
	e.Value = b.Low.Value + share*(b.High.Value-b.Low.Value)
	e.Variance = math.Max(b.Low.Variance, b.High.Variance)
	return e
}
