package plan

import (
	"strings"
	"testing"

	"footing/meta"
	"footing/meta/effect"
)

// TestEveryMethodHasAnEntry: what a plan or a result can name, the manual explains.
func TestEveryMethodHasAnEntry(t *testing.T) {
	want := append([]string{}, meta.IntervalMethods()...)
	for _, e := range meta.Estimators() {
		want = append(want, e.Name)
	}
	for _, s := range effect.Scales() {
		want = append(want, string(s))
		want = append(want, effect.Routes(s)...)
	}
	want = append(want, bases...)
	want = append(want, ownScenarios...)
	for _, name := range want {
		if m, _, ok := FindMethod(name); !ok || m.Name != name {
			t.Errorf("%s has no entry in the manual", name)
		}
	}
}

func TestEveryEntryIsWhole(t *testing.T) {
	groups := map[string]bool{}
	for _, g := range methodGroups {
		groups[g] = true
	}
	seen := map[string]bool{}
	for _, m := range Methods() {
		for field, text := range map[string]string{"words": m.Words, "assumes": m.Assumes, "misleads": m.Misleads, "reference": m.Reference} {
			if strings.TrimSpace(text) == "" {
				t.Errorf("%s: %s is empty", m.Name, field)
			}
		}
		if !groups[m.Group] {
			t.Errorf("%s: group %q is not in the list", m.Name, m.Group)
		}
		for _, n := range append([]string{m.Name}, m.Also...) {
			if seen[foldName(n)] || m.Name != foldName(m.Name) {
				t.Errorf("%s: the name %q is taken or not in its plain form", m.Name, n)
			}
			seen[foldName(n)] = true
		}
	}
}

func TestEveryTestOfAStudyHasAnEntry(t *testing.T) {
	for _, b := range []BareSpec{{}, {BaselineR: 0.5}, {Test: "z"}, {Arrangement: "paired"}, {Arrangement: "single-group"},
		{Outcome: "binary", ControlRisk: 0.3, Effects: []float64{0.6}}, {Outcome: "binary", ControlRisk: 0.3, Effects: []float64{0.6}, Test: "fisher-exact"}} {
		if b.Effects == nil {
			b.Effects = []float64{0.5}
		}
		s, err := SizeBare(b)
		if err != nil {
			t.Fatalf("%+v: %v", b, err)
		}
		for _, name := range []string{s.Test.Name, s.Study.Arrangement} {
			if m, _, ok := FindMethod(name); !ok || m.Name != name {
				t.Errorf("%s has no entry in the manual", name)
			}
		}
	}
}

func TestEveryCheckOfSmallStudiesHasAnEntry(t *testing.T) {
	p := mustRun(t, folder(t, inventedPlan, inventedCounts))
	if len(p.Pool.SmallStudy) < 3 {
		t.Errorf("only %d checks", len(p.Pool.SmallStudy))
	}
	for _, s := range p.Pool.SmallStudy {
		if _, _, ok := FindMethod(s.Name); !ok {
			t.Errorf("%s has no entry in the manual", s.Name)
		}
	}
}
