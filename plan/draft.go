package plan

import (
	"fmt"
	"path/filepath"
	"strconv"
	"strings"

	"footing/meta/effect"
)

// DraftFor writes the plan that goes with a bare evidence sheet: every guess stands in it with the word assumed, so
// that a person can replace it. path is where the draft belongs, beside the sheet.
func DraftFor(sheet, name string) (path string, text []byte, err error) {
	ev, err := ReadSheet(sheet, name)
	if err != nil {
		return "", nil, err
	}
	base := strings.TrimSuffix(filepath.Base(sheet), filepath.Ext(sheet))
	path = filepath.Join(filepath.Dir(sheet), base+"-plan.yaml")
	var b strings.Builder
	line := func(format string, a ...any) { fmt.Fprintf(&b, format+"\n", a...) }
	line("# Drafted by footing from %s alone. Whatever says \"assumed\" is a guess:", oneLine(filepath.Base(sheet)))
	line("# replace it, or give its source. The keys are explained by: footing new")
	line("title: %s", quoteYAML("Study after "+base))
	line("seed: 1")
	line("")
	line("evidence:")
	line("  file: %s", quoteYAML(filepath.Base(sheet)))
	if ev.Sheet.Name != "" {
		line("  sheet: %s", quoteYAML(ev.Sheet.Name))
	}
	line("  higher is better: %t   # assumed from the side on which the average of the studies lies", draftHigher(sheet, name))
	line("")
	line("pool:")
	line("  scale: %s   # assumed from what the rows report", ev.Scale)
	line("  heterogeneity: %s", defaultHeterogeneity)
	line("  interval: %s", defaultInterval)
	line("")
	line("range:")
	line("  basis: %s", defaultBasis)
	line("  # smallest worthwhile effect: {value: .., source: .., who: ..}   # ask those whom it concerns")
	line("")
	line("study:")
	outcome := outcomeOf(ev.Scale)
	if outcome == "" {
		outcome = "continuous"
	}
	line("  outcome: %s   # assumed from the scale", outcome)
	line("  arrangement: %s   # assumed", defaultArrangement)
	line("  allocation: %s   # assumed", defaultAllocation)
	line("  aim: %s   # assumed", defaultAim)
	line("  sides: %s   # assumed", defaultSides)
	line("  alpha: %v   # assumed", defaultAlpha)
	draftNuisance(ev, line)
	line("")
	line("target:")
	line("  power: %s   # assumed", strconv.FormatFloat(defaultPower, 'f', 2, 64))
	line("  size for: %s   # assumed", defaultSizeFor)
	return path, []byte(b.String()), nil
}

// draftHigher guesses that the studies' average lies on the better side: a study is planned to show what they showed.
func draftHigher(sheet, name string) bool {
	p, err := Pooled(&File{Evidence: Evidence{File: sheet, Sheet: name}})
	return err != nil || p.Random.Estimate == nil || *p.Random.Estimate >= p.Scale.NoEffect
}

// draftNuisance takes from the sheet what the outcome needs besides the effect.
func draftNuisance(ev *EvidenceRead, line func(string, ...any)) {
	want := map[effect.Scale][2]string{
		effect.MeanDifference: {"standard deviation", "control sd"},
		effect.LogOddsRatio:   {"control risk", "control risk"},
		effect.LogRiskRatio:   {"control risk", "control risk"},
		effect.RiskDifference: {"control risk", "control risk"},
	}[ev.Scale]
	if want[0] == "" {
		return
	}
	if _, ok := ev.Nuisance[want[1]]; ok {
		line("  %s: {pool: %s}   # from the sheet itself", want[0], want[1])
	}
}

func oneLine(s string) string {
	return strings.Map(func(r rune) rune {
		if r < ' ' || r == 0x7f || r == 0x85 || r == 0x2028 || r == 0x2029 {
			return '?'
		}
		return r
	}, s)
}

// quoteYAML writes a text as a double-quoted YAML scalar.
func quoteYAML(s string) string {
	return `"` + strings.NewReplacer(`\`, `\\`, `"`, `\"`).Replace(oneLine(s)) + `"`
}
