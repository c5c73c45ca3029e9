package power

import (
	"fmt"
	"math"
	"testing"
)

// everyStudy are the composed studies that the harness runs over; a new design adds a line.
var everyStudy = []Study{
	{}, {Sides: 1}, {Alpha: 0.01, Allocation: Allocation{2, 1}}, {Allocation: Allocation{1, 3}},
	{BaselineCorrelation: 0.55}, {BaselineCorrelation: 0.55, BaselineForm: "fixed"}, {BaselineCorrelation: -0.3, BaselineForm: "factor-only"},
	{BaselineCorrelation: 0.8, Sides: 1, Allocation: Allocation{1, 2}},
	{Arrangement: SingleGroup}, {Arrangement: Paired, Sides: 1}, {Test: "z"}, {Arrangement: SingleGroup, Test: "z"},
	{Outcome: Binary, ControlRisk: 0.3}, {Outcome: Binary, ControlRisk: 0.3, Measure: LogRiskRatio, Sides: 1}, {Outcome: Binary, ControlRisk: 0.4, Measure: RiskDifference, Allocation: Allocation{2, 1}},
	{Outcome: Binary, ControlRisk: 0.3, Test: "fisher-exact"}, {Outcome: Binary, ControlRisk: 0.4, Measure: RiskDifference, Test: "fisher-exact", Sides: 1},
}

// TestEveryDesignKeepsWhatItDeclares holds every design to its declared properties.
func TestEveryDesignKeepsWhatItDeclares(t *testing.T) {
	for _, s := range everyStudy {
		d := resolve(t, s)
		info := d.Info()
		t.Run(fmt.Sprintf("%s %+v", info.Name, s), func(t *testing.T) {
			if !info.Exact && !info.Below || len(info.Try) == 0 || info.Method == "" || info.Reference == "" {
				t.Fatal("the design declares nothing, or does not say how its power is computed")
			}
			errorRate(t, d, info)
			rises(t, d, info)
			sized(t, d, info)
			agreesQuickly(t, d, info)
			if info.Symmetric {
				for _, e := range info.Try {
					a, b := d.Power(e, info.MinN+9), d.Power(-e, info.MinN+9)
					if math.Abs(a.Above-b.Below) > 1e-12 || math.Abs(a.Below-b.Above) > 1e-12 {
						t.Errorf("effect %g: %+v, its mirror %+v", e, a, b)
					}
				}
			}
			for _, e := range info.Try {
				c := d.Critical(math.Copysign(1, e), 60)
				if !(c*e > 0) {
					t.Errorf("critical estimate %g towards %g", c, e)
				}
			}
		})
	}
}

// agreesQuickly holds the quick form of power against the exact one.
func agreesQuickly(t *testing.T, d Design, info Info) {
	for _, n := range []int{info.MinN, info.MinN + 1, info.MinN + 5, 24, 130} {
		q := Quick(d, n)
		for _, e := range append([]float64{0, -2, 4}, info.Try...) {
			a, b := d.Power(e, n), q(e)
			if math.Abs(a.Above-b.Above) > 1e-12 || math.Abs(a.Below-b.Below) > 1e-12 {
				t.Errorf("n = %d, effect %g: %+v, quickly %+v", n, e, a, b)
			}
		}
	}
}

func errorRate(t *testing.T, d Design, info Info) {
	for _, n := range []int{info.MinN + 3, 25, 140} {
		r := d.Power(0, n)
		got := r.Any()
		switch {
		case info.Exact && math.Abs(got-info.Alpha) > 1e-9:
			t.Errorf("n = %d: error rate %.12g, alpha %g", n, got, info.Alpha)
		case info.Below && got > info.Alpha*(1+1e-9):
			t.Errorf("n = %d: error rate %.6g above alpha %g", n, got, info.Alpha)
		}
	}
}

func rises(t *testing.T, d Design, info Info) {
	for _, e := range info.Try {
		before := 0.0
		for _, n := range []int{info.MinN + 2, info.MinN + 8, 40, 90, 200, 500} {
			p := d.Power(e, n).Any()
			if math.IsNaN(p) || p < 0 || p > 1 {
				t.Fatalf("power %g", p)
			}
			if !info.Saw && p < before-1e-13 { // near 1 only rounding is left
				t.Errorf("effect %g: power falls to %g at n = %d", e, p, n)
			}
			before = p
		}
		if stronger, weaker := d.Power(1.3*e, 60).Any(), d.Power(e, 60).Any(); stronger < weaker {
			t.Errorf("power %g at %g, %g at %g", stronger, 1.3*e, weaker, e)
		}
	}
}

func sized(t *testing.T, d Design, info Info) {
	for _, e := range info.Try {
		s, err := SizeFor(d, e, 0.8)
		if err != nil {
			t.Fatal(err)
		}
		if s.Power.Any() < 0.8 {
			t.Errorf("effect %g: n = %d has power %g", e, s.N, s.Power.Any())
		}
		if !info.Saw && s.N > info.MinN {
			if p := d.Power(e, s.N-1).Any(); p >= 0.8 {
				t.Errorf("effect %g: n - 1 = %d has power %g already", e, s.N-1, p)
			}
		}
		if info.Saw {
			for n := s.N; n <= s.N+60; n++ {
				if p := d.Power(e, n).Any(); p < 0.8 {
					t.Errorf("effect %g: n = %d from %d on has power %g", e, n, s.N, p)
				}
			}
			if p := d.Power(e, s.N-1).Any(); s.N > info.MinN && p >= 0.8 {
				t.Errorf("effect %g: n - 1 = %d holds too", e, s.N-1)
			}
		}
		x, ok := Detectable(d, math.Copysign(1, e), s.N, 0.8)
		if !ok || math.Abs(d.Power(x, s.N).Any()-0.8) > 1e-7 && !info.Saw {
			t.Errorf("n = %d: detectable effect %g has power %g", s.N, x, d.Power(x, s.N).Any())
		}
	}
	for _, bad := range []float64{0, math.NaN(), math.Inf(1)} {
		if _, err := SizeFor(d, bad, 0.8); err == nil {
			t.Errorf("an effect of %g was sized", bad)
		}
	}
	for _, target := range []float64{0, 1, -1, math.NaN(), info.Alpha / 2} {
		if _, err := SizeFor(d, info.Try[0], target); err == nil {
			t.Errorf("a power of %g was sized", target)
		}
	}
}

// TestBadStudiesAreErrors: out-of-range values of a study are errors that name the value.
func TestBadStudiesAreErrors(t *testing.T) {
	nan := math.NaN()
	for _, s := range []Study{
		{Alpha: 1}, {Alpha: -0.1}, {Alpha: nan}, {Sides: 3}, {BaselineCorrelation: 1}, {BaselineCorrelation: nan}, {Allocation: Allocation{1, 0}}, {Allocation: Allocation{-1, 1}},
		{Outcome: Binary}, {Outcome: Binary, ControlRisk: 1}, {Outcome: Binary, ControlRisk: nan}, {Outcome: "colour"}, {Aim: "equivalence"}, {Test: "guess"}, {BaselineCorrelation: 0.5, BaselineForm: "magic"},
	} {
		if _, err := s.Resolve(); err == nil {
			t.Errorf("%+v resolved", s)
		}
	}
}
