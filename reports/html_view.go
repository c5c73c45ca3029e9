package reports

import "html/template"

// page is what the page's template reads: everything written, nothing left to compute.
type page struct {
	Title, Question string
	Kind            string
	Meta            []string
	File            string
	Banners         []string
	Policy          string
	Style           template.CSS // our own style sheet
	Chart, Boot     template.JS  // the chart script and our own script that starts it
	Answer          answer
	Sections        []section
	Foot            []string
	Panel           *panel
	Enclosed        []enclosed
}

// answer is the first page: the number and what stands behind it.
type answer struct {
	Number   string // "626", or "No size"
	Has      bool   // there is a number
	Of       []string
	Why      []string // sentences, the first one the plainest
	Aside    []string // softer sentences: the range over scenarios
	Trail    []trailRow
	Threats  []threat
	Small    []string // findings without a decision, what changed, cautions
	Contents []section
}

type trailRow struct{ Words, Value, Source string }

type threat struct{ Head, Text string }

// section opens with one sentence that says what it means for the plan.
type section struct {
	ID, Number, Title, Lead string
	Blocks                  []block
	Panel                   bool // the interactive panel stands at its end
}

// block is one stretch of a section: a figure, a table, a list or sentences, with the margin beside it.
type block struct {
	Heading    string
	Figures    []figurePair
	Missing    string // why a figure is not there
	Paragraphs []string
	List       []string
	Table      *tableView
	Folded     string // the summary that the block hides under, "" when it is open
	Margin     []note
	Words      []string // text to be taken over into a protocol
	Class      string
}

// figurePair is a figure as drawn for the page and for a telephone, with its numbers.
type figurePair struct {
	Wide, Narrow drawing
	Table        *tableView
}

// tableView is a table as printed. The first Text columns hold words and stand left.
type tableView struct {
	Caption string
	Head    []string
	Rows    []tableRow
	Text    int
	Wide    bool // many columns: it may scroll sideways on a small screen
}

// Short says that a table is small enough to be kept on one sheet of paper.
func (t *tableView) Short() bool { return len(t.Rows) <= 14 }

type tableRow struct {
	Cells  []string
	Strong bool
}

// add appends a row.
func (t *tableView) add(cells ...string) { t.Rows = append(t.Rows, tableRow{Cells: cells}) }

// Left says whether a column holds words.
func (t *tableView) Left(column int) bool { return column < t.Text }

type note struct{ Head, Text string }

// enclosed is a file kept inside the report.
type enclosed struct {
	Name string
	Data string // base64
	Sum  string // SHA-256, hex
}

func rows(cells [][]string) []tableRow {
	out := make([]tableRow, len(cells))
	for i, c := range cells {
		out[i].Cells = c
	}
	return out
}

// figures draws a figure in both widths; a figure with nothing to draw gives the reason instead.
func pair(wide, narrow Figure) (figurePair, string) {
	if wide.empty != "" {
		return figurePair{}, wide.Title + ": not drawn, because " + wide.empty + "."
	}
	v := figurePair{Wide: wide.drawing(false), Narrow: narrow.drawing(false)}
	if len(wide.Table.Rows) > 0 {
		v.Table = &tableView{Caption: wide.Title, Head: wide.Table.Head, Rows: rows(wide.Table.Rows), Text: wide.Table.Text, Wide: len(wide.Table.Head) > 4}
	}
	return v, ""
}

func proseList(ss []string) []string {
	out := make([]string, len(ss))
	for i, s := range ss {
		out[i] = proseText(s)
	}
	return out
}
