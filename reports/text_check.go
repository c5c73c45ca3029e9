package reports

import (
	"fmt"

	"footing/plan/result"
)

// mostDiffers is how many numbers that differ are printed one by one.
const mostDiffers = 40

// TextCheck says, number by number, which printed digits of a report did not come out again.
func TextCheck(c *result.Check, o TextOptions) string {
	w := &textWriter{o: o}
	w.head(TermText(c.Report), fmt.Sprintf("%d of %d printed numbers reproduced", c.Reproduced, c.Numbers))
	files := "Computed again by footing " + c.Tool.Version + " from " + TermText(c.Plan.Name)
	if c.Evidence != nil {
		files += " and " + TermText(c.Evidence.Name)
	}
	if c.Editions != nil {
		files += ", with the editions kept before"
	}
	w.wrapped("", 0, files+": all of it stands in the report.")
	section := ""
	for i, d := range c.Differs {
		if i == mostDiffers {
			w.blank()
			w.wrapped("", 0, fmt.Sprintf("and %d more; footing check --json has them all", len(c.Differs)-mostDiffers))
			break
		}
		if d.Section != section || i == 0 {
			section = d.Section
			w.blank()
			w.line("%s", w.ink(termStrong, cutColumns(TermText(sectionName(section)), 78)))
		}
		printed, computed := d.Printed, d.Computed
		if printed == "" {
			printed = "not printed"
		}
		if computed == "" {
			computed = "does not come out"
		}
		w.wrapped("  ", 4, fmt.Sprintf("%s: printed %s, computed %s", TermText(d.Label), TermText(printed), TermText(computed)))
	}
	w.blank()
	end := "Printed digits reproduced. Whether the plan and the evidence are right is another question."
	if len(c.Differs) > 0 {
		end = "The report does not hold what its own plan and evidence give."
	}
	w.wrapped("", 0, end)
	return w.String()
}

func sectionName(title string) string {
	if title == "" {
		return "The answer"
	}
	return title
}
