package meta

import (
	"fmt"
	"strings"
)

// TauSquared is an estimate of the between-study variance.
type TauSquared struct {
	Value      float64
	Truncated  bool // the estimator fell below 0 (or its maximum lies at 0) and was cut there
	Converged  bool
	Iterations int
	Why        string // what keeps it from being good, "" when nothing does
}

// Estimator is one way to estimate the between-study variance. Adding one is a file with its function and a line in estimators.
type Estimator struct {
	Name      string // as in a plan file
	Words     string
	Reference string
	Estimate  func(d Data) TauSquared
}

var estimators = []Estimator{
	{"dersimonian-laird", "DerSimonian-Laird", "DerSimonian & Laird 1986, Control Clin Trials 7:177", dersimonianLaird},
	{"maximum-likelihood", "maximum likelihood", "Hardy & Thompson 1996, Stat Med 15:619", maximumLikelihood},
	{"restricted-maximum-likelihood", "restricted maximum likelihood", "Harville 1977, J Am Stat Assoc 72:320; Raudenbush 2009", restrictedMaximumLikelihood},
	{"paule-mandel", "Paule-Mandel", "Paule & Mandel 1982, J Res Natl Bur Stand 87:377", pauleMandel},
	{"two-step-dersimonian-laird", "two-step DerSimonian-Laird", "DerSimonian & Kacker 2007, Contemp Clin Trials 28:105", twoStepDersimonianLaird},
	{"hedges-olkin", "Hedges-Olkin (Cochran's analysis of variance)", "Hedges & Olkin 1985; Cochran 1954", hedgesOlkin},
	{"sidik-jonkman", "Sidik-Jonkman", "Sidik & Jonkman 2005, J R Stat Soc C 54:367", sidikJonkman},
	{"hunter-schmidt", "Hunter-Schmidt", "Hunter & Schmidt 2004", hunterSchmidt},
}

// Estimators lists the estimators, the default first.
func Estimators() []Estimator { return append([]Estimator{}, estimators...) }

// EstimatorByName finds an estimator; "" is the default, DerSimonian-Laird. "reml" and "ml" are understood.
func EstimatorByName(name string) (Estimator, error) {
	want := strings.ToLower(strings.Join(strings.Fields(strings.ReplaceAll(name, "-", " ")), "-"))
	switch want {
	case "":
		return estimators[0], nil
	case "reml":
		want = "restricted-maximum-likelihood"
	case "ml":
		want = "maximum-likelihood"
	}
	var names []string
	for _, e := range estimators {
		if e.Name == want {
			return e, nil
		}
		names = append(names, e.Name)
	}
	return Estimator{}, fmt.Errorf("%q is no estimator of the between-study variance; there are %s", name, strings.Join(names, ", "))
}

// closedForm cuts a closed-form estimate at 0 and says so.
func closedForm(value float64) TauSquared {
	if !(value > 0) {
		return TauSquared{Truncated: value < 0, Converged: true}
	}
	return TauSquared{Value: value, Converged: true}
}

// single is what every estimator says of one study.
func single(d Data) (TauSquared, bool) {
	if d.K() < 2 {
		return TauSquared{Converged: true, Why: "one study says nothing about how studies differ; 0 is used"}, true
	}
	return TauSquared{}, false
}
