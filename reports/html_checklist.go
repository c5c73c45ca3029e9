package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// asked is one item that published standards ask of a planning report, and where this report holds it.
type asked struct {
	what, by string
	where    string // "" when it is for the reader to supply
	no       string // why it does not apply, "" when it does
}

// checklist says of each item that the standards ask where it stands, or that it is still to be supplied.
func (w writer) checklist(sections []section) *section {
	items := w.askedItems()
	titles := map[string]string{"answer": "the answer"}
	for _, s := range sections {
		titles[s.ID] = "‘" + s.Title + "’"
	}
	t := &tableView{Caption: "Item by item", Head: []string{"no.", "what is asked", "by", "where"}, Text: 4, Wide: true}
	here, missing, not := 0, 0, 0
	for i, a := range items {
		row := tableRow{Cells: []string{fmt.Sprint(i + 1), a.what, a.by, ""}}
		title, found := titles[a.where]
		switch {
		case a.no != "":
			not++
			row.Cells[3] = "does not apply: " + a.no
		case a.where != "" && found:
			here++
			row.Cells[3] = title
		default:
			missing++
			row.Cells[3], row.Strong = "to be supplied by you", true
		}
		t.Rows = append(t.Rows, row)
	}
	lead := fmt.Sprintf("Of %d items that the standards for protocols, reviews and sample sizes ask between them, %d stand in this report", len(items), here)
	if missing > 0 {
		lead += fmt.Sprintf(", %d %s to be supplied by you", missing, plural(missing, "is", "are"))
	}
	if not > 0 {
		lead += fmt.Sprintf(", %d %s not apply", not, plural(not, "does", "do"))
	}
	return &section{ID: "checklist", Title: "What the standards ask, and where it is", Lead: lead + ".",
		Blocks: []block{{Table: t, Class: "rows", Margin: []note{{"A list, not a verdict", "That an item stands here does not say that it is good. Item numbers of SPIRIT and CONSORT are those of 2025."}}}}}
}

// presence is what the checklist asks of a result.
type presence struct {
	p    *result.Plan
	pool *result.Pool
	st   result.Planned
}

func (w writer) askedItems() []asked {
	h := presence{p: w.p, pool: w.p.Pool, st: w.p.Size.Study}
	if h.pool == nil {
		h.pool = &result.Pool{}
	}
	return append(h.evidenceItems(), h.sizeItems()...)
}

// standsAt gives the section when the thing is there.
func standsAt(there bool, section string) string {
	if there {
		return section
	}
	return ""
}

// evidenceItems are those that the prior studies have to meet.
func (h presence) evidenceItems() []asked {
	none := ""
	if h.p.Pool == nil {
		none = "there is no evidence sheet"
	}
	flipped := false
	for _, s := range h.pool.Studies {
		flipped = flipped || s.Flipped
	}
	small := ""
	if h.p.Pool != nil && len(h.pool.SmallStudy) == 0 {
		small = "too few studies"
	}
	groups := none
	if groups == "" && len(h.pool.Subgroups) < 2 {
		groups = "the plan asks for none"
	}
	items := []asked{
		{"Primary outcome and comparison, with the attributes of the estimand", "DELTA2, ICH E9 and E9(R1)", standsAt(len(h.st.Estimand) > 0, "size"), ""},
		{"Search date, the rule for which studies count, studies used and left out", "DELTA2, PRISMA 13a", standsAt(h.pool.Evidence.Searched != nil && h.pool.Evidence.Searched.Date != "" && h.pool.Evidence.Searched.Rule != "", "data"), none},
		{"For each study what was reported, what was computed and how, imputed values marked", "PRISMA 13b and 19, Cochrane Handbook 6", standsAt(len(h.pool.Studies) > 0, "data"), none},
		{"Direction and scale aligned, reversals listed", "Cochrane Handbook 10", standsAt(h.pool.Scale.Favours != "" || flipped, "data"), none},
		{"How clusters, crossovers, several arms and repeated outcomes were handled in each study", "Cochrane Handbook 23", standsAt(hasFinding(h.p, "cluster", "crossover", "same-study", "arms", "shared-control"), "data"), none},
		{"Forest plot with people, effect, interval and weight of each study", "PRISMA 13c and 19", standsAt(len(h.pool.Studies) > 0, "evidence"), none},
		{"Common-effect and random-effects results, and why one is used", "PRISMA 13d and 20b", standsAt(h.pool.Random.Estimate != nil && h.pool.Common.Estimate != nil, "evidence"), none},
		{"Q, degrees of freedom, p, τ² and I² with intervals; a warning when studies are few", "PRISMA 20b, Cochrane Handbook 10", standsAt(h.pool.Heterogeneity.Q != nil && h.pool.Heterogeneity.TauSquared != nil, "evidence"), none},
		{"Prediction interval, or why it is withheld", "Cochrane Handbook 10", standsAt(h.pool.Prediction.Interval != nil || h.pool.Prediction.Why != "", "evidence"), none},
		{"Small-study and adjusted results; below ten studies no test, said plainly", "PRISMA 14 and 21, Cochrane Handbook 13", standsAt(len(h.pool.SmallStudy) > 0, "inflated"), first(none, small)},
		{"Subgroup or regression results, with the rule of ten studies for each covariate", "PRISMA 13e and 20c", standsAt(len(h.pool.Subgroups) > 1, "evidence"), groups},
		{"Sensitivity: leaving one study out, other models, other imputations", "PRISMA 13f and 20d", standsAt(len(h.pool.Influence) > 0 || len(h.pool.Estimators) > 0, "evidence"), none},
		{"Size of one adequately powered trial against the total so far", "GRADE imprecision", standsAt(h.pool.Participants != nil && h.p.Size.Chosen != nil, "evidence"), none},
	}
	return items
}

