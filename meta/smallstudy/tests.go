package smallstudy

import (
	"math"

	"footing/internal/num"
	"footing/meta"
	"footing/meta/effect"
)

// Test is a check without an adjusted estimate.
type Test struct {
	Statistic float64
	DF        float64 // +Inf for the normal
	P         float64 // two-sided unless the test says other
	Figures   map[string]float64
	Available bool
	Why       string
}

// RankCorrelation is Kendall's tau-b between the standardised deviate (y - mean)/sqrt(v - 1/sum w) and v, with the tie-corrected normal p, without continuity
// correction (Begg & Mazumdar 1994, Biometrics 50:1088). Differences below 1e-12 of the data's scale are ties.
func RankCorrelation(d meta.Data) Test {
	k := d.K()
	if k < 3 {
		return Test{Why: needs(3, k)}
	}
	m := d.MeanAt(0)
	z := make([]float64, k)
	for i, v := range d.V {
		left := v - m.StandardError*m.StandardError
		if !(left > 1e-14*v) {
			return Test{Why: "one study holds all the weight"}
		}
		z[i] = (d.Y[i] - m.Estimate) / math.Sqrt(left)
	}
	sign := func(x []float64) func(i, j int) float64 {
		scale := 0.0
		for _, a := range x {
			scale = math.Max(scale, math.Abs(a))
		}
		return func(i, j int) float64 {
			switch diff := x[i] - x[j]; {
			case math.Abs(diff) <= 1e-12*scale:
				return 0
			case diff > 0:
				return 1
			}
			return -1
		}
	}
	sz, sv := sign(z), sign(d.V)
	var s, tiedZ, tiedV float64
	groupZ, groupV := make([]float64, k), make([]float64, k)
	for i := 0; i < k; i++ {
		for j := i + 1; j < k; j++ {
			a, b := sz(i, j), sv(i, j)
			s += a * b
			if a == 0 {
				tiedZ++
				groupZ[i]++
				groupZ[j]++
			}
			if b == 0 {
				tiedV++
				groupV[i]++
				groupV[j]++
			}
		}
	}
	n := float64(k)
	pairs := n * (n - 1) / 2
	if tiedZ == pairs || tiedV == pairs {
		return Test{Why: whySameError}
	}
	// Kendall 1970, eq. 4.3: the tie terms are sums over the tied groups; a study with g - 1 ties carries 1/g of its group's term.
	terms := func(g []float64) (a, b, c float64) {
		for _, ties := range g {
			t := ties + 1
			a += (t - 1) * (2*t + 5)
			b += (t - 1) * (t - 2)
			c += t - 1
		}
		return a, b, c
	}
	a1, b1, c1 := terms(groupZ)
	a2, b2, c2 := terms(groupV)
	variance := (n*(n-1)*(2*n+5)-a1-a2)/18 + b1*b2/(9*n*(n-1)*(n-2)) + c1*c2/(2*n*(n-1))
	stat := s / math.Sqrt(variance)
	return Test{Statistic: stat, DF: math.Inf(1), P: 2 * num.NormalSurvival(math.Abs(stat)), Available: true,
		Figures: map[string]float64{"rank correlation": s / math.Sqrt((pairs-tiedZ)*(pairs-tiedV))}}
}

// Peters regresses the log odds ratio on 1/N with weights (1/events + 1/non-events)^-1, t(k - 2) (Peters et al. 2006, JAMA 295:676). logOR[i] belongs to tables[i].
func Peters(logOR []float64, tables []effect.Table) Test {
	k := len(tables)
	if k < 3 {
		return Test{Why: needs(3, k)}
	}
	x, w := make([]float64, k), make([]float64, k)
	for i, t := range tables {
		n := t.TotalTreatment + t.TotalControl
		m := t.EventsTreatment + t.EventsControl
		x[i], w[i] = 1/n, m*(n-m)/n
	}
	l := fitLine(x, logOR, w)
	if why := l.why(k); why != "" {
		return Test{Why: why}
	}
	return slopeTest(l.b, l.bSE, l.df, "slope on 1/N")
}

