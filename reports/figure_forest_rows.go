package reports

import (
	"fmt"
	"math"

	"footing/plan/result"
)

// legend says what the shapes mean, where they mean something, and gives the height used.
func (f *forest) legend(s *scene) float64 {
	kinds := map[string]bool{}
	paler := false
	for _, r := range f.rows {
		kinds[r.RiskOfBias] = true
		paler = paler || (r.Relevance != nil && *r.Relevance < 1)
	}
	x, y := 6.0, 12.0
	item := func(kind string, shade float64, text string) {
		w := textWidth(text, 11, false)
		if x+12+w > s.W {
			x, y = 6, y+18
		}
		s.add(biasMark(kind, x, y, 5, shade), label(x+10, y+4, text, inkSoft, 11))
		x += 10 + w + 16
	}
	if kinds["low"] || kinds["some concerns"] || kinds["high"] {
		text := "risk of bias:"
		s.add(label(0, y+4, text, inkSoft, 11))
		x = textWidth(text, 11, false) + 14
		for _, k := range []string{"low", "some concerns", "high", ""} {
			if kinds[k] {
				name := k
				if k == "" {
					name = "not said"
				}
				item(k, 1, name)
			}
		}
	}
	if paler {
		item("low", 0.4, "paler: less relevant to the plan")
	}
	if x == 6 && y == 12 {
		return 0
	}
	return y + 10
}

// biasMark is the mark of a study: a filled disc for low risk of bias, a ring for some concerns, a dashed square for
// high, a triangle where it is not said. shade, 0 to 1, pales the fill.
func biasMark(kind string, x, y, r, shade float64) element {
	solid := 0.0
	if shade < 1 {
		solid = math.Max(0.35, shade)
	}
	switch kind {
	case "some concerns":
		e := circle(x, y, r-0.8, inkPaper).outline(inkEvidence, 2)
		e.Opacity = solid
		return e
	case "high":
		h := math.Max(3, r*0.886) // a square of the disc's area
		e := rect(x-h, y-h, 2*h, 2*h, inkPaper).outline(inkEvidence, 1.6).dash("2.4 1.8")
		e.Opacity = solid
		return e
	case "low":
		return circle(x, y, r, inkEvidence).faded(solid)
	}
	h := r * 1.35 // a triangle of about the disc's area
	return area([]point{{x, y - h}, {x + h*0.95, y + h*0.72}, {x - h*0.95, y + h*0.72}}, inkEvidence).faded(solid)
}

func (f *forest) pooledRow(s *scene, top, y float64) {
	c := f.columns
	if c.hasInterval {
		s.add(label(c.effect, top+10, "effect", inkSoft, 11).end(), label(c.interval, top+10, percentText(f.pool.Level)+" interval", inkSoft, 11).end(),
			label(c.weight, top+10, "weight", inkSoft, 11).end())
		if c.hasPeople {
			s.add(label(c.people, y+20, "people", inkSoft, 11).end())
		}
		s.add(label(c.row, y+20, "sheet", inkSoft, 11))
	}
	if f.pool.Random.Estimate == nil || f.pool.Random.Interval == nil {
		s.add(label(0, y+4, "not pooled", inkText, 12).bold())
		return
	}
	e, i := *f.pool.Random.Estimate, f.pool.Random.Interval
	head := "All studies, pooled"
	if f.o.narrow {
		head = "pooled"
	}
	if !f.dense {
		s.add(label(0, y+4, head, inkText, 12).bold())
	}
	s.add(line(f.x.cut(i.Lower), y, f.x.cut(i.Upper), y, inkEvidence, 3), circle(f.x.at(e), y, 5, inkEvidence))
	if c.effect > 0 {
		s.add(label(c.effect, y+4, f.scale.text(e), inkText, 12).bold().end())
	}
	if c.hasInterval {
		s.add(label(c.interval, y+4, f.scale.interval(i.Lower, i.Upper), inkText, 12).bold().end())
	}
	if n := f.pool.Prediction.Interval; n != nil {
		f.bracket(s, n.Lower, n.Upper, y+13)
	}
}

