package reports

import (
	"fmt"
	"math"
	"sort"

	"footing/plan/result"
)

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
