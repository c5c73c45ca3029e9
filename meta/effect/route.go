package effect

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"footing/internal/finding"
)

// route is one way from what a paper reports to an estimate. Adding one is a file with its function and a line in the list below.
type route struct {
	name string
	// reads says in words which figures it needs, for the message of a row that has too few.
	reads string
	// scales on which it gives an estimate.
	scales []Scale
	// compute fills w, or leaves w.ok false where its figures are missing; figures that are there and impossible are findings.
	compute func(w *work)
}

// routes stand in order of preference: counts, then means and SDs, then an estimate with its SE or interval, then exact test statistics, then
// exact p values.
var routes = []route{
	{"counts", "events and people in both groups", []Scale{LogOddsRatio, LogRiskRatio, RiskDifference}, fromCounts},
	{"person-time", "events and person-time in both groups", []Scale{LogRateRatio, RateDifference}, fromPersonTime},
	{"proportion", "events and people in one group", []Scale{LogitProportion}, fromSingleProportion},
	{"rate", "events and person-time in one group", []Scale{LogRate}, fromSingleRate},
	{"means-and-sds", "mean, SD (or SE, or CI of the mean) and people in both groups", []Scale{StandardizedMeanDifference, MeanDifference, LogRatioOfMeans}, fromMeans},
	{"sds", "SD and people in both groups", []Scale{LogVariabilityRatio}, fromVariability},
	{"one-group", "mean, SD and people in one group", []Scale{Mean, LogSD}, fromSingleMean},
	{"mean-difference", "the mean difference with its SD, SE or CI, and the people in both groups", []Scale{StandardizedMeanDifference, MeanDifference}, fromDifference},
	{"before-and-after", "means before and after (or the mean change) of one group, an SD, the correlation", []Scale{StandardizedMeanDifference, MeanDifference}, fromPrePost},
	{"changes-of-two-groups", "means before and after and SDs before of both groups, the correlation", []Scale{StandardizedMeanDifference}, fromPrePostControl},
	{"correlation", "r and the number of people", []Scale{FisherZ}, fromCorrelation},
	{"partial-correlation", "a partial r, the number of people and of covariates", []Scale{PartialFisherZ}, fromPartialR},
	{"observed-minus-expected", "observed minus expected events and their variance", []Scale{LogHazardRatio}, fromObservedExpected},
	{"intracluster-correlation", "the ICC, the cluster size and the number of clusters", []Scale{ICC}, fromICC},
	{"alpha", "alpha, its items and the number of people", []Scale{CronbachAlpha}, fromAlpha},
	{"estimate-with-se", "the estimate and its standard error", anyScale, fromEstimateSE},
	{"estimate-with-variance", "the estimate and its variance", anyScale, fromEstimateVariance},
	{"estimate-with-ci", "the estimate and its confidence interval", anyScale, fromEstimateCI},
	{"t-statistic", "t and the people in both groups", []Scale{StandardizedMeanDifference}, fromT},
	{"partial-t", "a coefficient's t and its degrees of freedom", []Scale{PartialFisherZ}, fromPartialT},
	{"f-statistic", "F with one numerator degree of freedom, its direction, and the people in both groups", []Scale{StandardizedMeanDifference}, fromF},
	{"log-rank", "the log-rank chi-square, the events, and the direction", []Scale{LogHazardRatio}, fromLogRank},
	{"estimate-with-p", "the estimate and its exact p value", anyScale, fromEstimateP},
	{"p-value", "an exact p value, its direction, and the people in both groups", []Scale{StandardizedMeanDifference}, fromP},
	{"medians", "medians with quartiles or range, and people in both groups", []Scale{StandardizedMeanDifference, MeanDifference, LogRatioOfMeans}, fromMedians},
	{"median-times", "median times and events in both groups", []Scale{LogHazardRatio}, fromMedianTimes},
	{"point-biserial-r", "the correlation with the group, and the people in both groups", []Scale{StandardizedMeanDifference}, fromPointBiserial},
	{"eta-squared", "eta squared, its direction, and the people in both groups", []Scale{StandardizedMeanDifference}, fromEta},
	{"coefficient", "the group's coefficient with the outcome's SD, or standardized, and the people in both groups", []Scale{StandardizedMeanDifference}, fromCoefficient},
	{"odds-ratio", "an odds ratio, or counts", []Scale{StandardizedMeanDifference}, fromTwoByTwoToSMD},
}

