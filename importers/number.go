package importers

import (
	"math"
	"strconv"
	"strings"
	"unicode"

	"footing/meta/effect"
)

// number is one printed number as understood.
type number struct {
	value    float64 // as printed: 25 for "25%"
	decimals int     // digits printed behind the decimal mark; -1 when unknown
	bound    effect.Bound
	percent  bool // a percent sign followed
	starred  bool // significance stars or footnote signs followed and were left off
}

// numberFault says why a text is no number.
type numberFault int8

const (
	numberFine      numberFault = iota
	numberMissing               // a mark for "not reported", or nothing
	numberNot                   // text
	numberAmbiguous             // "1,234": thousands or decimals
	numberRange                 // beyond what a double holds
)

// decimalMark is the decimal mark of a file: '.', ',' or 0 while unknown.
type decimalMark byte

var missingWords = map[string]bool{
	"": true, "na": true, "n/a": true, "n.a.": true, "n.a": true, "nr": true, "n.r.": true, "not reported": true,
	"not available": true, "not applicable": true, "missing": true, "none": true, "-": true, "--": true, "---": true,
	".": true, "..": true, "...": true, "#n/a": true, "null": true, "nd": true, "no data": true, "unknown": true, "?": true,
}

// isMissing reports whether the text is one of the usual marks for "not reported".
func isMissing(s string) bool {
	if len(s) > 40 || s != "" && isDigit(s[0]) {
		return false
	}
	return missingWords[strings.ToLower(strings.TrimSpace(plainText(s)))]
}

// plainText folds the characters that spreadsheets and word processors put in place of plain ones: all spaces become
// U+0020, all minus signs and dashes "-", full-width characters their narrow forms; marks without width are dropped.
func plainText(s string) string {
	plain := true
	for i := 0; i < len(s); i++ {
		if s[i] >= 0x80 || s[i] < 0x20 {
			plain = false
			break
		}
	}
	if plain {
		return s
	}
	var b strings.Builder
	b.Grow(len(s))
	for _, r := range s {
		switch {
		case r == '\u200b' || r == '\u200c' || r == '\u200d' || r == '\ufeff' || r == '\u2060' || r == '\u00ad',
			r >= '\u202a' && r <= '\u202e', r >= '\u2066' && r <= '\u2069', r == '\u200e' || r == '\u200f':
		case unicode.IsSpace(r) || r == '\u2007' || r == '\u202f':
			b.WriteByte(' ')
		case r >= '\u2010' && r <= '\u2015', r == '\u2212', r == '\ufe63':
			b.WriteByte('-')
		case r >= '\uff01' && r <= '\uff5e':
			b.WriteRune(r - 0xff01 + '!')
		case r == '\u2018' || r == '\u2019' || r == '\u02bc':
			b.WriteByte('\'')
		case r == '\u00b7': // the raised decimal point of some journals
			b.WriteByte('.')
		default:
			b.WriteRune(r)
		}
	}
	return b.String()
}

// parseNumber reads one number as printed. The grammar is its own: what a programming language would take beyond it
// (NaN, Inf, 0x10, 1_000) is text here.
//
//	[p|n|...] [= < > <= >=] [sign] digits with thousands marks [mark digits] [e exponent] [%] [stars]
func parseNumber(text string, mark decimalMark) (number, numberFault) {
	if n, ok := plainNumber(text); ok && (mark != ',' || n.decimals == 0) {
		return n, numberFine
	}
	s := strings.TrimSpace(plainText(text))
	if missingWords[strings.ToLower(s)] {
		return number{}, numberMissing
	}
	n := number{bound: effect.Exact}
	s = n.takeBound(s)
	body, rest := splitNumber(s)
	digits, fault := mantissa(body, mark)
	if fault != numberFine {
		return number{}, fault
	}
	exponent, rest, ok := takeExponent(rest)
	if !ok || !n.takeTail(rest) {
		return number{}, numberNot
	}
	n.decimals = 0
	if i := strings.IndexByte(digits, '.'); i >= 0 {
		n.decimals = len(digits) - i - 1
	}
	n.decimals = max(0, n.decimals-exponent)
	if n.decimals > 100 {
		n.decimals = -1
	}
	v, err := strconv.ParseFloat(digits+"e"+strconv.Itoa(exponent), 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) {
		return number{}, numberRange
	}
	n.value = v
	return n, numberFine
}

