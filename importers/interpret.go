package importers

import (
	"fmt"
	"slices"
	"strings"

	"github.com/xuri/excelize/v2"

	"footing/internal/finding"
)

// interpret turns a grid into an evidence sheet: headings, then records, then checks across the rows.
func interpret(g *grid, opt Options) (*Sheet, error) {
	if opt.Decimal == "," || opt.Decimal == "." {
		g.mark = decimalMark(opt.Decimal[0])
	}
	if len(g.rows) == 0 {
		return nil, problem("sheet-empty", g.place(""), "the sheet is empty", "put the prior studies in it, one row each under a row of headings")
	}
	mp, err := checkColumns(g, opt)
	if err != nil {
		return nil, err
	}
	set, ok := findHeadings(g, mp, opt)
	if !ok {
		return nil, noHeadings(g, mp, opt)
	}
	if err := missingMapped(g, &set, mp, opt); err != nil {
		return nil, err
	}
	g.override(opt.Overrides)
	set.addUnnamed(g)
	set.guessStudy(g)
	set.settle()
	s := &Sheet{File: g.file, Name: g.name, Sheets: g.sheets, Layout: "one row per study"}
	earlier := g.findings
	g.findings = nil
	s.readRecords(g, &set, opt)
	if len(s.Records) == 0 {
		return nil, problem("no-records", g.place(g.rows[set.row].name()), "there is no row with figures under the headings", "put one row for each prior study under them")
	}
	ofCells := g.findings
	g.findings = earlier
	set.sayHeadings(g)
	g.findings = append(g.findings, ofCells...)
	for _, c := range set.list {
		s.Headings = append(s.Headings, c.Heading)
	}
	s.fillFirst()
	g.sayHidden(&set, s)
	if g.formulas > 0 {
		g.note(finding.Note, "formulas", "", fmt.Sprintf("%d cells hold formulas; the values stored with them were used", g.formulas), "")
	}
	s.Findings = g.findings
	s.checkRows()
	return s, nil
}

// readRecords reads the rows under the headings and joins those that are one record.
func (s *Sheet) readRecords(g *grid, set *columnSet, opt Options) {
	g.fillMerged(g.rows[set.row].n)
	r := newRecordReader(g, set)
	s.Records = r.readAll()
	if k := r.armColumn(s.Records, opt.Groups); k >= 0 {
		rows := len(s.Records)
		s.Layout = "one row per group"
		set.list[k].Why, set.list[k].known = "names the group of each row", true
		s.Records = r.joinArms(s.Records, k, opt.Groups)
		g.note(finding.Note, "one-row-per-group", set.list[k].Cell, fmt.Sprintf("each row holds one group of a study, named in column %s; %d rows make %d comparisons", columnName(set.list[k].Column), rows, len(s.Records)), "")
	}
	tellApart(s.Records)
}

func (r row) name() string { return fmt.Sprintf("row %d", r.n) }

// noHeadings says what stood in the first rows.
func noHeadings(g *grid, mp mapping, opt Options) error {
	var seen []string
	mend := "put a row of headings above the studies, such as study, estimate, standard error; or name the headings in columns:"
	for i := 0; i < len(g.rows) && i < 5; i++ {
		for _, c := range g.rows[i].cells {
			if c.kind != textCell || len(seen) >= 12 {
				continue
			}
			seen = append(seen, fmt.Sprintf("%q", shorten(c.text)))
			if near := nearestPhrase(c.text); near != "" && !strings.HasPrefix(mend, "did") {
				mend = fmt.Sprintf("did you mean %q by %q?", near, shorten(c.text))
			}
		}
	}
	what := "no row of headings was found"
	if len(seen) > 0 {
		what += "; the first cells are " + strings.Join(seen, ", ")
	}
	if words := headingsInColumn(g); words >= 3 {
		what += "; the first column holds headings, so the studies seem to stand in columns"
		mend = "turn the table round, so that each study has a row (copy, then paste transposed)"
	}
	return problem("no-headings", g.place(""), what, mend)
}

// headingsInColumn counts the cells of the first column that are understood as headings.
func headingsInColumn(g *grid) int {
	n := 0
	for i := 0; i < len(g.rows) && i < 60; i++ {
		if c, ok := g.rows[i].at(1); ok && c.kind == textCell && len(c.text) <= 200 {
			if u, ok := understand(c.text, nil); ok && u.rest == "" {
				n++
			}
		}
	}
	return n
}

// missingMapped reports headings that columns: names but the sheet doesn't have.
func missingMapped(g *grid, set *columnSet, mp mapping, opt Options) error {
	var ps finding.Problems
	var typed []string
	have := map[string]bool{}
	for _, c := range set.list {
		have[foldHeading(c.Typed)] = true
		typed = append(typed, c.Typed)
	}
	for _, m := range Meanings() {
		for h, meaning := range mp {
			if meaning != m || have[h] {
				continue
			}
			mend := "the sheet has: " + quoteAll(typed)
			if near := nearest(h, typed); near != "" {
				mend = fmt.Sprintf("did you mean %q?", shorten(near))
			}
			ps = append(ps, problem("heading-not-found", g.place(g.rows[set.row].name()), fmt.Sprintf("columns: names the heading %q for %s, which the sheet doesn't have", shorten(h), m), mend).Finding)
		}
	}
	if len(ps) > 0 {
		return ps
	}
	return nil
}

