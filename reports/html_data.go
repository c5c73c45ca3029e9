package reports

import (
	"fmt"
	"strings"
)

// mostCells is the number of cells of the sheet that the page shows; a larger sheet is left to the workbook.
const mostCells = 6000

// data writes where everything came from: rows, headings, findings, assumptions, methods.
func (w writer) data() *section {
	s := &section{ID: "data", Title: "Data and methods", Lead: w.dataLead()}
	if w.p.Pool != nil {
		s.Blocks = append(s.Blocks, w.searched(), w.records(), w.cells(), w.headings())
	}
	s.Blocks = append(s.Blocks, w.findings(), w.assumptions(), w.methods(), w.origin())
	if len(w.p.Cautions) > 0 {
		s.Blocks = append(s.Blocks, block{Heading: "Cautions", List: w.p.Cautions})
	}
	return s
}

func (w writer) dataLead() string {
	if w.p.Pool == nil {
		return "There is no evidence sheet: every value below was given in the plan, with its source or marked as assumed."
	}
	n := 0
	for _, s := range w.p.Pool.Studies {
		if s.Flipped || len(s.Notes) > 0 {
			n++
		}
	}
	e := w.p.Pool.Evidence
	text := fmt.Sprintf("%s of %s %s could be used; every effect leads back to the cells of the sheet.", countWord(e.Used), strings.ToLower(countWord(e.Rows)), plural(e.Rows, "row", "rows"))
	if n > 0 {
		text += fmt.Sprintf(" %s %s converted with a note.", countWord(n), plural(n, "was", "were"))
	}
	return text
}

func (w writer) searched() block {
	q := w.p.Pool.Evidence.Searched
	if q == nil {
		return block{Paragraphs: []string{"How the literature was searched: not given. A reader can’t tell which studies could have been here."}}
	}
	text := "Searched"
	if q.Date != "" {
		text += " " + dateText(q.Date)
	}
	for _, c := range []struct {
		n    *int
		word string
	}{{q.Found, "found"}, {q.Screened, "screened"}, {q.Kept, "kept"}} {
		if c.n != nil {
			text += fmt.Sprintf(", %s %s", wholeText(*c.n), c.word)
		}
	}
	text += "."
	if q.Rule != "" {
		text += " Kept was: " + q.Rule + "."
	}
	return block{Paragraphs: []string{text}}
}

// records is the table of rows: what each yields, from which cells and by which route.
func (w writer) records() block {
	t := &tableView{Caption: "Every row of the sheet, and how it became an effect", Head: []string{"row", "study", "effect", "interval", "standard error", "route, cells and arithmetic"}, Text: 2, Wide: true}
	for _, s := range w.p.Pool.Studies {
		effect, interval, se := w.scale.number(s.Estimate), "–", "–"
		if s.Interval != nil {
			interval = w.scale.interval(s.Interval.Lower, s.Interval.Upper)
		}
		if s.StandardError != nil {
			se = fixed(*s.StandardError, 3)
		}
		route := words(s.Route)
		if len(s.From) > 0 {
			route += ", from " + strings.Join(s.From, ", ")
		}
		if s.Formula != "" {
			route += ": " + s.Formula
		}
		if !s.Used {
			route = "left out: " + s.Why
		}
		if s.Flipped {
			route += "; sign turned"
		}
		for _, n := range s.Notes {
			route += "; " + n
		}
		t.Rows = append(t.Rows, tableRow{Cells: []string{fmt.Sprint(s.Row), s.Study, effect, interval, se, route}})
	}
	return block{Table: t, Class: "last-words rows"}
}

// cells is every cell as typed, under its address.
func (w writer) cells() block {
	n := 0
	t := &tableView{Caption: "Every cell as it was typed", Head: []string{"cell", "heading", "understood as", "as typed"}, Text: 4, Wide: true}
	for _, s := range w.p.Pool.Studies {
		n += len(s.Cells)
		for _, c := range s.Cells {
			meaning := c.Meaning
			if meaning == "" {
				meaning = "not used"
			}
			t.Rows = append(t.Rows, tableRow{Cells: []string{c.Address, c.Heading, meaning, c.Text}})
		}
	}
	if n == 0 {
		return block{}
	}
	if n > mostCells {
		return block{Paragraphs: []string{fmt.Sprintf("The sheet has %s cells, too many for a page: the workbook has them all, each under its address.", wholeText(n))}}
	}
	return block{Table: t, Folded: "Every cell of the sheet, as typed"}
}

