package importers

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"os"
	"path/filepath"
	"reflect"
	"slices"
	"strconv"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"

	"github.com/xuri/excelize/v2"
)

// Append gives the bytes of the evidence sheet at path, read as old with opt, with the records of added below its last
// one. Columns are matched by meaning, then by heading as typed; a workbook keeps its formatting, the new rows take that
// of the row above. Nothing is written. The result was read again: every old record and every new one comes out as it
// was understood before, or there is an error. Workbooks (.xlsx) and UTF-8 text (.csv, .tsv) can be added to.
func Append(path string, opt Options, old, added *Sheet) ([]byte, error) {
	targets, ps := old.targetsOf(added)
	ps = append(ps, old.repeats(added)...)
	if len(added.Records) == 0 {
		ps = append(ps, finding.Finding{Severity: finding.Error, Kind: "nothing-to-add", Place: finding.Place{File: added.File}, What: "the sheet holds no records", Mend: "give it one row for each new study"})
	}
	if len(ps) > 0 {
		return nil, ps
	}
	var data []byte
	var err error
	switch ext := strings.ToLower(filepath.Ext(path)); ext {
	case ".xlsx", ".xlsm":
		data, err = old.appendWorkbook(path, added, targets)
	case ".csv", ".tsv", ".tab", ".txt":
		data, err = old.appendText(path, opt, added, targets)
	default:
		return nil, problem("format-not-writable", finding.Place{File: old.File}, fmt.Sprintf("files of the kind %q can be read but not added to", ext), "save it as .xlsx and name that in the plan")
	}
	if err != nil {
		return nil, err
	}
	return data, old.proveAppended(path, data, opt, added)
}

// targetsOf finds the column of old for each column of added that says something.
func (s *Sheet) targetsOf(added *Sheet) (map[int]int, finding.Problems) {
	used := map[int]bool{}
	for i := range added.Records {
		for _, c := range added.Records[i].Cells() {
			used[c.Column] = used[c.Column] || strings.TrimSpace(c.Text) != ""
		}
	}
	targets := map[int]int{}
	var ps finding.Problems
	for _, h := range added.Headings {
		if !used[h.Column] {
			continue
		}
		at := slices.IndexFunc(s.Headings, func(o Heading) bool { return h.Meaning != "" && o.Meaning == h.Meaning })
		if at < 0 {
			at = slices.IndexFunc(s.Headings, func(o Heading) bool { return foldHeading(o.Typed) == foldHeading(h.Typed) })
		}
		bad := func(what, mend string) {
			ps = append(ps, finding.Finding{Severity: finding.Error, Kind: "column-does-not-fit", Place: finding.Place{File: added.File, Sheet: added.Name, Cell: h.Cell}, Text: h.Typed, What: what, Mend: mend})
		}
		if at < 0 {
			bad(fmt.Sprintf("%s has no column for %q", s.File, shorten(h.Typed)), "add the column there, or take it out here")
			continue
		}
		o := s.Headings[at]
		if o.Scale != h.Scale || o.Log != h.Log || o.Level != h.Level || o.Percent != h.Percent || o.Sides != h.Sides {
			bad(fmt.Sprintf("%q is in other units than %q of %s", shorten(h.Typed), shorten(o.Typed), s.File), "give both the same heading and units")
			continue
		}
		targets[h.Column] = o.Column
	}
	return targets, ps
}

// repeats names the new records that the sheet holds already: the same label, or the same figures.
func (s *Sheet) repeats(added *Sheet) finding.Problems {
	labels, figures := map[string]*Record{}, map[string]*Record{}
	note := func(r *Record) {
		labels[foldHeading(r.Study)] = r
		if key, n := figuresKey(r); n >= 2 {
			figures[key] = r
		}
	}
	for i := range s.Records {
		note(&s.Records[i])
	}
	var ps finding.Problems
	for i := range added.Records {
		r := &added.Records[i]
		key, n := figuresKey(r)
		twin, how := labels[foldHeading(r.Study)], "has the same label"
		if twin == nil && n >= 2 {
			twin, how = figures[key], "has the same figures"
		}
		if twin != nil {
			ps = append(ps, finding.Finding{Severity: finding.Error, Kind: "study-there-already", Study: r.Study, Place: finding.Place{File: added.File, Sheet: added.Name, Cell: fmt.Sprintf("row %d", r.Row)},
				What: fmt.Sprintf("%q is there already: row %d (%q) %s", shorten(r.Study), twin.Row, shorten(twin.Study), how), Mend: "take the row out, or give another result of the same study a label of its own"})
			continue
		}
		note(r)
	}
	return ps
}

// lastRow is the row of the last record, at least that of the headings.
func (s *Sheet) lastRow() int {
	last := 1
	for _, h := range s.Headings {
		if _, row, err := excelize.CellNameToCoordinates(h.Cell); err == nil {
			last = max(last, row)
		}
	}
	for i := range s.Records {
		last = max(last, s.Records[i].Row)
	}
	return last
}

