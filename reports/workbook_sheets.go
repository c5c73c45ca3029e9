package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// answer is the first sheet: the number and what it rests on.
func (b *book) answer() {
	p := b.p
	s := b.sheet("Answer", 46, 20, 80)
	s.heading(p.Title)
	s.line(p.Question)
	if p.Invented {
		s.line("Invented data, for demonstration")
	}
	if p.Pool != nil && len(p.Pool.Evidence.Examples) > 0 {
		s.line("Example rows still in the sheet: " + strings.Join(p.Pool.Evidence.Examples, ", "))
	}
	s.line("Date", p.Date)
	s.line("Made by", p.Tool.Name+" "+p.Tool.Version)
	s.row++
	s.header("what", "value", "where it comes from")
	if ch := p.Size.Chosen; ch != nil {
		s.line("people to enrol", ch.ToEnrol.Total, bookGroups(p, ch.ToEnrol))
		s.line("people analysed at the end", ch.N.Total, bookGroups(p, ch.N))
		s.line("sized for the scenario", ch.Scenario, ch.ScenarioWhy)
		s.line("power at that effect", ch.Power, p.Size.Test.Words+", "+p.Size.Test.Method)
		if a := p.Size.Assurance; a != nil {
			s.line("assurance, unadjusted distribution", a.AtChosen, a.Why)
			s.line("its ceiling", a.Ceiling)
			s.line("assurance, adjusted distribution", a.AtChosenAdj)
			s.line("its ceiling", a.CeilingAdj)
			if a.OutOfReach != "" {
				s.line("assurance target", nil, a.OutOfReach)
			}
		}
		if ch.Cost != nil {
			s.line("cost", ch.Cost, p.Size.Study.Cost.Currency)
		}
		for _, t := range ch.Trail {
			s.line(t.Words, t.N.Total, t.Source)
		}
		s.line("smallest effect that would come out significant", ch.SmallestSignificant, p.Size.Scale.Name)
		s.line("smallest effect detected with the target power", ch.SmallestDetectable, p.Size.Scale.Name)
	} else {
		s.line("people to enrol", "no size", p.Size.Why)
	}
	s.row++
	if len(p.Threats) > 0 {
		s.header("what could make it wrong", "", "")
	}
	for _, t := range p.Threats {
		s.line(t.Head, nil, t.Text)
	}
	s.row++
	if len(p.Cautions) > 0 {
		s.header("cautions", "", "")
	}
	for _, c := range p.Cautions {
		s.line(nil, nil, c)
	}
}

func bookGroups(p *result.Plan, n result.N) string {
	parts := make([]string, len(n.Groups))
	for i, g := range n.Groups {
		name := fmt.Sprintf("group %d", i+1)
		if i < len(p.Size.Study.Groups) {
			name = p.Size.Study.Groups[i]
		}
		parts[i] = fmt.Sprintf("%s %d", name, g)
	}
	return strings.Join(parts, ", ")
}

// data holds every cell as read, under its heading, each row with its number in the evidence sheet.
func (b *book) data() {
	pool := b.p.Pool
	type column struct {
		letters, heading string
		width            float64
	}
	var columns []column
	at := map[string]int{}
	for _, st := range pool.Studies {
		for _, c := range st.Cells {
			letters := strings.TrimRight(c.Address, "0123456789")
			if _, ok := at[letters]; !ok {
				at[letters] = len(columns)
				columns = append(columns, column{letters, c.Heading, 8})
			}
			widest := &columns[at[letters]].width
			*widest = min(40, max(*widest, 1+float64(len([]rune(c.Text)))))
		}
	}
	sortColumns(columns, func(c column) string { return c.letters })
	for i, c := range columns {
		at[c.letters] = i
	}
	heads, widths := []string{"row"}, []float64{8}
	for _, c := range columns {
		heads, widths = append(heads, c.letters+": "+c.heading), append(widths, c.width)
	}
	s := b.sheet("Data as read", widths...)
	s.line(fmt.Sprintf("%s, sheet %s, SHA-256 %s", pool.Evidence.File, pool.Evidence.Sheet, pool.Evidence.SHA256))
	s.header(heads...)
	for _, st := range pool.Studies {
		row := make([]any, len(columns)+1)
		row[0] = st.Row
		for _, c := range st.Cells {
			row[at[strings.TrimRight(c.Address, "0123456789")]+1] = c.Text
		}
		s.line(row...)
	}
}

