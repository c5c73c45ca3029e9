package meta

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"

	"footing/internal/num"
)

// Coefficient is one coefficient of a meta-regression.
type Coefficient struct {
	Name          string
	Estimate      float64
	StandardError float64
	Lower, Upper  float64
	Statistic, P  float64
}

// Regression is a regression of the effects on moderators.
type Regression struct {
	Coefficients []Coefficient // the intercept first
	TauSquared   TauSquared    // what the moderators leave, by moments: (Q_res - (k - p))/tr P, cut at 0
	QResidual    float64       // under common effects
	DF           float64       // k - p
	PResidual    float64
	QModel       float64 // Wald, of all moderators together, by normal theory
	PModel       float64
	// Explained is the share of the between-study variance that the moderators explain: max(0, 1 - tau2/tau2 without them); HasExplained is false where there was none.
	Explained    float64
	HasExplained bool
	covariance   *mat.SymDense
	quantile     float64
	level        float64
}

// RegressionOptions say how moderators are fitted. The zero value is random effects with Knapp-Hartung standard errors at 95%.
type RegressionOptions struct {
	CommonEffect bool    // tau-squared 0
	Normal       bool    // normal-theory standard errors and quantiles in place of Knapp & Hartung 2003 with t(k - p), whose factor is not floored
	Level        float64 // 0 means .95
}

// Regress fits y on an intercept and moderators by weighted least squares with weights 1/(v + tau2), tau2 by the method of moments (Raudenbush 2009; Borenstein et al.
// 2009, ch. 20; Knapp & Hartung 2003, Stat Med 22:2693). columns[j] holds one moderator, one value a study. It needs more studies than coefficients
// and moderators that differ; the error says which fails.
func (d Data) Regress(names []string, columns [][]float64, opt RegressionOptions) (Regression, error) {
	k, p := d.K(), len(columns)+1
	if len(names) != len(columns) {
		return Regression{}, fmt.Errorf("%d names for %d moderators", len(names), len(columns))
	}
	if k <= p {
		return Regression{}, fmt.Errorf("%d coefficients need more than %d studies; there are %d", p, p, k)
	}
	x, err := design(names, columns, k)
	if err != nil {
		return Regression{}, err
	}
	if opt.Level == 0 {
		opt.Level = 0.95
	}
	f := regressionFit{d: d, x: x}
	common, trace, err := f.at(0)
	if err != nil {
		return Regression{}, err
	}
	out := Regression{QResidual: common.q, DF: float64(k - p), level: opt.Level, TauSquared: TauSquared{Converged: true}}
	out.PResidual = num.ChiSquaredSurvival(out.QResidual, out.DF)
	used := common
	if !opt.CommonEffect {
		out.TauSquared = closedForm((common.q - out.DF) / trace)
		if used, _, err = f.at(out.TauSquared.Value); err != nil {
			return Regression{}, err
		}
		if without := dersimonianLaird(d).Value; without > 0 {
			out.Explained, out.HasExplained = math.Max(0, 1-out.TauSquared.Value/without), true
		}
	}
	out.wald(used, len(columns))
	out.coefficients(used, append([]string{"intercept"}, names...), opt)
	return out, nil
}

func design(names []string, columns [][]float64, k int) (*mat.Dense, error) {
	x := mat.NewDense(k, len(columns)+1, nil)
	for i := 0; i < k; i++ {
		x.Set(i, 0, 1)
	}
	for j, c := range columns {
		if len(c) != k {
			return nil, fmt.Errorf("moderator %q has %d values for %d studies", names[j], len(c), k)
		}
		for i, v := range c {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return nil, fmt.Errorf("moderator %q: the value of study %d is not finite", names[j], i+1)
			}
			x.Set(i, j+1, v)
		}
	}
	return x, nil
}

type regressionFit struct {
	d Data
	x *mat.Dense
}

// weightedFit is one weighted fit.
type weightedFit struct {
	beta       *mat.VecDense
	covariance *mat.SymDense // (X'WX)^-1
	q          float64
}

