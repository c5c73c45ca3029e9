package importers

import (
	"footing/internal/finding"
	"footing/meta/effect"
)

// Sheet is an evidence sheet as read and as understood.
type Sheet struct {
	File     string   // as the caller named it
	Name     string   // sheet name; "" for text files
	SHA256   string   // of the file's bytes, hex
	Layout   string   // "one row per study", ... in words
	Sheets   []string // names of all sheets of the file
	Headings []Heading
	Records  []Record
	Findings []finding.Finding

	told map[string]int // findings so far, by kind
}

// Heading is one column as typed and as understood.
type Heading struct {
	Column  int    // 1-based
	Cell    string // address of the heading cell
	Typed   string
	Meaning Meaning // "" when not understood: the column is kept as a note
	Why     string  // "by its heading", "by the plan's columns:", ...
	First   []string

	Scale   effect.Scale // scale that the heading itself names ("odds ratio"), "" when it names none
	Log     bool         // the heading says that the ratio is printed as its logarithm
	Level   float64      // level that a heading of confidence limits names ("90% CI lower"), 0 when none
	Percent bool         // the heading says that the values are percentages
	Sides   int          // sides of a p that the heading names, 0 when none
}

// Meaning is what a column means, in the words of a heading: "treatment mean", "control sd", "ci lower", ...
// The list stands in meanings.go.
type Meaning string

// Cell is one cell as read.
type Cell struct {
	Address string
	Column  int
	Heading string
	Meaning Meaning
	Text    string // raw text as stored, never display text; a date as its ISO form
}

// Record is one row of the evidence sheet (one study, in the simplest layout). What it reports, its cells and its further
// columns are asked for by method: a sheet of a hundred thousand rows then fits into little memory.
type Record struct {
	Row          int // 1-based
	Study        string
	Year         int    // 0 when not given
	RiskOfBias   string // "low", "some concerns", "high", "" when not given
	Relevance    float64
	HasRelevance bool
	Subgroup     string
	Status       string
	HigherBetter *bool // the row's own word on which way its outcome runs; nil when it has none
	Hidden       bool  // the row is hidden in the spreadsheet

	set    *columnSet
	cells  []cell       // of Row
	joined []row        // further rows that make up the record
	kept   []keptFigure // what it reports
	rest   keptRest
}
