package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// head writes the lines above the answer: what it is, what it is about, and banners that must not be missed.
func head(v *page, p *result.Plan) {
	if p.Date != "" {
		v.Meta = append(v.Meta, dateText(p.Date))
	}
	if p.Edition > 0 {
		v.Meta = append(v.Meta, fmt.Sprintf("edition %d", p.Edition))
	}
	if p.Pool != nil {
		text := fmt.Sprintf("%s prior %s", wholeText(p.Pool.K), plural(p.Pool.K, "study", "studies"))
		high := 0
		for _, s := range p.Pool.Studies {
			if s.Used && s.RiskOfBias == "high" {
				high++
			}
		}
		if high > 0 {
			text += fmt.Sprintf(", %s at high risk of bias", strings.ToLower(countWord(high)))
		}
		v.Meta = append(v.Meta, text)
		v.File = p.Pool.Evidence.File
	} else {
		v.Meta = append(v.Meta, "no prior studies")
	}
	if p.Invented || (p.Pool != nil && p.Pool.Evidence.Invented) {
		v.Kind += " · invented data, for show"
		v.Banners = append(v.Banners, "The studies in this report are invented. Nothing here is evidence about anything.")
	}
	if p.Pool != nil && len(p.Pool.Evidence.Examples) > 0 {
		n := len(p.Pool.Evidence.Examples)
		v.Banners = append(v.Banners, fmt.Sprintf("%s %s of the evidence sheet still %s the example that a new plan starts with (%s). Replace %s before any number here is used.",
			countWord(n), plural(n, "row", "rows"), plural(n, "is", "are"), strings.Join(clipAll(p.Pool.Evidence.Examples, 40), "; "), plural(n, "it", "them")))
	}
	if p.AnswerNo != "" {
		v.Banners = append(v.Banners, "The answer is no: "+p.AnswerNo)
	}
}

func clipAll(ss []string, most int) []string {
	out := make([]string, len(ss))
	for i, s := range ss {
		out[i] = clipRunes(s, most)
	}
	return out
}

var months = [...]string{"January", "February", "March", "April", "May", "June", "July", "August", "September", "October", "November", "December"}

// dateText writes 2026-11-03 as 3 November 2026, and anything else as it stands.
func dateText(s string) string {
	var y, m, d int
	if n, err := fmt.Sscanf(s, "%4d-%2d-%2d", &y, &m, &d); n == 3 && err == nil && len(s) == 10 && m >= 1 && m <= 12 {
		return fmt.Sprintf("%d %s %d", d, months[m-1], y)
	}
	return s
}

func answerOf(p *result.Plan) answer {
	a := answer{}
	c := p.Size.Chosen
	if c == nil {
		a.Number = "No size"
		why := p.Size.Why
		if why == "" {
			why = "no scenario that the plan could be sized for has a size"
		}
		a.Why = append(a.Why, "There is no number to enrol: "+why+".")
	} else {
		a.Number, a.Has = wholeText(c.ToEnrol.Total), true
		a.Of = []string{"people to enrol,", enrolGroups(p, c)}
		a.Why = append(a.Why, powerSentence(p, c))
		if s := targetSentence(p, c); s != "" {
			a.Why = append(a.Why, s)
		}
		a.Trail = trail(p, c)
	}
	if s := rangeSentence(p); s != "" {
		a.Aside = append(a.Aside, s)
	}
	for _, t := range p.Threats {
		a.Threats = append(a.Threats, threat{proseText(t.Head), proseText(t.Text)})
	}
	if p.Undecided > 0 {
		a.Small = append(a.Small, undecidedSentence(p))
	}
	if p.Since != nil && p.Since.Line != "" {
		a.Small = append(a.Small, fmt.Sprintf("Since edition %d: %s.", p.Since.From.Number, strings.TrimRight(p.Since.Line, ".")))
	}
	a.Small = append(a.Small, p.Cautions...)
	if !strings.Contains(strings.Join(p.Cautions, " "), "are chances if") {
		a.Small = append(a.Small, "Power and assurance are chances if these assumptions hold, not promises.")
	}
	return a
}

