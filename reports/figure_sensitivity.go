package reports

import (
	"fmt"

	"footing/plan/result"
)

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
