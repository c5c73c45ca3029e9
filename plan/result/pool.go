package result

// Pool is the result of pooling one evidence sheet: the document of `footing pool --json`.
type Pool struct {
	Schema         string            `json:"schema"` // "footing/pool/1"
	Tool           Tool              `json:"tool"`
	Evidence       Evidence          `json:"evidence"`
	Scale          ScaleInfo         `json:"scale"`
	Level          float64           `json:"level"` // of every interval unless the interval says other
	Studies        []Study           `json:"studies"`
	K              int               `json:"k"`            // studies pooled
	Participants   *float64          `json:"participants"` // in the pooled studies, where known
	Common         Pooled            `json:"common"`
	Random         Pooled            `json:"random"` // by the plan's estimator and interval
	MantelHaenszel *Pooled           `json:"mantelHaenszel"`
	Peto           *Pooled           `json:"peto"`
	Heterogeneity  Heterogeneity     `json:"heterogeneity"`
	Prediction     Prediction        `json:"prediction"`
	Estimators     []Estimator       `json:"estimators"`
	SmallStudy     []SmallStudy      `json:"smallStudy"`
	Influence      []Influence       `json:"influence"`
	Subgroups      []Subgroup        `json:"subgroups"` // where the plan asks for them
	Between        *Between          `json:"between"`
	Cumulative     []CumulativePoint `json:"cumulative"` // by year
	Findings       []Finding         `json:"findings"`
	Sentences      []string          `json:"sentences"` // what it says about this field, plain words, one figure each
}

// Evidence says where the rows came from.
type Evidence struct {
	File     string    `json:"file"`
	Sheet    string    `json:"sheet"`
	SHA256   string    `json:"sha256"`
	Rows     int       `json:"rows"` // records read
	Used     int       `json:"used"`
	Headings []Heading `json:"headings"`
	Searched *Searched `json:"searched"`
	Invented bool      `json:"invented"` // demonstration data
	Examples []string  `json:"examples"` // labels of example rows of a new plan that still stand
}

// Heading is one column as typed and as understood.
type Heading struct {
	Cell    string   `json:"cell"`
	Typed   string   `json:"typed"`
	Meaning string   `json:"meaning"` // "" when it was not understood and is kept as a note
	Why     string   `json:"why"`
	First   []string `json:"first"` // first values, as typed
}

// Searched is how the literature was searched.
type Searched struct {
	Date     string `json:"date"`
	Found    *int   `json:"found"`
	Screened *int   `json:"screened"`
	Kept     *int   `json:"kept"`
	Rule     string `json:"rule"`
}

// Cell is one cell as read.
type Cell struct {
	Address string `json:"address"`
	Heading string `json:"heading"`
	Meaning string `json:"meaning"`
	Text    string `json:"text"` // as typed
}

// Study is one record of the sheet and what became of it.
type Study struct {
	Row           int       `json:"row"` // 1-based row of the sheet
	Place         Place     `json:"place"`
	Study         string    `json:"study"` // label as typed
	Year          *int      `json:"year"`
	RiskOfBias    string    `json:"riskOfBias"` // "low", "some concerns", "high", "" when not said
	Relevance     *float64  `json:"relevance"`
	Subgroup      string    `json:"subgroup"`
	Used          bool      `json:"used"`
	Why           string    `json:"why"` // why it was left out
	NTreatment    *float64  `json:"nTreatment"`
	NControl      *float64  `json:"nControl"`
	Estimate      *float64  `json:"estimate"`
	StandardError *float64  `json:"standardError"`
	Variance      *float64  `json:"variance"`
	Interval      *Interval `json:"interval"`
	Shown         *Shown    `json:"shown"`
	Weight        *float64  `json:"weight"` // share in the random-effects mean, 0..1
	WeightCommon  *float64  `json:"weightCommon"`
	Route         string    `json:"route"`
	Formula       string    `json:"formula"`
	Notes         []string  `json:"notes"`
	Flipped       bool      `json:"flipped"`
	Counts        *Counts   `json:"counts"` // 2x2 table, where the route had one
	Cells         []Cell    `json:"cells"`  // every cell of the row, as read
	From          []string  `json:"from"`   // addresses that the estimate came from
}

// Counts is a 2x2 table.
type Counts struct {
	EventsTreatment float64 `json:"eventsTreatment"`
	TotalTreatment  float64 `json:"totalTreatment"`
	EventsControl   float64 `json:"eventsControl"`
	TotalControl    float64 `json:"totalControl"`
}

