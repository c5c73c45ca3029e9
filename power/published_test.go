package power

import (
	"math"
	"testing"

	"footing/testdata/published"
)

func resolve(t testing.TB, s Study) Design {
	t.Helper()
	d, err := s.Resolve()
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func holds(t *testing.T, v published.Value, computed float64) {
	t.Helper()
	if !v.Meets(computed) {
		t.Errorf("%s (%s; %v): printed %s, computed %.8g", v.ID, v.Quantity, v.Inputs, v.Printed, computed)
	}
}

func TestTwoMeansTables(t *testing.T) {
	n := 0
	for _, v := range published.Topic("power table: two means") {
		switch v.Source {
		case "cohen1992": // printed is the nearest whole number to the exact solution
			d := resolve(t, Study{Alpha: v.Input("alpha")})
			s, err := SizeFor(d, v.Input("d"), 0.8)
			if err != nil {
				t.Fatal(err)
			}
			holds(t, v, math.Round(s.Continuous))
		case "cohen1988":
			d := resolve(t, Study{Alpha: v.Input("alpha"), Sides: int(v.Input("tails"))})
			holds(t, v, d.Power(v.Input("d"), int(v.Input("n_per_group"))).Any())
		case "julious2004":
			d := resolve(t, Study{Alpha: v.Input("alpha"), Sides: int(v.Input("tails"))})
			s, err := SizeFor(d, v.Input("standardised_difference"), v.Input("power"))
			if err != nil {
				t.Fatal(err)
			}
			holds(t, v, float64(s.N))
		default:
			t.Errorf("%s: source %s is not tested", v.ID, v.Source)
		}
		n++
	}
	if n < 20 {
		t.Errorf("only %d table values", n)
	}
}

// The trial protocol example of SPIRIT 2025: totals are twice the ceiling of the exact t answer per group, then divided by the share retained.
func TestSPIRITExample(t *testing.T) {
	for id, target := range map[string]float64{"spirit2025ex-01": 0.8, "spirit2025ex-02": 0.9} {
		v := published.Must(id)
		s, err := SizeFor(resolve(t, Study{}), v.Input("difference")/v.Input("sd"), target)
		if err != nil {
			t.Fatal(err)
		}
		holds(t, v, float64(s.Groups[0]+s.Groups[1]))
	}
}

// Common practice, no source: a one-sided z test at alpha .05 with an effect of one SD has power .26 at n = 1 and .84 at n = 7.
func TestOneSidedZ(t *testing.T) {
	d := resolve(t, Study{Arrangement: SingleGroup, Test: "z", Sides: 1})
	for n, printed := range map[int]string{1: "0.26", 7: "0.84"} {
		if p := d.Power(1, n).Any(); !published.Meets(printed, p) {
			t.Errorf("n = %d: power %.4f, expected %s", n, p, printed)
		}
	}
}

func TestTwoProportionsPublished(t *testing.T) {
	// Sedgwick's worked example: total 340 by individual randomisation.
	v := published.Must("sedgwick2013-01")
	p1, p2 := v.Input("p1"), v.Input("p2")
	s, err := SizeFor(resolve(t, Study{Outcome: Binary, ControlRisk: p1}), EffectOf(LogOddsRatio, p2, p1), v.Input("power"))
	if err != nil {
		t.Fatal(err)
	}
	holds(t, v, float64(s.Groups[0]+s.Groups[1]))
}

func TestTypeSAndM(t *testing.T) {
	power, typeS, typeM := SignMagnitude(0.1, 3.28, 1.959963984540054, 2)
	holds(t, published.Must("gelmancarlin2014-01"), power)
	holds(t, published.Must("gelmancarlin2014-02"), typeS)
	holds(t, published.Must("gelmancarlin2014-03"), typeM)
}

type normalEffects struct{ mean, sd float64 }

func (n normalEffects) CDF(x float64) float64      { return math.Erfc(-(x-n.mean)/n.sd/math.Sqrt2) / 2 }
func (n normalEffects) Survival(x float64) float64 { return math.Erfc((x-n.mean)/n.sd/math.Sqrt2) / 2 }
func (n normalEffects) Density(x float64) float64 {
	z := (x - n.mean) / n.sd
	return math.Exp(-z*z/2) / n.sd / math.Sqrt(2*math.Pi)
}
func (n normalEffects) Quantile(p float64) float64 {
	return n.mean - n.sd*math.Sqrt2*math.Erfcinv(2*p)
}

// O'Hagan, Stevens & Campbell 2005: the z test of two groups of 25 with variance .0625 (an SD of .25), prior mean .2 and variance .06; success in the right direction.
func TestAssurancePublished(t *testing.T) {
	v := published.Must("ohagan2005-02")
	sd := math.Sqrt(v.Input("variance"))
	d := resolve(t, Study{Test: "z"})
	n := int(v.Input("n_per_arm"))
	prior := normalEffects{v.Input("prior_mean") / sd, math.Sqrt(v.Input("prior_variance")) / sd}
	got := Assurer{d, 1}.At(n, prior)[0]
	holds(t, v, got.Value)
	// A third route: the estimate's own distribution is normal with both variances, so that assurance is one normal tail.
	se := sd * math.Sqrt(2/float64(n))
	closed := math.Erfc((1.959963984540054*se-v.Input("prior_mean"))/math.Sqrt(se*se+v.Input("prior_variance"))/math.Sqrt2) / 2
	if math.Abs(got.Value-closed) > 1e-8 || !got.Converged {
		t.Errorf("assurance %.12g, closed form %.12g", got.Value, closed)
	}
	t.Logf("assurance %.12g, closed form %.12g", got.Value, closed)
	holds(t, published.Must("ohagan2005-01"), d.Power(prior.mean, n).Any())
}
