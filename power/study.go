package power

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Outcome is what is measured.
type Outcome string

// Arrangement is how people are arranged.
type Arrangement string

// The words of a plan file.
const (
	Continuous Outcome = "continuous"
	Binary     Outcome = "binary"

	Parallel    Arrangement = "parallel"
	SingleGroup Arrangement = "single-group"
	Paired      Arrangement = "paired"
)

// Measure is the scale of a binary outcome's effect.
type Measure string

// The measures; ratios are given as natural logarithms.
const (
	LogOddsRatio   Measure = "log-odds-ratio"
	LogRiskRatio   Measure = "log-risk-ratio"
	RiskDifference Measure = "risk-difference"
)

// Study is a planned study.
type Study struct {
	Outcome     Outcome     // "" means continuous
	Arrangement Arrangement // "" means parallel
	Aim         string      // "" means superiority, the only one offered
	Sides       int         // 1 or 2; 0 means 2
	Alpha       float64     // both sides together for a two-sided test; 0 means .05
	Allocation  Allocation  // zero means 1:1
	// Test names the test; "" lets the outcome choose: t for means, pooled z for proportions. "z", "pooled-z" and "fisher-exact" are the others.
	Test string
	// BaselineCorrelation is that of the outcome with its baseline measure; 0 means no adjustment. The test then averages over the chance imbalance of the baseline.
	BaselineCorrelation float64
	// BaselineForm is "" for the average over chance imbalance; "fixed" takes the baseline as balanced, with its degree of freedom; "factor-only" multiplies the variance and keeps
	// all degrees of freedom. Both are optimistic for tiny studies.
	BaselineForm string
	// ControlRisk is the risk in the control group, between 0 and 1; needed for a binary outcome.
	ControlRisk float64
	// Measure is the scale of a binary outcome's effect; "" means the log odds ratio.
	Measure Measure
}

// Allocation is people in the treatment group to people in the control group.
type Allocation struct{ Treatment, Control float64 }

// ParseAllocation reads "2:1" (treatment first); "" is 1:1.
func ParseAllocation(text string) (Allocation, error) {
	if strings.TrimSpace(text) == "" {
		return Allocation{1, 1}, nil
	}
	parts := strings.Split(text, ":")
	if len(parts) == 2 {
		a, err1 := strconv.ParseFloat(strings.TrimSpace(parts[0]), 64)
		b, err2 := strconv.ParseFloat(strings.TrimSpace(parts[1]), 64)
		if err1 == nil && err2 == nil && a > 0 && b > 0 && a <= 1000 && b <= 1000 {
			return Allocation{a, b}, nil
		}
	}
	return Allocation{}, fmt.Errorf("%q is no allocation; write treatment to control, such as 1:1 or 2:1", text)
}

// String writes "2:1".
func (a Allocation) String() string {
	a = a.orEqual()
	return fmt.Sprintf("%g:%g", a.Treatment, a.Control)
}

func (a Allocation) orEqual() Allocation {
	if a.Treatment == 0 && a.Control == 0 {
		return Allocation{1, 1}
	}
	return a
}

// Ratio is people in the control group for each one in the treatment group.
func (a Allocation) Ratio() float64 {
	a = a.orEqual()
	return a.Control / a.Treatment
}

// withDefaults fills what zero means, or says what is out of range.
func (s Study) withDefaults() (Study, error) {
	if s.Outcome == "" {
		s.Outcome = Continuous
	}
	if s.Arrangement == "" {
		s.Arrangement = Parallel
	}
	if s.Aim == "" {
		s.Aim = "superiority"
	}
	if s.Sides == 0 {
		s.Sides = 2
	}
	if s.Alpha == 0 {
		s.Alpha = 0.05
	}
	if s.Measure == "" {
		s.Measure = LogOddsRatio
	}
	s.Allocation = s.Allocation.orEqual()
	switch {
	case s.Sides != 1 && s.Sides != 2:
		return s, fmt.Errorf("a test has one side or two, not %d", s.Sides)
	case !(s.Alpha > 0 && s.Alpha < 1):
		return s, fmt.Errorf("alpha must lie between 0 and 1; it is %g", s.Alpha)
	case !(s.Allocation.Treatment > 0 && s.Allocation.Control > 0) || math.IsInf(s.Allocation.Ratio(), 0):
		return s, fmt.Errorf("the allocation must have people in both groups")
	case !(math.Abs(s.BaselineCorrelation) < 1):
		return s, fmt.Errorf("the baseline correlation must lie between -1 and 1; it is %g", s.BaselineCorrelation)
	case s.Outcome == Binary && s.Arrangement == Parallel && !(s.ControlRisk > 0 && s.ControlRisk < 1):
		return s, fmt.Errorf("a binary outcome needs the risk in the control group, between 0 and 1")
	}
	return s, nil
}

// Resolve finds the design that analyses the study, or says which combination is not offered and what is nearest.
func (s Study) Resolve() (Design, error) {
	s, err := s.withDefaults()
	if err != nil {
		return nil, err
	}
	if s.Aim != "superiority" {
		return nil, fmt.Errorf("the aim %q is not offered; superiority is", s.Aim)
	}
	switch s.Arrangement {
	case Parallel, SingleGroup, Paired:
	default:
		return nil, fmt.Errorf("the arrangement %q is not offered; parallel, paired and single-group are", s.Arrangement)
	}
	for _, o := range offers {
		if o.fits(s) {
			return o.make(s)
		}
	}
	return nil, fmt.Errorf("%s outcome, %s arrangement and test %q do not go together here; offered are: %s", s.Outcome, s.Arrangement, s.Test, offered())
}

// offer is one composed study that can be sized. Adding one is a file with its design and a line in offers.
type offer struct {
	words string
	fits  func(Study) bool
	make  func(Study) (Design, error)
}

var offers = []offer{
	{"continuous parallel with baseline adjustment", func(s Study) bool {
		return s.Outcome == Continuous && s.Arrangement == Parallel && (s.Test == "" || s.Test == "t") && s.BaselineCorrelation != 0
	}, newBaselineT},
	{"continuous parallel (t)", func(s Study) bool {
		return s.Outcome == Continuous && s.Arrangement == Parallel && (s.Test == "" || s.Test == "t")
	}, newTwoSampleT},
	{"continuous single-group or paired (t)", func(s Study) bool {
		return s.Outcome == Continuous && s.Arrangement != Parallel && (s.Test == "" || s.Test == "t")
	}, newOneSampleT},
	{"continuous (z, SD known)", func(s Study) bool { return s.Outcome == Continuous && s.Test == "z" }, newZ},
	{"binary parallel (pooled z)", func(s Study) bool {
		return s.Outcome == Binary && s.Arrangement == Parallel && (s.Test == "" || s.Test == "pooled-z")
	}, newPooledZ},
	{"binary parallel (Fisher's exact test)", func(s Study) bool {
		return s.Outcome == Binary && s.Arrangement == Parallel && s.Test == "fisher-exact"
	}, newFisher},
}

func offered() string {
	words := make([]string, len(offers))
	for i, o := range offers {
		words[i] = o.words
	}
	return strings.Join(words, "; ")
}
