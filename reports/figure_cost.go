package reports

import (
	"fmt"
	"math"

	"footing/plan/result"
)

// CostFigure draws what the study costs under each scenario against the limit of the budget.
func CostFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "What each scenario costs"
	k := p.Size.Study.Cost
	if k == nil {
		return emptyFigure("cost", title, "the plan gives no costs")
	}
	lo, hi := math.Inf(1), 0.0
	cover := func(x *float64) {
		if x != nil && *x > 0 {
			lo, hi = math.Min(lo, *x), math.Max(hi, *x)
		}
	}
	scale := effectScale{p.Size.Scale}
	t := Table{Head: []string{"scenario", "effect", "to enrol", "cost", "limit"}, Text: 1}
	for _, c := range p.Size.Cases {
		cover(c.Cost)
		limit := "–"
		if c.Cost != nil && k.AtMost != nil {
			limit = "within"
			if *c.Cost > *k.AtMost {
				limit = "over"
			}
		}
		t.Rows = append(t.Rows, []string{scenarioWords(p, c.Scenario), scale.text(c.Effect), totalText(c.ToEnrol), costText(p, c.Cost), limit})
	}
	if hi == 0 {
		return emptyFigure("cost", title, "no scenario has a size")
	}
	cover(k.AtMost)
	f := newScenarioRows(p, options(o), lo/1.5, hi*1.5, 96)
	if k.AtMost != nil && *k.AtMost > 0 {
		f.mark(*k.AtMost, "limit "+costText(p, k.AtMost), "")
	}
	alt := ""
	for i := range p.Size.Cases {
		alt += f.cost(i)
	}
	words := "cost"
	if k.Currency != "" {
		words += ", " + clipRunes(k.Currency, 12)
	}
	return Figure{Name: "cost", Title: title, Alt: alt, Table: t, scene: f.finish(words)}
}

// cost draws the cost of one scenario, a ring where it passes the limit, and says it in words.
func (f *scenarioRows) cost(i int) string {
	y, pn, text := f.row(i)
	c := f.p.Size.Cases[i]
	if c.Cost == nil || *c.Cost <= 0 {
		f.none(y)
		return fmt.Sprintf(" %s: no size exists.", text)
	}
	value := costText(f.p, c.Cost)
	x := f.x.at(*c.Cost)
	f.s.add(line(f.x.A, y, x, y, pn.ink, 1).faded(0.4))
	if limit := f.p.Size.Study.Cost.AtMost; limit != nil && *c.Cost > *limit {
		f.s.add(circle(x, y, 4.2, inkPaper).outline(pn.ink, 1.8))
		value += " over"
	} else {
		f.s.add(circle(x, y, 4.8, pn.ink))
	}
	f.s.add(rect(x+8, y-7, textWidth(value, 11.5, false)+2, 14, inkPaper).faded(0.85), label(x+9, y+4, value, inkText, 11.5))
	return fmt.Sprintf(" %s: %s.", text, value)
}
