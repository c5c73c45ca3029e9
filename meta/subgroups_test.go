package meta

import (
	"math"
	"testing"
)

// TestSubgroupsByHand: with tau-squared 0 everywhere the between-group Q is the total Q less the sum of the groups' own (Cochran's decomposition).
func TestSubgroupsDecomposeQ(t *testing.T) {
	d := Data{Y: []float64{0.1, 0.5, 0.2, 0.9, 0.3}, V: []float64{1, 2, 4, 3, 5}}
	e, _ := EstimatorByName("")
	groups, diff, err := d.Subgroups([]string{"b", "a", "b", "a", "b"}, e, SubgroupOptions{})
	if err != nil {
		t.Fatal(err)
	}
	within := 0.0
	for _, g := range groups {
		if g.TauSquared.Value != 0 {
			t.Fatalf("group %s has tau-squared %g", g.Name, g.TauSquared.Value)
		}
		within += g.Mean.Q
	}
	if want := d.MeanAt(0).Q - within; math.Abs(diff.Q-want) > 1e-14 || diff.DF != 1 {
		t.Errorf("Q between %.15g with %d df, want %.15g with 1", diff.Q, diff.DF, want)
	}
	if groups[0].Name != "a" || groups[0].Index[1] != 3 {
		t.Errorf("groups %+v", groups)
	}
}

// TestCommonTauSquaredOfEqualGroups: two copies of one group have that group's own moment estimate in common.
func TestCommonTauSquaredOfEqualGroups(t *testing.T) {
	y, v := []float64{0.1, 0.9, -0.4, 0.6}, []float64{0.01, 0.03, 0.02, 0.05}
	e, _ := EstimatorByName("")
	d := Data{Y: append(append([]float64{}, y...), y...), V: append(append([]float64{}, v...), v...)}
	groups, diff, err := d.Subgroups([]string{"a", "a", "a", "a", "b", "b", "b", "b"}, e, SubgroupOptions{CommonTauSquared: true})
	if err != nil {
		t.Fatal(err)
	}
	own := e.Estimate(Data{Y: y, V: v}).Value
	if got := groups[1].TauSquared.Value; math.Abs(got-own) > 1e-15 || diff.Q > 1e-15 {
		t.Errorf("tau-squared %.15g, Q %g; want %.15g and 0", got, diff.Q, own)
	}
	if _, _, err := d.Subgroups([]string{"a"}, e, SubgroupOptions{}); err == nil {
		t.Error("labels that don't fit the studies are no error")
	}
}
