package importers

import (
	"fmt"
	"slices"
	"sort"
	"strings"

	"github.com/xuri/excelize/v2"

	"footing/internal/finding"
	"footing/meta/effect"
)

// column is one column on its way from heading to meaning.
type column struct {
	Heading
	u      understood
	known  bool // the heading was understood, though the column may have lost its meaning to another
	byPlan bool
	lower  string // the lower of two heading rows, where Typed joins both
}

// columnSet is the heading row as understood.
type columnSet struct {
	row  int // index into grid.rows of the last heading row
	rows int // heading rows, 1 or 2
	list []column
}

// mapping is Options.Columns, checked: heading (folded) to meaning.
type mapping map[string]Meaning

// foldHeading makes headings comparable: case, spaces and look-alike characters don't count.
func foldHeading(s string) string {
	return strings.ToLower(strings.Join(strings.Fields(plainText(s)), " "))
}

// checkColumns refuses meanings that don't exist and headings named twice.
func checkColumns(g *grid, opt Options) (mapping, error) {
	known := map[string]bool{}
	var names []string
	for _, m := range Meanings() {
		known[string(m)] = true
		names = append(names, string(m))
	}
	var ps finding.Problems
	out := mapping{}
	keys := make([]string, 0, len(opt.Columns))
	for k := range opt.Columns {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	for _, k := range keys {
		m := strings.ToLower(strings.TrimSpace(k))
		if !known[m] {
			if u, ok := understand(k, nil); ok && u.rest == "" {
				m = string(u.meaning)
			} else {
				mend := "footing knows these meanings: " + strings.Join(names, ", ")
				if near := nearest(m, names); near != "" {
					mend = fmt.Sprintf("did you mean %q?", near)
				}
				ps = append(ps, problem("meaning-unknown", g.place(""), fmt.Sprintf("columns: has %q, which is no meaning of a column", shorten(k)), mend).Finding)
				continue
			}
		}
		h := foldHeading(opt.Columns[k])
		if other, taken := out[h]; taken {
			ps = append(ps, problem("heading-mapped-twice", g.place(""), fmt.Sprintf("columns: gives the heading %q two meanings, %q and %q", shorten(opt.Columns[k]), other, m), "give each heading one meaning").Finding)
			continue
		}
		out[h] = Meaning(m)
	}
	if len(ps) > 0 {
		return nil, ps
	}
	return out, nil
}

// findHeadings takes the row with the most headings that are understood, among the first 60 rows with cells; or that row
// together with the one above it, where the headings stand in two rows.
func findHeadings(g *grid, mp mapping, opt Options) (columnSet, bool) {
	best, bestScore := columnSet{}, 1
	for i := 0; i < len(g.rows) && i < 60; i++ {
		numbers := 0
		for _, c := range g.rows[i].cells {
			if c.kind != textCell {
				numbers++
			}
		}
		if numbers > len(g.rows[i].cells)/2 {
			continue
		}
		set := readHeadings(g, i, oneRow(g, i), mp, opt)
		score := set.score()
		if above := twoRows(g, i); above != nil {
			if two := readHeadings(g, i, above, mp, opt); two.score() > score {
				set, score = two, two.score()
				set.rows = 2
			}
		}
		if score > bestScore {
			best, bestScore = set, score
		}
	}
	return best, bestScore > 1
}

// score counts the different figures and words that the headings name.
func (s *columnSet) score() int {
	seen := map[Meaning]bool{}
	for _, c := range s.list {
		if c.Meaning != "" {
			for _, p := range c.Meaning.parts() {
				seen[p] = true
			}
		}
	}
	return len(seen)
}

// typedHeading is one heading before it is understood.
type typedHeading struct {
	column, row int
	text        string
	lower       string // the lower row's own text, where text joins two rows
}

func oneRow(g *grid, i int) []typedHeading {
	out := make([]typedHeading, 0, len(g.rows[i].cells))
	for _, c := range g.rows[i].cells {
		out = append(out, typedHeading{int(c.column), g.rows[i].n, strings.TrimSpace(c.text), ""})
	}
	return out
}

// twoRows joins row i with the row right above it: a heading there reaches as far as its cell is merged, or else to the
// next heading on its right. nil when there is no such row.
func twoRows(g *grid, i int) []typedHeading {
	if i == 0 || g.rows[i-1].n != g.rows[i].n-1 {
		return nil
	}
	top, bottom := g.rows[i-1], g.rows[i]
	used := map[int]bool{}
	var out []typedHeading
	for _, c := range bottom.cells {
		h := typedHeading{int(c.column), bottom.n, strings.TrimSpace(c.text), ""}
		if over, ok := reaching(g, top, int(c.column)); ok {
			used[int(over.column)] = true
			h.lower = h.text
			h.text = strings.TrimSpace(over.text) + " " + h.text
		}
		out = append(out, h)
	}
	for _, c := range top.cells {
		if !used[int(c.column)] {
			out = append(out, typedHeading{int(c.column), top.n, strings.TrimSpace(c.text), ""})
		}
	}
	slices.SortFunc(out, func(a, b typedHeading) int { return a.column - b.column })
	return out
}

// reaching finds the upper heading that stands over a column.
func reaching(g *grid, top row, column int) (cell, bool) {
	var last cell
	for _, c := range top.cells {
		if int(c.column) > column {
			break
		}
		last = c
	}
	if last.column == 0 {
		return cell{}, false
	}
	for _, m := range g.merges {
		c1, r1, c2, _, ok := rangeOf(m)
		if ok && c1 == int(last.column) && r1 == top.n {
			return last, column <= c2
		}
	}
	if len(g.merges) > 0 && int(last.column) != column {
		for _, m := range g.merges { // where cells are merged in this row, an unmerged one reaches no further
			if _, r1, _, _, ok := rangeOf(m); ok && r1 == top.n {
				return cell{}, false
			}
		}
	}
	return last, true
}

// rangeOf reads "A1:C2".
func rangeOf(ref string) (c1, r1, c2, r2 int, ok bool) {
	a, b, found := strings.Cut(ref, ":")
	if !found {
		return 0, 0, 0, 0, false
	}
	c1, r1, err := excelize.CellNameToCoordinates(a)
	if err != nil {
		return 0, 0, 0, 0, false
	}
	c2, r2, err = excelize.CellNameToCoordinates(b)
	return c1, r1, c2, r2, err == nil
}

// readHeadings reads the headings over the records that start below row i.
func readHeadings(g *grid, i int, typed []typedHeading, mp mapping, opt Options) columnSet {
	set := columnSet{row: i, rows: 1}
	for _, h := range typed {
		col := column{Heading: Heading{Column: h.column, Cell: address(h.column, h.row), Typed: h.text}, lower: h.lower}
		m, ok := mp[foldHeading(h.text)]
		if !ok && h.lower != "" {
			m, ok = mp[foldHeading(h.lower)]
		}
		switch {
		case ok:
			col.Meaning, col.byPlan, col.known = m, true, true
			col.Why = "by the plan's columns:"
			if u, ok := understand(h.text, opt.Groups); ok {
				col.u = u
			}
			col.u.meaning, col.u.rest, col.u.rank = m, "", -1
		default:
			col.read(h.text, opt)
		}
		set.list = append(set.list, col)
	}
	set.inferArm()
	for k := range set.list { // an upper heading that says nothing, such as a title, leaves the lower one to itself
		if c := &set.list[k]; c.Meaning == "" && c.lower != "" {
			c.read(c.lower, opt)
			if c.Meaning != "" {
				c.Typed = c.lower
			}
		}
	}
	set.settleDoubles()
	for k := range set.list {
		c := &set.list[k]
		c.Scale, c.Log, c.Level, c.Percent, c.Sides = c.u.scale, c.u.log, c.u.level, c.u.percent, c.u.sides
	}
	return set
}

// read understands a heading as far as it goes.
func (c *column) read(text string, opt Options) {
	if len(text) > 200 {
		return
	}
	u, ok := understand(text, opt.Groups)
	if !ok {
		return
	}
	c.u, c.known = u, true
	if u.rest == "" {
		c.Meaning, c.Why = u.meaning, "by its heading"
	}
}

// inferArm settles headings such as "M (break)" beside "M (control)": where one arm is named and all other headings
// about a group carry the same further words, those words are the name of the other arm.
func (s *columnSet) inferArm() {
	rests, arms := map[string][]int{}, map[string]bool{}
	for i, c := range s.list {
		if c.byPlan || !c.known {
			continue
		}
		switch arm, _, ok := strings.Cut(string(c.u.meaning), " "); {
		case c.u.rest != "" && c.u.meaning.ofArm():
			rests[c.u.rest] = append(rests[c.u.rest], i)
		case c.u.rest == "" && ok && (arm == "treatment" || arm == "control"):
			arms[arm] = true
		}
	}
	if len(arms) != 1 {
		return
	}
	other := "treatment"
	if arms["treatment"] {
		other = "control"
	}
	for rest, at := range rests {
		// The words must stand behind the same figures as the named arm's.
		twins := 0
		for _, i := range at {
			twin := s.list[i].u.meaning.withArm(map[string]string{"treatment": "control", "control": "treatment"}[other])
			for _, c := range s.list {
				if c.u.rest == "" && c.Meaning == twin {
					twins++
				}
			}
		}
		if twins < len(at) || twins < 2 && !strings.Contains(string(s.list[at[0]].u.meaning), " + ") || len(rests) > 1 && !mostTwins(rests, rest) {
			continue
		}
		for _, i := range at {
			c := &s.list[i]
			c.Meaning = c.u.meaning.withArm(other)
			c.u.meaning = c.Meaning
			c.Why = fmt.Sprintf("by its heading; %q taken as the name of the %s group", rest, other)
		}
		return
	}
}

// mostTwins reports whether rest stands behind more figures than any other words.
func mostTwins(rests map[string][]int, rest string) bool {
	for r, at := range rests {
		if r != rest && len(at) >= len(rests[rest]) {
			return false
		}
	}
	return true
}

// settleDoubles leaves each meaning to one column: the caller's choice, then the plainest heading, then the first.
func (s *columnSet) settleDoubles() {
	for i := range s.list {
		for j := range s.list {
			a, b := &s.list[i], &s.list[j]
			if i == j || a.Meaning == "" || a.Meaning != b.Meaning || a.Meaning == Notes {
				continue
			}
			if b.u.rank > a.u.rank || b.u.rank == a.u.rank && j > i {
				b.Meaning = ""
				b.Why = fmt.Sprintf("a second column for %q; column %s is used", a.Meaning, columnName(a.Column))
			}
		}
	}
}

// meanings gives the columns by meaning.
func (s *columnSet) find(m Meaning) *column {
	for i := range s.list {
		if s.list[i].Meaning == m || slices.Contains(s.list[i].Meaning.parts(), m) {
			return &s.list[i]
		}
	}
	return nil
}

func (s *columnSet) has(ms ...Meaning) bool {
	return slices.ContainsFunc(ms, func(m Meaning) bool { return s.find(m) != nil })
}

// sayHeadings reports what was not understood, or only by a guess.
func (s *columnSet) sayHeadings(g *grid) {
	var weak []string
	for _, c := range s.list {
		switch {
		case c.Meaning != "" && c.u.weakArm && !c.byPlan:
			weak = append(weak, fmt.Sprintf("%q", shorten(c.Typed)))
		case c.Meaning == "" && c.known && c.u.rest == "" && c.u.rank == 0:
			g.note(finding.Warning, "two-columns-one-meaning", c.Cell, fmt.Sprintf("the heading %q means the same as another column; this one is kept as a note", shorten(c.Typed)),
				"say in columns: which one is meant, or rename one")
		case c.Meaning == "" && !aside[foldHeading(c.Typed)] && c.Typed != "" && !c.known:
			s.sayNotUnderstood(g, c)
		case c.Meaning == "" && c.known && c.u.rest != "":
			s.sayHalf(g, c)
		}
	}
	if len(weak) > 0 {
		g.note(finding.Note, "arms-by-number", s.list[0].Cell, fmt.Sprintf("the headings %s name the groups by a number or a letter: the first is read as treatment, the second as control", strings.Join(weak, ", ")),
			"name the columns in columns: if it is the other way round")
	}
}

func (s *columnSet) sayNotUnderstood(g *grid, c column) {
	if near := nearestPhrase(c.Typed); near != "" {
		g.note(finding.Warning, "heading-near-miss", c.Cell, fmt.Sprintf("the heading %q is not understood, so the column is kept as a note", shorten(c.Typed)), fmt.Sprintf("did you mean %q?", near))
		return
	}
	g.note(finding.Note, "heading-not-understood", c.Cell, fmt.Sprintf("the heading %q is not understood, so the column is kept as a note", shorten(c.Typed)),
		"name its meaning in columns: if it holds a figure")
}

// sayHalf reports a heading with a known figure and words that say no more.
func (s *columnSet) sayHalf(g *grid, c column) {
	sev, mend := finding.Note, "name its meaning in columns: if the effect should use it"
	if _, armable := armFigures[c.u.meaning]; armable {
		sev = finding.Warning
		mend = fmt.Sprintf("name its meaning in columns: (for example %q), or name the groups", "treatment "+string(c.u.meaning))
	}
	if near := nearestPhrase(c.Typed); near != "" {
		sev, mend = finding.Warning, fmt.Sprintf("did you mean %q?", near)
	}
	g.note(sev, "heading-half-understood", c.Cell, fmt.Sprintf("in the heading %q the words %q are not understood, so the column is kept as a note", shorten(c.Typed), shorten(c.u.rest)), mend)
}

// nearestPhrase looks for a slip of the pen: each word of the heading that is in no phrase is put right by its nearest
// known word, and the result must then be understood.
func nearestPhrase(typed string) string {
	words := headingWords(typed)
	if len(words) == 0 || len(words) > 8 {
		return ""
	}
	changed := false
	for i, w := range words {
		if vocabulary[w] || len(w) < 4 {
			continue
		}
		near := nearest(w, vocabularyList)
		if near == "" || edits([]rune(w), []rune(near)) > len(w)/4 {
			return ""
		}
		words[i], changed = near, true
	}
	if !changed {
		return ""
	}
	fixed := strings.Join(words, " ")
	if u, ok := understand(fixed, nil); !ok || u.rest != "" {
		return ""
	}
	return fixed
}

var vocabulary, vocabularyList = buildVocabulary()

func buildVocabulary() (map[string]bool, []string) {
	set := map[string]bool{}
	for p := range phrases {
		for _, w := range strings.Fields(p) {
			set[w] = true
		}
	}
	for w := range filler {
		set[w] = true
	}
	var list []string
	for w := range set {
		if len(w) >= 4 {
			list = append(list, w)
		}
	}
	sort.Strings(list)
	return set, list
}

// estimateScale is the scale that the heading of the estimates names.
func (s *columnSet) estimateScale() (effect.Scale, bool) {
	for _, m := range []Meaning{Estimate, CILower, CIUpper, StandardError} {
		if c := s.find(m); c != nil && c.u.scale != "" {
			return c.u.scale, c.u.log
		}
	}
	return "", false
}
