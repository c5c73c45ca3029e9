package reports

import (
	"fmt"
)

// size writes what a study of the planned size can show.
func (w writer) size(panel bool) *section {
	p := w.p
	if len(p.Size.Cases) == 0 && p.Size.Chosen == nil {
		return nil
	}
	s := &section{ID: "size", Title: "What a study of this size can show", Lead: w.sizeLead(), Panel: panel}
	test := note{"Test", p.Size.Test.Words + ". Power: " + p.Size.Test.Method + "."}
	if p.Size.Test.Reference != "" {
		test.Text += " " + p.Size.Test.Reference + "."
	}
	power := w.figure(PowerFigure, test)
	s.Blocks = append(s.Blocks, power)
	if p.Size.Assurance != nil {
		b := w.figure(AssuranceFigure, note{"Assurance", "Power averaged over the distribution of the effect. It counts only significant results in the intended direction."})
		b.Heading = "The chance of success over all that the next study may find"
		if t := p.Size.Assurance.OutOfReach; t != "" {
			b.Margin = append(b.Margin, note{"Out of reach", upperFirst(t)})
		}
		s.Blocks = append(s.Blocks, b)
	}
	by := w.figure(ScenariosFigure)
	by.Heading = "The size by scenario, for 80 and 90% power"
	s.Blocks = append(s.Blocks, by)
	s.Blocks = append(s.Blocks, w.errorsTable(), w.trailTable(), w.designTable())
	return s
}

func (w writer) sizeLead() string {
	c := w.p.Size.Chosen
	if c == nil {
		return "No size is chosen; the lines show what each scenario would need."
	}
	text := fmt.Sprintf("With %s analysed the power is %s", groupsText(&c.N), percentText(c.Power))
	if len(c.N.Groups) > 1 && equalGroups(&c.N) {
		text = fmt.Sprintf("With %s a group analysed the power is %s", groupsText(&c.N), percentText(c.Power))
	}
	if k := caseOf(w.p, c.Scenario); k != nil {
		text += fmt.Sprintf(" in the scenario ‘%s’ (%s)", clipRunes(scenarioWords(w.p, c.Scenario), 60), w.scale.text(k.Effect))
	}
	if a := w.p.Size.Assurance; a != nil && a.AtChosen != nil {
		text += fmt.Sprintf(", and %s averaged over what the next setting may hold", percentText(*a.AtChosen))
	}
	return text + "."
}

// errorsTable says what a significant result of this study would be worth.
func (w writer) errorsTable() block {
	t := &tableView{Caption: "What a significant result would be worth, at the planned size", Head: []string{"scenario", "effect", "power", "wrong direction", "wrong sign if significant", "exaggeration if significant"}, Text: 1, Wide: true}
	for _, c := range w.p.Size.Cases {
		if c.PowerAtChosen == nil {
			continue
		}
		m := "–"
		if c.TypeM != nil {
			m = "× " + fixed(*c.TypeM, 2)
		}
		t.Rows = append(t.Rows, tableRow{Cells: []string{scenarioWords(w.p, c.Scenario), w.scale.text(c.Effect), percentOr(c.PowerAtChosen), percentOr(c.WrongSide), percentOr(c.TypeS), m}})
	}
	b := block{}
	if len(t.Rows) > 0 {
		b.Table = t
	}
	if c := w.p.Size.Chosen; c != nil {
		if c.SmallestSignificant != nil {
			b.Paragraphs = append(b.Paragraphs, fmt.Sprintf("The smallest observed effect that would be significant at this size is %s.", w.scale.text(*c.SmallestSignificant)))
		}
		if c.SmallestDetectable != nil {
			b.Paragraphs = append(b.Paragraphs, fmt.Sprintf("The smallest true effect that it shows with %s power is %s.", percentText(w.p.Size.Study.PowerTarget), w.scale.text(*c.SmallestDetectable)))
		}
	}
	b.Margin = []note{{"Exaggeration", "A significant result is on average larger than the truth; the column says by how much (Gelman & Carlin 2014)."}}
	return b
}

// trailTable is the size before and after each allowance.
func (w writer) trailTable() block {
	c := w.p.Size.Chosen
	if c == nil || len(c.Trail) == 0 {
		return block{}
	}
	t := &tableView{Caption: "From the bare size to the number enrolled, one allowance a line", Head: []string{"step", "per group", "in all", "source"}, Text: 1}
	for _, s := range c.Trail {
		t.Rows = append(t.Rows, tableRow{Cells: []string{s.Words, groupsText(&s.N), totalText(&s.N), s.Source}})
	}
	return block{Table: t, Class: "last-words"}
}

