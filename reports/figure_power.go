package reports

import (
	"fmt"
	"math"

	"footing/plan/result"
)

// curveSet is a figure of chances over n: lines with their names at the ends and a planned n.
type curveSet struct {
	o       figureOptions
	lines   []curveLine
	planned int
	xWords  string
	xMost   int // 0: as far as the lines go
}

type curveLine struct {
	name    string // at the line's end
	pen     pen
	points  []point // n, chance
	planned *float64
	bold    bool
	ceiling *float64 // drawn as a thin line over the whole width
}

// PowerFigure draws the power over the size of the study, a line for each scenario that has a size, with the values
// where the lines cross the planned size.
func PowerFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "Power by size, a line for each scenario"
	c := curveSet{o: options(o), xWords: groupWords(p)}
	scale := effectScale{p.Size.Scale}
	pens := scenarioPens(p.Range)
	t := Table{Head: []string{"scenario", "effect", "power at the planned size", "people for 80%", "people for 90%"}, Text: 1}
	alt := ""
	for _, curve := range p.Size.Curves {
		l := curveLine{pen: pens[curve.Scenario]}
		if l.pen.ink == inkNone {
			l.pen = pen{ink: inkPlan, width: 1.8}
		}
		l.name = clipRunes(scenarioWords(p, curve.Scenario), 44)
		for _, pt := range curve.Points {
			l.points = append(l.points, point{float64(pt.N), pt.Power})
		}
		if k := caseOf(p, curve.Scenario); k != nil {
			l.name += " " + scale.text(k.Effect)
			l.planned = k.PowerAtChosen
			t.Rows = append(t.Rows, []string{scenarioWords(p, curve.Scenario), scale.text(k.Effect), percentOr(k.PowerAtChosen), groupsText(k.At80), groupsText(k.At90)})
			if k.PowerAtChosen != nil {
				alt += fmt.Sprintf(" %s: %s.", l.name, percentText(*k.PowerAtChosen))
			}
		}
		if s := scenarioOf(p, curve.Scenario); s != nil {
			l.bold = s.Target
		}
		c.lines = append(c.lines, l)
	}
	if len(c.lines) == 0 {
		return emptyFigure("power", title, "no scenario has a size")
	}
	head := "Power rises with the size of the study."
	if k := p.Size.Chosen; k != nil {
		c.planned = firstGroup(&k.N)
		head = fmt.Sprintf("Power at the planned %s %s:", groupsText(&k.N), c.xWords)
	}
	return Figure{Name: "power", Title: title, Alt: head + alt, Table: t, scene: c.draw()}
}

// AssuranceFigure draws the chance of success averaged over the distribution of the effect, and the ceiling that no
// size can pass.
func AssuranceFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "Assurance by size, and its ceiling"
	a := p.Size.Assurance
	if a == nil || len(a.Curve) < 2 {
		why := "there is no distribution of the effect to average over"
		if a != nil && a.Why != "" {
			why = a.Why
		}
		return emptyFigure("assurance", title, why)
	}
	c := curveSet{o: options(o), xWords: groupWords(p)}
	plain := curveLine{name: "as the studies are", pen: pen{inkEvidence, "", 2.6}, planned: a.AtChosen, bold: true, ceiling: a.Ceiling}
	adjusted := curveLine{name: "allowing for missing studies", pen: pen{inkEvidence, "6 3", 1.8}, planned: a.AtChosenAdj, ceiling: a.CeilingAdj}
	t := Table{Head: []string{"distribution of the effect", "assurance at the planned size", "ceiling"}, Text: 1}
	t.Rows = append(t.Rows, []string{plain.name, percentOr(a.AtChosen), percentOr(a.Ceiling)})
	for _, pt := range a.Curve {
		plain.points = append(plain.points, point{float64(pt.N), pt.Assurance})
		if pt.Adjusted != nil {
			adjusted.points = append(adjusted.points, point{float64(pt.N), *pt.Adjusted})
		}
	}
	c.lines = append(c.lines, plain)
	alt := fmt.Sprintf("Assurance %s at the planned size, at most %s however large the study.", percentOr(a.AtChosen), percentOr(a.Ceiling))
	if len(adjusted.points) > 1 {
		c.lines = append(c.lines, adjusted)
		t.Rows = append(t.Rows, []string{adjusted.name, percentOr(a.AtChosenAdj), percentOr(a.CeilingAdj)})
		alt += fmt.Sprintf(" Allowing for missing studies %s, at most %s.", percentOr(a.AtChosenAdj), percentOr(a.CeilingAdj))
	}
	if k := p.Size.Chosen; k != nil {
		c.planned = firstGroup(&k.N)
	}
	return Figure{Name: "assurance", Title: title, Alt: alt, Table: t, scene: c.draw()}
}

// percentOr writes a share that may be missing, as a table has it.
func percentOr(x *float64) string {
	if x == nil {
		return "–"
	}
	return percentCell(*x)
}

