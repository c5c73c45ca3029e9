package plan_test

import (
	"math"
	"os"
	"path/filepath"
	"testing"

	"footing/plan"
)

// TestGroupsAndCumulativeMean: invented rows out of order; every mean is worked by hand (equal variances make it the plain one).
func TestGroupsAndCumulativeMean(t *testing.T) {
	path := filepath.Join(t.TempDir(), "groups.csv")
	text := "study,year,subgroup,estimate,standard error\nC,2012,night,0.5,0.5\nA,2001,day,0.1,0.5\nD,2015,night,0.7,0.5\nB,2007,day,0.3,0.5\n"
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	ev, err := plan.ReadSheet(path, "")
	if err != nil {
		t.Fatal(err)
	}
	p, err := plan.PoolStudies(&plan.File{}, ev)
	if err != nil {
		t.Fatal(err)
	}
	if len(p.Subgroups) != 2 || p.Subgroups[0].Name != "day" || p.Subgroups[1].K != 2 {
		t.Fatalf("groups %+v", p.Subgroups)
	}
	for i, want := range []float64{0.2, 0.6} {
		if got := *p.Subgroups[i].Random.Estimate; math.Abs(got-want) > 1e-15 {
			t.Errorf("group %d: %g, want %g", i, got, want)
		}
	}
	// (0.6 - 0.2)^2 over the sum of the means' variances, 0.25/2 each
	if b := p.Between; b == nil || math.Abs(*b.Q-0.16/0.25) > 1e-14 || b.DF != 1 || b.Weak == "" {
		t.Errorf("between %+v", b)
	}
	if len(p.Cumulative) != 4 {
		t.Fatalf("cumulative %+v", p.Cumulative)
	}
	for i, want := range []float64{0.1, 0.2, 0.3, 0.4} {
		if c := p.Cumulative[i]; math.Abs(*c.Estimate-want) > 1e-15 || c.K != i+1 || c.Study != string(rune('A'+i)) {
			t.Errorf("point %d: %+v with %g", i, c, *c.Estimate)
		}
	}
}

// TestProfileLikelihoodNeedsItsEstimator: the interval isn't mixed with another tau-squared.
func TestProfileLikelihoodNeedsItsEstimator(t *testing.T) {
	ev, err := plan.ReadSheet(manyStudies(t, 12), "")
	if err != nil {
		t.Fatal(err)
	}
	f := &plan.File{}
	f.Pool.Interval = "profile-likelihood"
	if _, err := plan.PoolStudies(f, ev); err == nil {
		t.Error("profile likelihood around a DerSimonian-Laird mean")
	}
	f.Pool.Heterogeneity = "maximum-likelihood"
	p, err := plan.PoolStudies(f, ev)
	if err != nil || p.Random.Interval.Method != "profile-likelihood" {
		t.Fatal(err, p)
	}
}
