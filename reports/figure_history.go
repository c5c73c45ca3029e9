package reports

import (
	"fmt"

	"footing/plan/result"
)

// HistoryFigure draws the pooled effect over the editions of the plan, with the studies and the number to enrol of
// each.
func HistoryFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The pooled effect and the size over the editions"
	if p.Since == nil || len(p.Since.History) < 2 {
		return emptyFigure("history", title, "there is only one edition")
	}
	scale := effectScale{p.Size.Scale}
	if scale.Name == "" && p.Pool != nil {
		scale = effectScale{p.Pool.Scale}
	}
	r := rowPlot{o: options(o), scale: scale, columns: []string{"to enrol", "per group", "studies", "effect"}}
	t := Table{Head: []string{"edition", "date", "studies", "effect", "interval", "per group", "to enrol"}, Text: 2}
	alt := ""
	for i, h := range p.Since.History {
		name := fmt.Sprintf("edition %d", h.Edition.Number)
		if h.Edition.Number == 0 {
			name = "now"
		}
		interval := "–"
		if h.Lower != nil && h.Upper != nil {
			interval = scale.interval(*h.Lower, *h.Upper)
		}
		text := name
		if h.Edition.Date != "" && !r.o.narrow {
			text += ", " + dateText(h.Edition.Date)
		}
		r.rows = append(r.rows, plotRow{name: text, bold: i == len(p.Since.History)-1, estimate: h.Estimate, lower: h.Lower, upper: h.Upper, why: "not pooled",
			cells: []string{totalText(h.ToEnrol), groupsText(h.N), fmt.Sprint(h.K), scale.number(h.Estimate)}})
		t.Rows = append(t.Rows, []string{name, dateText(h.Edition.Date), fmt.Sprint(h.K), scale.number(h.Estimate), interval, groupsText(h.N), totalText(h.ToEnrol)})
		alt += fmt.Sprintf(" %s: %s from %d studies, %s to enrol.", upperFirst(name), scale.number(h.Estimate), h.K, totalText(h.ToEnrol))
	}
	if w := worthwhileOf(p); w != nil {
		r.marked = &w.Effect
	}
	return Figure{Name: "history", Title: title, Alt: alt, Table: t, scene: r.draw()}
}
