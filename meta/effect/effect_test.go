package effect

import (
	"math"
	"strings"
	"testing"

	"footing/internal/finding"
	"footing/internal/num"
)

// sample is one study reported in every way at once: the raw figures, and what follows from them by textbook formulas.
type sample struct{ m1, s1, n1, m2, s2, n2 float64 }

var samples = []sample{{12.4, 3.1, 30, 10.2, 2.8, 26}, {-4, 1.5, 12, -3.2, 1.9, 12}, {101, 14, 400, 99, 15, 380}}

// TestSameStudyByTwoRoutes: means and SDs, t, p and the CI of each mean are the same study, and give the same g.
func TestSameStudyByTwoRoutes(t *testing.T) {
	for _, s := range samples {
		full := Reported{Treatment: Arm{Mean: Of(s.m1), SD: Of(s.s1), N: Of(s.n1)}, Control: Arm{Mean: Of(s.m2), SD: Of(s.s2), N: Of(s.n2)}}
		opt := Options{Scale: StandardizedMeanDifference}
		want := Compute("", full, opt).Best
		tStat := (s.m1 - s.m2) / (PooledSD(s.s1, s.n1, s.s2, s.n2) * math.Sqrt(1/s.n1+1/s.n2))
		df := s.n1 + s.n2 - 2
		people := func(r Reported) Reported {
			r.Treatment.N, r.Control.N = Of(s.n1), Of(s.n2)
			return r
		}
		direction := FavoursTreatment
		if tStat < 0 {
			direction = FavoursControl
		}
		half := func(sd, n float64) float64 { return num.StudentTQuantileUpper(0.05, n-1) * sd / math.Sqrt(n) }
		routes := map[string]Reported{
			"t":           people(Reported{T: Of(tStat)}),
			"p":           people(Reported{P: Of(2 * num.StudentTSurvival(math.Abs(tStat), df)), Direction: direction}),
			"one-sided p": people(Reported{P: Of(num.StudentTSurvival(math.Abs(tStat), df)), PSides: 1, Direction: direction}),
			"SEs":         {Treatment: Arm{Mean: Of(s.m1), SE: Of(s.s1 / math.Sqrt(s.n1)), N: Of(s.n1)}, Control: Arm{Mean: Of(s.m2), SE: Of(s.s2 / math.Sqrt(s.n2)), N: Of(s.n2)}},
			"90% CIs of the means": {CILevel: Of(0.9), Treatment: Arm{Mean: Of(s.m1), CILower: Of(s.m1 - half(s.s1, s.n1)), CIUpper: Of(s.m1 + half(s.s1, s.n1)), N: Of(s.n1)},
				Control: Arm{Mean: Of(s.m2), CILower: Of(s.m2 - half(s.s2, s.n2)), CIUpper: Of(s.m2 + half(s.s2, s.n2)), N: Of(s.n2)}},
		}
		for name, r := range routes {
			o := Compute("", r, opt)
			if o.Best == nil {
				t.Errorf("%s: %v", name, o.Findings)
				continue
			}
			if math.Abs(o.Best.Value-want.Value) > 1e-11 || math.Abs(o.Best.Variance-want.Variance) > 1e-11 {
				t.Errorf("%s: %.12g (%.12g), by means %.12g (%.12g)", name, o.Best.Value, o.Best.Variance, want.Value, want.Variance)
			}
		}
	}
}

