package plan

import (
	"fmt"
	"math"
	"strconv"

	"footing/meta/effect"
	"footing/plan/result"
	"footing/power"
)

// cases sizes the study at every scenario.
func (s *sizer) cases() {
	s.out.Cases = []result.Case{}
	for _, sc := range s.built.Scenarios {
		c := s.sizeCase(sc.Effect, s.set)
		c.Scenario = sc.Name
		if sc.NoSize != "" {
			c.Why = sc.NoSize
		}
		s.out.Cases = append(s.out.Cases, c)
	}
}

// sizeCase sizes the study at one effect of the analysed scale.
func (s *sizer) sizeCase(x float64, set settings) result.Case {
	c := result.Case{Effect: x, Shown: effect.Scale(s.info.Name).ToShown(x)}
	if set.study.Outcome == power.Binary {
		control := set.study.ControlRisk
		treated, _ := power.TreatedRisk(set.study.Measure, x, control)
		c.ControlRisk, c.TreatedRisk = &control, number(treated)
	}
	if s.sign*x <= 0 {
		c.Why = "at or beyond no effect: no size can show it"
		return c
	}
	if c.Why = s.impossible(set, x); c.Why != "" {
		return c
	}
	sized, err := power.SizeFor(s.design, x/s.unit, set.target)
	if err != nil {
		c.Why = err.Error()
		return c
	}
	c.N, c.Power, c.ContinuousN = nOf(sized.Groups), number(sized.Power.Any()), number(sized.Continuous)
	c.ToEnrol = enrolled(sized.Groups, set.dropout)
	c.Cost = s.cost(c.ToEnrol)
	for _, other := range []struct {
		power float64
		at    **result.N
	}{{0.8, &c.At80}, {0.9, &c.At90}} {
		if other.power == set.target {
			*other.at = c.N
		} else if z, err := power.WholeSizeFor(s.design, x/s.unit, other.power); err == nil {
			*other.at = nOf(z.Groups)
		}
	}
	return c
}

// target is the scenario that the study is sized for.
func (s *sizer) targetCase() (result.Scenario, *result.Case) {
	for i, sc := range s.built.Scenarios {
		if sc.Target {
			return sc, &s.out.Cases[i]
		}
	}
	return result.Scenario{}, nil
}

// choose takes the size for the power target at the scenario that is sized for.
func (s *sizer) choose() {
	sc, c := s.targetCase()
	if c == nil || c.N == nil {
		s.out.Why = "no size exists for the scenario that the plan is sized for"
		if c != nil {
			s.out.Why = fmt.Sprintf("no size exists for %s (%.2f): %s", sc.Name, sc.Shown, c.Why)
		}
		return
	}
	s.out.Chosen = &result.Chosen{Scenario: sc.Name, ScenarioWhy: s.built.TargetWhy, Basis: "power"}
	s.take(c.N.Groups)
}

// take makes groups the chosen size.
func (s *sizer) take(groups []int) {
	ch := s.out.Chosen
	sc, _ := s.targetCase()
	ch.N, ch.ToEnrol = *nOf(groups), *enrolled(groups, s.set.dropout)
	ch.Power = s.design.Power(sc.Effect/s.unit, groups[0]).Any()
	ch.Cost = s.cost(&ch.ToEnrol)
	ch.OverBudget = s.overBudget(ch.Cost)
	if c := s.out.Study.Cost; c != nil && c.AtMost != nil && c.PerParticipant > 0 {
		most := int(math.Max(0, math.Floor((*c.AtMost-c.Fixed)/c.PerParticipant+1e-9)))
		ch.AffordableToEnrol = &most
	}
	ch.Trail = s.trail(sc)
}

