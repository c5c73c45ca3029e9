package reports

import (
	"fmt"

	"footing/plan/result"
)

// TextExtractions writes where two extractions of the same studies differ.
func TextExtractions(x *result.Extractions, o TextOptions) string {
	w := &textWriter{o: o}
	w.head(x.A+" against "+x.B, fmt.Sprintf("%d of %d equal", x.Equal, x.Compared))
	w.line("%d %s in both", x.Studies, plural(x.Studies, "study", "studies"))
	if len(x.Differences) > 0 {
		w.blank()
		var rows [][]string
		for _, d := range x.Differences {
			rows = append(rows, []string{d.Study, d.Meaning, d.CellA, orNone(d.TextA), d.CellB, orNone(d.TextB)})
		}
		w.grid([]textColumn{{head: "study", most: 20}, {head: "figure", most: 16}, {head: "A"}, {head: "reads", most: 12}, {head: "B"}, {head: "reads", most: 12}}, rows, nil, nil)
	}
	w.onlyInOne(x.A, x.OnlyA)
	w.onlyInOne(x.B, x.OnlyB)
	if len(x.Differences)+len(x.OnlyA)+len(x.OnlyB) == 0 {
		w.line("No difference.")
	}
	return w.String()
}

func (w *textWriter) onlyInOne(file string, list []result.OnlyInOne) {
	if len(list) == 0 {
		return
	}
	w.blank()
	w.wrapped("", 0, "Only in "+file)
	for _, m := range list {
		s := fmt.Sprintf("row %d  %s", m.Row, m.Study)
		if m.Near != "" {
			s += fmt.Sprintf(" (the other has %q)", m.Near)
		}
		w.wrapped("", 2, s)
	}
}
