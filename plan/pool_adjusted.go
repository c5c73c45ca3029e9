package plan

import (
	"fmt"
	"math"

	"footing/meta/effect"
	"footing/meta/smallstudy"
	"footing/plan/result"
)

// The relative chances of publication that are shown beside the plan's own: results that miss significance in the favoured direction are half, and a quarter, as likely to be seen.
const (
	halfChance    = 0.5
	quarterChance = 0.25
)

// estimateEntry fills an entry from an adjusted estimate.
func (p *pooler) estimateEntry(name, words, assumes string, e smallstudy.Estimate) result.SmallStudy {
	out := result.SmallStudy{Name: name, Words: words, Assumes: assumes, Figures: map[string]float64{}}
	if !e.Available {
		out.Why = e.Why
		return out
	}
	out.Estimate, out.StandardError, out.DF, out.P = number(e.Value), number(e.StandardError), number(e.DF), number(e.P)
	method := "student-t"
	if math.IsInf(e.DF, 1) {
		method = "normal"
	}
	out.Interval = &result.Interval{Level: p.level, Lower: e.Lower, Upper: e.Upper, Method: method}
	out.Shown = shownOf(p.ev.Scale, e.Value, e.Lower, e.Upper)
	if e.Used != p.data.K() {
		out.Figures["studies used"] = float64(e.Used)
	}
	return out
}

// selectionModels are the fitted selection model and the same with given chances of publication.
func (p *pooler) selectionModels() []result.SmallStudy {
	fitted := smallstudy.Selection(p.data, p.sign(), p.level)
	first := p.selectionEntry("selection-model", "selection model, relative chance of publication estimated",
		"publication depends on whether the one-sided p in the favoured direction is at most .025, and true effects are normal", fitted)
	if fitted.Available {
		first.Statistic, first.DF, first.P = number(fitted.LikelihoodRatio), number(1), number(fitted.P)
		first.Figures["relative chance"] = fitted.Chance
		first.Figures["its lower limit"], first.Figures["its upper limit"] = fitted.ChanceLow, fitted.ChanceHigh
	}
	out := []result.SmallStudy{first}
	chances := []float64{halfChance, quarterChance}
	if c := p.statedChance(); c != halfChance && c != quarterChance {
		chances = append([]float64{c}, chances...)
	}
	for _, c := range chances {
		r := smallstudy.SelectionGiven(p.data, p.sign(), c, p.level)
		e := p.selectionEntry(givenName(c), fmt.Sprintf("selection model, relative chance of publication %s", plainDecimal(c)),
			fmt.Sprintf("a result that is not significant in the favoured direction is %s times as likely to be published as one that is: an assumption, not an estimate", plainDecimal(c)), r)
		e.Figures["relative chance"] = c
		out = append(out, e)
	}
	return out
}

func (p *pooler) selectionEntry(name, words, assumes string, r smallstudy.SelectionResult) result.SmallStudy {
	if !r.Available {
		return result.SmallStudy{Name: name, Words: words, Assumes: assumes, Why: r.Why, Figures: map[string]float64{}}
	}
	out := p.estimateEntry(name, words, assumes, r.Mean)
	out.Figures["tau squared"] = r.TauSquared
	return out
}

// statedChance is the relative chance of publication that the plan states; half when it states none.
func (p *pooler) statedChance() float64 {
	if c := p.file.SmallStudies.RelativeChance; c != nil {
		return *c
	}
	return halfChance
}

// givenName is the entry of the selection model with a given chance: selection-model-at-0.5.
func givenName(chance float64) string { return fmt.Sprintf("selection-model-at-%g", chance) }