// trail runs from the size without any design help to the number enrolled, one line for each step.
func (s *sizer) trail(sc result.Scenario) []result.TrailStep {
	ch := s.out.Chosen
	sides := "two-sided"
	if s.set.study.Sides == 1 {
		sides = "one-sided"
	}
	first := fmt.Sprintf("%s %s, power %s", sides, plainDecimal(s.set.study.Alpha), percentOf(s.set.target))
	out := []result.TrailStep{}
	_, c := s.targetCase()
	byPower := *c.N
	if r := s.set.study.BaselineCorrelation; r != 0 {
		plain := s.set
		plain.study.BaselineCorrelation = 0
		if d, unit, err := s.resolve(plain); err == nil {
			if z, err := power.WholeSizeFor(d, sc.Effect/unit, s.set.target); err == nil {
				out = append(out, result.TrailStep{Words: "needed at the end", N: *nOf(z.Groups), Source: first})
			}
		}
		out = append(out, result.TrailStep{Words: fmt.Sprintf("with the start-of-study measure (r = %s)", plainDecimal(r)), N: byPower, Source: s.sourceOf("baseline correlation")})
	} else {
		out = append(out, result.TrailStep{Words: "needed at the end", N: byPower, Source: first})
	}
	if ch.Basis == "assurance" {
		out = append(out, result.TrailStep{Words: "for the assurance target", N: ch.N, Source: fmt.Sprintf("assurance %s over the %s distribution", percentOf(*s.file.Target.Assurance), s.usedWords())})
	}
	if d := s.set.dropout; d > 0 {
		out = append(out, result.TrailStep{Words: fmt.Sprintf("to allow for %s leaving", percentOf(d)), N: ch.ToEnrol, Source: s.sourceOf("dropout")})
	}
	return out
}

// sourceOf is where an assumption of the study comes from.
func (s *sizer) sourceOf(name string) string {
	for _, a := range s.out.Study.Assumptions {
		if a.Name != name {
			continue
		}
		source := a.Source
		if a.Assumed {
			source = "assumed, no source"
		}
		if a.Low != nil && a.High != nil {
			source += fmt.Sprintf(", range %s to %s", plainDecimal(*a.Low), plainDecimal(*a.High))
		}
		return source
	}
	return "assumed, no source"
}

// plainDecimal writes a number as papers do: .05 for 0.05.
func plainDecimal(x float64) string {
	t := strconv.FormatFloat(x, 'g', 4, 64)
	if len(t) > 1 && t[0] == '0' && t[1] == '.' {
		return t[1:]
	}
	return t
}

func percentOf(p float64) string { return strconv.FormatFloat(100*p, 'g', 4, 64) + "%" }

func (s *sizer) usedWords() string {
	if s.built.UsesAdjusted {
		return "adjusted"
	}
	return "unadjusted"
}

// atChosen fills in what the chosen size means at every scenario.
func (s *sizer) atChosen() {
	ch := s.out.Chosen
	if ch == nil {
		return
	}
	n := ch.N.Groups[0]
	for i := range s.out.Cases {
		c := &s.out.Cases[i]
		x := c.Effect / s.unit
		if s.impossible(s.set, c.Effect) != "" {
			continue
		}
		r := s.design.Power(x, n)
		// Power in the intended direction is what success is; at an effect beyond none it is the chance of a wrong claim.
		c.PowerAtChosen = number(r.Any())
		if s.sign*x <= 0 {
			c.PowerAtChosen = number(r.Toward(s.sign))
			continue
		}
		wrong := r.Wrong(s.sign)
		c.WrongSide = number(wrong)
		c.TypeS = number(wrong / r.Any())
		se := s.design.StandardError(x, n)
		critical := math.Abs(s.design.Critical(s.sign, n)) / s.design.StandardError(0, n)
		if _, _, m := power.SignMagnitude(x, se, critical, s.set.study.Sides); !math.IsNaN(m) {
			c.TypeM = number(m)
		}
	}
	if x := s.design.Critical(s.sign, n); !math.IsNaN(x) {
		ch.SmallestSignificant = number(x * s.unit)
	}
	if x, ok := power.Detectable(s.design, s.sign, n, s.set.target); ok {
		ch.SmallestDetectable = number(x * s.unit)
	}
}
