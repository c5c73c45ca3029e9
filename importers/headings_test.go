package importers

import (
	"testing"

	"footing/meta/effect"
)

// How people write headings: common practice, no source.
func TestUnderstand(t *testing.T) {
	for typed, want := range map[string]Meaning{
		"Study": Study, "STUDY ID": Study, "Author (year)": Study, "First author": Study, "Year": Year, "Publication Year": Year,
		"estimate": Estimate, "standard error": StandardError, "SE": StandardError, "Std. Error": StandardError, "variance": Variance, "ci lower": CILower, "ci upper": CIUpper,
		"95% CI lower": CILower, "CI_low": CILower, "Upper 95% CI": CIUpper, "UCL": CIUpper, "lower": CILower, "ci level": CILevel, "Confidence level": CILevel,
		"Lower limit": CILower, "lower_bound": CILower, "95% CI (upper)": CIUpper, "CIlower": CILower, "ciUpper": CIUpper, "Effect size SE": StandardError,
		"n1": "treatment n", "n2": "control n", "N treatment": "treatment n", "n_ctrl": "control n", "nControl": "control n", "Sample size (control)": "control n",
		"Total N": N, "Sample size": N, "No. of participants": N, "M treatment": "treatment mean", "mean_c": "control mean", "Mean (intervention)": "treatment mean",
		"SD control": "control sd", "sd1": "treatment sd", "S.D. placebo": "control sd", "Std Dev - Treatment": "treatment sd", "SE (treatment)": "treatment se",
		"Control group mean": "control mean", "treatment group standard deviation": "treatment sd", "events treatment": "treatment events", "Events (control)": "control events",
		"% events control": "control proportion", "Risk (control)": "control proportion", "Total (control)": "control n", "Placebo events": "control events", "non-events control": "control non-events",
		"Number of events, intervention": "treatment events", "no events control": "control non-events", "No. events control": "control events",
		"t": "t", "t-value": "t", "F": "f", "p": P, "p-value": P, "P value": P, "pValue": P, "p (one-sided)": P, "r": "r", "Pearson's r": "r", "df": "df", "df1": "numerator df", "df2": "df",
		"χ²": "chi-square", "Chi-squared": "chi-square", "η²": "eta-squared", "partial η2": "eta-squared", "mean difference": "mean difference", "MD": "mean difference",
		"SE of difference": "difference se", "Mean difference CI lower": "difference ci lower", "risk of bias": RiskOfBias, "RoB (overall)": RiskOfBias, "relevance": Relevance, "Sub-group": Subgroup,
		"Subgroup": Subgroup, "status": Status, "notes": Notes, "Comments": Notes, "Odds ratio": Estimate, "log OR": Estimate, "OR lower": CILower, "HR 95% CI upper": CIUpper,
		"SE log OR": StandardError, "SE (lnOR)": StandardError, "Hedges' g": Estimate, "Cohen's d": Estimate, "SMD": Estimate, "Baseline mean treatment": "treatment pre mean",
		"pre SD control": "control pre sd", "Post mean (control)": "control mean", "Mean change (treatment)": "treatment change mean", "Δ SD control": "control change sd",
		"median treatment": "treatment median", "Q1 control": "control q1", "25th percentile treatment": "treatment q1", "Mean (ms) ": "mean", "SD [kg]": "sd", "O-E": "observed minus expected",
		"log-rank chi-square": "log-rank chi-square", "ICC": "icc", "mean cluster size": "cluster size", "Cronbach's α": "alpha", "Pre-post correlation": "pre-post correlation",
		"Favours": Direction, "Person-years (control)": "control person-time", "CI lower treatment": "treatment ci lower", "Treatment N": "treatment n", "Experimental group: M": "treatment mean",
		"Mean (SD) control": "control mean + control sd", "Mean ± SD (treatment)": "treatment mean + treatment sd", "M (SE) placebo": "control mean + control se", "95% CI": "ci lower + ci upper",
		"OR (95% CI)": "estimate + ci lower + ci upper", "Hedges g [95% CI]": "estimate + ci lower + ci upper", "Mean difference (95% CI)": "mean difference + difference ci lower + difference ci upper",
		"Effect size (SE)": "estimate + standard error", "Median (IQR) control": "control median + control q1 + control q3", "median [range], treatment": "treatment median + treatment min + treatment max",
		"n/N treatment": "treatment events + treatment n", "Events/total control": "control events + control n", "n (%) control": "control events + control proportion", "N, mean (SD) control": "control n + control mean + control sd",
		"mean change (SD) treatment": "treatment change mean + treatment change sd", "Mean (95% CI) control": "control mean + control ci lower + control ci upper", "events of n, control": "control events + control n",
		"Mittelwert (Kontrolle)": "control mean", "Standardabweichung Kontrollgruppe": "control sd", "Année": Year, "Étude": Study, "Écart-type (témoin)": "control sd", "ID": Study,
		"N (treatment/control)": "treatment n + control n", "Events (T/C)": "treatment events + control events",
		"Intervention group (n)": "treatment n", "Mean (C)": "control mean", "Mean (g)": "mean", "Effect size (g)": Estimate, "Var(g)": Variance, "Post-intervention mean (control)": "control mean",
		"Post-treatment mean (SD) control": "control mean + control sd", "CI lower bound (95%)": CILower, "conf.low": CILower, "P-value (two-tailed)": P, "RoB 2": RiskOfBias, "Relevance to our setting": Relevance,
		"Number of pairs": N, "Standard error of mean (control)": "control se", "Cluster size (mean)": "cluster size", "Events (n) control": "control events", "t-test statistic": "t", "corr. coefficient": "r", "95% CI from": CILower, "Mean ± SD (C)": "control mean + control sd",
		"mean t": "treatment mean", "sd c": "control sd", "MEAN-E": "treatment mean", "group 1 mean": "treatment mean", "group 2 SD": "control sd", "Arm A n": "treatment n", "Arm B n": "control n",
	} {
		u, ok := understand(typed, nil)
		if !ok || u.meaning != want || u.rest != "" {
			t.Errorf("%q: %q (rest %q, %v), want %q", typed, u.meaning, u.rest, ok, want)
		}
	}
}