// enrolGroups writes how the number splits: "313 in each group", or "200 + 100 (new + usual)".
func enrolGroups(p *result.Plan, c *result.Chosen) string {
	switch {
	case len(c.ToEnrol.Groups) < 2:
		return "in one group"
	case equalGroups(&c.ToEnrol):
		if len(c.ToEnrol.Groups) == 2 {
			return wholeText(c.ToEnrol.Groups[0]) + " in each group"
		}
		return fmt.Sprintf("%s in each of %d groups", wholeText(c.ToEnrol.Groups[0]), len(c.ToEnrol.Groups))
	}
	var parts []string
	for i, g := range c.ToEnrol.Groups {
		text := wholeText(g)
		if i < len(p.Size.Study.Groups) {
			text += " " + clipRunes(p.Size.Study.Groups[i], 30)
		}
		parts = append(parts, text)
	}
	return strings.Join(parts, ", ")
}

// powerSentence is the plainest sentence of the report: what the number buys.
func powerSentence(p *result.Plan, c *result.Chosen) string {
	scale := effectScale{p.Size.Scale}
	effect := ""
	if k := caseOf(p, c.Scenario); k != nil {
		effect = scale.phrase(k.Effect)
	}
	chance := chancesText(c.Power)
	switch p.Size.Study.Aim {
	case "non-inferiority":
		return fmt.Sprintf("If the true effect is %s, a study of this size has %s of showing that the new treatment is not worse by more than the margin.", effect, chance)
	case "equivalence":
		return fmt.Sprintf("If the true effect is %s, a study of this size has %s of showing that the two differ by less than the margin.", effect, chance)
	case "precision":
		return "A study of this size gives an interval as narrow as the plan asks."
	}
	direction := ""
	if scale.Favours != "" {
		direction = " (" + clipRunes(scale.Favours, 80) + ")"
	}
	return fmt.Sprintf("If the true effect is %s%s, a study of this size has %s of showing it; if the effect is nearer to none, fewer.", effect, direction, chance)
}

// targetSentence says what the effect is that the study is sized for, and who says so.
func targetSentence(p *result.Plan, c *result.Chosen) string {
	s := scenarioOf(p, c.Scenario)
	if s == nil {
		return c.ScenarioWhy
	}
	text := fmt.Sprintf("%s is the scenario ‘%s’", effectScale{p.Size.Scale}.text(s.Effect), clipRunes(s.Words, 80))
	if w := worthwhileOf(p); w != nil && s.Name == "smallest-worthwhile" {
		text = fmt.Sprintf("%s is the smallest worthwhile effect", effectScale{p.Size.Scale}.text(w.Effect))
		switch {
		case w.Who != "" && w.Source != "":
			text += fmt.Sprintf(" (who says so: %s; source: %s)", clipRunes(w.Who, 80), clipRunes(w.Source, 80))
		case w.Source != "":
			text += " (source: " + clipRunes(w.Source, 80) + ")"
		default:
			text += ", assumed: no source is given"
		}
		if w.Why != "" {
			text += ": " + clipRunes(w.Why, 160)
		}
	} else if s.Why != "" {
		text += ": " + clipRunes(s.Why, 160)
	}
	text += "."
	if s.InPeople != nil && p.Size.Study.Aim != "equivalence" {
		text += " In people: " + peopleSentence(p, *s.InPeople)
	}
	if c.ScenarioWhy != "" {
		text += " " + upperFirst(strings.TrimRight(c.ScenarioWhy, ".")) + "."
	}
	if c.Basis == "assurance" && p.Size.Assurance != nil && p.Size.Assurance.Target != nil {
		text += fmt.Sprintf(" The target for assurance, %s, decides the number.", percentText(*p.Size.Assurance.Target))
	}
	return text
}

