package reports

import (
	"fmt"
	"strconv"
	"strings"

	"footing/plan/qualify"
)

// TextQualify prints published values beside computed ones; without all, the reproduced values of one topic share a line, and what is not reproduced stands alone.
func TextQualify(r qualify.Report, all bool, o TextOptions) string {
	w := &textWriter{o: o}
	w.head("Published values recomputed on this machine", fmt.Sprintf("%d of %d printed values reproduced", r.Reproduced, r.Total))
	topic := ""
	for i, l := range r.Lines {
		if l.Topic != topic {
			topic = l.Topic
			good, total := 0, 0
			for _, x := range r.Lines[i:] {
				if x.Topic != topic {
					break
				}
				total++
				if x.Reproduced {
					good++
				}
			}
			w.blank()
			w.line("%s", w.ink(termStrong, fmt.Sprintf("%s: %d of %d", topic, good, total)))
			w.grid2("printed", "computed", "")
		}
		w.qualifyLine(l, all)
	}
	w.blank()
	w.wrapped("", 0, "A value is reproduced when the computed one lies within half a unit of its last printed digit. 'recalled' marks values that were not seen in print when they were collected; footing qualify --json has the sources in full.")
	return w.String()
}

// qualifyLine is one value: printed, computed to two digits more, what it is.
func (w *textWriter) qualifyLine(l qualify.Line, all bool) {
	computed := strconv.FormatFloat(l.Computed, 'f', decimalsPrinted(l.Printed)+2, 64)
	mark := ""
	if !l.Reproduced {
		mark = "NOT REPRODUCED: "
	}
	if strings.Contains(l.KnownBy, "recalled") {
		mark += "recalled; "
	}
	what := TermText(mark + l.Quantity)
	if all {
		what += "; " + TermText(l.Source)
		if l.Convention != "" {
			what += " (" + l.Convention + ")"
		}
	}
	w.grid2(l.Printed, computed, what)
}

// grid2 writes two right-aligned numbers and a text that wraps behind them.
func (w *textWriter) grid2(a, b, text string) {
	w.wrapped(fmt.Sprintf("%10s %14s", a, b), 27, text)
}

func decimalsPrinted(s string) int {
	if i := strings.IndexByte(s, '.'); i >= 0 {
		return len(s) - i - 1
	}
	return 0
}
