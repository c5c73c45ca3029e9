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

// PairedVariance names the formula for the variance of a standardized mean change or paired difference in raw-score SDs.
type PairedVariance string

// The forms; n is the number of pairs, r the correlation within them.
const (
	// PairedAtG is 2(1-r)/n + g^2/(2n), the default. With few pairs and a high r it is .77 of the truth (n 10, r .9, d 1.2) and 1.00 at n = 1000.
	PairedAtG PairedVariance = "at-g"
	// PairedPrinted is J^2 2(1-r) [1/n + d^2/(2n)] (Borenstein et al. 2009, eq. 4.28), which worked values need: .28 to .38 of the truth at r = .9, d = 1.2.
	PairedPrinted PairedVariance = "printed"
	// PairedUnbiased is the exact variance of g under normality with an unbiased estimate of the squared effect in it (after Becker 1988 and Morris 2008).
	PairedUnbiased PairedVariance = "unbiased"
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
	// PairedVariance is the variance of a paired standardized difference; "" means PairedAtG.
	PairedVariance PairedVariance
	// ApproximateJ takes the printed approximation 1 - 3/(4 df - 1) of the small-sample factor, which worked examples use. False: the exact factor.
	ApproximateJ bool
	// PrePostR is taken for a correlation within pairs that a record does not give, and each use is a finding; nil means that such a record can't be used.
	PrePostR *float64
	// ICC is taken for a clustered record that gives its cluster size but no intracluster correlation, and each use is a finding; nil means that no correction is made.
	ICC *float64
	// Reliability of the outcome measure, above 0 and at most 1: effects are corrected for attenuation (Spearman 1904). 0 means no correction.
	Reliability float64
	// ApproximateP takes the printed closed form of Altman & Bland 2011 from a p value to z in place of the exact quantile.
	ApproximateP bool
	// Glass standardizes by the control group's SD (Glass 1976) in place of the pooled one.
	Glass bool
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
	if o.PairedVariance == "" {
		o.PairedVariance = PairedAtG
	}
	return o
}

// smallSample is the small-sample factor as these options have it.
func (o Options) smallSample(df float64) float64 {
	if o.ApproximateJ {
		return 1 - 3/(4*df-1)
	}
	return SmallSampleFactor(df)
}