// plainNumber reads the most frequent form without ado: a minus sign, up to 15 digits, a point.
func plainNumber(s string) (number, bool) {
	if len(s) == 0 || len(s) > 17 {
		return number{}, false
	}
	i, digits, point := 0, 0, -1
	if s[0] == '-' {
		i++
	}
	var whole uint64
	for ; i < len(s); i++ {
		switch c := s[i]; {
		case isDigit(c):
			whole = whole*10 + uint64(c-'0')
			digits++
		case c == '.' && point < 0:
			point = i
		default:
			return number{}, false
		}
	}
	if digits == 0 || digits > 15 {
		return number{}, false
	}
	n := number{value: float64(whole)}
	if point >= 0 {
		n.decimals = len(s) - point - 1
		n.value /= powersOfTen[n.decimals] // both are exact, so the quotient is correctly rounded
	}
	if s[0] == '-' {
		n.value = -n.value
	}
	return n, true
}

var powersOfTen = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15}

// takeBound takes a sign of equality or inequality off the front of s.
func (n *number) takeBound(s string) string {
	for _, b := range []struct {
		sign  string
		bound effect.Bound
	}{{"<=", effect.Below}, {">=", effect.Above}, {"≤", effect.Below}, {"≥", effect.Above}, {"<", effect.Below}, {">", effect.Above}, {"=", effect.Exact}} {
		if rest, ok := strings.CutPrefix(s, b.sign); ok {
			n.bound = b.bound
			return strings.TrimSpace(rest)
		}
	}
	return s
}

// takeTail reads what may follow a number: a percent sign, stars, footnote daggers.
func (n *number) takeTail(s string) bool {
	s = strings.TrimSpace(s)
	if rest, ok := strings.CutPrefix(s, "%"); ok {
		n.percent = true
		s = strings.TrimSpace(rest)
	}
	if s == "" {
		return true
	}
	n.starred = true
	return strings.Trim(s, "*†‡§") == ""
}

