package importers

import (
	"fmt"
	"slices"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
)

// armColumn looks for the column that names the group of each row, in a sheet with one row for each group: the figures
// then stand under headings without a group, and most studies have one row of the control group and at least one other.
func (r *recordReader) armColumn(recs []Record, groups []string) int {
	armed, plain := false, false
	for _, c := range r.set.list {
		for _, p := range c.Meaning.parts() {
			armed = armed || strings.HasPrefix(string(p), "treatment ") || strings.HasPrefix(string(p), "control ")
			if _, ok := armFigures[p]; ok && p != N {
				plain = true
			}
		}
	}
	if armed || !plain {
		return -1
	}
	for i, c := range r.set.list {
		if c.Meaning != "" && c.Meaning != Subgroup {
			continue
		}
		studies, good := 0, 0
		for _, run := range runsOfStudy(recs) {
			control := 0
			for _, k := range run {
				if armOf(recs[k].textAt(c.Column), groups) == "control" {
					control++
				}
			}
			studies++
			if control >= 1 && len(run) > control {
				good++
			}
		}
		if good > 0 && good*5 >= studies*4 {
			return i
		}
	}
	return -1
}

// runsOfStudy cuts the records into runs of neighbours with the same label.
func runsOfStudy(recs []Record) [][]int {
	var out [][]int
	for i := range recs {
		if i > 0 && foldHeading(recs[i].Study) == foldHeading(recs[i-1].Study) {
			out[len(out)-1] = append(out[len(out)-1], i)
			continue
		}
		out = append(out, []int{i})
	}
	return out
}

// armOf reads the name of a group: "treatment", "control", or "" for a name that says neither.
func armOf(text string, groups []string) string {
	folded := foldHeading(text)
	for i, g := range groups[:min(2, len(groups))] {
		if folded == foldHeading(g) {
			return [2]string{"treatment", "control"}[i]
		}
	}
	fs, rest := match(headingWords(text))
	arm := ""
	for _, f := range fs {
		if f.arm == "" || arm != "" && arm != f.arm {
			return ""
		}
		arm = f.arm
	}
	if len(rest) > 0 && arm == "treatment" {
		return ""
	}
	return arm
}

// joinArms makes one record of the rows of both groups. Further treatment groups of a study share its control group.
func (r *recordReader) joinArms(recs []Record, column int, groups []string) []Record {
	col := r.set.list[column].Column
	var out []Record
	for _, run := range runsOfStudy(recs) {
		var treated, control []int
		for _, k := range run {
			if armOf(recs[k].textAt(col), groups) == "control" {
				control = append(control, k)
			} else {
				treated = append(treated, k)
			}
		}
		switch {
		case len(control) == 1 && len(treated) > 0:
			for _, k := range treated {
				out = append(out, joinTwo(recs[k], recs[control[0]]))
			}
			if len(treated) > 1 {
				r.tell(finding.Warning, "shared-control", &recs[control[0]], fmt.Sprintf("row %d", recs[control[0]].Row), recs[control[0]].Study,
					fmt.Sprintf("%d groups of %q are compared with the same control group, so their effects are not independent", len(treated), shorten(recs[control[0]].Study)), "combine the groups, or divide the control group among them")
			}
		case len(control) == len(treated):
			for i, k := range treated {
				out = append(out, joinTwo(recs[k], recs[control[i]]))
			}
		default:
			rec := recs[run[0]]
			r.tell(finding.Error, "groups-not-paired", &rec, fmt.Sprintf("row %d", rec.Row), rec.Study,
				fmt.Sprintf("%q has %d rows of a control group and %d others, so it is not clear which belong together; the study is not used", shorten(rec.Study), len(control), len(treated)), "give each study one row for each group")
			rec.kept, rec.rest = nil, keptRest{}
			out = append(out, rec)
		}
	}
	return out
}

// joinTwo puts the figures of the control group's row beside those of the treatment group's.
func joinTwo(t, c Record) Record {
	out := t
	out.joined = append(slices.Clone(t.joined), row{n: c.Row, hidden: c.Hidden, cells: c.cells})
	out.Hidden = t.Hidden || c.Hidden
	rep, other := t.Reported(), c.Reported()
	rep.Control = other.Treatment
	rep.N = effect.Figure{} // of one group only
	for m, get := range figures {
		if dst, src := get(&rep), get(&other); m != N && !dst.Given {
			*dst = *src
		}
	}
	rep.NotSignificant = rep.NotSignificant || other.NotSignificant
	if rep.Direction == effect.DirectionUnknown {
		rep.Direction = other.Direction
	}
	if out.Year == 0 {
		out.Year = c.Year
	}
	if out.RiskOfBias == "" {
		out.RiskOfBias = c.RiskOfBias
	}
	if !out.HasRelevance {
		out.Relevance, out.HasRelevance = c.Relevance, c.HasRelevance
	}
	if out.Status == "" {
		out.Status = c.Status
	}
	out.keep(&rep, allPlaces)
	return out
}

// fillMerged gives each row under a cell that is merged over several rows the value of that cell.
func (g *grid) fillMerged(below int) {
	filled := 0
	for _, m := range g.merges {
		c1, r1, c2, r2, ok := rangeOf(m)
		if !ok || c1 != c2 || r2 <= r1 || r1 <= below {
			continue
		}
		var value cell
		found := false
		for i := range g.rows {
			row := &g.rows[i]
			switch {
			case row.n < r1 || row.n > r2:
			case row.n == r1:
				value, found = row.at(c1)
			case found:
				k, has := slices.BinarySearchFunc(row.cells, c1, func(c cell, want int) int { return int(c.column) - want })
				if !has {
					row.cells = slices.Insert(row.cells, k, value)
					filled++
				}
			}
		}
	}
	if filled > 0 {
		g.note(finding.Note, "merged-cells", "", fmt.Sprintf("%d cells under merged cells were given the value of the merged cell", filled), "")
	}
}

// allPlaces are the numbers of all places.
var allPlaces = func() []uint8 {
	out := make([]uint8, len(places))
	for i := range out {
		out[i] = uint8(i)
	}
	return out
}()
