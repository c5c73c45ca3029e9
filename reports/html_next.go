package reports

import (
	"fmt"
)

// next writes what the next study's effect may be.
func (w writer) next() *section {
	r := w.p.Range
	if r == nil {
		return nil
	}
	title := "What the next setting may hold, and what it would cost"
	if len(r.Curve) < 2 {
		title = "What each effect would need"
	}
	s := &section{ID: "next", Title: title, Lead: w.nextLead()}
	margin := []note{}
	if d := r.Distribution; d != nil && d.Words != "" {
		margin = append(margin, note{"Distribution", upperFirst(d.Words) + ". It is of the true effect in a new setting; an observed result scatters wider."})
	}
	if r.AdjustedBy != "" && len(r.AdjustedCurve) > 0 {
		margin = append(margin, note{"Dashed curve", "The same, allowing for missing studies: " + words(r.AdjustedBy) + "."})
	}
	if r.Why != "" {
		margin = append(margin, note{"", upperFirst(r.Why)})
	}
	s.Blocks = append(s.Blocks, w.figure(NextFigure, margin...), w.scenarioTable())
	return s
}

func (w writer) nextLead() string {
	r := w.p.Range
	if w.p.Pool == nil {
		return "There are no prior studies: the number rests on what would be worthwhile alone, and nobody has said how likely that is."
	}
	text := "The average is not the plan: the next study meets one true effect, not the mean of them."
	for _, c := range r.Chances {
		if sw := r.SmallestWorthwhile; sw != nil && c.Effect == sw.Effect {
			text = fmt.Sprintf("The average is not the plan: the chance that the true effect in the next setting is worthwhile (%s or better) is %s if the studies are as they seem", w.scale.text(c.Effect), percentText(c.Chance))
			if c.Adjusted != nil {
				text += fmt.Sprintf(", %s allowing for missing studies", percentText(*c.Adjusted))
			}
			text += "."
		}
	}
	return text
}

// scenarioTable holds every scenario with its size, its cost and its power at the plan's size.
func (w writer) scenarioTable() block {
	t := &tableView{Caption: "Scenarios", Head: []string{"scenario", "effect"}, Text: 1, Wide: true}
	t.Head = append(t.Head, sizeColumns(w.p)...)
	t.Head = append(t.Head, "power at the plan's size", "where it comes from")
	for _, c := range w.p.Size.Cases {
		name, why := scenarioWords(w.p, c.Scenario), c.Why
		if s := scenarioOf(w.p, c.Scenario); s != nil {
			why = s.Why
			if s.NoSize != "" {
				why += "; no size exists: " + s.NoSize
			}
		}
		cells := []string{name, w.scale.text(c.Effect)}
		cells = append(cells, sizeCells(w.p, c.N, c.ToEnrol, c.Cost)...)
		cells = append(cells, percentOr(c.PowerAtChosen), why)
		t.Rows = append(t.Rows, tableRow{Cells: cells, Strong: w.p.Size.Chosen != nil && w.p.Size.Chosen.Scenario == c.Scenario})
	}
	b := block{Table: t, Class: "last-words"}
	if sw := w.p.Range.SmallestWorthwhile; sw != nil && sw.Assumed {
		b.Margin = []note{{"Smallest worthwhile effect", "assumed: the plan gives no source for it. Say who finds it worthwhile, and why."}}
	}
	return b
}
