package reports

import (
	"fmt"
	"strings"
	"unicode"

	"footing/plan/result"

	"github.com/jedib0t/go-pretty/v6/text"
)

// termWidth is the widest line of the terminal texts, in columns.
const termWidth = 80

// TextOptions says how a terminal text is written. The zero value is plain text for a pipe or a file.
type TextOptions struct {
	Colour bool     // the two inks; only where a terminal shows it and NO_COLOR is not set
	Wrote  []string // files that the run wrote, for the last line
}

// The two inks of a terminal: blue is evidence, orange is plan.
const (
	termEvidence = "\x1b[34m"
	termPlan     = "\x1b[33m"
	termStrong   = "\x1b[1m"
	termOff      = "\x1b[0m"
)

// textWriter builds a terminal text line by line.
type textWriter struct {
	strings.Builder
	o TextOptions
}

func (w *textWriter) ink(code, s string) string {
	if !w.o.Colour || s == "" {
		return s
	}
	return code + s + termOff
}

// line writes one line with an indent of two and no blanks at its end.
func (w *textWriter) line(format string, a ...any) {
	s := format
	if len(a) > 0 {
		s = fmt.Sprintf(format, a...)
	}
	w.WriteString(strings.TrimRight("  "+s, " "))
	w.WriteByte('\n')
}

func (w *textWriter) blank() { w.WriteByte('\n') }

// head writes the title at the left and a remark at the right end of the line.
func (w *textWriter) head(title, right string) {
	title, right = TermText(title), TermText(right)
	title = clipColumns(title, termWidth-columnsOf(right)-2)
	w.WriteString(strings.TrimRight(w.ink(termStrong, title)+strings.Repeat(" ", max(2, termWidth-columnsOf(title)-columnsOf(right)))+right, " "))
	w.WriteByte('\n')
}

// wrapped writes a text over as many lines as it needs; further lines are indented by hang more.
func (w *textWriter) wrapped(first string, hang int, s string) {
	room := termWidth - 2 - hang
	lead := first + strings.Repeat(" ", max(0, hang-columnsOf(first)))
	for i, l := range termWrap(TermText(s), room) {
		if i > 0 {
			lead = strings.Repeat(" ", hang)
		}
		w.line("%s", lead+l)
	}
}

// termWrap breaks a text between words into lines of at most room columns; a longer word is cut.
func termWrap(s string, room int) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(s) {
		for columnsOf(word) > room {
			if line != "" {
				lines, line = append(lines, line), ""
			}
			head := cutColumns(word, room)
			lines = append(lines, head)
			word = word[len(head):]
		}
		switch {
		case word == "":
		case line == "":
			line = word
		case columnsOf(line)+1+columnsOf(word) <= room:
			line += " " + word
		default:
			lines, line = append(lines, line), word
		}
	}
	if line != "" || len(lines) == 0 {
		lines = append(lines, line)
	}
	return lines
}

// columnsOf is the number of terminal columns that a text takes.
func columnsOf(s string) int { return text.StringWidthWithoutEscSequences(s) }

// cutColumns gives the longest start of s that fits into n columns, at least one character.
func cutColumns(s string, n int) string {
	used := 0
	for i, r := range s {
		used += text.RuneWidth(r)
		if used > n && i > 0 {
			return s[:i]
		}
	}
	return s
}

// clipColumns shortens s to n columns and says so with three dots.
func clipColumns(s string, n int) string {
	if columnsOf(s) <= n {
		return s
	}
	if n < 4 {
		return cutColumns(s, max(n, 1))
	}
	return strings.TrimRight(cutColumns(s, n-3), " ") + "..."
}

// TermText makes a text harmless on a terminal: control characters and escapes, marks that turn the reading direction
// around and characters without width become a visible mark; the typography of the page becomes plain.
func TermText(s string) string {
	var b strings.Builder
	for _, r := range s {
		switch {
		case r == '\u2212':
			b.WriteByte('-')
		case r == '\u202f' || r == '\u2009' || r == '\u00a0':
			b.WriteByte(' ')
		case r == '\n' || r == '\r' || r == '\t' || r == '\u2028' || r == '\u2029':
			b.WriteByte(' ')
		case r == 0xFFFD || unicode.IsControl(r) || unicode.Is(unicode.Cf, r) || unicode.Is(unicode.Co, r) || unicode.Is(unicode.Cs, r):
			b.WriteByte('?')
		default:
			b.WriteRune(r)
		}
	}
	return b.String()
}

// column is one column of a terminal table.
type textColumn struct {
	head  string
	right bool // numbers stand right
	most  int  // widest cell, 0: as wide as needed
}

// grid writes a table: a heading line and rows, two blanks between columns, each row with a mark of two columns in
// front. inks colours whole rows; "" leaves one plain.
func (w *textWriter) grid(cols []textColumn, rows [][]string, marks, inks []string) {
	widths := make([]int, len(cols))
	for j, c := range cols {
		widths[j] = columnsOf(c.head)
		for i := range rows {
			rows[i][j] = TermText(rows[i][j])
			if c.most > 0 {
				rows[i][j] = clipColumns(rows[i][j], c.most)
			}
			widths[j] = max(widths[j], columnsOf(rows[i][j]))
		}
	}
	put := func(cells []string, mark, code string) {
		var b strings.Builder
		for j, s := range cells {
			pad := strings.Repeat(" ", widths[j]-columnsOf(s))
			if j > 0 {
				b.WriteString("  ")
			}
			if cols[j].right {
				b.WriteString(pad + s)
			} else {
				b.WriteString(s + pad)
			}
		}
		w.WriteString(mark + w.ink(code, strings.TrimRight(b.String(), " ")) + "\n")
	}
	heads := make([]string, len(cols))
	for j, c := range cols {
		heads[j] = c.head
	}
	put(heads, "  ", "")
	for i, r := range rows {
		mark, code := "  ", ""
		if i < len(marks) && marks[i] != "" {
			mark = marks[i]
		}
		if i < len(inks) {
			code = inks[i]
		}
		put(r, mark, code)
	}
}

// termNumber writes a number of the page for a terminal.
func termNumber(s string) string { return TermText(s) }

// optional writes a figure that may not be there.
func optional(x *float64, write func(float64) string) string {
	if x == nil {
		return "-"
	}
	return TermText(write(*x))
}

// wroteLine names the files that were written.
func (w *textWriter) wroteLine() {
	if len(w.o.Wrote) > 0 {
		w.blank()
		w.wrapped("", 0, "Wrote "+strings.Join(w.o.Wrote, ", "))
	}
}

// placeText names a place within its file: "Studies!F7", "row 7".
func placeText(at result.Place) string {
	at.File = ""
	if strings.HasPrefix(at.Cell, "row ") {
		return at.Cell
	}
	return at.String()
}
