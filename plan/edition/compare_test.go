package edition

import (
	"strings"
	"testing"

	"footing/plan/result"
)

func cell(address, heading, meaning, text string) result.Cell {
	return result.Cell{Address: address, Heading: heading, Meaning: meaning, Text: text}
}

func study(row int, name, n, mean string) result.Study {
	at := string(rune('0' + row))
	return result.Study{Row: row, Study: name, Used: true, Place: result.Place{Sheet: "S", Cell: "row " + at},
		Cells: []result.Cell{cell("A"+at, "study", "study", name), cell("B"+at, "n", "n", n), cell("C"+at, "Mean", "", mean)}}
}

func num(x float64) *float64 { return &x }

// planOf is an invented result: the pooled effect, tau and the n of its studies.
func planOf(effect, tau float64, n int, studies ...result.Study) *result.Plan {
	p := &result.Plan{File: "plan.yaml", Pool: &result.Pool{Studies: studies, K: len(studies), Random: result.Pooled{Estimate: num(effect)},
		Heterogeneity: result.Heterogeneity{Tau: num(tau)}}, Range: &result.Range{SmallestWorthwhile: &result.Worthwhile{Effect: 0.3}}}
	if n > 0 {
		p.Size.Chosen = &result.Chosen{N: result.N{Total: n, Groups: []int{n / 2, n / 2}}, ToEnrol: result.N{Total: n, Groups: []int{n / 2, n / 2}}}
	}
	return p
}

func editionOf(number int, p *result.Plan, options ...result.NamedText) *Edition {
	return &Edition{Number: number, Plan: Source{File: "plan.yaml"}, Options: options, Result: p}
}

func TestStudiesAreFollowedToNewRows(t *testing.T) {
	a := planOf(0.4, 0.1, 100, study(2, "Ash", "10", "4"), study(3, "Birch", "20", "5"), study(4, "Cedar", "30", "6"), study(5, "Elm", "40", "7"))
	b := planOf(0.4, 0.1, 100, study(2, "New", "99", "9"), study(3, "cedar", "30", "6.5"), study(4, "Ash", "10", "4"), study(5, "Elm, revised", "40", "7"))
	c := Compare(editionOf(1, a), editionOf(0, b), Rules{}, Frozen{}, nil)
	if len(c.Added) != 1 || c.Added[0].Study != "New" || len(c.Dropped) != 1 || c.Dropped[0].Study != "Birch" {
		t.Errorf("added %v, dropped %v", c.Added, c.Dropped)
	}
	got := map[string]string{}
	for _, s := range c.Changed {
		for _, v := range s.Cells {
			got[s.Study] += v.Name + ": " + v.From + " to " + v.To + ";"
		}
	}
	want := map[string]string{"cedar": "study (A3): Cedar to cedar;Mean (C3): 6 to 6.5;", "Elm, revised": "study (A5): Elm to Elm, revised;"}
	if len(got) != len(want) || got["cedar"] != want["cedar"] || got["Elm, revised"] != want["Elm, revised"] {
		t.Errorf("changed %v", got)
	}
}

func TestRowsOfOneStudyAreMatchedByContent(t *testing.T) {
	a := planOf(0.4, 0.1, 0, study(2, "Ash", "10", "4"), study(3, "Ash", "20", "5"))
	b := planOf(0.4, 0.1, 0, study(2, "Ash", "20", "5"), study(3, "Ash", "10", "4.5"))
	c := Compare(editionOf(1, a), editionOf(0, b), Rules{}, Frozen{}, nil)
	if len(c.Added)+len(c.Dropped) != 0 || len(c.Changed) != 1 || c.Changed[0].Cells[0].From != "4" {
		t.Errorf("%+v", c.Changed)
	}
}

func TestAColumnMoreIsAChangeOnlyWhereItSaysSomething(t *testing.T) {
	x, y := study(2, "Ash", "10", "4"), study(2, "Ash", "10", "4")
	y.Cells = append(y.Cells, cell("D2", "country", "", "FR"), cell("E2", "notes", "notes", " "))
	y.Used, y.Why = false, "retracted"
	got := change(&x, &y)
	if len(got) != 2 || got[0].Name != "country (D2)" || got[0].From != "" || got[0].To != "FR" || got[1].To != "no: retracted" {
		t.Errorf("%+v", got)
	}
}

