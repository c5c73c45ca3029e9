package plan

var methodGroups = []string{"scales", "pooling", "intervals", "small studies", "range", "study", "routes"}

// manual holds every entry; each group stands in a file of its own.
var manual = gather(manualPooling, manualSmall, manualRange, manualStudy, manualScales, manualRoutes)

func gather(lists ...[]Method) []Method {
	var out []Method
	for _, l := range lists {
		out = append(out, l...)
	}
	return out
}

var manualPooling = []Method{
	{Name: "common-effect", Words: "common-effect mean by inverse variance", Group: "pooling",
		Assumes: "all studies estimate one and the same true effect", Misleads: "where true effects differ its interval is far too narrow",
		Reference: "Cochrane Handbook for Systematic Reviews of Interventions, version 6, section 10.3"},
	{Name: "dersimonian-laird", Words: "random-effects mean, tau-squared by the method of moments", Group: "pooling",
		Assumes: "true effects scatter around one mean; each study's variance is known", Misleads: "with few studies tau-squared is poorly known and is often cut at 0",
		Reference: "DerSimonian & Laird 1986, Controlled Clinical Trials 7:177-188"},
	{Name: "two-step-dersimonian-laird", Words: "moment estimate of tau-squared, repeated once with random-effects weights", Group: "pooling",
		Assumes: "as dersimonian-laird", Misleads: "as dersimonian-laird", Reference: "DerSimonian & Kacker 2007, Contemporary Clinical Trials 28:105-114"},
	{Name: "hedges-olkin", Words: "tau-squared by the variance component of an unweighted analysis of variance", Group: "pooling",
		Assumes: "true effects scatter around one mean", Misleads: "gives small studies as much say as large ones", Reference: "Hedges & Olkin 1985, Statistical Methods for Meta-Analysis"},
	{Name: "paule-mandel", Words: "tau-squared that makes the weighted sum of squares equal its degrees of freedom", Group: "pooling",
		Assumes: "true effects scatter around one mean; no distribution is needed", Misleads: "with few studies tau-squared is poorly known", Reference: "Paule & Mandel 1982, Journal of Research of the National Bureau of Standards 87:377-385"},
	{Name: "maximum-likelihood", Words: "tau-squared by maximum likelihood", Group: "pooling",
		Assumes: "true effects are normal around one mean", Misleads: "too small with few studies, since the mean is taken as known", Reference: "Hardy & Thompson 1996, Statistics in Medicine 15:619-629"},
	{Name: "restricted-maximum-likelihood", Words: "tau-squared by restricted maximum likelihood", Group: "pooling",
		Assumes: "true effects are normal around one mean", Misleads: "with few studies tau-squared is poorly known; the likelihood can have two maxima (the larger is taken)",
		Reference: "Veroniki et al. 2016, Research Synthesis Methods 7:55-79", Also: []string{"reml"}},
	{Name: "sidik-jonkman", Words: "tau-squared from a crude start value, never 0", Group: "pooling",
		Assumes: "true effects scatter around one mean", Misleads: "too large where the studies hardly differ", Reference: "Sidik & Jonkman 2005, Applied Statistics 54:367-384"},
	{Name: "hunter-schmidt", Words: "tau-squared from the weighted variance of the effects", Group: "pooling",
		Assumes: "true effects scatter around one mean", Misleads: "too small with few studies", Reference: "Hunter & Schmidt 2004, Methods of Meta-Analysis; form of Viechtbauer 2005, Journal of Educational and Behavioral Statistics 30:261-293"},
	{Name: "mantel-haenszel", Words: "common-effect ratio from the counts themselves", Group: "pooling",
		Assumes: "one true ratio in all tables", Misleads: "where true effects differ its interval is too narrow", Reference: "Robins, Breslow & Greenland 1986, Biometrics 42:311-323; Greenland & Robins 1985, Biometrics 41:55-68"},
	{Name: "peto", Words: "one-step odds ratio from observed minus expected events", Group: "pooling",
		Assumes: "rare events, groups of like size and effects that are not large", Misleads: "biased where groups are of unlike size or effects are large", Reference: "Yusuf et al. 1985, Progress in Cardiovascular Diseases 27:335-371"},
	{Name: "prediction-interval", Words: "interval for the true effect in a new setting", Group: "intervals",
		Assumes: "the new setting is drawn from the same field as the studies; true effects are normal", Misleads: "with fewer than about five studies it is very wide or rests on a tau-squared of 0",
		Reference: "Higgins, Thompson & Spiegelhalter 2009, Journal of the Royal Statistical Society A 172:137-159"},
	{Name: "normal", Words: "interval of the mean by the normal distribution", Group: "intervals",
		Assumes: "tau-squared is known", Misleads: "too narrow with fewer than some twenty studies", Reference: "DerSimonian & Laird 1986, Controlled Clinical Trials 7:177-188"},
	{Name: "hartung-knapp", Words: "interval of the mean by t with the weighted residual variance", Group: "intervals",
		Assumes: "true effects are normal around one mean", Misleads: "by chance it can be narrower than the common-effect interval", Reference: "Hartung & Knapp 2001, Statistics in Medicine 20:3875-3889; Sidik & Jonkman 2002, Statistics in Medicine 21:3153-3159"},
	{Name: "hartung-knapp-floored", Words: "the same, never narrower than with known variances", Group: "intervals",
		Assumes: "as hartung-knapp", Misleads: "wide with two or three studies", Reference: "Roever, Knapp & Friede 2015, BMC Medical Research Methodology 15:99"},
	{Name: "profile-likelihood", Words: "interval of the mean by profile likelihood", Group: "intervals",
		Assumes: "true effects are normal around one mean", Misleads: "too narrow with very few studies", Reference: "Hardy & Thompson 1996, Statistics in Medicine 15:619-629"},
	{Name: "q-profile", Words: "interval of tau-squared from the distribution of Q", Group: "intervals",
		Assumes: "true effects are normal", Misleads: "very wide with few studies", Reference: "Viechtbauer 2007, Statistics in Medicine 26:37-52"},
}