// sortColumns orders columns as a spreadsheet does: A to Z, then AA.
func sortColumns[T any](list []T, letters func(T) string) {
	before := func(a, b string) bool {
		if len(a) != len(b) {
			return len(a) < len(b)
		}
		return a < b
	}
	for i := 1; i < len(list); i++ {
		for j := i; j > 0 && before(letters(list[j]), letters(list[j-1])); j-- {
			list[j], list[j-1] = list[j-1], list[j]
		}
	}
}

// estimates holds one row for each record, used or not.
func (b *book) estimates() {
	pool := b.p.Pool
	s := b.sheet("Estimates", 8, 28, 8, 14, 8, 12, 12, 12, 12, 12, 12, 12, 12, 22, 50, 24, 40, 40)
	s.header("row", "study", "year", "risk of bias", "used", "estimate", "variance", "standard error", "lower", "upper", pool.Scale.Words, "weight, common effect", "weight, random effects",
		"route", "formula", "cells", "notes", "why left out")
	for _, st := range pool.Studies {
		var lower, upper, shown *float64
		if st.Interval != nil {
			lower, upper = &st.Interval.Lower, &st.Interval.Upper
		}
		if st.Shown != nil {
			shown = &st.Shown.Estimate
		}
		s.line(st.Row, st.Study, st.Year, st.RiskOfBias, st.Used, st.Estimate, st.Variance, st.StandardError, lower, upper, shown, st.WeightCommon, st.Weight,
			st.Route, st.Formula, strings.Join(st.From, ", "), strings.Join(st.Notes, "; "), st.Why)
	}
}

// estimators holds every estimator with its intervals.
func (b *book) estimators() {
	s := b.sheet("Pooled results", 32, 24, 12, 12, 12, 12, 12, 12, 12, 12, 12, 12)
	s.header("method", "interval", "tau squared", "I squared", "estimate", "standard error", "lower", "upper", "statistic", "df", "p", "note")
	one := func(name string, r *result.Pooled) {
		if r == nil {
			return
		}
		var lower, upper *float64
		method := ""
		if r.Interval != nil {
			lower, upper, method = &r.Interval.Lower, &r.Interval.Upper, r.Interval.Method
		}
		s.line(name, method, r.TauSquared, nil, r.Estimate, r.StandardError, lower, upper, r.Statistic, r.DF, r.P, r.Why)
	}
	pool := b.p.Pool
	one("common effect", &pool.Common)
	one("random effects, as planned: "+pool.Random.Method, &pool.Random)
	one("Mantel-Haenszel", pool.MantelHaenszel)
	one("Peto", pool.Peto)
	for _, e := range pool.Estimators {
		for _, i := range e.Intervals {
			s.line(e.Name, i.Method, e.TauSquared, e.ISquared, e.Estimate, i.StandardError, i.Lower, i.Upper, i.Statistic, i.DF, i.P, i.Why)
		}
		for _, i := range e.Predictions {
			s.line(e.Name, "prediction, "+i.Method, e.TauSquared, e.ISquared, e.Estimate, i.StandardError, i.Lower, i.Upper, nil, i.DF, nil, i.Why)
		}
	}
	h := pool.Heterogeneity
	s.row++
	s.line("Q", nil, h.Q)
	s.line("its degrees of freedom", nil, h.DF)
	s.line("its p", nil, h.P)
	s.line("I squared", nil, h.ISquared)
	if i := h.TauSquaredInterval; i != nil {
		s.line("tau squared, Q-profile interval", nil, h.TauSquared, nil, nil, nil, i.Lower, i.Upper)
	}
}

// small is the small-study panel.
func (b *book) small() {
	s := b.sheet("Small studies", 26, 44, 12, 12, 12, 12, 12, 10, 12, 60, 50)
	s.header("method", "what it is", "estimate", "standard error", "lower", "upper", "statistic", "df", "p", "assumes", "weak or not available")
	for _, x := range b.p.Pool.SmallStudy {
		var lower, upper *float64
		if x.Interval != nil {
			lower, upper = &x.Interval.Lower, &x.Interval.Upper
		}
		s.line(x.Name, x.Words, x.Estimate, x.StandardError, lower, upper, x.Statistic, x.DF, x.P, x.Assumes, strings.TrimSpace(x.Weak+" "+x.Why))
	}
}

