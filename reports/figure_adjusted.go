package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// AdjustedFigure sets the pooled effect beside what is left of it under each small-study adjustment: side by side,
// none of them the truth. A ring with a dashed line is an estimate that can't reassure here.
func AdjustedFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "What is left under each adjustment"
	if p.Pool == nil || p.Pool.Random.Estimate == nil {
		return emptyFigure("adjusted", title, "there is no pooled effect")
	}
	pool := p.Pool
	scale := effectScale{pool.Scale}
	r := rowPlot{o: options(o), scale: scale, columns: []string{"effect", percentText(pool.Level) + " interval"}}
	t := Table{Head: []string{"estimate", "effect", "interval", "standard error"}, Text: 1}
	row := func(name string, bold, weak bool, e *float64, i *result.Interval, se *float64) {
		pr := plotRow{name: name, bold: bold, weak: weak, estimate: e}
		interval := "–"
		if i != nil {
			pr.lower, pr.upper = &i.Lower, &i.Upper
			interval = scale.interval(i.Lower, i.Upper)
		}
		pr.cells = []string{scale.number(e), interval}
		r.rows = append(r.rows, pr)
		s := "–"
		if se != nil {
			s = fixed(*se, 3)
		}
		t.Rows = append(t.Rows, []string{name, scale.number(e), interval, s})
	}
	row("as the studies are", true, false, pool.Random.Estimate, pool.Random.Interval, pool.Random.StandardError)
	alt := fmt.Sprintf("As the studies are, %s.", scale.text(*pool.Random.Estimate))
	for _, m := range pool.SmallStudy {
		if m.Estimate == nil {
			continue
		}
		name := m.Words
		if name == "" {
			name = strings.ReplaceAll(m.Name, "-", " ")
		}
		row(name, false, m.Weak != "", m.Estimate, m.Interval, m.StandardError)
		alt += fmt.Sprintf(" %s: %s.", name, scale.text(*m.Estimate))
	}
	if len(r.rows) == 1 {
		return emptyFigure("adjusted", title, "no adjustment gives an estimate for these studies")
	}
	if i := pool.Random.Interval; i != nil {
		r.band = [2]float64{i.Lower, i.Upper}
	}
	r.middle = pool.Random.Estimate
	if p.Range != nil && p.Range.SmallestWorthwhile != nil {
		r.marked = &p.Range.SmallestWorthwhile.Effect
	}
	return Figure{Name: "adjusted", Title: title, Alt: alt, Table: t, scene: r.draw()}
}
