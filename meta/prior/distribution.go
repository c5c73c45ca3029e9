package prior

import (
	"fmt"
	"math"

	"footing/internal/num"
)

// Distribution is a distribution of a true effect on its analysed scale. Each tail keeps its own digits.
type Distribution interface {
	CDF(x float64) float64
	Survival(x float64) float64
	Density(x float64) float64
	// Quantile is the x with CDF(x) = p, 0 < p < 1.
	Quantile(p float64) float64
	// Moments are the mean and the SD where they exist.
	Moments() (mean, sd float64, hasMean, hasSD bool)
	Words() string
}

// Located is location + scale x Student's t with DF degrees of freedom; DF = +Inf is the normal.
type Located struct {
	Location, Scale, DF float64
}

// NewLocated checks its arguments: a finite location, a scale above 0, df above 0 (or +Inf).
func NewLocated(location, scale, df float64) (Located, error) {
	if math.IsNaN(location) || math.IsInf(location, 0) || !(scale > 0) || math.IsInf(scale, 0) || !(df > 0) {
		return Located{}, fmt.Errorf("no distribution has location %g, scale %g and %g degrees of freedom", location, scale, df)
	}
	return Located{location, scale, df}, nil
}

func (l Located) normal() bool { return math.IsInf(l.DF, 1) }

// CDF is the chance that the effect is at most x.
func (l Located) CDF(x float64) float64 {
	z := (x - l.Location) / l.Scale
	if l.normal() {
		return num.NormalCDF(z)
	}
	return num.StudentTCDF(z, l.DF)
}

// Survival is the chance that the effect is above x.
func (l Located) Survival(x float64) float64 {
	z := (x - l.Location) / l.Scale
	if l.normal() {
		return num.NormalSurvival(z)
	}
	return num.StudentTSurvival(z, l.DF)
}

// Density is the density at x.
func (l Located) Density(x float64) float64 {
	z := (x - l.Location) / l.Scale
	if l.normal() {
		return num.NormalPDF(z) / l.Scale
	}
	return num.StudentTPDF(z, l.DF) / l.Scale
}

// Quantile is the x with CDF(x) = p.
func (l Located) Quantile(p float64) float64 {
	if l.normal() {
		return l.Location + l.Scale*num.NormalQuantile(p)
	}
	return l.Location + l.Scale*num.StudentTQuantile(p, l.DF)
}

// Moments: a t with 1 df has no mean and one with 2 df no variance.
func (l Located) Moments() (mean, sd float64, hasMean, hasSD bool) {
	if l.normal() {
		return l.Location, l.Scale, true, true
	}
	if l.DF > 2 {
		return l.Location, l.Scale * math.Sqrt(l.DF/(l.DF-2)), true, true
	}
	return l.Location, 0, l.DF > 1, false
}

// Words describes the distribution.
func (l Located) Words() string {
	if l.normal() {
		return "normal"
	}
	return fmt.Sprintf("Student's t with %g degrees of freedom", l.DF)
}
