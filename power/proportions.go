package power

import (
	"math"

	"footing/internal/num"
)

// TreatedRisk is the risk in the treatment group that an effect makes of a control risk. inside is false where the effect leads out of 0..1, as a risk ratio or a
// difference can; the risk is then cut just inside.
func TreatedRisk(m Measure, effect, control float64) (risk float64, inside bool) {
	switch m {
	case LogRiskRatio:
		risk = control * math.Exp(effect)
	case RiskDifference:
		risk = control + effect
	default:
		odds := control / (1 - control) * math.Exp(effect)
		risk = odds / (1 + odds)
		if math.IsInf(odds, 1) {
			risk = 1
		}
	}
	const edge = 1e-9
	switch {
	case risk <= edge:
		return edge, risk > 0
	case risk >= 1-edge:
		return 1 - edge, risk < 1
	}
	return risk, true
}

// EffectOf is the effect that two risks have on a measure.
func EffectOf(m Measure, treated, control float64) float64 {
	switch m {
	case LogRiskRatio:
		return math.Log(treated / control)
	case RiskDifference:
		return treated - control
	}
	return math.Log(treated/(1-treated)) - math.Log(control/(1-control))
}

// proportions is what both tests of two proportions share.
type proportions struct{ s Study }

func (p proportions) Groups(n int) []int { return allocated(n, p.s.Allocation.Ratio()) }

func (p proportions) treated(effect float64) float64 {
	r, _ := TreatedRisk(p.s.Measure, effect, p.s.ControlRisk)
	return r
}

// Guess is the normal-theory size with the pooled variance under no effect.
func (p proportions) Guess(effect, target float64) float64 {
	a, c := p.treated(effect), p.s.ControlRisk
	k := p.s.Allocation.Ratio()
	mean := (a + k*c) / (1 + k)
	z := num.NormalQuantileUpper(tailAlpha(p.s.Sides, p.s.Alpha))*math.Sqrt(mean*(1-mean)*(1+1/k)) + num.NormalQuantile(target)*math.Sqrt(a*(1-a)+c*(1-c)/k)
	return z * z / ((a - c) * (a - c))
}

// StandardError is Woolf's for the log odds ratio, Katz's for the log risk ratio, the unpooled one for the difference.
func (p proportions) StandardError(effect float64, n int) float64 {
	g := p.Groups(n)
	a, c, n1, n2 := p.treated(effect), p.s.ControlRisk, float64(g[0]), float64(g[1])
	switch p.s.Measure {
	case LogRiskRatio:
		return math.Sqrt((1-a)/(a*n1) + (1-c)/(c*n2))
	case RiskDifference:
		return math.Sqrt(a*(1-a)/n1 + c*(1-c)/n2)
	}
	return math.Sqrt(1/(n1*a*(1-a)) + 1/(n2*c*(1-c)))
}

// Critical is the smallest effect towards sign at which the pooled z test of the two observed risks, the control's as planned, is significant.
func (p proportions) Critical(sign float64, n int) float64 {
	g := p.Groups(n)
	c, n1, n2 := p.s.ControlRisk, float64(g[0]), float64(g[1])
	z := num.NormalQuantileUpper(tailAlpha(p.s.Sides, p.s.Alpha))
	gap := func(a float64) float64 {
		mean := (n1*a + n2*c) / (n1 + n2)
		return math.Abs(a-c) - z*math.Sqrt(mean*(1-mean)*(1/n1+1/n2))
	}
	far := 1 - 1e-12
	if sign < 0 {
		far = 1e-12
	}
	if gap(far) < 0 {
		return math.NaN()
	}
	r := num.Root(gap, c, far, num.RootOptions{})
	return EffectOf(p.s.Measure, r.X, c)
}

// pooledZ compares two proportions by the z test with the pooled variance under no effect and the unpooled one under the effect. A normal approximation, named so.
type pooledZ struct{ proportions }

func newPooledZ(s Study) (Design, error) { return pooledZ{proportions{s}}, nil }

func (p pooledZ) Info() Info {
	return Info{Name: "pooled-z", Words: "z test of two proportions, pooled variance", Method: "normal approximation", Reference: "Fleiss, Levin & Paik 2003, ch. 4",
		MinN: minTwo(p.s, 2), Sides: p.s.Sides, Alpha: p.s.Alpha, Exact: true, Try: tryBinary(p.s.Measure)}
}

func tryBinary(m Measure) []float64 {
	if m == RiskDifference {
		return []float64{-0.15, -0.05, 0.05, 0.15}
	}
	return []float64{-0.7, -0.3, 0.3, 0.7}
}

func (p pooledZ) Power(effect float64, n int) Rejections {
	g := p.Groups(n)
	return p.at(effect, float64(g[0]), float64(g[1]))
}

func (p pooledZ) at(effect, n1, n2 float64) Rejections {
	a, c := p.treated(effect), p.s.ControlRisk
	mean := (n1*a + n2*c) / (n1 + n2)
	under0 := math.Sqrt(mean * (1 - mean) * (1/n1 + 1/n2))
	under1 := math.Sqrt(a*(1-a)/n1 + c*(1-c)/n2)
	z := num.NormalQuantileUpper(tailAlpha(p.s.Sides, p.s.Alpha))
	return Rejections{Above: num.NormalSurvival((z*under0 - (a - c)) / under1), Below: num.NormalCDF((-z*under0 - (a - c)) / under1), OneSided: p.s.Sides == 1}
}

func (p pooledZ) Continuous(effect, n float64) (Rejections, bool) {
	return p.at(effect, n, n*p.s.Allocation.Ratio()), true
}
