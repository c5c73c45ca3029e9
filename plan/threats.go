package plan

import (
	"fmt"
	"math"
	"sort"
	"strconv"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
	"footing/plan/result"
)

// maxThreats is how many threats the answer has room for.
const maxThreats = 3

// fewStudies is the number of studies below which spread and small-study effects are hardly known (Cochrane Handbook,
// 13.3.5, for the tests of small-study effects).
const fewStudies = 10

// weighed is a threat with its rank among the others; what bears on the number itself ranks first.
type weighed struct {
	result.Threat
	rank float64
}

// threats picks the two or three things that could make the number wrong, out of the plan's own figures.
func threats(p *result.Plan) []result.Threat {
	t := &threatFinder{p: p, show: shower(p)}
	t.budget()
	t.sensitivity()
	if p.Pool != nil {
		t.heterogeneity()
		t.smallStudies()
		t.fewStudies()
		t.riskOfBias()
	}
	t.assumedNuisance()
	sort.SliceStable(t.found, func(i, j int) bool { return t.found[i].rank > t.found[j].rank })
	out := []result.Threat{}
	for _, x := range t.found {
		if len(out) < maxThreats {
			out = append(out, x.Threat)
		}
	}
	return out
}

type threatFinder struct {
	p     *result.Plan
	show  func(float64) string
	found []weighed
}

func (t *threatFinder) add(rank float64, head, format string, a ...any) {
	t.found = append(t.found, weighed{result.Threat{Head: head, Text: fmt.Sprintf(format, a...)}, rank})
}

// shower writes an effect of the analysed scale as people read it.
func shower(p *result.Plan) func(float64) string {
	info := p.Size.Scale
	if p.Pool != nil {
		info = p.Pool.Scale
	}
	return func(v float64) string { return strconv.FormatFloat(shownValue(info, v), 'f', 2, 64) }
}

func shownValue(info result.ScaleInfo, v float64) float64 { return effect.Scale(info.Name).ToShown(v) }

// dependsOnEvidence: a study sized for a given effect is moved by the evidence only in its assurance.
func (t *threatFinder) dependsOnEvidence() bool {
	c := t.p.Size.Chosen
	return c == nil || c.Scenario != "smallest-worthwhile" || c.Basis == "assurance"
}

func (t *threatFinder) budget() {
	c := t.p.Size.Chosen
	if c == nil || !c.OverBudget {
		return
	}
	text := "the number asked for costs more than it allows."
	if c.AffordableToEnrol != nil {
		text = fmt.Sprintf("it pays for %s of the %s people.", grouped(*c.AffordableToEnrol), grouped(c.ToEnrol.Total))
	}
	t.add(9, "The budget falls short:", "%s", text)
}

// sensitivity takes the assumption whose stated uncertainty moves the number most.
func (t *threatFinder) sensitivity() {
	c := t.p.Size.Chosen
	if c == nil {
		return
	}
	best, rank := -1, 0.0
	for i, s := range t.p.Size.Sensitivity {
		if s.ToEnrol == nil || s.ToEnrol.Total <= c.ToEnrol.Total {
			continue
		}
		r := float64(s.ToEnrol.Total)/float64(c.ToEnrol.Total) - 1
		if s.OverBudget && !c.OverBudget {
			r += 10
		}
		if r > rank {
			best, rank = i, r
		}
	}
	if best < 0 || rank < 0.05 {
		return
	}
	s := t.p.Size.Sensitivity[best]
	text := fmt.Sprintf("%s people have to be enrolled", grouped(s.ToEnrol.Total))
	if s.OverBudget && !c.OverBudget {
		text += ", over the budget"
	}
	t.add(5+math.Min(rank, 3), fmt.Sprintf("If the %s is %s:", s.Assumption, s.Value), "%s.", text)
}

func (t *threatFinder) heterogeneity() {
	h, pr := t.p.Pool.Heterogeneity, t.p.Pool.Prediction
	if pr.Interval == nil || h.TauSquared == nil || *h.TauSquared == 0 {
		return
	}
	rank := 3.0
	none := t.p.Pool.Scale.NoEffect
	across := pr.Interval.Lower < none && pr.Interval.Upper > none
	if across {
		rank += 2
	}
	if t.dependsOnEvidence() {
		rank++
	}
	much := ""
	if h.ISquared != nil {
		much = fmt.Sprintf(" (I² %.0f%%)", 100**h.ISquared)
	}
	end := "."
	if across {
		end = ", on either side of no effect."
	}
	t.add(rank, "The studies differ"+much+":", "the true effect in a new setting may be anywhere from %s to %s%s", t.show(pr.Interval.Lower), t.show(pr.Interval.Upper), end)
}

