package importers

import "footing/meta/effect"

// feature is what one phrase of a heading contributes to its meaning.
type feature struct {
	base  string // "mean", "sd", "estimate", ...
	arm   string // "treatment", "control"
	side  string // "lower", "upper"
	time  string // "pre", "post", "change"
	scale effect.Scale
	log   bool
	sides int
	// weak features give way when the heading makes no sense with them ("t" is an arm only beside a figure).
	weak bool
	// maybe is the arm that the phrase names where no other word does ("post treatment").
	maybe string
	// percent marks "%", "per cent".
	percent bool
}

// phrases maps the phrases of headings, lower case and with single spaces, to what they say.
var phrases = buildPhrases()

func buildPhrases() map[string]feature {
	m := map[string]feature{}
	says := func(f feature, list ...string) {
		for _, p := range list {
			m[p] = f
		}
	}
	base := func(b string, list ...string) { says(feature{base: b}, list...) }

	// Words about the study. The number behind study sorts candidates for the label.
	base("study", "study", "studies", "study id", "study name", "study label", "first author year", "author year", "authors year", "study author", "study year", "studie", "etude", "estudio", "studio", "estudo", "undersokelse")
	base("study2", "trial", "trial name", "trial id", "paper", "article", "publication", "label", "experiment")
	base("study3", "author", "authors", "first author", "name", "reference", "ref", "citation", "source", "title of study", "autor", "autoren", "auteur", "auteurs", "autores", "autore")
	base("study4", "id", "record", "record id", "ref id", "refid", "study number", "study no")
	base("year", "year", "yr", "publication year", "year of publication", "pub year", "year published", "publication date", "jahr", "annee", "ano", "anno", "jaar", "aar")
	base("risk", "risk of bias", "rob", "rob 2", "rob 2 overall", "overall risk of bias", "risk of bias overall", "rob overall", "overall rob", "bias risk", "risk of bias judgement", "risk of bias judgment")
	base("relevance", "relevance", "relevance weight", "similarity", "closeness", "relevance 0 1")
	base("subgroup", "subgroup", "sub group", "strata", "stratum", "subset")
	base("status", "status", "state", "included", "include", "inclusion")
	base("notes", "notes", "note", "comment", "comments", "remark", "remarks", "annotation", "bemerkung", "bemerkungen", "notizen", "remarques", "notas", "opmerkingen")
	base("direction", "direction", "direction of effect", "effect direction", "favours", "favors", "sign")
	base("better", "higher is better", "higher better", "larger is better", "high is good", "higher is good", "better direction")
	base("scale", "scale", "effect measure", "measure of effect", "effect type", "type of effect", "effect scale", "metric", "effect size type", "effect size measure")
	base("sides", "sides", "tails", "sided", "tailed", "number of sides", "one or two sided")

	// Figures of one group.
	base("mean", "mean", "m", "means", "average", "avg", "mean score", "mean value", "x bar", "post test mean", "mw", "mittelwert", "mittel", "moyenne", "media", "gemiddelde")
	base("sd", "sd", "s d", "std", "stdev", "std dev", "st dev", "stddev", "standard deviation", "standard deviations", "std deviation", "standard dev", "sds", "std dev s", "standardabweichung", "stabw", "ecart type", "desviacion estandar", "desviacion tipica", "deviazione standard", "standaarddeviatie")
	base("se", "se", "s e", "sem", "s e m", "std err", "std error", "stderr", "standard error", "standard errors", "st error", "standard err", "standard error of the mean", "standard error mean", "std error of the mean", "standardfehler", "erreur standard", "erreur type", "error estandar", "errore standard", "standaardfout")
	base("n", "n", "sample size", "size", "sample", "number", "no", "num", "nr", "participants", "patients", "subjects", "people", "persons", "pupils", "students", "animals", "total n", "n total", "group size", "number of participants", "number of patients", "number of subjects", "number of people", "no of participants", "no of patients", "no of subjects", "pairs", "n pairs", "number of pairs", "n participants", "n patients", "n subjects", "n analysed", "n analyzed", "number analysed", "number analyzed", "n randomised", "n randomized", "number randomised", "number randomized", "total sample size", "total sample", "total number", "total participants", "total patients", "total people", "denominator", "overall n", "n overall", "anzahl", "effectif", "aantal", "numero", "stichprobe", "stichprobengrosse", "fallzahl")
	base("total", "total", "totals", "sum", "overall", "all")
	base("median", "median", "mdn", "med", "medians")
	base("q1", "q 1", "lower quartile", "first quartile", "1 st quartile", "25 th percentile", "25 percentile", "p 25", "25 th centile", "quartile 1", "iqr lower", "lower iqr", "iqr low")
	base("q3", "q 3", "upper quartile", "third quartile", "3 rd quartile", "75 th percentile", "75 percentile", "p 75", "75 th centile", "quartile 3", "iqr upper", "upper iqr", "iqr high")
	base("iqr", "iqr", "interquartile range", "inter quartile range", "quartiles", "q 1 q 3", "q 1 to q 3", "25 th 75 th percentile", "25 th to 75 th percentile")
	base("range", "range", "min max", "min to max", "minimum maximum")
	base("min", "min", "minimum", "range min", "range lower", "smallest")
	base("max", "max", "maximum", "range max", "range upper", "largest")
	base("events", "events", "event", "event count", "number of events", "n events", "no of events", "cases", "responders", "successes", "deaths", "number with event", "n with event", "count", "counts", "positives", "affected", "relapses", "failures", "ereignisse", "evenements", "eventos", "eventi", "gebeurtenissen")
	base("nonevents", "non events", "nonevents", "no event", "no events", "without event", "non event", "non responders", "nonresponders", "non cases", "survivors", "unaffected")
	base("proportion", "proportion", "prop", "risk", "event rate", "percentage", "prevalence", "incidence proportion", "response rate", "event proportion", "success rate")
	says(feature{percent: true}, "%", "percent", "per cent", "pct")
	base("rate", "rate", "incidence rate", "incidence", "event rate per person time")
	base("persontime", "person time", "person years", "persontime", "patient years", "exposure time", "time at risk", "follow up time", "person months", "person days")

	// Figures of the comparison.
	base("estimate", "estimate", "est", "effect", "effect size", "effect estimate", "es", "point estimate", "effect sizes", "treatment effect", "estimated effect", "effect value", "theta", "intervention effect", "effekt", "effet", "efecto", "effetto", "schatzer", "schatzwert", "effektstarke")
	base("variance", "variance", "var", "sampling variance", "v", "variance of estimate", "variance of the estimate", "effect variance")
	base("ci", "ci", "c i", "confidence interval", "confidence limit", "confidence limits", "conf int", "interval", "cl", "confidence bound", "conf limit", "conf interval", "confint")
	base("level", "confidence level", "ci level", "level of ci", "conf level", "level of confidence", "confidence coefficient")
	base("difference", "difference", "diff", "mean difference", "mean diff", "md", "difference in means", "difference of means", "difference between means", "raw difference", "raw mean difference", "unstandardized mean difference", "unstandardised mean difference", "between group difference", "group difference")
	base("t", "t value", "t stat", "t statistic", "t test", "tval", "tvalue", "t ratio", "students t", "t score")
	says(feature{base: "t", arm: "treatment", weak: true}, "t")
	base("f", "f", "f value", "f stat", "f statistic", "f ratio", "fvalue", "f test", "anova f")
	base("z", "z", "z value", "z stat", "z statistic", "z score", "zvalue")
	base("chi", "chi square", "chi squared", "chi 2", "chi", "chi sq", "chisq", "chisquare", "x 2", "x squared", "chi square statistic", "chi 2 statistic")
	base("df", "df", "d f", "degrees of freedom", "dof", "df 2", "df error", "error df", "residual df", "denominator df", "df residual", "df within", "df den")
	base("df1", "df 1", "numerator df", "df between", "df num", "df effect", "numerator degrees of freedom")
	base("p", "p", "p value", "pvalue", "p val", "pval", "significance", "sig", "probability", "prob", "exact p", "p level")
	says(feature{base: "p", sides: 1}, "one sided p", "p one sided", "one tailed p", "p one tailed", "1 sided p", "1 tailed p", "p value one sided", "one sided p value", "p 1 sided", "p 1 tailed")
	says(feature{base: "p", sides: 2}, "two sided p", "p two sided", "two tailed p", "p two tailed", "2 sided p", "2 tailed p", "p value two sided", "two sided p value", "p 2 sided", "p 2 tailed", "sig 2 tailed")
	base("r", "r", "correlation", "corr", "corr coefficient", "cor coefficient", "pearson r", "pearsons r", "correlation coefficient", "pearson correlation", "r value", "cor", "pearson")
	base("pbr", "point biserial r", "point biserial", "r pb", "rpb", "point biserial correlation")
	base("eta", "eta squared", "eta 2", "eta sq", "partial eta squared", "partial eta 2", "eta square", "partial eta sq")
	base("covariates", "covariates", "number of covariates", "n covariates", "covariates adjusted", "adjusted covariates")
	base("prepostr", "pre post correlation", "pre post r", "prepost r", "r pre post", "correlation pre post", "test retest r", "paired correlation", "paired r", "baseline correlation", "within person correlation", "r within", "correlation of the pairs")
	base("coefficient", "coefficient", "coef", "b", "unstandardized coefficient", "unstandardised coefficient", "regression coefficient", "unstandardized b", "slope", "coeff")
	base("beta", "beta", "standardized beta", "standardised beta", "standardized coefficient", "standardised coefficient", "std beta")
	base("outcomesd", "outcome sd", "sd outcome", "sd of outcome", "sd of the outcome", "outcome standard deviation", "sd y", "pooled sd", "sd pooled", "standard deviation of the outcome")
	base("oe", "o e", "o minus e", "observed minus expected", "observed expected", "o minus expected")
	base("lrvariance", "log rank variance", "logrank variance", "variance log rank", "v log rank", "variance of o e", "log rank v")
	base("logrank", "log rank", "logrank", "log rank chi square", "logrank chi square", "log rank statistic", "logrank statistic", "log rank chi 2")
	base("icc", "icc", "intracluster correlation", "intra cluster correlation", "intraclass correlation", "intra class correlation", "intracluster correlation coefficient", "intraclass correlation coefficient")
	base("clustersize", "cluster size", "mean cluster size", "average cluster size", "people per cluster", "size of clusters")
	base("clusters", "clusters", "number of clusters", "n clusters", "no of clusters", "clusters n")
	base("alpha", "alpha", "cronbach alpha", "cronbachs alpha", "coefficient alpha")
	base("items", "items", "number of items", "n items", "no of items")

	// Estimates whose heading names the scale.
	scale := func(s effect.Scale, log bool, list ...string) {
		says(feature{base: "estimate", scale: s, log: log}, list...)
	}
	scale(effect.StandardizedMeanDifference, false, "smd", "standardized mean difference", "standardised mean difference", "hedges g", "g", "hedge g", "std mean diff", "std mean difference", "standardized difference", "standardised difference", "standardized effect", "standardised effect", "cohens d", "cohen d", "d", "effect size d", "effect size g", "g hedges", "d cohen")
	ratio := func(s effect.Scale, list ...string) {
		scale(s, false, list...)
		for _, p := range list {
			for _, l := range []string{"log ", "ln ", "log e ", "natural log "} {
				scale(s, true, l+p)
			}
			scale(s, true, "log of "+p, "log of the "+p)
		}
	}
	ratio(effect.LogOddsRatio, "or", "odds ratio", "odds ratios", "aor", "adjusted odds ratio", "adjusted or", "crude or", "crude odds ratio")
	ratio(effect.LogRiskRatio, "rr", "risk ratio", "relative risk", "risk ratios", "arr ratio", "adjusted rr", "adjusted risk ratio", "adjusted relative risk")
	ratio(effect.LogHazardRatio, "hr", "hazard ratio", "hazard ratios", "hazards ratio", "ahr", "adjusted hr", "adjusted hazard ratio")
	ratio(effect.LogRateRatio, "irr", "rate ratio", "incidence rate ratio", "rate ratios")
	ratio(effect.LogRatioOfMeans, "rom", "ratio of means", "response ratio", "means ratio")
	scale(effect.LogOddsRatio, true, "lnor", "logor", "log odds", "ln odds")
	scale(effect.LogRiskRatio, true, "lnrr", "logrr")
	scale(effect.LogHazardRatio, true, "lnhr", "loghr")
	scale(effect.RiskDifference, false, "rd", "risk difference", "absolute risk difference", "ard", "difference in risks", "difference in proportions", "absolute risk reduction")
	scale(effect.RateDifference, false, "rate difference", "incidence rate difference")
	scale(effect.FisherZ, false, "fisher z", "fishers z", "z fisher", "fisher transformed r", "z r")

	// Arms.
	says(feature{arm: "treatment"}, "treatment", "treated", "treat", "trt", "tx", "intervention", "interv", "int", "experimental", "exp", "expt", "active", "drug", "verum", "exposed", "training", "trained", "treatment group", "intervention group", "experimental group", "treated group", "treatment arm", "intervention arm", "active arm", "active group", "behandlung", "interventionsgruppe", "behandlungsgruppe", "traitement", "tratamiento", "trattamento", "behandeling", "interventie")
	says(feature{arm: "control"}, "control", "controls", "ctrl", "con", "contr", "ctl", "cntrl", "placebo", "pbo", "comparator", "comparison", "usual care", "standard care", "care as usual", "waitlist", "wait list", "waiting list", "sham", "unexposed", "untreated", "untrained", "control group", "placebo group", "comparison group", "control arm", "placebo arm", "comparator arm", "standard treatment", "no treatment", "no intervention", "treatment as usual", "control condition", "kontrolle", "kontrollgruppe", "controle", "temoin", "temoins", "controllo", "controlegroep", "placebogruppe")
	says(feature{arm: "treatment", weak: true}, "1", "i", "e", "tr", "group 1", "arm 1", "grp 1", "g 1", "group i", "arm a", "group a")
	says(feature{arm: "control", weak: true}, "2", "c", "group 2", "arm 2", "grp 2", "g 2", "group ii", "arm b", "group b")

	// Sides of an interval, times of measurement.
	says(feature{side: "lower"}, "lower", "low", "lo", "ll", "lcl", "lower limit", "lower bound", "ci lower bound", "ci lower limit", "conf low", "lower conf", "lower ci", "ci lower", "ci low", "ci l", "lci", "lb", "ci lo", "lower cl", "cil", "ci ll", "lower confidence limit", "ci from", "ci lb", "lower 95", "low ci", "cilow", "cilo", "cilower", "lowerci")
	says(feature{side: "upper"}, "upper", "up", "hi", "high", "ul", "ucl", "upper limit", "upper bound", "ci upper bound", "ci upper limit", "conf high", "upper conf", "upper ci", "ci upper", "ci high", "ci u", "uci", "ub", "ci hi", "upper cl", "ciu", "ci ul", "upper confidence limit", "ci to", "ci ub", "ci up", "upper 95", "high ci", "ciup", "cihigh", "cihi", "ciupper", "upperci")
	says(feature{side: "lower", weak: true}, "l", "from", "left")
	says(feature{side: "upper", weak: true}, "u", "to", "right")
	says(feature{time: "pre", maybe: "treatment"}, "pre treatment", "pre intervention")
	says(feature{time: "post", maybe: "treatment"}, "post treatment", "post intervention")
	says(feature{sides: 1}, "one sided", "one tailed", "1 sided", "1 tailed")
	says(feature{sides: 2}, "two sided", "two tailed", "2 sided", "2 tailed")
	says(feature{time: "pre"}, "pre", "baseline", "pretest", "pre test", "pretreatment", "before", "bl", "initial", "at baseline", "t 0")
	says(feature{time: "post"}, "post", "posttest", "post test", "final", "endpoint", "end point", "after", "follow up", "followup", "posttreatment", "at end", "end of study", "end", "outcome")
	says(feature{time: "change"}, "change", "change score", "change from baseline", "gain", "change score s", "delta", "gain score")
	return m
}