// at fits under one tau2, by the orthogonal factors of sqrt(W) X; trace is tr P = sum w - tr[(X'WX)^-1 X'W^2X].
func (f regressionFit) at(tau2 float64) (weightedFit, float64, error) {
	k, p := f.x.Dims()
	scaled, target := mat.NewDense(k, p, nil), mat.NewVecDense(k, nil)
	for i := 0; i < k; i++ {
		s := math.Sqrt(f.d.V[i] + tau2)
		for j := 0; j < p; j++ {
			scaled.Set(i, j, f.x.At(i, j)/s)
		}
		target.SetVec(i, f.d.Y[i]/s)
	}
	var qr mat.QR
	qr.Factorize(scaled)
	out := weightedFit{beta: mat.NewVecDense(p, nil)}
	var r mat.Dense
	qr.RTo(&r)
	for j := 0; j < p; j++ {
		if size := mat.Norm(scaled.ColView(j), 2); !(math.Abs(r.At(j, j)) > 1e-10*size) {
			return out, 0, fmt.Errorf("the moderators don't differ between studies, or one follows from the others")
		}
	}
	if err := qr.SolveVecTo(out.beta, false, target); err != nil {
		return out, 0, fmt.Errorf("the moderators are nearly the same: %w", err)
	}
	var inverse, cov mat.Dense
	top := r.Slice(0, p, 0, p)
	if err := inverse.Inverse(top); err != nil {
		return out, 0, fmt.Errorf("the moderators are nearly the same: %w", err)
	}
	cov.Mul(&inverse, inverse.T())
	out.covariance = mat.NewSymDense(p, nil)
	for a := 0; a < p; a++ {
		for b := a; b < p; b++ {
			out.covariance.SetSym(a, b, cov.At(a, b))
		}
	}
	var q, trace num.Accumulator
	for i := 0; i < k; i++ {
		w := 1 / (f.d.V[i] + tau2)
		e := f.d.Y[i] - mat.Dot(f.x.RowView(i), out.beta)
		q.Add(w * e * e)
		h := mat.Inner(scaled.RowView(i), out.covariance, scaled.RowView(i))
		trace.Add(w * (1 - h))
	}
	out.q = q.Value()
	return out, trace.Value(), nil
}

// wald tests all moderators together: b' V^-1 b over the coefficients but the intercept.
func (r *Regression) wald(f weightedFit, m int) {
	if m == 0 {
		r.PModel = 1
		return
	}
	b, v := mat.NewVecDense(m, nil), mat.NewSymDense(m, nil)
	for i := 0; i < m; i++ {
		b.SetVec(i, f.beta.AtVec(i+1))
		for j := i; j < m; j++ {
			v.SetSym(i, j, f.covariance.At(i+1, j+1))
		}
	}
	var chol mat.Cholesky
	var x mat.VecDense
	if chol.Factorize(v) && chol.SolveVecTo(&x, b) == nil {
		r.QModel = mat.Dot(b, &x)
	}
	r.PModel = num.ChiSquaredSurvival(r.QModel, float64(m))
}

func (r *Regression) coefficients(f weightedFit, names []string, opt RegressionOptions) {
	factor := 1.0
	r.quantile = num.NormalQuantileUpper((1 - opt.Level) / 2)
	if !opt.Normal {
		factor = f.q / r.DF
		r.quantile = num.StudentTQuantileUpper((1-opt.Level)/2, r.DF)
	}
	r.covariance = mat.NewSymDense(len(names), nil)
	r.covariance.ScaleSym(factor, f.covariance)
	for j, name := range names {
		c := Coefficient{Name: name, Estimate: f.beta.AtVec(j), StandardError: math.Sqrt(r.covariance.At(j, j))}
		c.Lower, c.Upper = c.Estimate-r.quantile*c.StandardError, c.Estimate+r.quantile*c.StandardError
		if c.StandardError > 0 {
			c.Statistic = c.Estimate / c.StandardError
			c.P = 2 * num.NormalSurvival(math.Abs(c.Statistic))
			if !opt.Normal {
				c.P = 2 * num.StudentTSurvival(math.Abs(c.Statistic), r.DF)
			}
		}
		r.Coefficients = append(r.Coefficients, c)
	}
}

// At is the mean effect at given values of the moderators, with its interval by the fit's own quantile.
func (r Regression) At(values []float64) (Interval, error) {
	if len(values)+1 != len(r.Coefficients) {
		return Interval{}, fmt.Errorf("%d values for %d moderators", len(values), len(r.Coefficients)-1)
	}
	x := mat.NewVecDense(len(values)+1, append([]float64{1}, values...))
	out := Interval{Method: "meta-regression", Level: r.level, DF: r.DF, Available: true}
	for j, c := range r.Coefficients {
		out.Estimate += x.AtVec(j) * c.Estimate
	}
	out.StandardError = math.Sqrt(mat.Inner(x, r.covariance, x))
	out.Lower, out.Upper = out.Estimate-r.quantile*out.StandardError, out.Estimate+r.quantile*out.StandardError
	return out, nil
}
