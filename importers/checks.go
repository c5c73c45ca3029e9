package importers

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
)

// checkRows looks across the records.
func (s *Sheet) checkRows() {
	s.checkDuplicates()
	s.checkControls()
	for _, arm := range []string{"treatment", "control"} {
		s.checkSDs(arm)
	}
}

// add adds a finding about a whole row.
func (s *Sheet) add(sev finding.Severity, kind string, r *Record, what, mend string) {
	s.addAt(sev, kind, r, fmt.Sprintf("row %d", r.Row), r.Study, what, mend)
}

func (s *Sheet) addAt(sev finding.Severity, kind string, r *Record, cell, text, what, mend string) {
	if s.told == nil {
		s.told = map[string]int{}
	}
	if s.told[kind]++; s.told[kind] > maxOfKind {
		return
	}
	s.Findings = append(s.Findings, finding.Finding{Severity: sev, Kind: kind, Place: finding.Place{File: s.File, Sheet: s.Name, Cell: cell}, Study: r.Study, Text: text, What: what, Mend: mend})
}

// figuresKey writes the figures of a record down for comparison; n counts them.
func figuresKey(r *Record) (key string, n int) {
	var b strings.Builder
	for _, c := range r.Cells {
		if c.Meaning.isNumeric() && c.Meaning != Year && c.Meaning != Relevance && !isMissing(c.Text) {
			b.WriteString(string(c.Meaning))
			b.WriteByte('=')
			b.WriteString(c.Text)
			b.WriteByte('\x00')
			n++
		}
	}
	return b.String(), n
}

// checkDuplicates reports rows that say the same in every figure, and labels that stand before several rows.
func (s *Sheet) checkDuplicates() {
	figures := make(map[string]int, len(s.Records))
	labels := make(map[string][]int, len(s.Records))
	for i := range s.Records {
		r := &s.Records[i]
		key, n := figuresKey(r)
		label := foldHeading(r.Study)
		labels[label] = append(labels[label], i)
		if n < 2 {
			continue
		}
		if first, ok := figures[key]; ok {
			o := &s.Records[first]
			s.add(finding.Warning, "duplicate-row", r, fmt.Sprintf("all figures of this row (%q) are those of row %d (%q)", shorten(r.Study), o.Row, shorten(o.Study)), "delete one of them if the study was entered twice")
			continue
		}
		figures[key] = i
	}
	told := map[string]bool{}
	for i := range s.Records {
		label := foldHeading(s.Records[i].Study)
		at := labels[label]
		if len(at) < 2 || told[label] {
			continue
		}
		told[label] = true
		s.add(finding.Warning, "several-rows-one-study", &s.Records[i], fmt.Sprintf("the label %q stands in rows %s; rows of one study are not independent", shorten(s.Records[i].Study), s.rowList(at)),
			"give different studies different labels; of one study keep one row (keep where can choose by outcome), or combine them")
	}
}

func (s *Sheet) rowList(at []int) string {
	var rows []string
	for _, j := range at {
		if len(rows) == 10 {
			rows = append(rows, "...")
			break
		}
		rows = append(rows, fmt.Sprint(s.Records[j].Row))
	}
	return strings.Join(rows, ", ")
}

// checkControls reports rows of one study whose control groups have the same figures but whose treatment groups differ:
// the same people would be counted twice.
func (s *Sheet) checkControls() {
	type group struct {
		label string
		arm   [6]float64
	}
	seen := map[group]int{}
	for i := range s.Records {
		r := &s.Records[i]
		c := &r.Reported.Control
		figures := [6]effect.Figure{c.N, c.Mean, c.SD, c.Events, c.Median, c.SE}
		g := group{label: foldHeading(r.Study)}
		n := 0
		for k, f := range figures {
			if f.Given {
				g.arm[k] = f.Value
				n++
			}
		}
		if n < 2 {
			continue
		}
		if first, ok := seen[g]; ok {
			s.add(finding.Warning, "same-control-group", r, fmt.Sprintf("the control group of this row has the same figures as that of row %d of the same study; its people would count twice", s.Records[first].Row),
				"combine the treatment groups, or divide the control group among the rows")
			continue
		}
		seen[g] = i
	}
}

// checkSDs looks for standard deviations that are probably standard errors: the SD is less than 1/2.5 of the median of
// the other rows', and times the square root of n it falls among them (within a factor of 1.6). Only rows whose means
// are of the same size as the others' are held against them, since studies with another instrument have other SDs.
func (s *Sheet) checkSDs(arm string) {
	type row struct {
		rec         *Record
		cell        string
		sd, n, mean float64
	}
	var rows []row
	for i := range s.Records {
		a := &s.Records[i].Reported.Treatment
		if arm == "control" {
			a = &s.Records[i].Reported.Control
		}
		if a.SD.Given && a.SD.Value > 0 && a.N.Given && a.N.Value >= 4 && a.Mean.Given {
			rows = append(rows, row{&s.Records[i], a.SD.Cell, a.SD.Value, a.N.Value, math.Abs(a.Mean.Value)})
		}
	}
	if len(rows) < 5 || len(rows) > 20_000 {
		return
	}
	sds, means := make([]float64, len(rows)), make([]float64, len(rows))
	for i, r := range rows {
		sds[i], means[i] = r.sd, r.mean
	}
	slices.Sort(sds)
	slices.Sort(means)
	typical, size := median(sds), median(means)
	for _, r := range rows {
		asSD := r.sd * math.Sqrt(r.n)
		if r.sd*2.5 >= typical || asSD > 1.6*typical || asSD < typical/1.6 || r.mean > 4*size || r.mean < size/4 {
			continue
		}
		s.addAt(finding.Warning, "sd-looks-like-se", r.rec, r.cell, textOf(r.rec, r.cell),
			fmt.Sprintf("the %s SD %s is far below that of the other rows (median %s), but times the square root of n = %s it is %s: it is probably a standard error", arm, brief(r.sd), brief(typical), brief(r.n), brief(asSD)),
			fmt.Sprintf("check it in the paper; if it is a standard error, the SD is %s", brief(asSD)))
	}
}

func median(sorted []float64) float64 {
	n := len(sorted)
	if n%2 == 1 {
		return sorted[n/2]
	}
	return (sorted[n/2-1] + sorted[n/2]) / 2
}

func textOf(r *Record, cell string) string {
	for _, c := range r.Cells {
		if c.Address == cell {
			return c.Text
		}
	}
	return ""
}

// brief writes a number for a message: three significant digits.
func brief(v float64) string { return fmt.Sprintf("%.3g", v) }
