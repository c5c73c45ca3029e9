package smallstudy

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta"
)

// Regression is a regression of y/s on 1/s. Intercept is the effect of the standard error, Slope what is left at a standard error of 0.
type Regression struct {
	Intercept, InterceptSE float64
	Slope, SlopeSE         float64
	DF                     float64
	T, P                   float64 // of the intercept, two-sided
	Dispersion             float64 // residual variance, as estimated
	Available              bool
	Why                    string
}

// Egger regresses y/s on 1/s by least squares (Egger et al. 1997); the intercept is the test, with t(k - 2). It needs three studies whose standard errors differ.
func Egger(d meta.Data) Regression {
	k := d.K()
	if k < 3 {
		return Regression{Why: fmt.Sprintf("a regression needs at least 3 studies; there are %d", k)}
	}
	x, z := make([]float64, k), make([]float64, k)
	for i := range x {
		s := math.Sqrt(d.V[i])
		x[i], z[i] = 1/s, d.Y[i]/s
	}
	mx, mz := num.Sum(x)/float64(k), num.Sum(z)/float64(k)
	var sxx, sxz num.Accumulator
	for i := range x {
		sxx.Add((x[i] - mx) * (x[i] - mx))
		sxz.Add((x[i] - mx) * (z[i] - mz))
	}
	if sxx.Value() <= 1e-20*mx*mx*float64(k) {
		return Regression{Why: "all studies have the same standard error, so nothing can depend on it"}
	}
	r := Regression{DF: float64(k - 2), Available: true}
	r.Slope = sxz.Value() / sxx.Value()
	r.Intercept = mz - r.Slope*mx
	var rss num.Accumulator
	size := 0.0
	for i := range x {
		e := z[i] - r.Intercept - r.Slope*x[i]
		rss.Add(e * e)
		size += z[i] * z[i]
	}
	r.Dispersion = rss.Value() / r.DF
	if rss.Value() <= 1e-24*size {
		return Regression{Why: "the studies lie exactly on a line: there is no residual variation to test against"}
	}
	r.SlopeSE = math.Sqrt(r.Dispersion / sxx.Value())
	r.InterceptSE = math.Sqrt(r.Dispersion * (1/float64(k) + mx*mx/sxx.Value()))
	r.T = r.Intercept / r.InterceptSE
	r.P = 2 * num.StudentTSurvival(math.Abs(r.T), r.DF)
	return r
}
