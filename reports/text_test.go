package reports

import (
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode"
	"unicode/utf8"

	"footing/plan/result"
)

var updateTexts = flag.Bool("update-texts", false, "write the golden terminal texts anew")

// termTexts are all terminal texts of an invented plan.
func termTexts(p *result.Plan, o TextOptions) map[string]string {
	r := &result.Reading{Evidence: p.Pool.Evidence, Scale: p.Pool.Scale, Studies: p.Pool.Studies, Findings: p.Findings}
	return map[string]string{"plan": TextPlan(p, o), "pool": TextPool(p.Pool, o), "read": TextRead(r, o), "size": TextSize(&p.Size, o), "compare": TextCompare(p.Since, true, o)}
}

func TestTextsMatchTheirGoldenFiles(t *testing.T) {
	for name, got := range termTexts(inventedPlan(12, true), TextOptions{Wrote: []string{"report.html", "workbook.xlsx", "result.json", "protocol.txt"}}) {
		path := filepath.Join("testdata", "texts", name+".txt")
		if *updateTexts {
			if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
				t.Fatal(err)
			}
			if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
				t.Fatal(err)
			}
			continue
		}
		want, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if got != string(want) {
			t.Errorf("%s differs from %s (write it anew with -update-texts):\n%s", name, path, got)
		}
	}
}

// hostileLabel is what a label may hold: escapes, bells, marks that turn the reading direction, wide and combining signs.
const hostileLabel = "\x1b[31mred\x1b]0;title\x07 \u202egnp.exe \u200b\u2066 名前の長い研究 e\u0301\u0308 \r\nnew line\x00\x9b31m"

func TestNoTextIsWiderThanATerminal(t *testing.T) {
	for _, k := range []int{2, 3, 12, 60} {
		for _, log := range []bool{false, true} {
			p := inventedPlan(k, log)
			p.Title = hostileLabel + strings.Repeat(" long title", 20)
			for i := range p.Pool.Studies {
				p.Pool.Studies[i].Study = hostileLabel + p.Pool.Studies[i].Study
			}
			for i := range p.Findings {
				p.Findings[i].What += hostileLabel + strings.Repeat("wide", 40)
			}
			for name, text := range termTexts(p, TextOptions{}) {
				for _, l := range strings.Split(text, "\n") {
					if n := columnsOf(l); n > termWidth {
						t.Errorf("%s of %d studies: %d columns: %s", name, k, n, l)
					}
				}
			}
		}
	}
}

func TestHostileLabelsAreHarmless(t *testing.T) {
	p := inventedPlan(12, false)
	p.Title = hostileLabel
	for i := range p.Pool.Studies {
		p.Pool.Studies[i].Study = hostileLabel
	}
	for i := range p.Findings {
		p.Findings[i].What = hostileLabel
	}
	p.Since.Plan, p.Since.Added = hostileLabel, []result.StudyChange{{Study: hostileLabel}}
	for name, text := range termTexts(p, TextOptions{}) {
		if !utf8.ValidString(text) {
			t.Errorf("%s is no valid UTF-8", name)
		}
		for _, r := range text {
			if r != '\n' && (unicode.IsControl(r) || unicode.Is(unicode.Cf, r)) {
				t.Errorf("%s lets %U through", name, r)
				break
			}
		}
	}
}

// TestColourIsTheOnlyDifference: a coloured text without its escapes is the plain one.
func TestColourIsTheOnlyDifference(t *testing.T) {
	p := inventedPlan(12, false)
	plain, coloured := termTexts(p, TextOptions{}), termTexts(p, TextOptions{Colour: true})
	escapes := strings.NewReplacer(termEvidence, "", termPlan, "", termStrong, "", termOff, "")
	for name := range plain {
		if escapes.Replace(coloured[name]) != plain[name] {
			t.Errorf("%s changes with colour:\n%s\n%s", name, escapes.Replace(coloured[name]), plain[name])
		}
	}
	if !strings.Contains(coloured["plan"], termPlan) || strings.Contains(plain["plan"], "\x1b") {
		t.Error("colour is missing or stands in a plain text")
	}
}

func TestWrapKeepsEveryWord(t *testing.T) {
	s := "one two three 名前の長い研究 " + strings.Repeat("x", 95) + " end"
	lines := termWrap(s, 20)
	if got := strings.ReplaceAll(strings.Join(lines, ""), " ", ""); got != strings.ReplaceAll(s, " ", "") {
		t.Errorf("got %q", got)
	}
	for _, l := range lines {
		if columnsOf(l) > 20 {
			t.Errorf("%d columns: %q", columnsOf(l), l)
		}
	}
}

func TestForestPutsEffectsInOrder(t *testing.T) {
	a := textAxis{low: -1, high: 1}
	if a.column(-1) != 0 || a.column(1) != forestWidth-1 || a.column(0) != (forestWidth-1)/2 || a.column(-9) != 0 || a.column(9) != forestWidth-1 {
		t.Errorf("columns %d %d %d", a.column(-1), a.column(0), a.column(1))
	}
	p := &result.Pool{}
	x := 0.5
	row := []rune(a.draw(p, &x, &result.Interval{Lower: 0.25, Upper: 2}, '●', '─'))
	at := map[rune]int{}
	for i, r := range row {
		if _, seen := at[r]; !seen {
			at[r] = i
		}
	}
	if at['|'] != 13 || at['─'] != a.column(0.25) || at['●'] != a.column(0.5) || at['›'] != forestWidth-1 {
		t.Errorf("%q", string(row))
	}
}

func TestPowerIsReadOffBetweenPoints(t *testing.T) {
	points := []result.PowerPoint{{N: 10, Power: 0.2}, {N: 20, Power: 0.6}}
	if y, ok := powerAt(points, 15); !ok || y != 0.4 {
		t.Errorf("%v %t", y, ok)
	}
	if _, ok := powerAt(points, 21); ok {
		t.Error("read off beyond the curve")
	}
}
