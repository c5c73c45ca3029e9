package reports

import (
	"fmt"
	"strings"

	"footing/internal/finding"
	"footing/plan/result"
)

// TextRead writes how each heading and row was understood, the effects and the findings.
func TextRead(r *result.Reading, o TextOptions) string {
	w := &textWriter{o: o}
	w.head(r.Evidence.File, fmt.Sprintf("%d %s, %d usable", r.Evidence.Rows, plural(r.Evidence.Rows, "record", "records"), r.Evidence.Used))
	if r.Evidence.Sheet != "" {
		w.line("sheet %s", TermText(r.Evidence.Sheet))
	}
	w.wrapped("", 0, "scale: "+scaleSentence(r.Scale))
	w.blank()
	w.line("Headings")
	var rows [][]string
	for _, h := range r.Evidence.Headings {
		means := h.Meaning
		if means == "" {
			means = "(kept as a note)"
		}
		rows = append(rows, []string{h.Cell, h.Typed, means, strings.Join(h.First, ", ")})
	}
	w.grid([]textColumn{{head: "cell"}, {head: "as typed", most: 22}, {head: "understood as", most: 22}, {head: "first values", most: 24}}, rows, nil, nil)
	w.blank()
	w.line("Records")
	rows = nil
	var marks []string
	for _, s := range r.Studies {
		how, mark := s.Route, "  "
		if !s.Used {
			how, mark = "not used: "+s.Why, "x "
		}
		rows = append(rows, []string{fmt.Sprint(s.Row), s.Study, shownEffect(s), optional(s.StandardError, effectText3), how})
		marks = append(marks, mark)
	}
	w.grid([]textColumn{{head: "row", right: true}, {head: "study", most: 20}, {head: "effect", right: true}, {head: "SE", right: true}, {head: "route", most: 36}}, rows, marks, nil)
	w.findings(r.Findings, 0)
	return w.String()
}

func scaleSentence(s result.ScaleInfo) string {
	out := s.Words
	if s.Log {
		out += ", analysed as its natural logarithm"
	}
	if s.HigherBetter {
		return out + "; a larger value is taken as better"
	}
	return out + "; a smaller value is taken as better"
}

func shownEffect(s result.Study) string {
	switch {
	case s.Shown != nil:
		return TermText(effectText(s.Shown.Estimate))
	case s.Estimate != nil:
		return TermText(effectText(*s.Estimate))
	}
	return "-"
}

func effectText3(x float64) string { return fixed(x, 3) }

// findings lists what was noticed, worst first; most limits notes (0: all).
func (w *textWriter) findings(fs []result.Finding, most int) {
	w.blank()
	if len(fs) == 0 {
		w.line("No findings.")
		return
	}
	w.line("Findings")
	for i, f := range fs {
		if most > 0 && i == most {
			w.line("... and %d more (--json lists all)", len(fs)-most)
			return
		}
		mark := map[finding.Severity]string{finding.Error: "error", finding.Warning: "warning", finding.Note: "note"}[f.Severity]
		s := f.What
		if p := placeText(f.Place); p != "" {
			s = p + ": " + s
		}
		if f.Mend != "" {
			s += "; " + f.Mend
		}
		if f.Decision != nil {
			s += " [decided" + strings.TrimRight(": "+f.Decision.Why, ": ") + "]"
		} else if f.Severity != finding.Note {
			s += " [" + f.ID() + "]"
		}
		w.wrapped(mark, 9, s)
	}
}
