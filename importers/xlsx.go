package importers

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"path"
	"strings"

	"github.com/xuri/excelize/v2"

	"footing/internal/finding"
)

func (p *parts) at() finding.Place { return finding.Place{File: p.file} }

// book is an opened .xlsx workbook: the parts for the check pass, the library's view for the values.
type book struct {
	*parts
	data   []byte
	file   *excelize.File
	shared []bool // per shared string: whether it holds any text
	sheets []bookSheet
	d1904  bool
	styles map[int32]look
}

type bookSheet struct {
	name, state, part string
}

// openXLSX opens a workbook: first the check pass over the parts that everything hangs on, then the library.
func openXLSX(p *parts, data []byte, opt Options) (src *gridSource, err error) {
	b := &book{parts: p, data: data, styles: map[int32]look{}}
	if err := b.readStructure(); err != nil {
		return nil, err
	}
	src = &gridSource{}
	for _, s := range b.sheets {
		src.names = append(src.names, s.name)
		src.visible = append(src.visible, s.state == "" || s.state == "visible")
	}
	src.read = func(i int) (*grid, error) { return b.read(i, opt) }
	src.close = func() { // the library unpacks large sheets into temporary files
		if b.file != nil {
			_ = b.file.Close()
		}
	}
	return src, nil
}

// readStructure reads the names of the sheets and their parts, and checks the shared strings and styles.
func (b *book) readStructure() error {
	root, err := b.relations("_rels/.rels", "")
	if err != nil {
		return err
	}
	workbook := ""
	for _, r := range root {
		if strings.HasSuffix(r.typ, "/officeDocument") {
			workbook = r.target
		}
	}
	if workbook == "" {
		return b.damaged("_rels/.rels", "it names no workbook")
	}
	rels, err := b.relations(path.Join(path.Dir(workbook), "_rels", path.Base(workbook)+".rels"), path.Dir(workbook))
	if err != nil {
		return err
	}
	if err := b.readSheets(workbook, rels); err != nil {
		return err
	}
	for _, r := range rels {
		switch {
		case strings.HasSuffix(r.typ, "/sharedStrings"):
			err = b.readShared(r.target)
		case strings.HasSuffix(r.typ, "/styles"):
			err = b.walk(r.target, nil)
		}
		if err != nil {
			return err
		}
	}
	return nil
}

type relation struct{ id, typ, target string }

func (b *book) relations(part, dir string) ([]relation, error) {
	var out []relation
	err := b.walk(part, func(t xml.Token) error {
		if e, ok := t.(xml.StartElement); ok && e.Name.Local == "Relationship" && attr(e, "TargetMode") != "External" {
			target := attr(e, "Target")
			if strings.HasPrefix(target, "/") {
				target = strings.TrimPrefix(path.Clean(target), "/")
			} else {
				target = path.Join(dir, target)
			}
			out = append(out, relation{attr(e, "Id"), attr(e, "Type"), target})
		}
		return nil
	})
	return out, err
}

func (b *book) readSheets(workbook string, rels []relation) error {
	return b.walk(workbook, func(t xml.Token) error {
		e, ok := t.(xml.StartElement)
		if !ok {
			return nil
		}
		switch e.Name.Local {
		case "workbookPr":
			b.d1904 = isTrue(attr(e, "date1904"))
		case "sheet":
			id := ""
			for _, a := range e.Attr {
				if a.Name.Local == "id" && a.Name.Space != "" {
					id = a.Value
				}
			}
			for _, r := range rels {
				if r.id == id && strings.HasSuffix(r.typ, "/worksheet") {
					b.sheets = append(b.sheets, bookSheet{attr(e, "name"), attr(e, "state"), r.target})
				}
			}
		}
		return nil
	})
}

func (b *book) readShared(part string) error {
	some, phonetic, inText := false, 0, false
	return b.walk(part, func(t xml.Token) error {
		switch t := t.(type) {
		case xml.StartElement:
			switch t.Name.Local {
			case "si":
				some = false
			case "rPh":
				phonetic++
			case "t":
				inText = true
			}
		case xml.CharData:
			some = some || inText && phonetic == 0 && len(t) > 0
		case xml.EndElement:
			switch t.Name.Local {
			case "si":
				b.shared = append(b.shared, some)
			case "rPh":
				phonetic--
			case "t":
				inText = false
			}
		}
		return nil
	})
}

