package reports

import (
	"fmt"
	"math"

	"footing/plan/result"
)

// scenarioRows is a row for each scenario on one logarithmic axis: the frame of the figures on sizes and on costs.
type scenarioRows struct {
	p         *result.Plan
	o         figureOptions
	s         scene
	scale     effectScale
	pens      map[string]pen
	x         axis
	name      float64 // room of the names
	top, rowH float64
	bottom    float64
}

// newScenarioRows makes the frame for values from lo to hi, with room at the right for the last value's text.
func newScenarioRows(p *result.Plan, o figureOptions, lo, hi, right float64) *scenarioRows {
	f := &scenarioRows{p: p, o: o, s: scene{W: o.width()}, scale: effectScale{p.Size.Scale}, pens: scenarioPens(p.Range), name: 250, top: 26, rowH: 24}
	if o.narrow { // the name stands above its marks
		f.name, f.rowH = 0, 40
	}
	f.x = axis{Lo: lo, Hi: hi, A: f.name + 12, B: f.s.W - right, Log: true}
	f.bottom = f.top + f.rowH*float64(len(p.Size.Cases)) + 4
	for _, k := range f.x.thin(countTicks(lo, hi, map[bool]int{false: 8, true: 5}[o.narrow]), 11) {
		f.s.add(line(f.x.at(k.Value), f.top-4, f.x.at(k.Value), f.bottom, inkLine, 1), label(f.x.at(k.Value), f.bottom+17, k.Text, inkSoft, 11).middle())
	}
	return f
}

// mark draws a line through all rows with its name on top.
func (f *scenarioRows) mark(value float64, text string, dash string) {
	x := f.x.at(value)
	half := textWidth(text, 12, true) / 2
	f.s.add(line(x, 20, x, f.bottom, inkPlan, 1.3).dash(dash), label(math.Min(math.Max(x, half), f.s.W-half), 14, text, inkPlan, 12).bold().middle())
}

// row writes a scenario's name and gives the height of its marks, its pen and its name.
func (f *scenarioRows) row(i int) (y float64, pn pen, text string) {
	c := f.p.Size.Cases[i]
	y = f.top + f.rowH*(float64(i)+0.5)
	text = scenarioWords(f.p, c.Scenario) + " " + f.scale.text(c.Effect)
	bold := f.p.Size.Chosen != nil && f.p.Size.Chosen.Scenario == c.Scenario
	if f.o.narrow {
		f.s.add(above(y-8, text, f.s.W, bold))
		y += 8
	} else {
		f.s.add(clipped(0, y+4, text, f.name, inkText, 12, bold))
	}
	pn, ok := f.pens[c.Scenario]
	if !ok {
		pn = pen{ink: inkPlan}
	}
	return y, pn, text
}

// none hatches the row of a scenario without a size.
func (f *scenarioRows) none(y float64) {
	const why = "no size exists"
	w := textWidth(why, 11, false)
	f.s.add(hatch(f.x.A, y-8, f.x.B-f.x.A, 16, 7, inkFaint).faded(0.45), rect(f.x.A+8, y-9, w+10, 18, inkPaper), label(f.x.A+13, y+4, why, inkSoft, 11))
}

// finish draws the axis.
func (f *scenarioRows) finish(words string) scene {
	f.s.add(line(f.x.A, f.bottom, f.x.B, f.bottom, inkFaint, 1), label(f.x.B, f.bottom+33, words, inkSoft, 11).end())
	f.s.H = f.bottom + 38
	return f.s
}

// ScenariosFigure draws the people that each scenario needs for 80 and for 90% power on one logarithmic axis, with
// the planned size through all rows.
func ScenariosFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The size that each scenario needs"
	scale := effectScale{p.Size.Scale}
	lo, hi := math.Inf(1), 0.0
	cover := func(n *result.N) {
		if g := float64(firstGroup(n)); g > 0 {
			lo, hi = math.Min(lo, g), math.Max(hi, g)
		}
	}
	t := Table{Head: []string{"scenario", "effect", "people for 80%", "people for 90%"}, Text: 1}
	for _, c := range p.Size.Cases {
		cover(c.At80)
		cover(c.At90)
		t.Rows = append(t.Rows, []string{scenarioWords(p, c.Scenario), scale.text(c.Effect), groupsText(c.At80), groupsText(c.At90)})
	}
	if hi == 0 {
		return emptyFigure("scenarios", title, "no scenario has a size")
	}
	if c := p.Size.Chosen; c != nil {
		cover(&c.N)
	}
	opt := options(o)
	f := newScenarioRows(p, opt, math.Max(1, lo/1.6), hi*1.6, map[bool]float64{false: 70, true: 44}[opt.narrow])
	if c := p.Size.Chosen; c != nil && firstGroup(&c.N) > 0 {
		f.mark(float64(firstGroup(&c.N)), "planned "+wholeText(firstGroup(&c.N)), "4 3")
	}
	alt := ""
	for i := range p.Size.Cases {
		alt += f.sizes(i)
	}
	y := f.bottom + 29
	f.s.add(circle(5, y, 4.5, inkSoft), label(14, y+4, "80% power", inkSoft, 11), circle(92, y, 4, inkPaper).outline(inkSoft, 1.8), label(101, y+4, "90%", inkSoft, 11))
	return Figure{Name: "scenarios", Title: title, Alt: alt, Table: t, scene: f.finish(groupWords(p))}
}

// sizes draws the two sizes of one scenario and says them in words.
func (f *scenarioRows) sizes(i int) string {
	y, pn, text := f.row(i)
	a, b := firstGroup(f.p.Size.Cases[i].At80), firstGroup(f.p.Size.Cases[i].At90)
	if a == 0 {
		f.none(y)
		return fmt.Sprintf(" %s: no size exists.", text)
	}
	xa, xb := f.x.at(float64(a)), f.x.at(float64(b))
	if b > 0 {
		f.s.add(line(xa, y, xb, y, pn.ink, 1.2), circle(xb, y, 4, inkPaper).outline(pn.ink, 1.8),
			rect(xb+8, y-7, textWidth(wholeText(b), 11, false)+2, 14, inkPaper).faded(0.85), label(xb+9, y+4, wholeText(b), inkSoft, 11))
	}
	w := textWidth(wholeText(a), 11.5, true)
	f.s.add(rect(xa-11-w, y-7, w+4, 14, inkPaper), circle(xa, y, 4.5, pn.ink), label(xa-9, y+4, wholeText(a), pn.ink, 11.5).bold().end())
	return fmt.Sprintf(" %s: %s for 80%%, %s for 90%%.", text, wholeText(a), wholeText(b))
}
