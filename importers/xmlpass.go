package importers

import (
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"
	"golang.org/x/text/encoding/htmlindex"
)

// walk reads a part to its very end and hands each token to visit. A document type declaration, bad nesting, bad syntax
// and an early end are errors: a sheet is read whole or not at all.
func (p *parts) walk(part string, visit func(xml.Token) error) error {
	rc, err := p.open(part)
	if err != nil {
		return err
	}
	defer rc.Close()
	d := xml.NewDecoder(rc)
	d.CharsetReader = func(label string, r io.Reader) (io.Reader, error) {
		e, err := htmlindex.Get(label)
		if err != nil {
			return nil, err
		}
		return e.NewDecoder().Reader(r), nil
	}
	depth, roots := 0, 0
	for {
		t, err := d.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			return p.damaged(part, syntax(err))
		}
		switch t := t.(type) {
		case xml.Directive:
			if strings.HasPrefix(strings.ToUpper(strings.TrimSpace(string(t))), "DOCTYPE") {
				return p.damaged(part, "it declares a document type, which no workbook has")
			}
		case xml.StartElement:
			depth++
			if depth == 1 {
				roots++
			}
			if depth > 1000 {
				return p.damaged(part, "its elements are nested too deeply")
			}
		case xml.EndElement:
			depth--
		}
		if visit != nil {
			if err := visit(t); err != nil {
				return err
			}
		}
	}
	if roots != 1 || depth != 0 {
		return p.damaged(part, "it is empty or cut short")
	}
	return nil
}

func syntax(err error) string {
	var se *xml.SyntaxError
	if errors.As(err, &se) {
		return fmt.Sprintf("%s (line %d)", shorten(se.Msg), se.Line)
	}
	return "it is cut short or can't be unpacked"
}

func attr(e xml.StartElement, name string) string {
	for _, a := range e.Attr {
		if a.Name.Local == name {
			return a.Value
		}
	}
	return ""
}

func isTrue(s string) bool { return s == "1" || s == "true" }

// stored is what the check pass keeps about one cell that has a value or a formula.
type stored struct {
	column int32
	style  int32
	typ    byte // as the attribute t: 's' shared, 'i' inline, 'x' formula text, 'b', 'e', 'd', 'n'
	value  bool // a text is stored
	form   bool // a formula is stored
}

// storedRow is one row of the check pass: cells[from:to].
type storedRow struct {
	n        int
	hidden   bool
	from, to int
}

// checked is the result of the check pass over one sheet.
type checked struct {
	rows          []storedRow
	cells         []stored
	merges        []string
	hiddenColumns []int
	values        int // cells that must be read as non-empty
}

// sheetCheck walks a worksheet and keeps what the reader of values doesn't tell: types, styles, formulas, hidden rows;
// and it refuses what that reader would pass over in silence.
type sheetCheck struct {
	p      *parts
	part   string
	opt    Options
	shared []bool // per shared string: it has visible or invisible text
	out    checked

	inData      bool
	row         int
	lastColumn  int
	cell        stored
	inCell      bool
	collect     bool // inside v or t
	text        []byte
	skipRuns    int // inside phonetic runs
	visibleText bool
}

func (p *parts) checkSheet(part string, shared []bool, opt Options) (*checked, error) {
	c := &sheetCheck{p: p, part: part, opt: opt, shared: shared}
	if err := p.walk(part, c.visit); err != nil {
		return nil, err
	}
	return &c.out, nil
}

func (c *sheetCheck) visit(t xml.Token) error {
	switch t := t.(type) {
	case xml.StartElement:
		return c.start(t)
	case xml.EndElement:
		return c.end(t.Name.Local)
	case xml.CharData:
		if c.collect && c.skipRuns == 0 {
			c.text = append(c.text, t...)
		}
	}
	return nil
}

func (c *sheetCheck) start(e xml.StartElement) error {
	switch e.Name.Local {
	case "sheetData":
		c.inData = true
	case "row":
		if c.inData {
			return c.startRow(e)
		}
	case "c":
		if c.inData {
			return c.startCell(e)
		}
	case "rPh":
		c.skipRuns++
	case "v", "t":
		if c.inCell {
			c.collect, c.text = true, c.text[:0]
		}
	case "f":
		if c.inCell {
			c.cell.form = true
		}
	case "mergeCell":
		if len(c.out.merges) < 10_000 {
			c.out.merges = append(c.out.merges, attr(e, "ref"))
		}
	case "col":
		if isTrue(attr(e, "hidden")) {
			from, _ := strconv.Atoi(attr(e, "min"))
			to, _ := strconv.Atoi(attr(e, "max"))
			for i := max(from, 1); i <= min(to, from+c.opt.MaxColumns, c.opt.MaxColumns); i++ {
				c.out.hiddenColumns = append(c.out.hiddenColumns, i)
			}
		}
	}
	return nil
}

