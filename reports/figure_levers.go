package reports

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"footing/plan/result"
)

// barRow is one row of a figure of changes in size: a bar from the planned size, and what it comes to.
type barRow struct {
	name    string
	detail  string // second line or last column, plain words
	from    float64
	to      float64 // from == to: a point
	left    string  // at the bar's left end
	right   string  // at its right end
	cells   []string
	why     string
	loud    bool // the plan's ink; else grey
	warning bool // over the limit: marked by a word in cells, and by bold
}

// barPlot is a list of bars around the planned size.
type barPlot struct {
	o         figureOptions
	rows      []barRow
	planned   float64
	head      string // at the planned line
	xWords    string
	columns   []string
	detail    string // heading of the detail column, "" when there is none
	clipDelta bool
}

func (b barPlot) draw() scene {
	s := scene{W: b.o.width()}
	name := 60.0
	for _, r := range b.rows {
		name = math.Max(name, textWidth(r.name, 12, false))
	}
	name = math.Min(name, 200)
	columns, detail := b.columns, b.detail
	rowH := 24.0
	if detail != "" {
		rowH = 27
	}
	if b.o.narrow { // the name stands above its bar
		name, rowH = 0, 40
		if len(columns) > 1 {
			columns = columns[1:2]
		}
		detail = ""
	}
	skip := 0
	if len(columns) < len(b.columns) {
		skip = 1
	}
	widths := make([]float64, len(columns))
	room := 0.0
	for i, h := range columns {
		widths[i] = textWidth(h, 11, false)
		for _, r := range b.rows {
			if c := b.cell(r, i, skip); c != "" {
				widths[i] = math.Max(widths[i], textWidth(c, 12, i == 0 || r.warning))
			}
		}
		widths[i] += 16
		room += widths[i]
	}
	detailRoom := 0.0
	if detail != "" {
		for _, r := range b.rows {
			detailRoom = math.Max(detailRoom, textWidth(r.detail, 11, false))
		}
		detailRoom = math.Min(detailRoom, 175) + 14
	}
	if most := s.W - name - detailRoom - 160; room > most { // hostile or very long cells
		room = most
		for i := range widths {
			widths[i] = room / float64(len(widths))
		}
	}
	x := axis{A: name + 42, B: s.W - room - detailRoom - 42}
	x.Lo, x.Hi = b.planned, b.planned
	for _, r := range b.rows {
		x.Lo, x.Hi = math.Min(x.Lo, math.Min(r.from, r.to)), math.Max(x.Hi, math.Max(r.from, r.to))
	}
	pad := math.Max(0.06*(x.Hi-x.Lo), 1)
	x.Lo, x.Hi = math.Max(0, x.Lo-pad), x.Hi+pad
	top := 26.0
	bottom := top + rowH*float64(len(b.rows)) + 4
	px := x.at(b.planned)
	s.add(label(math.Min(math.Max(px, textWidth(b.head, 12, true)/2), x.B), 14, b.head, inkPlan, 12).bold().middle())
	s.add(line(px, 20, px, bottom, inkPlan, 1.2).dash("4 3"))
	at := x.B + 42
	for i, h := range columns {
		at += widths[i]
		short, _ := clipText(h, widths[i], 11, false)
		s.add(label(at, 14, short, inkSoft, 11).end())
		for j, r := range b.rows {
			cell, _ := clipText(b.cell(r, i, skip), widths[i], 12, i == 0 || r.warning)
			e := label(at, b.baseline(top, rowH, j), cell, inkText, 12).end()
			e.Bold = i == 0 || r.warning
			s.add(e)
		}
	}
	if detail != "" {
		s.add(label(s.W, 14, detail, inkSoft, 11).end())
	}
	for j, r := range b.rows {
		b.drawRow(&s, x, r, top+rowH*(float64(j)+0.5), name, detailRoom)
	}
	s.add(line(x.A, bottom, x.B, bottom, inkFaint, 1))
	for _, t := range x.thin(linearTicks(x.Lo, x.Hi, map[bool]int{false: 5, true: 3}[b.o.narrow]), 11) {
		s.add(line(x.at(t.Value), bottom, x.at(t.Value), bottom+4, inkFaint, 1), label(x.at(t.Value), bottom+17, t.Text, inkSoft, 11).middle())
	}
	words := b.xWords
	s.add(label(math.Max(x.B, textWidth(words, 11, false)), bottom+33, words, inkSoft, 11).end())
	s.H = bottom + 38
	return s
}

// baseline is where the texts of a row stand.
func (b barPlot) baseline(top, rowH float64, row int) float64 {
	y := top + rowH*(float64(row)+0.5) + 4
	if b.o.narrow {
		y += 8
	}
	return y
}

func (b barPlot) cell(r barRow, i, skip int) string {
	if i+skip < len(r.cells) {
		return r.cells[i+skip]
	}
	return ""
}

func (b barPlot) drawRow(s *scene, x axis, r barRow, y, name, detailRoom float64) {
	if b.o.narrow {
		s.add(above(y-8, r.name, s.W, false))
		y += 8
	} else {
		s.add(clipped(0, y+4, r.name, name, inkText, 12, false))
	}
	if r.why != "" {
		text, _ := clipText(r.why, x.B-x.A, 11, false)
		s.add(label(x.A, y+4, text, inkSoft, 11))
		return
	}
	lo, hi := x.at(math.Min(r.from, r.to)), x.at(math.Max(r.from, r.to))
	fill, shade := inkFaint, 0.75
	if r.loud {
		fill, shade = inkPlan, 0.9
	}
	if hi-lo < 2 {
		lo, hi = lo-1, lo+1
	}
	s.add(rect(lo, y-6, hi-lo, 12, fill).faded(shade))
	if r.left != "" {
		s.add(label(lo-5, y+4, r.left, inkText, 11.5).bold().end())
	}
	if r.right != "" {
		s.add(label(hi+5, y+4, r.right, inkText, 11.5).bold())
	}
	if detailRoom > 0 && r.detail != "" {
		lines := wrapText(clipRunes(r.detail, 200), detailRoom-10, 11, 2, false)
		for i, text := range lines {
			e := label(s.W, y+4+11.5*(float64(i)-float64(len(lines)-1)/2), text, inkSoft, 11).end()
			if strings.HasSuffix(text, "…") {
				e.Title = clipRunes(r.detail, 300)
			}
			s.add(e)
		}
	}
}

