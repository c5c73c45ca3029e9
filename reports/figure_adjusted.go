package reports

import (
	"fmt"
	"math"
	"sort"
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

// most rows of the figure on leaving studies out; with more studies those that move the mean most are drawn.
const influenceRows = 24

// InfluenceFigure draws the plan without each study: the mean of the others, and the number to enrol that they would
// give.
func InfluenceFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The plan without each study"
	if p.Pool == nil || len(p.Pool.Influence) == 0 || p.Pool.Random.Estimate == nil {
		return emptyFigure("influence", title, "leaving a study out leaves nothing to pool")
	}
	pool := p.Pool
	scale := effectScale{pool.Scale}
	all := pool.Influence
	t := Table{Head: []string{"without", "sheet row", "effect", "interval", "per group", "to enrol", "cost", "standardized residual"}, Text: 1}
	for _, in := range all {
		t.Rows = append(t.Rows, influenceCells(p, scale, in))
	}
	rows := append([]result.Influence(nil), all...)
	if len(rows) > influenceRows {
		move := func(in result.Influence) float64 {
			if in.Estimate == nil {
				return math.Inf(1)
			}
			return math.Abs(*in.Estimate - *pool.Random.Estimate)
		}
		sort.SliceStable(rows, func(i, j int) bool { return move(rows[i]) > move(rows[j]) })
		rows = rows[:influenceRows]
	}
	r := rowPlot{o: options(o), scale: scale, columns: []string{"effect"}}
	sized := false
	for _, in := range rows {
		sized = sized || in.ToEnrol != nil
	}
	if sized {
		r.columns = []string{"to enrol", "per group", "effect"}
		if p.Size.Study.Cost != nil {
			r.columns = []string{"to enrol", "per group", "cost", "effect"}
		}
	}
	cells := func(enrol, group, cost, effect string) []string {
		switch len(r.columns) {
		case 1:
			return []string{effect}
		case 3:
			return []string{enrol, group, effect}
		}
		return []string{enrol, group, cost, effect}
	}
	head := plotRow{name: "all studies", bold: true, estimate: pool.Random.Estimate, cells: cells("–", "–", "–", scale.text(*pool.Random.Estimate))}
	if c := p.Size.Chosen; c != nil {
		head.cells = cells(wholeText(c.ToEnrol.Total), groupsText(&c.N), costText(p, c.Cost), scale.text(*pool.Random.Estimate))
	}
	if i := pool.Random.Interval; i != nil {
		head.lower, head.upper = &i.Lower, &i.Upper
		r.band = [2]float64{i.Lower, i.Upper}
	}
	r.middle = pool.Random.Estimate
	r.rows = append(r.rows, head)
	for _, in := range rows {
		c := influenceCells(p, scale, in)
		r.rows = append(r.rows, plotRow{name: "without " + in.Study, estimate: in.Estimate, lower: in.Lower, upper: in.Upper, why: in.Why, cells: cells(c[5], c[4], c[6], c[2])})
	}
	alt := fmt.Sprintf("Mean effect with each study left out in turn; all studies give %s.", scale.text(*pool.Random.Estimate))
	if len(all) > len(rows) {
		alt += fmt.Sprintf(" The %d studies that move the mean most, of %d.", len(rows), len(all))
	}
	return Figure{Name: "influence", Title: title, Alt: alt, Table: t, scene: r.draw()}
}

func influenceCells(p *result.Plan, scale effectScale, in result.Influence) []string {
	interval, enrol, group, residual := "–", "–", "–", "–"
	if in.Lower != nil && in.Upper != nil {
		interval = scale.interval(*in.Lower, *in.Upper)
	}
	if in.ToEnrol != nil {
		enrol = wholeText(*in.ToEnrol)
	} else if in.Why != "" {
		enrol = "no size"
	}
	if len(in.PerGroup) > 0 {
		group = groupsText(&result.N{Groups: in.PerGroup, Total: in.PerGroup[0]})
	}
	if in.Residual != nil {
		residual = fixed(*in.Residual, 2)
	}
	return []string{in.Study, fmt.Sprint(in.Row), scale.number(in.Estimate), interval, group, enrol, costText(p, in.Cost), residual}
}

// costText writes a cost that may be missing, in the plan's currency.
func costText(p *result.Plan, cost *float64) string {
	if cost == nil {
		return "–"
	}
	currency := ""
	if c := p.Size.Study.Cost; c != nil {
		currency = clipRunes(c.Currency, 12)
	}
	return moneyText(*cost, currency)
}
