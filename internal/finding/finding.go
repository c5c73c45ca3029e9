// Package finding holds what the tool noticed about a person's input: where it is, what is wrong and what
// would mend it. A finding is a value like any other: readers collect all of them and go on.
package finding

import (
	"fmt"
	"sort"
	"strings"
)

// Severity ranks a finding by what it does to the result.
type Severity string

// The three severities, worst first.
const (
	Error   Severity = "error"   // the cell, row or file cannot be used
	Warning Severity = "warning" // used as it stands, but the result may be wrong
	Note    Severity = "note"    // how something was understood
)

// Place is where a finding stands. Empty fields are unknown or do not apply.
type Place struct {
	File   string `json:"file,omitempty"`
	Sheet  string `json:"sheet,omitempty"`
	Cell   string `json:"cell,omitempty"` // "F7"; "F7:G7" for a range; "row 7" where no single cell is meant
	Line   int    `json:"line,omitempty"` // 1-based, for text files
	Column int    `json:"column,omitempty"`
}

// String gives "file, Sheet!F7", "file:14:3", or the parts that are known.
func (p Place) String() string {
	switch {
	case p.Line > 0 && p.Column > 0:
		return fmt.Sprintf("%s:%d:%d", p.File, p.Line, p.Column)
	case p.Line > 0:
		return fmt.Sprintf("%s:%d", p.File, p.Line)
	}
	cell := p.Cell
	if p.Sheet != "" && cell != "" {
		cell = p.Sheet + "!" + cell
	} else if p.Sheet != "" {
		cell = p.Sheet
	}
	switch {
	case p.File != "" && cell != "":
		return p.File + ", " + cell
	case p.File != "":
		return p.File
	}
	return cell
}

// Decision is a person's recorded answer to a finding. It holds only while SeenText and SeenStudy still match
// what stands in the sheet.
type Decision struct {
	Accept    bool   `json:"accept"`
	Value     string `json:"value,omitempty"`
	Why       string `json:"why,omitempty"`
	By        string `json:"by,omitempty"`
	On        string `json:"on,omitempty"`
	SeenText  string `json:"seenText,omitempty"`
	SeenStudy string `json:"seenStudy,omitempty"`
}

// Finding is one thing the tool noticed.
type Finding struct {
	Severity Severity  `json:"severity"`
	Kind     string    `json:"kind"`            // kebab-case, stable between releases, e.g. "sd-looks-like-se"
	Place    Place     `json:"place"`           //
	Study    string    `json:"study,omitempty"` // the study's label as typed
	Text     string    `json:"text,omitempty"`  // the cell's text as typed
	What     string    `json:"what"`            // what is wrong, with the arithmetic that shows it
	Mend     string    `json:"mend,omitempty"`  // what would mend it
	Decision *Decision `json:"decision,omitempty"`
}

// ID is the stable name of a finding: its kind and, where there is one, its sheet and cell ("kind@Sheet!F7").
// It leaves the file name out, so that a renamed file keeps its decisions.
func (f Finding) ID() string {
	p := f.Place
	p.File = ""
	if p.Line > 0 {
		return fmt.Sprintf("%s@line %d", f.Kind, p.Line)
	}
	if s := p.String(); s != "" {
		return f.Kind + "@" + s
	}
	return f.Kind
}

// String is the one-line form: place, what, mend.
func (f Finding) String() string {
	var b strings.Builder
	if p := f.Place.String(); p != "" {
		b.WriteString(p)
		b.WriteString(": ")
	}
	b.WriteString(f.What)
	if f.Mend != "" {
		b.WriteString("; ")
		b.WriteString(f.Mend)
	}
	return b.String()
}

// Problem is a finding used as an error: input that stops the work.
type Problem struct{ Finding }

// Error is the finding's one line.
func (p *Problem) Error() string { return p.Finding.String() }

// Problems is several findings used as one error: everything that stops the work, reported at once.
type Problems []Finding

// Error joins the findings, one a line.
func (ps Problems) Error() string {
	lines := make([]string, len(ps))
	for i, f := range ps {
		lines[i] = f.String()
	}
	return strings.Join(lines, "\n")
}

// Sort orders findings worst first and keeps the order of their places otherwise.
func Sort(fs []Finding) {
	rank := map[Severity]int{Error: 0, Warning: 1, Note: 2}
	sort.SliceStable(fs, func(i, j int) bool { return rank[fs[i].Severity] < rank[fs[j].Severity] })
}
