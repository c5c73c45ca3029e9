package importers

import (
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
)

// maxOfKind is how many findings of one kind are listed before they are only counted.
const maxOfKind = 500

// recordReader turns the rows under the headings into records.
type recordReader struct {
	g       *grid
	set     *columnSet
	mark    decimalMark
	numbers map[Meaning]int // place of a figure by the meaning of its column, -1 for none
	single  bool            // the figures without an arm are about a single group
	last    int             // last column with a heading
	summed  []string        // groups whose n is the sum of events and non-events
	scale   effect.Scale    // named by the headings
	figure  []bool          // by column of set.list: it holds figures of the comparison
	study   int             // column of the labels, 0 for none
	rep     effect.Reported // of the row being read
	used    []uint8         // places that any row has filled

	scaleIsLog bool
	told       map[string]int
	section    string   // label of the last row that was a title
	above      struct { // the study row read last
		label string
		row   int
	}
}

func newRecordReader(g *grid, set *columnSet) *recordReader {
	r := &recordReader{g: g, set: set, numbers: map[Meaning]int{}, told: map[string]int{}, figure: make([]bool, len(set.list))}
	for i, c := range set.list {
		r.last = max(r.last, c.Column)
		if c.Meaning == Study {
			r.study = c.Column
		}
		r.figure[i] = c.Meaning.isNumeric() && c.Meaning != Year && c.Meaning != Relevance
	}
	for _, arm := range []string{"treatment ", "control ", ""} {
		if set.has(Meaning(arm+"non-events")) && !set.has(Meaning(arm+"n")) {
			r.summed = append(r.summed, arm)
		}
	}
	r.scale, r.scaleIsLog = set.estimateScale()
	r.mark = r.decideMark()
	r.findPercents()
	r.single = set.has("mean", "median", "proportion", "rate") || set.has("events", "non-events") && !set.has(Estimate, "observed minus expected", "log-rank chi-square", "treatment events")
	return r
}

// decideMark looks for the decimal mark that the typed numbers of the sheet prove. In a column of counts a mark with
// three digits behind it can only be a thousands mark, and so proves the other one. Where both marks are proved the
// mark stays unknown and each cell stands for itself.
func (r *recordReader) decideMark() decimalMark {
	if r.g.mark != 0 {
		return r.g.mark
	}
	points, commas := 0, 0
	commaCell := ""
	for _, row := range r.g.rows[r.set.row+1:] {
		for k := range row.cells {
			c := &row.cells[k]
			i := r.set.index(int(c.column))
			if i < 0 || c.kind != textCell || !r.figure[i] || len(c.text) > 60 {
				continue
			}
			m := markEvidence(c.text)
			if m == 0 && counts[r.set.list[i].Meaning] {
				m = countEvidence(c.text)
			}
			if m == 0 && strings.ContainsAny(c.text, ".,") {
				if _, fault := parseNumber(c.text, '.'); fault == numberNot {
					m = compositeMark(plainText(c.text))
				}
			}
			switch m {
			case '.':
				points++
			case ',':
				commas++
				if commaCell == "" {
					commaCell = address(int(c.column), row.n)
				}
			}
		}
	}
	switch {
	case commas > 0 && points == 0:
		r.g.note(finding.Note, "decimal-comma", commaCell, "numbers are read with a decimal comma", "")
		return ','
	case points > 0 && commas == 0:
		return '.'
	case points > 0:
		r.g.note(finding.Warning, "mixed-decimal-marks", commaCell, fmt.Sprintf("some numbers are typed with a decimal comma (%d cells, the first is %s), others with a point (%d cells)", commas, commaCell, points),
			"use one decimal mark throughout")
	}
	return 0
}

// findPercents marks columns of shares that hold percentages without a sign: values above 1, none above 100. Both
// groups' columns go together, since a column of small percentages alone can't be told from shares.
func (r *recordReader) findPercents() {
	above, other := 0, 0
	first := ""
	for _, row := range r.g.rows[r.set.row+1:] {
		for i := range row.cells {
			c := &row.cells[i]
			k := r.set.index(int(c.column))
			if k < 0 || !r.set.list[k].isShare() || r.set.list[k].u.percent {
				continue
			}
			n, fault := r.number(c, r.set.list[k].Meaning)
			switch {
			case fault != numberFine:
			case n.percent || c.kind == percentCell || n.value > 100:
				other++
			case n.value > 1:
				if above++; first == "" {
					first = address(int(c.column), row.n)
				}
			}
		}
	}
	if above == 0 || other > 0 {
		return
	}
	for k := range r.set.list {
		if r.set.list[k].isShare() {
			r.set.list[k].u.percent, r.set.list[k].Percent = true, true
		}
	}
	r.g.note(finding.Warning, "percent-as-number", first, fmt.Sprintf("%d shares are above 1, so all shares were read as percentages", above), "put % into the heading or behind the values")
}