func (c curveSet) draw() scene {
	s := scene{W: c.o.width()}
	room := 0.0
	for _, l := range c.lines {
		room = math.Max(room, textWidth(l.name, 11, l.bold))
	}
	room = math.Min(room, 210)
	left := 46.0
	if c.o.narrow {
		room, left = math.Min(room, 112), 36
	}
	most := float64(c.xMost)
	for _, l := range c.lines {
		most = math.Max(most, l.points[len(l.points)-1].X)
	}
	height := 244.0
	if c.o.narrow {
		height = 210
	}
	x := axis{Lo: 0, Hi: most, A: left, B: s.W - room - 26}
	top := 18.0
	for _, l := range c.lines {
		if l.ceiling != nil {
			top += 14
		}
	}
	y := axis{Lo: 0, Hi: 1, A: top + height, B: top}
	for i := 0; i <= 5; i++ {
		v := float64(i) / 5
		s.add(line(x.A, y.at(v), x.B, y.at(v), inkLine, 1), label(x.A-6, y.at(v)+4, percentText(v), inkSoft, 11).end())
	}
	c.drawCeilings(&s, x, y)
	if c.planned > 0 && float64(c.planned) <= most {
		px := x.at(float64(c.planned))
		s.add(line(px, y.B-4, px, y.A, inkPlan, 1.2).dash("4 3"))
		e := label(px-6, y.A-6, "planned "+wholeText(c.planned), inkPlan, 12).bold().end()
		if w := textWidth(e.Text, 12, true); px-6-w < x.A {
			e = label(px, y.B-7, e.Text, inkPlan, 12).bold().middle() // no room beside the line: on top of it
		}
		s.add(e)
	}
	for _, l := range c.lines {
		ps := make([]point, len(l.points))
		for i, p := range l.points {
			ps[i] = point{x.at(p.X), y.at(p.Y)}
		}
		s.add(path(ps, l.pen.ink, l.pen.width).dash(l.pen.dash))
	}
	c.endLabels(&s, x, y, room)
	c.plannedValues(&s, x, y)
	for _, t := range x.thin(linearTicks(0, most, map[bool]int{false: 6, true: 3}[c.o.narrow]), 11) {
		s.add(label(x.at(t.Value), y.A+17, t.Text, inkSoft, 11).middle())
	}
	words, _ := clipText(c.xWords, x.B-x.A, 11, false)
	s.add(label(x.B, y.A+33, words, inkSoft, 11).end())
	s.H = y.A + 38
	return s
}

// drawCeilings draws the values that no size passes.
func (c curveSet) drawCeilings(s *scene, x, y axis) {
	n := 0
	for _, l := range c.lines {
		if l.ceiling == nil {
			continue
		}
		py := y.at(*l.ceiling)
		s.add(line(x.A, py, x.B, py, l.pen.ink, 1).dash("1 3"))
		text := "no size passes " + percentText(*l.ceiling)
		if n > 0 {
			text += ", allowing for missing studies"
		}
		s.add(label(x.A, 11+14*float64(n), text, l.pen.ink, 11))
		n++
	}
}

// endLabels names the lines at their ends, in their order, moved apart where they meet.
func (c curveSet) endLabels(s *scene, x, y axis, room float64) {
	want := make([]float64, len(c.lines))
	lines := make([][]string, len(c.lines))
	gap := 14.0
	for i, l := range c.lines {
		want[i] = y.at(l.points[len(l.points)-1].Y)
		lines[i] = []string{l.name}
		if c.o.narrow {
			lines[i] = wrapText(l.name, room, 11, 3, l.bold)
			gap = math.Max(gap, 13*float64(len(lines[i]))+2)
		}
	}
	for i, at := range spread(want, gap, y.B, y.A-8) {
		l := c.lines[i]
		end := l.points[len(l.points)-1]
		s.add(line(x.at(end.X)+2, want[i], x.B+20, at, l.pen.ink, 1).faded(0.6))
		for j, text := range lines[i] {
			short, _ := clipText(text, room, 11, l.bold)
			e := label(x.B+24, at+4+13*float64(j)-6.5*float64(len(lines[i])-1), short, l.pen.ink, 11)
			e.Bold = l.bold
			s.add(e)
		}
	}
}

// plannedValues mark where the lines cross the planned size and write the values beside it, in their order.
func (c curveSet) plannedValues(s *scene, x, y axis) {
	if c.planned == 0 || float64(c.planned) > x.Hi {
		return
	}
	px := x.at(float64(c.planned))
	var want []float64
	var which []int
	for i, l := range c.lines {
		if l.planned == nil {
			continue
		}
		want = append(want, y.at(*l.planned))
		which = append(which, i)
		s.add(circle(px, y.at(*l.planned), 3.5, l.pen.ink))
	}
	for j, at := range spread(want, 13, y.B+6, y.A-6) {
		l := c.lines[which[j]]
		text := percentText(*l.planned)
		w := textWidth(text, 11.5, true)
		s.add(rect(px+6, at-6, w+2, 13, inkPaper).faded(0.85), label(px+7, at+4, text, l.pen.ink, 11.5).bold())
	}
}
