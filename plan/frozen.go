package plan

import (
	"fmt"

	"footing/plan/edition"
	"footing/plan/result"
	"footing/power"
)

// frozen is what the size of an earlier edition achieves under this run's evidence and options: power at the effect
// that its scenario has now, and assurance over the distribution that the plan's targets use.
func (s *stages) frozen(e *edition.Edition) edition.Frozen {
	chosen := e.Result.Size.Chosen
	if chosen == nil || len(chosen.N.Groups) == 0 {
		return edition.Frozen{Why: "the earlier edition has no size"}
	}
	z, err := newSizer(s.file, s.info, s.nuisance())
	if err != nil {
		return edition.Frozen{Why: err.Error()}
	}
	n := chosen.N.Groups[0]
	if least := z.design.Info().MinN; n < least {
		return edition.Frozen{Why: fmt.Sprintf("the test now needs at least %d in the first group", least)}
	}
	out := edition.Frozen{Why: fmt.Sprintf("the scenario %q that it was sized for is not there any more", chosen.Scenario)}
	if sc := scenarioNamed(s.built.Range, chosen.Scenario); sc != nil {
		out.Power = number(chanceAt(z, sc.Effect, n))
	}
	used := s.built.Unadjusted
	if s.built.UsesAdjusted && s.built.Adjusted != nil {
		used = s.built.Adjusted
	}
	if used == nil {
		out.Why = "there is no distribution of the effect to average power over"
		return out
	}
	a := power.Assurer{Design: z.design, Sign: z.sign}
	out.Assurance = number(a.At(n, z.scaled(used))[0].Value)
	return out
}

// chanceAt is the power of a size at an effect; where the effect lies at or beyond none, the chance of a significant
// result in the favoured direction all the same.
func chanceAt(z *sizer, x float64, n int) float64 {
	r := z.design.Power(x/z.unit, n)
	if z.sign*x > 0 {
		return r.Any()
	}
	return r.Toward(z.sign)
}

func scenarioNamed(r *result.Range, name string) *result.Scenario {
	for i := range r.Scenarios {
		if r.Scenarios[i].Name == name {
			return &r.Scenarios[i]
		}
	}
	return nil
}

func (s *stages) nuisance() map[string]Assumed {
	if s.ev == nil {
		return nil
	}
	return s.ev.Nuisance
}

// sizeOnly chooses the size and its assurance and leaves out everything that only a report shows.
func sizeOnly(f *File, info result.ScaleInfo, r *BuiltRange, nuisance map[string]Assumed) (*result.Size, error) {
	s, err := newSizer(f, info, nuisance)
	if err != nil {
		return nil, err
	}
	s.built, s.lean = r, true
	s.cases()
	s.choose()
	s.assurance()
	return s.out, nil
}
