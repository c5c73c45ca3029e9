package result

// Size is the size of a planned study: the document of `footing size --json`, and a part of a plan's result.
type Size struct {
	Schema      string        `json:"schema"` // "footing/size/1"
	Tool        Tool          `json:"tool"`
	Study       Planned       `json:"study"`
	Test        Test          `json:"test"`
	Scale       ScaleInfo     `json:"scale"`
	Cases       []Case        `json:"cases"`
	Chosen      *Chosen       `json:"chosen"` // null for a bare `footing size`, or when no size exists
	Why         string        `json:"why"`    // why there is no chosen size
	Assurance   *Assurance    `json:"assurance"`
	Curves      []PowerCurve  `json:"curves"`
	NeedCurve   []NeedPoint   `json:"needCurve"` // n that each effect would need, on one effect axis
	Sensitivity []Sensitivity `json:"sensitivity"`
	Levers      []Lever       `json:"levers"`
	Choices     *ChoiceMap    `json:"choices"`
	Grid        *Grid         `json:"grid"` // for the interactive panel
	Findings    []Finding     `json:"findings"`
}

// Planned is the planned study as it was understood.
type Planned struct {
	Outcome     string       `json:"outcome"`
	Arrangement string       `json:"arrangement"`
	Aim         string       `json:"aim"`
	Sides       int          `json:"sides"`
	Alpha       float64      `json:"alpha"`
	PowerTarget float64      `json:"powerTarget"`
	Allocation  string       `json:"allocation"` // "1:1", treatment first
	Groups      []string     `json:"groups"`     // names of the groups, treatment first
	Dropout     float64      `json:"dropout"`
	BaselineR   *float64     `json:"baselineCorrelation"`
	SD          *float64     `json:"standardDeviation"`
	ControlRisk *float64     `json:"controlRisk"`
	Cost        *Cost        `json:"cost"`
	Estimand    []NamedText  `json:"estimand"`
	Assumptions []Assumption `json:"assumptions"` // nuisance values with their sources
}

// NamedText is a label with its text.
type NamedText struct {
	Name string `json:"name"`
	Text string `json:"text"`
}

// Cost is what a study costs: fixed + per participant enrolled.
type Cost struct {
	PerParticipant float64  `json:"perParticipant"`
	Fixed          float64  `json:"fixed"`
	AtMost         *float64 `json:"atMost"`
	Currency       string   `json:"currency"`
}

// Test is the test that analyses the planned study.
type Test struct {
	Name      string `json:"name"` // e.g. "two-sample-t", "baseline-adjusted-t", "pooled-z", "fisher-exact"
	Words     string `json:"words"`
	Method    string `json:"method"` // how power is computed: "exact, noncentral t", "normal approximation (named)"
	Reference string `json:"reference"`
}

// N is a number of people, in all and in each group (treatment first).
type N struct {
	Total  int   `json:"total"`
	Groups []int `json:"groups"`
}

// Case is the study at one effect.
type Case struct {
	Scenario    string   `json:"scenario"` // "" in a bare `footing size`
	Effect      float64  `json:"effect"`   // analysed scale
	Shown       float64  `json:"shown"`
	ControlRisk *float64 `json:"controlRisk"`
	TreatedRisk *float64 `json:"treatedRisk"`
	N           *N       `json:"n"`           // analysed at the end, for the target power; null with Why
	ContinuousN *float64 `json:"continuousN"` // first group, before rounding
	Power       *float64 `json:"power"`       // attained at N
	ToEnrol     *N       `json:"toEnrol"`
	Cost        *float64 `json:"cost"`
	At80        *N       `json:"at80"` // n for power .80 and .90, always
	At90        *N       `json:"at90"`
	// At the chosen n; null where there is none.
	PowerAtChosen *float64 `json:"powerAtChosen"`
	WrongSide     *float64 `json:"wrongSide"` // chance of a significant result in the wrong direction
	TypeS         *float64 `json:"typeS"`     // chance that a significant result has the wrong sign
	TypeM         *float64 `json:"typeM"`     // expected exaggeration of a significant result
	Why           string   `json:"why"`
}

