package importers

import (
	"encoding/binary"
	"fmt"
	"math"
	"slices"
	"strconv"

	"footing/internal/finding"
)

// Records of a BIFF8 workbook stream ([MS-XLS] 2.3.1).
const (
	biffFormula    = 0x0006
	biffEOF        = 0x000A
	biffDateMode   = 0x0022
	biffFilePass   = 0x002F
	biffContinue   = 0x003C
	biffColInfo    = 0x007D
	biffBoundSheet = 0x0085
	biffMulRK      = 0x00BD
	biffRString    = 0x00D6
	biffXF         = 0x00E0
	biffMergeCells = 0x00E5
	biffSST        = 0x00FC
	biffLabelSST   = 0x00FD
	biffNumber     = 0x0203
	biffLabel      = 0x0204
	biffBoolErr    = 0x0205
	biffString     = 0x0207
	biffRow        = 0x0208
	biffRK         = 0x027E
	biffFormat     = 0x041E
	biffBOF        = 0x0809
)

// biffBook is the workbook stream of an .xls file.
type biffBook struct {
	file    string
	data    []byte
	opt     Options
	sheets  []biffSheet
	sst     []string
	formats map[int]string // by number
	xfs     []int          // number format of each cell format
	d1904   bool
}

type biffSheet struct {
	name    string
	at      int
	visible bool
}

func (b *biffBook) damaged(what string) error {
	return problem("file-damaged", finding.Place{File: b.file}, "the workbook is damaged: "+what, "open it in your spreadsheet program and save it as .xlsx, then check that no study is missing")
}

// openBIFF reads the globals of a workbook stream.
func openBIFF(path string, data []byte, opt Options) (*gridSource, error) {
	b := &biffBook{file: path, data: data, opt: opt, formats: map[int]string{}}
	if err := b.globals(); err != nil {
		return nil, err
	}
	src := &gridSource{read: func(i int) (*grid, error) { return b.read(b.sheets[i]) }}
	for _, s := range b.sheets {
		src.names = append(src.names, s.name)
		src.visible = append(src.visible, s.visible)
	}
	return src, nil
}

// record is one record with the records that continue it.
type record struct {
	typ   uint16
	data  []byte
	cont  [][]byte
	after int // where the next record starts
}

// next reads the record at off with its continuations.
func (b *biffBook) next(off int) (record, error) {
	one := func(off int) (uint16, []byte, int, error) {
		if off < 0 || off+4 > len(b.data) {
			return 0, nil, 0, b.damaged("it is cut short")
		}
		n := int(binary.LittleEndian.Uint16(b.data[off+2:]))
		if off+4+n > len(b.data) {
			return 0, nil, 0, b.damaged("it is cut short")
		}
		return binary.LittleEndian.Uint16(b.data[off:]), b.data[off+4 : off+4+n], off + 4 + n, nil
	}
	typ, data, after, err := one(off)
	if err != nil {
		return record{}, err
	}
	r := record{typ: typ, data: data, after: after}
	for r.after+4 <= len(b.data) && binary.LittleEndian.Uint16(b.data[r.after:]) == biffContinue {
		_, data, after, err := one(r.after)
		if err != nil {
			return record{}, err
		}
		r.cont, r.after = append(r.cont, data), after
	}
	return r, nil
}

func (b *biffBook) globals() error {
	r, err := b.next(0)
	if err != nil {
		return err
	}
	if r.typ != biffBOF || len(r.data) < 4 {
		return problem("file-not-a-sheet", finding.Place{File: b.file}, "this workbook is older than any that can be read here", "open it in your spreadsheet program and save it as .xlsx")
	}
	if v := u16(r.data, 0); v != 0x0600 {
		return problem("file-not-a-sheet", finding.Place{File: b.file}, "this workbook has the format of 1995 or before, which can't be read here", "open it in your spreadsheet program and save it as .xlsx")
	}
	for {
		if r, err = b.next(r.after); err != nil {
			return err
		}
		switch r.typ {
		case biffEOF:
			return nil
		case biffFilePass:
			return passwordProtected(finding.Place{File: b.file})
		case biffDateMode:
			b.d1904 = len(r.data) >= 2 && u16(r.data, 0) == 1
		case biffBoundSheet:
			err = b.boundSheet(r)
		case biffFormat:
			if len(r.data) >= 5 {
				c := newChunks(r)
				id := c.u16()
				b.formats[id] = c.text(c.u16())
			}
		case biffXF:
			if len(r.data) >= 4 {
				b.xfs = append(b.xfs, u16(r.data, 2))
			}
		case biffSST:
			err = b.readSST(r)
		}
		if err != nil {
			return err
		}
	}
}

