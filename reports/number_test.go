package reports

import (
	"math"
	"testing"
)

// The expected texts follow the digits rule of the report: effects two decimals, p two significant digits down to
// .001, percents whole with one decimal from 99 up in tables, thin spaces in thousands, a true minus.
func TestNumbersAtRoundingEdges(t *testing.T) {
	type row struct{ got, want string }
	rows := []row{
		{effectText(0.385), "0.39"}, // 0.385 is 0.38500000000000000888 in binary
		{effectText(-0.004999), "0.00"},
		{effectText(0), "0.00"},
		{effectText(math.Copysign(0, -1)), "0.00"},
		{effectText(-0.0051), "−0.01"},
		{effectText(-0.15), "−0.15"},
		{effectText(99.999), "100.00"},
		{effectText(123.45), "123.5"},
		{effectText(-12345.6), "−12\u202f346"},
		{fixed(-0.0004, 2), "0.00"},
		{fixed(-0.006, 2), "−0.01"},
		{fixed(math.NaN(), 2), "–"},
		{fixed(math.Inf(-1), 2), "–"},
		{wholeText(999), "999"},
		{wholeText(1000), "1\u202f000"},
		{wholeText(-1234567), "−1\u202f234\u202f567"},
		{changeText(119), "+119"},
		{changeText(-73), "−73"},
		{changeText(0), "0"},
		{percentText(0), "0%"},
		{percentText(0.0049), "<\u202f1%"},
		{percentText(0.005), "<\u202f1%"}, // half to even gives 0, which it is not
		{percentText(0.0051), "1%"},
		{percentText(0.8049), "80%"},
		{percentText(0.9949), "99%"},
		{percentText(0.995), ">\u202f99%"},
		{percentText(1), "100%"},
		{percentCell(0.9899), "99%"},
		{percentCell(0.99), "99.0%"},
		{percentCell(0.9949), "99.5%"},
		{percentCell(0.9994), "99.9%"},
		{percentCell(0.9996), ">\u202f99.9%"},
		{percentCell(1), "100%"},
		{pText(0.00099), "< .001"},
		{pText(0.001), ".0010"},
		{pText(0.00994), ".0099"},
		{pText(0.00996), ".010"},
		{pText(0.0123), ".012"},
		{pText(0.0994), ".099"},
		{pText(0.0996), ".10"},
		{pText(0.5), ".50"},
		{pText(0.994), ".99"},
		{pText(0.9951), "> .99"},
		{shareText(0.05), ".05"},
		{shareText(0.025), ".025"},
		{shareText(0.8), ".80"},
		{moneyText(112640, "€"), "€112\u202f640"},
		{moneyText(112640.4, "crowns"), "112\u202f640 crowns"},
		{moneyText(950, ""), "950"},
		{chancesText(0.8), "8 chances in 10"},
		{chancesText(0.83), "83 chances in 100"},
		{chancesText(0.999), "more than 99 chances in 100"},
		{chancesText(0.001), "less than 1 chance in 100"},
		{countWord(11), "Eleven"},
		{countWord(13), "13"},
		{shortText("0.2103898843317597 (0.16542 to .2613)"), "0.2104 (0.1654 to .2613)"},
		{shortText("1.00000e-7 0.00000123"), "1.0000e-7 0.00000123"},
		{proseText("from -0.10 to 0.83 (-.2), 14458 people in 2024, DL-2"), "from −0.10 to 0.83 (−.2), 14\u202f458 people in 2024, DL-2"},
	}
	for i, r := range rows {
		if r.got != r.want {
			t.Errorf("row %d: got %q, want %q", i, r.got, r.want)
		}
	}
}