func (c *column) isShare() bool {
	return strings.HasSuffix(string(c.Meaning), "proportion") && len(c.Meaning.parts()) == 1
}

func countEvidence(text string) decimalMark {
	s := strings.TrimSpace(plainText(text))
	if at := strings.IndexAny(s, ".,"); at > 0 && looksLikeThousands(s, at) {
		if s[at] == ',' {
			return '.'
		}
		return ','
	}
	return 0
}

// readAll reads every row under the headings.
func (r *recordReader) readAll() []Record {
	rows := r.g.rows[r.set.row+1:]
	out := make([]Record, 0, len(rows))
	for i := range rows {
		if r.startsTable(&rows[i]) {
			r.tell(finding.Error, "second-table", &Record{}, rows[i].name(), rows[i].cells[0].text, fmt.Sprintf("the row looks like the headings of a second table; it and the %d rows below it were not read", len(rows)-i-1),
				"put each table on a sheet of its own")
			break
		}
		if rec, ok := r.read(&rows[i]); ok {
			out = append(out, rec)
		}
	}
	for _, kind := range slices.Sorted(maps.Keys(r.told)) {
		if n := r.told[kind]; n > maxOfKind {
			r.g.note(finding.Error, kind, "", fmt.Sprintf("%d more findings of this kind are not listed", n-maxOfKind), "")
		}
	}
	return out
}

// startsTable: words only, in at least three cells, at least half of them headings of other columns than those they stand in.
func (r *recordReader) startsTable(row *row) bool {
	if len(row.cells) < 3 {
		return false
	}
	heads := 0
	for i := range row.cells {
		c := &row.cells[i]
		if c.kind != textCell || len(c.text) > 60 || c.text[0] >= '-' && c.text[0] <= '9' {
			return false
		}
	}
	for i := range row.cells {
		c := &row.cells[i]
		if u, ok := understand(c.text, nil); ok && u.rest == "" {
			if k := r.set.index(int(c.column)); k < 0 || r.set.list[k].Meaning != u.meaning {
				heads++
			}
		}
	}
	return heads >= 2 && heads*2 >= len(row.cells)
}

// tell adds a finding about a cell of a record.
func (r *recordReader) tell(sev finding.Severity, kind string, rec *Record, at, text, what, mend string) {
	r.told[kind]++
	if r.told[kind] > maxOfKind {
		return
	}
	r.g.findings = append(r.g.findings, finding.Finding{Severity: sev, Kind: kind, Place: r.g.place(at), Study: rec.Study, Text: text, What: what, Mend: mend})
}

// read reads one row; false when the row is no study.
func (r *recordReader) read(row *row) (Record, bool) {
	rec := Record{Row: row.n, Hidden: row.hidden, set: r.set, cells: row.cells}
	if s := r.study; s > 0 {
		rec.Study = strings.TrimSpace(rec.textAt(s))
	}
	if r.skip(&rec, row) {
		return rec, false
	}
	if rec.Study == "" && r.above.label != "" && r.above.row == row.n-1 {
		rec.Study = r.above.label
		r.tell(finding.Warning, "label-from-above", &rec, row.name(), "", fmt.Sprintf("the row names no study and was taken as another row of %q above it", shorten(rec.Study)), "name the study in each row")
	}
	r.above.label, r.above.row = rec.Study, row.n
	if rec.Study == "" {
		rec.Study = row.name()
		r.tell(finding.Warning, "no-study-label", &rec, row.name(), "", "the row has figures but no study is named", "name the study")
	}
	if n := len(row.cells); r.g.strict && int(row.cells[n-1].column) > r.last {
		c := row.cells[n-1]
		r.tell(finding.Error, "row-longer-than-heading", &rec, address(int(c.column), row.n), c.text,
			fmt.Sprintf("the row has cells up to column %s, but the headings end at column %s: probably a comma inside a cell cut it in two, so none of its figures is used", columnName(int(c.column)), columnName(r.last)),
			"put cells with a comma in double quotes")
		return rec, true
	}
	rec.Subgroup = r.section
	r.rep = effect.Reported{}
	number := strconv.Itoa(row.n)
	for i := range row.cells {
		c := &row.cells[i]
		if k := r.set.index(int(c.column)); k >= 0 && r.set.list[k].Meaning != "" && r.set.list[k].Meaning != Study {
			r.cell(&rec, c, k, r.set.letters[k]+number)
		}
	}
	r.finish(&rec)
	rec.keep(&r.rep, r.used)
	return rec, true
}

