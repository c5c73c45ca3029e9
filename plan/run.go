package plan

import (
	"fmt"
	"path/filepath"
	"sort"
	"strings"

	"footing/internal/finding"
	"footing/plan/result"
)

// Run goes the whole way: evidence, pooling, plausible range, size, and what could make the size wrong. The error says
// why the input can't be used; everything less than that is a finding of the result. The same plan and the same sheet
// give the same result, byte for byte.
func Run(f *File) (*result.Plan, error) {
	s, err := run(f, false)
	if err != nil {
		return nil, err
	}
	return s.out, nil
}

// stages holds one run with everything that later questions about it need.
type stages struct {
	file  *File // with defaults
	ev    *EvidenceRead
	pool  *result.Pool
	built *BuiltRange
	info  result.ScaleInfo
	out   *result.Plan
	lean  bool // only the size, nothing that a report alone shows
}

func run(given *File, lean bool) (*stages, error) {
	f, assumptions := given.WithDefaults()
	s := &stages{file: f, lean: lean}
	if f.Evidence.File != "" {
		ev, err := ReadEvidence(f)
		if err != nil {
			return nil, err
		}
		s.ev = ev
	}
	return s.compute(given, assumptions)
}

// compute does everything that follows from the plan and the evidence as read.
func (s *stages) compute(given *File, assumptions []result.Assumption) (*stages, error) {
	f, err := s.file, error(nil)
	if s.ev != nil {
		s.info = s.ev.Info
		if s.pool, err = PoolStudies(f, s.ev); err != nil {
			return nil, err
		}
	} else if s.info, err = scaleWithoutEvidence(f); err != nil {
		return nil, err
	}
	if f.Study.Outcome == "" {
		f.Study.Outcome = outcomeFor(s)
		assumptions = append(assumptions, result.Assumption{Name: "study: outcome", Value: f.Study.Outcome, Why: "follows from the scale of the evidence, " + s.info.Words,
			Assumed: true, Place: result.Place{File: given.Path}})
	}
	if s.built, err = BuildRange(f, s.ev, s.pool); err != nil {
		return nil, err
	}
	sizing := SizeStudy
	if s.lean {
		sizing = sizeOnly
	}
	size, err := sizing(f, s.info, s.built, s.nuisance())
	if err != nil {
		return nil, err
	}
	s.out = s.assemble(given, size, assumptions)
	return s, nil
}

// scaleWithoutEvidence is the scale of a plan that rests on a smallest worthwhile effect alone.
func scaleWithoutEvidence(f *File) (result.ScaleInfo, error) {
	if f.Pool.Scale == "" {
		return scaleInfo(scaleOf(f.Study.Outcome), f.Evidence), nil
	}
	scale, err := parseScale(f)
	if err != nil {
		return result.ScaleInfo{}, err
	}
	return scaleInfo(scale, f.Evidence), nil
}

func outcomeFor(s *stages) string {
	name := s.info.Name
	if s.ev != nil {
		name = string(s.ev.Scale)
	}
	for _, scale := range scaleOrder {
		if string(scale) == name {
			if o := outcomeOf(scale); o != "" {
				return o
			}
		}
	}
	return "continuous"
}

// assemble puts the document together.
func (s *stages) assemble(given *File, size *result.Size, assumptions []result.Assumption) *result.Plan {
	f := s.file
	p := &result.Plan{Schema: "footing/plan/1", Tool: ThisTool(), File: filepath.Base(given.Path), SHA256: given.SHA256, Title: f.Title, Question: f.Question,
		Date: f.Date, Seed: f.Seed, Invented: f.Invented, Justification: f.Target.Justification, Pool: s.pool, Size: *size,
		Threats: []result.Threat{}, Cautions: []string{}, Methods: []result.MethodUsed{}}
	p.Size.Tool = ThisTool()
	if s.pool != nil {
		s.pool.Tool = ThisTool()
	}
	if s.built != nil {
		p.Range = s.built.Range
		sayInPeople(p.Range, s.info)
	}
	p.Assumptions = withoutRepeats(assumptions, size.Study.Assumptions)
	p.Findings = s.findings(size)
	p.Undecided = undecided(p.Findings)
	p.AnswerNo = answerNo(p)
	s.withoutEach(p)
	p.Threats = threats(p)
	p.Cautions = cautions(p)
	p.Methods = methodsUsed(p)
	withoutFolder(p, given.Path)
	return p
}

