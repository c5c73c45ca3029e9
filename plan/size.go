package plan

import (
	"fmt"
	"math"

	"footing/internal/finding"
	"footing/meta/effect"
	"footing/plan/result"
	"footing/power"
)

// SizeStudy sizes the planned study at every scenario of a range, chooses the size that the plan's targets ask for, and shows what it rests on. nuisance are values pooled
// from the evidence sheet. The error says what in the plan can't be sized at all.
func SizeStudy(f *File, info result.ScaleInfo, r *BuiltRange, nuisance map[string]Assumed) (*result.Size, error) {
	s, err := newSizer(f, info, nuisance)
	if err != nil {
		return nil, err
	}
	s.built = r
	s.cases()
	s.choose()
	s.assurance()
	s.atChosen()
	s.curves()
	s.sensitivity()
	s.levers()
	s.grid()
	return s.out, nil
}

// sizer sizes one planned study.
type sizer struct {
	file   *File
	info   result.ScaleInfo
	out    *result.Size
	built  *BuiltRange
	set    settings
	design power.Design
	sign   float64 // +1 where a larger effect favours the treatment
	// unit divides an effect of the analysed scale into one of the design: the SD for a difference in natural units, else 1.
	unit float64
	lean bool // only the size and its assurance, nothing that is drawn
}

// settings are the numbers of the planned study that a sensitivity run may exchange.
type settings struct {
	study   power.Study
	sd      float64 // 0 when not given
	dropout float64
	target  float64
}

func newSizer(f *File, info result.ScaleInfo, nuisance map[string]Assumed) (*sizer, error) {
	s := &sizer{file: f, info: info, sign: 1, out: &result.Size{Schema: "footing/size/1", Scale: info, Findings: []finding.Finding{}, Levers: []result.Lever{}, Sensitivity: []result.Sensitivity{}, Curves: []result.PowerCurve{}}}
	if !info.HigherBetter {
		s.sign = -1
	}
	if err := s.read(nuisance); err != nil {
		return nil, err
	}
	var err error
	if s.design, s.unit, err = s.resolve(s.set); err != nil {
		return nil, planProblem(f, "study-not-offered", "study: "+err.Error(), "change study: in the plan")
	}
	d := s.design.Info()
	s.out.Test = result.Test{Name: d.Name, Words: d.Words, Method: d.Method, Reference: d.Reference}
	return s, nil
}

// read takes the study's numbers from the plan and says what was assumed.
func (s *sizer) read(nuisance map[string]Assumed) error {
	f, st := s.file, s.file.Study
	planned := result.Planned{Outcome: st.Outcome, Arrangement: st.Arrangement, Aim: st.Aim, Groups: st.Groups, Estimand: estimand(st.Estimand), Assumptions: []result.Assumption{}}
	if len(planned.Groups) == 0 {
		planned.Groups = []string{"treatment", "control"}
	}
	allocation, err := power.ParseAllocation(st.Allocation)
	if err != nil {
		return planProblem(f, "allocation", "study: allocation: "+err.Error(), "correct it")
	}
	s.set = settings{target: defaultPower, study: power.Study{Outcome: power.Outcome(st.Outcome), Arrangement: power.Arrangement(st.Arrangement), Aim: st.Aim, Allocation: allocation, Test: st.Test, Alpha: defaultAlpha, Sides: 2, Measure: power.Measure(s.info.Name)}}
	if st.Alpha != nil {
		s.set.study.Alpha = *st.Alpha
	}
	if st.Sides == "one" {
		s.set.study.Sides = 1
	}
	if f.Target.Power != nil {
		s.set.target = *f.Target.Power
	}
	take := func(name string, a *Assumed) (float64, *float64, error) {
		if a == nil {
			return 0, nil, nil
		}
		v := *a
		if v.Pool != "" {
			p, ok := nuisance[v.Pool]
			if !ok {
				return 0, nil, &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: "nuisance-not-pooled", Place: finding.Place{File: f.Path, Line: a.Line, Column: a.Column},
					What: fmt.Sprintf("study: %s: the sheet has nothing from which %q could be pooled", name, v.Pool), Mend: "write the value itself, with its source"}}
			}
			p.Line, p.Column = a.Line, a.Column
			v = p
		}
		planned.Assumptions = append(planned.Assumptions, v.assumption(f, name))
		return v.Value, &v.Value, nil
	}
	if s.set.sd, planned.SD, err = take("standard deviation", st.SD); err != nil {
		return err
	}
	if s.set.study.ControlRisk, planned.ControlRisk, err = take("control risk", st.ControlRisk); err != nil {
		return err
	}
	if s.set.study.BaselineCorrelation, planned.BaselineR, err = take("baseline correlation", st.BaselineCorrelation); err != nil {
		return err
	}
	if s.set.dropout, _, err = take("dropout", st.Dropout); err != nil {
		return err
	}
	planned.Sides, planned.Alpha, planned.PowerTarget = s.set.study.Sides, s.set.study.Alpha, s.set.target
	planned.Allocation, planned.Dropout = allocation.String(), s.set.dropout
	if b := f.Target.Budget; b != nil {
		planned.Cost = &result.Cost{PerParticipant: b.PerParticipant, Fixed: b.Fixed, AtMost: b.AtMost, Currency: b.Currency}
	}
	s.out.Study = planned
	return nil
}

