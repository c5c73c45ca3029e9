package plan

import (
	"fmt"
	"strconv"

	"footing/meta/effect"
	"footing/plan/result"
	"footing/power"
)

// BareSpec is a planned study without evidence, as `footing size` takes it. The zero value of each field means the default of a plan file.
type BareSpec struct {
	Scale       string    // "" is a standardized mean difference, or an odds ratio for a binary outcome
	Outcome     string    // "" follows from the scale
	Arrangement string    // "" is parallel
	Test        string    // "" lets the outcome choose
	Effects     []float64 // as people read them: a ratio, not its logarithm
	N           int       // first group; above 0 asks for the power of this size in place of a size
	Power       float64   // 0 is .80
	Alpha       float64   // 0 is .05
	Sides       int       // 0 is 2
	Allocation  string    // "" is 1:1, treatment first
	ControlRisk float64
	SD          float64 // only for a mean difference in natural units
	BaselineR   float64
	Dropout     float64
}

// SizeBare sizes a planned study at given effects, or gives the power of a given size.
func SizeBare(b BareSpec) (*result.Size, error) {
	f := &File{}
	if b.Outcome == "binary" && b.Scale == "" {
		b.Scale = string(effect.LogOddsRatio)
	}
	if b.Scale == "" {
		b.Scale = string(effect.StandardizedMeanDifference)
	}
	scale, err := effect.ParseScale(b.Scale)
	if err != nil {
		return nil, planProblem(f, "scale-unknown", err.Error(), "use standardized-mean-difference, mean-difference, odds-ratio, risk-ratio or risk-difference")
	}
	if b.Outcome == "" {
		b.Outcome = outcomeOf(scale)
	}
	f.Pool.Scale = string(scale)
	f.Study = Study{Outcome: b.Outcome, Arrangement: b.Arrangement, Aim: "superiority", Allocation: b.Allocation, Test: b.Test}
	if b.Arrangement == "" {
		f.Study.Arrangement = defaultArrangement
	}
	if b.Sides == 1 {
		f.Study.Sides = "one"
	}
	for _, x := range []struct {
		value float64
		at    **float64
		low   float64
		high  float64
		name  string
	}{{b.Alpha, &f.Study.Alpha, 0, 1, "alpha"}, {b.Power, &f.Target.Power, 0, 1, "power"}} {
		if x.value == 0 {
			continue
		}
		if !(x.value > x.low && x.value < x.high) {
			return nil, planProblem(f, "out-of-range", fmt.Sprintf("%s must lie between %g and %g; it is %g", x.name, x.low, x.high, x.value), "correct it")
		}
		v := x.value
		*x.at = &v
	}
	if b.Dropout < 0 || b.Dropout >= 1 {
		return nil, planProblem(f, "out-of-range", fmt.Sprintf("dropout must be a share from 0 to below 1; it is %g", b.Dropout), "correct it")
	}
	if b.Sides < 0 || b.Sides > 2 {
		return nil, planProblem(f, "out-of-range", fmt.Sprintf("a test has one side or two, not %d", b.Sides), "correct it")
	}
	assume := func(v float64) *Assumed {
		if v == 0 {
			return nil
		}
		return &Assumed{Value: v}
	}
	f.Study.SD, f.Study.ControlRisk, f.Study.BaselineCorrelation, f.Study.Dropout = assume(b.SD), assume(b.ControlRisk), assume(b.BaselineR), assume(b.Dropout)
	s, err := newSizer(f, scaleInfo(scale, f.Evidence), nil)
	if err != nil {
		return nil, err
	}
	s.out.Tool = ThisTool()
	s.out.Cases = []result.Case{}
	s.built = &BuiltRange{Range: &result.Range{}}
	for _, shown := range b.Effects {
		x, err := scale.FromShown(shown)
		if err != nil {
			return nil, planProblem(f, "effect-off-scale", err.Error(), "give the effect as a "+scale.Words())
		}
		s.sign = 1
		if x < 0 {
			s.sign = -1
		}
		c := s.bareCase(x, b.N)
		s.out.Cases = append(s.out.Cases, c)
		if c.N != nil {
			s.built.Scenarios = append(s.built.Scenarios, result.Scenario{Name: "effect " + strconv.FormatFloat(shown, 'g', 6, 64), Effect: x})
		}
	}
	s.bareCurves()
	return s.out, nil
}

// bareCase is one effect: its size, or the power of a size.
func (s *sizer) bareCase(x float64, n int) result.Case {
	if n <= 0 {
		return s.sizeCase(x, s.set)
	}
	c := result.Case{Effect: x, Shown: effect.Scale(s.info.Name).ToShown(x)}
	if least := s.design.Info().MinN; n < least {
		c.Why = fmt.Sprintf("this test needs at least %d in the first group", least)
		return c
	}
	if c.Why = s.impossible(s.set, x); c.Why != "" {
		return c
	}
	groups := s.design.Groups(n)
	c.N, c.ToEnrol, c.Power = nOf(groups), enrolled(groups, s.set.dropout), number(s.design.Power(x/s.unit, n).Any())
	if s.set.study.Outcome == power.Binary {
		control := s.set.study.ControlRisk
		treated, _ := power.TreatedRisk(s.set.study.Measure, x, control)
		c.ControlRisk, c.TreatedRisk = &control, number(treated)
	}
	return c
}

// bareCurves draws power over n for up to four effects.
func (s *sizer) bareCurves() {
	if len(s.out.Cases) == 0 {
		return
	}
	most := 0
	for _, c := range s.out.Cases {
		if c.N != nil {
			most = max(most, c.N.Groups[0]*3/2)
		}
	}
	least := s.design.Info().MinN
	if most <= least+4 || most > 200000 {
		return
	}
	for i, sc := range s.built.Scenarios {
		if i == 4 {
			break
		}
		curve := result.PowerCurve{Scenario: sc.Name}
		const points = 31
		before := -1
		for k := 0; k < points; k++ {
			n := least + (most-least)*k/(points-1)
			if n != before {
				curve.Points = append(curve.Points, result.PowerPoint{N: n, Total: nOf(s.design.Groups(n)).Total, Power: s.design.Power(sc.Effect/s.unit, n).Any()})
			}
			before = n
		}
		s.out.Curves = append(s.out.Curves, curve)
	}
}