// withoutFolder names the plan by its own name everywhere, so that a result does not depend on where it was run from.
func withoutFolder(p *result.Plan, path string) {
	base := filepath.Base(path)
	mend := func(at *result.Place) {
		if at.File == path {
			at.File = base
		}
	}
	lists := [][]result.Finding{p.Findings, p.Size.Findings}
	if p.Pool != nil {
		lists = append(lists, p.Pool.Findings)
	}
	for _, l := range lists {
		for i := range l {
			mend(&l[i].Place)
		}
	}
	for _, l := range [][]result.Assumption{p.Assumptions, p.Size.Study.Assumptions} {
		for i := range l {
			mend(&l[i].Place)
		}
	}
}

// withoutRepeats leaves out what the planned study lists itself.
func withoutRepeats(all, study []result.Assumption) []result.Assumption {
	listed := map[string]bool{}
	for _, a := range study {
		listed[strings.ToLower(strings.TrimPrefix(a.Name, "study: "))] = true
	}
	out := []result.Assumption{}
	for _, a := range all {
		if name, ok := strings.CutPrefix(a.Name, "study: "); ok && listed[strings.ToLower(name)] {
			continue
		}
		out = append(out, a)
	}
	return out
}

// findings gathers those of all stages, each once, worst first.
func (s *stages) findings(size *result.Size) []finding.Finding {
	var ev, pool []finding.Finding
	if s.ev != nil {
		ev = s.ev.Findings
	}
	if s.pool != nil {
		pool = s.pool.Findings
	}
	return mergeFindings(ev, pool, s.built.Findings, size.Findings, s.shownOnly())
}

// shownOnly says which given keys are shown but move no figure.
func (s *stages) shownOnly() []finding.Finding {
	if s.file.Pool.Relevance == "" || s.ev == nil {
		return nil
	}
	return []finding.Finding{{Severity: finding.Note, Kind: "relevance-not-weighted", Place: s.file.At("pool: relevance"),
		What: "pool: relevance: the column is shown and can be used in keep where:, but does not weight the studies", Mend: "leave far-off studies out with keep where: [\"relevance >= 0.75\"]"}}
}

// undecided counts the errors and warnings that nobody has answered.
func undecided(fs []finding.Finding) int {
	n := 0
	for _, x := range fs {
		if x.Severity != finding.Note && x.Decision == nil {
			n++
		}
	}
	return n
}

// answerNo says why the plan has no size, "" when it has one.
func answerNo(p *result.Plan) string {
	if p.Size.Chosen != nil {
		return ""
	}
	if p.Size.Why != "" {
		return p.Size.Why
	}
	return "no size exists for the scenario that the plan is sized for"
}

// cautions are printed with every plan.
func cautions(p *result.Plan) []string {
	var out []string
	if p.Invented {
		out = append(out, "The studies of this plan are invented for demonstration: it says nothing about any real treatment.")
	}
	if p.Pool != nil && len(p.Pool.Evidence.Examples) > 0 {
		out = append(out, fmt.Sprintf("The sheet still holds %s of a new plan (%s): replace them before anything is read from this.",
			countOf(len(p.Pool.Evidence.Examples), "example row", "example rows"), strings.Join(p.Pool.Evidence.Examples, ", ")))
	}
	out = append(out, "A sample size in research with people or animals is subject to ethics review, local regulation and a qualified statistician's judgement; this report replaces none of them.",
		"Power and assurance are chances if the assumptions hold.")
	if p.Pool != nil {
		out = append(out, "Effects found before may not carry over to a new setting; an adjusted effect is what is left if that method's assumption holds, not the truth.")
	}
	return out
}

func countOf(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

// Digest names the options of a plan as they were used, sorted, for comparing editions.
func Digest(f *File) []result.NamedText {
	full, _ := f.WithDefaults()
	out := optionsOf(full)
	sort.Slice(out, func(i, j int) bool { return out[i].Name < out[j].Name })
	return out
}