// TestEstimateByItsInterval: an estimate with SE, with variance, with its interval at any level and with p are the same estimate.
func TestEstimateByItsInterval(t *testing.T) {
	const y, se = -0.37, 0.21
	for _, scale := range []Scale{AsGiven, LogOddsRatio, LogHazardRatio, MeanDifference} {
		show := func(x float64) Figure { return Of(scale.ToShown(x)) }
		for _, level := range []float64{0.8, 0.9, 0.95, 0.99} {
			z := num.NormalQuantileUpper((1 - level) / 2)
			for name, r := range map[string]Reported{
				"CI": {Estimate: show(y), CILower: show(y - z*se), CIUpper: show(y + z*se), CILevel: Of(level)},
				"SE": {Estimate: show(y), StandardError: Of(se)}, "variance": {Estimate: show(y), Variance: Of(se * se)},
				"p":       {Estimate: show(y), P: Of(2 * num.NormalSurvival(-y/se))},
				"CI only": {CILower: show(y - z*se), CIUpper: show(y + z*se), CILevel: Of(level)},
			} {
				o := Compute("", r, Options{Scale: scale})
				if o.Best == nil {
					t.Fatalf("%s on %s: %v", name, scale, o.Findings)
				}
				if math.Abs(o.Best.Value-y) > 1e-12 || math.Abs(o.Best.Variance-se*se) > 1e-12 {
					t.Errorf("%s on %s: %.12g, variance %.12g", name, scale, o.Best.Value, o.Best.Variance)
				}
			}
		}
	}
}

// TestImpossibleFiguresAreFindings: each names its cell, says what is wrong and what mends it, and yields no estimate.
func TestImpossibleFiguresAreFindings(t *testing.T) {
	at := func(v float64, cell string) Figure { return Figure{Value: v, Given: true, Decimals: -1, Cell: cell} }
	arm := func(m, s, n float64) Arm { return Arm{Mean: Of(m), SD: Of(s), N: Of(n)} }
	smd, or := Options{Scale: StandardizedMeanDifference}, Options{Scale: LogOddsRatio}
	withSD := arm(1, 0, 10)
	withSD.SD = at(0, "D4")
	withN := arm(1, 2, 1)
	withN.N = at(1, "E4")
	events := Arm{Events: at(12, "F4"), N: Of(10)}
	for _, c := range []struct {
		name, kind, cell string
		r                Reported
		opt              Options
	}{
		{"SD of 0", "sd-not-positive", "D4", Reported{Treatment: withSD, Control: arm(2, 1, 10)}, smd},
		{"n of 1", "too-few-people", "E4", Reported{Treatment: withN, Control: arm(2, 1, 10)}, smd},
		{"events above total", "events-above-total", "F4", Reported{Treatment: events, Control: Arm{Events: Of(1), N: Of(10)}}, or},
		{"interval without its estimate", "ci-does-not-hold-estimate", "B4", Reported{Estimate: at(3, "B4"), CILower: Of(0.5), CIUpper: Of(1.5)}, or},
		{"limits exchanged", "ci-limits-swapped", "C4", Reported{Estimate: Of(1), CILower: Of(1.5), CIUpper: at(0.5, "C4")}, or},
		{"SE of 0", "se-not-positive", "B4", Reported{Estimate: Of(1), StandardError: at(0, "B4")}, or},
		{"negative variance", "variance-not-positive", "B4", Reported{Estimate: Of(1), Variance: at(-1, "B4")}, or},
		{"ratio below 0", "estimate-out-of-range", "B4", Reported{Estimate: at(-0.3, "B4"), StandardError: Of(0.1)}, or},
		{"p without direction", "p-without-direction", "P4", Reported{P: at(0.03, "P4"), Treatment: Arm{N: Of(9)}, Control: Arm{N: Of(9)}}, smd},
		{"p of 0", "p-out-of-range", "P4", Reported{P: at(0, "P4"), Direction: FavoursTreatment, Treatment: Arm{N: Of(9)}, Control: Arm{N: Of(9)}}, smd},
		{"r of 1", "correlation-out-of-range", "R4", Reported{R: at(1, "R4"), N: Of(20)}, Options{Scale: FisherZ}},
		{"no events", "no-information-on-ratio", "F4", Reported{Treatment: Arm{Events: at(0, "F4"), N: Of(10)}, Control: Arm{Events: Of(0), N: Of(10)}}, or},
	} {
		o := Compute("s", c.r, c.opt)
		if o.Best != nil {
			t.Errorf("%s gave %v", c.name, *o.Best)
		}
		found := false
		for _, f := range o.Findings {
			found = found || f.Kind == c.kind && f.Place.Cell == c.cell && f.What != "" && f.Mend != ""
		}
		if !found {
			t.Errorf("%s: no finding %s at %s in %v", c.name, c.kind, c.cell, o.Findings)
		}
	}
	if o := Compute("s", Reported{P: Figure{Value: 0.001, Given: true, Bound: Below, Decimals: 3, Cell: "P9"}}, smd); len(o.Findings) != 1 || o.Findings[0].Kind != "p-is-a-bound" {
		t.Errorf("a bound: %v", o.Findings)
	}
}

