package plan

// manualRoutes are the ways from what a paper reports to an estimate, the better one first.
var manualRoutes = []Method{
	{Name: "counts", Words: "events and people in both groups", Group: "routes",
		Assumes: "each person is counted once and independently", Misleads: "with few events the variance by the large-sample formula is rough; one half is added to all cells of a table with a zero",
		Reference: "Woolf 1955, Annals of Human Genetics 19:251-253; Cochrane Handbook, version 6, section 6.4.1"},
	{Name: "means-and-sds", Words: "mean, SD (or SE, or CI of the mean) and people in both groups", Group: "routes",
		Assumes: "the outcome is measured in the same units in both groups", Misleads: "a standard error entered as an SD makes the effect far too large",
		Reference: "Hedges 1981, Journal of Educational Statistics 6:107-128; Hedges & Olkin 1985, Statistical Methods for Meta-Analysis"},
	{Name: "correlation", Words: "r and the number of people", Group: "routes",
		Assumes: "both variables are normal", Misleads: "a restricted range lowers r", Reference: "Fisher 1921, Metron 1:3-32"},
	{Name: "estimate-with-se", Words: "the estimate and its standard error", Group: "routes",
		Assumes: "both are on the scale that the sheet says; the SE of a ratio is that of its logarithm", Misleads: "an adjusted estimate is not the unadjusted one", Reference: "Cochrane Handbook, version 6, section 6.3"},
	{Name: "estimate-with-variance", Words: "the estimate and its variance", Group: "routes",
		Assumes: "as estimate-with-se", Misleads: "as estimate-with-se", Reference: "Cochrane Handbook, version 6, section 6.3"},
	{Name: "estimate-with-ci", Words: "the estimate and its confidence interval", Group: "routes",
		Assumes: "the interval is symmetric on the analysed scale (the logarithm for ratios) and has the stated level", Misleads: "coarse rounding of the limits makes the variance coarse", Reference: "Cochrane Handbook, version 6, sections 6.3.1 and 6.3.2"},
	{Name: "t-statistic", Words: "t and the people in both groups", Group: "routes",
		Assumes: "a two-sample t with the pooled SD", Misleads: "a t adjusted for covariates is in units of the residual SD", Reference: "Cochrane Handbook, version 6, section 6.5.2; Hedges & Olkin 1985"},
	{Name: "estimate-with-p", Words: "the estimate and its exact p value", Group: "routes",
		Assumes: "the p value belongs to a test of no effect on the analysed scale", Misleads: "a p near 1 gives hardly any standard error", Reference: "Cochrane Handbook, version 6, section 6.3.2; by the exact quantile"},
	{Name: "p-value", Words: "an exact p value, its direction, and the people in both groups", Group: "routes",
		Assumes: "a two-sample t behind the p value", Misleads: "rounded p values make the effect coarse", Reference: "Cochrane Handbook, version 6, section 6.5.2"},
}
