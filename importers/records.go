package importers

import (
	"fmt"
	"maps"
	"slices"
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
	places  map[Meaning]place
	single  bool // the figures without an arm are about a single group
	byIndex map[int]int
	last    int // last column with a heading
	told    map[string]int
	above   struct { // the study row read last
		label string
		row   int
	}
}

func newRecordReader(g *grid, set *columnSet) *recordReader {
	r := &recordReader{g: g, set: set, byIndex: map[int]int{}, told: map[string]int{}}
	for i, c := range set.list {
		r.byIndex[c.Column] = i
		r.last = max(r.last, c.Column)
	}
	r.mark = r.decideMark()
	r.findPercents()
	r.places = map[Meaning]place{}
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
		for _, c := range row.cells {
			i, ok := r.byIndex[int(c.column)]
			if !ok || c.kind != textCell || !r.set.list[i].Meaning.isNumeric() || len(c.text) > 60 {
				continue
			}
			m := markEvidence(c.text)
			if m == 0 && counts[r.set.list[i].Meaning] {
				m = countEvidence(c.text)
			}
			if _, fault := parseNumber(c.text, '.'); m == 0 && fault == numberNot {
				m = compositeMark(plainText(c.text))
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
			k, ok := r.byIndex[int(c.column)]
			if !ok || !r.set.list[k].isShare() || r.set.list[k].u.percent {
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
	rec := Record{Row: row.n, Hidden: row.hidden}
	r.fillCells(&rec, row)
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
	for i := range row.cells {
		c := &row.cells[i]
		if k, ok := r.byIndex[int(c.column)]; ok {
			r.cell(&rec, c, k, address(int(c.column), row.n))
		}
	}
	r.finish(&rec)
	return rec, true
}

// fillCells keeps every cell of the row as read, the label and what has no meaning.
func (r *recordReader) fillCells(rec *Record, row *row) {
	rec.Cells = make([]Cell, 0, len(row.cells))
	for _, c := range row.cells {
		out := Cell{Address: address(int(c.column), row.n), Column: int(c.column), Text: c.text}
		if k, ok := r.byIndex[int(c.column)]; ok {
			h := &r.set.list[k]
			out.Heading, out.Meaning = h.Typed, h.Meaning
			switch h.Meaning {
			case Study:
				rec.Study = strings.TrimSpace(c.text)
			case "":
				name := h.Typed
				if name == "" {
					name = "column " + columnName(h.Column)
				}
				if rec.Other == nil {
					rec.Other = make(map[string]string, 4)
				}
				if _, taken := rec.Other[name]; taken {
					name += " (column " + columnName(h.Column) + ")"
				}
				rec.Other[name] = c.text
			}
		}
		rec.Cells = append(rec.Cells, out)
	}
}

var totals = map[string]bool{"total": true, "totals": true, "overall": true, "sum": true, "average": true, "mean": true,
	"pooled": true, "summary": true, "grand total": true, "weighted mean": true, "weighted average": true, "subtotal": true,
	"overall effect": true, "pooled effect": true, "combined": true, "all studies": true, "pooled estimate": true}

// skip decides whether the row is a title, a footer, a total or a repeated heading, and says so.
func (r *recordReader) skip(rec *Record, row *row) bool {
	figures, repeats := 0, 0
	for i := range rec.Cells {
		c := &rec.Cells[i]
		if c.Meaning.isNumeric() && c.Meaning != Year && c.Meaning != Relevance && !(row.cells[i].kind == textCell && isMissing(c.Text)) {
			figures++
		}
		if c.Heading != "" && strings.EqualFold(strings.TrimSpace(c.Text), c.Heading) {
			repeats++
		}
	}
	first := strings.TrimSpace(rec.Cells[0].Text)
	label := rec.Study
	if label == "" {
		label = first
	}
	switch {
	case repeats >= 2 && repeats*2 >= len(rec.Cells):
		r.tell(finding.Note, "repeated-headings", &Record{}, row.name(), "", "the row repeats the headings and was passed over", "")
		return true
	case totals[strings.ToLower(strings.Trim(label, " :"))]:
		r.tell(finding.Warning, "total-row", &Record{}, row.name(), label, fmt.Sprintf("the row %q looks like a total of the others, so it was not read as a study", shorten(label)),
			"delete it, or give it a study's name if it is one")
		return true
	case figures > 0:
		return false
	case len(rec.Cells) == 1 || rec.Study == "":
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
	}
	r.tell(sev, "row-without-figures", &Record{}, row.name(), first, what+fmt.Sprintf(": %q", shorten(first)), "fill in its figures if it is a study")
}

// placeOf says where a figure goes. Plain headings (standard error, ci lower, sd, n, events) mean what the other columns
// make of them.
func (r *recordReader) placeOf(m Meaning) place {
	p, ok := r.places[m]
	if !ok {
		p = r.set.target(m, r.single)
		r.places[m] = p
	}
	return p
}

func (s *columnSet) target(m Meaning, single bool) place {
	if !s.has(Estimate) {
		switch diff, mean := s.has("mean difference"), s.has("mean"); {
		case m == StandardError && diff:
			return figures["difference se"]
		case (m == CILower || m == CIUpper) && diff:
			return figures["difference "+m]
		case m == "sd" && diff:
			return figures["difference sd"]
		case m == StandardError && mean:
			return treatment("se")
		case (m == CILower || m == CIUpper) && mean:
			return treatment(m)
		}
	}
	switch {
	case m == N && single:
		return treatment("n")
	case m == "events" && !single:
		return figures["total events"]
	case m == "sd" && !single:
		return figures["outcome sd"]
	case figures[m] != nil:
		return figures[m]
	}
	if rest, ok := strings.CutPrefix(string(m), "treatment "); ok {
		return treatment(Meaning(rest))
	}
	if rest, ok := strings.CutPrefix(string(m), "control "); ok {
		get := armFigures[Meaning(rest)]
		if get == nil {
			return nil
		}
		return func(r *effect.Reported) *effect.Figure { return get(&r.Control) }
	}
	return treatment(m)
}

func treatment(m Meaning) place {
	get := armFigures[m]
	if get == nil {
		return nil
	}
	return func(r *effect.Reported) *effect.Figure { return get(&r.Treatment) }
}
