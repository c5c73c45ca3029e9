package smallstudy

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta"
)

// Adjusted is an adjusted mean with its interval. Where Available is false, Why says why.
type Adjusted struct {
	Interval  meta.Interval // DF +Inf is the normal
	Used      int           // studies that it rests on
	Part      string        // of the conditional estimate: the form that was taken
	Available bool
	Why       string
}

func needs(n, k int) string { return fmt.Sprintf("needs at least %d studies; there %s", n, isAre(k)) }

func isAre(k int) string {
	if k == 1 {
		return "is 1"
	}
	return fmt.Sprintf("are %d", k)
}

// tInterval makes an interval by t (df = +Inf: the normal).
func tInterval(method string, estimate, se, df, level float64) meta.Interval {
	in := meta.Interval{Method: method, Level: level, Estimate: estimate, StandardError: se, DF: df, Statistic: estimate / se, HasTest: true, Available: true}
	q := num.NormalQuantileUpper((1 - level) / 2)
	in.P = 2 * num.NormalSurvival(math.Abs(in.Statistic))
	if !math.IsInf(df, 1) {
		q = num.StudentTQuantileUpper((1-level)/2, df)
		in.P = 2 * num.StudentTSurvival(math.Abs(in.Statistic), df)
	}
	in.Lower, in.Upper = estimate-q*se, estimate+q*se
	return in
}

// PET is the effect that the regression of y on its standard error, weights 1/v, gives at an error of 0, with the dispersion as estimated and t(k - 2): the
// slope of Egger's regression (Stanley & Doucouliagos 2014, Res Synth Methods 5:60).
func PET(d meta.Data, level float64) Adjusted {
	x := make([]float64, d.K())
	for i, v := range d.V {
		x[i] = math.Sqrt(v)
	}
	return atZero(d, x, "pet", level)
}

// PEESE is the same with the variance in place of the standard error.
func PEESE(d meta.Data, level float64) Adjusted { return atZero(d, d.V, "peese", level) }

func atZero(d meta.Data, x []float64, method string, level float64) Adjusted {
	l := fitLine(x, d.Y, weights(d))
	if why := l.why(d.K()); why != "" {
		return Adjusted{Why: why}
	}
	return Adjusted{Interval: tInterval(method, l.a, l.aSE, l.df, level), Used: d.K(), Available: true}
}

func weights(d meta.Data) []float64 {
	w := make([]float64, d.K())
	for i, v := range d.V {
		w[i] = 1 / v
	}
	return w
}

// Conditional is PEESE when PET's effect is significant one-sided at .05 in the favoured direction (favours +1 or -1), else PET.
func Conditional(d meta.Data, favours, level float64) Adjusted {
	pet := PET(d, level)
	if !pet.Available {
		return pet
	}
	out := pet
	out.Part = "pet"
	if num.StudentTSurvival(favours*pet.Interval.Statistic, pet.Interval.DF) < 0.05 {
		out = PEESE(d, level)
		out.Part = "peese"
	}
	out.Interval.Method = "pet-peese"
	return out
}

// UnrestrictedWLS is the common-effect mean with the dispersion as estimated, t(k - 1) (Stanley & Doucouliagos 2015, Stat Med 34:2116).
func UnrestrictedWLS(d meta.Data, level float64) Adjusted {
	if d.K() < 2 {
		return Adjusted{Why: needs(2, d.K())}
	}
	m := d.MeanAt(0)
	df := float64(d.K() - 1)
	se := m.StandardError * math.Sqrt(m.Q/df)
	if !(se > 1e-13*math.Abs(m.Estimate)) {
		return Adjusted{Why: "all estimates are equal: the interval would have width 0"}
	}
	return Adjusted{Interval: tInterval("unrestricted-weighted-least-squares", m.Estimate, se, df, level), Used: d.K(), Available: true}
}

// WAAP pools the adequately powered studies alone, those with a standard error of at most |mean|/2.8, as UnrestrictedWLS does (Stanley, Doucouliagos & Ioannidis 2017,
// Stat Med 36:1580). It is not available below two of them.
func WAAP(d meta.Data, level float64) Adjusted {
	if d.K() < 2 {
		return Adjusted{Why: needs(2, d.K())}
	}
	limit := math.Abs(d.MeanAt(0).Estimate) / 2.8
	var kept meta.Data
	for i, v := range d.V {
		if math.Sqrt(v) <= limit {
			kept.Y, kept.V = append(kept.Y, d.Y[i]), append(kept.V, v)
		}
	}
	if kept.K() < 2 {
		return Adjusted{Why: fmt.Sprintf("needs at least 2 studies with power .80 for the mean; there %s", isAre(kept.K()))}
	}
	out := UnrestrictedWLS(kept, level)
	out.Interval.Method = "adequately-powered"
	return out
}

// LimitEstimate is the effect that a study of unlimited size has on the radial line of y/sqrt(v + tau2) on 1/sqrt(v + tau2), with DerSimonian-Laird tau2: slope +
// tau x intercept (Ruecker et al. 2011, Biostatistics 12:122). Its standard error takes tau2 as known.
func LimitEstimate(d meta.Data, level float64) Adjusted {
	dl, _ := meta.EstimatorByName("")
	tau2 := dl.Estimate(d).Value
	k := d.K()
	x, y, w := make([]float64, k), make([]float64, k), make([]float64, k)
	for i, v := range d.V {
		s := math.Sqrt(v + tau2)
		x[i], y[i], w[i] = 1/s, d.Y[i]/s, 1
	}
	l := fitLine(x, y, w)
	if why := l.why(k); why != "" {
		return Adjusted{Why: why}
	}
	tau := math.Sqrt(tau2)
	se := math.Sqrt(math.Max(0, l.bSE*l.bSE+tau2*l.aSE*l.aSE+2*tau*l.abCov))
	if !(se > 0) {
		return Adjusted{Why: whyExact}
	}
	return Adjusted{Interval: tInterval("limit-estimate", l.b+tau*l.a, se, l.df, level), Used: k, Available: true}
}
