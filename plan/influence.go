package plan

import (
	"footing/importers"
	"footing/internal/num"
	"footing/plan/result"
	"footing/power"
)

// influenceSized bounds the studies for which the plan is sized anew.
const influenceSized = 60

// withoutEach says what the plan would ask for without each study: people a group, people to enrol, cost.
func (s *stages) withoutEach(p *result.Plan) {
	if s.pool == nil || s.lean {
		return
	}
	rows := s.pool.Influence
	rows = rows[:min(len(rows), influenceSized)]
	if !s.restsOnEvidence(p) {
		for i := range rows {
			c := p.Size.Chosen
			enrol := c.ToEnrol.Total
			rows[i].PerGroup, rows[i].ToEnrol, rows[i].Cost = c.N.Groups, &enrol, c.Cost
		}
		return
	}
	num.Chunks(len(rows), func(i int) { s.without(&rows[i]) })
}

// restsOnEvidence: the size for a given effect moves with no study, unless a value of the planned study is pooled.
func (s *stages) restsOnEvidence(p *result.Plan) bool {
	c := p.Size.Chosen
	if c == nil || c.Basis == "assurance" {
		return true
	}
	for _, a := range []*Assumed{s.file.Study.SD, s.file.Study.ControlRisk, s.file.Study.BaselineCorrelation, s.file.Study.Dropout} {
		if a != nil && a.Pool != "" {
			return true
		}
	}
	if c.ScenarioWhy != "" { // the scenario asked for fell below the smallest worthwhile effect, and might not without a study
		return true
	}
	_, own := s.file.Range.Scenarios[c.Scenario]
	return c.Scenario != "smallest-worthwhile" && !own
}

// without sizes the plan without the study of one row.
func (s *stages) without(row *result.Influence) {
	ev := leaveOut(s.ev, row.Row)
	pool, err := leanPool(s.file, ev, s.built.UsesAdjusted || s.file.Target.SizeFor == "small-study-adjusted")
	if err != nil {
		row.Why = err.Error()
		return
	}
	built, err := BuildRange(s.file, ev, pool)
	if err != nil {
		row.Why = err.Error()
		return
	}
	z, err := newSizer(s.file, s.info, ev.Nuisance)
	if err != nil {
		row.Why = err.Error()
		return
	}
	z.built = built
	for _, sc := range built.Scenarios {
		if sc.Target {
			s.sizeWithout(row, z, sc)
		}
	}
}

// sizeWithout takes the size for a scenario, and that for the assurance target where it asks for more.
func (s *stages) sizeWithout(row *result.Influence, z *sizer, sc result.Scenario) {
	c := z.sizeCase(sc.Effect, z.set)
	if c.N == nil {
		row.Why = c.Why
		return
	}
	groups := c.N.Groups
	used := z.built.Unadjusted
	if z.built.UsesAdjusted && z.built.Adjusted != nil {
		used = z.built.Adjusted
	}
	if t := s.file.Target.Assurance; t != nil && used != nil {
		a := power.Assurer{Design: z.design, Sign: z.sign}
		if n, err := a.NForAssurance(z.scaled(used), *t, assuranceLimit); err == nil && n > groups[0] {
			groups = z.design.Groups(n)
		}
	}
	enrol := enrolled(groups, z.set.dropout)
	row.PerGroup, row.ToEnrol, row.Cost = groups, &enrol.Total, z.cost(enrol)
}

// leanPool pools what the range rests on and leaves out everything that is only shown.
func leanPool(f *File, ev *EvidenceRead, adjusted bool) (*result.Pool, error) {
	p, err := newPooler(f, ev)
	if err != nil {
		return nil, err
	}
	tau := p.tau.Value
	out := &result.Pool{Evidence: ev.Evidence, Scale: ev.Info, Level: p.level, K: p.data.K()}
	out.Random = p.pooled(p.estimator.Name, p.mean(p.method, tau), &tau)
	if adjusted {
		out.SmallStudy = p.smallStudies()
	}
	return out, nil
}

// leaveOut is the evidence without the record of one row of the sheet.
func leaveOut(ev *EvidenceRead, row int) *EvidenceRead {
	out := *ev
	sheet := *ev.Sheet
	sheet.Records = make([]importers.Record, 0, len(ev.Sheet.Records))
	out.Sheet, out.Studies, out.Estimates, out.Index = &sheet, nil, nil, nil
	at := map[int]int{}
	for i, st := range ev.Studies {
		if st.Row == row {
			continue
		}
		at[i] = len(out.Studies)
		out.Studies = append(out.Studies, st)
		if i < len(ev.Sheet.Records) {
			sheet.Records = append(sheet.Records, ev.Sheet.Records[i])
		}
	}
	for k, i := range ev.Index {
		if j, kept := at[i]; kept {
			out.Estimates = append(out.Estimates, ev.Estimates[k])
			out.Index = append(out.Index, j)
		}
	}
	out.Nuisance = poolNuisance(&out)
	return &out
}
