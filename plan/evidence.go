package plan

import (
	"fmt"
	"strings"

	"footing/importers"
	"footing/internal/finding"
	"footing/meta/effect"
	"footing/plan/result"
)

// ReadEvidence reads the evidence sheet that a plan names and turns every record into an estimate, or says why there is
// none. The error says why the sheet as a whole can't be used; what is wrong with single cells and rows is in Findings.
func ReadEvidence(f *File) (*EvidenceRead, error) {
	if strings.TrimSpace(f.Evidence.File) == "" {
		return nil, &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: "no-evidence-file", Place: finding.Place{File: f.Path},
			What: "the plan names no evidence sheet", Mend: "add evidence: file: with the name of the spreadsheet"}}
	}
	r := &evidenceReader{file: f}
	if err := r.pass(nil); err != nil {
		return nil, err
	}
	first := r.findings()
	d := decide(f, first)
	if len(d.overrides) > 0 {
		typed := r.sheet
		if err := r.pass(d.overrides); err != nil {
			return nil, err
		}
		r.keepTyped(typed)
	}
	return r.build(d, first)
}

// ReadSheet reads a sheet without a plan: its scale and everything else are found out.
func ReadSheet(path, sheet string) (*EvidenceRead, error) {
	return ReadEvidence(&File{Evidence: Evidence{File: path, Sheet: sheet}})
}

// evidenceReader holds one reading of the sheet.
type evidenceReader struct {
	file       *File
	sheet      *importers.Sheet
	conditions []condition
	scale      effect.Scale
	options    effect.Options    // all but the scale
	wrong      map[string]string // what is wrong with cells that could not be read, by address
	outcomes   []outcome
	own        []finding.Finding // of this stage, not of the sheet
}

// outcome is what became of one record.
type outcome struct {
	estimate *effect.Estimate
	why      string
	findings []finding.Finding
}

// pass reads the sheet, with decided values in place of some cells, and computes every record.
func (r *evidenceReader) pass(overrides map[string]string) error {
	f := r.file
	opt := importers.Options{SheetName: f.Evidence.Sheet, Columns: f.Evidence.Columns, Groups: f.Study.Groups, Name: f.Evidence.File, Overrides: overrides,
		Encoding: f.Evidence.Encoding}
	switch foldWords(f.Evidence.DecimalMark) {
	case "":
	case ".", "point":
		opt.Decimal = "."
	case ",", "comma":
		opt.Decimal = ","
	default:
		return &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: "decimal-mark-unknown", Place: finding.Place{File: f.Path},
			What: fmt.Sprintf("evidence: decimal mark: %q is none", f.Evidence.DecimalMark), Mend: "write point or comma"}}
	}
	if h := strings.TrimSpace(f.Pool.Relevance); h != "" && !strings.EqualFold(h, string(importers.Relevance)) {
		opt.Columns = map[string]string{string(importers.Relevance): h}
		for k, v := range f.Evidence.Columns {
			opt.Columns[k] = v
		}
	}
	s, err := importers.Read(f.EvidencePath(), opt)
	if err != nil {
		return err
	}
	r.sheet, r.own, r.wrong = s, nil, map[string]string{}
	for _, x := range s.Findings {
		if _, told := r.wrong[x.Place.Cell]; x.Severity == finding.Error && !told {
			r.wrong[x.Place.Cell] = x.What
		}
	}
	if r.conditions, err = parseConditions(f, s); err != nil {
		return err
	}
	if err := r.checkSubgroup(); err != nil {
		return err
	}
	if r.options, err = f.effectOptions(); err != nil {
		return err
	}
	if r.scale, err = r.chooseScale(); err != nil {
		return err
	}
	if f.Evidence.HigherBetter == nil {
		r.note("direction-assumed", "a larger value is taken to favour the treatment", "say higher is better: true or false in the plan")
	}
	r.outcomes = make([]outcome, len(s.Records))
	for i := range s.Records {
		r.outcomes[i] = r.compute(&s.Records[i])
	}
	r.checkEstimates()
	return nil
}

func (r *evidenceReader) note(kind, what, mend string) {
	r.own = append(r.own, finding.Finding{Severity: finding.Note, Kind: kind, Place: finding.Place{File: r.sheet.File, Sheet: r.sheet.Name}, What: what, Mend: mend})
}

// checkSubgroup refuses a subgroup column that the sheet doesn't have.
func (r *evidenceReader) checkSubgroup() error {
	by := foldWords(r.file.Pool.SubgroupBy)
	if by == "" || by == "subgroup" || by == "year" || by == "risk of bias" || by == "status" {
		return nil
	}
	var names []string
	for _, h := range r.sheet.Headings {
		if by == foldWords(h.Typed) || by == string(h.Meaning) {
			return nil
		}
		names = append(names, fmt.Sprintf("%q", h.Typed))
	}
	return &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: "subgroup-column-unknown", Place: finding.Place{File: r.file.Path},
		What: fmt.Sprintf("pool: subgroup by: the sheet has no column %q", r.file.Pool.SubgroupBy), Mend: "it has " + strings.Join(names, ", ")}}
}

// findings gathers what the sheet, this stage and the routes noticed.
func (r *evidenceReader) findings() []finding.Finding {
	out := append([]finding.Finding{}, r.sheet.Findings...)
	out = append(out, r.own...)
	for _, o := range r.outcomes {
		out = append(out, o.findings...)
	}
	return out
}