// sizes is the table of scenarios, then sensitivity and levers.
func (b *book) sizes() {
	size := b.p.Size
	s := b.sheet("Sizes", 33, 12, 12, 12, 12, 12, 12, 12, 12, 12, 12, 12, 12, 12, 50)
	s.header("scenario", "effect, analysed scale", size.Scale.Words, "n, first group", "n in all", "before rounding", "power attained", "to enrol", "cost", "n at 80%", "n at 90%", "power at the chosen n", "type S", "type M", "why none")
	for _, c := range size.Cases {
		s.line(c.Scenario, c.Effect, c.Shown, firstOf(c.N), totalOf(c.N), c.ContinuousN, c.Power, totalOf(c.ToEnrol), c.Cost, totalOf(c.At80), totalOf(c.At90), c.PowerAtChosen, c.TypeS, c.TypeM, c.Why)
	}
	if len(size.Sensitivity) > 0 {
		s.row++
		s.header("if this assumption is wrong", "value", "", "n, first group", "n in all", "", "", "to enrol", "cost", "", "", "power at the chosen n", "", "", "why none")
		for _, x := range size.Sensitivity {
			s.line(x.Assumption, x.Value, nil, firstOf(x.N), totalOf(x.N), nil, nil, totalOf(x.ToEnrol), x.Cost, nil, nil, x.PowerAtChosen, nil, nil, x.Why)
		}
	}
	if len(size.Levers) > 0 {
		s.row++
		s.header("one thing changed", "change, first group", "", "n, first group", "n in all", "", "", "to enrol", "cost", "", "", "", "", "", "what it asks")
		for _, x := range size.Levers {
			s.line(x.Words, x.Change, nil, firstOf(x.N), totalOf(x.N), nil, nil, totalOf(x.ToEnrol), x.Cost, nil, nil, nil, nil, nil, x.Price+x.Why)
		}
	}
}

func firstOf(n *result.N) any {
	if n == nil || len(n.Groups) == 0 {
		return nil
	}
	return n.Groups[0]
}

func totalOf(n *result.N) any {
	if n == nil {
		return nil
	}
	return n.Total
}

// curvesSheet tabulates power and assurance over n, and the quantiles of the effect.
func (b *book) curvesSheet() {
	size := b.p.Size
	s := b.sheet("Power over n", 12, 12, 14, 14, 14, 14, 14, 14)
	heads := []string{"n, first group", "n in all"}
	for _, c := range size.Curves {
		heads = append(heads, "power: "+c.Scenario)
	}
	s.header(heads...)
	if len(size.Curves) > 0 {
		for i, pt := range size.Curves[0].Points {
			row := []any{pt.N, pt.Total}
			for _, c := range size.Curves {
				if i < len(c.Points) {
					row = append(row, c.Points[i].Power)
				}
			}
			s.line(row...)
		}
		s.chart(fmt.Sprintf("Power over the size, alpha %g", size.Study.Alpha), "power", len(heads))
	}
	if a := size.Assurance; a != nil && len(a.Curve) > 0 {
		s = b.sheet("Assurance over n", 14, 12, 14, 14)
		s.header("n, first group", "n in all", "unadjusted", "adjusted")
		for _, pt := range a.Curve {
			s.line(pt.N, pt.Total, pt.Assurance, pt.Adjusted)
		}
		s.chart("Assurance over the size", "assurance", 4)
	}
	if r := b.p.Range; r != nil && r.Distribution != nil {
		s = b.sheet("Effect of the next study", 14, 16, 16)
		s.line(r.Distribution.Words)
		s.header("chance below", "unadjusted", "adjusted")
		for i, q := range r.Distribution.Quantiles {
			row := []any{q.P, q.Value}
			if r.Adjusted != nil && i < len(r.Adjusted.Quantiles) {
				row = append(row, r.Adjusted.Quantiles[i].Value)
			}
			s.line(row...)
		}
	}
}

// assumed lists what went in without being computed from the evidence.
func (b *book) assumed() {
	s := b.sheet("Assumptions", 36, 24, 12, 12, 12, 40, 40, 24, 24)
	s.header("assumption", "value", "assumed", "low", "high", "source", "why", "who", "where")
	for _, list := range [][]result.Assumption{b.p.Assumptions, b.p.Size.Study.Assumptions} {
		for _, a := range list {
			s.line(a.Name, a.Value, a.Assumed, a.Low, a.High, a.Source, a.Why, a.Who, a.Place.String())
		}
	}
}

// findingsSheet lists every finding with the decision on it.
func (b *book) findingsSheet() {
	s := b.sheet("Findings", 10, 28, 26, 26, 60, 50, 14, 40, 12, 12)
	s.header("severity", "kind", "where", "study", "what", "what would mend it", "decision", "why", "by", "on")
	for _, f := range b.p.Findings {
		decision, why, by, on := "", "", "", ""
		if d := f.Decision; d != nil {
			decision, why, by, on = "overridden: "+d.Value, d.Why, d.By, d.On
			if d.Accept {
				decision = "accepted"
			}
		}
		s.line(string(f.Severity), f.Kind, f.Place.String(), f.Study, f.What, f.Mend, decision, why, by, on)
	}
}
