package importers

import (
	"fmt"
	"strings"
)

// NewSheet gives the headings of an empty evidence sheet for an outcome: "continuous", "binary", "event-time", "count"
// or "association". Any other word gives a sheet of bare estimates.
func NewSheet(outcome string) Table {
	head := []Meaning{Study, Year}
	switch outcome {
	case "continuous", "ordinal":
		head = append(head, "treatment n", "treatment mean", "treatment sd", "control n", "control mean", "control sd")
	case "binary":
		head = append(head, "treatment events", "treatment n", "control events", "control n")
	case "count":
		head = append(head, "treatment events", "treatment person-time", "control events", "control person-time")
	case "association":
		head = append(head, N, "r")
	}
	head = append(head, Estimate, StandardError, CILower, CIUpper, P, RiskOfBias, Relevance, Subgroup, Status, Notes)
	t := Table{Sheet: "Studies"}
	for _, m := range head {
		t.Columns = append(t.Columns, NewColumn{Heading: string(m), Explain: Explain(m)})
	}
	return t
}

// Explain says in one sentence what belongs into a column of meaning m; "" for no meaning.
func Explain(m Meaning) string {
	if s, ok := explained[m]; ok {
		return s
	}
	for arm, who := range map[string]string{"treatment ": "in the group that gets the treatment", "control ": "in the group that it is compared with"} {
		if rest, ok := strings.CutPrefix(string(m), arm); ok {
			if s, ok := explainedArm[Meaning(rest)]; ok {
				return fmt.Sprintf("%s %s.", s, who)
			}
		}
	}
	if s, ok := explainedArm[m]; ok {
		return s + "."
	}
	return ""
}

var explainedArm = map[Meaning]string{
	"n": "How many people were analysed", "mean": "Mean of the outcome", "sd": "Standard deviation of the outcome (not the standard error)",
	"se": "Standard error of the mean", "ci lower": "Lower confidence limit of the mean", "ci upper": "Upper confidence limit of the mean",
	"median": "Median of the outcome", "q1": "Lower quartile of the outcome", "q3": "Upper quartile of the outcome",
	"min": "Smallest value", "max": "Largest value", "events": "How many people had the event", "non-events": "How many people did not have the event",
	"proportion": "Share of people with the event, 0 to 1 or as a percentage with the sign", "rate": "Events per unit of person-time",
	"person-time": "Person-time at risk", "pre mean": "Mean at baseline", "pre sd": "Standard deviation at baseline",
	"change mean": "Mean change from baseline", "change sd": "Standard deviation of the change from baseline",
}

var explained = map[Meaning]string{
	Study:                     "A label that tells the studies apart, such as first author and year; rows of one study carry the same label.",
	Year:                      "Year of publication, four digits.",
	RiskOfBias:                "Judgement over the whole study: low, some concerns or high.",
	Relevance:                 "How close the study is to the planned setting, from 0 (not at all) to 1 (the same).",
	Subgroup:                  "Name of the subgroup of studies that the row belongs to.",
	Status:                    "Leave empty, or write excluded or retracted: such rows are shown but not used. Rows marked example are used, and named as examples in every output.",
	Notes:                     "Anything; it is kept and shown with the row.",
	Direction:                 "Which group did better, where the figures carry no sign: favours treatment or favours control.",
	Better:                    "yes or no, where a row's outcome runs the other way than the plan says; its sign is then turned.",
	ScaleOf:                   "Scale of the estimate in this row, such as odds ratio or standardized mean difference.",
	SidesOfP:                  "Sides of the test behind the p-value: one or two.",
	Estimate:                  "The effect as the paper prints it, where it prints one.",
	StandardError:             "Standard error of the estimate (of its logarithm for a ratio).",
	Variance:                  "Sampling variance of the estimate: its standard error squared.",
	CILower:                   "Lower confidence limit of the estimate, as printed.",
	CIUpper:                   "Upper confidence limit of the estimate, as printed.",
	CILevel:                   "Level of the confidence limits, such as 0.95; 95% is assumed where none is given.",
	P:                         "p-value as printed; inequalities such as < .001 are understood.",
	N:                         "How many people were analysed in all.",
	"t":                       "t statistic of the comparison.",
	"f":                       "F statistic of the comparison, with one numerator degree of freedom.",
	"z":                       "z statistic of the comparison.",
	"chi-square":              "Chi-square statistic with one degree of freedom.",
	"df":                      "Degrees of freedom of t, or of the denominator of F.",
	"numerator df":            "Degrees of freedom of the numerator of F.",
	"r":                       "Correlation as printed.",
	"point-biserial r":        "Correlation of the group with the outcome.",
	"eta-squared":             "Eta-squared or partial eta-squared of the comparison.",
	"covariates":              "How many covariates the figure is adjusted for.",
	"pre-post correlation":    "Correlation of the two measurements of the same people.",
	"mean difference":         "Difference of the means as printed, treatment minus control.",
	"difference sd":           "Standard deviation of the difference.",
	"difference se":           "Standard error of the difference of the means.",
	"difference ci lower":     "Lower confidence limit of the difference of the means.",
	"difference ci upper":     "Upper confidence limit of the difference of the means.",
	"coefficient":             "Unstandardized regression coefficient of the treatment.",
	"standardized beta":       "Standardized regression coefficient of a group indicator.",
	"outcome sd":              "Standard deviation of the outcome over all people.",
	"observed minus expected": "Observed minus expected events in the treatment group (log-rank).",
	"log-rank variance":       "Variance of observed minus expected events (log-rank).",
	"log-rank chi-square":     "Chi-square of the log-rank test.",
	"total events":            "Events in both groups together.",
	"icc":                     "Intracluster correlation.",
	"cluster size":            "Mean number of people in a cluster.",
	"clusters":                "Number of clusters.",
	"alpha":                   "Cronbach's alpha of the instrument.",
	"items":                   "Number of items of the instrument; with it, means of whole-number answers are checked against n.",
}
