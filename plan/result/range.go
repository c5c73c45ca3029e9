package result

// Range is what the planned study's effect may plausibly be.
type Range struct {
	Basis              string         `json:"basis"` // "predictive" or "pooled"
	Distribution       *Distribution  `json:"distribution"`
	Adjusted           *Distribution  `json:"adjusted"`     // after the small-study adjustment
	AdjustedBy         string         `json:"adjustedBy"`   // which method
	UsesAdjusted       bool           `json:"usesAdjusted"` // targets and revision rules use the adjusted one
	SmallestWorthwhile *Worthwhile    `json:"smallestWorthwhile"`
	Scenarios          []Scenario     `json:"scenarios"`
	Chances            []Chance       `json:"chances"`
	Curve              []DensityPoint `json:"curve"`         // of Distribution, for drawing and for reading off
	AdjustedCurve      []DensityPoint `json:"adjustedCurve"` //
	Why                string         `json:"why"`
}

// Distribution is a distribution of the effect: location + scale x the standard form of Kind.
type Distribution struct {
	Kind      string          `json:"kind"` // "student-t", "normal", "mixture", ...
	Words     string          `json:"words"`
	Location  *float64        `json:"location"`
	Scale     *float64        `json:"scale"`
	DF        *float64        `json:"df"`
	Mean      *float64        `json:"mean"`
	SD        *float64        `json:"sd"`
	Quantiles []QuantilePoint `json:"quantiles"`
}

// QuantilePoint is one quantile.
type QuantilePoint struct {
	P     float64 `json:"p"`
	Value float64 `json:"value"`
}

// DensityPoint is one point of a density curve.
type DensityPoint struct {
	Effect  float64 `json:"effect"`
	Density float64 `json:"density"`
	CDF     float64 `json:"cdf"`
}

// Worthwhile is the smallest effect that would still matter, and who says so.
type Worthwhile struct {
	Effect  float64 `json:"effect"`
	Shown   float64 `json:"shown"`
	Source  string  `json:"source"`
	Who     string  `json:"who"`
	Why     string  `json:"why"`
	Assumed bool    `json:"assumed"`
}

// Scenario is one named assumption about the planned study's effect.
type Scenario struct {
	Name   string  `json:"name"`  // token of the plan file: pooled, cautious, small-study-adjusted, lower-limit, smallest-worthwhile, or the user's
	Words  string  `json:"words"` // "average of the studies", "cautious", "allowing for missing studies", ...
	Effect float64 `json:"effect"`
	Shown  float64 `json:"shown"`
	Why    string  `json:"why"`    // where it comes from, in one sentence
	Plan   bool    `json:"plan"`   // true: a choice (plan's ink); false: evidence
	NoSize string  `json:"noSize"` // why no size exists for it, "" when one does
	Target bool    `json:"target"` // the scenario that the study is sized for
	// InPeople is the chance that one person picked from the treatment group does better than one picked from the control
	// group, for a standardized mean difference; null elsewhere.
	InPeople *float64 `json:"inPeople"`
}

// Chance is the chance that the true effect in the next setting lies beyond a value.
type Chance struct {
	Words    string   `json:"words"` // "above no effect", "at least the smallest worthwhile effect"
	Effect   float64  `json:"effect"`
	Chance   float64  `json:"chance"`
	Adjusted *float64 `json:"adjusted"`
}
