package smallstudy

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta"
	"footing/meta/effect"
)

// line is a weighted least-squares line y = a + b x with multiplicative dispersion as estimated, not floored.
type line struct {
	a, b, seA, seB, dispersion float64
	df                         float64
	ok                         bool
	why                        string
}

// weightedLine fits a line with weights w; SEs carry the residual dispersion.
func weightedLine(x, y, w []float64) line {
	k := len(x)
	if k < 3 {
		return line{why: fmt.Sprintf("a regression needs at least 3 studies; there are %d", k)}
	}
	var sw, swx, swy num.Accumulator
	for i := range x {
		sw.Add(w[i])
		swx.Add(w[i] * x[i])
		swy.Add(w[i] * y[i])
	}
	mx, my := swx.Value()/sw.Value(), swy.Value()/sw.Value()
	var sxx, sxy, size num.Accumulator
	for i := range x {
		dx := x[i] - mx
		sxx.Add(w[i] * dx * dx)
		sxy.Add(w[i] * dx * (y[i] - my))
		size.Add(w[i] * x[i] * x[i])
	}
	if sxx.Value() <= 1e-20*size.Value() {
		return line{why: "all studies have the same precision, so nothing can depend on it"}
	}
	l := line{df: float64(k - 2), ok: true}
	l.b = sxy.Value() / sxx.Value()
	l.a = my - l.b*mx
	var rss num.Accumulator
	for i := range x {
		r := y[i] - l.a - l.b*x[i]
		rss.Add(w[i] * r * r)
	}
	l.dispersion = rss.Value() / l.df
	if l.dispersion <= 1e-24*math.Abs(swy.Value()*my)/float64(k) {
		return line{why: "the studies lie exactly on a line: there is no residual variation to test against"}
	}
	l.seB = math.Sqrt(l.dispersion / sxx.Value())
	l.seA = math.Sqrt(l.dispersion * (1/sw.Value() + mx*mx/sxx.Value()))
	return l
}

// Estimate is an adjusted mean with its interval, or why there is none.
type Estimate struct {
	Value, StandardError float64
	DF                   float64 // +Inf for the normal
	Lower, Upper         float64
	P                    float64 // two-sided, against no effect
	Used                 int     // studies that it rests on
	Available            bool
	Why                  string
}

func newEstimate(value, se, df, level float64, used int) Estimate {
	if !(se > 0) || math.IsInf(se, 0) || math.IsNaN(value) {
		return Estimate{Why: "its standard error is 0 or unknown"}
	}
	q, p := num.NormalQuantileUpper((1-level)/2), 2*num.NormalSurvival(math.Abs(value)/se)
	if !math.IsInf(df, 1) {
		q, p = num.StudentTQuantileUpper((1-level)/2, df), 2*num.StudentTSurvival(math.Abs(value)/se, df)
	}
	return Estimate{Value: value, StandardError: se, DF: df, Lower: value - q*se, Upper: value + q*se, P: p, Used: used, Available: true}
}

func weights(d meta.Data) (se, w []float64) {
	se, w = make([]float64, d.K()), make([]float64, d.K())
	for i, v := range d.V {
		se[i], w[i] = math.Sqrt(v), 1/v
	}
	return se, w
}

// PET is the precision-effect estimate: what a regression of the effect on its standard error, weighted by precision, leaves at a standard error of 0 (Stanley & Doucouliagos 2014). It is the slope of Egger's regression.
func PET(d meta.Data, level float64) Estimate {
	se, w := weights(d)
	l := weightedLine(se, d.Y, w)
	if !l.ok {
		return Estimate{Why: l.why}
	}
	return newEstimate(l.a, l.seA, l.df, level, d.K())
}

// PEESE is the same with the variance in place of the standard error (Stanley & Doucouliagos 2014).
func PEESE(d meta.Data, level float64) Estimate {
	_, w := weights(d)
	l := weightedLine(d.V, d.Y, w)
	if !l.ok {
		return Estimate{Why: l.why}
	}
	return newEstimate(l.a, l.seA, l.df, level, d.K())
}

// PETPEESE takes PEESE when PET's effect is significant one-sided at .05 in the direction of sign, else PET. usedPEESE says which.
func PETPEESE(d meta.Data, sign, level float64) (e Estimate, usedPEESE bool) {
	pet := PET(d, level)
	if !pet.Available {
		return pet, false
	}
	if num.StudentTSurvival(sign*pet.Value/pet.StandardError, pet.DF) < 0.05 {
		if p := PEESE(d, level); p.Available {
			return p, true
		}
	}
	return pet, false
}