// regressionEstimates are what regressions and the large studies alone leave.
func (p *pooler) regressionEstimates() []result.SmallStudy {
	conditional, variance := smallstudy.PETPEESE(p.data, p.sign(), p.level)
	both := p.estimateEntry("pet-peese", "precision effect: by the variance where the other form shows an effect, else by the standard error",
		"the effect would not depend on precision without selection", conditional)
	if conditional.Available {
		both.Figures["by the variance"] = map[bool]float64{true: 1}[variance]
	}
	return []result.SmallStudy{
		both,
		p.estimateEntry("pet", "what is left at a standard error of 0", "selection bends the effect in proportion to the standard error", smallstudy.PET(p.data, p.level)),
		p.estimateEntry("peese", "what is left at a variance of 0", "selection bends the effect in proportion to the variance", smallstudy.PEESE(p.data, p.level)),
		p.estimateEntry("unrestricted-least-squares", "common-effect mean with the dispersion that the studies show", "large studies are less selected", smallstudy.UnrestrictedWLS(p.data, p.level)),
		p.estimateEntry("adequately-powered", "the same of the studies with 80% power or more", "adequately powered studies are little selected", smallstudy.AdequatelyPowered(p.data, p.level)),
		p.estimateEntry("limit-estimate", "effect of a study of endless size on the radial line", "the small-study effect follows the radial line", smallstudy.Limit(p.data, p.level)),
	}
}

// worstCase is the mean without the studies that are significant in the favoured direction, and how strong selection would have to be.
func (p *pooler) worstCase() result.SmallStudy {
	e := smallstudy.WorstCase(p.data, p.sign(), p.tau.Value, p.level)
	out := p.estimateEntry("worst-case", "mean of the studies that are not significant in the favoured direction", "every other study owes its publication to its result: a bound, not an estimate", e)
	if r, ok, why := smallstudy.SelectionRatio(p.data, p.sign(), p.tau.Value, 0); ok {
		out.Figures["selection ratio to no effect"] = r
	} else if out.Why == "" {
		out.Assumes += "; selection to no effect: " + why
	}
	if w := p.file.Range.SmallestWorthwhile; w != nil {
		if x, err := p.ev.Scale.FromShown(w.Value); err == nil {
			if r, ok, _ := smallstudy.SelectionRatio(p.data, p.sign(), p.tau.Value, x); ok {
				out.Figures["selection ratio to the smallest worthwhile effect"] = r
			}
		}
	}
	return out
}

// tests are the checks without an adjusted estimate.
func (p *pooler) tests() []result.SmallStudy {
	entry := func(name, words, assumes string, t smallstudy.Test) result.SmallStudy {
		out := result.SmallStudy{Name: name, Words: words, Assumes: assumes, Why: t.Why, Figures: t.Figures}
		if t.Available {
			out.Statistic, out.DF, out.P = number(t.Statistic), number(t.DF), number(t.P)
		}
		return out
	}
	out := []result.SmallStudy{p.egger()}
	if tables, y := p.countTables(); len(tables) == p.data.K() && p.ev.Scale == effect.LogOddsRatio {
		out = append(out,
			entry("peters-regression", "regression of the log odds ratio on 1/n", "without small-study effects the odds ratio does not depend on size; effect and precision are not tied here", smallstudy.Peters(y, tables)),
			entry("harbord-regression", "regression of the score on the root of its variance", "as above, by efficient scores", smallstudy.Harbord(tables)))
	}
	out = append(out,
		entry("rank-correlation", "rank correlation of effect and variance", "without selection effect and variance are unrelated", smallstudy.RankCorrelation(p.data)),
		entry("excess-significance", "significant studies against what their power leads to expect", "all studies share the common-effect mean", smallstudy.ExcessSignificance(p.data)))
	history := result.SmallStudy{Name: "fail-safe-n", Words: "studies of no effect that would overturn the combined test", Assumes: "missing studies show exactly nothing; shown as history only, since it ignores how far studies differ",
		Figures: map[string]float64{"studies": smallstudy.FailSafeRosenthal(p.data, p.sign())}}
	return append(out, history)
}

// countTables are the counts of the used studies.
func (p *pooler) countTables() ([]effect.Table, []float64) {
	var tables []effect.Table
	var y []float64
	for _, e := range p.ev.Estimates {
		if e.Table != nil {
			tables, y = append(tables, *e.Table), append(y, e.Value)
		}
	}
	return tables, y
}
