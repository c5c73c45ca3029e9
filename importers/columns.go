package importers

import (
	"fmt"
	"slices"
	"sort"
	"strings"

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

	letters  []string // name of each column of list
	byColumn []int32  // index into list + 1, by column; filled once the columns are settled
}

// settle makes columns findable by their number.
func (s *columnSet) settle() {
	last := 0
	for _, c := range s.list {
		last = max(last, c.Column)
	}
	s.byColumn, s.letters = make([]int32, last+1), make([]string, len(s.list))
	for i, c := range s.list {
		s.letters[i] = columnName(c.Column)
		s.byColumn[c.Column] = int32(i + 1)
	}
}

// at finds a column by its number; nil when it has no heading.
func (s *columnSet) at(column int) *column {
	if i := s.index(column); i >= 0 {
		return &s.list[i]
	}
	return nil
}

func (s *columnSet) index(column int) int {
	if column >= len(s.byColumn) {
		return -1
	}
	return int(s.byColumn[column]) - 1
}

// mapping is Options.Columns, checked: heading (folded) to meaning.
type mapping map[string]Meaning

// foldHeading makes headings comparable: case, spaces and look-alike characters don't count.
func foldHeading(s string) string {
	folded := true
	for i := 0; i < len(s) && folded; i++ {
		c := s[i]
		folded = c > ' ' && c < 0x7f && (c < 'A' || c > 'Z') || c == ' ' && i > 0 && i+1 < len(s) && s[i-1] != ' '
	}
	if folded {
		return s
	}
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
		if parts := Meaning(m).parts(); len(parts) > 1 && !slices.ContainsFunc(parts, func(p Meaning) bool { return !known[string(p)] }) {
			known[m] = true // "treatment mean + treatment sd": several figures a cell
		}
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

// estimateScale is the scale that the heading of the estimates names.
func (s *columnSet) estimateScale() (effect.Scale, bool) {
	for _, m := range []Meaning{Estimate, CILower, CIUpper, StandardError} {
		if c := s.find(m); c != nil && c.u.scale != "" {
			return c.u.scale, c.u.log
		}
	}
	return "", false
}
