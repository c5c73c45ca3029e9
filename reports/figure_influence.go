package reports

import (
	"fmt"
	"math"
	"slices"
	"sort"

	"footing/plan/result"
)

// most rows of the figure on leaving studies out; with more studies those that move the mean most are drawn.
const influenceRows = 24

// InfluenceFigure draws the plan without each study: the mean of the others, and the number to enrol that they would
// give.
func InfluenceFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The plan without each study"
	if p.Pool == nil || len(p.Pool.Influence) == 0 || p.Pool.Random.Estimate == nil {
		return emptyFigure("influence", title, "leaving a study out leaves nothing to pool")
	}
	pool, all, mean := p.Pool, p.Pool.Influence, *p.Pool.Random.Estimate
	scale := effectScale{pool.Scale}
	t := Table{Head: []string{"without", "sheet row", "effect", "interval", "per group", "to enrol", "cost", "standardized residual"}, Text: 1}
	for _, in := range all {
		t.Rows = append(t.Rows, influenceCells(p, scale, in))
	}
	rows := mostMoving(all, mean)
	r := rowPlot{o: options(o), scale: scale, middle: &mean}
	pick := influenceColumns(&r, p, rows)
	head := plotRow{name: "all studies", bold: true, estimate: &mean, cells: pick("–", "–", "–", scale.text(mean))}
	if c := p.Size.Chosen; c != nil {
		head.cells = pick(wholeText(c.ToEnrol.Total), groupsText(&c.N), costText(p, c.Cost), scale.text(mean))
	}
	if i := pool.Random.Interval; i != nil {
		head.lower, head.upper = &i.Lower, &i.Upper
		r.band = [2]float64{i.Lower, i.Upper}
	}
	r.rows = append(r.rows, head)
	for _, in := range rows {
		c := influenceCells(p, scale, in)
		r.rows = append(r.rows, plotRow{name: "without " + in.Study, estimate: in.Estimate, lower: in.Lower, upper: in.Upper, why: in.Why, cells: pick(c[5], c[4], c[6], c[2])})
	}
	alt := fmt.Sprintf("Mean effect with each study left out in turn; all studies give %s.", scale.text(mean))
	if len(all) > len(rows) {
		alt += fmt.Sprintf(" The %d studies that move the mean most, of %d.", len(rows), len(all))
	}
	return Figure{Name: "influence", Title: title, Alt: alt, Table: t, scene: r.draw()}
}

// mostMoving keeps the studies whose leaving moves the mean most, where there are more than fit; else all in order.
func mostMoving(all []result.Influence, mean float64) []result.Influence {
	if len(all) <= influenceRows {
		return all
	}
	move := func(in result.Influence) float64 {
		if in.Estimate == nil {
			return math.Inf(1)
		}
		return math.Abs(*in.Estimate - mean)
	}
	rows := slices.Clone(all)
	sort.SliceStable(rows, func(i, j int) bool { return move(rows[i]) > move(rows[j]) })
	return rows[:influenceRows]
}

// influenceColumns sets the columns that these rows can fill and gives what picks a row's cells for them.
func influenceColumns(r *rowPlot, p *result.Plan, rows []result.Influence) func(enrol, group, cost, effect string) []string {
	sized := false
	for _, in := range rows {
		sized = sized || in.ToEnrol != nil
	}
	switch {
	case !sized:
		r.columns = []string{"effect"}
		return func(_, _, _, effect string) []string { return []string{effect} }
	case p.Size.Study.Cost == nil:
		r.columns = []string{"to enrol", "per group", "effect"}
		return func(enrol, group, _, effect string) []string { return []string{enrol, group, effect} }
	}
	r.columns = []string{"to enrol", "per group", "cost", "effect"}
	return func(enrol, group, cost, effect string) []string { return []string{enrol, group, cost, effect} }
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
