package effect

// Scale names the scale on which an estimate is analysed. Ratios are analysed as their natural logarithm.
type Scale string

// The scales. AsGiven is the scale of a sheet of bare estimates that says no more.
const (
	AsGiven                    Scale = "as-given"
	StandardizedMeanDifference Scale = "standardized-mean-difference" // Hedges g
	MeanDifference             Scale = "mean-difference"
	LogRatioOfMeans            Scale = "log-ratio-of-means"
	LogVariabilityRatio        Scale = "log-variability-ratio"
	LogOddsRatio               Scale = "log-odds-ratio"
	LogRiskRatio               Scale = "log-risk-ratio"
	RiskDifference             Scale = "risk-difference"
	LogHazardRatio             Scale = "log-hazard-ratio"
	LogRateRatio               Scale = "log-rate-ratio"
	RateDifference             Scale = "rate-difference"
	FisherZ                    Scale = "fisher-z" // correlation, analysed as z
	PartialFisherZ             Scale = "partial-fisher-z"
	LogitProportion            Scale = "logit-proportion"
	Mean                       Scale = "mean"
	LogSD                      Scale = "log-sd"
	LogRate                    Scale = "log-rate"
	ICC                        Scale = "intracluster-correlation"
	CronbachAlpha              Scale = "cronbach-alpha"
)