// Chosen is the size that the plan asks for.
type Chosen struct {
	Scenario            string      `json:"scenario"`
	ScenarioWhy         string      `json:"scenarioWhy"` // set when the asked scenario fell below the smallest worthwhile effect
	Basis               string      `json:"basis"`       // "power", "assurance": which target decided
	N                   N           `json:"n"`
	ToEnrol             N           `json:"toEnrol"`
	Power               float64     `json:"power"` // attained, at the scenario's effect
	Cost                *float64    `json:"cost"`
	OverBudget          bool        `json:"overBudget"`
	AffordableToEnrol   *int        `json:"affordableToEnrol"`
	Trail               []TrailStep `json:"trail"`               // from the size without any design help to the number enrolled
	SmallestSignificant *float64    `json:"smallestSignificant"` // analysed scale
	SmallestDetectable  *float64    `json:"smallestDetectable"`  // at the target power
}

// TrailStep is one line from the bare n to the number to enrol.
type TrailStep struct {
	Words  string `json:"words"`
	N      N      `json:"n"`
	Source string `json:"source"` // where its value comes from; "assumed" when nowhere
}

// Assurance is the chance of success averaged over the distribution of the effect.
type Assurance struct {
	Target        *float64         `json:"target"`
	Uses          string           `json:"uses"` // "unadjusted" or "adjusted": which one the target is held against
	AtChosen      *float64         `json:"atChosen"`
	AtChosenAdj   *float64         `json:"atChosenAdjusted"`
	Ceiling       *float64         `json:"ceiling"`
	CeilingAdj    *float64         `json:"ceilingAdjusted"`
	NForTarget    *N               `json:"nForTarget"`
	OutOfReach    string           `json:"outOfReach"` // the statement that no n reaches the target
	Curve         []AssurancePoint `json:"curve"`
	ExpectedPower string           `json:"words"`
	Why           string           `json:"why"`
}

// AssurancePoint is the assurance at one n of the first group.
type AssurancePoint struct {
	N         int      `json:"n"` // first group
	Total     int      `json:"total"`
	Assurance float64  `json:"assurance"`
	Adjusted  *float64 `json:"adjusted"`
}

// PowerCurve is power over n for one scenario.
type PowerCurve struct {
	Scenario string       `json:"scenario"`
	Points   []PowerPoint `json:"points"`
}

// PowerPoint is one point of a power curve.
type PowerPoint struct {
	N     int     `json:"n"` // first group
	Total int     `json:"total"`
	Power float64 `json:"power"`
}

// NeedPoint is the n of the first group that one effect needs.
type NeedPoint struct {
	Effect float64  `json:"effect"`
	N      *float64 `json:"n"` // null where no size exists
}

// Sensitivity is the size under another value of one assumption.
type Sensitivity struct {
	Assumption    string   `json:"assumption"`
	Value         string   `json:"value"`
	N             *N       `json:"n"`
	ToEnrol       *N       `json:"toEnrol"`
	Cost          *float64 `json:"cost"`
	OverBudget    bool     `json:"overBudget"`
	PowerAtChosen *float64 `json:"powerAtChosen"`
	Why           string   `json:"why"`
}

// Lever is one way to need fewer people, and what it asks in return.
type Lever struct {
	Words   string   `json:"words"`
	N       *N       `json:"n"`
	ToEnrol *N       `json:"toEnrol"`
	Change  int      `json:"change"` // people of the first group, against the plan
	Cost    *float64 `json:"cost"`
	Price   string   `json:"price"`
	Why     string   `json:"why"`
}

// Grid is what the interactive panel reads: power on a grid of effect and n for each test setting, computed by the engine.
type Grid struct {
	Effects       []float64   `json:"effects"` // analysed scale
	Ns            []int       `json:"ns"`      // first group
	Layers        []GridLayer `json:"layers"`
	Accuracy      string      `json:"accuracy"` // what interpolation between grid points costs, measured
	AccuracyValue float64     `json:"accuracyValue"`
}

// GridLayer is power[effect][n] under one alpha and allocation.
type GridLayer struct {
	Alpha             float64     `json:"alpha"`
	Sides             int         `json:"sides"`
	Allocation        string      `json:"allocation"`
	Power             [][]float64 `json:"power"`
	Assurance         []float64   `json:"assurance"` // over Ns
	AssuranceAdjusted []float64   `json:"assuranceAdjusted"`
}
