package importers

import (
	"encoding/xml"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"
)

// openODS reads an OpenDocument spreadsheet (ODF 1.3, part 3): all sheets in one walk over its content.
func openODS(p *parts, opt Options) (*gridSource, error) {
	if err := p.checkODSKind(); err != nil {
		return nil, err
	}
	r := &odsReader{p: p, opt: opt, hiddenStyle: map[string]bool{}}
	if err := p.walk("content.xml", r.visit); err != nil {
		return nil, err
	}
	src := &gridSource{read: func(i int) (*grid, error) { return r.grids[i], nil }}
	for i, g := range r.grids {
		src.names = append(src.names, g.name)
		src.visible = append(src.visible, !r.hidden[i])
	}
	return src, nil
}

// checkODSKind refuses other OpenDocument files, and encrypted ones.
func (p *parts) checkODSKind() error {
	if p.files["mimetype"] != nil {
		rc, err := p.open("mimetype")
		if err != nil {
			return err
		}
		kind, err := io.ReadAll(io.LimitReader(rc, 200))
		rc.Close()
		if err != nil {
			return p.damaged("mimetype", "it can't be unpacked")
		}
		if !strings.Contains(string(kind), "opendocument.spreadsheet") {
			return problem("file-not-a-sheet", p.at(), fmt.Sprintf("the file says that it is %q, which is no spreadsheet", shorten(string(kind))), "give the spreadsheet that holds the prior studies, as .xlsx, .ods or .csv")
		}
	}
	if p.files["META-INF/manifest.xml"] == nil {
		return nil
	}
	encrypted := false
	err := p.walk("META-INF/manifest.xml", func(t xml.Token) error {
		if e, ok := t.(xml.StartElement); ok && (e.Name.Local == "encryption-data" || e.Name.Local == "encrypted-key") {
			encrypted = true
		}
		return nil
	})
	if err == nil && encrypted {
		return passwordProtected(p.at())
	}
	return err
}

// odsReader is the state of the walk.
type odsReader struct {
	p           *parts
	opt         Options
	hiddenStyle map[string]bool // table styles that hide the sheet
	style       string
	grids       []*grid
	hidden      []bool

	tables       int // depth of nested tables; only the outer one is read
	skip         int // depth inside what is no cell content: notes, drawings, tracked changes
	row          row
	rowRepeat    int
	column       int // last column used
	cell         cell
	cellRepeat   int
	inCell       bool
	covered      bool
	formula      bool
	paragraphs   int
	text         strings.Builder
	cells        int
	columnHidden int
}

// skipped are elements whose content is no text of a cell and whose tables are no sheets.
var skipped = map[string]bool{"annotation": true, "tracked-changes": true, "shapes": true, "forms": true, "frame": true,
	"custom-shape": true, "g": true, "ruby-text": true, "dde-links": true, "control": true}

func (r *odsReader) visit(t xml.Token) error {
	switch t := t.(type) {
	case xml.StartElement:
		if r.skip > 0 || skipped[t.Name.Local] {
			r.skip++
			return nil
		}
		return r.start(t)
	case xml.EndElement:
		if r.skip > 0 {
			r.skip--
			return nil
		}
		return r.end(t.Name.Local)
	case xml.CharData:
		if r.inCell && r.skip == 0 && r.paragraphs > 0 {
			r.text.Write(t)
		}
	}
	return nil
}

func (r *odsReader) start(e xml.StartElement) error {
	switch e.Name.Local {
	case "style":
		r.style = attr(e, "name")
	case "table-properties":
		if attr(e, "display") == "false" {
			r.hiddenStyle[r.style] = true
		}
	case "table":
		if r.tables++; r.tables == 1 {
			r.grids = append(r.grids, &grid{file: r.p.file, name: attr(e, "name")})
			r.hidden = append(r.hidden, r.hiddenStyle[attr(e, "style-name")])
			r.row, r.columnHidden = row{}, 0
		}
	case "table-column":
		if r.tables == 1 {
			r.startColumn(e)
		}
	case "table-row":
		if r.tables == 1 {
			r.row = row{n: r.row.n + 1, hidden: attr(e, "visibility") == "collapse" || attr(e, "visibility") == "filter"}
			r.rowRepeat, r.column = repeat(e, "number-rows-repeated"), 0
		}
	case "table-cell", "covered-table-cell":
		if r.tables == 1 {
			r.startCell(e)
		}
	case "p", "h":
		if r.inCell {
			if r.paragraphs++; r.paragraphs > 1 {
				r.text.WriteByte('\n')
			}
		}
	case "s":
		if r.inCell {
			r.text.WriteString(strings.Repeat(" ", min(repeat(e, "c"), 1000)))
		}
	case "tab", "line-break":
		if r.inCell {
			r.text.WriteByte(' ')
		}
	}
	return nil
}

func (r *odsReader) startColumn(e xml.StartElement) {
	n := min(repeat(e, "number-columns-repeated"), 20_000)
	if v := attr(e, "visibility"); v == "collapse" || v == "filter" {
		g := r.grids[len(r.grids)-1]
		for i := 1; i <= n && r.columnHidden+i <= r.opt.MaxColumns; i++ {
			g.hiddenColumns = append(g.hiddenColumns, r.columnHidden+i)
		}
	}
	r.columnHidden += n
}

