package reports

import (
	"fmt"
	"math"

	"footing/plan/result"
)

// ScenariosFigure draws the people that each scenario needs for 80 and for 90% power on one logarithmic axis, with
// the planned size through all rows.
func ScenariosFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The size that each scenario needs"
	opt := options(o)
	scale := effectScale{p.Size.Scale}
	pens := scenarioPens(p.Range)
	lo, hi := math.Inf(1), 0.0
	t := Table{Head: []string{"scenario", "effect", "people for 80%", "people for 90%"}, Text: 1}
	for _, c := range p.Size.Cases {
		for _, n := range []*result.N{c.At80, c.At90} {
			if g := float64(firstGroup(n)); g > 0 {
				lo, hi = math.Min(lo, g), math.Max(hi, g)
			}
		}
		t.Rows = append(t.Rows, []string{scenarioWords(p, c.Scenario), scale.text(c.Effect), groupsText(c.At80), groupsText(c.At90)})
	}
	if hi == 0 {
		return emptyFigure("scenarios", title, "no scenario has a size")
	}
	s := scene{W: opt.width()}
	name, right, rowH := 250.0, 70.0, 24.0
	if opt.narrow { // the name stands above its marks
		name, right, rowH = 12, 44, 40
	}
	if c := p.Size.Chosen; c != nil {
		lo, hi = math.Min(lo, float64(firstGroup(&c.N))), math.Max(hi, float64(firstGroup(&c.N)))
	}
	x := axis{Lo: math.Max(1, lo/1.6), Hi: hi * 1.6, A: name + 12, B: s.W - right, Log: true}
	top := 26.0
	bottom := top + rowH*float64(len(p.Size.Cases)) + 4
	for _, k := range x.thin(countTicks(x.Lo, x.Hi, map[bool]int{false: 8, true: 4}[opt.narrow]), 11) {
		s.add(line(x.at(k.Value), top-4, x.at(k.Value), bottom, inkLine, 1), label(x.at(k.Value), bottom+17, k.Text, inkSoft, 11).middle())
	}
	if c := p.Size.Chosen; c != nil {
		px := x.at(float64(firstGroup(&c.N)))
		s.add(line(px, 20, px, bottom, inkPlan, 1.2).dash("4 3"), label(px, 14, "planned "+wholeText(firstGroup(&c.N)), inkPlan, 12).bold().middle())
	}
	alt := ""
	for i, c := range p.Size.Cases {
		y := top + rowH*(float64(i)+0.5)
		pn, ok := pens[c.Scenario]
		if !ok {
			pn = pen{ink: inkPlan}
		}
		text := scenarioWords(p, c.Scenario) + " " + scale.text(c.Effect)
		bold := p.Size.Chosen != nil && p.Size.Chosen.Scenario == c.Scenario
		if opt.narrow {
			s.add(above(y-8, text, s.W, bold))
			y += 8
		} else {
			s.add(clipped(0, y+4, text, name, inkText, 12, bold))
		}
		a, b := firstGroup(c.At80), firstGroup(c.At90)
		if a == 0 {
			s.add(hatch(x.A, y-8, x.B-x.A, 16, 7, inkFaint).faded(0.45))
			why := "no size exists"
			w := textWidth(why, 11, false)
			s.add(rect(x.A+8, y-9, w+10, 18, inkPaper), label(x.A+13, y+4, why, inkSoft, 11))
			alt += fmt.Sprintf(" %s: no size exists.", text)
			continue
		}
		xa, xb := x.at(float64(a)), x.at(float64(b))
		if b > 0 {
			s.add(line(xa, y, xb, y, pn.ink, 1.2), circle(xb, y, 4, inkPaper).outline(pn.ink, 1.8), label(xb+9, y+4, wholeText(b), inkSoft, 11))
		}
		w := textWidth(wholeText(a), 11.5, true)
		s.add(rect(xa-11-w, y-7, w+4, 14, inkPaper), circle(xa, y, 4.5, pn.ink), label(xa-9, y+4, wholeText(a), pn.ink, 11.5).bold().end())
		alt += fmt.Sprintf(" %s: %s for 80%%, %s for 90%%.", text, wholeText(a), wholeText(b))
	}
	s.add(line(x.A, bottom, x.B, bottom, inkFaint, 1), label(x.B, bottom+33, groupWords(p), inkSoft, 11).end())
	s.add(circle(5, bottom+29, 4.5, inkSoft), label(14, bottom+33, "80% power", inkSoft, 11))
	s.add(circle(92, bottom+29, 4, inkPaper).outline(inkSoft, 1.8), label(101, bottom+33, "90%", inkSoft, 11))
	s.H = bottom + 38
	return Figure{Name: "scenarios", Title: title, Alt: alt, Table: t, scene: s}
}
