package reports

import (
	"fmt"
	"sort"
	"strings"

	"footing/plan/result"
)

// inflated writes what small-study effects and selective publication may have added.
func (w writer) inflated() *section {
	pool := w.p.Pool
	if pool == nil || len(pool.SmallStudy) == 0 {
		return nil
	}
	s := &section{ID: "inflated", Title: "What may be inflated", Lead: w.inflatedLead()}
	adjusted := w.figure(AdjustedFigure, note{"Side by side", "Each line is what is left if that method’s assumption holds. None of them is the truth. A ring on a dashed line can’t reassure here; the table says why."})
	s.Blocks = append(s.Blocks, adjusted)
	funnel := w.figure(FunnelFigure, note{"Borders", "Between the lines a study of that precision is not significant. Studies missing there, and not elsewhere, point to selection."})
	funnel.Heading = "Effects by precision"
	s.Blocks = append(s.Blocks, funnel, w.checks())
	return s
}

func (w writer) inflatedLead() string {
	pool := w.p.Pool
	e := pool.Random.Estimate
	if e == nil {
		return "Nothing was pooled, so nothing can be adjusted."
	}
	lo, hi, n := *e, *e, 0
	for _, m := range pool.SmallStudy {
		if m.Estimate != nil {
			if n == 0 {
				lo, hi = *m.Estimate, *m.Estimate
			}
			lo, hi = min(lo, *m.Estimate), max(hi, *m.Estimate)
			n++
		}
	}
	if n == 0 {
		return "The checks below look for small-study effects; none of them gives an adjusted effect for these studies."
	}
	text := fmt.Sprintf("If small or unwelcome studies are missing, the average of %s may be %s to %s: %s say different things, and none of them is the truth.",
		w.scale.text(*e), w.scale.text(lo), w.scale.text(hi), strings.ToLower(countWord(n))+" "+plural(n, "adjustment", "adjustments"))
	if n == 1 {
		text = fmt.Sprintf("If small or unwelcome studies are missing, the average of %s may be %s; that holds only if the method’s assumption does.", w.scale.text(*e), w.scale.text(lo))
	}
	if r := w.p.Range; r != nil && r.AdjustedBy != "" {
		text += " The plan uses: " + words(r.AdjustedBy) + "."
	}
	return text
}

// checks is the table of every check, with what it assumes and why it may be weak here.
func (w writer) checks() block {
	t := &tableView{Caption: "Every check", Head: []string{"check", "result", "assumes", "here"}, Text: 4, Wide: true}
	for _, m := range w.p.Pool.SmallStudy {
		name := m.Words
		if name == "" {
			name = words(m.Name)
		}
		here := m.Weak
		if here == "" {
			here = m.Why
		}
		t.Rows = append(t.Rows, tableRow{Cells: []string{name, w.checkResult(m), m.Assumes, here}})
	}
	return block{Table: t}
}

func (w writer) checkResult(m result.SmallStudy) string {
	var parts []string
	if m.Estimate != nil {
		text := w.scale.text(*m.Estimate)
		if i := m.Interval; i != nil {
			text += " (" + w.scale.interval(i.Lower, i.Upper) + ")"
		}
		parts = append(parts, text)
	}
	if m.Statistic != nil {
		text := "statistic " + fixed(*m.Statistic, 2)
		if m.DF != nil {
			text += " on " + strings.TrimSuffix(fixed(*m.DF, 1), ".0") + " df"
		}
		parts = append(parts, text)
	}
	if m.P != nil {
		parts = append(parts, "p "+pEquals(*m.P))
	}
	keys := make([]string, 0, len(m.Figures))
	for k := range m.Figures {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	for _, k := range keys {
		parts = append(parts, k+" "+strings.TrimSuffix(fixed(m.Figures[k], 2), ".00"))
	}
	if len(parts) == 0 {
		return "–"
	}
	return strings.Join(parts, "; ")
}
