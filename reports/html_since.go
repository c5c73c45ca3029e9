package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// since writes what changed since the last edition.
func (w writer) since() *section {
	c := w.p.Since
	if c == nil {
		return nil
	}
	s := &section{ID: "since", Title: fmt.Sprintf("Since edition %d", c.From.Number), Lead: w.sinceLead()}
	if len(c.Figures) > 0 {
		t := &tableView{Caption: "What moved", Head: []string{"figure", "then", "now"}, Text: 1}
		for _, f := range c.Figures {
			name := f.Words
			if name == "" {
				name = words(f.Name)
			}
			t.Rows = append(t.Rows, tableRow{Cells: []string{name, movedText(f.FromShown, f.From), movedText(f.ToShown, f.To)}})
		}
		s.Blocks = append(s.Blocks, block{Table: t, Margin: []note{w.editionNote()}})
	}
	if len(c.Rules) > 0 {
		t := &tableView{Caption: "Revision rules", Head: []string{"rule", "state", "now"}, Text: 3}
		for _, r := range c.Rules {
			state := "not triggered"
			if r.Triggered {
				state = "triggered"
			}
			t.Rows = append(t.Rows, tableRow{Cells: []string{r.Rule, state, r.Text}, Strong: r.Triggered})
		}
		s.Blocks = append(s.Blocks, block{Table: t})
	}
	for _, g := range []struct {
		head string
		list []result.StudyChange
	}{{"Studies added", c.Added}, {"Studies dropped", c.Dropped}, {"Studies changed", c.Changed}} {
		if b := studyChanges(g.head, g.list); b != nil {
			s.Blocks = append(s.Blocks, *b)
		}
	}
	if len(c.Options) > 0 {
		t := &tableView{Caption: "Choices of the plan that changed", Head: []string{"figure", "then", "now"}, Text: 3}
		for _, o := range c.Options {
			t.Rows = append(t.Rows, tableRow{Cells: []string{o.Name, o.From, o.To}})
		}
		s.Blocks = append(s.Blocks, block{Table: t})
	}
	if len(c.History) > 1 {
		b := w.figure(HistoryFigure)
		b.Heading = "Over the editions"
		s.Blocks = append(s.Blocks, b)
	}
	return s
}

func (w writer) sinceLead() string {
	c := w.p.Since
	var parts []string
	if c.Line != "" {
		parts = append(parts, upperFirst(strings.TrimRight(c.Line, "."))+".")
	}
	if c.FrozenN != nil && c.FrozenPower != nil {
		text := fmt.Sprintf("The frozen size (%s) now has power %s", groupsText(c.FrozenN), percentText(*c.FrozenPower))
		if c.FrozenAssurance != nil {
			text += fmt.Sprintf(" and assurance %s", percentText(*c.FrozenAssurance))
		}
		parts = append(parts, text+".")
	}
	if !c.Triggered && c.Line == "" {
		parts = append(parts, "No revision rule is triggered.")
	}
	return strings.Join(parts, " ")
}

func (w writer) editionNote() note {
	e := w.p.Since.From
	text := "frozen"
	if e.Date != "" {
		text += " " + dateText(e.Date)
	}
	if e.By != "" {
		text += " by " + clipRunes(e.By, 40)
	}
	if e.Why != "" {
		text += ": " + clipRunes(e.Why, 120)
	}
	return note{fmt.Sprintf("Edition %d", e.Number), text + "."}
}

// movedText writes a figure that moved: a count whole, anything else with two decimals.
func movedText(shown, plain *float64) string {
	x := shown
	if x == nil {
		x = plain
	}
	if x == nil {
		return "–"
	}
	if *x == float64(int(*x)) && (*x >= 10 || *x <= -10) {
		return wholeText(int(*x))
	}
	return effectText(*x)
}

func studyChanges(head string, list []result.StudyChange) *block {
	if len(list) == 0 {
		return nil
	}
	t := &tableView{Caption: head, Head: []string{"study", "place", "what"}, Text: 3}
	for _, c := range list {
		var cells []string
		for _, v := range c.Cells {
			cells = append(cells, fmt.Sprintf("%s: %s → %s", v.Name, clipRunes(v.From, 60), clipRunes(v.To, 60)))
		}
		t.Rows = append(t.Rows, tableRow{Cells: []string{c.Study, c.Place.String(), strings.Join(cells, "; ")}})
	}
	return &block{Table: t}
}
