package smallstudy

import (
	"math"

	"footing/internal/num"
)

// line is a weighted least-squares fit of y = a + b x with the dispersion as estimated on k - 2 degrees of freedom.
type line struct {
	a, b             float64
	aSE, bSE, abCov  float64
	dispersion, df   float64
	available, exact bool
}

// fitLine fits it; available is false when x doesn't vary or fewer than 3 points are given, exact is true when the points lie on the line.
func fitLine(x, y, w []float64) line {
	k := len(x)
	if k < 3 {
		return line{}
	}
	var sw, sx, sy num.Accumulator
	for i := range x {
		sw.Add(w[i])
		sx.Add(w[i] * x[i])
		sy.Add(w[i] * y[i])
	}
	mx, my := sx.Value()/sw.Value(), sy.Value()/sw.Value()
	var sxx, sxy num.Accumulator
	for i := range x {
		sxx.Add(w[i] * (x[i] - mx) * (x[i] - mx))
		sxy.Add(w[i] * (x[i] - mx) * (y[i] - my))
	}
	if !(sxx.Value() > 1e-20*mx*mx*sw.Value()) {
		return line{}
	}
	l := line{df: float64(k - 2), available: true}
	l.b = sxy.Value() / sxx.Value()
	l.a = my - l.b*mx
	var rss, size num.Accumulator
	for i := range x {
		e := (y[i] - my) - l.b*(x[i]-mx)
		rss.Add(w[i] * e * e)
		size.Add(w[i] * y[i] * y[i])
	}
	l.exact = !(rss.Value() > 1e-24*size.Value())
	l.dispersion = rss.Value() / l.df
	l.bSE = math.Sqrt(l.dispersion / sxx.Value())
	l.aSE = math.Sqrt(l.dispersion * (1/sw.Value() + mx*mx/sxx.Value()))
	l.abCov = -l.dispersion * mx / sxx.Value()
	return l
}

const (
	whySameError = "all studies have the same standard error, so nothing can depend on it"
	whyExact     = "the studies lie exactly on a line: there is no residual variation to test against"
)

// why says what keeps the fit from being used.
func (l line) why(k int) string {
	switch {
	case k < 3:
		return needs(3, k)
	case !l.available:
		return whySameError
	case l.exact:
		return whyExact
	}
	return ""
}
