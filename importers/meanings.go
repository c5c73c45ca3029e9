package importers

import (
	"footing/meta/effect"
)

// The meanings of columns that describe the study.
const (
	Study      Meaning = "study"
	Year       Meaning = "year"
	RiskOfBias Meaning = "risk of bias"
	Relevance  Meaning = "relevance"
	Subgroup   Meaning = "subgroup"
	Status     Meaning = "status"
	Notes      Meaning = "notes"
	Direction  Meaning = "direction" // which way a result without a sign went
	ScaleOf    Meaning = "scale"     // scale of the row's estimate, in words
	SidesOfP   Meaning = "sides"     // of the p-value
	Better     Meaning = "higher is better"
)

// The meanings of columns that hold one figure of the comparison.
const (
	Estimate      Meaning = "estimate"
	StandardError Meaning = "standard error"
	Variance      Meaning = "variance"
	CILower       Meaning = "ci lower"
	CIUpper       Meaning = "ci upper"
	CILevel       Meaning = "ci level"
	P             Meaning = "p"
	N             Meaning = "n"
)

// place is where a figure goes.
type place func(*effect.Reported) *effect.Figure

// figures lists the meanings that hold one number about the comparison as a whole.
var figures = map[Meaning]place{
	Estimate:                  func(r *effect.Reported) *effect.Figure { return &r.Estimate },
	StandardError:             func(r *effect.Reported) *effect.Figure { return &r.StandardError },
	Variance:                  func(r *effect.Reported) *effect.Figure { return &r.Variance },
	CILower:                   func(r *effect.Reported) *effect.Figure { return &r.CILower },
	CIUpper:                   func(r *effect.Reported) *effect.Figure { return &r.CIUpper },
	CILevel:                   func(r *effect.Reported) *effect.Figure { return &r.CILevel },
	N:                         func(r *effect.Reported) *effect.Figure { return &r.N },
	"t":                       func(r *effect.Reported) *effect.Figure { return &r.T },
	"f":                       func(r *effect.Reported) *effect.Figure { return &r.F },
	"z":                       func(r *effect.Reported) *effect.Figure { return &r.Z },
	"chi-square":              func(r *effect.Reported) *effect.Figure { return &r.ChiSquare },
	"df":                      func(r *effect.Reported) *effect.Figure { return &r.DF },
	"numerator df":            func(r *effect.Reported) *effect.Figure { return &r.DF1 },
	P:                         func(r *effect.Reported) *effect.Figure { return &r.P },
	"r":                       func(r *effect.Reported) *effect.Figure { return &r.R },
	"point-biserial r":        func(r *effect.Reported) *effect.Figure { return &r.R },
	"eta-squared":             func(r *effect.Reported) *effect.Figure { return &r.EtaSquared },
	"covariates":              func(r *effect.Reported) *effect.Figure { return &r.Covariates },
	"pre-post correlation":    func(r *effect.Reported) *effect.Figure { return &r.PrePostR },
	"mean difference":         func(r *effect.Reported) *effect.Figure { return &r.DifferenceMean },
	"difference sd":           func(r *effect.Reported) *effect.Figure { return &r.DifferenceSD },
	"difference se":           func(r *effect.Reported) *effect.Figure { return &r.DifferenceSE },
	"difference ci lower":     func(r *effect.Reported) *effect.Figure { return &r.DifferenceLower },
	"difference ci upper":     func(r *effect.Reported) *effect.Figure { return &r.DifferenceUpper },
	"coefficient":             func(r *effect.Reported) *effect.Figure { return &r.Coefficient },
	"standardized beta":       func(r *effect.Reported) *effect.Figure { return &r.Beta },
	"outcome sd":              func(r *effect.Reported) *effect.Figure { return &r.OutcomeSD },
	"observed minus expected": func(r *effect.Reported) *effect.Figure { return &r.ObservedMinusExpected },
	"log-rank variance":       func(r *effect.Reported) *effect.Figure { return &r.LogRankVariance },
	"log-rank chi-square":     func(r *effect.Reported) *effect.Figure { return &r.LogRank },
	"total events":            func(r *effect.Reported) *effect.Figure { return &r.EventsTotal },
	"icc":                     func(r *effect.Reported) *effect.Figure { return &r.ICC },
	"cluster size":            func(r *effect.Reported) *effect.Figure { return &r.ClusterSize },
	"clusters":                func(r *effect.Reported) *effect.Figure { return &r.Clusters },
	"alpha":                   func(r *effect.Reported) *effect.Figure { return &r.Alpha },
	"items":                   func(r *effect.Reported) *effect.Figure { return &r.Items },
}

