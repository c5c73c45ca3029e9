package qualify

import "testing"

// TestEveryValueIsReproduced: a value that is not is a defect of the program or of the value, never of the tolerance.
func TestEveryValueIsReproduced(t *testing.T) {
	r := Run()
	if r.Total < 222 {
		t.Errorf("only %d values", r.Total)
	}
	for _, l := range r.Lines {
		if !l.Reproduced {
			t.Errorf("%s (%s): printed %s, computed %.8g", l.ID, l.Quantity, l.Printed, l.Computed)
		}
		if l.Source == "" || l.KnownBy == "" {
			t.Errorf("%s has no source", l.ID)
		}
	}
	t.Logf("%d of %d reproduced", r.Reproduced, r.Total)
}
