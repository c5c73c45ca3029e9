package power

import (
	"math"
	"testing"

	"footing/internal/num"
)

// TestBaselineRuleAgainstQuadrature holds the average over the chance imbalance of the baseline against adaptive quadrature of its beta density.
func TestBaselineRuleAgainstQuadrature(t *testing.T) {
	for _, c := range []struct {
		n      int
		effect float64
	}{{3, 1.5}, {5, 1}, {9, 0.9}, {12, 0.8}, {29, 0.5}, {31, 0.55}, {200, 0.2}} {
		d := resolve(t, Study{BaselineCorrelation: 0.6}).(baselineT)
		total := float64(2 * c.n)
		delta := c.effect * math.Sqrt(float64(c.n)/2/d.residual())
		df := total - 3
		crit := num.StudentTQuantileUpper(0.025, df)
		// x = sqrt(1 - B) has density proportional to (1 - x^2)^((N-4)/2) on (-1, 1)
		weight := func(x float64) float64 { return math.Exp((total - 4) / 2 * math.Log1p(-x*x)) }
		opt := num.IntegrateOptions{Relative: 1e-12}
		norm := num.Integrate(weight, 0, 1, opt).Value
		want := num.Integrate(func(x float64) float64 {
			return weight(x) * rejectT(crit, df, delta*math.Sqrt(1-x*x), 2).Any()
		}, 0, 1, opt).Value / norm
		if got := d.Power(c.effect, c.n).Any(); math.Abs(got-want) > 1e-9 {
			t.Errorf("n = %d: %.12g by the rule, %.12g by quadrature", c.n, got, want)
		}
	}
}

// TestBaselineAdjustedBySimulation simulates the analysis itself: 40,000 trials of 8 a group, seed 7; the bound of 5 standard errors has a false-alarm probability below 1e-6.
func TestBaselineAdjustedBySimulation(t *testing.T) {
	const n, trials, r, effect = 8, 40000, 0.6, 1.1
	s := num.NewStream(7, 0)
	crit := num.StudentTQuantileUpper(0.025, 2*n-3)
	hits := 0
	for i := 0; i < trials; i++ {
		var sx, sy, sxx, sxy, syy [2]float64
		for g := 0; g < 2; g++ {
			for j := 0; j < n; j++ {
				x := s.Normal()
				y := r*x + math.Sqrt(1-r*r)*s.Normal() + effect*float64(1-g)
				sx[g] += x
				sy[g] += y
				sxx[g] += x * x
				sxy[g] += x * y
				syy[g] += y * y
			}
		}
		var wxx, wxy, wyy float64
		for g := 0; g < 2; g++ {
			wxx += sxx[g] - sx[g]*sx[g]/n
			wxy += sxy[g] - sx[g]*sy[g]/n
			wyy += syy[g] - sy[g]*sy[g]/n
		}
		slope := wxy / wxx
		dx := (sx[0] - sx[1]) / n
		diff := (sy[0]-sy[1])/n - slope*dx
		residual := (wyy - slope*wxy) / (2*n - 3)
		if math.Abs(diff)/math.Sqrt(residual*(2.0/n+dx*dx/wxx)) > crit {
			hits++
		}
	}
	want := resolve(t, Study{BaselineCorrelation: r}).Power(effect, n).Any()
	got := float64(hits) / trials
	if math.Abs(got-want) > 5*math.Sqrt(want*(1-want)/trials) {
		t.Errorf("simulated power %.4f, computed %.4f", got, want)
	}
}

// TestFisherByFullEnumeration sums every table with p by the definition.
func TestFisherByFullEnumeration(t *testing.T) {
	d := resolve(t, Study{Outcome: Binary, ControlRisk: 0.25, Test: "fisher-exact", Allocation: Allocation{3, 2}})
	g := d.Groups(18)
	n1, n2 := g[0], g[1]
	treated, _ := TreatedRisk(LogOddsRatio, 1.4, 0.25)
	want := 0.0
	for x := 0; x <= n1; x++ {
		for y := 0; y <= n2; y++ {
			m := x + y
			at := num.HypergeometricPMF(x, m, n1, n1+n2)
			p := 0.0
			for z := max(0, m-n2); z <= min(m, n1); z++ {
				if q := num.HypergeometricPMF(z, m, n1, n1+n2); q <= at*(1+1e-7) {
					p += q
				}
			}
			if p <= 0.05 {
				want += num.BinomialPMF(x, n1, treated) * num.BinomialPMF(y, n2, 0.25)
			}
		}
	}
	if got := d.Power(1.4, 18).Any(); math.Abs(got-want) > 1e-12 {
		t.Errorf("power %.15g, by full enumeration %.15g", got, want)
	}
}

func BenchmarkSizeTwoMeans(b *testing.B) {
	d := resolve(b, Study{})
	for i := 0; i < b.N; i++ {
		_, _ = SizeFor(d, 0.3, 0.8)
	}
}

func BenchmarkSizeBaselineAdjusted(b *testing.B) {
	d := resolve(b, Study{BaselineCorrelation: 0.55})
	for i := 0; i < b.N; i++ {
		_, _ = SizeFor(d, 0.3, 0.8)
	}
}

func BenchmarkAssuranceAtOneN(b *testing.B) {
	d := resolve(b, Study{BaselineCorrelation: 0.55})
	for i := 0; i < b.N; i++ {
		Assurer{d, 1}.At(200, normalEffects{0.3, 0.2})
	}
}
