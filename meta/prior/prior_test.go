package prior

import (
	"math"
	"testing"

	"footing/internal/num"
)

// TestQuantilesInvertTheDistribution, in both tails and for heavy tails.
func TestQuantilesInvertTheDistribution(t *testing.T) {
	m, err := NewMixture([]float64{0.7, 0.3}, []Distribution{Located{0.3, 0.2, 4}, Located{-0.1, 0.5, math.Inf(1)}})
	if err != nil {
		t.Fatal(err)
	}
	for _, d := range []Distribution{Located{0.4, 0.2, 1}, Located{-1, 3, 9}, Located{0, 1, math.Inf(1)}, m} {
		for _, p := range []float64{1e-9, 0.001, 0.2, 0.5, 0.8, 0.999} {
			x := d.Quantile(p)
			if got := d.CDF(x); math.Abs(got-p) > 1e-12*math.Max(p, 1e-3) {
				t.Errorf("%s: quantile of %g is %g, with CDF %g", d.Words(), p, x, got)
			}
			if s := d.CDF(x) + d.Survival(x); math.Abs(s-1) > 1e-14 {
				t.Errorf("%s: tails add up to %g", d.Words(), s)
			}
		}
		whole := num.Integrate(d.Density, math.Inf(-1), d.Quantile(0.8), num.IntegrateOptions{Relative: 1e-11})
		if math.Abs(whole.Value-0.8) > 1e-9 {
			t.Errorf("%s: density integrates to %g", d.Words(), whole.Value)
		}
	}
}

func TestMomentsThatDoNotExist(t *testing.T) {
	if _, _, hasMean, _ := (Located{0, 1, 1}).Moments(); hasMean {
		t.Error("a t with 1 degree of freedom has no mean")
	}
	if _, _, hasMean, hasSD := (Located{0, 1, 2}).Moments(); !hasMean || hasSD {
		t.Error("a t with 2 degrees of freedom has a mean and no variance")
	}
	// Student's t with 9 df has variance 9/7.
	if _, sd, _, _ := (Located{0, 2, 9}).Moments(); math.Abs(sd-2*math.Sqrt(9.0/7)) > 1e-15 {
		t.Errorf("SD %g", sd)
	}
}

func TestBadDistributionsAreErrors(t *testing.T) {
	for _, x := range [][3]float64{{math.NaN(), 1, 3}, {0, 0, 3}, {0, -1, 3}, {0, 1, 0}, {math.Inf(1), 1, 3}} {
		if _, err := NewLocated(x[0], x[1], x[2]); err == nil {
			t.Errorf("%v made a distribution", x)
		}
	}
	if _, err := NewMixture([]float64{-1, 2}, []Distribution{Located{0, 1, 3}, Located{0, 1, 3}}); err == nil {
		t.Error("a negative weight made a mixture")
	}
}
