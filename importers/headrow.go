package importers

import (
	"slices"
	"strings"

	"github.com/xuri/excelize/v2"
)

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
	if sd := set.find("outcome sd"); sd != nil && !sd.byPlan && set.has("mean") && !set.has("sd") {
		sd.Meaning, sd.u.meaning = "sd", "sd" // "Outcome: mean, SD" is about each group
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
