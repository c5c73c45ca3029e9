package importers

import (
	"fmt"
	"strings"

	"footing/internal/finding"
)

// checkRows looks across the records: the same row twice, the same study in several rows.
func (s *Sheet) checkRows() {
	s.checkDuplicates()
}

// checkDuplicates reports rows that say the same in every figure, and labels that stand before several rows.
func (s *Sheet) checkDuplicates() {
	figures := make(map[string]int, len(s.Records))
	labels := make(map[string][]int, len(s.Records))
	for i := range s.Records {
		r := &s.Records[i]
		var b strings.Builder
		n := 0
		for _, c := range r.Cells {
			if c.Meaning.isNumeric() && c.Meaning != Year && c.Meaning != Relevance && !isMissing(c.Text) {
				b.WriteString(string(c.Meaning))
				b.WriteByte('=')
				b.WriteString(c.Text)
				b.WriteByte('\x00')
				n++
			}
		}
		labels[foldHeading(r.Study)] = append(labels[foldHeading(r.Study)], i)
		if n < 2 {
			continue
		}
		if first, ok := figures[b.String()]; ok {
			o := &s.Records[first]
			what := fmt.Sprintf("all figures of this row (%q) are those of row %d (%q)", shorten(r.Study), o.Row, shorten(o.Study))
			s.add(finding.Warning, "duplicate-row", r, what, "delete one of them if the study was entered twice")
			continue
		}
		figures[b.String()] = i
	}
	told := map[string]bool{}
	for i := range s.Records {
		k := foldHeading(s.Records[i].Study)
		if at := labels[k]; len(at) > 1 && !told[k] {
			told[k] = true
			var rows []string
			for _, j := range at {
				if len(rows) == 10 {
					rows = append(rows, "...")
					break
				}
				rows = append(rows, fmt.Sprint(s.Records[j].Row))
			}
			s.add(finding.Warning, "several-rows-one-study", &s.Records[i], fmt.Sprintf("the label %q stands in rows %s; rows of one study are not independent", shorten(s.Records[i].Study), strings.Join(rows, ", ")),
				"give different studies different labels, or combine the rows of one study")
		}
	}
}

// add adds a finding about a whole row.
func (s *Sheet) add(sev finding.Severity, kind string, r *Record, what, mend string) {
	if s.told == nil {
		s.told = map[string]int{}
	}
	if s.told[kind]++; s.told[kind] > maxOfKind {
		return
	}
	text := ""
	if len(r.Cells) > 0 {
		text = r.Study
	}
	s.Findings = append(s.Findings, finding.Finding{Severity: sev, Kind: kind, Place: finding.Place{File: s.File, Sheet: s.Name, Cell: fmt.Sprintf("row %d", r.Row)}, Study: r.Study, Text: text, What: what, Mend: mend})
}