func (w writer) headings() block {
	t := &tableView{Caption: "How each heading was understood", Head: []string{"cell", "as typed", "understood as", "first values"}, Text: 4}
	for _, h := range w.p.Pool.Evidence.Headings {
		meaning := h.Meaning
		if meaning == "" {
			meaning = "not used"
		}
		if h.Why != "" {
			meaning += ": " + h.Why
		}
		t.Rows = append(t.Rows, tableRow{Cells: []string{h.Cell, h.Typed, meaning, strings.Join(clipAll(h.First, 24), ", ")}})
	}
	if len(t.Rows) == 0 {
		return block{}
	}
	return block{Table: t}
}

// findings is everything that was noticed, with the decisions on it.
func (w writer) findings() block {
	t := &tableView{Caption: "Findings, and the decisions on them", Head: []string{"where", "kind", "what", "what mends it, or the decision"}, Text: 4, Wide: true}
	for _, f := range w.p.Findings {
		place := f.Place
		if w.p.Pool != nil && place.File == w.p.Pool.Evidence.File {
			place.File = ""
		}
		what := f.What
		if f.Study != "" {
			what = f.Study + ": " + what
		}
		answer := f.Mend
		if d := f.Decision; d != nil {
			answer = "overridden"
			if d.Accept {
				answer = "accepted"
			}
			if d.Value != "" {
				answer += ", value " + d.Value
			}
			if d.Why != "" {
				answer += ": " + d.Why
			}
			if d.By != "" || d.On != "" {
				answer += " (" + strings.TrimSpace(d.By+" "+d.On) + ")"
			}
		}
		t.Rows = append(t.Rows, tableRow{Cells: []string{place.String(), string(f.Severity), what, answer}, Strong: f.Decision == nil && f.Severity != "note"})
	}
	if len(t.Rows) == 0 {
		return block{Paragraphs: []string{"Findings: none."}}
	}
	return block{Table: t}
}

func (w writer) assumptions() block {
	t := &tableView{Caption: "Assumptions, and where they come from", Head: []string{"assumption", "value", "source"}, Text: 3}
	seen := map[string]bool{}
	for _, a := range append(append(w.p.Assumptions[:0:0], w.p.Assumptions...), w.p.Size.Study.Assumptions...) {
		if seen[a.Name] {
			continue
		}
		seen[a.Name] = true
		source := a.Source
		if a.Assumed || source == "" {
			source = "assumed"
		}
		if a.Who != "" {
			source += "; " + a.Who
		}
		if a.Why != "" {
			source += ": " + a.Why
		}
		t.Rows = append(t.Rows, tableRow{Cells: []string{a.Name, proseText(shortText(a.Value)), proseText(shortText(source))}})
	}
	if len(t.Rows) == 0 {
		return block{}
	}
	return block{Table: t}
}

func (w writer) methods() block {
	t := &tableView{Caption: "Methods used, with their references", Head: []string{"method", "assumes", "when it misleads", "reference"}, Text: 4, Wide: true}
	for _, m := range w.p.Methods {
		name := m.Words
		if name == "" {
			name = words(m.Name)
		}
		t.Rows = append(t.Rows, tableRow{Cells: []string{name, m.Assumes, m.Misleads, m.Reference}})
	}
	if len(t.Rows) == 0 {
		return block{}
	}
	return block{Table: t}
}

// origin says what to run to have all of it again.
func (w writer) origin() block {
	t := &tableView{Caption: "To compute it again", Head: []string{"item", "value"}, Text: 2}
	add := func(name, value string) {
		if value != "" {
			t.Rows = append(t.Rows, tableRow{Cells: []string{name, value}})
		}
	}
	add("program", strings.TrimSpace(w.p.Tool.Name+" "+w.p.Tool.Version))
	add("plan", w.p.File)
	add("SHA-256 of the plan", w.p.SHA256)
	if w.p.Pool != nil {
		add("evidence", w.p.Pool.Evidence.File)
		add("sheet", w.p.Pool.Evidence.Sheet)
		add("SHA-256 of the evidence", w.p.Pool.Evidence.SHA256)
	}
	add("seed", fmt.Sprint(w.p.Seed))
	return block{Table: t, Class: "pairs"}
}
