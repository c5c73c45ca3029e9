package published

import "testing"

func TestEveryValueHasASourceAndFollowsFromItsInputs(t *testing.T) {
	if n := len(All()); n < 400 {
		t.Fatalf("only %d values", n)
	}
	seen := map[string]bool{}
	for _, v := range All() {
		if seen[v.ID] {
			t.Errorf("%s stands twice", v.ID)
		}
		seen[v.ID] = true
		if SourceOf(v).Citation == "" || v.KnownBy == "" {
			t.Errorf("%s has no source or does not say how it is known", v.ID)
		}
		if !v.Meets(v.Recomputed) && v.Status != "explained" {
			t.Errorf("%s: printed %s, recomputed %v, not explained", v.ID, v.Printed, v.Recomputed)
		}
	}
}

func TestMeetsAtTheRoundingEdge(t *testing.T) {
	for _, c := range []struct {
		printed  string
		computed float64
		want     bool
	}{
		{"0.5970", 0.59704999, true}, {"0.5970", 0.59705001, false}, {"0.5970", 0.59694999, false},
		{"-0.35", -0.345, true}, {"−0.35", -0.3449, false}, {"12", 12.49, true}, {"12", 12.51, false},
		{"1.2e-3", 0.00124, true}, {"1.2e-3", 0.00126, false}, {"x", 1, false},
	} {
		if got := Meets(c.printed, c.computed); got != c.want {
			t.Errorf("Meets(%q, %v) = %v", c.printed, c.computed, got)
		}
	}
}

func TestDatasets(t *testing.T) {
	bcg := Data("bcg")
	if n := len(bcg.Column("cases_vaccinated")); n != 13 {
		t.Errorf("the table of 13 trials has %d", n)
	}
}