var totals = map[string]bool{"total": true, "totals": true, "overall": true, "sum": true, "average": true, "mean": true,
	"pooled": true, "summary": true, "grand total": true, "weighted mean": true, "weighted average": true, "subtotal": true,
	"overall effect": true, "pooled effect": true, "combined": true, "all studies": true, "pooled estimate": true}

// skip decides whether the row is a title, a footer, a total or a repeated heading, and says so.
func (r *recordReader) skip(rec *Record, row *row) bool {
	figures, repeats := 0, 0
	for i := range row.cells {
		c := &row.cells[i]
		k := r.set.index(int(c.column))
		if k < 0 {
			continue
		}
		if r.figure[k] && !(c.kind == textCell && isMissing(c.text)) {
			figures++
		}
		if h := r.set.list[k].Typed; h != "" && c.kind == textCell && len(c.text) >= len(h) && strings.EqualFold(strings.TrimSpace(c.text), h) {
			repeats++
		}
	}
	first := strings.TrimSpace(row.cells[0].text)
	label := rec.Study
	if label == "" {
		label = first
	}
	switch {
	case repeats >= 2 && repeats*2 >= len(row.cells):
		r.tell(finding.Note, "repeated-headings", &Record{}, row.name(), "", "the row repeats the headings and was passed over", "")
		return true
	case len(label) < 30 && totals[strings.ToLower(strings.Trim(label, " :"))]:
		r.tell(finding.Warning, "total-row", &Record{}, row.name(), label, fmt.Sprintf("the row %q looks like a total of the others, so it was not read as a study", shorten(label)),
			"delete it, or give it a study's name if it is one")
		return true
	case figures > 0:
		return false
	case len(row.cells) == 1 || rec.Study == "":
		r.saySkipped(rec, row, first)
		return true
	}
	return false
}

// saySkipped: a lone label may be a study whose figures are missing; a sentence is a note.
func (r *recordReader) saySkipped(rec *Record, row *row, first string) {
	sev, what := finding.Note, "the row holds no figures and was passed over as a note"
	lower := strings.ToLower(first)
	sentence := len(first) > 60 || strings.ContainsAny(first, ":*=†") || strings.HasPrefix(lower, "note") || strings.HasPrefix(lower, "source")
	if rec.Study != "" && !sentence {
		sev, what = finding.Warning, "the row holds only a label, so it was passed over as the title of a section"
		if !r.set.has(Subgroup) {
			r.section = rec.Study
			what += "; the rows below it have it as their subgroup"
		}
	}
	r.tell(sev, "row-without-figures", &Record{}, row.name(), first, what+fmt.Sprintf(": %q", shorten(first)), "fill in its figures if it is a study")
}

// placeOf gives the number of the place where a figure goes, -1 for none. Plain headings (standard error, ci lower, sd,
// n, events) mean what the other columns make of them.
func (r *recordReader) placeOf(m Meaning) int {
	n, ok := r.numbers[m]
	if !ok {
		n = -1
		if p, ok := placeNumber[r.set.target(m, r.single)]; ok {
			n = int(p)
			if !slices.Contains(r.used, p) {
				r.used = append(r.used, p)
			}
		}
		r.numbers[m] = n
	}
	return n
}

// target is the meaning of the place where a figure of meaning m goes.
func (s *columnSet) target(m Meaning, single bool) Meaning {
	if m == Variance && !s.has(Estimate) && s.has("observed minus expected") {
		return "log-rank variance"
	}
	if !s.has(Estimate) {
		switch diff, mean := s.has("mean difference"), s.has("mean"); {
		case m == StandardError && diff:
			return "difference se"
		case (m == CILower || m == CIUpper) && diff:
			return "difference " + m
		case m == "sd" && diff:
			return "difference sd"
		case m == StandardError && mean:
			return "treatment se"
		case (m == CILower || m == CIUpper) && mean:
			return "treatment " + m
		}
	}
	switch {
	case m == N && single:
		return "treatment n"
	case m == "events" && !single:
		return "total events"
	case m == "sd" && !single:
		return "outcome sd"
	case figures[m] != nil || strings.HasPrefix(string(m), "treatment ") || strings.HasPrefix(string(m), "control "):
		return m
	}
	return "treatment " + m
}