func estimand(m map[string]string) []result.NamedText {
	out := []result.NamedText{}
	for _, key := range []string{"population", "treatment", "endpoint", "intercurrent events", "summary"} {
		if v, ok := m[key]; ok {
			out = append(out, result.NamedText{Name: key, Text: v})
		}
	}
	return out
}

// resolve finds the design for some settings, and the unit that turns the evidence's effect into the design's.
func (s *sizer) resolve(set settings) (power.Design, float64, error) {
	unit := 1.0
	study := set.study
	name := effect.Scale(s.info.Name)
	switch outcomeOf(name) {
	case "continuous":
		if study.Outcome != power.Continuous {
			return nil, 0, fmt.Errorf("the effects are %ss, which belong to a continuous outcome, not to a %s one", s.info.Words, study.Outcome)
		}
		switch name {
		case effect.StandardizedMeanDifference:
		case effect.MeanDifference:
			if !(set.sd > 0) {
				return nil, 0, fmt.Errorf("effects in natural units need a standard deviation: a number, or {pool: control sd}")
			}
			unit = set.sd
		default:
			return nil, 0, fmt.Errorf("a %s does not lead to a sample size here; pool the sheet as a standardized-mean-difference or a mean-difference", s.info.Words)
		}
	case "binary":
		if study.Outcome != power.Binary {
			return nil, 0, fmt.Errorf("the effects are %ss, which belong to a binary outcome, not to a %s one", s.info.Words, study.Outcome)
		}
		if name == effect.LogitProportion {
			return nil, 0, fmt.Errorf("a proportion in one group is no effect of a treatment; give counts of both groups")
		}
		if study.ControlRisk == 0 {
			return nil, 0, fmt.Errorf("a binary outcome needs the risk in the control group: control risk: a number, or {pool: control risk}")
		}
	case "":
		if study.Outcome == power.Binary {
			return nil, 0, fmt.Errorf("effects as given can't be turned into two risks; name the scale in pool: scale: (odds-ratio, risk-ratio or risk-difference)")
		}
		if set.sd > 0 {
			unit = set.sd
		}
	default:
		return nil, 0, fmt.Errorf("a study of a %s is not sized here; a comparison of two means or two proportions is", s.info.Words)
	}
	d, err := study.Resolve()
	return d, unit, err
}

// effects divides a distribution's scale by the unit of the design.
type effects struct {
	power.Effects
	unit float64
}

func (e effects) CDF(x float64) float64      { return e.Effects.CDF(x * e.unit) }
func (e effects) Survival(x float64) float64 { return e.Effects.Survival(x * e.unit) }
func (e effects) Density(x float64) float64  { return e.Effects.Density(x*e.unit) * e.unit }
func (e effects) Quantile(p float64) float64 { return e.Effects.Quantile(p) / e.unit }

func (s *sizer) scaled(e power.Effects) power.Effects {
	if e == nil {
		return nil
	}
	return effects{e, s.unit}
}

// nOf makes a record of groups.
func nOf(groups []int) *result.N {
	n := result.N{Groups: groups}
	for _, g := range groups {
		n.Total += g
	}
	return &n
}

// enrolled allows for dropout: each group ceil(n/(1 - d)).
func enrolled(groups []int, dropout float64) *result.N {
	out := make([]int, len(groups))
	for i, g := range groups {
		out[i] = int(math.Ceil(float64(g)/(1-dropout) - 1e-9))
	}
	return nOf(out)
}

// cost of enrolling so many people; nil without a budget.
func (s *sizer) cost(n *result.N) *float64 {
	c := s.out.Study.Cost
	if c == nil || n == nil {
		return nil
	}
	return number(c.Fixed + c.PerParticipant*float64(n.Total))
}

func (s *sizer) overBudget(cost *float64) bool {
	c := s.out.Study.Cost
	return cost != nil && c != nil && c.AtMost != nil && *cost > *c.AtMost
}

// impossible says why an effect can't be had with the control risk, "" when it can.
func (s *sizer) impossible(set settings, x float64) string {
	if set.study.Outcome != power.Binary {
		return ""
	}
	if _, inside := power.TreatedRisk(set.study.Measure, x, set.study.ControlRisk); !inside {
		return fmt.Sprintf("with a control risk of %.3g this effect would lead to a risk outside 0 to 1", set.study.ControlRisk)
	}
	return ""
}
