package result

// Plan is the result of a whole run: the document of `footing plan --json`.
type Plan struct {
	Schema        string       `json:"schema"` // "footing/plan/1"
	Tool          Tool         `json:"tool"`
	File          string       `json:"file"`
	SHA256        string       `json:"sha256"` // of the plan file
	Title         string       `json:"title"`
	Question      string       `json:"question"`
	Date          string       `json:"date"`
	Seed          uint64       `json:"seed"`
	Edition       int          `json:"edition"` // the edition that this run would become (last + 1); 0 when nothing was ever frozen
	Invented      bool         `json:"invented"`
	Justification string       `json:"justification"`
	Pool          *Pool        `json:"pool"` // null for a plan without evidence
	Range         *Range       `json:"range"`
	Size          Size         `json:"size"`
	Threats       []Threat     `json:"threats"`
	Assumptions   []Assumption `json:"assumptions"`
	Since         *Comparison  `json:"since"` // against the last edition, where there is one
	Findings      []Finding    `json:"findings"`
	Undecided     int          `json:"undecided"` // errors and warnings without a decision
	Cautions      []string     `json:"cautions"`
	Methods       []MethodUsed `json:"methods"`
	AnswerNo      string       `json:"answerNo"` // why the answer is no (exit code 1), "" when it is not
}

// Threat is one thing that could make the chosen size wrong, worst first.
type Threat struct {
	Head string `json:"head"`
	Text string `json:"text"`
}

// MethodUsed is a method that the run used, with its reference.
type MethodUsed struct {
	Name      string `json:"name"`
	Words     string `json:"words"`
	Assumes   string `json:"assumes"`
	Misleads  string `json:"misleads"`
	Reference string `json:"reference"`
}

// Comparison is what changed between two editions, or between an edition and now.
type Comparison struct {
	Schema          string         `json:"schema"` // "footing/compare/1"
	Plan            string         `json:"plan"`
	From            EditionRef     `json:"from"`
	To              EditionRef     `json:"to"`
	Added           []StudyChange  `json:"added"`
	Dropped         []StudyChange  `json:"dropped"`
	Changed         []StudyChange  `json:"changed"`
	Options         []ValueChange  `json:"options"`
	Figures         []FigureChange `json:"figures"` // pooled effect, tau, prediction, adjusted, scenario effects, n ...
	FrozenN         *N             `json:"frozenN"`
	FrozenAssurance *float64       `json:"frozenAssurance"` // of the frozen n under the new evidence
	FrozenPower     *float64       `json:"frozenPower"`
	Rules           []RuleOutcome  `json:"rules"`
	Triggered       bool           `json:"triggered"`
	Move            *Move          `json:"move"` // what moved the number to enrol; null where it was not asked
	Line            string         `json:"line"` // one-line summary
	History         []HistoryPoint `json:"history"`
}

// Move takes the move of the number to enrol apart: the share of each part is its change averaged over all orders in
// which the parts can be put in (Shapley 1953), so that the shares add up to the move.
type Move struct {
	From   int         `json:"from"` // people to enrol
	To     int         `json:"to"`
	Parts  []MovePart  `json:"parts"`
	Orders []MoveOrder `json:"orders"`
	Why    string      `json:"why"` // why it is not available
}

// MovePart is one part of a move.
type MovePart struct {
	Name   string  `json:"name"` // "studies", "rows", "options"
	Words  string  `json:"words"`
	Change float64 `json:"change"` // people, averaged over the orders
}

// MoveOrder is the move in one order of its parts.
type MoveOrder struct {
	Order   []string `json:"order"`
	Changes []int    `json:"changes"` // people, in that order
}

// EditionRef names an edition; Number 0 is the run now.
type EditionRef struct {
	Number int    `json:"number"`
	Date   string `json:"date"`
	By     string `json:"by"`
	Why    string `json:"why"`
	Hash   string `json:"hash"`
}

// StudyChange is a study that came, went or changed.
type StudyChange struct {
	Study string        `json:"study"`
	Place Place         `json:"place"`
	Cells []ValueChange `json:"cells"`
}

// ValueChange is a cell or an option that changed, as text.
type ValueChange struct {
	Name string `json:"name"`
	From string `json:"from"`
	To   string `json:"to"`
}

// FigureChange is a number that moved.
type FigureChange struct {
	Name  string   `json:"name"`
	Words string   `json:"words"`
	From  *float64 `json:"from"`
	To    *float64 `json:"to"`
	// Shown are the same on the scale that people read, where that differs.
	FromShown *float64 `json:"fromShown"`
	ToShown   *float64 `json:"toShown"`
}

// RuleOutcome is one revision rule of the plan.
type RuleOutcome struct {
	Rule      string `json:"rule"`
	Text      string `json:"text"`
	Triggered bool   `json:"triggered"`
}

// HistoryPoint is one edition in the drawn history.
type HistoryPoint struct {
	Edition  EditionRef `json:"edition"`
	K        int        `json:"k"`
	Estimate *float64   `json:"estimate"`
	Lower    *float64   `json:"lower"`
	Upper    *float64   `json:"upper"`
	N        *N         `json:"n"`
	ToEnrol  *N         `json:"toEnrol"`
}
