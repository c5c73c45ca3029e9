package plan

import (
	"sort"
	"strings"

	"footing/importers"
	"footing/plan/result"
)

// Method is one entry of the manual.
type Method = result.Method

// Methods gives the whole manual, sorted by group and name.
func Methods() []Method {
	out := append([]Method{}, manual...)
	for i := range out {
		if out[i].Also == nil {
			out[i].Also = []string{}
		}
	}
	order := map[string]int{}
	for i, g := range methodGroups {
		order[g] = i
	}
	sort.SliceStable(out, func(i, j int) bool {
		if a, b := order[out[i].Group], order[out[j].Group]; a != b {
			return a < b
		}
		return out[i].Name < out[j].Name
	})
	return out
}

// FindMethod looks an entry up by any of its names; near is the closest name when there is none.
func FindMethod(name string) (m Method, near string, ok bool) {
	want := foldName(name)
	if strings.HasPrefix(want, "selection-model-at-") { // named after the chance that a plan gives
		want = "selection-model-given"
	}
	var names []string
	for _, x := range manual {
		for _, n := range append([]string{x.Name, x.Words}, x.Also...) {
			if foldName(n) == want {
				return x, "", true
			}
			names = append(names, foldName(n))
		}
	}
	if near = importers.Nearest(want, names); near == "" {
		for _, n := range names {
			if want != "" && strings.Contains(n, want) {
				return Method{}, n, false
			}
		}
	}
	return Method{}, near, false
}

func foldName(s string) string {
	return strings.Join(strings.FieldsFunc(strings.ToLower(s), func(r rune) bool { return r == ' ' || r == '-' || r == '_' }), "-")
}

// methodsUsed lists the entries of the methods that a result names, in the manual's order.
func methodsUsed(p *result.Plan) []result.MethodUsed {
	used := map[string]bool{}
	use := func(names ...string) {
		for _, n := range names {
			if m, _, ok := FindMethod(n); ok && n != "" {
				used[m.Name] = true
			}
		}
	}
	if p.Pool != nil {
		use(p.Pool.Scale.Name, p.Pool.Random.Method, p.Pool.Common.Method, "prediction-interval")
		for _, m := range []*result.Pooled{p.Pool.MantelHaenszel, p.Pool.Peto} {
			if m != nil && m.Estimate != nil {
				use(m.Method)
			}
		}
		if iv := p.Pool.Random.Interval; iv != nil {
			use(iv.Method)
		}
		for _, s := range p.Pool.Studies {
			if s.Used {
				use(s.Route)
			}
		}
		for _, s := range p.Pool.SmallStudy {
			if s.Why == "" {
				use(s.Name)
			}
		}
	}
	if p.Range != nil {
		use(p.Range.Basis, p.Range.AdjustedBy)
		for _, s := range p.Range.Scenarios {
			use(s.Name)
		}
	}
	use(p.Size.Test.Name, p.Size.Study.Aim, p.Size.Study.Arrangement)
	if p.Size.Assurance != nil && p.Size.Assurance.AtChosen != nil {
		use("assurance")
	}
	if p.Size.Study.Dropout > 0 {
		use("dropout")
	}
	out := []result.MethodUsed{}
	for _, m := range Methods() {
		if used[m.Name] {
			out = append(out, result.MethodUsed{Name: m.Name, Words: m.Words, Assumes: m.Assumes, Misleads: m.Misleads, Reference: m.Reference})
		}
	}
	return out
}
