package edition

import (
	"math"

	"footing/plan/result"
)

// figures lists the numbers that both or one of two runs give.
func figures(a, b *result.Plan) []result.FigureChange {
	out := []result.FigureChange{}
	add := func(name, words string, get func(*result.Plan) (value, shown *float64)) {
		from, fromShown := get(a)
		to, toShown := get(b)
		if from != nil || to != nil {
			out = append(out, result.FigureChange{Name: name, Words: words, From: from, To: to, FromShown: fromShown, ToShown: toShown})
		}
	}
	add("studies", "studies pooled", func(p *result.Plan) (*float64, *float64) {
		if p.Pool == nil {
			return nil, nil
		}
		k := float64(p.Pool.K)
		return &k, nil
	})
	add("pooled", "average of the studies", func(p *result.Plan) (*float64, *float64) {
		if p.Pool == nil {
			return nil, nil
		}
		return p.Pool.Random.Estimate, shownOf(p.Pool.Random.Shown)
	})
	add("tau", "spread of the true effects (tau)", func(p *result.Plan) (*float64, *float64) { return tau(p), nil })
	for _, side := range []string{"lower", "upper"} {
		add("prediction-"+side, side+" limit for the true effect in a new setting", func(p *result.Plan) (*float64, *float64) { return prediction(p, side == "lower") })
	}
	for _, name := range scenarios(a, b) {
		add("scenario "+name, "effect of the scenario "+name, func(p *result.Plan) (*float64, *float64) {
			if s := scenario(p, name); s != nil {
				return &s.Effect, &s.Shown
			}
			return nil, nil
		})
	}
	chosen := func(get func(*result.Chosen) *float64) func(*result.Plan) (*float64, *float64) {
		return func(p *result.Plan) (*float64, *float64) {
			if p.Size.Chosen == nil {
				return nil, nil
			}
			return get(p.Size.Chosen), nil
		}
	}
	add("n", "people analysed at the end", chosen(func(c *result.Chosen) *float64 { return number(c.N.Total) }))
	add("to-enrol", "people to enrol", chosen(func(c *result.Chosen) *float64 { return number(c.ToEnrol.Total) }))
	add("cost", "cost", chosen(func(c *result.Chosen) *float64 { return c.Cost }))
	add("assurance", "assurance at the size of the time", func(p *result.Plan) (*float64, *float64) { return assurance(p), nil })
	return out
}

func number(n int) *float64 {
	x := float64(n)
	return &x
}

func shownOf(s *result.Shown) *float64 {
	if s == nil {
		return nil
	}
	return &s.Estimate
}

func tau(p *result.Plan) *float64 {
	if p.Pool == nil {
		return nil
	}
	if p.Pool.Heterogeneity.Tau != nil {
		return p.Pool.Heterogeneity.Tau
	}
	if t2 := p.Pool.Heterogeneity.TauSquared; t2 != nil {
		t := math.Sqrt(*t2)
		return &t
	}
	return nil
}

func prediction(p *result.Plan, lower bool) (value, shown *float64) {
	if p.Pool == nil || p.Pool.Prediction.Interval == nil {
		return nil, nil
	}
	iv, sh := p.Pool.Prediction.Interval, p.Pool.Prediction.Shown
	if lower {
		if sh != nil {
			shown = sh.Lower
		}
		return &iv.Lower, shown
	}
	if sh != nil {
		shown = sh.Upper
	}
	return &iv.Upper, shown
}

// scenarios lists the names of both runs in order.
func scenarios(a, b *result.Plan) []string {
	var out []string
	seen := map[string]bool{}
	for _, p := range []*result.Plan{a, b} {
		if p.Range == nil {
			continue
		}
		for _, s := range p.Range.Scenarios {
			if !seen[s.Name] && s.Name != "pooled" {
				seen[s.Name] = true
				out = append(out, s.Name)
			}
		}
	}
	return out
}

func scenario(p *result.Plan, name string) *result.Scenario {
	if p.Range == nil {
		return nil
	}
	for i := range p.Range.Scenarios {
		if p.Range.Scenarios[i].Name == name {
			return &p.Range.Scenarios[i]
		}
	}
	return nil
}

// assurance is the one that the plan's targets are held against.
func assurance(p *result.Plan) *float64 {
	a := p.Size.Assurance
	if a == nil {
		return nil
	}
	if a.Uses == "adjusted" && a.AtChosenAdj != nil {
		return a.AtChosenAdj
	}
	return a.AtChosen
}