var anyScale = []Scale{AsGiven, StandardizedMeanDifference, MeanDifference, LogRatioOfMeans, LogVariabilityRatio, LogOddsRatio, LogRiskRatio, RiskDifference,
	LogHazardRatio, LogRateRatio, RateDifference, FisherZ, PartialFisherZ, LogitProportion, Mean, LogSD, LogRate, ICC, CronbachAlpha}

func (rt route) gives(s Scale) bool {
	for _, scale := range rt.scales {
		if scale == s {
			return true
		}
	}
	return false
}

// work is one route on one record: what it reads, and what it makes of it.
type work struct {
	r     *Reported
	opt   Options
	study string

	ok       bool
	value    float64
	variance float64
	formula  string
	notes    []string
	cells    []string
	table    *Table
	n        [2]float64
	findings []finding.Finding
	refused  bool // its figures are there but can't be used; the finding says why
}

// need reports whether all figures are printed as exact values, and keeps the cells they came from.
func (w *work) need(fs ...Figure) bool {
	for _, f := range fs {
		if !f.Given || f.Bound != Exact {
			return false
		}
	}
	w.use(fs...)
	return true
}

func (w *work) use(fs ...Figure) {
	for _, f := range fs {
		if f.Given && f.Cell != "" && !contains(w.cells, f.Cell) {
			w.cells = append(w.cells, f.Cell)
		}
	}
}

func contains(list []string, s string) bool {
	for _, x := range list {
		if x == s {
			return true
		}
	}
	return false
}

// refuse records an impossible figure.
func (w *work) refuse(f Figure, kind, what, mend string) {
	w.refused = true
	w.say(finding.Error, f, kind, what, mend)
}

func (w *work) say(severity finding.Severity, f Figure, kind, what, mend string) {
	w.findings = append(w.findings, finding.Finding{Severity: severity, Kind: kind, Place: finding.Place{Cell: f.Cell}, Study: w.study, Text: f.text(), What: what, Mend: mend})
}

func (w *work) note(format string, args ...any) {
	w.notes = append(w.notes, fmt.Sprintf(format, args...))
}

// give sets the result; a value or variance that is not usable is refused.
func (w *work) give(value, variance float64, formula string) {
	switch {
	case math.IsNaN(value) || math.IsInf(value, 0):
		w.refuse(Figure{Cell: first(w.cells)}, "effect-not-finite", "the figures give no finite effect ("+formula+")", "check the cells "+strings.Join(w.cells, ", "))
	case !(variance > 0) || math.IsInf(variance, 0):
		w.refuse(Figure{Cell: first(w.cells)}, "variance-not-positive", fmt.Sprintf("the figures give a variance of %s, which is no weight (%s)", plain(variance), formula), "check the cells "+strings.Join(w.cells, ", "))
	default:
		w.value, w.variance, w.formula, w.ok = value, variance, formula, true
	}
}

func first(list []string) string {
	if len(list) == 0 {
		return ""
	}
	return list[0]
}

// text is the figure as the paper printed it.
func (f Figure) text() string {
	if !f.Given {
		return ""
	}
	s := plain(f.Value)
	if f.Decimals >= 0 {
		s = strconv.FormatFloat(f.Value, 'f', f.Decimals, 64)
	}
	switch f.Bound {
	case Below:
		return "< " + s
	case Above:
		return "> " + s
	}
	return s
}

// plain writes a number for a formula or a message: six significant digits.
func plain(x float64) string { return strconv.FormatFloat(x, 'g', 6, 64) }

// people checks the sizes of both groups: whole, at least two (one where least is 1).
func (w *work) people(least float64) (n1, n2 float64, ok bool) {
	a, b := w.r.Treatment.N, w.r.Control.N
	if !w.need(a, b) {
		return 0, 0, false
	}
	for _, f := range []Figure{a, b} {
		switch {
		case !(f.Value >= least):
			w.refuse(f, "too-few-people", fmt.Sprintf("%s people in a group give no variance", f.text()), fmt.Sprintf("a group needs at least %g; check the cell", least))
			return 0, 0, false
		case f.Value != math.Trunc(f.Value):
			w.refuse(f, "people-not-whole", fmt.Sprintf("%s is no whole number of people", f.text()), "give the number of people analysed")
			return 0, 0, false
		case f.Value > 1e12:
			w.refuse(f, "people-too-many", fmt.Sprintf("%s people can't be meant", f.text()), "check the cell")
			return 0, 0, false
		}
	}
	w.n = [2]float64{a.Value, b.Value}
	return a.Value, b.Value, true
}
