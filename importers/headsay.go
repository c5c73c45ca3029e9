package importers

import (
	"fmt"
	"slices"
	"sort"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
)

// sayHeadings reports what was not understood, or only by a guess.
func (s *columnSet) sayHeadings(g *grid) {
	var weak []string
	for _, c := range s.list {
		switch {
		case c.Meaning != "" && c.u.weakArm && !c.byPlan:
			weak = append(weak, fmt.Sprintf("%q", shorten(c.Typed)))
		case c.Meaning == "" && c.known && c.u.meaning != "" && c.u.rest == "" && c.u.rank == 0:
			g.note(finding.Warning, "two-columns-one-meaning", c.Cell, fmt.Sprintf("the heading %q means the same as another column; this one is kept as a note", shorten(c.Typed)),
				"say in columns: which one is meant, or rename one")
		case c.Meaning == "" && !aside[foldHeading(c.Typed)] && c.Typed != "" && !c.known:
			s.sayNotUnderstood(g, c)
		case c.Meaning == "" && c.known && c.u.rest != "":
			s.sayHalf(g, c)
		}
	}
	if c := s.find(Estimate); c != nil && c.u.scale == effect.StandardizedMeanDifference && isCohen(c.Typed) {
		g.note(finding.Note, "d-as-printed", c.Cell, fmt.Sprintf("the values under %q are used as printed; if they carry no small-sample correction they are too large by the factor 1 + 3/(4 df - 1) or so", shorten(c.Typed)),
			"give means and SDs, or Hedges' g, for small studies")
	}
	if s.rows == 2 {
		g.note(finding.Note, "two-heading-rows", g.rows[s.row].name(), "the headings stand in two rows and were joined", "")
	}
	if len(weak) > 0 {
		g.note(finding.Note, "arms-by-number", s.list[0].Cell, fmt.Sprintf("the headings %s name the groups by a number or a letter: the first is read as treatment, the second as control", strings.Join(weak, ", ")),
			"name the columns in columns: if it is the other way round")
	}
}

// isCohen: the heading speaks of d, not of g.
func isCohen(typed string) bool {
	words := headingWords(typed)
	return slices.Contains(words, "cohens") || slices.Contains(words, "cohen") || slices.Contains(words, "d")
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
