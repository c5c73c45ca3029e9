package effect

// Bound says whether a printed figure is the value itself or only a bound of it ("p < .001").
type Bound int8

// The bounds that papers print.
const (
	Exact Bound = iota
	Below       // "<": the value lies below the figure
	Above       // ">": the value lies above the figure
)

// Figure is one number as a paper printed it. The zero Figure means "not reported".
type Figure struct {
	Value    float64
	Given    bool
	Decimals int    // digits printed after the decimal point, for its rounding interval; -1 when unknown (binary cells)
	Bound    Bound  // Exact unless the paper printed an inequality
	Cell     string // address it came from ("F7"), "" when it did not come from a sheet
}

// Of is a figure known to full precision.
func Of(v float64) Figure { return Figure{Value: v, Given: true, Decimals: -1} }

// Arm is what a paper reports about one group. Each field is optional.
type Arm struct {
	N                    Figure // people analysed
	Mean, SD, SE         Figure
	CILower, CIUpper     Figure // of the mean
	Median, Q1, Q3       Figure
	Min, Max             Figure
	Events               Figure // people with the event
	Proportion           Figure // 0..1; percent is turned into it by the reader
	Rate, PersonTime     Figure
	PreMean, PreSD       Figure // at baseline, for pre-post comparisons
	ChangeMean, ChangeSD Figure
}

// Direction says which way a result without a sign went.
type Direction int8

// The directions.
const (
	DirectionUnknown Direction = iota
	FavoursTreatment
	FavoursControl
)

// Reported is everything one record of an evidence sheet says about one comparison, in the paper's own terms.
// Routes pick from it what they need; no field is required.
type Reported struct {
	Treatment, Control Arm

	N             Figure // people in all, where the arms are not reported
	Estimate      Figure // an effect printed directly, in the units of EstimateScale
	StandardError Figure // of the estimate, on its analysed scale (log for ratios)
	Variance      Figure
	CILower       Figure // of the estimate, in its printed units
	CIUpper       Figure
	CILevel       Figure // 0..1; .95 is assumed (and said) when a CI has none
	// EstimateScale is the scale of Estimate; "" means the scale being analysed. Where EstimateIsLog is false a ratio is
	// printed as a ratio and is put on the log scale with its limits.
	EstimateScale Scale
	EstimateIsLog bool

	T, F, Z, ChiSquare Figure
	DF                 Figure // of t, or the denominator df of F
	DF1                Figure // numerator df of F
	P                  Figure
	PSides             int  // 1 or 2; 0 means two, and that is said
	NotSignificant     bool // "n.s." without a figure
	Direction          Direction

	R               Figure // Pearson correlation, or point-biserial with PointBiserial set
	PointBiserial   bool
	EtaSquared      Figure // or partial eta-squared
	Covariates      Figure // how many were adjusted for, for a partial correlation
	PrePostR        Figure // correlation of the paired or pre-post measures
	DifferenceMean  Figure // mean difference printed without arm means
	DifferenceSD    Figure
	DifferenceSE    Figure
	DifferenceLower Figure
	DifferenceUpper Figure
	Coefficient     Figure // unstandardized, with its StandardError; OutcomeSD standardizes it
	Beta            Figure // standardized coefficient of a group indicator
	OutcomeSD       Figure

	ObservedMinusExpected, LogRankVariance Figure
	LogRank                                Figure // chi-square of the log-rank test
	EventsTotal                            Figure
	ICC, ClusterSize, Clusters             Figure
	Alpha, Items                           Figure // Cronbach's alpha and its number of items
}
