package importers

import (
	"math"
	"strconv"
	"strings"
	"time"
)

// look is what a number format makes of a number.
type look struct {
	date, percent bool
	decimals      int
}

// apply gives a stored number its kind and decimals.
func (l look) apply(c *cell, d1904 bool) {
	switch {
	case l.date:
		if iso, ok := serialDate(c.text, d1904); ok {
			c.kind, c.text = dateCell, iso
		}
	case l.percent:
		c.kind = percentCell
	case l.decimals > int(c.decimals) && c.decimals >= 0:
		c.decimals = int16(l.decimals)
	}
}

// lookOf reads a number format: its built-in number (ECMA-376 part 1, 18.8.30) or its code.
func lookOf(id int, code string) look {
	if code == "" {
		switch {
		case id >= 14 && id <= 22, id >= 27 && id <= 36, id >= 45 && id <= 47, id >= 50 && id <= 58:
			return look{date: true}
		case id == 9:
			return look{percent: true}
		case id == 10:
			return look{percent: true, decimals: 2}
		case id == 2 || id == 4 || id == 39 || id == 40:
			return look{decimals: 2}
		}
		return look{}
	}
	return lookOfCode(code)
}

// lookOfCode reads the first section of a format code; what is quoted, escaped or in brackets is no code.
func lookOfCode(code string) look {
	var l look
	var b strings.Builder
	for i := 0; i < len(code); i++ {
		switch c := code[i]; c {
		case '"':
			for i++; i < len(code) && code[i] != '"'; i++ {
			}
		case '\\', '_', '*':
			i++
		case '[':
			from := i
			for i++; i < len(code) && code[i] != ']'; i++ {
			}
			if in := strings.ToLower(code[from+1 : min(i, len(code))]); in != "" && strings.Trim(in, "hms") == "" {
				b.WriteString(in) // elapsed time
			}
		case ';':
			i = len(code)
		default:
			b.WriteByte(c)
		}
	}
	s := strings.ToLower(b.String())
	if s == "general" || s == "@" {
		return l
	}
	l.date = strings.ContainsAny(s, "dmyhs")
	l.percent = strings.Contains(s, "%")
	if at := strings.IndexByte(s, '.'); at >= 0 && !l.date {
		l.decimals = len(s[at+1:]) - len(strings.TrimLeft(s[at+1:], "0#"))
	}
	return l
}

// storedDecimals counts the decimals of a stored number that was typed; -1 for one that was computed (many digits) or
// has an exponent. A binary number doesn't keep its trailing zeros: this is the least that was typed.
func storedDecimals(s string) int16 {
	if strings.ContainsAny(s, "eE") || len(s) > 12 {
		return -1
	}
	at := strings.IndexByte(s, '.')
	if at < 0 {
		return 0
	}
	if n := len(s) - at - 1; n <= 8 {
		return int16(n)
	}
	return -1
}

// serialDate turns a day number into its ISO date. In the 1900 system day 60 never existed (ECMA-376 part 1, 18.17.4.1).
func serialDate(s string, d1904 bool) (string, bool) {
	v, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsNaN(v) || v < 0 || v > 2958465.99999 {
		return "", false
	}
	day := math.Floor(v)
	base := time.Date(1899, 12, 30, 0, 0, 0, 0, time.UTC)
	switch {
	case d1904:
		base = time.Date(1904, 1, 1, 0, 0, 0, 0, time.UTC)
	case day < 1:
		return "", false
	case day < 60:
		base = base.AddDate(0, 0, 1)
	}
	return base.AddDate(0, 0, int(day)).Format("2006-01-02"), true
}