func (s *Sheet) appendWorkbook(path string, added *Sheet, targets map[int]int) ([]byte, error) {
	f, err := excelize.OpenFile(path, excelize.Options{UnzipSizeLimit: 256 << 20, UnzipXMLSizeLimit: 64 << 20})
	if err != nil {
		return nil, problem("file-unreadable", finding.Place{File: s.File}, "the workbook can't be opened for adding", "save it anew in your spreadsheet program")
	}
	defer f.Close()
	last := s.lastRow()
	if err := f.InsertRows(s.Name, last+1, len(added.Records)); err != nil {
		return nil, fmt.Errorf("importers: rows can't be added to %s: %w", s.File, err)
	}
	for i := range added.Records {
		row := last + 1 + i
		if len(s.Records) > 0 {
			if err := copyLook(f, s.Name, s.Headings, last, row); err != nil {
				return nil, err
			}
		}
		for _, c := range added.Records[i].Cells() {
			at := address(targets[c.Column], row)
			if targets[c.Column] == 0 || strings.TrimSpace(c.Text) == "" {
				continue
			}
			if plainFigure(c.Text) {
				err = f.SetCellDefault(s.Name, at, c.Text)
			} else {
				err = f.SetCellStr(s.Name, at, c.Text)
			}
			if err != nil {
				return nil, fmt.Errorf("importers: cell %s can't be written: %w", at, err)
			}
		}
	}
	var b bytes.Buffer
	if err := f.Write(&b); err != nil {
		return nil, fmt.Errorf("importers: %s can't be written: %w", s.File, err)
	}
	return b.Bytes(), nil
}

// copyLook gives a row the formats and height of another.
func copyLook(f *excelize.File, sheet string, headings []Heading, from, to int) error {
	for _, h := range headings {
		style, err := f.GetCellStyle(sheet, address(h.Column, from))
		if err != nil {
			return fmt.Errorf("importers: the format of row %d can't be read: %w", from, err)
		}
		if err := f.SetCellStyle(sheet, address(h.Column, to), address(h.Column, to), style); err != nil {
			return fmt.Errorf("importers: row %d can't be formatted: %w", to, err)
		}
	}
	height, err := f.GetRowHeight(sheet, from)
	if err != nil {
		return fmt.Errorf("importers: the height of row %d can't be read: %w", from, err)
	}
	return f.SetRowHeight(sheet, to, height)
}

// plainFigure reports a number that a workbook stores as one without changing a digit.
func plainFigure(s string) bool {
	if s == "" || strings.Trim(s, "-.0123456789") != "" || len(s) > 17 {
		return false
	}
	_, err := strconv.ParseFloat(s, 64)
	return err == nil
}

func (s *Sheet) appendText(path string, opt Options, added *Sheet, targets map[int]int) ([]byte, error) {
	data, err := os.ReadFile(path)
	if err != nil {
		return nil, problem("file-unreadable", finding.Place{File: s.File}, "the file can't be read: "+reason(err), "check its permissions")
	}
	width := 0
	for _, h := range s.Headings {
		width = max(width, h.Column)
	}
	var b bytes.Buffer
	out := csv.NewWriter(&b)
	out.Comma = sniffDelimiter(string(data))
	if opt.Delimiter != "" {
		out.Comma = []rune(opt.Delimiter)[0]
	}
	out.UseCRLF = bytes.Contains(data, []byte("\r\n"))
	for i := range added.Records {
		line := make([]string, width)
		for _, c := range added.Records[i].Cells() {
			if to := targets[c.Column]; to > 0 {
				line[to-1] = guardText(c.Text)
			}
		}
		if err := out.Write(line); err != nil {
			return nil, fmt.Errorf("importers: %s can't be written: %w", s.File, err)
		}
	}
	out.Flush()
	if n := len(data); n > 0 && data[n-1] != '\n' {
		data = append(data, '\n')
	}
	return append(data, b.Bytes()...), out.Error()
}

// proveAppended reads the new bytes and holds every record against what it was before.
func (s *Sheet) proveAppended(path string, data []byte, opt Options, added *Sheet) error {
	opt.SheetName = s.Name
	now, err := readBytes(path, data, opt.withDefaults())
	if err != nil {
		return err
	}
	wrong := func(r *Record, what string) error {
		return problem("adding-changes-data", finding.Place{File: s.File}, fmt.Sprintf("%q would be read differently after adding: %s", shorten(r.Study), what), "add the rows in your spreadsheet program")
	}
	if len(now.Records) != len(s.Records)+len(added.Records) {
		return wrong(&added.Records[0], fmt.Sprintf("%d records in place of %d", len(now.Records), len(s.Records)+len(added.Records)))
	}
	want := append(slices.Clone(s.Records), added.Records...)
	for i := range want {
		if what := differs(&want[i], &now.Records[i]); what != "" {
			return wrong(&want[i], what)
		}
	}
	return nil
}

// differs says in what two readings of a record differ, whatever cells they stood in.
func differs(a, b *Record) string {
	if a.Study != strings.TrimPrefix(b.Study, "'") && a.Study != b.Study || a.Year != b.Year || a.RiskOfBias != b.RiskOfBias || a.Relevance != b.Relevance || a.Subgroup != b.Subgroup || a.Status != b.Status {
		return "its label, year or judgements"
	}
	x, y := a.Reported(), b.Reported()
	if !sameFigures(reflect.ValueOf(&x).Elem(), reflect.ValueOf(&y).Elem()) {
		return "its figures"
	}
	return ""
}

var figureType = reflect.TypeFor[effect.Figure]()

func sameFigures(x, y reflect.Value) bool {
	for i := 0; i < x.NumField(); i++ {
		p, q := x.Field(i), y.Field(i)
		switch {
		case p.Type() == figureType:
			f, g := p.Interface().(effect.Figure), q.Interface().(effect.Figure)
			if f.Value != g.Value || f.Given != g.Given || f.Bound != g.Bound {
				return false
			}
		case p.Kind() == reflect.Struct:
			if !sameFigures(p, q) {
				return false
			}
		case !p.Equal(q):
			return false
		}
	}
	return true
}
