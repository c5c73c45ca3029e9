package plan

import "footing/internal/finding"

// File is a plan file as written (design of the keys: README, "The plan file"). Pointers and empty strings mean "not
// given"; Load fills no defaults in, WithDefaults does, so that a run can say which values were the user's.
type File struct {
	Path   string `yaml:"-"` // where it was read from; evidence paths are relative to its folder
	SHA256 string `yaml:"-"` // of the file's bytes, hex

	at map[string]finding.Place // where each given value stands, by its path

	Title    string `yaml:"title"`
	Question string `yaml:"question"`
	Date     string `yaml:"date"` // printed; a run never reads the clock
	Seed     uint64 `yaml:"seed"`
	Invented bool   `yaml:"invented"` // marks demonstration data in every output

	Evidence     Evidence     `yaml:"evidence"`
	Pool         Pool         `yaml:"pool"`
	SmallStudies SmallStudies `yaml:"small studies"`
	Range        Range        `yaml:"range"`
	Study        Study        `yaml:"study"`
	Target       Target       `yaml:"target"`
	ReviseWhen   ReviseWhen   `yaml:"revise when"`
}

// Evidence says which sheet holds the prior studies and how to read it.
type Evidence struct {
	File         string            `yaml:"file"`
	Sheet        string            `yaml:"sheet"`
	Columns      map[string]string `yaml:"columns"`      // meaning: heading as typed
	Encoding     string            `yaml:"encoding"`     // of a text file, where it isn't found out: utf-8, windows-1252, ...
	DecimalMark  string            `yaml:"decimal mark"` // "." or ",", where it isn't found out
	HigherBetter *bool             `yaml:"higher is better"`
	PrePostR     *Assumed          `yaml:"pre-post correlation"`     // for rows of paired measurements that give none
	ICC          *Assumed          `yaml:"intracluster correlation"` // for clustered rows that give none
	Reliability  *Assumed          `yaml:"reliability"`              // of the outcome measure: effects are corrected for attenuation
	Favours      string            `yaml:"favours"`                  // the direction in the reader's words: "better with a break"
	KeepWhere    []string          `yaml:"keep where"`
	Searched     *Searched         `yaml:"searched"`
	Decisions    []Decision        `yaml:"decisions"`
}

// Searched is how the literature was searched.
type Searched struct {
	Date     string `yaml:"date"`
	Found    *int   `yaml:"found"`
	Screened *int   `yaml:"screened"`
	Kept     *int   `yaml:"kept"`
	Rule     string `yaml:"rule"`
}

// Decision is a recorded answer to a finding.
type Decision struct {
	Finding string `yaml:"finding"` // its id, e.g. sd-looks-like-se@Studies!F7
	Accept  bool   `yaml:"accept"`
	Value   string `yaml:"value"`
	Why     string `yaml:"why"`
	By      string `yaml:"by"`
	On      string `yaml:"on"`
	Seen    string `yaml:"seen"`  // the cell's text when it was decided
	Study   string `yaml:"study"` // the study's label when it was decided
}

// Pool says how the studies are pooled.
type Pool struct {
	Scale         string   `yaml:"scale"`
	Heterogeneity string   `yaml:"heterogeneity"` // default dersimonian-laird
	Interval      string   `yaml:"interval"`      // default hartung-knapp-floored
	Level         *float64 `yaml:"level"`         // default .95
	Variance      string   `yaml:"variance"`      // of a standardized mean difference: at-g (default), j-squared, unbiased
	Relevance     string   `yaml:"relevance"`     // heading of the relevance column
	SubgroupBy    string   `yaml:"subgroup by"`
}

// SmallStudies says which adjusted estimate the scenarios use.
type SmallStudies struct {
	// AdjustBy names the adjusted estimate; "none" asks for the unadjusted distribution. Unnamed, the scenarios use the unadjusted one and small-study-adjusted follows the rule of defaultAdjustment.
	AdjustBy string `yaml:"adjust by"`
	// RelativeChance is the chance of publication of a result that misses significance in the favoured direction, relative to one that meets it; used as given where the studies are too few to estimate it. nil means .5.
	RelativeChance *float64 `yaml:"relative chance of publication"`
}

// Range says what the planned study's effect may be.
type Range struct {
	Basis              string             `yaml:"basis"` // predictive (default) or pooled
	SmallestWorthwhile *Assumed           `yaml:"smallest worthwhile effect"`
	Scenarios          map[string]float64 `yaml:"scenarios"`
}

// Assumed is a number with its uncertainty and its source. In a plan file it is written as a number or as
// {value, low, high, source, why, who, as}. Line and Column say where.
type Assumed struct {
	Value  float64  `yaml:"value"`
	Low    *float64 `yaml:"low"`  // with High: the 95% interval on the natural scale of the quantity
	High   *float64 `yaml:"high"` //
	As     string   `yaml:"as"`   // "" or "range": uniform between low and high
	Source string   `yaml:"source"`
	Why    string   `yaml:"why"`
	Who    string   `yaml:"who"`
	Pool   string   `yaml:"pool"` // "control sd", "control risk": pooled from the evidence sheet
	Line   int      `yaml:"-"`
	Column int      `yaml:"-"`
}

// Study is the planned study.
type Study struct {
	Outcome             string            `yaml:"outcome"`
	Arrangement         string            `yaml:"arrangement"`
	Groups              []string          `yaml:"groups"` // names, treatment first
	Allocation          string            `yaml:"allocation"`
	Aim                 string            `yaml:"aim"`
	Sides               string            `yaml:"sides"` // one or two
	Alpha               *float64          `yaml:"alpha"`
	Test                string            `yaml:"test"` // "" lets the arrangement choose; fisher-exact, pooled-z, ...
	SD                  *Assumed          `yaml:"standard deviation"`
	ControlRisk         *Assumed          `yaml:"control risk"`
	BaselineCorrelation *Assumed          `yaml:"baseline correlation"`
	Dropout             *Assumed          `yaml:"dropout"`
	Estimand            map[string]string `yaml:"estimand"`
}

// Target is what the study is sized for.
type Target struct {
	Power         *float64 `yaml:"power"`
	Assurance     *float64 `yaml:"assurance"`
	SizeFor       string   `yaml:"size for"` // a scenario's name
	Justification string   `yaml:"justification"`
	Budget        *Budget  `yaml:"budget"`
}

// Budget is what the study costs and may cost.
type Budget struct {
	PerParticipant float64  `yaml:"per participant"`
	Fixed          float64  `yaml:"fixed"`
	AtMost         *float64 `yaml:"at most"`
	Currency       string   `yaml:"currency"`
}

// ReviseWhen holds the revision rules.
type ReviseWhen struct {
	AssuranceBelow *float64 `yaml:"assurance of the frozen n below"`
	PowerBelow     *float64 `yaml:"power of the frozen n below"`
	NMovesBy       string   `yaml:"required n moves by"` // "10%"
	EffectCrosses  *bool    `yaml:"pooled effect crosses the smallest worthwhile effect"`
	TauGrowsBy     string   `yaml:"tau grows by"`
}