func (c *sheetCheck) startRow(e xml.StartElement) error {
	n := c.row + 1
	if r := attr(e, "r"); r != "" {
		v, err := strconv.Atoi(r)
		if err != nil || v < 1 || v > excelize.TotalRows {
			return c.p.damaged(c.part, fmt.Sprintf("it has a row numbered %q", shorten(r)))
		}
		n = v
	}
	if n == c.row {
		return c.p.damaged(c.part, fmt.Sprintf("row %d stands in it twice", n))
	}
	if n < c.row {
		return c.p.damaged(c.part, fmt.Sprintf("row %d comes behind row %d", n, c.row))
	}
	c.row, c.lastColumn = n, 0
	c.out.rows = append(c.out.rows, storedRow{n: n, hidden: isTrue(attr(e, "hidden")), from: len(c.out.cells), to: len(c.out.cells)})
	if len(c.out.rows) > 1_100_000 {
		return tooLarge(c.p.at(), c.opt)
	}
	return nil
}

func (c *sheetCheck) startCell(e xml.StartElement) error {
	column, ref := c.lastColumn+1, attr(e, "r")
	if ref != "" {
		col, row, err := excelize.CellNameToCoordinates(ref)
		if err != nil {
			return c.p.damaged(c.part, fmt.Sprintf("it has a cell with the address %q", shorten(ref)))
		}
		if row != c.row {
			return c.p.damaged(c.part, fmt.Sprintf("the cell %s stands in row %d", shorten(ref), c.row))
		}
		column = col
	}
	if column <= c.lastColumn {
		return c.p.damaged(c.part, fmt.Sprintf("the cell %s stands in it twice or out of order", address(column, c.row)))
	}
	c.lastColumn = column
	style, _ := strconv.Atoi(attr(e, "s"))
	c.cell = stored{column: int32(column), style: int32(style), typ: 'n'}
	switch t := attr(e, "t"); t {
	case "s", "b", "e", "d", "n":
		c.cell.typ = t[0]
	case "inlineStr":
		c.cell.typ = 'i'
	case "str":
		c.cell.typ = 'x'
	case "":
	default:
		return c.p.damaged(c.part, fmt.Sprintf("the cell %s has the unknown type %q", address(column, c.row), shorten(t)))
	}
	c.inCell, c.visibleText = true, false
	return nil
}

func (c *sheetCheck) end(name string) error {
	switch name {
	case "sheetData":
		c.inData = false
	case "rPh":
		c.skipRuns--
	case "v", "t":
		if c.collect {
			c.collect = false
			return c.endValue(name)
		}
	case "c":
		if c.inCell {
			c.inCell = false
			return c.endCell()
		}
	}
	return nil
}

// endValue takes the text of a v or t element.
func (c *sheetCheck) endValue(name string) error {
	if (name == "t") != (c.cell.typ == 'i') {
		return nil
	}
	if c.cell.typ == 's' {
		i, err := strconv.Atoi(strings.TrimSpace(string(c.text)))
		if err != nil || i < 0 || i >= len(c.shared) {
			return c.p.damaged(c.part, fmt.Sprintf("the cell %s points to text %q, which the workbook doesn't have", address(int(c.cell.column), c.row), shorten(string(c.text))))
		}
		c.visibleText = c.visibleText || c.shared[i]
		return nil
	}
	c.visibleText = c.visibleText || len(c.text) > 0
	return nil
}

func (c *sheetCheck) endCell() error {
	c.cell.value = c.visibleText
	if !c.cell.value && !c.cell.form {
		return nil
	}
	if int(c.cell.column) > c.opt.MaxColumns {
		return problem("too-many-columns", c.p.at(), fmt.Sprintf("the cell %s lies beyond column %s, the limit of an evidence sheet", address(int(c.cell.column), c.row), columnName(c.opt.MaxColumns)),
			"keep only the columns about the studies")
	}
	if c.cell.value {
		c.out.values++
	}
	c.out.cells = append(c.out.cells, c.cell)
	last := &c.out.rows[len(c.out.rows)-1]
	last.to = len(c.out.cells)
	if len(c.out.cells) > c.opt.MaxCells || last.n-c.out.rows[0].n > 20*c.opt.MaxRows {
		return tooLarge(c.p.at(), c.opt)
	}
	return nil
}