// Pooled is one pooled mean. Estimate is null when there is none, with Why.
type Pooled struct {
	Method        string    `json:"method"`
	Estimate      *float64  `json:"estimate"`
	StandardError *float64  `json:"standardError"` // of the interval's own method
	Interval      *Interval `json:"interval"`
	Shown         *Shown    `json:"shown"`
	Statistic     *float64  `json:"statistic"`
	DF            *float64  `json:"df"` // null for normal
	P             *float64  `json:"p"`
	TauSquared    *float64  `json:"tauSquared"`
	Why           string    `json:"why"`
}

// Heterogeneity is how far the studies differ.
type Heterogeneity struct {
	Q                  *float64  `json:"q"`
	DF                 int       `json:"df"`
	P                  *float64  `json:"p"`
	HSquared           *float64  `json:"hSquared"`
	ISquared           *float64  `json:"iSquared"` // 0..1
	ISquaredInterval   *Interval `json:"iSquaredInterval"`
	TauSquared         *float64  `json:"tauSquared"` // by the plan's estimator
	Tau                *float64  `json:"tau"`
	TauSquaredInterval *Interval `json:"tauSquaredInterval"` // Q-profile
	Truncated          bool      `json:"truncated"`          // tau-squared was cut at 0
	Why                string    `json:"why"`
}

// Prediction is the interval for the true effect in a new setting.
type Prediction struct {
	Interval *Interval `json:"interval"`
	Shown    *Shown    `json:"shown"`
	DF       *float64  `json:"df"`
	Why      string    `json:"why"` // why it is not available, or what weakens it
}

// Estimator is one tau-squared estimator with everything that follows from it.
type Estimator struct {
	Name               string              `json:"name"`
	TauSquared         *float64            `json:"tauSquared"`
	TauSquaredInterval *Interval           `json:"tauSquaredInterval"`
	ISquared           *float64            `json:"iSquared"`
	Estimate           *float64            `json:"estimate"`
	Truncated          bool                `json:"truncated"`
	Converged          bool                `json:"converged"`
	Iterations         int                 `json:"iterations"`
	Intervals          []EstimatorInterval `json:"intervals"`
	Predictions        []EstimatorInterval `json:"predictions"`
	Why                string              `json:"why"`
}

// EstimatorInterval is one interval of the mean (or of a new setting's effect) under one estimator.
type EstimatorInterval struct {
	Method        string   `json:"method"` // normal, hartung-knapp, hartung-knapp-floored, ...
	StandardError *float64 `json:"standardError"`
	Lower         *float64 `json:"lower"`
	Upper         *float64 `json:"upper"`
	Statistic     *float64 `json:"statistic"`
	DF            *float64 `json:"df"`
	P             *float64 `json:"p"`
	Why           string   `json:"why"`
}

// SmallStudy is one small-study check or adjusted estimate.
type SmallStudy struct {
	Name          string             `json:"name"` // e.g. "egger-regression", "trim-and-fill", "henmi-copas"
	Words         string             `json:"words"`
	Estimate      *float64           `json:"estimate"` // adjusted mean, where the method gives one
	StandardError *float64           `json:"standardError"`
	Interval      *Interval          `json:"interval"`
	Shown         *Shown             `json:"shown"`
	Statistic     *float64           `json:"statistic"`
	DF            *float64           `json:"df"`
	P             *float64           `json:"p"`
	Figures       map[string]float64 `json:"figures"` // the method's own, e.g. "intercept", "filled"
	Points        []FunnelPoint      `json:"points"`  // imputed studies, for the funnel plot
	Assumes       string             `json:"assumes"`
	Weak          string             `json:"weak"` // why it can't reassure here, "" when it can speak
	Why           string             `json:"why"`  // why it is not available
}

// FunnelPoint is a point of the funnel plot.
type FunnelPoint struct {
	Estimate      float64 `json:"estimate"`
	StandardError float64 `json:"standardError"`
}

// Influence is the pooling without one study.
type Influence struct {
	Row        int      `json:"row"`
	Study      string   `json:"study"`
	Estimate   *float64 `json:"estimate"`
	Lower      *float64 `json:"lower"`
	Upper      *float64 `json:"upper"`
	TauSquared *float64 `json:"tauSquared"`
	Residual   *float64 `json:"residual"` // standardized, left out
	ShareOfQ   *float64 `json:"shareOfQ"`
	// The plan without this study; null in a bare pool.
	PerGroup []int    `json:"perGroup"`
	ToEnrol  *int     `json:"toEnrol"`
	Cost     *float64 `json:"cost"`
	Why      string   `json:"why"`
}
