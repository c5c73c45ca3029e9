package importers

import (
	"footing/internal/finding"
	"footing/meta/effect"
)

// Sheet is an evidence sheet as read and as understood.
type Sheet struct {
	File     string // as the caller named it
	Name     string // sheet name; "" for text files
	SHA256   string // of the file's bytes, hex
	Layout   string // "one row per study", ... in words
	Headings []Heading
	Records  []Record
	Findings []finding.Finding
}

// Heading is one column as typed and as understood.
type Heading struct {
	Column  int    // 1-based
	Cell    string // address of the heading cell
	Typed   string
	Meaning Meaning // "" when not understood: the column is kept as a note
	Why     string  // "by its heading", "by the plan's columns:", ...
	First   []string
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
	Text    string // raw text as stored, never display text
}

// Record is one row of the evidence sheet (one study, in the simplest layout).
type Record struct {
	Row          int // 1-based
	Study        string
	Year         int    // 0 when not given
	RiskOfBias   string // "low", "some concerns", "high", "" when not given
	Relevance    float64
	HasRelevance bool
	Subgroup     string
	Status       string
	Reported     effect.Reported
	Cells        []Cell
	Other        map[string]string // columns that were not understood, by heading as typed: for moderators and filters
}
