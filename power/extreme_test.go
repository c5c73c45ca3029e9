package power

import (
	"math"
	"testing"
	"time"
)

// TestHugeEffectsAreCertainAtOnce: an effect beyond all reason has power 1 in its direction and does not keep a search
// busy.
func TestHugeEffectsAreCertainAtOnce(t *testing.T) {
	began := time.Now()
	for _, s := range []Study{{}, {BaselineCorrelation: 0.5}, {Arrangement: Paired}, {Test: "z"}} {
		d, err := s.Resolve()
		if err != nil {
			t.Fatal(err)
		}
		for _, x := range []float64{1e5, 1e12, 1e300, math.MaxFloat64} {
			n := d.Info().MinN + 10
			if r := d.Power(x, n); r.Above != 1 || r.Below != 0 {
				t.Errorf("%s at %g: %+v", d.Info().Name, x, r)
			}
			if r := d.Power(-x, n); r.Below != 1 || r.Above != 0 {
				t.Errorf("%s at %g: %+v", d.Info().Name, -x, r)
			}
			if _, err := SizeFor(d, x, 0.8); err != nil {
				t.Errorf("%s at %g: %v", d.Info().Name, x, err)
			}
		}
	}
	if took := time.Since(began); took > 5*time.Second && !testing.Short() { // short runs are those under the race detector
		t.Errorf("took %v", took)
	}
}

func TestArrangementsThatAreNotOfferedAreRefused(t *testing.T) {
	for _, a := range []Arrangement{"repeated", "crossover", "clusters", "sites", "stepped-wedge", "factorial", "x"} {
		for _, test := range []string{"", "z"} {
			if d, err := (Study{Arrangement: a, Test: test}).Resolve(); err == nil {
				t.Errorf("%s with test %q was sized by %s", a, test, d.Info().Name)
			}
		}
	}
}
