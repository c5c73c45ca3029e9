package plan

import (
	"fmt"
	"math"
	"strconv"

	"footing/internal/finding"
	"footing/plan/result"
)

func sqrt(x float64) float64 { return math.Sqrt(x) }

// findings are what pooling itself has to say.
func (p *pooler) findings(out *result.Pool) []finding.Finding {
	place := finding.Place{File: p.ev.Evidence.File, Sheet: p.ev.Evidence.Sheet}
	say := func(severity finding.Severity, kind, what, mend string) {
		p.found = append(p.found, finding.Finding{Severity: severity, Kind: kind, Place: place, What: what, Mend: mend})
	}
	switch k := out.K; {
	case k == 1:
		say(finding.Warning, "one-study", "a single study is the whole evidence: it says nothing about how studies differ, and its effect is likely to be too large if it was small", "state a smallest worthwhile effect and size for that")
	case k == 2:
		say(finding.Warning, "two-studies", "two studies tell almost nothing about how far studies differ", "state a smallest worthwhile effect, and read the range with care")
	case k == 3:
		say(finding.Note, "three-studies", "three studies: the range for the next one rests on t with 1 degree of freedom and is very wide", "state a smallest worthwhile effect")
	case k < fewStudies:
		say(finding.Note, "few-studies", fmt.Sprintf("%d studies are too few for a check of small-study effects to reassure", k), "read the adjusted estimates as a range, not as a correction")
	}
	if !p.tau.Converged {
		say(finding.Warning, "estimator-not-converged", "the "+p.estimator.Words+" estimate of the between-study variance did not converge", "use another estimator in pool: heterogeneity:")
	}
	if small := smallGroups(p.ev); small != "" && p.ev.Info.Name == "standardized-mean-difference" {
		say(finding.Note, "small-studies-bias-the-mean", small, "read the common-effect mean beside it; larger studies are affected less")
	}
	return append([]finding.Finding{}, p.found...)
}

// smallGroups says when most studies are so small that variances which hold the effect itself pull the mean towards 0 (simulated: 20 studies of 10 a group at 0.5 lose
// 5%, of 5 a group 10 to 13%).
func smallGroups(ev *EvidenceRead) string {
	small := 0
	for _, e := range ev.Estimates {
		if n := e.N[0] + e.N[1]; e.N[1] > 0 && n <= 24 {
			small++
		}
	}
	if small == 0 || 2*small < len(ev.Estimates) {
		return ""
	}
	return fmt.Sprintf("%d of %d studies have 24 people or fewer: a standardized difference enters its own variance, so that the pooled mean is pulled towards 0 by about 5 to 13%%", small, len(ev.Estimates))
}

// poolSentences says what the pooling says about the field, one figure a sentence.
func poolSentences(p *result.Pool) []string {
	out := []string{}
	say := func(format string, a ...any) { out = append(out, fmt.Sprintf(format, a...)) }
	show := func(v float64) string { return strconv.FormatFloat(shownValue(p.Scale, v), 'f', 2, 64) }
	people := ""
	if p.Participants != nil {
		people = fmt.Sprintf(" with %.0f people", *p.Participants)
	}
	if r := p.Random; r.Estimate != nil && r.Interval != nil {
		say("%s%s: the average %s is %s, with a %s%% interval from %s to %s.", capital(countOf(p.K, "study", "studies")), people, p.Scale.Words, show(*r.Estimate),
			strconv.FormatFloat(100*p.Level, 'g', 4, 64), show(r.Interval.Lower), show(r.Interval.Upper))
	}
	h := p.Heterogeneity
	if h.ISquared != nil && h.TauSquared != nil {
		switch {
		case *h.TauSquared == 0:
			say("The studies differ no more than chance alone makes them (tau-squared 0, Q %.1f on %d degrees of freedom).", *h.Q, h.DF)
		case h.P != nil && *h.P > 0.1:
			say("The studies may differ little more than chance makes them: %.0f%% of the variation between their results is between-study variance (tau %.2f; Q %.1f on %d degrees of freedom, p = %s), but few studies can't rule out more.", 100**h.ISquared, *h.Tau, *h.Q, h.DF, shortP(*h.P))
		default:
			say("The studies differ by more than chance: %.0f%% of the variation between their results is between-study variance (tau %.2f).", 100**h.ISquared, *h.Tau)
		}
		if h.Why != "" {
			say("%s.", capital(h.Why))
		}
	}
	if i := p.Prediction.Interval; i != nil {
		say("In a new setting the true effect may lie anywhere from %s to %s.", show(i.Lower), show(i.Upper))
	} else if p.Prediction.Why != "" {
		say("%s.", capital(p.Prediction.Why))
	}
	for _, s := range p.SmallStudy {
		if s.Name == "egger-regression" && s.P != nil {
			say("Small studies and large ones: regression of the effect on its standard error gives p = %s%s.", shortP(*s.P), weakly(s.Weak))
		}
	}
	return out
}

func weakly(weak string) string {
	if weak == "" {
		return ""
	}
	return ", which can't reassure with so few studies"
}

func shortP(p float64) string {
	if p < 0.001 {
		return "below .001"
	}
	return strconv.FormatFloat(p, 'g', 2, 64)
}

func capital(s string) string {
	if s == "" || s[0] < 'a' || s[0] > 'z' {
		return s
	}
	return string(s[0]-32) + s[1:]
}
