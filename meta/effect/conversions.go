package effect

import (
	"math"

	"footing/internal/num"
)

// Conversions between effect sizes. a, where it appears, is (n1+n2)^2/(n1 n2), which is 4 for equal groups. Variances follow by the delta method (Borenstein et al. 2009, ch. 7).

// LogOddsOfD turns a standardized mean difference into a log odds ratio: d pi/sqrt 3 (Hasselblad & Hedges 1995).
func LogOddsOfD(d, variance float64) (logOdds, v float64) {
	c := math.Pi / math.Sqrt(3)
	return d * c, variance * c * c
}

// DOfLogOdds is the inverse of LogOddsOfD.
func DOfLogOdds(logOdds, variance float64) (d, v float64) {
	c := math.Sqrt(3) / math.Pi
	return logOdds * c, variance * c * c
}

// ROfD turns d into a point-biserial r: d/sqrt(d^2 + a).
func ROfD(d, variance, a float64) (r, v float64) {
	s := d*d + a
	return d / math.Sqrt(s), a * a * variance / (s * s * s)
}

// DOfR is d for two groups cut from a correlation: 2r/sqrt(1 - r^2), |r| < 1.
func DOfR(r, variance float64) (d, v float64) {
	q := (1 - r) * (1 + r)
	return 2 * r / math.Sqrt(q), 4 * variance / (q * q * q)
}

// FOfD is Cohen's f of two equal groups: |d|/2.
func FOfD(d float64) float64 { return math.Abs(d) / 2 }

// F2OfR2 is Cohen's f squared from a share of variance, 0 to below 1.
func F2OfR2(r2 float64) float64 { return r2 / (1 - r2) }

// EtaSquaredOfF is the share of variance that f stands for: f^2/(1 + f^2).
func EtaSquaredOfF(f float64) float64 { return f * f / (1 + f*f) }

// WOfChiSquare is Cohen's w of a contingency table: sqrt(chi2/n).
func WOfChiSquare(chi2, n float64) float64 { return math.Sqrt(chi2 / n) }

// Superiority is the chance that one person picked from the treated has a higher value than one from the others, for a normal outcome with equal SDs: Phi(d/sqrt 2).
func Superiority(d float64) float64 { return num.NormalCDF(d / math.Sqrt2) }

// U3 is the share of the control group that lies below the mean of the treated: Phi(d) (Cohen 1988).
func U3(d float64) float64 { return num.NormalCDF(d) }

// NonOverlap is Cohen's U1, the share of both groups together that does not overlap: (2 Phi(|d|/2) - 1)/Phi(|d|/2).
func NonOverlap(d float64) float64 {
	p := num.NormalCDF(math.Abs(d) / 2)
	return (2*p - 1) / p
}

// Overlap is the overlapping share of two normal curves: 2 Phi(-|d|/2).
func Overlap(d float64) float64 { return 2 * num.NormalCDF(-math.Abs(d)/2) }

// TreatedRisk is the risk that an odds ratio makes of a control risk, both between 0 and 1.
func TreatedRisk(logOdds, control float64) float64 {
	odds := control / (1 - control) * math.Exp(logOdds)
	return odds / (1 + odds)
}

// NumberNeeded is the number needed to treat for one more (or one fewer) event, from two risks: 1/|difference|, rounded up; +Inf where the risks are equal.
func NumberNeeded(treated, control float64) float64 {
	return math.Ceil(1/math.Abs(treated-control) - 1e-9)
}
