package result

// ChoiceMap is the required size under every defensible combination of analysis choices. The share of combinations
// that a size satisfies is a count of choices, not a probability.
type ChoiceMap struct {
	Dimensions   []ChoiceDimension   `json:"dimensions"`
	Combinations []ChoiceCombination `json:"combinations"`
	Enough       int                 `json:"enough"` // combinations that need the chosen size or fewer
	More         int                 `json:"more"`   // combinations that need more
	NoSize       int                 `json:"noSize"` // combinations for which no size exists
	Sentence     string              `json:"sentence"`
	Why          string              `json:"why"` // why there is no map
}

// ChoiceDimension is one choice and its options: "estimator", "adjustment", "studies", "cautious limit of".
type ChoiceDimension struct {
	Name    string   `json:"name"`
	Words   string   `json:"words"`
	Options []string `json:"options"` // as words
}

// ChoiceCombination is one option of each dimension, and the size that it asks, for its own cautious limit.
type ChoiceCombination struct {
	Options  []int    `json:"options"` // index into Options of each dimension, in their order
	Plan     bool     `json:"plan"`    // the plan's own analysis
	K        int      `json:"k"`
	Estimate *float64 `json:"estimate"`
	Effect   *float64 `json:"effect"` // that it is sized for, analysed scale
	N        *N       `json:"n"`      // null with Why
	ToEnrol  *N       `json:"toEnrol"`
	Why      string   `json:"why"`
}

// Subgroup is the pooling of one group of studies.
type Subgroup struct {
	Name       string     `json:"name"`
	K          int        `json:"k"`
	Random     Pooled     `json:"random"`
	Prediction Prediction `json:"prediction"`
	ISquared   *float64   `json:"iSquared"`
	TauSquared *float64   `json:"tauSquared"`
}

// Between is the test of differences between subgroups.
type Between struct {
	Q    *float64 `json:"q"`
	DF   int      `json:"df"`
	P    *float64 `json:"p"`
	Weak string   `json:"weak"` // why it can hardly speak
}

// CumulativePoint is the pooled mean of the studies up to one, in order of year.
type CumulativePoint struct {
	Row      int      `json:"row"` // of the study that was added
	Study    string   `json:"study"`
	Year     *int     `json:"year"`
	K        int      `json:"k"`
	Estimate *float64 `json:"estimate"`
	Lower    *float64 `json:"lower"`
	Upper    *float64 `json:"upper"`
}
