package importers

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"golang.org/x/text/encoding"
	"golang.org/x/text/encoding/htmlindex"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"

	"footing/internal/finding"
)

// openText reads a file of delimited text.
func openText(path string, data []byte, opt Options) (*gridSource, error) {
	g := &grid{file: path, text: true, strict: true}
	text, err := g.decode(data, opt)
	if err != nil {
		return nil, err
	}
	if err := g.readCSV(text, opt); err != nil {
		return nil, err
	}
	return &gridSource{names: []string{""}, visible: []bool{true}, read: func(int) (*grid, error) { return g, nil }}, nil
}

// isUTF16 reports a byte order mark of UTF-16, or text in which every second byte is mostly zero.
func isUTF16(data []byte) bool {
	if bytes.HasPrefix(data, []byte{0xff, 0xfe}) || bytes.HasPrefix(data, []byte{0xfe, 0xff}) {
		return true
	}
	even, odd := zeros(data)
	return even || odd
}

// zeros reports whether nearly all bytes at even (big endian) or odd (little endian) places are zero.
func zeros(data []byte) (even, odd bool) {
	head := data[:min(len(data), 4096)&^1]
	if len(head) < 8 {
		return false, false
	}
	var n [2]int
	for i, b := range head {
		if b == 0 {
			n[i&1]++
		}
	}
	half := len(head) / 2
	return n[0] > half*7/10 && n[1] < half/10, n[1] > half*7/10 && n[0] < half/10
}

// decode turns the file's bytes into UTF-8: by the caller's word, by a byte order mark, as valid UTF-8, by the zeros of
// UTF-16, and else as Windows-1252 with a warning that shows what came out.
func (g *grid) decode(data []byte, opt Options) (string, error) {
	at := finding.Place{File: g.file}
	if opt.Encoding != "" {
		e, err := htmlindex.Get(opt.Encoding)
		if err != nil {
			return "", problem("encoding-unknown", at, fmt.Sprintf("%q is no known text encoding", shorten(opt.Encoding)), "use utf-8, utf-16, windows-1252 or another registered name")
		}
		return g.decodeWith(e, data, opt.Encoding)
	}
	even, _ := zeros(data)
	switch {
	case bytes.HasPrefix(data, []byte("\xef\xbb\xbf")):
		data = data[3:]
		fallthrough
	case utf8.Valid(data) && bytes.IndexByte(data, 0) < 0:
		if !utf8.Valid(data) {
			return "", problem("encoding-damaged", at, fmt.Sprintf("the file says that it is UTF-8, but line %d holds bytes that are not", badLine(data)), "save it as UTF-8 again")
		}
		return string(data), nil
	case isUTF16(data):
		order := unicode.LittleEndian
		if even {
			order = unicode.BigEndian
		}
		return g.decodeWith(unicode.UTF16(order, unicode.UseBOM), data, "UTF-16")
	}
	e, _ := htmlindex.Get("windows-1252")
	text, err := g.decodeWith(e, data, "windows-1252")
	if err != nil {
		return "", err
	}
	g.note(finding.Warning, "encoding-guessed", "", fmt.Sprintf("the text is not UTF-8 and was read as Windows-1252; check these words: %s", strings.Join(foreignWords(text), ", ")),
		"save the file as UTF-8, or name its encoding")
	return text, nil
}

func (g *grid) decodeWith(e encoding.Encoding, data []byte, name string) (string, error) {
	out, _, err := transform.Bytes(e.NewDecoder(), data)
	if err != nil {
		return "", problem("encoding-damaged", finding.Place{File: g.file}, "the text can't be read as "+shorten(name), "save the file as UTF-8")
	}
	text := strings.TrimPrefix(string(out), "\ufeff")
	if strings.ContainsRune(text, utf8.RuneError) {
		g.note(finding.Warning, "encoding-damaged", "", "some characters could not be read as "+shorten(name), "save the file as UTF-8, or name its encoding")
	}
	return text, nil
}

// foreignWords lists the first words with letters beyond ASCII.
func foreignWords(text string) []string {
	var found []string
	for _, w := range strings.FieldsFunc(text, func(r rune) bool { return strings.ContainsRune(",;\t\r\n\" |", r) }) {
		if len(found) == 5 {
			break
		}
		for i := 0; i < len(w); i++ {
			if w[i] >= 0x80 {
				found = append(found, fmt.Sprintf("%q", shorten(w)))
				break
			}
		}
	}
	return found
}

func badLine(data []byte) int {
	line := 1
	for len(data) > 0 {
		r, n := utf8.DecodeRune(data)
		if r == utf8.RuneError && n == 1 {
			return line
		}
		if r == '\n' {
			line++
		}
		data = data[n:]
	}
	return line
}

