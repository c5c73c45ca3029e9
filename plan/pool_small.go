package plan

import (
	"fmt"
	"strings"

	"footing/internal/num"
	"footing/meta"
	"footing/meta/smallstudy"
	"footing/plan/result"
)

// smallStudies is the panel of small-study checks and adjusted estimates. Adding one is a function and a line here.
func (p *pooler) smallStudies() []result.SmallStudy {
	weak := ""
	if p.data.K() < fewStudies {
		weak = fmt.Sprintf("with %s a check like this can't reassure: fewer than %d are too few", countOf(p.data.K(), "study", "studies"), fewStudies)
	}
	parts := []func() []result.SmallStudy{
		p.selectionModels,
		func() []result.SmallStudy { return []result.SmallStudy{p.henmiCopas()} },
		p.regressionEstimates,
		func() []result.SmallStudy { return []result.SmallStudy{p.trimFill(), p.worstCase()} },
		p.tests,
	}
	done := make([][]result.SmallStudy, len(parts))
	num.Chunks(len(parts), func(i int) { done[i] = parts[i]() })
	var out []result.SmallStudy
	for _, part := range done {
		out = append(out, part...)
	}
	for i := range out {
		if out[i].Why == "" {
			out[i].Weak = weak
		}
		if out[i].Figures == nil {
			out[i].Figures = map[string]float64{}
		}
		if out[i].Points == nil {
			out[i].Points = []result.FunnelPoint{}
		}
	}
	return out
}

// sign is +1 where a larger effect favours the treatment, else -1.
func (p *pooler) sign() float64 {
	if p.ev.Info.HigherBetter {
		return 1
	}
	return -1
}

func (p *pooler) henmiCopas() result.SmallStudy {
	out := result.SmallStudy{Name: "henmi-copas", Words: "interval around the common-effect mean that allows for between-study variance",
		Assumes: "selection moves the small studies most, so that weights by size alone are moved less; the interval is wider in return"}
	r := smallstudy.HenmiCopas(p.data, p.level)
	if !r.Available {
		out.Why = r.Why
		return out
	}
	p.adjusted(&out, r.Interval)
	out.Figures = map[string]float64{"quantile": r.Quantile}
	return out
}

func (p *pooler) adjusted(out *result.SmallStudy, in meta.Interval) {
	out.Estimate, out.StandardError = number(in.Estimate), number(in.StandardError)
	out.Interval = &result.Interval{Level: in.Level, Lower: in.Lower, Upper: in.Upper, Method: in.Method}
	out.Shown = shownOf(p.ev.Scale, in.Estimate, in.Lower, in.Upper)
}

func (p *pooler) egger() result.SmallStudy {
	out := result.SmallStudy{Name: "egger-regression", Words: "regression of the effect on its standard error",
		Assumes: "without small-study effects the effect does not depend on its standard error"}
	r := smallstudy.Egger(p.data)
	if !r.Available {
		out.Why = r.Why
		return out
	}
	out.Statistic, out.DF, out.P = number(r.T), number(r.DF), number(r.P)
	out.Figures = map[string]float64{"intercept": r.Intercept, "intercept standard error": r.InterceptSE, "slope": r.Slope, "slope standard error": r.SlopeSE, "dispersion": r.Dispersion}
	if strings.HasPrefix(p.ev.Info.Name, "log-odds") {
		out.Assumes += "; for odds ratios effect and standard error are tied anyway, so that the test is too ready to find something"
	}
	return out
}

func (p *pooler) trimFill() result.SmallStudy {
	// Studies thought suppressed are those that speak against the treatment.
	above := p.sign() < 0
	side, other := "below", "above"
	if above {
		side, other = other, side
	}
	out := result.SmallStudy{Name: "trim-and-fill", Words: "funnel made symmetric by studies thought missing",
		Assumes: "without selection the funnel would be symmetric around the mean, and what is missing are the most unfavourable results, those " + side + " it"}
	r := smallstudy.TrimFill(p.data, p.estimator, p.method, p.level, smallstudy.TrimFillOptions{MissingAbove: above})
	if !r.Available {
		out.Why = r.Why
		return out
	}
	if !r.Interval.Available {
		out.Why = r.Interval.Why
		return out
	}
	p.adjusted(&out, r.Interval)
	out.Figures = map[string]float64{"filled": float64(r.Missing), "tau squared": r.TauSquared}
	if !r.Converged {
		out.Assumes += "; the count did not settle"
	}
	if o := smallstudy.TrimFill(p.data, p.estimator, p.method, p.level, smallstudy.TrimFillOptions{MissingAbove: !above}); o.Available {
		out.Figures["filled "+other+" the mean instead"] = float64(o.Missing)
	}
	for i := p.data.K(); i < r.Filled.K(); i++ {
		if se := number(sqrt(r.Filled.V[i])); se != nil {
			out.Points = append(out.Points, result.FunnelPoint{Estimate: r.Filled.Y[i], StandardError: *se})
		}
	}
	return out
}
