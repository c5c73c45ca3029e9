package num

import (
	"math"
	"testing"
)

// tailPs run from the middle far into the tail.
var tailPs = []float64{0.5, 0.4, 0.25, 0.1, 0.025, 1e-3, 1e-6, 1e-10, 1e-30, 1e-100, 1e-250}

// inverts holds a pair of quantiles against their distribution: the relative error of the tail, over the rounding of the quantile itself.
func inverts(t *testing.T, name string, lower, upper func(p float64) float64, cdf, survival, density func(x float64) float64) {
	t.Helper()
	worst, at := 0.0, 0.0
	for _, p := range tailPs {
		for _, side := range []struct{ quantile, tail func(float64) float64 }{{lower, cdf}, {upper, survival}} {
			x := side.quantile(p)
			if x < 1e-300 && x >= 0 || math.Abs(x) > 1e150 {
				continue // the quantile, or its square, leaves the range of a double
			}
			got := side.tail(x)
			// One rounding of x moves the tail by x f(x) 1.1e-16.
			allowed := 4*math.Abs(x)*density(x)*1.2e-16/p + 3e-13
			if e := math.Abs(got-p) / p / allowed; !(e <= worst) {
				worst, at = e, p
			}
		}
	}
	if !(worst <= 1) {
		t.Errorf("%s: quantile at p = %g misses by %.1f times what rounding allows", name, at, worst)
	}
}

func TestQuantilesInvertBothTails(t *testing.T) {
	inverts(t, "normal", NormalQuantile, NormalQuantileUpper, NormalCDF, NormalSurvival, NormalPDF)
	for _, df := range []float64{1, 2, 3.5, 9, 40, 1000, 1e5} {
		inverts(t, "t", func(p float64) float64 { return StudentTQuantile(p, df) }, func(p float64) float64 { return StudentTQuantileUpper(p, df) },
			func(x float64) float64 { return StudentTCDF(x, df) }, func(x float64) float64 { return StudentTSurvival(x, df) }, func(x float64) float64 { return StudentTPDF(x, df) })
	}
	for _, df := range []float64{0.5, 1, 4, 30, 2000} {
		inverts(t, "chi-square", func(p float64) float64 { return ChiSquaredQuantile(p, df) }, func(p float64) float64 { return ChiSquaredQuantileUpper(p, df) },
			func(x float64) float64 { return ChiSquaredCDF(x, df) }, func(x float64) float64 { return ChiSquaredSurvival(x, df) }, func(x float64) float64 { return ChiSquaredPDF(x, df) })
	}
	for _, d := range [][2]float64{{1, 5}, {3, 40}, {20, 7}} {
		density := func(x float64) float64 { // x f(x) by the beta prefactor
			r := d[0] * x / d[1]
			return betaPrefactor(r/(1+r), 1/(1+r), d[0]/2, d[1]/2) / x
		}
		inverts(t, "F", func(p float64) float64 { return FQuantile(p, d[0], d[1]) }, func(p float64) float64 { return FQuantileUpper(p, d[0], d[1]) },
			func(x float64) float64 { return FCDF(x, d[0], d[1]) }, func(x float64) float64 { return FSurvival(x, d[0], d[1]) }, density)
	}
}

// Values where other routines are known to fail, by mpmath at 40 digits (root of the logarithm of the tail); the last by its closed form 1/(pi q).
func TestStudentTQuantileFarTail(t *testing.T) {
	for _, c := range []struct{ q, df, want float64 }{
		{1e-10, 1e5, 6.362000419843691}, {5e-8, 1e5, 5.327115079057321}, {1e-15, 1e4, 7.954081681012809}, {1e-250, 1, 3.1830988618379067e249},
	} {
		if got := StudentTQuantileUpper(c.q, c.df); math.Abs(got-c.want) > 1e-12*c.want {
			t.Errorf("upper tail %g with %g df: %.13g, known %.13g", c.q, c.df, got, c.want)
		}
	}
}

func TestOutsideTheDomainPanics(t *testing.T) {
	for name, f := range map[string]func(){
		"normal": func() { NormalQuantile(1.1) }, "t": func() { StudentTSurvival(1, 0) }, "t nan": func() { StudentTCDF(math.NaN(), 3) },
		"gamma": func() { GammaTails(-1, 2) }, "beta": func() { BetaTails(0.5, 0.5, 0, 1) }, "binomial": func() { BinomialPMF(1, 3, 2) },
		"hypergeometric": func() { HypergeometricPMF(1, 5, 2, 4) }, "noncentral": func() { NoncentralTCDF(1, -1, 0) }, "ratio": func() { LogGammaHalfRatio(1) },
	} {
		func() {
			defer func() {
				if r := recover(); r == nil {
					t.Errorf("%s: no panic", name)
				} else if s, ok := r.(string); !ok || s[:4] != "num:" {
					t.Errorf("%s: panics with %v", name, r)
				}
			}()
			f()
		}()
	}
}
