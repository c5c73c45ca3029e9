package plan

import (
	"fmt"
	"strings"
	"unicode"

	"footing/internal/finding"
)

// decided pairs a plan's decisions with findings. A decision holds while the text that it saw and the study's label
// still match; it then follows the study to another row. What no longer fits is reported, never applied.
type decided struct {
	byFinding map[string]*finding.Decision // by finding id
	overrides map[string]string            // cell address to the value decided on
	reasons   map[string]string            // cell address to why and by whom
	leaveOut  map[string]string            // study rows left out: place to reason
	findings  []finding.Finding
}

func decide(f *File, found []finding.Finding) *decided {
	d := &decided{byFinding: map[string]*finding.Decision{}, overrides: map[string]string{}, reasons: map[string]string{}, leaveOut: map[string]string{}}
	for _, dec := range f.Evidence.Decisions {
		d.pair(f, dec, found)
	}
	return d
}

func (d *decided) pair(f *File, dec Decision, found []finding.Finding) {
	at, changed := -1, -1
	for i := range found {
		x := &found[i]
		if x.ID() == strings.TrimSpace(dec.Finding) {
			if matches(dec, x) {
				at = i
				break
			}
			changed = i
		}
	}
	if at < 0 && dec.Study != "" && dec.Seen != "" {
		for i := range found {
			if moved(dec, &found[i]) {
				at = i
				break
			}
		}
	}
	tell := func(sev finding.Severity, kind, what, mend string) {
		d.findings = append(d.findings, finding.Finding{Severity: sev, Kind: kind, Place: finding.Place{File: f.Path}, What: what, Mend: mend})
	}
	switch {
	case at >= 0:
		d.apply(dec, &found[at])
	case changed >= 0:
		x := &found[changed]
		tell(finding.Warning, "decision-out-of-date", fmt.Sprintf("the decision on %s was made when the cell read %q (study %q); it now reads %q (study %q), so the decision is not applied", dec.Finding, dec.Seen, dec.Study, x.Text, x.Study),
			"look at the finding again and decide anew")
	default:
		tell(finding.Note, "decision-unused", fmt.Sprintf("the decision on %s has no finding any more", dec.Finding), "delete it from the plan if the sheet was mended")
	}
}

// matches: an empty seen or study in the decision was not recorded and matches anything.
func matches(dec Decision, x *finding.Finding) bool {
	return (dec.Seen == "" || sameText(dec.Seen, x.Text)) && (dec.Study == "" || sameText(dec.Study, x.Study))
}

func sameText(a, b string) bool { return strings.TrimSpace(a) == strings.TrimSpace(b) }

// moved: the same kind of finding in the same column of the same sheet, for the same study and text.
func moved(dec Decision, x *finding.Finding) bool {
	kind, place, ok := strings.Cut(strings.TrimSpace(dec.Finding), "@")
	if !ok || kind != x.Kind || !matches(dec, x) {
		return false
	}
	_, there, _ := strings.Cut(x.ID(), "@")
	return withoutRow(place) == withoutRow(there)
}

// withoutRow drops the row number of a place: "Studies!F7" to "Studies!F".
func withoutRow(place string) string { return strings.TrimRightFunc(place, unicode.IsDigit) }

func (d *decided) apply(dec Decision, x *finding.Finding) {
	d.byFinding[x.ID()] = &finding.Decision{Accept: dec.Accept, Value: dec.Value, Why: dec.Why, By: dec.By, On: dec.On, SeenText: x.Text, SeenStudy: x.Study}
	if dec.Accept {
		return
	}
	reason := dec.Why
	if dec.By != "" {
		reason += " (" + dec.By + ")"
	}
	cell := x.Place.Cell
	single := cell != "" && !strings.ContainsAny(cell, ": ")
	if dec.Value != "" && single {
		d.overrides[cell] = dec.Value
		d.reasons[cell] = reason
		return
	}
	if dec.Value == "" {
		d.leaveOut[cell] = reason
		return
	}
	d.findings = append(d.findings, finding.Finding{Severity: finding.Warning, Kind: "decision-without-cell", Place: x.Place, Study: x.Study,
		What: fmt.Sprintf("the decision on %s gives a value, but the finding is not about one cell", dec.Finding), Mend: "decide on the finding of one cell, or mend the sheet"})
}

// attach marks findings with the decisions on them.
func (d *decided) attach(fs []finding.Finding) {
	for i := range fs {
		if dec := d.byFinding[fs[i].ID()]; dec != nil {
			fs[i].Decision = dec
		}
	}
}
