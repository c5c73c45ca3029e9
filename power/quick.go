package power

import (
	"math"

	"footing/internal/num"
)

// quick is offered by designs that can give power at many effects for one n faster than one by one. Its results agree with Power to about 1e-12 absolute; small tails lose
// their relative accuracy.
type quick interface {
	// Quick gives both directions; with only +1 or -1 the other one is left at 0, which is faster.
	Quick(n, only int) func(effect float64) Rejections
}

// Quick gives power at many effects for one n: a function that is cheap to call again and again, accurate to about 1e-12 absolute.
func Quick(d Design, n int) func(effect float64) Rejections { return quickly(d, n, 0) }

func quickly(d Design, n, only int) func(effect float64) Rejections {
	if q, ok := d.(quick); ok {
		return q.Quick(n, only)
	}
	return func(effect float64) Rejections { return d.Power(effect, n) }
}

// mixedT is the t test's power as a mean over the chi variable of its denominator: P(T > c) = E[Phi(delta - c S)]. The nodes depend on the degrees of freedom and the
// critical value alone. roots and weights further average over a factor of the noncentrality.
func mixedT(critical, df float64, sides, only int, roots, weights []float64) func(delta float64) Rejections {
	slope := critical
	if df < 30 {
		slope = math.Max(slope, 8) // the chi variable runs far enough for the step at large effects to be steep
	}
	s, w := num.ChiRule(df, slope)
	return func(delta float64) Rejections {
		r := Rejections{OneSided: sides == 1}
		for j, root := range roots {
			d := delta * root
			above, below := 0.0, 0.0
			for i, x := range s {
				cut := critical * x
				if only >= 0 && d > cut-far {
					above += w[i] * upTo(d-cut)
				}
				if only <= 0 && d < far-cut {
					below += w[i] * upTo(-d-cut)
				}
			}
			r.Above += weights[j] * above
			r.Below += weights[j] * below
		}
		r.Above, r.Below = math.Min(1, r.Above), math.Min(1, r.Below)
		return r
	}
}

// far is where a normal tail is below 2e-13 and counts as nothing.
const far = 7.3

// upTo is the normal distribution function, 1 beyond far.
func upTo(z float64) float64 {
	if z > far {
		return 1
	}
	return math.Erfc(-z/math.Sqrt2) / 2
}

var one = []float64{1}

// Quick implements quick.
func (t twoSampleT) Quick(n, only int) func(float64) Rejections {
	g := t.Groups(n)
	n1, n2 := float64(g[0]), float64(g[1])
	df := n1 + n2 - 2
	f := mixedT(num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), df), df, t.s.Sides, only, one, one)
	scale := math.Sqrt(n1 * n2 / (n1 + n2))
	return func(effect float64) Rejections { return f(effect * scale) }
}

// Quick implements quick.
func (t oneSampleT) Quick(n, only int) func(float64) Rejections {
	df := float64(n - 1)
	f := mixedT(num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), df), df, t.s.Sides, only, one, one)
	scale := math.Sqrt(float64(n))
	return func(effect float64) Rejections { return f(effect * scale) }
}

// Quick implements quick.
func (t baselineT) Quick(n, only int) func(float64) Rejections {
	g := t.Groups(n)
	n1, n2 := float64(g[0]), float64(g[1])
	df := n1 + n2 - 3
	roots, weights := one, one
	switch t.s.BaselineForm {
	case "factor-only":
		df++
	case "":
		rule := t.rule(n1 + n2)
		roots, weights = rule.root, rule.weight
	}
	f := mixedT(num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), df), df, t.s.Sides, only, roots, weights)
	scale := math.Sqrt(n1 * n2 / (n1 + n2) / t.residual())
	return func(effect float64) Rejections { return f(effect * scale) }
}
