package reports

import (
	"fmt"

	"footing/plan/result"
)

// most rows of a cumulative figure; with more, the last study of each year stands for its year.
const cumulativeRows = 36

// CumulativeFigure draws the mean as the studies came in, by year.
func CumulativeFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The average as the studies came in"
	if p.Pool == nil || len(p.Pool.Cumulative) < 3 {
		return emptyFigure("cumulative", title, "there are fewer than three steps")
	}
	scale := effectScale{p.Pool.Scale}
	points := p.Pool.Cumulative
	t := Table{Head: []string{"added", "year", "studies", "effect", "interval"}, Text: 1}
	for _, c := range points {
		interval := "–"
		if c.Lower != nil && c.Upper != nil {
			interval = scale.interval(*c.Lower, *c.Upper)
		}
		t.Rows = append(t.Rows, []string{c.Study, yearText(c.Year), fmt.Sprint(c.K), scale.number(c.Estimate), interval})
	}
	if len(points) > cumulativeRows {
		points = lastOfYears(points)
	}
	if len(points) > cumulativeRows {
		points = points[len(points)-cumulativeRows:]
	}
	r := rowPlot{o: options(o), scale: scale, columns: []string{"effect", "studies"}}
	for i, c := range points {
		name := c.Study
		if y := yearText(c.Year); y != "" {
			name = y + "  " + name
		}
		r.rows = append(r.rows, plotRow{name: name, bold: i == len(points)-1, estimate: c.Estimate, lower: c.Lower, upper: c.Upper, why: "not pooled", cells: []string{scale.number(c.Estimate), fmt.Sprint(c.K)}})
	}
	if w := worthwhileOf(p); w != nil {
		r.marked = &w.Effect
	}
	first, last := points[0], points[len(points)-1]
	alt := fmt.Sprintf("From %s with %d %s to %s with %d.", scale.number(first.Estimate), first.K, plural(first.K, "study", "studies"), scale.number(last.Estimate), last.K)
	return Figure{Name: "cumulative", Title: title, Alt: alt, Table: t, scene: r.draw()}
}

func yearText(y *int) string {
	if y == nil {
		return ""
	}
	return fmt.Sprint(*y)
}

// lastOfYears keeps the last point of each year.
func lastOfYears(points []result.CumulativePoint) []result.CumulativePoint {
	var out []result.CumulativePoint
	for i, c := range points {
		if i+1 == len(points) || c.Year == nil || points[i+1].Year == nil || *points[i+1].Year != *c.Year {
			out = append(out, c)
		}
	}
	return out
}

// SubgroupsFigure sets the mean of each group of studies beside the mean of all.
func SubgroupsFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The average in each group of studies"
	if p.Pool == nil || len(p.Pool.Subgroups) < 2 {
		return emptyFigure("subgroups", title, "the plan asks for no groups")
	}
	pool := p.Pool
	scale := effectScale{pool.Scale}
	r := rowPlot{o: options(o), scale: scale, columns: []string{"effect", percentText(pool.Level) + " interval", "studies"}}
	t := Table{Head: []string{"group", "studies", "effect", "interval", "I²", "τ²"}, Text: 1}
	alt := ""
	add := func(name string, k int, bold bool, m result.Pooled, i2, tau2 *float64) {
		row := plotRow{name: name, bold: bold, estimate: m.Estimate, why: m.Why, weak: k < 3}
		interval, share, tau := "–", "–", "–"
		if i := m.Interval; i != nil {
			row.lower, row.upper = &i.Lower, &i.Upper
			interval = scale.interval(i.Lower, i.Upper)
		}
		if i2 != nil {
			share = percentText(*i2)
		}
		if tau2 != nil {
			tau = fixed(*tau2, 3)
		}
		row.cells = []string{scale.number(m.Estimate), interval, fmt.Sprint(k)}
		r.rows = append(r.rows, row)
		t.Rows = append(t.Rows, []string{name, fmt.Sprint(k), scale.number(m.Estimate), interval, share, tau})
		alt += fmt.Sprintf(" %s, %d %s: %s.", upperFirst(clipRunes(name, 60)), k, plural(k, "study", "studies"), scale.number(m.Estimate))
	}
	add("all studies", pool.K, true, pool.Random, pool.Heterogeneity.ISquared, pool.Heterogeneity.TauSquared)
	for _, g := range pool.Subgroups {
		name := g.Name
		if name == "" {
			name = "not said"
		}
		add(name, g.K, false, g.Random, g.ISquared, g.TauSquared)
	}
	if i := pool.Random.Interval; i != nil {
		r.band = [2]float64{i.Lower, i.Upper}
	}
	r.middle = pool.Random.Estimate
	return Figure{Name: "subgroups", Title: title, Alt: alt, Table: t, scene: r.draw()}
}
