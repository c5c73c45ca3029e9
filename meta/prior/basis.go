package prior

import (
	"fmt"
	"math"

	"footing/meta"
)

// Predictive is the distribution of the true effect in a new setting: mean + t(k-2) sqrt(tau2 + SE^2) with the normal-theory SE (Higgins, Thompson & Spiegelhalter
// 2009). It needs three studies; the error says so.
func Predictive(d meta.Data, tau2 float64) (Located, error) {
	if d.K() < 3 {
		return Located{}, fmt.Errorf("a predictive distribution needs at least 3 studies; there %s", isAre(d.K()))
	}
	m := d.MeanAt(tau2)
	return NewLocated(m.Estimate, math.Sqrt(tau2+m.StandardError*m.StandardError), float64(d.K()-2))
}

// OfMean is the confidence distribution of the mean: t with the interval's own degrees of freedom.
func OfMean(in meta.Interval) (Located, error) {
	if !in.Available {
		return Located{}, fmt.Errorf("the mean has no interval: %s", in.Why)
	}
	return NewLocated(in.Estimate, in.StandardError, in.DF)
}

// AdjustedMean is a small-study adjusted mean with its standard error. An interval without one gives half its width over its own quantile.
type AdjustedMean struct {
	Estimate, StandardError float64
}

// AdjustedPredictive puts an adjusted mean and its standard error in place of the unadjusted ones; tau2 is kept.
func AdjustedPredictive(k int, a AdjustedMean, tau2 float64) (Located, error) {
	if k < 3 {
		return Located{}, fmt.Errorf("a predictive distribution needs at least 3 studies; there %s", isAre(k))
	}
	return NewLocated(a.Estimate, math.Sqrt(tau2+a.StandardError*a.StandardError), float64(k-2))
}

// AdjustedOfMean is the confidence distribution of an adjusted mean, normal.
func AdjustedOfMean(a AdjustedMean) (Located, error) {
	return NewLocated(a.Estimate, a.StandardError, math.Inf(1))
}

func isAre(k int) string {
	if k == 1 {
		return "is 1"
	}
	return fmt.Sprintf("are %d", k)
}