// bracket is the thin interval of the next true effect under the pooled row.
func (f *forest) bracket(s *scene, lo, hi, y float64) {
	a, b := f.x.cut(lo), f.x.cut(hi)
	s.add(line(a, y, b, y, inkEvidence, 1))
	if f.x.holds(lo) {
		s.add(line(a, y-4, a, y, inkEvidence, 1))
	}
	if f.x.holds(hi) {
		s.add(line(b, y-4, b, y, inkEvidence, 1))
	}
	text := "where a next true effect may lie"
	if f.o.narrow {
		text = "next true effect"
	}
	w := textWidth(text, 10.5, false)
	x := math.Min(math.Max((a+b)/2-w/2, f.x.A), f.x.B-w)
	s.add(rect(x-3, y+3, w+6, 13, inkPaper), label(x, y+13, text, inkEvidence, 10.5))
}

// headings are the rows before which a subgroup's own row stands.
func (f *forest) headings(rows []result.Study) map[int]bool {
	out := map[int]bool{}
	for i, r := range rows {
		if f.groups != nil && (i == 0 || rows[i-1].Subgroup != r.Subgroup) {
			out[i] = true
		}
	}
	return out
}

// headH is the height of a subgroup's own row.
func (f *forest) headH() float64 { return f.rowH + 6 }

// groupRow is a subgroup's own row: its name, its mean and the interval as a thicker line.
func (f *forest) groupRow(s *scene, name string, y float64) {
	c := f.columns
	text := name
	if text == "" {
		text = "group not said"
	}
	s.add(line(0, y-f.rowH/2-1, c.label, y-f.rowH/2-1, inkLine, 1))
	i, ok := f.groups[name]
	if !ok {
		s.add(clipped(0, y+4, text, c.label, inkSoft, 12, true))
		return
	}
	g := f.pool.Subgroups[i]
	s.add(clipped(0, y+4, text, c.plotA-10, inkSoft, 12, true))
	if g.Random.Estimate == nil || g.Random.Interval == nil {
		return
	}
	s.add(line(f.x.cut(g.Random.Interval.Lower), y, f.x.cut(g.Random.Interval.Upper), y, inkEvidence, 2.6).faded(0.75), circle(f.x.cut(*g.Random.Estimate), y, 3.6, inkPaper).outline(inkEvidence, 2))
	if c.effect > 0 {
		s.add(label(c.effect, y+4, f.scale.text(*g.Random.Estimate), inkSoft, 12).bold().end())
	}
	if c.hasInterval {
		s.add(label(c.interval, y+4, f.scale.interval(g.Random.Interval.Lower, g.Random.Interval.Upper), inkSoft, 11).bold().end())
	}
}

func (f *forest) row(s *scene, r result.Study, y float64) {
	c := f.columns
	s.add(clipped(0, y+4, r.Study, c.label, inkText, 12, false))
	if c.hasYear && r.Year != nil {
		s.add(label(c.year, y+4, fmt.Sprint(*r.Year), inkSoft, 11))
	}
	if c.hasPeople {
		s.add(label(c.people, y+4, peopleText(r, " + "), inkSoft, 11).end())
	}
	if c.row > 0 {
		s.add(label(c.row, y+4, fmt.Sprintf("row %d", r.Row), inkSoft, 10.5))
	}
	f.whisker(s, r, y, 1.4)
	shade := 1.0
	if r.Relevance != nil {
		shade = *r.Relevance
	}
	s.add(biasMark(r.RiskOfBias, f.x.at(*r.Estimate), y, f.radius(r), shade))
	s.add(label(c.effect, y+4, f.scale.text(*r.Estimate), inkText, 12).end())
	if c.hasInterval {
		s.add(label(c.interval, y+4, f.scale.interval(r.Interval.Lower, r.Interval.Upper), inkSoft, 11).end())
		if r.Weight != nil {
			s.add(label(c.weight, y+4, percentText(*r.Weight), inkSoft, 11).end())
		}
	}
}