// peopleSentence says a standardized effect as people.
func peopleSentence(p *result.Plan, share float64) string {
	n := inHundred(share)
	n = strings.Replace(n, " in 100", " of 100", 1)
	if g := p.Size.Study.Groups; len(g) > 1 {
		return fmt.Sprintf("%s in the group ‘%s’ would do better than one person picked from the group ‘%s’.", n, clipRunes(g[0], 40), clipRunes(g[1], 40))
	}
	return n + " in the treatment group would do better than one person picked from the control group."
}

func worthwhileOf(p *result.Plan) *result.Worthwhile {
	if p.Range == nil {
		return nil
	}
	return p.Range.SmallestWorthwhile
}

func upperFirst(s string) string {
	for i, r := range s {
		return strings.ToUpper(string(r)) + s[i+len(string(r)):]
	}
	return s
}

// rangeSentence gives the range of the number over the scenarios, and which have no size at all.
func rangeSentence(p *result.Plan) string {
	lo, hi, none := 0, 0, []string{}
	scale := effectScale{p.Size.Scale}
	for _, c := range p.Size.Cases {
		switch {
		case c.ToEnrol != nil:
			if lo == 0 || c.ToEnrol.Total < lo {
				lo = c.ToEnrol.Total
			}
			hi = max(hi, c.ToEnrol.Total)
		case c.N == nil:
			none = append(none, fmt.Sprintf("%s (%s)", clipRunes(scenarioWords(p, c.Scenario), 60), scale.text(c.Effect)))
		}
	}
	text := ""
	if hi > lo && lo > 0 {
		text = fmt.Sprintf("Over the scenarios the number runs from %s to %s people", wholeText(lo), wholeText(hi))
	}
	if len(none) > 0 {
		if text != "" {
			text += "; "
		}
		text += "no size exists for " + strings.Join(none, ", ")
	}
	if text == "" {
		return ""
	}
	return upperFirst(text) + "."
}

// trail is the way from the size without any help to the number enrolled, then its chance and its cost.
func trail(p *result.Plan, c *result.Chosen) []trailRow {
	var out []trailRow
	for i, t := range c.Trail {
		value := groupsText(&t.N)
		if i == 0 && len(t.N.Groups) > 1 && equalGroups(&t.N) {
			value += " a group"
		}
		out = append(out, trailRow{t.Words, value, t.Source})
	}
	if a := p.Size.Assurance; a != nil && a.AtChosen != nil {
		r := trailRow{Words: "chance of success over all that the next study may find (assurance)", Value: percentText(*a.AtChosen)}
		if a.AtChosenAdj != nil {
			r.Source = percentText(*a.AtChosenAdj) + " allowing for missing studies"
		}
		if a.Ceiling != nil {
			if r.Source != "" {
				r.Source += "; "
			}
			r.Source += "no size passes " + percentText(*a.Ceiling)
		}
		if a.OutOfReach != "" {
			r.Source += "; " + a.OutOfReach
		}
		out = append(out, r)
	}
	if c.Cost != nil {
		r := trailRow{Words: "cost", Value: costText(p, c.Cost)}
		if k := p.Size.Study.Cost; k != nil && k.AtMost != nil {
			r.Source = "limit " + costText(p, k.AtMost)
			if c.OverBudget {
				r.Source = "over the limit of " + costText(p, k.AtMost)
			}
			if c.AffordableToEnrol != nil {
				r.Source += fmt.Sprintf(", which reaches %s people", wholeText(*c.AffordableToEnrol))
			}
		}
		out = append(out, r)
	}
	return out
}

func undecidedSentence(p *result.Plan) string {
	var places []string
	for _, f := range p.Findings {
		if f.Decision == nil && f.Severity != "note" {
			place := f.Place
			place.File = ""
			if s := place.String(); s != "" && len(places) < 5 {
				places = append(places, clipRunes(s, 40))
			}
		}
	}
	text := fmt.Sprintf("%s %s for a decision", countWord(p.Undecided), plural(p.Undecided, "finding waits", "findings wait"))
	if len(places) > 0 {
		text += " (" + strings.Join(places, ", ")
		if p.Undecided > len(places) {
			text += " and more"
		}
		text += ")"
	}
	return text + "."
}