// LeversFigure draws what would make the study smaller or larger, one change at a time, with its price.
func LeversFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "What would make the study smaller, and its price"
	c := p.Size.Chosen
	if c == nil || len(p.Size.Levers) == 0 {
		return emptyFigure("levers", title, "there is no chosen size to change")
	}
	b := barPlot{o: options(o), planned: float64(firstGroup(&c.N)), head: "planned " + wholeText(firstGroup(&c.N)), xWords: groupWords(p), detail: "its price", columns: sizeColumns(p)}
	t := Table{Head: append([]string{"change", "difference"}, append(sizeColumns(p), "its price")...), Text: 1}
	levers := append([]result.Lever(nil), p.Size.Levers...)
	sort.SliceStable(levers, func(i, j int) bool { return leverN(levers[i]) < leverN(levers[j]) })
	alt := fmt.Sprintf("Planned %s.", groupsText(&c.N))
	for _, l := range levers {
		cells := sizeCells(p, l.N, l.ToEnrol, l.Cost)
		r := barRow{name: l.Words, detail: l.Price, cells: cells, from: b.planned, to: b.planned}
		t.Rows = append(t.Rows, append([]string{l.Words, changeText(l.Change)}, append(cells, l.Price)...))
		if l.N == nil {
			r.why = l.Why
			if r.why == "" {
				r.why = "no size exists"
			}
		} else {
			r.to = float64(firstGroup(l.N))
			r.loud = r.to < r.from
			if r.loud {
				r.left = changeText(l.Change)
			} else {
				r.right = changeText(l.Change)
			}
			alt += fmt.Sprintf(" %s: %s.", l.Words, groupsText(l.N))
		}
		b.rows = append(b.rows, r)
	}
	return Figure{Name: "levers", Title: title, Alt: alt, Table: t, scene: b.draw()}
}

func leverN(l result.Lever) int {
	if l.N == nil {
		return math.MaxInt
	}
	return firstGroup(l.N)
}

// sizeColumns are the headings of a size in a figure or table: groups, to enrol, and cost where costs are known.
func sizeColumns(p *result.Plan) []string {
	head := "per group"
	if c := p.Size.Chosen; c != nil && !equalGroups(&c.N) {
		head = "groups"
	}
	cols := []string{head, "to enrol"}
	if k := p.Size.Study.Cost; k != nil {
		name := "cost"
		if k.Currency != "" {
			name = "cost, " + clipRunes(k.Currency, 12)
		}
		cols = append(cols, name)
	}
	return cols
}

func sizeCells(p *result.Plan, n, enrol *result.N, cost *float64) []string {
	cells := []string{groupsText(n), totalText(enrol)}
	if p.Size.Study.Cost != nil {
		money := "–"
		if cost != nil {
			money = moneyText(*cost, "")
		}
		cells = append(cells, money)
	}
	return cells
}

// SensitivityFigure draws the number to enrol if one assumption takes another value, a bar from the plan's number to
// each; what passes the limit of the budget is marked by a word.
func SensitivityFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The number to enrol if one assumption is wrong"
	c := p.Size.Chosen
	if c == nil || len(p.Size.Sensitivity) == 0 {
		return emptyFigure("sensitivity", title, "no assumption has a range to vary")
	}
	b := barPlot{o: options(o), planned: float64(c.ToEnrol.Total), head: "planned " + wholeText(c.ToEnrol.Total), xWords: "people to enrol", columns: append(sizeColumns(p), "power")}
	cols := append([]string{"assumption", "value"}, append(sizeColumns(p), "power at the plan's size", "limit")...)
	t := Table{Head: cols, Text: 2}
	over := false
	for _, v := range p.Size.Sensitivity {
		over = over || v.OverBudget
	}
	if over {
		b.detail = "limit"
	}
	alt := fmt.Sprintf("Planned %s to enrol.", wholeText(c.ToEnrol.Total))
	for _, v := range p.Size.Sensitivity {
		cells := append(sizeCells(p, v.N, v.ToEnrol, v.Cost), percentOr(v.PowerAtChosen))
		r := barRow{name: v.Assumption + " " + v.Value, cells: cells, from: b.planned, to: b.planned}
		limit := ""
		if v.OverBudget {
			limit, r.detail, r.warning = "over the limit", "over the limit", true
		}
		t.Rows = append(t.Rows, append([]string{v.Assumption, v.Value}, append(cells, limit)...))
		if v.ToEnrol == nil {
			r.why = v.Why
			if r.why == "" {
				r.why = "no size exists"
			}
		} else {
			r.to = float64(v.ToEnrol.Total)
			r.loud = r.to < r.from
			if r.loud {
				r.left = changeText(v.ToEnrol.Total - c.ToEnrol.Total)
			} else {
				r.right = changeText(v.ToEnrol.Total - c.ToEnrol.Total)
			}
			alt += fmt.Sprintf(" %s %s: %s.", v.Assumption, v.Value, totalText(v.ToEnrol))
		}
		b.rows = append(b.rows, r)
	}
	return Figure{Name: "sensitivity", Title: title, Alt: alt, Table: t, scene: b.draw()}
}