// TestNothingMakesNaN puts NaN, infinities, 0, negative and huge numbers into every figure of a full record: no estimate may be anything but finite with a positive variance.
func TestNothingMakesNaN(t *testing.T) {
	base := Reported{Treatment: Arm{N: Of(20), Mean: Of(5), SD: Of(2), SE: Of(0.4), CILower: Of(4), CIUpper: Of(6), Events: Of(4), Proportion: Of(0.2)},
		Control: Arm{N: Of(20), Mean: Of(4), SD: Of(2), Events: Of(6)}, N: Of(40), Estimate: Of(0.6), StandardError: Of(0.2), Variance: Of(0.04), CILower: Of(0.4), CIUpper: Of(0.9),
		CILevel: Of(0.95), T: Of(1.6), P: Of(0.11), Direction: FavoursTreatment, R: Of(0.3), DF: Of(38)}
	for i := range figuresOf(&base) {
		for _, bad := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, -1, 1, 1e308, 1e-308} {
			for _, drop := range []string{"", "estimate", "means"} {
				r := base
				if drop == "estimate" {
					r.Estimate, r.CILower, r.CIUpper = Figure{}, Figure{}, Figure{}
				} else if drop == "means" {
					r.Treatment.Mean, r.Treatment.Events = Figure{}, Figure{}
				}
				figuresOf(&r)[i].Value = bad
				for _, scale := range Scales() {
					for _, e := range Compute("s", r, Options{Scale: scale}).All {
						if math.IsNaN(e.Value) || math.IsInf(e.Value, 0) || !(e.Variance > 0) || math.IsInf(e.Variance, 0) {
							t.Fatalf("figure %d = %g on %s by %s: %g, variance %g", i, bad, scale, e.Route, e.Value, e.Variance)
						}
					}
				}
			}
		}
	}
}

// TestRoutesThatDisagree: a t that contradicts the means is a warning; one that differs by the rounding of the printed figures is not.
func TestRoutesThatDisagree(t *testing.T) {
	printed := func(v float64, decimals int) Figure {
		return Figure{Value: v, Given: true, Decimals: decimals, Cell: "X1"}
	}
	r := Reported{Treatment: Arm{Mean: printed(12.4, 1), SD: printed(3.1, 1), N: Of(30)}, Control: Arm{Mean: printed(10.2, 1), SD: printed(2.8, 1), N: Of(26)}, T: printed(2.8, 1)}
	disagrees := func() bool {
		for _, f := range Compute("s", r, Options{Scale: StandardizedMeanDifference}).Findings {
			if f.Kind == "routes-disagree" && f.Severity == finding.Warning {
				return true
			}
		}
		return false
	}
	if disagrees() {
		t.Error("t = 2.8 is what the means give")
	}
	r.T = printed(1.2, 1)
	if !disagrees() {
		t.Error("t = 1.2 contradicts the means")
	}
}

func TestScalesReadBackTheirNames(t *testing.T) {
	for _, s := range Scales() {
		for _, text := range []string{string(s), s.Words(), strings.ToUpper(strings.ReplaceAll(s.Words(), " ", "_"))} {
			if got, err := ParseScale(text); err != nil || got != s {
				t.Errorf("%q reads as %q (%v)", text, got, err)
			}
		}
		for _, x := range []float64{-0.7, 0.2} {
			if back, err := s.FromShown(s.ToShown(x)); err != nil || math.Abs(back-x) > 1e-14 {
				t.Errorf("%s: %g comes back as %g (%v)", s, x, back, err)
			}
		}
	}
	if _, err := ParseScale("colour"); err == nil {
		t.Error("colour is a scale")
	}
}
