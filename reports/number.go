package reports

import (
	"math"
	"regexp"
	"strconv"
	"strings"
)

// The characters of numbers on a page: a true minus and a thin space that does not break.
const (
	minusSign = "\u2212"
	thinSpace = "\u202f"
)

// fixed writes x with the given decimals, with a true minus; what rounds to zero has no sign.
func fixed(x float64, decimals int) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return "–"
	}
	s := strconv.FormatFloat(math.Abs(x), 'f', decimals, 64)
	if x < 0 && strings.Trim(s, "0.") != "" {
		s = minusSign + s
	}
	return s
}

// effectText writes an effect as people read it: two decimals, fewer from 100 up.
func effectText(x float64) string {
	a := math.Abs(x)
	switch {
	case a >= 1000:
		return groupDigits(fixed(x, 0))
	case a >= 100:
		return fixed(x, 1)
	}
	return fixed(x, 2)
}

// groupDigits puts thin spaces between the thousands of a number already written.
func groupDigits(s string) string {
	sign, rest := "", s
	if strings.HasPrefix(rest, minusSign) {
		sign, rest = minusSign, rest[len(minusSign):]
	}
	whole, frac, dot := strings.Cut(rest, ".")
	if len(whole) > 3 {
		var b strings.Builder
		lead := len(whole) % 3
		if lead > 0 {
			b.WriteString(whole[:lead])
		}
		for i := lead; i < len(whole); i += 3 {
			if i > 0 {
				b.WriteString(thinSpace)
			}
			b.WriteString(whole[i : i+3])
		}
		whole = b.String()
	}
	if dot {
		return sign + whole + "." + frac
	}
	return sign + whole
}

// wholeText writes a count with thin spaces in the thousands.
func wholeText(n int) string {
	s := strconv.Itoa(n)
	if n < 0 {
		s = minusSign + s[1:]
	}
	return groupDigits(s)
}

// changeText writes a count with its sign: "+119", "−73", "0".
func changeText(n int) string {
	if n > 0 {
		return "+" + wholeText(n)
	}
	return wholeText(n)
}

// percentText writes a share as a whole percent. What is not wholly 0 or 1 never reads as such: "<" + thinSpace + "1%", ">" + thinSpace + "99%".
func percentText(share float64) string {
	switch {
	case math.IsNaN(share) || math.IsInf(share, 0):
		return "–"
	case share > 0 && share < 1 && fixed(100*share, 0) == "0":
		return "<" + thinSpace + "1%"
	case share > 0 && share < 1 && fixed(100*share, 0) == "100":
		return ">" + thinSpace + "99%"
	}
	return fixed(100*share, 0) + "%"
}

// percentCell writes a share for a table: whole percent, one decimal from 99 up.
func percentCell(share float64) string {
	switch {
	case share < 1 && fixed(100*share, 1) == "100.0":
		return ">" + thinSpace + "99.9%"
	case share >= 0.99 && share < 1:
		return fixed(100*share, 1) + "%"
	}
	return percentText(share)
}

// pText writes a p value: two significant digits down to .001, then "< .001".
func pText(p float64) string {
	switch {
	case math.IsNaN(p) || math.IsInf(p, 0):
		return "–"
	case p < 0.001:
		return "< .001"
	case p >= 0.995:
		return "> .99"
	}
	decimals := 2
	for limit := 0.0995; p < limit && decimals < 5; limit /= 10 {
		decimals++
	}
	return strings.TrimPrefix(fixed(p, decimals), "0")
}

// shareText writes a level such as alpha or a power target the way a sentence has it: ".05", ".025".
func shareText(x float64) string {
	s := strconv.FormatFloat(x, 'f', -1, 64)
	if len(s) > 8 {
		s = fixed(x, 4)
	}
	if len(s) == 3 { // .5 alone looks like a slip of the pen
		s += "0"
	}
	return strings.TrimPrefix(s, "0")
}

// moneyText writes a whole amount: a symbol stands before it, a word after it.
func moneyText(x float64, currency string) string {
	s := groupDigits(fixed(x, 0))
	switch {
	case currency == "":
		return s
	case len([]rune(currency)) == 1:
		return currency + s
	}
	return s + " " + currency
}

// chancesText writes a chance as cases: "8 chances in 10" where tenths say it, hundreds elsewhere.
func chancesText(share float64) string {
	hundred := int(math.Round(100 * share))
	switch {
	case share > 0 && hundred == 0:
		return "less than 1 chance in 100"
	case share < 1 && hundred == 100:
		return "more than 99 chances in 100"
	case hundred%10 == 0:
		return strconv.Itoa(hundred/10) + " chances in 10"
	}
	return strconv.Itoa(hundred) + " chances in 100"
}

// inHundred writes a chance as a count out of a hundred: "78 in 100".
func inHundred(share float64) string {
	hundred := int(math.Round(100 * share))
	switch {
	case share > 0 && hundred == 0:
		return "under 1 in 100"
	case share < 1 && hundred == 100:
		return "over 99 in 100"
	}
	return strconv.Itoa(hundred) + " in 100"
}

var smallNumbers = [...]string{"No", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight", "Nine", "Ten", "Eleven", "Twelve"}

// countWord writes a count at the head of a sentence: a word up to twelve.
func countWord(n int) string {
	if n >= 0 && n < len(smallNumbers) {
		return smallNumbers[n]
	}
	return wholeText(n)
}

// plural gives the noun for n things.
func plural(n int, one, many string) string {
	if n == 1 {
		return one
	}
	return many
}

var (
	proseMinus = regexp.MustCompile(`(^|[\s(\[])-(\.?\d)`)
	proseTail  = regexp.MustCompile(`\d*\.\d{5,}`)
	proseLong  = regexp.MustCompile(`(^|[\s(])(\d{5,})\b`)
)

// proseText sets the numbers of a sentence as the page sets its own: a true minus, thin spaces from five digits on
// (four may be a year).
func proseText(s string) string {
	s = proseMinus.ReplaceAllString(s, "${1}"+minusSign+"${2}")
	return proseLong.ReplaceAllStringFunc(s, func(m string) string {
		digits := strings.TrimLeft(m, " \t\n(")
		return m[:len(m)-len(digits)] + groupDigits(digits)
	})
}

// shortText cuts the long tails of numbers that a value was printed with: four decimals say enough on a page, and the
// full precision stands in the JSON and the workbook.
func shortText(s string) string {
	return proseTail.ReplaceAllStringFunc(s, func(m string) string {
		x, err := strconv.ParseFloat(m, 64)
		if err != nil || x < 0.001 {
			return m
		}
		return strings.TrimPrefix(strconv.FormatFloat(x, 'f', 4, 64), map[bool]string{true: "0", false: ""}[m[0] == '.'])
	})
}