// keepTyped puts the cells as typed back in place of the decided values, for show.
func (r *evidenceReader) keepTyped(typed *importers.Sheet) {
	byRow := make(map[int]*importers.Record, len(typed.Records))
	for i := range typed.Records {
		byRow[typed.Records[i].Row] = &typed.Records[i]
	}
	for i := range r.sheet.Records {
		if old := byRow[r.sheet.Records[i].Row]; old != nil {
			r.sheet.Records[i].ShowCellsOf(old)
		}
	}
	r.sheet.Headings = typed.Headings
}

// build makes the stage's result.
func (r *evidenceReader) build(d *decided, first []finding.Finding) (*EvidenceRead, error) {
	out := &EvidenceRead{Sheet: r.sheet, Scale: r.scale, Info: scaleInfo(r.scale, r.file.Evidence), Findings: r.findings()}
	have := map[string]bool{}
	for i := range out.Findings {
		have[out.Findings[i].ID()] = true
	}
	for _, x := range first { // findings that a decided value cured stay on record
		if d.byFinding[x.ID()] != nil && !have[x.ID()] {
			out.Findings = append(out.Findings, x)
		}
	}
	d.attach(out.Findings)
	out.Findings = append(out.Findings, d.findings...)
	for i := range r.sheet.Records {
		st := r.study(&r.sheet.Records[i], &r.outcomes[i], d)
		out.Studies = append(out.Studies, st)
		if st.Used {
			e := *r.outcomes[i].estimate
			e.Notes = st.Notes
			out.Estimates = append(out.Estimates, e)
			out.Index = append(out.Index, i)
		}
	}
	out.Evidence = r.evidence(out)
	finding.Sort(out.Findings)
	out.Nuisance = poolNuisance(out)
	return out, nil
}

// study describes one record and what became of it.
func (r *evidenceReader) study(rec *importers.Record, o *outcome, d *decided) result.Study {
	st := result.Study{Row: rec.Row, Place: result.Place{File: r.sheet.File, Sheet: r.sheet.Name, Cell: fmt.Sprintf("row %d", rec.Row)},
		Study: rec.Study, RiskOfBias: rec.RiskOfBias, Subgroup: r.subgroup(rec), Notes: []string{}, Cells: []result.Cell{}, From: []string{}}
	if rec.Year != 0 {
		st.Year = &rec.Year
	}
	if rec.HasRelevance {
		st.Relevance = &rec.Relevance
	}
	for _, c := range rec.Cells() {
		st.Cells = append(st.Cells, result.Cell{Address: c.Address, Heading: c.Heading, Meaning: string(c.Meaning), Text: c.Text})
		if v, ok := d.overrides[c.Address]; ok {
			st.Notes = append(st.Notes, fmt.Sprintf("%s: %s in place of %s, by decision: %s", c.Address, v, c.Text, d.reasons[c.Address]))
		}
	}
	rep := rec.Reported()
	st.NTreatment, st.NControl = known(rep.Treatment.N), known(rep.Control.N)
	if e := o.estimate; e != nil {
		r.fillEstimate(&st, e)
	}
	st.Why = r.leftOut(rec, o, d)
	st.Used = st.Why == ""
	return st
}

func known(f effect.Figure) *float64 {
	if !f.Given {
		return nil
	}
	v := f.Value
	return &v
}

// leftOut gives the reason why a record is not pooled, "" when it is.
func (r *evidenceReader) leftOut(rec *importers.Record, o *outcome, d *decided) string {
	switch foldWords(rec.Status) {
	case "excluded", "exclude", "retracted", "withdrawn", "no", "out", "left out", "not used", "dropped":
		return fmt.Sprintf("its status is %q", rec.Status)
	}
	for _, c := range r.conditions {
		if ok, why := c.keeps(rec); !ok {
			return why
		}
	}
	if reason, ok := d.leaveOut[fmt.Sprintf("row %d", rec.Row)]; ok {
		return "left out by decision: " + reason
	}
	if len(d.leaveOut) == 0 {
		return o.why
	}
	for _, c := range rec.Cells() {
		if reason, ok := d.leaveOut[c.Address]; ok {
			return fmt.Sprintf("left out by the decision on %s: %s", c.Address, reason)
		}
	}
	return o.why
}

// subgroup is the record's value in the column that the plan divides by.
func (r *evidenceReader) subgroup(rec *importers.Record) string {
	by := foldWords(r.file.Pool.SubgroupBy)
	if by == "" || by == "subgroup" {
		return rec.Subgroup
	}
	text, _, _ := lookUp(rec, by)
	return text
}

// evidence describes the sheet.
func (r *evidenceReader) evidence(out *EvidenceRead) result.Evidence {
	ev := result.Evidence{File: r.sheet.File, Sheet: r.sheet.Name, SHA256: r.sheet.SHA256, Rows: len(r.sheet.Records), Used: len(out.Estimates),
		Headings: []result.Heading{}, Invented: r.file.Invented, Examples: []string{}}
	for _, h := range r.sheet.Headings {
		first := h.First
		if first == nil {
			first = []string{}
		}
		ev.Headings = append(ev.Headings, result.Heading{Cell: h.Cell, Typed: h.Typed, Meaning: string(h.Meaning), Why: h.Why, First: first})
	}
	for i := range r.sheet.Records {
		if strings.HasPrefix(foldWords(r.sheet.Records[i].Status), "example") {
			ev.Examples = append(ev.Examples, r.sheet.Records[i].Study)
		}
	}
	if s := r.file.Evidence.Searched; s != nil {
		ev.Searched = &result.Searched{Date: s.Date, Found: s.Found, Screened: s.Screened, Kept: s.Kept, Rule: s.Rule}
	}
	return ev
}
