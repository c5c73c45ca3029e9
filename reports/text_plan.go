package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// TextPlan is the answer of a plan for a terminal: at most 80 columns, one screen, the same order and words as the
// report.
func TextPlan(p *result.Plan, o TextOptions) string {
	w := &textWriter{o: o}
	w.head(p.Title, planRemark(p))
	if p.Invented {
		w.line("Invented data, for demonstration only.")
	}
	if p.Pool != nil && len(p.Pool.Evidence.Examples) > 0 {
		w.wrapped("", 0, fmt.Sprintf("Not a plan yet: the sheet still holds example rows (%s).", strings.Join(p.Pool.Evidence.Examples, ", ")))
	}
	w.blank()
	w.answer(p)
	w.blank()
	w.scenarios(p)
	w.threats(p)
	w.waiting(p)
	if p.Since != nil && p.Since.Line != "" {
		w.wrapped("", 0, fmt.Sprintf("Since edition %d: %s.", p.Since.From.Number, p.Since.Line))
	}
	w.wroteLine()
	return w.String()
}

func planRemark(p *result.Plan) string {
	var parts []string
	if p.Pool != nil {
		parts = append(parts, fmt.Sprintf("%d %s", p.Pool.K, plural(p.Pool.K, "study", "studies")))
	}
	if p.Edition > 0 {
		parts = append(parts, fmt.Sprintf("edition %d", p.Edition))
	}
	return strings.Join(parts, ", ")
}

// termGroups writes the groups of an n: "313 + 313".
func termGroups(n result.N) string {
	parts := make([]string, len(n.Groups))
	for i, g := range n.Groups {
		parts[i] = TermText(wholeText(g))
	}
	return strings.Join(parts, " + ")
}

func (w *textWriter) answer(p *result.Plan) {
	c := p.Size.Chosen
	if c == nil {
		w.wrapped("", 0, w.ink(termStrong, "No size: ")+strings.TrimSpace(p.AnswerNo)+".")
		return
	}
	effect := ""
	if x := termCase(&p.Size, c.Scenario); x != nil {
		effect = " " + TermText(effectText(x.Shown))
	}
	groups := ""
	if len(c.ToEnrol.Groups) > 1 {
		groups = " (" + termGroups(c.ToEnrol) + ")"
	}
	w.line("%s", w.ink(termStrong+termPlan, fmt.Sprintf("Enrol %s%s", TermText(wholeText(c.ToEnrol.Total)), groups))+fmt.Sprintf(", for %s%s.", c.Scenario, effect))
	if c.ScenarioWhy != "" {
		w.wrapped("", 0, strings.TrimRight(c.ScenarioWhy, ".")+".")
	}
	w.line("Power %s if the true effect is%s.", percentText(c.Power), effect)
	w.assurance(p.Size.Assurance)
	w.cost(&p.Size)
}

func (w *textWriter) assurance(a *result.Assurance) {
	switch {
	case a == nil:
		return
	case a.AtChosen == nil && a.Why != "":
		w.wrapped("", 0, "Assurance: not available, "+strings.TrimRight(a.Why, ".")+".")
		return
	case a.AtChosen == nil:
		return
	}
	s := "Assurance " + percentText(*a.AtChosen)
	if a.Ceiling != nil {
		s += ", at most " + fixed(100**a.Ceiling, 0) + "%"
	}
	if a.AtChosenAdj != nil {
		s += "; " + percentText(*a.AtChosenAdj) + " allowing for missing studies"
	}
	w.wrapped("", 0, s+".")
	if a.OutOfReach != "" {
		w.wrapped("", 0, strings.TrimRight(a.OutOfReach, ".")+".")
	}
}

func (w *textWriter) cost(s *result.Size) {
	c, limit := s.Chosen, s.Study.Cost
	if c.Cost == nil || limit == nil {
		return
	}
	text := "Cost " + moneyText(*c.Cost, limit.Currency)
	if limit.AtMost != nil {
		text += " of at most " + moneyText(*limit.AtMost, limit.Currency)
	}
	if c.OverBudget {
		text += ": over the limit"
		if c.AffordableToEnrol != nil {
			text += fmt.Sprintf(", which pays for %s people", wholeText(*c.AffordableToEnrol))
		}
	}
	w.wrapped("", 0, text+".")
}

func termCase(s *result.Size, scenario string) *result.Case {
	for i := range s.Cases {
		if s.Cases[i].Scenario == scenario {
			return &s.Cases[i]
		}
	}
	return nil
}

// scenarios writes the table of scenarios, the larger effect first as the plan lists them.
func (w *textWriter) scenarios(p *result.Plan) {
	s := &p.Size
	if len(s.Cases) == 0 {
		return
	}
	n, unit := "n", ""
	if s.Chosen != nil {
		n = wholeText(s.Chosen.N.Groups[0])
		if len(s.Chosen.N.Groups) > 1 && s.Chosen.N.Groups[0] != s.Chosen.N.Groups[1] {
			n = termGroups(s.Chosen.N)
		}
	}
	if len(s.Study.Groups) > 1 || s.Study.Arrangement == "parallel" {
		unit = "per group"
	} else {
		unit = "people"
	}
	cols := []textColumn{{head: "scenario", most: 26}, {head: "effect", right: true, most: 14}, {head: unit, right: true}, {head: "to enrol", right: true}, {head: "power at " + TermText(n), right: true}}
	var rows [][]string
	var marks, inks []string
	for _, c := range s.Cases {
		row := []string{c.Scenario, effectText(c.Shown), "", "", optional(c.PowerAtChosen, percentCell)}
		if c.N != nil {
			row[2] = wholeText(c.N.Groups[0])
			if len(c.N.Groups) > 1 && c.N.Groups[1] != c.N.Groups[0] {
				row[2] = termGroups(*c.N)
			}
			if c.ToEnrol != nil {
				row[3] = wholeText(c.ToEnrol.Total)
			}
		} else {
			row[2], row[3] = "-", "no size"
		}
		rows = append(rows, row)
		mark, code := "  ", termEvidence
		if s.Chosen != nil && c.Scenario == s.Chosen.Scenario {
			mark, code = "> ", termPlan
		}
		marks, inks = append(marks, mark), append(inks, code)
	}
	w.grid(cols, rows, marks, inks)
}

func (w *textWriter) threats(p *result.Plan) {
	if len(p.Threats) == 0 {
		return
	}
	w.blank()
	w.line("What could make it wrong")
	for i, t := range p.Threats {
		w.wrapped(fmt.Sprint(i+1), 3, strings.TrimSpace(t.Head+" "+t.Text))
	}
}

// waiting names the findings without a decision.
func (w *textWriter) waiting(p *result.Plan) {
	if p.Undecided == 0 {
		return
	}
	var places []string
	for _, f := range p.Findings {
		if f.Decision == nil && f.Severity != "note" && len(places) < 2 {
			if s := placeText(f.Place); s != "" {
				places = append(places, s)
			}
		}
	}
	s := fmt.Sprintf("%d %s for a decision", p.Undecided, plural(p.Undecided, "finding waits", "findings wait"))
	if len(places) > 0 {
		s += ": " + strings.Join(places, ", ")
		if p.Undecided > len(places) {
			s += " ..."
		}
	}
	if p.Pool != nil {
		s += " (footing read " + p.Pool.Evidence.File + ")"
	}
	w.wrapped("", 0, s)
}