// filler are words of a heading that carry no meaning of their own.
var filler = map[string]bool{"of": true, "the": true, "in": true, "for": true, "at": true, "group": true, "grp": true,
	"arm": true, "condition": true, "value": true, "values": true, "reported": true, "a": true, "and": true,
	"with": true, "on": true, "by": true, "score": true, "scores": true, "groups": true, "plus": true, "minus": true, "bound": true, "limit": true, "statistic": true, "judgement": true, "judgment": true}

// aside are headings that people use for columns the tool keeps as they are; no finding says that they were not understood.
var aside = map[string]bool{"doi": true, "url": true, "link": true, "country": true, "journal": true, "design": true,
	"setting": true, "outcome": true, "measure": true, "population": true, "instrument": true, "duration": true, "dose": true,
	"page": true, "table": true, "quote": true, "extracted by": true, "checked by": true, "extractor": true, "region": true,
	"language": true, "funding": true, "pmid": true, "title": true, "intervention": true, "comparator": true, "control": true,
	"treatment": true, "time point": true, "timepoint": true, "unit": true, "units": true, "age": true, "mean age": true,
	"female": true, "sex": true, "shift length": true, "weeks": true, "months": true, "days": true}

// units are what brackets behind a heading may hold without changing its meaning.
var units = map[string]bool{"ms": true, "s": true, "sec": true, "secs": true, "seconds": true, "min": true, "mins": true,
	"minutes": true, "h": true, "hr": true, "hrs": true, "hours": true, "d": true, "days": true, "weeks": true, "months": true,
	"years": true, "yr": true, "kg": true, "g": true, "mg": true, "µg": true, "ug": true, "lb": true, "cm": true, "mm": true,
	"m": true, "km": true, "ml": true, "l": true, "dl": true, "mmhg": true, "mm hg": true, "bpm": true, "points": true,
	"pts": true, "score": true, "scale": true, "units": true, "mmol l": true, "mg dl": true, "kcal": true, "kj": true,
	"c": true, "raw": true, "z": true, "hz": true, "kpa": true, "ng ml": true, "iu": true, "usd": true, "eur": true}
