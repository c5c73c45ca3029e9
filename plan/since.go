package plan

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"footing/internal/finding"
	"footing/plan/edition"
	"footing/plan/result"
)

// EvidencePath is the evidence file as the system finds it, "" where the plan names none.
func (f *File) EvidencePath() string {
	path := strings.TrimSpace(f.Evidence.File)
	if path == "" || f.Path == "" || filepath.IsAbs(path) {
		return path
	}
	return filepath.Join(filepath.Dir(f.Path), path)
}

// RunSince runs a plan and compares the result with the plan's last edition, where there is one.
func RunSince(f *File) (*result.Plan, error) {
	s, err := run(f, false)
	if err != nil {
		return nil, err
	}
	all, err := edition.Beside(f.Path).Read()
	if err != nil {
		return s.withBrokenEditions(err)
	}
	if last := edition.Latest(all); last != nil {
		now, err := s.edition(f)
		if err != nil {
			return nil, err
		}
		s.out.Edition = last.Number + 1
		s.out.Since = edition.Compare(last, now, f.rules(), s.frozen(last), all)
	}
	return s.out, nil
}

// withBrokenEditions gives the run without a comparison and says in its findings what is wrong with the editions.
func (s *stages) withBrokenEditions(err error) (*result.Plan, error) {
	var ps finding.Problems
	if !errors.As(err, &ps) {
		return nil, err
	}
	for i := range ps {
		ps[i].Place.File = filepath.Join(filepath.Base(filepath.Dir(ps[i].Place.File)), filepath.Base(ps[i].Place.File))
	}
	s.out.Findings = mergeFindings(s.out.Findings, ps)
	s.out.Undecided = undecided(s.out.Findings)
	return s.out, nil
}

// edition makes an edition out of the run, not yet kept.
func (s *stages) edition(f *File) (*edition.Edition, error) {
	text, err := readPlan(f.Path)
	if err != nil {
		return nil, err
	}
	e := edition.Of(s.out, text, Digest(f))
	e.Date = f.Date
	return e, nil
}

// Freeze runs a plan and keeps the run as its next edition.
func Freeze(f *File, date, by, why string, again bool) (*edition.Edition, error) {
	s, err := run(f, false)
	if err != nil {
		return nil, err
	}
	e, err := s.edition(f)
	if err != nil {
		return nil, err
	}
	e.Date, e.By, e.Why = date, by, why
	var evidence []byte
	if path := f.EvidencePath(); path != "" {
		if evidence, err = os.ReadFile(path); err != nil {
			return nil, err
		}
	}
	return e, edition.Beside(f.Path).Keep(e, evidence, again)
}

// rules are the plan's revision rules; with none, its own target stands in for them.
func (f *File) rules() edition.Rules {
	full, _ := f.WithDefaults()
	r := &f.ReviseWhen
	out := edition.Rules{AssuranceBelow: r.AssuranceBelow, PowerBelow: r.PowerBelow}
	out.NMovesBy, _ = ParseShare(r.NMovesBy)
	out.TauGrowsBy, _ = ParseShare(r.TauGrowsBy)
	out.EffectCrosses = r.EffectCrosses != nil && *r.EffectCrosses
	if out.AssuranceBelow != nil || out.PowerBelow != nil || out.NMovesBy > 0 || out.TauGrowsBy > 0 || out.EffectCrosses {
		return out
	}
	if full.Target.Assurance != nil {
		out.AssuranceBelow, out.TargetOf = full.Target.Assurance, "assurance"
		return out
	}
	out.PowerBelow, out.TargetOf = full.Target.Power, "power"
	return out
}

// Compare compares edition from with edition to of a plan. from 0 is the last edition, to 0 a run now. With apart, what
// moved the number to enrol is taken apart as well.
func Compare(f *File, from, to int, apart bool) (*result.Comparison, error) {
	all, err := edition.Beside(f.Path).Read()
	if err != nil {
		return nil, err
	}
	if len(all) == 0 {
		return nil, finding.Problems{{Severity: finding.Error, Kind: "no-edition", Place: finding.Place{File: f.Path},
			What: "the plan has no edition to compare with", Mend: "keep one with footing freeze"}}
	}
	pick := func(n int) (*edition.Edition, error) {
		if n < 1 || n > len(all) {
			return nil, finding.Problems{{Severity: finding.Error, Kind: "no-edition", Place: finding.Place{File: f.Path},
				What: fmt.Sprintf("there is no edition %d", n), Mend: fmt.Sprintf("there are editions 1 to %d", len(all))}}
		}
		return all[n-1], nil
	}
	a := edition.Latest(all)
	if from != 0 {
		if a, err = pick(from); err != nil {
			return nil, err
		}
	}
	if to == 0 {
		s, err := run(f, true)
		if err != nil {
			return nil, err
		}
		now, err := s.edition(f)
		if err != nil {
			return nil, err
		}
		return compared(f, s, a, now, all, apart), nil
	}
	b, err := pick(to)
	if err != nil {
		return nil, err
	}
	s, g, err := rerun(f, b)
	if err != nil {
		return nil, err
	}
	return compared(g, s, a, b, all, apart), nil
}

// compared compares an edition with a run of plan f.
func compared(f *File, s *stages, a, b *edition.Edition, all []*edition.Edition, apart bool) *result.Comparison {
	c := edition.Compare(a, b, f.rules(), s.frozen(a), all)
	x, y := a.Result.Size.Chosen, b.Result.Size.Chosen
	if apart && x != nil && y != nil && x.ToEnrol.Total != y.ToEnrol.Total {
		c.Move = decompose(f, a)
	}
	return c
}

// rerun runs an edition again from its own plan and its own copy of the evidence.
func rerun(f *File, e *edition.Edition) (*stages, *File, error) {
	g, err := Parse(f.Path, e.Plan.Text())
	if err != nil {
		return nil, nil, err
	}
	if e.Evidence != nil {
		path, err := filepath.Abs(filepath.Join(edition.Beside(f.Path).Dir, e.Evidence.Copy))
		if err != nil {
			return nil, nil, err
		}
		g.Evidence.File = path
	}
	s, err := run(g, true)
	return s, g, err
}