// read reads one sheet: check pass, values, and the comparison of both.
func (b *book) read(i int, opt Options) (*grid, error) {
	s := b.sheets[i]
	c, err := b.checkSheet(s.part, b.shared, opt)
	if err != nil {
		return nil, err
	}
	g := &grid{file: b.parts.file, name: s.name, merges: c.merges, hiddenColumns: c.hiddenColumns}
	if c.values == 0 && len(c.cells) == 0 {
		return g, nil
	}
	if err := b.readValues(g, s.name, c, opt); err != nil {
		return nil, err
	}
	return g, nil
}

// readValues streams the values through the library and joins them with what the check pass knows.
func (b *book) readValues(g *grid, sheet string, c *checked, opt Options) (err error) {
	defer func() {
		if r := recover(); r != nil { // the library panics on some damaged workbooks
			err = b.damaged(sheet, "its cells can't be read")
		}
	}()
	if b.file == nil {
		b.file, err = excelize.OpenReader(bytes.NewReader(b.data), excelize.Options{RawCellValue: true, UnzipSizeLimit: opt.MaxUnzip, UnzipXMLSizeLimit: min(16<<20, opt.MaxUnzip)})
		if err != nil {
			return b.damaged(sheet, "the workbook can't be opened: "+shorten(err.Error()))
		}
	}
	rows, err := b.file.Rows(sheet)
	if err != nil {
		return b.damaged(sheet, shorten(err.Error()))
	}
	defer rows.Close()
	read, n := 0, 0
	for _, sr := range c.rows {
		if sr.from == sr.to {
			continue
		}
		var values []string
		for n < sr.n {
			if !rows.Next() {
				return b.damaged(sheet, fmt.Sprintf("row %d is lost", sr.n))
			}
			n++
			if values, err = rows.Columns(); err != nil {
				return b.damaged(sheet, shorten(err.Error()))
			}
			if n < sr.n && len(values) > 0 {
				return b.damaged(sheet, fmt.Sprintf("row %d was read where none is stored", n))
			}
		}
		r, found := b.join(g, sr, c.cells[sr.from:sr.to], values)
		read += found
		if len(r.cells) > 0 {
			g.rows = append(g.rows, r)
			if len(g.rows) > opt.MaxRows {
				return tooLarge(b.at(), opt)
			}
		}
	}
	if err := rows.Error(); err != nil {
		return b.damaged(sheet, shorten(err.Error()))
	}
	if read != c.values {
		return b.damaged(sheet, fmt.Sprintf("it stores %d cells with values, but %d could be read", c.values, read))
	}
	return nil
}

// join makes a row of the stored cells and the values read; found counts values that are not empty.
func (b *book) join(g *grid, sr storedRow, meta []stored, values []string) (r row, found int) {
	r = row{n: sr.n, hidden: sr.hidden, cells: make([]cell, 0, len(meta))}
	for _, v := range values {
		if v != "" {
			found++
		}
	}
	for _, m := range meta {
		text := ""
		if int(m.column) <= len(values) {
			text = values[m.column-1]
		}
		if m.form {
			g.formulas++
		}
		if m.form && text == "" {
			r.cells = append(r.cells, cell{column: m.column, kind: valueless, decimals: -1})
			continue
		}
		if text == "" || blank(text) {
			continue
		}
		r.cells = append(r.cells, b.typed(m, text))
	}
	return r, found
}

// typed gives a stored value its kind.
func (b *book) typed(m stored, text string) cell {
	c := cell{text: text, column: m.column, decimals: -1}
	switch m.typ {
	case 'e':
		c.kind = errorCell
	case 'b':
		c.kind = boolCell
		c.text = "FALSE"
		if text == "1" || strings.EqualFold(text, "true") {
			c.text = "TRUE"
		}
	case 'd':
		c.kind = dateCell
		c.text = strings.TrimSuffix(strings.TrimSuffix(text, "Z"), "T00:00:00")
	case 'n':
		b.numeric(&c, m.style)
	}
	return c
}

// numeric tells numbers, percentages and dates apart by the number format.
func (b *book) numeric(c *cell, style int32) {
	l, ok := b.styles[style]
	if !ok {
		l = b.look(style)
		b.styles[style] = l
	}
	c.kind = numberCell
	c.decimals = storedDecimals(c.text)
	l.apply(c, b.d1904)
}

// look asks the library for the number format of a style.
func (b *book) look(style int32) (l look) {
	defer func() { _ = recover() }() // a style that points nowhere is an ordinary number
	if style == 0 {
		return look{}
	}
	s, err := b.file.GetStyle(int(style))
	if err != nil || s == nil {
		return look{}
	}
	code := ""
	if s.CustomNumFmt != nil {
		code = *s.CustomNumFmt
	}
	return lookOf(s.NumFmt, code)
}
