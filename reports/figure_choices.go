package reports

import (
	"fmt"
	"math"

	"footing/plan/result"
)

// ChoicesFigure draws the size under every combination of analysis choices: a row for each option, a tick in it for
// each combination with that option, and at the right how many of them give no size. The plan's own size stands on top.
func ChoicesFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The size under every combination of analysis choices"
	m := p.Size.Choices
	if m == nil || len(m.Combinations) == 0 {
		why := "no other analysis was run"
		if m != nil && m.Why != "" {
			why = m.Why
		}
		return emptyFigure("choices", title, why)
	}
	c := choiceMap{p: p, m: m, o: options(o)}
	if !c.measure() {
		return emptyFigure("choices", title, "no combination has a size")
	}
	alt := fmt.Sprintf("%d combinations: %d need the planned size or fewer, %d more, for %d no size exists.", len(m.Combinations), m.Enough, m.More, m.NoSize)
	return Figure{Name: "choices", Title: title, Alt: alt, Table: c.table(), scene: c.draw()}
}

type choiceMap struct {
	p *result.Plan
	m *result.ChoiceMap
	o figureOptions
	x axis
}

// measure sets the axis over all sizes; false when there is none.
func (c *choiceMap) measure() bool {
	lo, hi := math.Inf(1), 0.0
	cover := func(n *result.N) {
		if g := float64(firstGroup(n)); g > 0 {
			lo, hi = math.Min(lo, g), math.Max(hi, g)
		}
	}
	for _, k := range c.m.Combinations {
		cover(k.N)
	}
	if hi == 0 {
		return false
	}
	if k := c.p.Size.Chosen; k != nil {
		cover(&k.N)
	}
	c.x = axis{Lo: math.Max(1, lo/1.3), Hi: hi * 1.3, A: 262, B: c.o.width() - 122, Log: true}
	if c.o.narrow {
		c.x.A, c.x.B = 8, c.o.width()-66
	}
	return true
}

func (c *choiceMap) draw() scene {
	s := scene{W: c.o.width()}
	y := 34.0
	c.planRow(&s, y)
	step := 20.0
	if c.o.narrow {
		step = 34
	}
	if k := c.p.Size.Chosen; k != nil {
		px := c.x.at(float64(firstGroup(&k.N)))
		s.add(line(px, 22, px, c.bottom(y+step, step), inkPlan, 1.2).dash("4 3"))
	}
	y += step
	for d, dim := range c.m.Dimensions {
		s.add(line(0, y-step/2-1, s.W, y-step/2-1, inkLine, 1))
		for i, option := range dim.Options {
			c.row(&s, d, i, dim, option, y)
			y += step
		}
		y += 4
	}
	bottom := y - step/2
	s.add(line(c.x.A, bottom, c.x.B, bottom, inkFaint, 1))
	for _, t := range c.x.thin(countTicks(c.x.Lo, c.x.Hi, map[bool]int{false: 8, true: 5}[c.o.narrow]), 11) {
		s.add(line(c.x.at(t.Value), bottom, c.x.at(t.Value), bottom+4, inkFaint, 1), label(c.x.at(t.Value), bottom+17, t.Text, inkSoft, 11).middle())
	}
	s.add(label(c.x.B, bottom+33, groupWords(c.p), inkSoft, 11).end(), label(s.W, 14, "no size", inkSoft, 11).end())
	s.H = bottom + 38
	return s
}

// bottom is where the rows end when the first stands at y.
func (c *choiceMap) bottom(y, step float64) float64 {
	for _, d := range c.m.Dimensions {
		y += step*float64(len(d.Options)) + 4
	}
	return y - step/2
}

// planRow is the plan's own analysis, on top.
func (c *choiceMap) planRow(s *scene, y float64) {
	k := c.p.Size.Chosen
	if k == nil {
		return
	}
	words := scenarioWords(c.p, k.Scenario)
	px := c.x.at(float64(firstGroup(&k.N)))
	s.add(label(px, 14, "planned "+wholeText(firstGroup(&k.N)), inkPlan, 12).bold().middle(), circle(px, y, 5, inkPlan))
	if !c.o.narrow {
		s.add(label(0, y+4, "the plan", inkText, 12).bold())
		e := clipped(c.x.A-14, y+4, words, c.x.A-90, inkText, 12, true)
		s.add(e.end())
	}
}

func (c *choiceMap) row(s *scene, d, i int, dim result.ChoiceDimension, option string, y float64) {
	name := dim.Words
	if name == "" {
		name = words(dim.Name)
	}
	if c.o.narrow {
		s.add(above(y-6, name+": "+option, s.W-70, false))
		y += 9
	} else {
		if i == 0 {
			s.add(clipped(0, y+4, name, 104, inkSoft, 11.5, false))
		}
		s.add(clipped(c.x.A-14, y+4, option, c.x.A-124, inkText, 12, false).end())
	}
	all, none := 0, 0
	for _, k := range c.m.Combinations {
		if d >= len(k.Options) || k.Options[d] != i {
			continue
		}
		all++
		n := firstGroup(k.N)
		if n == 0 {
			none++
			continue
		}
		x := c.x.at(float64(n))
		if k.Plan {
			s.add(line(x, y-7, x, y+7, inkEvidence, 3))
		} else {
			s.add(line(x, y-6, x, y+6, inkEvidence, 1.4).faded(0.85))
		}
	}
	if all == 0 {
		return
	}
	if !c.o.narrow {
		w := 44 * float64(none) / float64(all)
		s.add(rect(c.x.B+14, y-4, w, 8, inkFaint).faded(0.6))
	}
	i2 := inkText
	if none == 0 {
		i2 = inkSoft
	}
	s.add(label(s.W, y+4, fmt.Sprintf("%d of %d", none, all), i2, 11.5).end())
}

func (c *choiceMap) table() Table {
	t := Table{Text: len(c.m.Dimensions)}
	for _, d := range c.m.Dimensions {
		name := d.Words
		if name == "" {
			name = words(d.Name)
		}
		t.Head = append(t.Head, name)
	}
	t.Head = append(t.Head, "studies", "sized for", "per group", "to enrol")
	scale := effectScale{c.p.Size.Scale}
	for _, k := range c.m.Combinations {
		var cells []string
		for d, dim := range c.m.Dimensions {
			text := "–"
			if d < len(k.Options) && k.Options[d] >= 0 && k.Options[d] < len(dim.Options) {
				text = dim.Options[k.Options[d]]
			}
			cells = append(cells, text)
		}
		enrol := totalText(k.ToEnrol)
		if k.N == nil {
			enrol = "no size"
		}
		t.Rows = append(t.Rows, append(cells, fmt.Sprint(k.K), scale.number(k.Effect), groupsText(k.N), enrol))
	}
	return t
}
