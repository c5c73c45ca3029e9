package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// evidence writes what the studies say.
func (w writer) evidence() *section {
	pool := w.p.Pool
	if pool == nil {
		return nil
	}
	s := &section{ID: "evidence", Title: "What the studies say", Lead: w.evidenceLead()}
	wide, narrow := ForestFigures(w.p), ForestFigures(w.p, Narrow())
	for i := range wide { // a block for each sheet of paper
		b := block{}
		if v, missing := pair(wide[i], narrow[i]); missing != "" {
			b.Missing = missing
		} else {
			b.Figures = []figurePair{v}
		}
		if i == 0 {
			b.Margin = []note{w.poolNote()}
			if pool.Prediction.Why != "" {
				b.Margin = append(b.Margin, note{"Next effect", upperFirst(pool.Prediction.Why)})
			}
		}
		s.Blocks = append(s.Blocks, b)
	}
	if len(pool.Sentences) > 0 {
		s.Blocks = append(s.Blocks, block{List: proseList(pool.Sentences)})
	}
	s.Blocks = append(s.Blocks, w.heterogeneity())
	if len(pool.Subgroups) > 1 {
		b := w.figure(SubgroupsFigure, w.betweenNote())
		b.Heading = "Groups of studies"
		s.Blocks = append(s.Blocks, b)
	}
	if len(pool.Cumulative) > 2 {
		b := w.figure(CumulativeFigure, note{"Reading it", "Each line adds one study. An average that keeps sliding towards no effect is a warning: early studies are often the largest."})
		b.Heading = "As the studies came in"
		s.Blocks = append(s.Blocks, b)
	}
	if left := w.leftOut(); left != nil {
		s.Blocks = append(s.Blocks, *left)
	}
	if len(pool.Influence) > 0 {
		b := w.figure(InfluenceFigure, w.influenceNote())
		b.Heading = "The plan without each study"
		s.Blocks = append(s.Blocks, b)
	}
	if len(pool.Estimators) > 0 {
		s.Blocks = append(s.Blocks, w.estimators())
	}
	return s
}

// influenceNote is the margin of the plan without each study: whether the number moves at all, and why not.
func (w writer) influenceNote() note {
	lo, hi := 0, 0
	for _, in := range w.p.Pool.Influence {
		if in.ToEnrol != nil {
			if lo == 0 || *in.ToEnrol < lo {
				lo = *in.ToEnrol
			}
			hi = max(hi, *in.ToEnrol)
		}
	}
	text := "Each study in turn, everything else as planned."
	c := w.p.Size.Chosen
	switch {
	case c == nil || hi == 0:
	case lo == hi && hi == c.ToEnrol.Total:
		text += fmt.Sprintf(" The number stays at %s whichever is left out: it is sized for the scenario ‘%s’, which does not hang on them. The assurance does.", wholeText(hi), clipRunes(scenarioWords(w.p, c.Scenario), 60))
	default:
		text += fmt.Sprintf(" The number runs from %s to %s. Where a study moves the plan, look at its row first.", wholeText(lo), wholeText(hi))
	}
	return note{"Leaving out", text}
}

// betweenNote is the margin of the groups: the test between them, and how little it can say.
func (w writer) betweenNote() note {
	text := "Groups were compared because the plan asks for it; a difference between them is not a difference within a study."
	if b := w.p.Pool.Between; b != nil && b.Q != nil && b.P != nil {
		text = fmt.Sprintf("Q %s on %d df, p %s. %s", fixed(*b.Q, 1), b.DF, pEquals(*b.P), text)
		if b.Weak != "" {
			text += " " + upperFirst(b.Weak) + "."
		}
	}
	return note{"Between groups", text}
}