func quoteAll(list []string) string {
	var out []string
	for i, s := range list {
		if i == 20 {
			out = append(out, "...")
			break
		}
		out = append(out, fmt.Sprintf("%q", shorten(s)))
	}
	return strings.Join(out, ", ")
}

// addUnnamed adds columns that hold cells below the headings but have none. In a text file such cells mean that a row
// was cut wrongly; the record reader reports them.
func (s *columnSet) addUnnamed(g *grid) {
	seen := map[int]bool{}
	last := 0
	for _, c := range s.list {
		seen[c.Column] = true
		last = max(last, c.Column)
	}
	for _, r := range g.rows[s.row+1:] {
		for _, c := range r.cells {
			k := int(c.column)
			if seen[k] || g.strict && k > last {
				continue
			}
			seen[k] = true
			s.list = append(s.list, column{Heading: Heading{Column: k, Cell: address(k, g.rows[s.row].n), Why: "no heading"}})
		}
	}
	sortColumns(s.list)
}

func sortColumns(list []column) {
	for i := 1; i < len(list); i++ {
		for j := i; j > 0 && list[j].Column < list[j-1].Column; j-- {
			list[j], list[j-1] = list[j-1], list[j]
		}
	}
}

// guessStudy takes the first column of words as the studies' labels where no heading says which one it is.
func (s *columnSet) guessStudy(g *grid) {
	if s.has(Study) {
		return
	}
	for i := range s.list {
		c := &s.list[i]
		if c.Meaning != "" || aside[foldHeading(c.Typed)] || c.known {
			continue
		}
		texts, others := 0, 0
		distinct := map[string]bool{}
		for _, r := range g.rows[s.row+1:] {
			if x, ok := r.at(c.Column); ok {
				if x.kind == textCell {
					if _, fault := parseNumber(x.text, '.'); fault == numberNot {
						texts++
						distinct[x.text] = true
						continue
					}
				}
				others++
			}
		}
		if texts > others && len(distinct)*2 > texts {
			c.Meaning, c.known, c.Why = Study, true, "the first column of words: no heading says which one names the studies"
			c.u.meaning = Study
			g.note(finding.Note, "study-column-guessed", c.Cell, fmt.Sprintf("no heading names the studies; column %s was taken for it", columnName(c.Column)), `give the column the heading "study"`)
			return
		}
	}
}

// fillFirst keeps the first values of each column, as typed.
func (s *Sheet) fillFirst() {
	for i := range s.Headings {
		h := &s.Headings[i]
		for k := range s.Records {
			r := &s.Records[k]
			if len(h.First) == 3 {
				break
			}
			if text := r.textAt(h.Column); text != "" {
				h.First = append(h.First, shorten(text))
			}
		}
	}
}

// sayHidden reports rows and columns that are hidden in the spreadsheet and were read all the same.
func (g *grid) sayHidden(set *columnSet, s *Sheet) {
	var rows []string
	for _, r := range s.Records {
		if r.Hidden {
			rows = append(rows, fmt.Sprint(r.Row))
		}
	}
	if len(rows) > 0 {
		more := ""
		if len(rows) > 20 {
			rows, more = rows[:20], ", ..."
		}
		g.note(finding.Warning, "hidden-rows", "", fmt.Sprintf("hidden rows were read: %s%s", strings.Join(rows, ", "), more), "show or delete them in the spreadsheet, or leave them out by a status column")
	}
	for _, k := range g.hiddenColumns {
		for _, c := range set.list {
			if c.Column == k && c.Meaning != "" {
				g.note(finding.Note, "hidden-column", c.Cell, fmt.Sprintf("the hidden column %s (%s) was read", columnName(k), c.Meaning), "")
			}
		}
	}
}

// override puts other texts into cells.
func (g *grid) override(by map[string]string) {
	for i := range g.rows {
		r := &g.rows[i]
		for at, text := range by {
			column, n, err := excelize.CellNameToCoordinates(at)
			if err != nil || n != r.n {
				continue
			}
			k, found := slices.BinarySearchFunc(r.cells, column, func(c cell, want int) int { return int(c.column) - want })
			c := cell{text: text, column: int32(column)}
			switch {
			case found && strings.TrimSpace(text) == "":
				r.cells = slices.Delete(r.cells, k, k+1)
			case found:
				r.cells[k] = c
			case strings.TrimSpace(text) != "":
				r.cells = slices.Insert(r.cells, k, c)
			}
		}
	}
	g.rows = slices.DeleteFunc(g.rows, func(r row) bool { return len(r.cells) == 0 })
}