func (b *biffBook) boundSheet(r record) error {
	if len(r.data) < 8 {
		return b.damaged("its list of sheets is cut short")
	}
	if r.data[5] != 0 { // charts and macro sheets
		return nil
	}
	c := newChunks(r)
	at := int(uint32(c.u16()) | uint32(c.u16())<<16)
	c.u16()
	n := c.u8()
	s := biffSheet{name: c.text(n), at: at, visible: r.data[4]&3 == 0}
	if c.short {
		return b.damaged("its list of sheets is cut short")
	}
	b.sheets = append(b.sheets, s)
	return nil
}

func (b *biffBook) readSST(r record) error {
	c := newChunks(r)
	c.skip(4)
	n := c.u16() | c.u16()<<16
	if n < 0 || n > len(b.data) {
		return b.damaged("its table of texts states an impossible size")
	}
	b.sst = make([]string, 0, min(n, 1<<16))
	for range n {
		b.sst = append(b.sst, c.rich())
		if c.short {
			return b.damaged("its table of texts is cut short")
		}
	}
	return nil
}

func u16(d []byte, at int) int { return int(binary.LittleEndian.Uint16(d[at:])) }

// read reads one sheet.
func (b *biffBook) read(s biffSheet) (*grid, error) {
	rd := &biffRows{b: b, g: &grid{file: b.file, name: s.name}, rows: map[int]*row{}, hidden: map[int]bool{}}
	r, err := b.next(s.at)
	if err != nil {
		return nil, err
	}
	if r.typ != biffBOF {
		return nil, b.damaged(fmt.Sprintf("the sheet %q is not where the workbook says", shorten(s.name)))
	}
	for depth := 1; depth > 0; {
		if r, err = b.next(r.after); err != nil {
			return nil, err
		}
		switch r.typ {
		case biffBOF: // an embedded chart
			depth++
		case biffEOF:
			depth--
		default:
			if depth == 1 {
				if err := rd.record(r); err != nil {
					return nil, err
				}
			}
		}
	}
	return rd.finish()
}

// biffRows collects the cells of a sheet.
type biffRows struct {
	b       *biffBook
	g       *grid
	rows    map[int]*row
	hidden  map[int]bool
	cells   int
	waiting struct { // the formula whose text comes in a record of its own
		row, column int
		on          bool
	}
}

func (rd *biffRows) record(r record) error {
	d := r.data
	need := map[uint16]int{biffRow: 16, biffNumber: 14, biffRK: 10, biffMulRK: 12, biffLabelSST: 10, biffLabel: 8, biffRString: 8, biffBoolErr: 8, biffFormula: 20, biffString: 3, biffColInfo: 10, biffMergeCells: 2}[r.typ]
	if need == 0 {
		return nil
	}
	if len(d) < need {
		return rd.b.damaged("a record is shorter than its kind")
	}
	switch r.typ {
	case biffRow:
		rd.hidden[u16(d, 0)] = d[12]&0x20 != 0
	case biffNumber:
		return rd.number(u16(d, 0), u16(d, 2), u16(d, 4), math.Float64frombits(binary.LittleEndian.Uint64(d[6:])))
	case biffRK:
		return rd.number(u16(d, 0), u16(d, 2), u16(d, 4), rk(binary.LittleEndian.Uint32(d[6:])))
	case biffMulRK:
		for i, col := 4, u16(d, 2); i+6 <= len(d)-2; i, col = i+6, col+1 {
			if err := rd.number(u16(d, 0), col, u16(d, i), rk(binary.LittleEndian.Uint32(d[i+2:]))); err != nil {
				return err
			}
		}
	case biffLabelSST:
		i := int(binary.LittleEndian.Uint32(d[6:]))
		if i < 0 || i >= len(rd.b.sst) {
			return rd.b.damaged(fmt.Sprintf("the cell %s points to a text that the workbook doesn't have", address(u16(d, 2)+1, u16(d, 0)+1)))
		}
		return rd.put(u16(d, 0), u16(d, 2), cell{text: rd.b.sst[i], decimals: -1})
	case biffLabel, biffRString:
		c := newChunks(r)
		c.skip(6)
		text := c.text(c.u16())
		if c.short {
			return rd.b.damaged("a text is cut short")
		}
		return rd.put(u16(d, 0), u16(d, 2), cell{text: text, decimals: -1})
	case biffBoolErr:
		return rd.put(u16(d, 0), u16(d, 2), boolOrError(d[6], d[7] != 0))
	case biffFormula:
		return rd.formula(d)
	case biffString:
		return rd.formulaText(r)
	case biffColInfo:
		if d[8]&1 != 0 {
			for c := u16(d, 0) + 1; c <= min(u16(d, 2)+1, rd.b.opt.MaxColumns); c++ {
				rd.g.hiddenColumns = append(rd.g.hiddenColumns, c)
			}
		}
	case biffMergeCells:
		for i := 2; i+8 <= len(d) && len(rd.g.merges) < 10_000; i += 8 {
			rd.g.merges = append(rd.g.merges, address(u16(d, i+4)+1, u16(d, i)+1)+":"+address(u16(d, i+6)+1, u16(d, i+2)+1))
		}
	}
	return nil
}

