package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// TextCompare writes what changed between two editions; with orders also what moved the number in each order of its
// parts.
func TextCompare(c *result.Comparison, orders bool, o TextOptions) string {
	w := &textWriter{o: o}
	w.head(c.Plan, editionName(c.From)+" to "+editionName(c.To))
	w.blank()
	w.wrapped("", 0, c.Line+".")
	w.studies("Added", c.Added)
	w.studies("Dropped", c.Dropped)
	w.studies("Changed", c.Changed)
	if len(c.Options) > 0 {
		w.blank()
		w.line("Options")
		for _, v := range c.Options {
			w.wrapped("", 4, fmt.Sprintf("%s: %s -> %s", v.Name, orNone(v.From), orNone(v.To)))
		}
	}
	w.figureChanges(c.Figures)
	w.move(c.Move, orders)
	w.rules(c)
	return w.String()
}

func editionName(e result.EditionRef) string {
	if e.Number == 0 {
		return "now"
	}
	s := fmt.Sprintf("edition %d", e.Number)
	if e.Date != "" {
		s += " of " + e.Date
	}
	return s
}

func orNone(s string) string {
	if strings.TrimSpace(s) == "" {
		return "(none)"
	}
	return s
}

func (w *textWriter) studies(title string, list []result.StudyChange) {
	if len(list) == 0 {
		return
	}
	w.blank()
	w.line("%s", title)
	for _, s := range list {
		w.wrapped("", 2, fmt.Sprintf("%s (%s)", s.Study, placeText(s.Place)))
		for _, v := range s.Cells {
			w.wrapped("", 6, fmt.Sprintf("%s: %s -> %s", v.Name, orNone(v.From), orNone(v.To)))
		}
	}
}

func (w *textWriter) figureChanges(list []result.FigureChange) {
	var rows [][]string
	for _, f := range list {
		from, to := f.From, f.To
		if f.FromShown != nil || f.ToShown != nil {
			from, to = f.FromShown, f.ToShown
		}
		write := effectText
		switch f.Name {
		case "studies", "n", "to-enrol", "cost":
			write = func(x float64) string { return groupDigits(fixed(x, 0)) }
		case "assurance":
			write = percentCell
		case "tau":
			write = effectText3
		}
		a, b := optional(from, write), optional(to, write)
		if a == b {
			continue
		}
		rows = append(rows, []string{f.Words, a, b})
	}
	if len(rows) == 0 {
		return
	}
	w.blank()
	w.grid([]textColumn{{head: "figure", most: 50}, {head: "was", right: true}, {head: "is", right: true}}, rows, nil, nil)
}

func (w *textWriter) rules(c *result.Comparison) {
	w.blank()
	if c.FrozenN != nil && (c.FrozenPower != nil || c.FrozenAssurance != nil) {
		var parts []string
		if c.FrozenPower != nil {
			parts = append(parts, "power "+TermText(percentText(*c.FrozenPower)))
		}
		if c.FrozenAssurance != nil {
			parts = append(parts, "assurance "+TermText(percentText(*c.FrozenAssurance)))
		}
		w.wrapped("", 0, fmt.Sprintf("The frozen size (%s analysed) under the new evidence: %s.", TermText(wholeText(c.FrozenN.Total)), strings.Join(parts, ", ")))
	}
	for _, r := range c.Rules {
		mark := "no "
		if r.Triggered {
			mark = "YES"
		}
		w.wrapped(mark, 5, r.Rule+": "+r.Text)
	}
	if !c.Triggered {
		w.line("No revision rule triggered.")
	} else {
		w.line("A revision rule is triggered.")
	}
}

// move says what moved the number to enrol.
func (w *textWriter) move(m *result.Move, orders bool) {
	if m == nil {
		return
	}
	w.blank()
	if m.Why != "" {
		w.wrapped("", 0, "What moved the number to enrol can't be said: "+strings.TrimRight(m.Why, ".")+".")
		return
	}
	w.line("%s", TermText(fmt.Sprintf("What moved the number to enrol from %s to %s", wholeText(m.From), wholeText(m.To))))
	for _, p := range m.Parts {
		change := TermText(fixed(p.Change, 1))
		if p.Change > 0 {
			change = "+" + change
		}
		w.line("%10s  %s", change, p.Words)
	}
	w.line("            (each averaged over the orders of the three)")
	if !orders {
		return
	}
	for _, x := range m.Orders {
		steps := make([]string, len(x.Order))
		for i, name := range x.Order {
			steps[i] = name + " " + changeText(x.Changes[i])
		}
		w.wrapped("", 12, strings.Join(steps, ", then "))
	}
}
