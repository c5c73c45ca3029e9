package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// TextSize writes the sizes of a bare planned study, one line for each effect.
func TextSize(s *result.Size, o TextOptions) string {
	w := &textWriter{o: o}
	st := s.Study
	w.head(fmt.Sprintf("%s, %s, %s", st.Outcome, st.Arrangement, st.Aim), fmt.Sprintf("alpha %s, %s-sided", shareText(st.Alpha), map[int]string{1: "one", 2: "two"}[st.Sides]))
	w.wrapped("", 0, strings.TrimRight(s.Test.Words+": "+s.Test.Method, ": "))
	w.wrapped("", 0, "effects as "+s.Scale.Words)
	w.blank()
	cols := []textColumn{{head: "effect", right: true}, {head: "n per group", right: true}, {head: "total", right: true}, {head: "to enrol", right: true}, {head: "power", right: true}, {head: "before rounding", right: true}}
	var rows [][]string
	var why []string
	for _, c := range s.Cases {
		row := []string{effectText(c.Shown), "-", "-", "-", optional(c.Power, power4), optional(c.ContinuousN, func(x float64) string { return fixed(x, 3) })}
		if c.N != nil {
			row[1], row[2] = termGroups(*c.N), wholeText(c.N.Total)
			if len(c.N.Groups) > 1 && c.N.Groups[0] == c.N.Groups[1] {
				row[1] = wholeText(c.N.Groups[0])
			}
		} else if c.Why != "" {
			why = append(why, TermText(effectText(c.Shown))+": "+c.Why)
		}
		if c.ToEnrol != nil {
			row[3] = wholeText(c.ToEnrol.Total)
		}
		rows = append(rows, row)
	}
	w.grid(cols, rows, nil, nil)
	if len(s.Curves) > 0 {
		names := make([]string, len(s.Curves))
		for i, c := range s.Curves {
			names[i] = c.Scenario
		}
		w.curve(s.Curves, st.PowerTarget, names)
	}
	for _, y := range why {
		w.wrapped("", 0, y)
	}
	if len(s.Findings) > 0 {
		w.findings(s.Findings, 8)
	}
	return w.String()
}

func power4(x float64) string { return fixed(x, 4) }