// sizeItems are those that the planned study has to meet.
func (h presence) sizeItems() []asked {
	c := h.p.Size.Chosen
	w := worthwhileOf(h.p)
	notTrial := func(when bool, why string) string {
		if when {
			return ""
		}
		return why
	}
	natural := h.st.SD != nil || h.st.ControlRisk != nil || h.p.Size.Scale.Name == "mean-difference"
	pilot := false
	for _, a := range h.p.Assumptions {
		pilot = pilot || strings.Contains(strings.ToLower(a.Source), "pilot")
	}
	return []asked{
		{"Target difference in natural units and standardized, or both proportions, or the control curve with follow-up and accrual", "DELTA2 3a to 3c", standsAt(natural, "size"), ""},
		{"Whether the target is important, realistic or both, who says so, and how it was found", "DELTA2, ICH E9 3.5", standsAt(w != nil && w.Source != "" && w.Who != "", "answer"), ""},
		{"Significance level, sides, power, test, allocation, null and working hypothesis", "DELTA2, ICH E9 3.5", standsAt(h.st.Alpha > 0 && h.p.Size.Test.Words != "", "size"), ""},
		{"Each nuisance value with its source and an interval", "ICH E9 3.5, CONSORT for clusters 7a", standsAt(len(h.st.Assumptions) > 0 && allSourced(h.st.Assumptions), "data"), notTrial(len(h.st.Assumptions) > 0, "the test needs none")},
		{"The size before and after each allowance, a line each, whole people in each group", "DELTA2 5, SPIRIT 19", standsAt(c != nil && len(c.Trail) > 0, "size"), ""},
		{"Size or power over a range of effects and of nuisance values; table and curve", "DELTA2, ICH E9 3.5", standsAt(len(h.p.Size.Curves) > 0 && len(h.p.Size.Cases) > 1, "size"), ""},
		{"The size at both 80 and 90% power", "SPIRIT 19, example", standsAt(anyCase(h.p, func(k result.Case) bool { return k.At80 != nil && k.At90 != nil }), "size"), ""},
		{"Smallest effect that would be significant, and smallest detectable, at the size", "Lakens 2022", standsAt(c != nil && c.SmallestSignificant != nil && c.SmallestDetectable != nil, "size"), ""},
		{"The kind of justification, named", "Lakens 2022", standsAt(h.p.Justification != "", "size"), ""},
		{"Clusters: number, size, equal or not, intracluster correlation and how sure it is", "CONSORT for clusters 7a", "", notTrial(h.st.Arrangement == "clusters" || h.st.Arrangement == "stepped-wedge", "no clusters are planned")},
		{"Interim looks, boundaries, what they cost", "CONSORT 16b", "", "no interim look is planned"},
		{"The margin and its reason", "ICH E9 3.5", standsAt(w != nil && w.Why != "", "answer"), notTrial(h.st.Aim == "non-inferiority" || h.st.Aim == "equivalence", "the aim is "+words(h.st.Aim))},
		{"How people who leave are handled, in line with the estimand", "ICH E9 and E9(R1)", standsAt(hasText(h.st.Estimand, "intercurrent"), "size"), ""},
		{"Values that come from a pilot, flagged", "Leon, Davis & Kraemer 2011", standsAt(pilot, "data"), notTrial(pilot, "no source names a pilot")},
		{"Weaknesses of the prior research, and what the plan does about them", "NIH guidance on rigor", standsAt(len(h.p.Threats) > 0, "answer"), ""},
		{"Formula or simulation with its reference, seed, program and version", "DELTA2 5, PRISMA 13d", standsAt(len(h.p.Methods) > 0 && h.p.Tool.Version != "", "data"), ""},
		{"Wording ready for a protocol, a results paper and a grant", "DELTA2 8, JARS", standsAt(c != nil, "words"), ""},
	}
}

func first(a, b string) string {
	if a != "" {
		return a
	}
	return b
}

func hasFinding(p *result.Plan, parts ...string) bool {
	for _, f := range p.Findings {
		for _, s := range parts {
			if strings.Contains(f.Kind, s) {
				return true
			}
		}
	}
	return false
}

func hasText(ts []result.NamedText, part string) bool {
	for _, t := range ts {
		if strings.Contains(strings.ToLower(t.Name), part) && t.Text != "" {
			return true
		}
	}
	return false
}

func allSourced(as []result.Assumption) bool {
	for _, a := range as {
		if a.Source == "" || a.Assumed {
			return false
		}
	}
	return true
}

func anyCase(p *result.Plan, is func(result.Case) bool) bool {
	for _, c := range p.Size.Cases {
		if is(c) {
			return true
		}
	}
	return false
}
