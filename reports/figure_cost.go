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
	opt := options(o)
	scale, pens := effectScale{p.Size.Scale}, scenarioPens(p.Range)
	lo, hi := math.Inf(1), 0.0
	cover := func(x *float64) {
		if x != nil && *x > 0 {
			lo, hi = math.Min(lo, *x), math.Max(hi, *x)
		}
	}
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
	s := scene{W: opt.width()}
	name, rowH := 250.0, 24.0
	if opt.narrow {
		name, rowH = 0, 40
	}
	x := axis{Lo: lo / 1.5, Hi: hi * 1.5, A: name + 12, B: s.W - 96, Log: true}
	top := 26.0
	bottom := top + rowH*float64(len(p.Size.Cases)) + 4
	for _, tick := range x.thin(countTicks(x.Lo, x.Hi, 7), 11) {
		s.add(line(x.at(tick.Value), top-4, x.at(tick.Value), bottom, inkLine, 1), label(x.at(tick.Value), bottom+17, tick.Text, inkSoft, 11).middle())
	}
	if k.AtMost != nil {
		px := x.at(*k.AtMost)
		s.add(line(px, 20, px, bottom, inkPlan, 1.6))
		text := "limit " + costText(p, k.AtMost)
		half := textWidth(text, 12, true) / 2
		s.add(label(math.Min(math.Max(px, half), s.W-half), 14, text, inkPlan, 12).bold().middle())
	}
	alt := ""
	for i, c := range p.Size.Cases {
		y := top + rowH*(float64(i)+0.5)
		text := scenarioWords(p, c.Scenario) + " " + scale.text(c.Effect)
		bold := p.Size.Chosen != nil && p.Size.Chosen.Scenario == c.Scenario
		if opt.narrow {
			s.add(above(y-8, text, s.W, bold))
			y += 8
		} else {
			s.add(clipped(0, y+4, text, name, inkText, 12, bold))
		}
		pn, ok := pens[c.Scenario]
		if !ok {
			pn = pen{ink: inkPlan}
		}
		alt += costRow(&s, p, c, text, x, y, pn)
	}
	words := "cost"
	if k.Currency != "" {
		words += ", " + clipRunes(k.Currency, 12)
	}
	s.add(line(x.A, bottom, x.B, bottom, inkFaint, 1), label(x.B, bottom+33, words, inkSoft, 11).end())
	s.H = bottom + 38
	return Figure{Name: "cost", Title: title, Alt: alt, Table: t, scene: s}
}

// costRow draws one scenario and says the same in words.
func costRow(s *scene, p *result.Plan, c result.Case, text string, x axis, y float64, pn pen) string {
	if c.Cost == nil {
		s.add(hatch(x.A, y-8, x.B-x.A, 16, 7, inkFaint).faded(0.45))
		why := "no size exists"
		w := textWidth(why, 11, false)
		s.add(rect(x.A+8, y-9, w+10, 18, inkPaper), label(x.A+13, y+4, why, inkSoft, 11))
		return fmt.Sprintf(" %s: no size exists.", text)
	}
	value := costText(p, c.Cost)
	over := p.Size.Study.Cost.AtMost != nil && *c.Cost > *p.Size.Study.Cost.AtMost
	cx := x.at(*c.Cost)
	s.add(line(x.A, y, cx, y, pn.ink, 1).faded(0.4))
	if over {
		s.add(circle(cx, y, 4.2, inkPaper).outline(pn.ink, 1.8))
		value += " over"
	} else {
		s.add(circle(cx, y, 4.8, pn.ink))
	}
	s.add(rect(cx+8, y-7, textWidth(value, 11.5, false)+2, 14, inkPaper).faded(0.85), label(cx+9, y+4, value, inkText, 11.5))
	return fmt.Sprintf(" %s: %s.", text, value)
}
