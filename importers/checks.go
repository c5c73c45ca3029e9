package importers

import (
	"fmt"
	"hash/fnv"
	"math"
	"slices"
	"strings"

	"footing/internal/finding"
)

// checkRows looks across the records.
func (s *Sheet) checkRows() {
	labels := labelNumbers(s.Records)
	s.checkDuplicates(labels)
	s.checkControls(labels)
	for _, arm := range []string{"treatment", "control"} {
		s.checkSDs(arm)
		s.checkGranularity(arm)
	}
}

// checkGranularity reports means that no whole-number answers of n people can give (Brown & Heathers 2017): the mean of n
// people over some items is a multiple of 1/(n items). It looks only at rows that state the number of items, since other
// outcomes need not be whole.
func (s *Sheet) checkGranularity(arm string) {
	meanAt, nAt, itemsAt := placeNumber[Meaning(arm+" mean")], placeNumber[Meaning(arm+" n")], placeNumber["items"]
	for i := range s.Records {
		r := &s.Records[i]
		mean, n, items := r.figure(meanAt), r.figure(nAt), r.figure(itemsAt)
		if !mean.Given || !n.Given || !items.Given || mean.Decimals < 1 || n.Value < 1 || items.Value < 1 || n.Value*items.Value >= math.Pow(10, float64(mean.Decimals)) {
			continue
		}
		parts := n.Value * items.Value
		half := 0.5000001 * math.Pow(10, -float64(mean.Decimals)) // rounding either way at a tie
		below, above := math.Floor(mean.Value*parts)/parts, math.Ceil(mean.Value*parts)/parts
		if mean.Value-below <= half || above-mean.Value <= half {
			continue
		}
		s.addAt(finding.Warning, "mean-impossible-for-n", r, mean.Cell, textOf(r, mean.Cell),
			fmt.Sprintf("whole-number answers of %s people to %s items can't have the mean %s: the nearest are %.*f and %.*f", brief(n.Value), brief(items.Value), textOf(r, mean.Cell), mean.Decimals, below, mean.Decimals, above),
			"check the mean and n in the paper (n may be smaller for this outcome)")
	}
}

// labelNumbers gives records with the same label the same number.
func labelNumbers(recs []Record) []int32 {
	out := make([]int32, len(recs))
	seen := make(map[string]int32, len(recs))
	for i := range recs {
		k := foldHeading(recs[i].Study)
		n, ok := seen[k]
		if !ok {
			n = int32(len(seen))
			seen[k] = n
		}
		out[i] = n
	}
	return out
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

// figuresHash is a hash of all figures of a record, as typed; n counts them.
func figuresHash(r *Record) (key uint64, n int) {
	h := fnv.New64a()
	add := func(cells []cell) {
		for i := range cells {
			c := &cells[i]
			col := r.set.at(int(c.column))
			if col == nil || !col.Meaning.isNumeric() || col.Meaning == Year || col.Meaning == Relevance || isMissing(c.text) {
				continue
			}
			h.Write([]byte{byte(c.column), byte(c.column >> 8)})
			h.Write([]byte(c.text))
			n++
		}
	}
	add(r.cells)
	for _, j := range r.joined {
		add(j.cells)
	}
	return h.Sum64(), n
}

// figuresKey writes all figures of a record down by meaning, as typed; n counts them.
func figuresKey(r *Record) (key string, n int) {
	var out []string
	for _, c := range r.Cells() {
		if c.Meaning.isNumeric() && c.Meaning != Year && c.Meaning != Relevance && !isMissing(c.Text) {
			out = append(out, string(c.Meaning)+"="+c.Text)
		}
	}
	return strings.Join(out, "\x00"), len(out)
}

// sameFiguresTyped proves what equal hashes suggest.
func sameFiguresTyped(a, b *Record) bool {
	x, _ := figuresKey(a)
	y, _ := figuresKey(b)
	return x == y
}

// checkDuplicates reports rows that say the same in every figure, and labels that stand before several rows.
func (s *Sheet) checkDuplicates(labels []int32) {
	figures := make(map[uint64]int, len(s.Records))
	rows := make([]int32, len(s.Records)) // of each label
	for i := range s.Records {
		r := &s.Records[i]
		rows[labels[i]]++
		key, n := figuresHash(r)
		if n < 2 {
			continue
		}
		if first, ok := figures[key]; ok && sameFiguresTyped(&s.Records[first], r) {
			o := &s.Records[first]
			s.add(finding.Warning, "duplicate-row", r, fmt.Sprintf("all figures of this row (%q) are those of row %d (%q)", shorten(r.Study), o.Row, shorten(o.Study)), "delete one of them if the study was entered twice")
			continue
		}
		figures[key] = i
	}
	for i := range s.Records {
		if rows[labels[i]] < 2 {
			continue
		}
		rows[labels[i]] = 0 // told once
		var at []int
		for j := i; j < len(labels) && len(at) < 12; j++ {
			if labels[j] == labels[i] {
				at = append(at, j)
			}
		}
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
func (s *Sheet) checkControls(labels []int32) {
	type group struct {
		label int32
		arm   [6]float64
	}
	var controls [6]uint8
	for k, m := range []Meaning{"control n", "control mean", "control sd", "control events", "control median", "control se"} {
		controls[k] = placeNumber[m]
	}
	seen := map[group]int{}
	for i := range s.Records {
		r := &s.Records[i]
		g := group{label: labels[i]}
		n := 0
		for k, p := range controls {
			if f := r.figure(p); f.Given {
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
	sdAt, nAt, meanAt := placeNumber[Meaning(arm+" sd")], placeNumber[Meaning(arm+" n")], placeNumber[Meaning(arm+" mean")]
	if len(s.Records) > 20_000 {
		return
	}
	for i := range s.Records {
		r := &s.Records[i]
		sd, n, mean := r.figure(sdAt), r.figure(nAt), r.figure(meanAt)
		if sd.Given && sd.Value > 0 && n.Given && n.Value >= 4 && mean.Given {
			rows = append(rows, row{r, sd.Cell, sd.Value, n.Value, math.Abs(mean.Value)})
		}
	}
	if len(rows) < 5 {
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
	for _, c := range r.Cells() {
		if c.Address == cell {
			return c.Text
		}
	}
	return ""
}

// brief writes a number for a message: three significant digits.
func brief(v float64) string { return fmt.Sprintf("%.3g", v) }
