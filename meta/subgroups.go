package meta

import (
	"fmt"
	"sort"

	"footing/internal/num"
)

// Group is the pooling of one group of studies.
type Group struct {
	Name       string
	Data       Data
	Index      []int // of the studies in the whole
	TauSquared TauSquared
	Mean       Mean
}

// Difference is the test of whether groups differ.
type Difference struct {
	Q         float64
	DF        int
	P         float64
	Available bool
	Why       string
}

// SubgroupOptions say how groups are pooled. The zero value gives each its own tau-squared.
type SubgroupOptions struct {
	// CommonTauSquared takes one tau-squared for all groups: the pooled within-group moment estimate, (sum Q_g - sum df_g)/sum C_g cut at 0 (Borenstein et al. 2009, ch. 19).
	CommonTauSquared bool
}

// Subgroups pools the studies of each label, labels in alphabetical order, and tests the differences of their means: sum W_g (m_g - m)^2 with W_g = 1/SE_g^2, normal
// theory, chi-square with groups - 1 degrees of freedom (Borenstein et al. 2009, eq. 19.33 and following). labels has one entry a study.
func (d Data) Subgroups(labels []string, e Estimator, opt SubgroupOptions) ([]Group, Difference, error) {
	if len(labels) != d.K() {
		return nil, Difference{}, fmt.Errorf("%d labels for %d studies", len(labels), d.K())
	}
	at := map[string]int{}
	var groups []Group
	for i, l := range labels {
		g, seen := at[l]
		if !seen {
			g = len(groups)
			at[l] = g
			groups = append(groups, Group{Name: l})
		}
		groups[g].Data.Y = append(groups[g].Data.Y, d.Y[i])
		groups[g].Data.V = append(groups[g].Data.V, d.V[i])
		groups[g].Index = append(groups[g].Index, i)
	}
	sort.Slice(groups, func(a, b int) bool { return groups[a].Name < groups[b].Name })
	shared := commonTauSquared(groups)
	for i := range groups {
		g := &groups[i]
		g.TauSquared = shared
		if !opt.CommonTauSquared {
			g.TauSquared = e.Estimate(g.Data)
		}
		g.Mean = g.Data.MeanAt(g.TauSquared.Value)
	}
	return groups, difference(groups), nil
}

func commonTauSquared(groups []Group) TauSquared {
	var q, c num.Accumulator
	for _, g := range groups {
		if g.Data.K() > 1 {
			q.Add(g.Data.MeanAt(0).Q - float64(g.Data.K()-1))
			c.Add(g.Data.spread())
		}
	}
	if !(c.Value() > 0) {
		return TauSquared{Converged: true, Why: "no group has two studies; 0 is used"}
	}
	return closedForm(q.Value() / c.Value())
}

// difference pools the groups' means as if they were studies; its Q is the test.
func difference(groups []Group) Difference {
	if len(groups) < 2 {
		return Difference{Why: "there is one group only"}
	}
	var means Data
	for _, g := range groups {
		means.Y = append(means.Y, g.Mean.Estimate)
		means.V = append(means.V, g.Mean.StandardError*g.Mean.StandardError)
	}
	h := means.Heterogeneity()
	return Difference{Q: h.Q, DF: h.DF, P: h.P, Available: true}
}
