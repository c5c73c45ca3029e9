package plan

import (
	"fmt"
	"math"

	"footing/plan/choices"
	"footing/plan/result"
	"footing/power"
)

// resize sizes the target scenario under other settings: n for the target power, and the power that the chosen n would have.
func (s *sizer) resize(set settings) (n *result.N, atChosen *float64, why string) {
	sc, _ := s.targetCase()
	d, unit, err := s.resolve(set)
	if err != nil {
		return nil, nil, err.Error()
	}
	if why = s.impossible(set, sc.Effect); why != "" {
		return nil, nil, why
	}
	z, err := power.WholeSizeFor(d, sc.Effect/unit, set.target)
	if err != nil {
		return nil, nil, err.Error()
	}
	if ch := s.out.Chosen; ch != nil {
		atChosen = number(d.Power(sc.Effect/unit, max(ch.N.Groups[0], d.Info().MinN)).Any())
	}
	return nOf(z.Groups), atChosen, ""
}

// sensitivity sizes the target scenario at both ends of every assumption's interval.
func (s *sizer) sensitivity() {
	if s.out.Chosen == nil {
		return
	}
	for _, a := range s.out.Study.Assumptions {
		if a.Low == nil || a.High == nil {
			continue
		}
		for _, v := range []float64{*a.Low, *a.High} {
			set := s.set
			switch a.Name {
			case "standard deviation":
				if s.info.Name == "standardized-mean-difference" {
					continue // it only translates into natural units
				}
				set.sd = v
			case "control risk":
				set.study.ControlRisk = v
			case "baseline correlation":
				set.study.BaselineCorrelation = v
			case "dropout":
				set.dropout = v
			default:
				continue
			}
			n, at, why := s.resize(set)
			row := result.Sensitivity{Assumption: a.Name, Value: plainDecimal(v), N: n, PowerAtChosen: at, Why: why}
			if n != nil {
				row.ToEnrol = enrolled(n.Groups, set.dropout)
				row.Cost = s.cost(row.ToEnrol)
				row.OverBudget = s.overBudget(row.Cost)
			}
			s.out.Sensitivity = append(s.out.Sensitivity, row)
		}
	}
}

// levers sizes the target scenario with one thing changed at a time, and says what each asks in return.
func (s *sizer) levers() {
	ch := s.out.Chosen
	if ch == nil {
		return
	}
	_, c := s.targetCase()
	now := c.N.Groups[0]
	add := func(words, price string, set settings) {
		n, _, why := s.resize(set)
		l := result.Lever{Words: words, Price: price, N: n, Why: why}
		if n != nil {
			l.Change = n.Groups[0] - now
			l.ToEnrol = enrolled(n.Groups, set.dropout)
			l.Cost = s.cost(l.ToEnrol)
		}
		s.out.Levers = append(s.out.Levers, l)
	}
	set := s.set
	if set.study.Sides == 2 {
		set.study.Sides = 1
		add(fmt.Sprintf("one-sided %s", plainDecimal(set.study.Alpha)), "harm can't be shown, and alpha on the one side is doubled", set)
	}
	set = s.set
	if set.study.Outcome == power.Continuous {
		if r := set.study.BaselineCorrelation; r != 0 {
			set.study.BaselineCorrelation = 0
			add("no start-of-study measure", fmt.Sprintf("what r = %s saves now", plainDecimal(r)), set)
			two := 2 * r * r / (1 + math.Abs(r)) // mean of two start measures that correlate r with each other and with the outcome
			set.study.BaselineCorrelation = math.Copysign(math.Sqrt(two), r)
			add(fmt.Sprintf("two start measures (r = %s)", plainDecimal(math.Round(100*set.study.BaselineCorrelation)/100)), "one more visit; both measures correlate as much with each other as with the outcome", set)
		} else {
			set.study.BaselineCorrelation = 0.5
			add("a start-of-study measure (r = .5)", "one measurement at the start; r has to be known", set)
		}
	}
	set = s.set
	if a := set.study.Allocation; a.Treatment != a.Control {
		set.study.Allocation = power.Allocation{Treatment: 1, Control: 1}
		add("equal groups", "as many in each group", set)
	} else {
		set.study.Allocation = power.Allocation{Treatment: 2, Control: 1}
		add("allocation 2:1", "more people in all, more of them treated", set)
	}
	set = s.set
	if set.dropout > 0 {
		set.dropout /= 2
		add(fmt.Sprintf("half as many leaving (%s)", percentOf(set.dropout)), "closer follow-up", set)
	}
	s.out.Levers = choices.Sort(s.out.Levers)
}
