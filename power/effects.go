package power

// Effects is a distribution of the planned study's true effect, on the scale on which the study is sized. Assurance
// averages power over it.
type Effects interface {
	// CDF is the chance that the effect is at most x; Survival that it is above x. Each keeps its own tail's digits.
	CDF(x float64) float64
	Survival(x float64) float64
	Density(x float64) float64
	// Quantile is the x with CDF(x) = p, 0 < p < 1.
	Quantile(p float64) float64
}