// smallStudies compares the adjusted effect with the average, where it lies nearer to no effect.
// asymmetry speaks where the plan's own adjustment finds nothing but small studies show larger effects all the same: what a stated chance of publication would leave.
func (t *threatFinder) asymmetry(pooled float64) {
	var p *float64
	for _, s := range t.p.Pool.SmallStudy {
		if s.Name == "egger-regression" && s.Weak == "" {
			p = s.P
		}
	}
	if p == nil || *p >= 0.1 {
		return
	}
	for _, s := range t.p.Pool.SmallStudy {
		if s.Name == givenName(halfChance) && s.Estimate != nil && *s.Estimate/pooled < 0.9 {
			t.add(3.3, "Small studies show larger effects:", "the regression on the standard error has p = %s; if results that are not significant were half as likely to be published, %s would be left of the average of %s.", shortP(*p), t.show(*s.Estimate), t.show(pooled))
		}
	}
}

func (t *threatFinder) smallStudies() {
	pooled := t.p.Pool.Random.Estimate
	if pooled == nil || t.p.Range == nil {
		return
	}
	none := t.p.Pool.Scale.NoEffect
	for _, s := range t.p.Range.Scenarios {
		if s.Name != "small-study-adjusted" || *pooled == none {
			continue
		}
		left := (s.Effect - none) / (*pooled - none)
		if left >= 0.9 {
			t.asymmetry(*pooled)
			return
		}
		rank := 3 + 2*math.Min(1, 1-left)
		if t.dependsOnEvidence() {
			rank++
		}
		by := t.p.Range.AdjustedBy
		if by == "" {
			by = "the adjustment"
		}
		if left <= 0 {
			t.add(rank, "Small studies show larger effects:", "allowing for missing studies (%s) no effect is left of the average of %s.", by, t.show(*pooled))
			return
		}
		t.add(rank, "Small studies show larger effects:", "allowing for missing studies (%s) the average of %s becomes %s.", by, t.show(*pooled), t.show(s.Effect))
		return
	}
}

func (t *threatFinder) fewStudies() {
	k := t.p.Pool.K
	if k >= fewStudies {
		return
	}
	rank := 2 + 0.3*float64(fewStudies-k)
	switch {
	case k == 0:
		t.add(rank, "No study could be used:", "the number rests on what the plan states, not on evidence.")
	case k < 3:
		t.add(rank, fmt.Sprintf("There %s only %s:", map[bool]string{true: "is", false: "are"}[k == 1], countOf(k, "study", "studies")), "how far true effects differ can't be known from them.")
	default:
		t.add(rank, fmt.Sprintf("There are only %d studies:", k), "their spread is poorly known, and missing studies can hardly be seen.")
	}
}

// riskOfBias counts the studies at high risk and the weight that they carry.
func (t *threatFinder) riskOfBias() {
	n, weight := 0, 0.0
	for _, s := range t.p.Pool.Studies {
		if s.Used && strings.EqualFold(s.RiskOfBias, "high") {
			n++
			if s.Weight != nil {
				weight += *s.Weight
			}
		}
	}
	if n == 0 {
		return
	}
	t.add(1.5+3*weight, fmt.Sprintf("%s at high risk of bias:", map[bool]string{true: "1 study is", false: fmt.Sprintf("%d studies are", n)}[n == 1]),
		"%.0f%% of the weight of the average.", 100*weight)
}

// assumedNuisance names a value of the planned study that has neither source nor range but decides its size.
func (t *threatFinder) assumedNuisance() {
	var names []string
	for _, a := range t.p.Size.Study.Assumptions {
		if a.Assumed && a.Number != nil && *a.Number != 0 && a.Low == nil && !strings.Contains(strings.ToLower(a.Name), "dropout") {
			names = append(names, a.Name+" "+a.Value)
		}
	}
	if len(names) > 0 {
		t.add(2.5, "Assumed without a source:", "%s.", strings.Join(names, ", "))
	}
	pilot := 0
	for _, x := range t.p.Findings {
		if x.Kind == "small-pilot" && x.Severity != finding.Note {
			pilot++
		}
	}
	if pilot > 0 {
		t.add(2.8, "A value comes from a small pilot:", "its own uncertainty is large; see the findings.")
	}
}

// grouped writes a count with thin spaces in the thousands.
func grouped(n int) string {
	s := strconv.Itoa(n)
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + "\u202f" + s[i:]
	}
	return s
}
