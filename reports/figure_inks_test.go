package reports

import (
	"crypto/sha256"
	"encoding/hex"
	"math"
	"strconv"
	"strings"
	"testing"
)

// linear gives the linear-light parts of a colour (IEC 61966-2-1).
func linear(t *testing.T, hexColour string) [3]float64 {
	t.Helper()
	v, err := strconv.ParseUint(strings.TrimPrefix(hexColour, "#"), 16, 32)
	if err != nil {
		t.Fatal(err)
	}
	var out [3]float64
	for i, part := range []uint64{v >> 16 & 255, v >> 8 & 255, v & 255} {
		c := float64(part) / 255
		if c <= 0.04045 {
			out[i] = c / 12.92
		} else {
			out[i] = math.Pow((c+0.055)/1.055, 2.4)
		}
	}
	return out
}

// contrast is the contrast ratio of WCAG 2.2: (lighter + 0.05) / (darker + 0.05) of the relative luminances.
func contrast(t *testing.T, a, b string) float64 {
	l := func(c [3]float64) float64 { return 0.2126*c[0] + 0.7152*c[1] + 0.0722*c[2] }
	x, y := l(linear(t, a)), l(linear(t, b))
	return (math.Max(x, y) + 0.05) / (math.Min(x, y) + 0.05)
}

// The formula itself: black on white is 21 to 1, and #777777 on white 4.48 to 1 (WCAG's own example of a grey that
// just fails 4.5, recalled from memory).
func TestContrastFormula(t *testing.T) {
	if c := contrast(t, "#000000", "#ffffff"); math.Abs(c-21) > 1e-9 {
		t.Error(c)
	}
	if c := contrast(t, "#777777", "#ffffff"); math.Abs(c-4.48) > 0.005 {
		t.Error(c)
	}
}

// Text keeps 4.5 to 1 on everything that it stands on, marks 3 to 1 (WCAG 2.2, 1.4.3 and 1.4.11).
func TestContrast(t *testing.T) {
	for name, m := range map[string]map[ink]string{"light": lightInks, "dark": darkInks} {
		for _, paper := range []ink{inkPaper, inkEvidenceWash, inkPlanWash} {
			for _, i := range []ink{inkText, inkSoft, inkEvidence, inkPlan} {
				if c := contrast(t, m[i], m[paper]); c < 4.5 {
					t.Errorf("%s: %s on %s is %.2f to 1", name, i, paper, c)
				}
			}
		}
		if c := contrast(t, m[inkFaint], m[inkPaper]); c < 3 {
			t.Errorf("%s: faint marks are %.2f to 1", name, c)
		}
	}
}

// The two inks stay apart for the usual kinds of colour blindness. Matrices of Viénot, Brettel & Mollon 1999 for
// protan and deutan vision in linear RGB, recalled from memory; the distance is in the same space, so that only a
// clear difference passes.
func TestInksForColourBlind(t *testing.T) {
	kinds := map[string][3][3]float64{
		"protan": {{0.11238, 0.88762, 0}, {0.11238, 0.88762, 0}, {0.00401, -0.00401, 1}},
		"deutan": {{0.29275, 0.70725, 0}, {0.29275, 0.70725, 0}, {-0.02234, 0.02234, 1}},
	}
	for name, m := range map[string]map[ink]string{"light": lightInks, "dark": darkInks} {
		for kind, k := range kinds {
			see := func(i ink) [3]float64 {
				c := linear(t, m[i])
				var out [3]float64
				for r := range k {
					for j := range c {
						out[r] += k[r][j] * c[j]
					}
					out[r] = math.Cbrt(math.Max(0, out[r])) // roughly as seen
				}
				return out
			}
			a, b := see(inkEvidence), see(inkPlan)
			if d := math.Sqrt(math.Pow(a[0]-b[0], 2) + math.Pow(a[1]-b[1], 2) + math.Pow(a[2]-b[2], 2)); d < 0.25 {
				t.Errorf("%s, %s: the inks are %.2f apart", name, kind, d)
			}
		}
	}
}

// The chart script is the one that its build recorded.
func TestChartScriptIsAsBuilt(t *testing.T) {
	sum := sha256.Sum256([]byte(asset("chart.js")))
	recorded, _, _ := strings.Cut(asset("chart.js.sha256"), " ")
	if got := hex.EncodeToString(sum[:]); got != recorded {
		t.Errorf("the script has SHA-256 %s, its build recorded %s", got, recorded)
	}
	for _, bad := range []string{"</script", "<!--", "eval(", "new Function"} {
		if strings.Contains(asset("chart.js"), bad) || strings.Contains(asset("panel.js"), bad) {
			t.Errorf("a script holds %q", bad)
		}
	}
}
