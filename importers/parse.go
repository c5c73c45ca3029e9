package importers

// ParseNumber reads one number as people print it: Unicode signs, thousands marks, a decimal comma where it can't be a
// thousands mark, a percent sign (left off, the value is not divided). What a programming language would take beyond
// that (NaN, Inf, 0x10) is no number.
func ParseNumber(text string) (float64, bool) {
	n, fault := parseNumber(text, '.')
	return n.value, fault == numberFine
}