func (w writer) evidenceLead() string {
	pool := w.p.Pool
	text := fmt.Sprintf("%s %s", countWord(pool.K), plural(pool.K, "study", "studies"))
	if pool.Participants != nil {
		text += ", " + groupDigits(fixed(*pool.Participants, 0)) + " people"
	}
	e := pool.Random.Estimate
	if e == nil {
		why := pool.Random.Why
		if why == "" {
			why = "nothing could be pooled"
		}
		return text + ": " + why + "."
	}
	text += ": on average " + w.scale.phrase(*e)
	if w.scale.Favours != "" {
		side := "towards"
		if (*e > w.scale.NoEffect) != w.scale.HigherBetter {
			side = "away from"
		}
		text += ", " + side + " ‘" + clipRunes(w.scale.Favours, 60) + "’"
	}
	if i2 := pool.Heterogeneity.ISquared; i2 != nil && pool.K > 1 {
		switch {
		case *i2 >= 0.5:
			text += ", and by different amounts in different places"
		case *i2 >= 0.25:
			text += ", and by somewhat different amounts in different places"
		default:
			text += "; they differ little more than chance would have them"
		}
	}
	return text + "."
}

// poolNote is the margin of the forest plot: model, interval, spread.
func (w writer) poolNote() note {
	pool := w.p.Pool
	text := words(pool.Random.Method)
	if i := pool.Random.Interval; i != nil {
		text += "; interval " + words(i.Method)
	}
	if df := pool.Random.DF; df != nil {
		text += ", t with " + strings.TrimSuffix(fixed(*df, 1), ".0") + " df"
	}
	text += "."
	if t := pool.Heterogeneity.TauSquared; t != nil {
		text += " τ² is " + fixed(*t, 3) + "."
	}
	if e := pool.Common.Estimate; e != nil {
		text += " Common effect: " + w.scale.text(*e) + "."
	}
	return note{"Pooled", text}
}

// words writes a token of the plan file as words.
func words(token string) string {
	named := map[string]string{"dersimonian-laird": "DerSimonian-Laird", "hartung-knapp": "Hartung-Knapp", "hartung-knapp-floored": "Hartung-Knapp, floored",
		"paule-mandel": "Paule-Mandel", "restricted-maximum-likelihood": "REML", "maximum-likelihood": "maximum likelihood", "henmi-copas": "Henmi-Copas", "hunter-schmidt": "Hunter-Schmidt",
		"sidik-jonkman": "Sidik-Jonkman", "hedges": "Hedges", "student-t": "Student t", "q-profile": "Q-profile"}
	if s, ok := named[token]; ok {
		return s
	}
	parts := strings.Split(token, "-")
	for i, part := range parts {
		if s, ok := map[string]string{"sd": "SD", "sds": "SDs", "se": "SE", "ses": "SEs", "ci": "CI", "cis": "CIs", "icc": "ICC"}[part]; ok {
			parts[i] = s
		}
	}
	return strings.Join(parts, " ")
}

// heterogeneity is the table of how far the studies differ, with the two models.
func (w writer) heterogeneity() block {
	pool := w.p.Pool
	t := &tableView{Caption: "How far the studies differ, and the two models", Head: []string{"figure", "value", "interval", "meaning"}, Text: 1}
	w.modelRow(t, "random effects", &pool.Random, "mean of true effects that differ: used in this plan")
	w.modelRow(t, "common effect", &pool.Common, "one true effect for all, if the studies did not differ")
	w.modelRow(t, "Mantel-Haenszel", pool.MantelHaenszel, "common effect from the counts")
	w.modelRow(t, "Peto", pool.Peto, "common effect from the counts, for rare events")
	if i := pool.Prediction.Interval; i != nil {
		t.add("next true effect", "–", w.scale.interval(i.Lower, i.Upper), percentText(i.Level)+" prediction interval: the true effect in a new setting; an observed result scatters wider")
	} else if pool.Prediction.Why != "" {
		t.add("next true effect", "–", "–", pool.Prediction.Why)
	}
	spreadRows(t, pool.Heterogeneity)
	b := block{Table: t, Class: "last-words"}
	if pool.K < 10 {
		b.Margin = []note{{"Few studies", "With fewer than ten, I² and τ² are poorly known: read their intervals."}}
	}
	if why := pool.Heterogeneity.Why; why != "" {
		b.Margin = append(b.Margin, note{"", upperFirst(why)})
	}
	return b
}

