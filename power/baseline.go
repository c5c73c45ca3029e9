package power

import (
	"fmt"
	"math"
	"sync"

	"gonum.org/v1/gonum/mat"

	"footing/internal/num"
)

// baselineT compares two means adjusted for a baseline measure whose correlation with the outcome is r.
//
// Given the baselines, the adjusted difference has variance (1 - r^2)(1/n1 + 1/n2)/B with B = 1/(1 + F/(N-2)), where F is the baseline's own between-group F statistic. With
// a normal baseline and random allocation B follows a beta distribution with shapes (N-2)/2 and 1/2, so that power is the noncentral t power with N - 3 degrees of freedom
// and noncentrality d sqrt(n1 n2/(N (1 - r^2)) B), averaged over B. The variance factor 1 - r^2 is that of Borm, Fransen & Lemmens 2007.
type baselineT struct {
	s     Study
	rules *sync.Map // N -> *baselineRule
}

func newBaselineT(s Study) (Design, error) {
	switch s.BaselineForm {
	case "", "fixed", "factor-only":
		return baselineT{s: s, rules: &sync.Map{}}, nil
	}
	return nil, fmt.Errorf("%q is no form of baseline adjustment; there are fixed and factor-only, and none for the average over chance imbalance", s.BaselineForm)
}

func (t baselineT) Info() Info {
	method := "exact, noncentral t averaged over the chance imbalance of the baseline"
	switch t.s.BaselineForm {
	case "fixed":
		method = "exact for balanced baselines, noncentral t"
	case "factor-only":
		method = "noncentral t with the variance factor 1 - r^2 and no degree of freedom spent"
	}
	return Info{Name: "baseline-adjusted-t", Words: "t test of two means adjusted for the baseline", Method: method, Reference: "Borm, Fransen & Lemmens 2007, J Clin Epidemiol 60:1234",
		MinN: minTwo(t.s, 3), Sides: t.s.Sides, Alpha: t.s.Alpha, Exact: true, Symmetric: true, Try: []float64{0.2, 0.5, 1.1}}
}

func (t baselineT) Groups(n int) []int { return allocated(n, t.s.Allocation.Ratio()) }

func (t baselineT) Power(effect float64, n int) Rejections {
	g := t.Groups(n)
	return t.at(effect, float64(g[0]), float64(g[1]))
}

// residual is the share of the outcome's variance that the baseline leaves.
func (t baselineT) residual() float64 {
	r := t.s.BaselineCorrelation
	return (1 - r) * (1 + r)
}

func (t baselineT) at(effect, n1, n2 float64) Rejections {
	total := n1 + n2
	delta := effect * math.Sqrt(n1*n2/total/t.residual())
	df := total - 3
	if t.s.BaselineForm == "factor-only" {
		df = total - 2
	}
	c := num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), df)
	if t.s.BaselineForm != "" {
		return rejectT(c, df, delta, t.s.Sides)
	}
	rule := t.rule(total)
	var above, below num.Accumulator
	for i, root := range rule.root {
		r := rejectT(c, df, delta*root, t.s.Sides)
		above.Add(rule.weight[i] * r.Above)
		below.Add(rule.weight[i] * r.Below)
	}
	return Rejections{Above: math.Min(1, above.Value()), Below: math.Min(1, below.Value()), OneSided: t.s.Sides == 1}
}

// baselineRule averages a function of sqrt B.
type baselineRule struct{ root, weight []float64 }

func (t baselineT) rule(total float64) *baselineRule {
	if r, ok := t.rules.Load(total); ok {
		return r.(*baselineRule)
	}
	r := newBaselineRule(total)
	t.rules.Store(total, r)
	return r
}

// newBaselineRule is the Gauss-Jacobi rule for u = 1 - B, beta with shapes 1/2 and (N-2)/2: nodes and weights are the eigenvalues and squared first components of the
// tridiagonal matrix of the recurrence (Golub & Welsch 1969). The integrand is smooth in u, whose spread shrinks with N.
func newBaselineRule(total float64) *baselineRule {
	points := 14
	switch {
	case total >= 150:
		points = 3
	case total >= 60:
		points = 4
	case total >= 20:
		points = 7
	}
	// Jacobi weights on [0, 1]: u^(a-1) (1-u)^(b-1) with a = 1/2, b = (N-2)/2, that is exponents alpha = b - 1 at the upper end, beta = a - 1 at the lower end of [-1, 1].
	al, be := (total-2)/2-1, -0.5
	m := mat.NewSymDense(points, nil)
	for i := 0; i < points; i++ {
		k := float64(i)
		s := 2*k + al + be
		diag := (be*be - al*al) / (s * (s + 2))
		if i == 0 {
			diag = (be - al) / (al + be + 2)
		}
		m.SetSym(i, i, diag)
		if i+1 < points {
			k++
			s = 2*k + al + be
			off := 4 * k * (k + al) * (k + be) * (k + al + be) / (s * s * (s + 1) * (s - 1))
			if i == 0 {
				off = 4 * (1 + al) * (1 + be) / ((2 + al + be) * (2 + al + be) * (3 + al + be))
			}
			m.SetSym(i, i+1, math.Sqrt(off))
		}
	}
	var e mat.EigenSym
	e.Factorize(m, true)
	values := e.Values(nil)
	var vectors mat.Dense
	e.VectorsTo(&vectors)
	rule := &baselineRule{}
	for i, x := range values {
		u := math.Max(0, (1+x)/2)
		w := vectors.At(0, i)
		rule.root = append(rule.root, math.Sqrt(math.Max(0, 1-u)))
		rule.weight = append(rule.weight, w*w)
	}
	return rule
}

func (t baselineT) Continuous(effect, n float64) (Rejections, bool) {
	n2 := n * t.s.Allocation.Ratio()
	if n+n2 <= 4.01 {
		return Rejections{}, true
	}
	return t.at(effect, n, n2), true
}

func (t baselineT) Guess(effect, target float64) float64 {
	return normalGuess(t.s, effect, target, t.residual()) + tExtra(t.s)
}

func (t baselineT) StandardError(_ float64, n int) float64 {
	g := t.Groups(n)
	return math.Sqrt((1/float64(g[0]) + 1/float64(g[1])) * t.residual())
}

func (t baselineT) Critical(sign float64, n int) float64 {
	g := t.Groups(n)
	df := float64(g[0] + g[1] - 3)
	if t.s.BaselineForm == "factor-only" {
		df++
	}
	return sign * num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), df) * t.StandardError(0, n)
}
