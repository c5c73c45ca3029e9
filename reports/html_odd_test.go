package reports

import (
	"regexp"
	"strings"
	"testing"

	"footing/plan/result"
)

// oddPlans are results that lack what a report usually has.
func oddPlans() map[string]*result.Plan {
	odd := map[string]*result.Plan{}
	add := func(name string, change func(*result.Plan)) {
		p := inventedPlan(12, false)
		change(p)
		odd[name] = p
	}
	odd["nothing at all"] = &result.Plan{}
	odd["one study"], odd["two studies"] = inventedPlan(1, true), inventedPlan(2, false)
	add("no evidence", func(p *result.Plan) {
		p.Pool, p.Since, p.Size.Assurance = nil, nil, nil
		p.Range.Curve, p.Range.AdjustedCurve, p.Range.Distribution, p.Range.Adjusted = nil, nil, nil, nil
		p.Range.Scenarios, p.Size.Cases, p.Size.Curves = p.Range.Scenarios[2:3], p.Size.Cases[2:3], p.Size.Curves[2:3]
	})
	add("no size", func(p *result.Plan) {
		p.Size.Chosen, p.Size.Why, p.AnswerNo = nil, "the pooled effect lies at or beyond no effect", "no size exists"
		p.Size.Levers, p.Size.Sensitivity, p.Size.NeedCurve = nil, nil, nil
	})
	add("no range", func(p *result.Plan) { p.Range = nil })
	add("not pooled", func(p *result.Plan) {
		p.Pool.Random, p.Pool.Common = result.Pooled{Why: "one study alone"}, result.Pooled{Why: "one study alone"}
		p.Pool.Prediction = result.Prediction{Why: "fewer than three studies"}
		p.Pool.Heterogeneity, p.Pool.Influence, p.Pool.Estimators, p.Pool.SmallStudy = result.Heterogeneity{}, nil, nil, nil
	})
	add("unequal groups", func(p *result.Plan) {
		n := result.N{Total: 300, Groups: []int{200, 100}}
		p.Size.Chosen.N, p.Size.Chosen.ToEnrol = n, n
		for i := range p.Size.Cases {
			if p.Size.Cases[i].N != nil {
				p.Size.Cases[i].N, p.Size.Cases[i].ToEnrol, p.Size.Cases[i].At80, p.Size.Cases[i].At90 = &n, &n, &n, &n
			}
		}
	})
	add("one group", func(p *result.Plan) {
		n := result.N{Total: 90, Groups: []int{90}}
		p.Size.Chosen.N, p.Size.Chosen.ToEnrol = n, n
	})
	add("example rows", func(p *result.Plan) { p.Pool.Evidence.Examples = []string{"Example one", "Example two"} })
	add("non-inferiority", func(p *result.Plan) { p.Size.Study.Aim = "non-inferiority" })
	add("no costs", func(p *result.Plan) { p.Size.Study.Cost, p.Size.Chosen.Cost = nil, nil })
	add("damaged grid", func(p *result.Plan) { p.Size.Grid.Layers[1].Power = p.Size.Grid.Layers[1].Power[:3] })
	add("no years, bias or people", func(p *result.Plan) {
		for i := range p.Pool.Studies {
			s := &p.Pool.Studies[i]
			s.Year, s.RiskOfBias, s.NTreatment, s.NControl, s.Relevance = nil, "", nil, nil, nil
		}
	})
	return odd
}

var unwritten = regexp.MustCompile(`<nil>|%!|\bNaN\b|\+Inf|ZgotmplZ|0x[0-9a-f]{6,}|  +\.|\.\.|: \.|<p class="lead"></p>`)

func TestOddPlans(t *testing.T) {
	for name, p := range oddPlans() {
		page, err := HTML(p)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		text := string(page)
		if i := strings.Index(text, "<script>"); i > 0 {
			text = text[:i]
		}
		text = text[strings.Index(text, "</style>"):]
		if found := unwritten.FindString(text); found != "" {
			i := strings.Index(text, found)
			t.Errorf("%s: the page holds %q: …%s…", name, found, text[max(0, i-80):min(len(text), i+80)])
		}
		for _, f := range Figures(p) {
			if svg, err := f.SVG(); err != nil || unwritten.Match(svg) {
				t.Errorf("%s: figure %s: %v %q", name, f.Name, err, unwritten.Find(svg))
			}
		}
	}
	if _, err := HTML(nil); err == nil {
		t.Error("a page was written of nothing")
	}
}

func TestBannersAndAnswers(t *testing.T) {
	odd := oddPlans()
	for name, wants := range map[string][]string{
		"example rows":    {"Two rows of the evidence sheet still are the example", "Example one; Example two"},
		"no size":         {"No size", "The answer is no: no size exists"},
		"unequal groups":  {"200 split lesson, 100 whole lesson", "people in the first group"},
		"one group":       {"in one group"},
		"non-inferiority": {"not worse by more than the margin"},
		"no evidence":     {"no prior studies", "There is no evidence sheet"},
		"no costs":        {"8 chances in 10", "In people: 56 of 100 in the group ‘split lesson’ would do better than one person picked from the group ‘whole lesson’."},
	} {
		page, err := HTML(odd[name])
		if err != nil {
			t.Fatal(err)
		}
		for _, want := range wants {
			if !strings.Contains(string(page), want) {
				t.Errorf("%s: the page does not say %q", name, want)
			}
		}
	}
	page, _ := HTML(odd["damaged grid"])
	if strings.Contains(string(page), "try-data") {
		t.Error("a panel stands on a damaged grid")
	}
	page, _ = HTML(inventedPlan(12, false))
	if !strings.Contains(string(page), "invented") {
		t.Error("nothing says that the data are invented")
	}
}
