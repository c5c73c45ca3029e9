package effect

// SMDVariance names the formula for the variance of a standardized mean difference.
type SMDVariance string

// The three forms. All use the group sizes; they differ in how the effect itself enters.
const (
	// VarianceAtG is (n1+n2)/(n1 n2) + g^2/(2(n1+n2)) (Hedges & Olkin 1985, ch. 5, at g), the default.
	VarianceAtG SMDVariance = "at-g"
	// VarianceJSquared is J^2 [(n1+n2)/(n1 n2) + d^2/(2(n1+n2))] (Borenstein et al. 2009, eq. 4.20 and 4.24).
	VarianceJSquared SMDVariance = "j-squared"
	// VarianceUnbiased is (n1+n2)/(n1 n2) + [1 - (df-2)/(df J^2)] g^2, unbiased under normality (Hedges 1983).
	VarianceUnbiased SMDVariance = "unbiased"
)

// Options say how records become estimates.
type Options struct {
	// Scale is the scale that estimates are wanted on; "" means AsGiven.
	Scale Scale
	// LowerBetter says that a smaller value favours the treatment. False: a larger one does. It only gives a sign to results printed without
	// one; no sign that was printed is turned.
	LowerBetter bool
	// CILevel is taken for an interval printed without its level; 0 means .95, and each use is noted.
	CILevel float64
	// SMDVariance is the variance of a standardized mean difference; "" means VarianceAtG.
	SMDVariance SMDVariance
	// ApproximateJ takes the printed approximation 1 - 3/(4 df - 1) of the small-sample factor, which worked examples use. False: the exact factor.
	ApproximateJ bool
}

// smallSample is the small-sample factor as these options have it.
func (o Options) smallSample(df float64) float64 {
	if o.ApproximateJ {
		return 1 - 3/(4*df-1)
	}
	return SmallSampleFactor(df)
}

func (o Options) withDefaults() Options {
	if o.Scale == "" {
		o.Scale = AsGiven
	}
	if o.CILevel == 0 {
		o.CILevel = 0.95
	}
	if o.SMDVariance == "" {
		o.SMDVariance = VarianceAtG
	}
	return o
}
