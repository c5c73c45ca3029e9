package effect

import (
	"fmt"
	"math"
	"testing"

	"footing/internal/num"
)

// drawn is one route's formula held against the truth by simulation.
type drawn struct {
	name string
	opt  Options
	// truth is the true effect on the analysed scale.
	truth float64
	draw  func(s *num.Stream) Reported
	// ratio is the mean of the formula's variance over the true variance of the estimate that is accepted: lowest and highest.
	low, high float64
}

// TestVarianceFormulasBySimulation draws 20,000 studies for each formula (seed 3) and compares the mean of the formula's variance with the variance of the estimates themselves. The ratio's own
// standard error is about .011; the bounds below stand at least .05 from what was derived, so that a false alarm has a probability below 1e-5 for all rows together.
func TestVarianceFormulasBySimulation(t *testing.T) {
	group := func(s *num.Stream, n int, mean, sd float64) Arm {
		var sum, squares float64
		for i := 0; i < n; i++ {
			x := s.Normal()
			sum += x
			squares += x * x
		}
		m := sum / float64(n)
		return Arm{N: Of(float64(n)), Mean: Of(mean + sd*m), SD: Of(sd * math.Sqrt((squares-sum*m)/float64(n-1)))}
	}
	two := func(n1, n2 int, d, sd1, sd2, base float64) func(*num.Stream) Reported {
		return func(s *num.Stream) Reported {
			return Reported{Treatment: group(s, n1, base+d, sd1), Control: group(s, n2, base, sd2)}
		}
	}
	counts := func(n int, p1, p2 float64) func(*num.Stream) Reported {
		return func(s *num.Stream) Reported {
			return Reported{Treatment: Arm{N: Of(float64(n)), Events: Of(float64(s.Binomial(n, p1)))}, Control: Arm{N: Of(float64(n)), Events: Of(float64(s.Binomial(n, p2)))}}
		}
	}
	pairs := func(n int, r, d float64) func(*num.Stream) Reported {
		return func(s *num.Stream) Reported {
			var pre, post, squares float64
			for i := 0; i < n; i++ {
				x := s.Normal()
				y := r*x + math.Sqrt(1-r*r)*s.Normal() + d
				pre, post, squares = pre+x, post+y, squares+x*x
			}
			k := float64(n)
			return Reported{PrePostR: Of(r), Treatment: Arm{N: Of(k), PreMean: Of(pre / k), Mean: Of(post / k), PreSD: Of(math.Sqrt((squares - pre*pre/k) / (k - 1)))}}
		}
	}
	smd := Options{Scale: StandardizedMeanDifference}
	with := func(v SMDVariance) Options { return Options{Scale: StandardizedMeanDifference, SMDVariance: v} }
	paired := func(v PairedVariance) Options { return Options{Scale: StandardizedMeanDifference, PairedVariance: v} }
	on := func(s Scale) Options { return Options{Scale: s} }
	for _, c := range []drawn{
		{"g, unbiased form, 5 a group", with(VarianceUnbiased), 0.5, two(5, 5, 0.5, 1, 1, 0), 0.94, 1.06},
		{"g, at g, 5 a group", smd, 0.5, two(5, 5, 0.5, 1, 1, 0), 0.82, 1.00},
		{"g, J squared, 5 a group", with(VarianceJSquared), 0.5, two(5, 5, 0.5, 1, 1, 0), 0.70, 0.85},
		{"g, at g, 40 and 60", smd, 0.8, two(40, 60, 0.8, 1, 1, 0), 0.94, 1.05},
		{"Glass, SD ratio 1.6, 60 and 40", Options{Scale: StandardizedMeanDifference, Glass: true}, 0.5, two(60, 40, 0.5, 1.6, 1, 0), 0.93, 1.07},
		{"mean difference, unequal SDs", on(MeanDifference), 1, two(12, 30, 1, 3, 1, 4), 0.94, 1.06},
		{"log ratio of means", on(LogRatioOfMeans), math.Log(12.0 / 10), two(30, 30, 2, 2, 2, 10), 0.94, 1.06},
		{"log variability ratio", on(LogVariabilityRatio), math.Log(1.5), two(25, 25, 0, 1.5, 1, 0), 0.92, 1.05},
		{"log odds ratio", on(LogOddsRatio), math.Log(0.4 / 0.6 / (0.25 / 0.75)), counts(120, 0.4, 0.25), 0.94, 1.06},
		{"log risk ratio", on(LogRiskRatio), math.Log(0.4 / 0.25), counts(120, 0.4, 0.25), 0.94, 1.06},
		{"risk difference", on(RiskDifference), 0.15, counts(60, 0.4, 0.25), 0.93, 1.05},
		{"before and after, at g, n 10, r .9", paired(PairedAtG), 1.2, pairs(10, 0.9, 1.2), 0.70, 0.84},
		{"before and after, unbiased, n 10, r .9", paired(PairedUnbiased), 1.2, pairs(10, 0.9, 1.2), 0.92, 1.08},
		{"before and after, printed, n 10, r .9", paired(PairedPrinted), 1.2, pairs(10, 0.9, 1.2), 0.22, 0.34},
		{"before and after, at g, n 200, r .5", paired(PairedAtG), 0.4, pairs(200, 0.5, 0.4), 0.95, 1.05},
	} {
		t.Run(c.name, func(t *testing.T) {
			const studies, chunks = 20000, 20
			var sums [chunks][4]float64
			num.Chunks(chunks, func(k int) {
				s := num.NewStream(3, uint64(k))
				for i := 0; i < studies/chunks; i++ {
					o := Compute("", c.draw(s), c.opt)
					if o.Best == nil {
						continue
					}
					y := o.Best.Value - c.truth
					sums[k][0]++
					sums[k][1] += y
					sums[k][2] += y * y
					sums[k][3] += o.Best.Variance
				}
			})
			var n, y, yy, v float64
			for _, s := range sums {
				n, y, yy, v = n+s[0], y+s[1], yy+s[2], v+s[3]
			}
			if n < 0.99*studies {
				t.Fatalf("only %g of %d studies gave an estimate", n, studies)
			}
			truth := yy/n - y/n*y/n
			ratio := v / n / truth
			text := fmt.Sprintf("formula over true variance %.3f, bias %.4f", ratio, y/n)
			if ratio < c.low || ratio > c.high {
				t.Errorf("%s, expected %.2f to %.2f", text, c.low, c.high)
			}
			if math.Abs(y/n) > 5*math.Sqrt(truth/n)+0.03*math.Abs(c.truth) {
				t.Errorf("%s: biased", text)
			}
			t.Log(text)
		})
	}
}