// modelRow is one pooled mean, or why there is none.
func (w writer) modelRow(t *tableView, name string, m *result.Pooled, meaning string) {
	if m == nil {
		return
	}
	if m.Estimate == nil {
		if m.Why != "" {
			t.add(name, "–", "–", m.Why)
		}
		return
	}
	interval := "–"
	if i := m.Interval; i != nil {
		interval = w.scale.interval(i.Lower, i.Upper)
	}
	if m.P != nil {
		meaning += ", p " + pEquals(*m.P)
	}
	t.add(name, w.scale.text(*m.Estimate), interval, meaning)
}

// spreadRows are the measures of how far the studies differ.
func spreadRows(t *tableView, h result.Heterogeneity) {
	between := func(i *result.Interval, write func(float64) string) string {
		if i == nil {
			return "–"
		}
		return write(i.Lower) + " to " + write(i.Upper)
	}
	three := func(x float64) string { return fixed(x, 3) }
	if h.ISquared != nil {
		t.add("I²", percentText(*h.ISquared), between(h.ISquaredInterval, percentText), "share of the scatter that is more than chance")
	}
	if h.TauSquared != nil {
		meaning := "variance of the true effects"
		if h.Truncated {
			meaning += ", cut at 0"
		}
		t.add("τ²", three(*h.TauSquared), between(h.TauSquaredInterval, three), meaning)
	}
	if h.Tau != nil {
		t.add("τ", fixed(*h.Tau, 2), "–", "standard deviation of the true effects")
	}
	if h.Q != nil && h.P != nil {
		t.add("Q", fixed(*h.Q, 1), "–", fmt.Sprintf("against %d df, p %s", h.DF, pEquals(*h.P)))
	}
}

// pEquals writes "= .043" or "< .001".
func pEquals(p float64) string {
	s := pText(p)
	if strings.HasPrefix(s, "<") || strings.HasPrefix(s, ">") {
		return s
	}
	return "= " + s
}

func (w writer) leftOut() *block {
	t := &tableView{Caption: "Rows that are not in the mean", Head: []string{"study", "sheet row", "why"}, Text: 1}
	for _, s := range w.p.Pool.Studies {
		if !s.Used {
			t.Rows = append(t.Rows, tableRow{Cells: []string{s.Study, fmt.Sprint(s.Row), s.Why}})
		}
	}
	if len(t.Rows) == 0 {
		return nil
	}
	return &block{Table: t, Class: "last-words"}
}

// estimators is the folded table of every estimate of the spread and what follows from it.
func (w writer) estimators() block {
	t := &tableView{Caption: "Every estimate of τ², and the mean under it", Head: []string{"estimator", "τ²", "I²", "mean", "interval", "by"}, Text: 1, Wide: true}
	for _, e := range w.p.Pool.Estimators {
		tau, i2 := "–", "–"
		if e.TauSquared != nil {
			tau = fixed(*e.TauSquared, 3)
		}
		if e.ISquared != nil {
			i2 = percentText(*e.ISquared)
		}
		name := words(e.Name)
		if e.TauSquared == nil && e.Why != "" {
			name += ": " + e.Why
		} else if !e.Converged {
			name += " (did not converge)"
		}
		if len(e.Intervals) == 0 {
			t.Rows = append(t.Rows, tableRow{Cells: []string{name, tau, i2, w.scale.number(e.Estimate), "–", "–"}})
		}
		for j, i := range e.Intervals {
			interval := "–"
			if i.Lower != nil && i.Upper != nil {
				interval = w.scale.interval(*i.Lower, *i.Upper)
			}
			cells := []string{"", "", "", "", interval, words(i.Method)}
			if j == 0 {
				cells[0], cells[1], cells[2], cells[3] = name, tau, i2, w.scale.number(e.Estimate)
			}
			t.Rows = append(t.Rows, tableRow{Cells: cells})
		}
	}
	return block{Table: t, Folded: "The mean under every estimator of τ² and every interval", Class: "last-words"}
}