func slopeTest(b, se, df float64, name string) Test {
	return Test{Statistic: b / se, DF: df, P: 2 * num.StudentTSurvival(math.Abs(b/se), df), Figures: map[string]float64{name: b, name + " standard error": se}, Available: true}
}

// Harbord regresses Z/sqrt V on sqrt V, with Z the efficient score and V its variance under no effect (the hypergeometric one); the intercept is the test, t(k -
// 2) (Harbord, Egger & Sterne 2006, Stat Med 25:3443). Tables without information are left out.
func Harbord(tables []effect.Table) Test {
	var x, y, w []float64
	for _, t := range tables {
		n1, n2 := t.TotalTreatment, t.TotalControl
		n, m := n1+n2, t.EventsTreatment+t.EventsControl
		if m == 0 || m == n || n < 2 {
			continue
		}
		v := n1 * n2 * m * (n - m) / (n * n * (n - 1))
		x, y, w = append(x, math.Sqrt(v)), append(y, (t.EventsTreatment-n1*m/n)/math.Sqrt(v)), append(w, 1)
	}
	l := fitLine(x, y, w)
	if why := l.why(len(x)); why != "" {
		return Test{Why: why}
	}
	return slopeTest(l.a, l.aSE, l.df, "intercept")
}

// ExcessSignificance compares the number of studies with two-sided p < .05 with the number that their power for the common-effect mean gives: chi-square with 1 df
// (Ioannidis & Trikalinos 2007, Clin Trials 4:245).
func ExcessSignificance(d meta.Data) Test {
	k := float64(d.K())
	if k < 2 {
		return Test{Why: needs(2, d.K())}
	}
	z := num.NormalQuantileUpper(0.025)
	mean := d.MeanAt(0).Estimate
	var expected num.Accumulator
	observed := 0.0
	for i, v := range d.V {
		s := math.Sqrt(v)
		if math.Abs(d.Y[i])/s > z {
			observed++
		}
		expected.Add(num.NormalSurvival(z-mean/s) + num.NormalSurvival(z+mean/s))
	}
	e := expected.Value()
	if !(k-e > 1e-12*k) {
		return Test{Why: "every study has full power for the mean, so that none can be in excess"}
	}
	x := (observed - e) * (observed - e) * (1/e + 1/(k-e))
	return Test{Statistic: x, DF: 1, P: num.ChiSquaredSurvival(x, 1), Figures: map[string]float64{"significant": observed, "expected significant": e}, Available: true}
}

// FailSafeN is the number of studies with nothing that would raise the combined one-sided p above .05: (sum z)^2/z(.05)^2 - k, not below 0 (Rosenthal 1979, Psychol Bull
// 86:638). With a criterion other than 0 it also gives Orwin's number (Orwin 1983, J Educ Stat 8:157): that which would bring the plain mean down to the criterion.
func FailSafeN(d meta.Data, favours, criterion float64) Test {
	var sum, plain num.Accumulator
	for i, v := range d.V {
		sum.Add(favours * d.Y[i] / math.Sqrt(v))
		plain.Add(favours * d.Y[i])
	}
	k := float64(d.K())
	z := num.NormalQuantileUpper(0.05)
	s := math.Max(0, sum.Value())
	out := Test{Available: true, Figures: map[string]float64{"studies": math.Max(0, s*s/(z*z)-k)}}
	out.Statistic = sum.Value() / math.Sqrt(k)
	out.DF, out.P = math.Inf(1), num.NormalSurvival(out.Statistic)
	if c := favours * criterion; c > 0 {
		out.Figures["studies to reach the smallest worthwhile effect"] = math.Max(0, k*(plain.Value()/k-c)/c)
	}
	return out
}
