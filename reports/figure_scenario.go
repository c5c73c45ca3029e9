package reports

import (
	"strings"

	"footing/plan/result"
)

// pen is how a scenario is drawn: its ink and its dash, the same in every figure.
type pen struct {
	ink   ink
	dash  string
	width float64
}

// scenarioPens gives each scenario its pen: evidence's ink or the plan's, and a dash of its own within the ink.
func scenarioPens(r *result.Range) map[string]pen {
	pens := map[string]pen{}
	if r == nil {
		return pens
	}
	dashes := []string{"", "6 3", "2 3", "9 3 2 3", "1 4"}
	used := map[ink]int{}
	for _, s := range r.Scenarios {
		i := inkEvidence
		if s.Plan {
			i = inkPlan
		}
		p := pen{ink: i, dash: dashes[used[i]%len(dashes)], width: 1.8}
		used[i]++
		pens[s.Name] = p
	}
	return pens
}

// scenarioOf finds a scenario by name.
func scenarioOf(p *result.Plan, name string) *result.Scenario {
	if p.Range == nil {
		return nil
	}
	for i := range p.Range.Scenarios {
		if p.Range.Scenarios[i].Name == name {
			return &p.Range.Scenarios[i]
		}
	}
	return nil
}

// scenarioWords are the plain words for a scenario's token.
func scenarioWords(p *result.Plan, name string) string {
	if s := scenarioOf(p, name); s != nil && s.Words != "" {
		return s.Words
	}
	return strings.ReplaceAll(name, "-", " ")
}

// firstGroup is the size of the first group, 0 where there is none.
func firstGroup(n *result.N) int {
	switch {
	case n == nil:
		return 0
	case len(n.Groups) > 0:
		return n.Groups[0]
	}
	return n.Total
}

// equalGroups says whether all groups have one size.
func equalGroups(n *result.N) bool {
	if n == nil {
		return false
	}
	for _, g := range n.Groups {
		if g != n.Groups[0] {
			return false
		}
	}
	return len(n.Groups) > 0
}

// groupWords names what a curve over n counts: people per group, in the first group where groups differ, or people.
func groupWords(p *result.Plan) string {
	if c := p.Size.Chosen; c != nil {
		switch {
		case len(c.N.Groups) < 2:
			return "people"
		case !equalGroups(&c.N):
			if len(p.Size.Study.Groups) > 0 {
				return "people in the first group (" + clipRunes(p.Size.Study.Groups[0], 30) + ")"
			}
			return "people in the first group"
		}
	}
	return "people per group"
}

// groupsText writes the groups of n: "275 a group", or "200 + 100".
func groupsText(n *result.N) string {
	switch {
	case n == nil:
		return "–"
	case len(n.Groups) < 2:
		return wholeText(n.Total)
	case equalGroups(n):
		return wholeText(n.Groups[0])
	}
	parts := make([]string, len(n.Groups))
	for i, g := range n.Groups {
		parts[i] = wholeText(g)
	}
	return strings.Join(parts, " + ")
}

// totalText writes the total of n, or a dash.
func totalText(n *result.N) string {
	if n == nil {
		return "–"
	}
	return wholeText(n.Total)
}