// sniffDelimiter takes the mark that cuts the first lines into the most equal parts; quoted marks don't count.
func sniffDelimiter(text string) rune {
	best, bestScore := ',', 0
	for _, d := range []rune{'\t', ';', ',', '|'} {
		tally := map[int]int{}
		fields, lines, quoted := 1, 0, false
		for _, r := range text[:min(len(text), 64<<10)] {
			switch {
			case r == '"':
				quoted = !quoted
			case r == d && !quoted:
				fields++
			case r == '\n' && !quoted:
				if fields > 1 {
					tally[fields]++
				}
				fields = 1
				lines++
			}
			if lines == 200 {
				break
			}
		}
		if fields > 1 {
			tally[fields]++
		}
		score := 0
		for f, n := range tally {
			score = max(score, n*min(f, 20))
		}
		if score > bestScore {
			best, bestScore = d, score
		}
	}
	return best
}

// readCSV fills the grid from text. Rows are numbered as a spreadsheet program would number them.
func (g *grid) readCSV(text string, opt Options) error {
	if !strings.Contains(text, "\n") {
		text = strings.ReplaceAll(text, "\r", "\n") // line ends of old Macs
	}
	delimiter := sniffDelimiter(text)
	if first, rest, ok := strings.Cut(text, "\n"); ok && len(first) <= 7 && strings.HasPrefix(strings.ToLower(first), "sep=") && len(strings.TrimRight(first, "\r")) == 5 {
		delimiter = rune(first[4]) // the line by which some programs name the delimiter
		text = "\n" + rest
	}
	if opt.Delimiter != "" {
		r, n := utf8.DecodeRuneInString(opt.Delimiter)
		if n != len(opt.Delimiter) || r == '"' || r == '\n' || r == '\r' || r == utf8.RuneError {
			return problem("delimiter-unusable", finding.Place{File: g.file}, fmt.Sprintf("%q can't be a delimiter", shorten(opt.Delimiter)), "use one character, such as a comma, a semicolon or a tab")
		}
		delimiter = r
	}
	if opt.Decimal != "" {
		g.mark = decimalMark(opt.Decimal[0])
	}
	err := g.parseCSV(text, delimiter, false, opt)
	var pe *csv.ParseError
	if errors.As(err, &pe) && errors.Is(pe.Err, csv.ErrBareQuote) {
		// A quote mark inside an unquoted cell ('5" screen') is text; it must not swallow lines.
		g.rows = nil
		if err = g.parseCSV(text, delimiter, true, opt); err == nil && g.multiline() {
			err = pe
		}
	}
	if errors.As(err, &pe) {
		return problem("text-damaged", finding.Place{File: g.file, Line: pe.Line, Column: pe.Column}, "a quote mark opens or closes in the wrong place, so the cells behind it can't be told apart",
			"put the whole cell in double quotes and double each quote mark inside it")
	}
	return err
}

func (g *grid) multiline() bool {
	for _, r := range g.rows {
		for _, c := range r.cells {
			if strings.Contains(c.text, "\n") {
				return true
			}
		}
	}
	return false
}

func (g *grid) parseCSV(text string, delimiter rune, lazy bool, opt Options) error {
	r := csv.NewReader(strings.NewReader(text))
	r.Comma, r.FieldsPerRecord, r.ReuseRecord, r.LazyQuotes = delimiter, -1, true, lazy
	at := finding.Place{File: g.file}
	extra, total := 0, 0
	for {
		record, err := r.Read()
		if err == io.EOF {
			return nil
		}
		if err != nil {
			return err
		}
		line, _ := r.FieldPos(0)
		n := line - extra
		for _, field := range record {
			extra += strings.Count(field, "\n")
		}
		out := row{n: n}
		for i, field := range record {
			if blank(field) {
				continue
			}
			if i >= opt.MaxColumns {
				return problem("too-many-columns", at, fmt.Sprintf("line %d has more than %d columns", line, opt.MaxColumns), "keep only the columns about the studies")
			}
			if out.cells == nil {
				out.cells = make([]cell, 0, len(record))
			}
			out.cells = append(out.cells, cell{text: unguarded(field), column: int32(i + 1)})
		}
		if out.cells == nil {
			continue
		}
		total += len(out.cells)
		if len(g.rows) >= opt.MaxRows || total > opt.MaxCells {
			return tooLarge(at, opt)
		}
		g.rows = append(g.rows, out)
	}
}

func tooLarge(at finding.Place, opt Options) error {
	return problem("sheet-too-large", at, fmt.Sprintf("the sheet has more than %d rows or %d cells, the limit of an evidence sheet", opt.MaxRows, opt.MaxCells), "keep only the rows of the prior studies")
}

// blank reports a text without a visible character.
func blank(s string) bool {
	for i := 0; i < len(s); i++ {
		if c := s[i]; c > ' ' && c < 0x7f {
			return false
		}
	}
	return strings.TrimSpace(plainText(s)) == ""
}