// splitNumber cuts s behind its longest front that can be sign, digits and marks.
func splitNumber(s string) (body, rest string) {
	i := 0
	for i < len(s) {
		c := s[i]
		inside := i > 0 && i+1 < len(s) && isDigit(s[i+1])
		if isDigit(c) || c == '.' || c == ',' || i == 0 && (c == '+' || c == '-') || inside && (c == '\'' || c == ' ') || i == 1 && c == ' ' && !isDigit(s[0]) {
			i++
			continue
		}
		break
	}
	return strings.TrimSpace(s[:i]), s[i:]
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// takeExponent reads "e-4", "E+04", "x 10^-4" or "×10-4".
func takeExponent(s string) (exponent int, rest string, ok bool) {
	t := strings.TrimSpace(s)
	lower := strings.ToLower(t)
	switch {
	case strings.HasPrefix(lower, "e"):
		t = t[1:]
	case strings.HasPrefix(lower, "x") || strings.HasPrefix(lower, "×") || strings.HasPrefix(lower, "*"):
		u := strings.TrimSpace(strings.TrimPrefix(strings.TrimPrefix(strings.TrimPrefix(lower, "×"), "x"), "*"))
		if !strings.HasPrefix(u, "10") {
			return 0, s, true
		}
		t = strings.TrimSpace(strings.TrimPrefix(strings.TrimSpace(u[2:]), "^"))
	default:
		return 0, s, true
	}
	i := 0
	if i < len(t) && (t[i] == '+' || t[i] == '-') {
		i++
	}
	from := i
	for i < len(t) && isDigit(t[i]) {
		i++
	}
	if i == from || i-from > 4 {
		return 0, s, false
	}
	exponent, _ = strconv.Atoi(t[:i])
	return exponent, t[i:], true
}

// mantissa turns sign, digits and marks into plain "-1234.5".
func mantissa(s string, mark decimalMark) (string, numberFault) {
	sign := ""
	if s != "" && (s[0] == '-' || s[0] == '+') {
		if s[0] == '-' {
			sign = "-"
		}
		s = strings.TrimSpace(s[1:])
	}
	points, commas := strings.Count(s, "."), strings.Count(s, ",")
	decimal := -1 // index of the decimal mark
	switch {
	case points > 0 && commas > 0:
		last := max(strings.LastIndexByte(s, '.'), strings.LastIndexByte(s, ','))
		if strings.Count(s, s[last:last+1]) > 1 {
			return "", numberNot
		}
		decimal = last
	case points+commas == 1:
		at := strings.IndexAny(s, ".,")
		if !looksLikeThousands(s, at) || s[at] == byte(mark) || mark == 0 && s[at] == '.' {
			decimal = at
		} else if mark == 0 {
			return "", numberAmbiguous
		}
	}
	whole, fraction := s, ""
	if decimal >= 0 {
		whole, fraction = s[:decimal], s[decimal+1:]
	}
	whole, ok := ungroup(whole)
	if !ok || !allDigits(fraction) || whole+fraction == "" {
		return "", numberNot
	}
	if decimal < 0 {
		return sign + whole, numberFine
	}
	return sign + "0" + whole + "." + fraction, numberFine
}

// looksLikeThousands: one to three digits not starting with 0 before the mark at i, three and no more behind it.
func looksLikeThousands(s string, i int) bool {
	before, behind := s[:i], s[i+1:]
	return len(before) >= 1 && len(before) <= 3 && before[0] != '0' && allDigits(before) && len(behind) == 3 && allDigits(behind)
}

func allDigits(s string) bool {
	for i := 0; i < len(s); i++ {
		if !isDigit(s[i]) {
			return false
		}
	}
	return true
}

// ungroup takes thousands marks out; each group but the first has three digits and all marks are the same.
func ungroup(s string) (string, bool) {
	at := strings.IndexAny(s, ".,' ")
	if at < 0 {
		return s, allDigits(s)
	}
	groups := strings.Split(s, s[at:at+1])
	for i, g := range groups {
		if !allDigits(g) || i > 0 && len(g) != 3 || i == 0 && (len(g) == 0 || len(g) > 3) {
			return "", false
		}
	}
	return strings.Join(groups, ""), true
}

// markEvidence says which decimal mark a text proves, if any.
func markEvidence(text string) decimalMark {
	comma, point := strings.IndexByte(text, ','), strings.IndexByte(text, '.')
	if comma < 0 && point < 0 {
		return 0
	}
	if n, ok := plainNumber(text); ok && n.decimals > 0 && n.decimals != 3 {
		return '.'
	}
	n := number{}
	body, rest := splitNumber(n.takeBound(strings.TrimSpace(plainText(text))))
	if _, tail, ok := takeExponent(rest); !ok || !n.takeTail(tail) {
		return 0
	}
	s := strings.TrimLeft(body, "+- ")
	points, commas := strings.Count(s, "."), strings.Count(s, ",")
	if _, fault := mantissa(s, '.'); fault != numberFine {
		return 0
	}
	switch {
	case points > 0 && commas > 0:
		return decimalMark(s[max(strings.LastIndexByte(s, '.'), strings.LastIndexByte(s, ','))])
	case commas > 1:
		return '.'
	case points > 1:
		return ','
	}
	at := strings.IndexAny(s, ".,")
	if at < 0 || looksLikeThousands(s, at) {
		return 0
	}
	return decimalMark(s[at])
}