// armFigures lists the meanings that hold one number about one group. A column means one of them with "treatment " or
// "control " before it; without, it is about a single group, or about both (see resolve).
var armFigures = map[Meaning]func(*effect.Arm) *effect.Figure{
	"n":           func(a *effect.Arm) *effect.Figure { return &a.N },
	"mean":        func(a *effect.Arm) *effect.Figure { return &a.Mean },
	"sd":          func(a *effect.Arm) *effect.Figure { return &a.SD },
	"se":          func(a *effect.Arm) *effect.Figure { return &a.SE },
	"ci lower":    func(a *effect.Arm) *effect.Figure { return &a.CILower },
	"ci upper":    func(a *effect.Arm) *effect.Figure { return &a.CIUpper },
	"median":      func(a *effect.Arm) *effect.Figure { return &a.Median },
	"q1":          func(a *effect.Arm) *effect.Figure { return &a.Q1 },
	"q3":          func(a *effect.Arm) *effect.Figure { return &a.Q3 },
	"min":         func(a *effect.Arm) *effect.Figure { return &a.Min },
	"max":         func(a *effect.Arm) *effect.Figure { return &a.Max },
	"events":      func(a *effect.Arm) *effect.Figure { return &a.Events },
	"proportion":  func(a *effect.Arm) *effect.Figure { return &a.Proportion },
	"rate":        func(a *effect.Arm) *effect.Figure { return &a.Rate },
	"person-time": func(a *effect.Arm) *effect.Figure { return &a.PersonTime },
	"pre mean":    func(a *effect.Arm) *effect.Figure { return &a.PreMean },
	"pre sd":      func(a *effect.Arm) *effect.Figure { return &a.PreSD },
	"change mean": func(a *effect.Arm) *effect.Figure { return &a.ChangeMean },
	"change sd":   func(a *effect.Arm) *effect.Figure { return &a.ChangeSD },
	"non-events":  nil, // turned into n by the reader: events + non-events
}

// armOrder is the order in which the arm figures are listed to people.
var armOrder = []Meaning{"n", "mean", "sd", "se", "ci lower", "ci upper", "median", "q1", "q3", "min", "max", "events",
	"non-events", "proportion", "rate", "person-time", "pre mean", "pre sd", "change mean", "change sd"}

// plainOrder is the order in which all other meanings are listed.
var plainOrder = []Meaning{Study, Year, Estimate, StandardError, Variance, CILower, CIUpper, CILevel, "mean difference",
	"difference sd", "difference se", "difference ci lower", "difference ci upper", N, "t", "f", "z", "chi-square", "df",
	"numerator df", P, SidesOfP, Direction, Better, "r", "point-biserial r", "eta-squared", "covariates", "pre-post correlation",
	"coefficient", "standardized beta", "outcome sd", "observed minus expected", "log-rank variance",
	"log-rank chi-square", "total events", "icc", "cluster size", "clusters", "alpha", "items", ScaleOf, RiskOfBias,
	Relevance, Subgroup, Status, Notes}

// Meanings lists every meaning that a column can have, in the words that a plan's columns: uses.
func Meanings() []Meaning {
	all := append([]Meaning{}, plainOrder...)
	for _, arm := range []string{"treatment ", "control ", ""} {
		for _, m := range armOrder {
			if arm == "" && figures[m] != nil {
				continue
			}
			all = append(all, Meaning(arm)+m)
		}
	}
	return all
}

// counts are the meanings whose values are whole numbers of people, events or clusters.
var counts = map[Meaning]bool{"n": true, "treatment n": true, "control n": true, "events": true, "treatment events": true,
	"control events": true, "non-events": true, "treatment non-events": true, "control non-events": true,
	"total events": true, "clusters": true, "items": true, "covariates": true}

// words are the meanings whose cells hold words.
var words = map[Meaning]bool{Study: true, RiskOfBias: true, Subgroup: true, Status: true, Notes: true, Direction: true,
	ScaleOf: true, SidesOfP: true, Better: true}

// isNumeric reports whether a column of meaning m holds one number a cell.
func (m Meaning) isNumeric() bool { return m != "" && !words[m] }
