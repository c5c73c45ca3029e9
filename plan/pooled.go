package plan

import (
	"footing/internal/finding"
	"footing/plan/result"
)

// Pooled reads and pools the evidence of a plan, and goes no further.
func Pooled(given *File) (*result.Pool, error) {
	if ps := given.check(); len(ps) > 0 && given.Path == "" { // flags; a file was checked when it was loaded
		return nil, ps
	}
	f, _ := given.WithDefaults()
	f.Evidence.HigherBetter = given.Evidence.HigherBetter // so that the assumption of a direction stays a finding
	ev, err := ReadEvidence(f)
	if err != nil {
		return nil, err
	}
	p, err := PoolStudies(f, ev)
	if err != nil {
		return nil, err
	}
	p.Tool = ThisTool()
	p.Findings = mergeFindings(ev.Findings, p.Findings)
	return p, nil
}

// mergeFindings puts lists together, each finding once, worst first.
func mergeFindings(lists ...[]finding.Finding) []finding.Finding {
	out, seen := []finding.Finding{}, map[string]bool{}
	for _, l := range lists {
		for _, x := range l {
			if key := x.ID() + "\x00" + x.What; !seen[key] {
				seen[key] = true
				out = append(out, x)
			}
		}
	}
	finding.Sort(out)
	return out
}