// designTable is the planned study in its own words.
func (w writer) designTable() block {
	st := w.p.Size.Study
	t := &tableView{Caption: "The planned study", Head: []string{"item", "value"}, Text: 2}
	add := func(name, value string) {
		if value != "" {
			t.Rows = append(t.Rows, tableRow{Cells: []string{name, value}})
		}
	}
	add("outcome", words(st.Outcome))
	add("arrangement", words(st.Arrangement))
	add("aim", words(st.Aim))
	if st.Sides > 0 {
		side := "two-sided"
		if st.Sides == 1 {
			side = "one-sided"
		}
		add("significance level", side+" "+shareText(st.Alpha))
	}
	if st.PowerTarget > 0 {
		add("power asked", percentText(st.PowerTarget))
	}
	add("allocation", st.Allocation)
	add("analysis", w.p.Size.Test.Words)
	add("justification", w.p.Justification)
	for _, e := range st.Estimand {
		add("estimand: "+e.Name, e.Text)
	}
	if len(t.Rows) == 0 {
		return block{}
	}
	return block{Table: t, Class: "pairs"}
}

// changes writes what would change the size: levers and what hangs on the assumptions.
func (w writer) changes() *section {
	p := w.p
	if len(p.Size.Levers) == 0 && len(p.Size.Sensitivity) == 0 && p.Size.Choices == nil && p.Size.Study.Cost == nil {
		return nil
	}
	s := &section{ID: "changes", Title: "What would change the size", Lead: w.changesLead()}
	if len(p.Size.Levers) > 0 {
		b := w.figure(LeversFigure, note{"Levers", "One change at a time, everything else as planned. What saves people asks something in return."})
		b.Heading = "What would make the study smaller, and its price"
		s.Blocks = append(s.Blocks, b)
	}
	if p.Size.Study.Cost != nil {
		b := w.figure(CostFigure, w.costNote())
		b.Heading = "What each scenario costs"
		s.Blocks = append(s.Blocks, b)
	}
	if len(p.Size.Sensitivity) > 0 {
		b := w.figure(SensitivityFigure, note{"If wrong", "The bars show what the number becomes; the last column the power that is left if the plan’s size is kept."})
		b.Heading = "What if an assumption is wrong"
		s.Blocks = append(s.Blocks, b)
	}
	if m := p.Size.Choices; m != nil {
		b := w.figure(ChoicesFigure, note{"Each tick", "is one combination, sized for its own cautious limit. The share of combinations is a count of choices, not a probability."})
		b.Heading = "How much hangs on choices of analysis"
		if m.Sentence != "" {
			b.Paragraphs = append(b.Paragraphs, m.Sentence)
		} else if len(m.Combinations) > 0 {
			b.Paragraphs = append(b.Paragraphs, fmt.Sprintf("Of %s defensible ways to analyse the sheet, %s need the planned size or fewer, %s more, and for %s no size exists. A count, not a probability.",
				wholeText(len(m.Combinations)), wholeText(m.Enough), wholeText(m.More), wholeText(m.NoSize)))
		}
		s.Blocks = append(s.Blocks, b)
	}
	return s
}

func (w writer) costNote() note {
	k := w.p.Size.Study.Cost
	text := fmt.Sprintf("%s fixed and %s a person.", costText(w.p, &k.Fixed), costText(w.p, &k.PerParticipant))
	if c := w.p.Size.Chosen; c != nil && c.AffordableToEnrol != nil {
		text += fmt.Sprintf(" The limit reaches %s people.", wholeText(*c.AffordableToEnrol))
	}
	return note{"Cost", text}
}

func (w writer) changesLead() string {
	c := w.p.Size.Chosen
	if c == nil {
		return "One change at a time, everything else as planned."
	}
	lo, hi, n := c.ToEnrol.Total, c.ToEnrol.Total, 0
	for _, v := range w.p.Size.Sensitivity {
		if v.ToEnrol != nil {
			lo, hi, n = min(lo, v.ToEnrol.Total), max(hi, v.ToEnrol.Total), n+1
		}
	}
	if n > 0 && hi > lo {
		return fmt.Sprintf("If one assumption takes the far end of its range, the number to enrol becomes %s to %s instead of %s.", wholeText(lo), wholeText(hi), wholeText(c.ToEnrol.Total))
	}
	return "One change at a time, everything else as planned."
}
