package reports

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"footing/plan/result"
)

// forestWidth is the number of columns of the text forest plot.
const forestWidth = 27

// TextPool writes the pooled result with a forest plot in text.
func TextPool(p *result.Pool, o TextOptions) string {
	w := &textWriter{o: o}
	w.head(p.Evidence.File, fmt.Sprintf("%d %s pooled", p.K, plural(p.K, "study", "studies")))
	w.wrapped("", 0, scaleSentence(p.Scale))
	if len(p.Evidence.Examples) > 0 {
		w.wrapped("", 0, "Example rows still in the sheet: "+strings.Join(p.Evidence.Examples, ", "))
	}
	w.blank()
	w.forest(p)
	w.blank()
	w.poolFigures(p)
	w.smallStudy(p)
	w.findings(p.Findings, 8)
	return w.String()
}

// effects gives an estimate and its limits for reading.
func poolShown(info result.ScaleInfo, shown *result.Shown, estimate *float64, iv *result.Interval) (string, string) {
	switch {
	case shown != nil && shown.Lower != nil && shown.Upper != nil:
		return TermText(effectText(shown.Estimate)), TermText(effectText(*shown.Lower) + " to " + effectText(*shown.Upper))
	case shown != nil:
		return TermText(effectText(shown.Estimate)), ""
	case estimate != nil && iv != nil:
		return TermText(effectText(*estimate)), TermText(effectText(iv.Lower) + " to " + effectText(iv.Upper))
	case estimate != nil:
		return TermText(effectText(*estimate)), ""
	}
	return "-", ""
}

// textAxis turns an effect of the analysed scale into a column.
type textAxis struct{ low, high float64 }

func (a textAxis) column(x float64) int {
	c := int(math.Round((x - a.low) / (a.high - a.low) * (forestWidth - 1)))
	return min(max(c, 0), forestWidth-1)
}

// forest draws one line a study: its interval, a mark whose shape tells the risk of bias, the line of no effect and
// dots up to the average.
func (w *textWriter) forest(p *result.Pool) {
	axis, ok := forestAxis(p)
	if !ok {
		w.line("No study has a usable effect.")
		return
	}
	cols := []textColumn{{head: "study", most: 18}, {head: "row", right: true}, {head: ""}, {head: "effect", right: true}, {head: "", right: true}}
	var rows [][]string
	var inks []string
	if p.Random.Estimate != nil {
		est, ci := poolShown(p.Scale, p.Random.Shown, p.Random.Estimate, p.Random.Interval)
		rows = append(rows, []string{"average", "", axis.draw(p, p.Random.Estimate, p.Random.Interval, '◆', '━'), est, ci})
		inks = append(inks, termPlan)
		if iv := p.Prediction.Interval; iv != nil {
			_, ci := poolShown(p.Scale, p.Prediction.Shown, p.Random.Estimate, iv)
			rows = append(rows, []string{"next true effect", "", axis.draw(p, nil, iv, ' ', '╌'), "", ci})
			inks = append(inks, termPlan)
		}
	}
	for _, s := range p.Studies {
		if !s.Used {
			continue
		}
		mark := '●'
		switch strings.ToLower(s.RiskOfBias) {
		case "some concerns":
			mark = '○'
		case "high":
			mark = '□'
		}
		est, ci := poolShown(p.Scale, s.Shown, s.Estimate, s.Interval)
		rows = append(rows, []string{s.Study, fmt.Sprint(s.Row), axis.draw(p, s.Estimate, s.Interval, mark, '─'), est, ci})
		inks = append(inks, termEvidence)
	}
	w.grid(cols, rows, nil, inks)
	w.line("risk of bias: ● low or not said  ○ some concerns  □ high   | none  : average")
}

func forestAxis(p *result.Pool) (textAxis, bool) {
	a := textAxis{p.Scale.NoEffect, p.Scale.NoEffect}
	found := false
	see := func(x float64) {
		if !math.IsNaN(x) && !math.IsInf(x, 0) {
			a.low, a.high, found = math.Min(a.low, x), math.Max(a.high, x), true
		}
	}
	var widths []float64
	for _, s := range p.Studies {
		if s.Used && s.Estimate != nil {
			see(*s.Estimate)
			if s.Interval != nil {
				widths = append(widths, s.Interval.Upper-s.Interval.Lower)
			}
		}
	}
	if iv := p.Random.Interval; iv != nil {
		see(iv.Lower)
		see(iv.Upper)
	}
	// the axis reaches half a typical interval beyond the effects; longer ones run off its ends
	if len(widths) > 0 {
		reach := middle(widths) / 2
		a.low, a.high = a.low-reach, a.high+reach
	}
	return a, found && a.high > a.low
}