// rk decodes the short form of a number ([MS-XLS] 2.5.217).
func rk(v uint32) float64 {
	var x float64
	if v&2 != 0 {
		x = float64(int32(v) >> 2)
	} else {
		x = math.Float64frombits(uint64(v&^3) << 32)
	}
	if v&1 != 0 {
		x /= 100
	}
	return x
}

var biffErrors = map[byte]string{0: "#NULL!", 7: "#DIV/0!", 15: "#VALUE!", 23: "#REF!", 29: "#NAME?", 36: "#NUM!", 42: "#N/A"}

func boolOrError(v byte, isError bool) cell {
	if isError {
		text := biffErrors[v]
		if text == "" {
			text = "#VALUE!"
		}
		return cell{text: text, kind: errorCell, decimals: -1}
	}
	if v != 0 {
		return cell{text: "TRUE", kind: boolCell, decimals: -1}
	}
	return cell{text: "FALSE", kind: boolCell, decimals: -1}
}

// number puts a number, typed by its number format.
func (rd *biffRows) number(r, col, xf int, v float64) error {
	text := strconv.FormatFloat(v, 'f', -1, 64)
	if a := math.Abs(v); a != 0 && (a < 1e-5 || a >= 1e15) {
		text = strconv.FormatFloat(v, 'g', -1, 64)
	}
	c := cell{text: text, kind: numberCell, decimals: storedDecimals(text)}
	id := 0
	if xf < len(rd.b.xfs) {
		id = rd.b.xfs[xf]
	}
	lookOf(id, rd.b.formats[id]).apply(&c, rd.b.d1904)
	return rd.put(r, col, c)
}

func (rd *biffRows) formula(d []byte) error {
	r, col := u16(d, 0), u16(d, 2)
	rd.g.formulas++
	rd.waiting.on = false
	if u16(d, 12) != 0xFFFF {
		return rd.number(r, col, u16(d, 4), math.Float64frombits(binary.LittleEndian.Uint64(d[6:])))
	}
	switch d[6] {
	case 0:
		rd.waiting.row, rd.waiting.column, rd.waiting.on = r, col, true
		return nil
	case 1:
		return rd.put(r, col, boolOrError(d[8], false))
	case 2:
		return rd.put(r, col, boolOrError(d[8], true))
	}
	return rd.put(r, col, cell{kind: valueless, decimals: -1})
}

func (rd *biffRows) formulaText(r record) error {
	if !rd.waiting.on {
		return nil
	}
	rd.waiting.on = false
	c := newChunks(r)
	text := c.text(c.u16())
	if c.short {
		return rd.b.damaged("the text of a formula is cut short")
	}
	return rd.put(rd.waiting.row, rd.waiting.column, cell{text: text, decimals: -1})
}

// put adds a cell; r and col count from 0.
func (rd *biffRows) put(r, col int, c cell) error {
	if c.kind != valueless && blank(c.text) {
		return nil
	}
	if col >= rd.b.opt.MaxColumns {
		return problem("too-many-columns", finding.Place{File: rd.b.file}, fmt.Sprintf("the cell %s lies beyond column %s, the limit of an evidence sheet", address(col+1, r+1), columnName(rd.b.opt.MaxColumns)), "keep only the columns about the studies")
	}
	c.column = int32(col + 1)
	to := rd.rows[r]
	if to == nil {
		to = &row{n: r + 1}
		rd.rows[r] = to
	}
	if rd.cells++; rd.cells > rd.b.opt.MaxCells || len(rd.rows) > rd.b.opt.MaxRows {
		return tooLarge(finding.Place{File: rd.b.file}, rd.b.opt)
	}
	to.cells = append(to.cells, c)
	return nil
}

// finish puts rows and cells in order and refuses a cell that stands twice.
func (rd *biffRows) finish() (*grid, error) {
	for n, r := range rd.rows {
		r.hidden = rd.hidden[n]
		slices.SortFunc(r.cells, func(a, b cell) int { return int(a.column - b.column) })
		for i := 1; i < len(r.cells); i++ {
			if r.cells[i].column == r.cells[i-1].column {
				return nil, rd.b.damaged(fmt.Sprintf("the cell %s stands in it twice", address(int(r.cells[i].column), r.n)))
			}
		}
		rd.g.rows = append(rd.g.rows, *r)
	}
	slices.SortFunc(rd.g.rows, func(a, b row) int { return a.n - b.n })
	return rd.g, nil
}