// repeat reads a count; it is never below 1, and no larger than a sheet.
func repeat(e xml.StartElement, name string) int {
	n, err := strconv.Atoi(attr(e, name))
	if err != nil || n < 1 {
		return 1
	}
	return min(n, 1<<21)
}

func (r *odsReader) startCell(e xml.StartElement) {
	r.inCell, r.paragraphs = true, 0
	r.covered = e.Name.Local == "covered-table-cell"
	r.text.Reset()
	r.cellRepeat = repeat(e, "number-columns-repeated")
	r.formula = attr(e, "formula") != ""
	r.cell = cell{column: int32(r.column + 1), decimals: -1}
	types := [2]string{}
	for _, a := range e.Attr {
		if a.Name.Local == "value-type" {
			if strings.Contains(a.Name.Space, "office") {
				types[0] = a.Value
			} else {
				types[1] = a.Value
			}
		}
	}
	switch types[0] {
	case "float", "currency":
		r.cell.kind, r.cell.text = numberCell, attr(e, "value")
	case "percentage":
		r.cell.kind, r.cell.text = percentCell, attr(e, "value")
	case "date":
		r.cell.kind, r.cell.text = dateCell, strings.TrimSuffix(attr(e, "date-value"), "T00:00:00")
	case "time":
		r.cell.kind, r.cell.text = dateCell, attr(e, "time-value")
	case "boolean":
		r.cell.kind, r.cell.text = boolCell, strings.ToUpper(attr(e, "boolean-value"))
	default:
		r.cell.text = attr(e, "string-value")
	}
	if types[1] == "error" {
		r.cell.kind = errorCell
	}
	if rows, cols := repeat(e, "number-rows-spanned"), repeat(e, "number-columns-spanned"); rows*cols > 1 && !r.covered {
		g := r.grids[len(r.grids)-1]
		if len(g.merges) < 10_000 {
			g.merges = append(g.merges, address(r.column+1, r.row.n)+":"+address(r.column+cols, r.row.n+rows-1))
		}
	}
}

func (r *odsReader) end(name string) error {
	switch name {
	case "table":
		r.tables--
	case "table-cell", "covered-table-cell":
		if r.tables == 1 && r.inCell {
			return r.endCell()
		}
	case "table-row":
		if r.tables == 1 {
			return r.endRow()
		}
	}
	return nil
}

func (r *odsReader) endCell() error {
	r.inCell = false
	shown := r.text.String()
	c := r.cell
	switch {
	case c.kind == textCell && c.text == "":
		c.text = shown
		if r.formula && (strings.HasPrefix(shown, "#") || strings.HasPrefix(shown, "Err:")) {
			c.kind = errorCell
		}
	case c.kind == errorCell:
		c.text = shown
	case c.kind == numberCell && (c.text == "0" || c.text == "1") && (shown == "TRUE" || shown == "FALSE"):
		c.kind, c.text = boolCell, shown
	case c.kind == numberCell:
		c.decimals = max(storedDecimals(c.text), shownDecimals(c.text, shown))
	}
	from := r.column
	r.column += r.cellRepeat
	if r.formula {
		r.grids[len(r.grids)-1].formulas++
	}
	if blank(c.text) {
		if !r.formula {
			return nil
		}
		c.kind = valueless
	}
	if r.covered { // hidden under a merged cell
		return nil
	}
	if from+r.cellRepeat > r.opt.MaxColumns {
		return problem("too-many-columns", r.p.at(), fmt.Sprintf("the cell %s lies beyond column %s, the limit of an evidence sheet", address(from+r.cellRepeat, r.row.n), columnName(r.opt.MaxColumns)),
			"keep only the columns about the studies")
	}
	for i := range r.cellRepeat {
		c.column = int32(from + 1 + i)
		r.row.cells = append(r.row.cells, c)
	}
	return nil
}

// shownDecimals counts the decimals of the text shown for a number, where that shows no fewer than are stored.
func shownDecimals(stored, shown string) int16 {
	has := storedDecimals(stored)
	at := strings.LastIndexAny(shown, ".,")
	if has < 0 || at < 0 || !allDigits(shown[at+1:]) || len(shown)-at-1 > 8 {
		return has
	}
	want := len(shown) - at - 1
	if want < int(has) || strings.Trim(shown[len(shown)-(want-int(has)):], "0") != "" {
		return has
	}
	return int16(want)
}

func (r *odsReader) endRow() error {
	g := r.grids[len(r.grids)-1]
	n := r.row.n
	if len(r.row.cells) > 0 {
		r.cells += len(r.row.cells) * r.rowRepeat
		if len(g.rows)+r.rowRepeat > r.opt.MaxRows || r.cells > r.opt.MaxCells {
			return tooLarge(r.p.at(), r.opt)
		}
		for i := range r.rowRepeat {
			g.rows = append(g.rows, row{n: n + i, hidden: r.row.hidden, cells: slices.Clone(r.row.cells)})
		}
	}
	r.row = row{n: n + r.rowRepeat - 1}
	return nil
}