func middle(xs []float64) float64 {
	s := slices.Sorted(slices.Values(xs))
	return s[len(s)/2]
}

func (a textAxis) draw(p *result.Pool, estimate *float64, iv *result.Interval, mark, rule rune) string {
	cells := []rune(strings.Repeat(" ", forestWidth))
	cells[a.column(p.Scale.NoEffect)] = '|'
	if p.Random.Estimate != nil && *p.Random.Estimate >= a.low && *p.Random.Estimate <= a.high {
		cells[a.column(*p.Random.Estimate)] = ':'
	}
	if iv != nil && iv.Upper >= a.low && iv.Lower <= a.high {
		from, to := a.column(iv.Lower), a.column(iv.Upper)
		for i := from; i <= to; i++ {
			cells[i] = rule
		}
		if iv.Lower < a.low {
			cells[0] = '‹'
		}
		if iv.Upper > a.high {
			cells[forestWidth-1] = '›'
		}
	}
	if estimate != nil && mark != ' ' && *estimate >= a.low && *estimate <= a.high {
		cells[a.column(*estimate)] = mark
	}
	return string(cells)
}

func (w *textWriter) poolFigures(p *result.Pool) {
	if p.Random.Estimate == nil {
		w.wrapped("", 0, "No average: "+p.Random.Why)
		return
	}
	mean := func(name string, m *result.Pooled) {
		if m == nil || m.Estimate == nil {
			return
		}
		est, ci := poolShown(p.Scale, m.Shown, m.Estimate, m.Interval)
		how := m.Method
		if m.Interval != nil && m.Interval.Method != m.Method {
			how = strings.Join([]string{m.Method, m.Interval.Method}, ", ")
		}
		w.wrapped(name, 16, fmt.Sprintf("%s (%s)%s  %s", est, ci, optionalP(m.P), how))
	}
	mean("random effects", &p.Random)
	mean("common effect", &p.Common)
	mean("counts", p.MantelHaenszel)
	mean("counts, Peto", p.Peto)
	h := p.Heterogeneity
	s := fmt.Sprintf("tau2 %s, I2 %s", optional(h.TauSquared, effectText3), optional(h.ISquared, percentText))
	if h.Q != nil && h.P != nil {
		s += fmt.Sprintf(", Q %s on %d df, p %s", TermText(fixed(*h.Q, 2)), h.DF, TermText(pText(*h.P)))
	}
	if h.Why != "" {
		s += " (" + h.Why + ")"
	}
	w.wrapped("heterogeneity", 16, s)
	if p.Prediction.Interval != nil {
		_, ci := poolShown(p.Scale, p.Prediction.Shown, p.Random.Estimate, p.Prediction.Interval)
		s := fmt.Sprintf("%s, %.0f%% interval of the true effect in a new setting", ci, 100*p.Prediction.Interval.Level)
		if p.Prediction.Why != "" {
			s += "; " + p.Prediction.Why
		}
		w.wrapped("prediction", 16, s)
	} else {
		w.wrapped("prediction", 16, "not available: "+p.Prediction.Why)
	}
}

func optionalP(p *float64) string {
	if p == nil {
		return ""
	}
	return ", p " + TermText(pText(*p))
}

func (w *textWriter) smallStudy(p *result.Pool) {
	if len(p.SmallStudy) == 0 {
		return
	}
	w.blank()
	w.line("Small-study checks and what each leaves of the average; none is the truth")
	var rows [][]string
	var notes []string
	said := map[string][]string{}
	for _, s := range p.SmallStudy {
		left := ""
		if s.Estimate != nil {
			est, ci := poolShown(p.Scale, s.Shown, s.Estimate, s.Interval)
			left = est
			if ci != "" {
				left += " (" + ci + ")"
			}
		}
		note := s.Weak
		if s.Why != "" {
			note = "not available: " + s.Why
		}
		rows = append(rows, []string{s.Name, left, optional(s.P, pText)})
		if note != "" {
			if len(said[note]) == 0 {
				notes = append(notes, note)
			}
			said[note] = append(said[note], s.Name)
		}
	}
	w.grid([]textColumn{{head: "check", most: 34}, {head: "leaves"}, {head: "p", right: true}}, rows, nil, nil)
	for _, n := range notes {
		who := strings.Join(said[n], ", ")
		if len(said[n]) == len(p.SmallStudy) {
			who = "all"
		}
		w.wrapped("", 2, who+": "+n)
	}
}
