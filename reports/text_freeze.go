package reports

import (
	"fmt"

	"footing/plan/edition"
)

// TextFreeze says which edition was kept.
func TextFreeze(e *edition.Edition, dir string, o TextOptions) string {
	w := &textWriter{o: o}
	s := fmt.Sprintf("Edition %d of %s kept in %s.", e.Number, e.Date, dir)
	if c := e.Result.Size.Chosen; c != nil {
		s += fmt.Sprintf(" It holds %s people to enrol, for %s.", wholeText(c.ToEnrol.Total), c.Scenario)
	} else {
		s += " It holds no size."
	}
	w.wrapped("", 0, s)
	w.line("hash %s", e.Hash)
	return w.String()
}
