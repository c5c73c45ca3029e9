package plan

import (
	"fmt"
	"sort"

	"footing/meta"
	"footing/plan/result"
)

const (
	// manyGroups is the number of groups beyond which a column is no division into groups.
	manyGroups = 20
	// cumulativeLimit is the number of studies beyond which the cumulative mean is shown at the last study of each year alone.
	cumulativeLimit = 200
)

// groups pools each group of studies by itself, where the sheet or the plan divides them.
func (p *pooler) groups(out *result.Pool) {
	out.Subgroups = []result.Subgroup{}
	labels := make([]string, p.data.K())
	named := map[string]bool{}
	for i, at := range p.ev.Index {
		labels[i] = p.ev.Studies[at].Subgroup
		named[labels[i]] = true
	}
	if len(named) < 2 || len(named) > manyGroups || len(named) == p.data.K() && p.file.Pool.SubgroupBy == "" {
		return
	}
	groups, diff, err := p.data.Subgroups(labels, p.estimator, meta.SubgroupOptions{})
	if err != nil {
		return
	}
	smallest := p.data.K()
	for _, g := range groups {
		smallest = min(smallest, g.Data.K())
		out.Subgroups = append(out.Subgroups, p.group(g))
	}
	between := &result.Between{DF: diff.DF}
	if diff.Available {
		between.Q, between.P = number(diff.Q), number(diff.P)
	}
	switch {
	case p.data.K() < fewStudies:
		between.Weak = fmt.Sprintf("with %s a difference between groups can hardly be told from chance", countOf(p.data.K(), "study", "studies"))
	case smallest < 3:
		between.Weak = "a group of " + countOf(smallest, "study", "studies") + " says little about its own mean"
	}
	out.Between = between
}

func (p *pooler) group(g meta.Group) result.Subgroup {
	own := *p
	own.data, own.tau = g.Data, g.TauSquared
	tau := g.TauSquared.Value
	method := p.method
	if g.Data.K() < 2 {
		method = meta.Normal
	}
	s := result.Subgroup{Name: g.Name, K: g.Data.K(), Random: own.pooled(p.estimator.Name, own.mean(method, tau), &tau), Prediction: own.prediction(g.TauSquared)}
	if h := own.heterogeneity(); h.ISquared != nil {
		s.ISquared, s.TauSquared = h.ISquared, h.TauSquared
	}
	return s
}

// cumulative pools the studies up to each one, in order of year and then of row. It needs the year of every study.
func (p *pooler) cumulative() []result.CumulativePoint {
	out := []result.CumulativePoint{}
	order := make([]int, p.data.K())
	for i, at := range p.ev.Index {
		if p.ev.Studies[at].Year == nil {
			return out
		}
		order[i] = i
	}
	study := func(i int) *result.Study { return &p.ev.Studies[p.ev.Index[i]] }
	sort.SliceStable(order, func(a, b int) bool { return *study(order[a]).Year < *study(order[b]).Year })
	so := meta.Data{}
	for n, i := range order {
		so.Y, so.V = append(so.Y, p.data.Y[i]), append(so.V, p.data.V[i])
		last := n+1 == len(order) || *study(order[n+1]).Year != *study(i).Year
		if len(order) > cumulativeLimit && !last {
			continue
		}
		own := *p
		own.data = so
		in := own.mean(p.method, p.estimator.Estimate(so).Value)
		s := study(i)
		out = append(out, result.CumulativePoint{Row: s.Row, Study: s.Study, Year: s.Year, K: n + 1, Estimate: number(in.Estimate), Lower: number(in.Lower), Upper: number(in.Upper)})
	}
	return out
}
