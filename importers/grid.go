package importers

import (
	"strings"

	"github.com/xuri/excelize/v2"

	"footing/internal/finding"
)

// kind is how a cell is stored.
type kind uint8

const (
	textCell    kind = iota
	numberCell       // a binary number
	boolCell         // TRUE or FALSE
	errorCell        // #DIV/0! and its kin
	dateCell         // a number that the file shows as a date; its text is the ISO form
	valueless        // a formula without a stored value
	percentCell      // a number that the file shows as a percentage: 0.125 shown as 12.5%
)

// cell is one non-empty cell as stored.
type cell struct {
	text     string
	column   int32
	decimals int16 // digits that the file's number format or the stored text shows; -1 when unknown
	kind     kind
}

// row is one row with at least one non-empty cell; cells stand in order of their columns.
type row struct {
	n      int // 1-based
	hidden bool
	cells  []cell
}

func (r row) at(column int) (cell, bool) {
	for _, c := range r.cells {
		if int(c.column) == column {
			return c, true
		}
		if int(c.column) > column {
			break
		}
	}
	return cell{}, false
}

// grid is one sheet as stored, whatever the file format.
type grid struct {
	file, name    string
	sheets        []string // names of all sheets of the file
	rows          []row
	merges        []string // ranges of merged cells
	hiddenColumns []int
	text          bool        // a text file: numbers are as typed
	mark          decimalMark // the decimal mark, where the file or the caller says it
	strict        bool        // a row longer than the heading is a fault (text files)
	formulas      int         // cells whose value was computed by the program that saved the file
	findings      []finding.Finding
}

// address is the name of a cell, "F7".
func address(column, row int) string {
	s, err := excelize.CoordinatesToCellName(column, row)
	if err != nil {
		return ""
	}
	return s
}

func (g *grid) place(cell string) finding.Place {
	return finding.Place{File: g.file, Sheet: g.name, Cell: cell}
}

func (g *grid) note(sev finding.Severity, kind, cell, what, mend string) {
	g.findings = append(g.findings, finding.Finding{Severity: sev, Kind: kind, Place: g.place(cell), What: what, Mend: mend})
}

// problem is a finding that ends the reading.
func problem(kind string, p finding.Place, what, mend string) *finding.Problem {
	return &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: kind, Place: p, What: what, Mend: mend}}
}

// columnName is the letter of a column.
func columnName(column int) string {
	s, err := excelize.ColumnNumberToName(column)
	if err != nil {
		return ""
	}
	return s
}

// shorten cuts a text for a message.
func shorten(s string) string {
	const most = 60
	s = strings.Map(func(r rune) rune {
		if r < 0x20 || r == 0x7f || r >= 0x80 && r < 0xa0 || r >= 0x202a && r <= 0x202e || r >= 0x2066 && r <= 0x2069 {
			return ' '
		}
		return r
	}, s)
	if r := []rune(s); len(r) > most {
		return string(r[:most]) + "..."
	}
	return s
}