// UnrestrictedWLS is the common-effect mean whose standard error carries the dispersion Q/(k-1) as estimated, with t(k-1) (Stanley & Doucouliagos 2015).
func UnrestrictedWLS(d meta.Data, level float64) Estimate {
	k := d.K()
	if k < 2 {
		return Estimate{Why: "needs at least 2 studies"}
	}
	m := d.MeanAt(0)
	return newEstimate(m.Estimate, m.StandardError*math.Sqrt(m.Q/float64(k-1)), float64(k-1), level, k)
}

// AdequatelyPowered is the unrestricted weighted least squares of the studies with a power of 80% or more at its own first estimate: those with s <= |mean|/2.8 (Ioannidis, Stanley & Doucouliagos 2017).
func AdequatelyPowered(d meta.Data, level float64) Estimate {
	first := UnrestrictedWLS(d, level)
	if !first.Available {
		return first
	}
	var kept meta.Data
	for i, v := range d.V {
		if math.Sqrt(v) <= math.Abs(first.Value)/2.8 {
			kept.Y, kept.V = append(kept.Y, d.Y[i]), append(kept.V, v)
		}
	}
	if kept.K() < 2 {
		return Estimate{Why: fmt.Sprintf("%d of %d studies are adequately powered; at least 2 are needed", kept.K(), d.K())}
	}
	return UnrestrictedWLS(kept, level)
}

// Limit is the limit estimate (Ruecker et al. 2011): the line of y/sqrt(v + tau2) on 1/sqrt(v + tau2), with the DerSimonian-Laird tau2; its expectation for a study of endless size is slope + tau x intercept.
func Limit(d meta.Data, level float64) Estimate {
	dl, _ := meta.EstimatorByName("")
	tau2 := dl.Estimate(d).Value
	shifted := meta.Data{Y: d.Y, V: make([]float64, d.K())}
	for i, v := range d.V {
		shifted.V[i] = v + tau2
	}
	r := Egger(shifted)
	if !r.Available {
		return Estimate{Why: r.Why}
	}
	tau := math.Sqrt(tau2)
	// var(slope + tau a) with the covariance of slope and intercept of a least-squares line, -mean(x) var(slope).
	mean := 0.0
	for _, v := range shifted.V {
		mean += 1 / math.Sqrt(v)
	}
	mean /= float64(d.K())
	variance := r.SlopeSE*r.SlopeSE + tau2*r.InterceptSE*r.InterceptSE - 2*tau*mean*r.SlopeSE*r.SlopeSE
	return newEstimate(r.Slope+tau*r.Intercept, math.Sqrt(math.Max(0, variance)), r.DF, level, d.K())
}

// Test is a check with its statistic, or why it can't be made.
type Test struct {
	Statistic, DF, P float64
	Figures          map[string]float64
	Available        bool
	Why              string
}

// Peters regresses the log odds ratio on 1/n, weighted by the precision that the margins alone give, so that effect and precision are not tied (Peters et al. 2006).
func Peters(y []float64, tables []effect.Table) Test {
	x, w := make([]float64, len(y)), make([]float64, len(y))
	for i, t := range tables {
		n := t.TotalTreatment + t.TotalControl
		m := t.EventsTreatment + t.EventsControl
		x[i], w[i] = 1/n, 1/(1/m+1/(n-m))
	}
	l := weightedLine(x, y, w)
	if !l.ok {
		return Test{Why: l.why}
	}
	t := l.b / l.seB
	return Test{Statistic: t, DF: l.df, P: 2 * num.StudentTSurvival(math.Abs(t), l.df), Figures: map[string]float64{"slope": l.b, "left at endless size": l.a}, Available: true}
}

// Harbord regresses the efficient score over the root of its variance on that root (Harbord, Egger & Sterne 2006); the intercept is the test.
func Harbord(tables []effect.Table) Test {
	var x, y []float64
	for _, t := range tables {
		n1, n2 := t.TotalTreatment, t.TotalControl
		n, m := n1+n2, t.EventsTreatment+t.EventsControl
		v := n1 * n2 * m * (n - m) / (n * n * (n - 1))
		if v > 0 {
			x, y = append(x, math.Sqrt(v)), append(y, (t.EventsTreatment-n1*m/n)/math.Sqrt(v))
		}
	}
	ones := make([]float64, len(x))
	for i := range ones {
		ones[i] = 1
	}
	l := weightedLine(x, y, ones)
	if !l.ok {
		return Test{Why: l.why}
	}
	t := l.a / l.seA
	return Test{Statistic: t, DF: l.df, P: 2 * num.StudentTSurvival(math.Abs(t), l.df), Figures: map[string]float64{"intercept": l.a, "slope": l.b}, Available: true}
}