func TestUnderstandLeavesAlone(t *testing.T) {
	for _, typed := range []string{"", "  ", "12", "Mean age", "Country", "Shift length", "42.5", "Adams 2009", "SE control estimate", "treatment", "control", "Intervention description",
		"lower upper", "n per arm", "to", "Subgroup within study", "treatment control mean", "doi", "a long sentence about how the mean of the standard deviation was found in each study of the set"} {
		if u, ok := understand(typed, nil); ok && u.rest == "" {
			t.Errorf("%q was understood as %q", typed, u.meaning)
		}
	}
}

func TestHeadingScale(t *testing.T) {
	for typed, want := range map[string]struct {
		s     effect.Scale
		log   bool
		level float64
	}{
		"OR": {effect.LogOddsRatio, false, 0}, "ln(OR)": {effect.LogOddsRatio, true, 0}, "Odds ratio 90% CI lower": {effect.LogOddsRatio, false, 0.9}, "log hazard ratio": {effect.LogHazardRatio, true, 0},
		"Relative risk": {effect.LogRiskRatio, false, 0}, "IRR": {effect.LogRateRatio, false, 0}, "g": {effect.StandardizedMeanDifference, false, 0}, "estimate": {"", false, 0},
		"99% CI upper": {"", false, 0.99}, "risk difference": {effect.RiskDifference, false, 0}, "Fisher's z": {effect.FisherZ, false, 0},
	} {
		u, ok := understand(typed, nil)
		if !ok || u.scale != want.s || u.log != want.log || u.level != want.level {
			t.Errorf("%q: %+v, want %+v", typed, u, want)
		}
	}
}

func TestGroupNames(t *testing.T) {
	groups := []string{"break", "no break"}
	for typed, want := range map[string]Meaning{"M (break)": "treatment mean", "SD break": "treatment sd", "n no break": "control n"} {
		if u, ok := understand(typed, groups); !ok || u.meaning != want || u.rest != "" {
			t.Errorf("%q: %+v, want %q", typed, u, want)
		}
	}
}
