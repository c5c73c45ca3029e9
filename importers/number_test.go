package importers

import (
	"strconv"
	"testing"

	"footing/meta/effect"
)

// The printed forms are those of journals and spreadsheets (common practice, no source); the values follow by reading
// them as a person would.
func TestParseNumber(t *testing.T) {
	for _, c := range []struct {
		text     string
		mark     decimalMark
		value    float64
		decimals int
		bound    effect.Bound
	}{
		{"12", 0, 12, 0, 0}, {" 12.30 ", 0, 12.3, 2, 0}, {".5", 0, 0.5, 1, 0}, {"5.", 0, 5, 0, 0}, {"-0.31", 0, -0.31, 2, 0},
		{"\u22120.31", 0, -0.31, 2, 0}, {"\u20130,31", 0, -0.31, 2, 0}, {"+0.31", 0, 0.31, 2, 0}, {"- 0.31", 0, -0.31, 2, 0},
		{"0,5", 0, 0.5, 1, 0}, {"0,123", 0, 0.123, 3, 0}, {"1,234.5", 0, 1234.5, 1, 0}, {"1.234,5", 0, 1234.5, 1, 0},
		{"1,234,567", 0, 1234567, 0, 0}, {"1 234", 0, 1234, 0, 0}, {"1\u00a0234,5", 0, 1234.5, 1, 0}, {"1\u202f234", 0, 1234, 0, 0},
		{"1'234", 0, 1234, 0, 0}, {"1\u2019234.5", 0, 1234.5, 1, 0}, {"1,234", '.', 1234, 0, 0}, {"1,234", ',', 1.234, 3, 0}, {"1.234", ',', 1234, 0, 0},
		{"1.234", '.', 1.234, 3, 0}, {"1.234", 0, 1.234, 3, 0}, {"<.001", 0, 0.001, 3, effect.Below}, {"< 0,001", 0, 0.001, 3, effect.Below},
		{"≤.05", 0, 0.05, 2, effect.Below}, {">0.05", 0, 0.05, 2, effect.Above}, {"= .03", 0, 0.03, 2, 0}, {"25%", 0, 25, 0, 0}, {"12.5 %", 0, 12.5, 1, 0},
		{"0.45*", 0, 0.45, 2, 0}, {"0.45**", 0, 0.45, 2, 0}, {"0.45†", 0, 0.45, 2, 0}, {"1e-5", 0, 1e-5, 5, 0}, {"1.2E-04", 0, 1.2e-4, 5, 0}, {"3E+02", 0, 300, 0, 0},
		{"1.2 x 10^-4", 0, 1.2e-4, 5, 0}, {"1.2×10-4", 0, 1.2e-4, 5, 0}, {"１２．５", 0, 12.5, 1, 0}, {"0\u00b745", 0, 0.45, 2, 0}, {"\u200b12", 0, 12, 0, 0},
	} {
		n, fault := parseNumber(c.text, c.mark)
		if fault != numberFine || n.value != c.value || n.decimals != c.decimals || n.bound != c.bound {
			t.Errorf("%q (mark %q): %+v, fault %d; want %v with %d decimals", c.text, c.mark, n, fault, c.value, c.decimals)
		}
	}
}

func TestParseNumberRefuses(t *testing.T) {
	for text, want := range map[string]numberFault{
		"NaN": numberNot, "Inf": numberNot, "+Inf": numberNot, "infinity": numberNot, "0x10": numberNot, "0x1p-2": numberNot, "1_000": numberNot,
		"0b11": numberNot, "0o7": numberNot, "1e": numberNot, "e5": numberNot, "--5": numberNot, "1.2.3": numberNot, "1,23,456": numberNot, "12 34": numberNot,
		"1.234.5": numberNot, "12abc": numberNot, "~24": numberNot, "24 (of 30)": numberNot, "12-15": numberNot, "3/4": numberNot, ".": numberMissing, ",": numberNot,
		"": numberMissing, "NA": numberMissing, "n/a": numberMissing, "\u2013": numberMissing, "NR": numberMissing, "1,234": numberAmbiguous, "-1,234": numberAmbiguous,
		"1e999": numberRange, "-1e999": numberRange, "1e99999": numberNot, "<": numberNot, "%": numberNot, "*": numberNot, "0,5,1": numberNot,
	} {
		if n, fault := parseNumber(text, 0); fault != want {
			t.Errorf("%q: fault %d (%+v), want %d", text, fault, n, want)
		}
	}
}

// The short way and the full grammar must give the same number.
func TestPlainNumberAgrees(t *testing.T) {
	for _, s := range []string{"0", "12", "-12.5", "0.1", ".5", "5.", "-0", "123456789012345", "0.00000000000001", "3.14159265358979", "999999999999999", "-.25", "1234567.25", "0.30", "1.005", "2.675"} {
		n, ok := plainNumber(s)
		if want, err := strconv.ParseFloat(s, 64); !ok || err != nil || n.value != want {
			t.Errorf("%q: %v (%v), want %v", s, n.value, ok, want)
		}
		if full, fault := parseNumber(" "+s, '.'); fault != numberFine || full != n {
			t.Errorf("%q: %+v and %+v", s, n, full)
		}
	}
	for _, s := range []string{"", "-", ".", "1.2.3", "1e5", "+1", "1234567890123456", "1,5", " 1", "--1", "-."} {
		if n, ok := plainNumber(s); ok {
			t.Errorf("%q: %+v", s, n)
		}
	}
}