func TestOptions(t *testing.T) {
	got := options([]result.NamedText{{Name: "a", Text: "1"}, {Name: "b", Text: "2"}}, []result.NamedText{{Name: "b", Text: "3"}, {Name: "c", Text: "4"}})
	want := []result.ValueChange{{Name: "b", From: "2", To: "3"}, {Name: "c", To: "4"}, {Name: "a", From: "1"}}
	if len(got) != 3 || got[0] != want[0] || got[1] != want[1] || got[2] != want[2] {
		t.Errorf("%+v", got)
	}
}

func TestRevisionRules(t *testing.T) {
	was := planOf(0.4, 0.10, 100, study(2, "Ash", "10", "4"))
	for name, c := range map[string]struct {
		is        *result.Plan
		rules     Rules
		frozen    Frozen
		triggered bool
		text      string
	}{
		"power holds":             {was, Rules{PowerBelow: num(0.8), TargetOf: "power"}, Frozen{Power: num(0.8)}, false, "it is 80%"},
		"power falls":             {was, Rules{PowerBelow: num(0.8)}, Frozen{Power: num(0.7999)}, true, "power of the frozen n below 80%"},
		"assurance falls":         {was, Rules{AssuranceBelow: num(0.6)}, Frozen{Assurance: num(0.59)}, true, "it is 59%"},
		"assurance can't be said": {was, Rules{AssuranceBelow: num(0.6)}, Frozen{Why: "too few studies"}, true, "too few studies"},
		"n moves up":              {planOf(0.4, 0.1, 110), Rules{NMovesBy: 0.1}, Frozen{}, true, "+10%"},
		"n moves down":            {planOf(0.4, 0.1, 88), Rules{NMovesBy: 0.1}, Frozen{}, true, "-12%"},
		"n moves a little":        {planOf(0.4, 0.1, 109), Rules{NMovesBy: 0.1}, Frozen{}, false, "+9%"},
		"n vanishes":              {planOf(0.4, 0.1, 0), Rules{NMovesBy: 0.1}, Frozen{}, true, "no size exists any more"},
		"effect crosses":          {planOf(0.29, 0.1, 100), Rules{EffectCrosses: true}, Frozen{}, true, "it did"},
		"effect stays":            {planOf(0.31, 0.1, 100), Rules{EffectCrosses: true}, Frozen{}, false, "it did not"},
		"tau grows":               {planOf(0.4, 0.15, 100), Rules{TauGrowsBy: 0.5}, Frozen{}, true, "0.100 to 0.150"},
		"tau grows a little":      {planOf(0.4, 0.149, 100), Rules{TauGrowsBy: 0.5}, Frozen{}, false, "+49%"},
	} {
		got := Compare(editionOf(1, was), editionOf(0, c.is), c.rules, c.frozen, nil)
		if len(got.Rules) != 1 {
			t.Errorf("%s: %d rules", name, len(got.Rules))
			continue
		}
		r := got.Rules[0]
		if got.Triggered != c.triggered || r.Triggered != c.triggered || !strings.Contains(r.Rule+": "+r.Text, c.text) {
			t.Errorf("%s: triggered %t, %q %q", name, got.Triggered, r.Rule, r.Text)
		}
		if strings.Contains(got.Line, "no revision rule triggered") == c.triggered {
			t.Errorf("%s: %q", name, got.Line)
		}
	}
}

func TestLineAndHistory(t *testing.T) {
	a, b := planOf(0.4, 0.1, 100, study(2, "Ash", "10", "4")), planOf(0.35, 0.1, 130, study(2, "Ash", "10", "4"), study(3, "Birch", "20", "5"))
	c := Compare(editionOf(1, a), editionOf(2, b), Rules{}, Frozen{}, []*Edition{editionOf(1, a), editionOf(2, b), editionOf(3, b)})
	if c.Line != "1 study added; average 0.40 to 0.35; to enrol 100 to 130 (+30%); no revision rule triggered" {
		t.Errorf("%q", c.Line)
	}
	if len(c.History) != 2 || c.History[0].K != 1 || c.History[1].Edition.Number != 2 || *c.History[1].Estimate != 0.35 {
		t.Errorf("%+v", c.History)
	}
}
