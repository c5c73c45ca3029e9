package importers

import (
	"strconv"
	"strings"
)

// composite is a cell that holds several numbers: "12.3 (4.5)", "0.45 [0.20, 0.71]", "12/48", "t(45) = 2.3".
type composite struct {
	shape  string // the cell with # for each number, without spaces: "#(#)", "#(#,#)", "#/#", "t(#)=#"
	values []number
	level  float64 // level that the cell names for its interval, 0 when none
}

// parseComposite cuts a cell into numbers and what stands between them. Every range mark (to, dash, comma, semicolon)
// becomes ",", every bracket "(" or ")".
func parseComposite(text string, mark decimalMark) (composite, bool) {
	s := strings.ToLower(strings.TrimSpace(plainText(text)))
	if len(s) > 120 || strings.Contains(s, "#") {
		return composite{}, false
	}
	if mark == 0 {
		mark = compositeMark(s)
	}
	s = strings.NewReplacer("+/-", "±", "+-", "±", "[", "(", "]", ")", "{", "(", "}", ")", "≤", "<=", "≥", ">=", "chi-square", "chi", "chi2", "chi", "x2(", "chi(", "χ²", "chi", "χ2", "chi", "chi^2", "chi").Replace(s)
	var c composite
	s = c.takeLevel(s)
	var shape strings.Builder
	for i := 0; i < len(s); {
		if end, ok := scanNumber(s, i, mark, shape.String()); ok {
			n, fault := parseNumber(s[i:end], mark)
			if fault != numberFine {
				return composite{}, false
			}
			c.values = append(c.values, n)
			shape.WriteByte('#')
			i = end
			continue
		}
		switch {
		case s[i] == ' ':
			i++
		case strings.HasPrefix(s[i:], "to ") || strings.HasPrefix(s[i:], "and "):
			shape.WriteByte(',')
			i += strings.IndexByte(s[i:], ' ') + 1
		case strings.HasPrefix(s[i:], "of "):
			shape.WriteByte('/')
			i += 3
		case s[i] == '-' || s[i] == ';' || s[i] == ',':
			shape.WriteByte(',')
			i++
		case s[i] == ':' || s[i] == '*':
			i++
		case s[i] == '%' && strings.HasSuffix(shape.String(), "#"):
			c.values[len(c.values)-1].percent = true
			shape.WriteByte('%')
			i++
		default:
			shape.WriteByte(s[i])
			i++
		}
		if shape.Len() > 60 {
			return composite{}, false
		}
	}
	c.shape = shape.String()
	return c, len(c.values) > 0
}

// compositeMark looks for a decimal comma inside a composite cell: one or two digits behind a comma, and no point.
func compositeMark(s string) decimalMark {
	for i := 1; i < len(s); i++ {
		if s[i-1] == '.' && isDigit(s[i]) {
			return '.'
		}
	}
	for i := 1; i < len(s); i++ {
		if s[i] != ',' || !isDigit(s[i-1]) {
			continue
		}
		j := i + 1
		for j < len(s) && isDigit(s[j]) {
			j++
		}
		if n := j - i - 1; (n == 1 || n == 2) && (j == len(s) || s[j] != ',') {
			return ','
		}
	}
	return 0
}

// takeLevel takes "95% CI" out of the text.
func (c *composite) takeLevel(s string) string {
	for _, word := range []string{"% ci", "%ci", "% c.i.", "% confidence interval"} {
		at := strings.Index(s, word)
		if at < 0 {
			continue
		}
		from := at
		for from > 0 && (isDigit(s[from-1]) || s[from-1] == '.') {
			from--
		}
		if v, err := strconv.ParseFloat(s[from:at], 64); err == nil && v >= 50 && v < 100 {
			c.level = v / 100
			rest := s[at+len(word):]
			rest = strings.TrimLeft(rest, " :=,")
			return s[:from] + rest
		}
	}
	for _, word := range []string{"ci:", "ci =", "ci"} {
		if at := strings.Index(s, word); at >= 0 && (at == 0 || !isLetter(s[at-1])) {
			return s[:at] + s[at+len(word):]
		}
	}
	return s
}

func isLetter(b byte) bool { return b >= 'a' && b <= 'z' }

// scanNumber finds the end of a number that starts at i. A minus sign belongs to the number unless it stands between two
// numbers ("0.20-0.71").
func scanNumber(s string, i int, mark decimalMark, before string) (int, bool) {
	j := i
	for _, b := range []string{"<=", ">=", "<", ">"} {
		if strings.HasPrefix(s[j:], b) {
			j += len(b)
			for j < len(s) && s[j] == ' ' {
				j++
			}
			break
		}
	}
	if j < len(s) && (s[j] == '-' || s[j] == '+') {
		if strings.HasSuffix(before, "#") || strings.HasSuffix(before, "%") {
			return 0, false
		}
		j++
	}
	from := j
	point, thousands := byte('.'), byte(',')
	if mark == ',' {
		point, thousands = ',', '.'
	}
	for j < len(s) && isDigit(s[j]) {
		j++
	}
	for j > from && j-from <= 3 && threeDigits(s, j, thousands) {
		for threeDigits(s, j, thousands) {
			j += 4
		}
	}
	if j+1 < len(s) && s[j] == point && isDigit(s[j+1]) {
		j++
		for j < len(s) && isDigit(s[j]) {
			j++
		}
	}
	if j == from || from > 0 && isLetter(s[from-1]) && s[from-1] != 'x' {
		return 0, false
	}
	if j+1 < len(s) && s[j] == 'e' && (isDigit(s[j+1]) || j+2 < len(s) && (s[j+1] == '-' || s[j+1] == '+') && isDigit(s[j+2])) {
		j += 2
		for j < len(s) && isDigit(s[j]) {
			j++
		}
	}
	return j, true
}

// threeDigits: the thousands mark at j with exactly three digits behind it.
func threeDigits(s string, j int, mark byte) bool {
	return j+3 < len(s) && s[j] == mark && isDigit(s[j+1]) && isDigit(s[j+2]) && isDigit(s[j+3]) && (j+4 == len(s) || !isDigit(s[j+4]))
}

// joinMeanings makes the meaning of a column with several figures a cell.
func joinMeanings(ms ...Meaning) Meaning {
	parts := make([]string, len(ms))
	for i, m := range ms {
		parts[i] = string(m)
	}
	return Meaning(strings.Join(parts, " + "))
}

// withArm says that all figures of a column are about one group.
func (m Meaning) withArm(arm string) Meaning {
	parts := m.parts()
	for i, p := range parts {
		if p == StandardError {
			p = "se"
		}
		parts[i] = Meaning(arm+" ") + p
	}
	return joinMeanings(parts...)
}

// ofArm reports whether all figures of a column can be about one group.
func (m Meaning) ofArm() bool {
	for _, p := range m.parts() {
		if _, ok := armFigures[p]; !ok && p != StandardError {
			return false
		}
	}
	return true
}

// parts are the single meanings of a column.
func (m Meaning) parts() []Meaning {
	if !strings.Contains(string(m), " + ") {
		return []Meaning{m}
	}
	var out []Meaning
	for _, p := range strings.Split(string(m), " + ") {
		out = append(out, Meaning(p))
	}
	return out
}