// radius makes the area of a mark its weight.
func (f *forest) radius(r result.Study) float64 {
	most := math.Min(9, f.rowH*0.42)
	if r.Weight == nil || f.heavy <= 0 {
		return most * 0.6
	}
	return math.Max(2.6, most*math.Sqrt(*r.Weight/f.heavy))
}

// whisker is the interval of a study; an end outside the plot is cut and gets an arrow head.
func (f *forest) whisker(s *scene, r result.Study, y, width float64) {
	a, b := f.x.cut(r.Interval.Lower), f.x.cut(r.Interval.Upper)
	s.add(line(a, y, b, y, inkEvidence, width))
	if !f.x.holds(r.Interval.Lower) {
		s.add(path([]point{{a + 5, y - 3}, {a, y}, {a + 5, y + 3}}, inkEvidence, width))
	}
	if !f.x.holds(r.Interval.Upper) {
		s.add(path([]point{{b - 5, y - 3}, {b, y}, {b - 5, y + 3}}, inkEvidence, width))
	}
}

func (f *forest) denseRow(s *scene, r result.Study, y float64, newYear bool) {
	a, b := f.x.cut(r.Interval.Lower), f.x.cut(r.Interval.Upper)
	thin := math.Min(0.8, f.rowH*0.4)
	s.add(line(a, y, b, y, inkEvidence, thin).faded(0.45))
	s.add(circle(f.x.at(*r.Estimate), y, math.Max(1, math.Min(3.2, f.radius(r)*0.6)), inkEvidence))
	if newYear && r.Year != nil {
		last := -100.0
		for i := len(s.Items) - 1; i >= 0; i-- {
			if e := s.Items[i]; e.Kind == "text" && e.Anchor == "end" && e.X == f.columns.label {
				last = e.Y
				break
			}
		}
		if y+4-last >= 11 {
			s.add(label(f.columns.label, y+4, fmt.Sprint(*r.Year), inkSoft, 10.5).end())
		}
	}
}

func peopleText(r result.Study, join string) string {
	switch {
	case r.NTreatment != nil && r.NControl != nil:
		return fixed(*r.NTreatment, 0) + join + fixed(*r.NControl, 0)
	case r.NTreatment != nil:
		return fixed(*r.NTreatment, 0)
	}
	return ""
}

func (f *forest) alt() string {
	low, high := f.rows[0], f.rows[0]
	for _, r := range f.rows {
		if *r.Estimate < *low.Estimate {
			low = r
		}
		if *r.Estimate > *high.Estimate {
			high = r
		}
	}
	name := func(r result.Study) string { return f.scale.text(*r.Estimate) + " (" + clipRunes(r.Study, 60) + ")" }
	text := fmt.Sprintf("%s %s with intervals, by year, from %s to %s.", countWord(len(f.rows)), plural(len(f.rows), "study", "studies"), name(low), name(high))
	if e, i := f.pool.Random.Estimate, f.pool.Random.Interval; e != nil && i != nil {
		text += fmt.Sprintf(" Pooled %s, %s interval %s.", f.scale.text(*e), percentText(f.pool.Level), f.scale.interval(i.Lower, i.Upper))
	}
	if i := f.pool.Prediction.Interval; i != nil {
		text += fmt.Sprintf(" A next true effect may lie from %s.", f.scale.interval(i.Lower, i.Upper))
	}
	return text
}

func (f *forest) table(rows []result.Study) Table {
	t := Table{Head: []string{"study", "year", "sheet row", "people", "risk of bias", "effect", "interval", "weight"}, Text: 1}
	for _, r := range rows {
		year, weight, bias := "", "", r.RiskOfBias
		if r.Year != nil {
			year = fmt.Sprint(*r.Year)
		}
		if r.Weight != nil {
			weight = percentText(*r.Weight)
		}
		t.Rows = append(t.Rows, []string{r.Study, year, fmt.Sprint(r.Row), peopleText(r, " + "), bias, f.scale.text(*r.Estimate), f.scale.interval(r.Interval.Lower, r.Interval.Upper), weight})
	}
	return t
}
