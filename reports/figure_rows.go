package reports

import "math"

// rowPlot is a list of rows with an estimate and its interval on one axis, and numbers in columns at the right: the
// frame of the figures on adjusted estimates and on leaving studies out.
type rowPlot struct {
	o       figureOptions
	scale   effectScale
	rows    []plotRow
	band    [2]float64 // an interval drawn through all rows; equal ends: none
	middle  *float64   // a line through all rows
	marked  *float64   // smallest worthwhile effect
	columns []string   // headings of plotRow.Cells
	note    string     // under the axis at its left
}

type plotRow struct {
	name         string
	bold, weak   bool
	estimate     *float64
	lower, upper *float64
	cells        []string
	why          string // in place of a mark
	ink          ink
}

func (r rowPlot) draw() scene {
	s := scene{W: r.o.width()}
	name, rowH := r.measure()
	columns := r.columnSet().within(s.W - name - 120)
	x := r.domain(math.Max(name+14, 24), s.W-columns.room-12)
	top := 22.0
	bottom := top + rowH*float64(len(r.rows)) + 4
	r.backdrop(&s, x, top, bottom)
	columns.draw(&s, s.W-columns.room, 12, func(row int) float64 { return r.baseline(top, rowH, row) })
	for j, row := range r.rows {
		r.drawRow(&s, x, row, top+rowH*(float64(j)+0.5), name)
	}
	s.H = r.axisLine(&s, x, bottom)
	return s
}

// measure gives the room of the names and the height of a row; on a telephone the name stands above its line, and
// elsewhere a long one takes two lines.
func (r rowPlot) measure() (name, rowH float64) {
	if r.o.narrow {
		return 0, 36
	}
	const mostName = 290
	name, rowH = 60, 22
	for _, row := range r.rows {
		name = math.Max(name, textWidth(row.name, 12, row.bold))
	}
	if len(r.rows) > 30 {
		rowH = 17
	}
	if name > mostName {
		rowH = 35
	}
	return math.Min(name, mostName), rowH
}

// columnSet is the numbers at the right; on a telephone the first column alone.
func (r rowPlot) columnSet() columnSet {
	heads := r.columns
	if r.o.narrow && len(heads) > 1 {
		heads = heads[:1]
	}
	cells := make([][]string, len(r.rows))
	for i, row := range r.rows {
		cells[i] = row.cells
	}
	return measureColumns(heads, cells, func(row, _ int) bool { return r.rows[row].bold })
}

// backdrop draws what runs through all rows: the band, the mean, no effect, the smallest worthwhile effect.
func (r rowPlot) backdrop(s *scene, x axis, top, bottom float64) {
	if r.band[0] != r.band[1] {
		a, b := x.cut(r.band[0]), x.cut(r.band[1])
		s.add(rect(a, top-2, b-a, bottom-top+2, inkEvidenceWash))
	}
	if r.middle != nil {
		s.add(line(x.at(*r.middle), top-2, x.at(*r.middle), bottom, inkEvidence, 1))
	}
	none := x.at(r.scale.NoEffect)
	s.add(line(none, top-2, none, bottom, inkSoft, 1))
	if r.marked != nil && x.holds(*r.marked) {
		m := x.at(*r.marked)
		s.add(line(m, top-4, m, bottom, inkPlan, 2).dash("3 4"))
		text := "smallest worthwhile " + r.scale.text(*r.marked)
		e := label(m+5, 12, text, inkPlan, 11)
		if m+5+textWidth(text, 11, false) > x.B+20 {
			e = label(math.Max(m-5, textWidth(text, 11, false)), 12, text, inkPlan, 11).end()
		}
		s.add(e)
	}
}

func (r rowPlot) drawRow(s *scene, x axis, row plotRow, y, nameRoom float64) {
	if r.o.narrow {
		s.add(above(y-5, row.name, x.B, row.bold))
		y += 8
	} else {
		s.add(twoLines(y, row.name, nameRoom, row.bold)...)
	}
	if row.estimate == nil {
		text, _ := clipText(row.why, x.B-x.A, 11, false)
		s.add(rect(x.A, y-8, textWidth(text, 11, false)+6, 16, inkPaper), label(x.A+2, y+4, text, inkSoft, 11))
		return
	}
	i := row.ink
	if i == inkNone {
		i = inkEvidence
	}
	width, radius := 1.6, 4.5
	if row.bold {
		width, radius = 3, 5
	}
	if row.lower != nil && row.upper != nil {
		a, b := x.cut(*row.lower), x.cut(*row.upper)
		l := line(a, y, b, y, i, width)
		if row.weak {
			l = l.dash("3 3")
		}
		s.add(l)
		if !x.holds(*row.lower) {
			s.add(path([]point{{a + 5, y - 3}, {a, y}, {a + 5, y + 3}}, i, width))
		}
		if !x.holds(*row.upper) {
			s.add(path([]point{{b - 5, y - 3}, {b, y}, {b - 5, y + 3}}, i, width))
		}
	}
	if row.weak {
		s.add(circle(x.cut(*row.estimate), y, radius-0.8, inkPaper).outline(i, 1.8))
		return
	}
	s.add(circle(x.cut(*row.estimate), y, radius, i))
}

// baseline is where the texts of a row stand.
func (r rowPlot) baseline(top, rowH float64, row int) float64 {
	y := top + rowH*(float64(row)+0.5) + 4
	if r.o.narrow {
		y += 8
	}
	return y
}

// domain covers all estimates, no effect, the band, and intervals up to 0.6 of the spread beyond.
func (r rowPlot) domain(a, b float64) axis {
	lo, hi := r.scale.NoEffect, r.scale.NoEffect
	cover := func(v float64) { lo, hi = math.Min(lo, v), math.Max(hi, v) }
	for _, row := range r.rows {
		if row.estimate != nil {
			cover(*row.estimate)
		}
	}
	if r.band[0] != r.band[1] {
		cover(r.band[0])
		cover(r.band[1])
	}
	if r.marked != nil {
		cover(*r.marked)
	}
	spreadOf := hi - lo
	if spreadOf == 0 {
		spreadOf = 1
	}
	floor, roof := lo-0.6*spreadOf, hi+0.6*spreadOf
	for _, row := range r.rows {
		if row.lower != nil && row.upper != nil {
			cover(math.Max(floor, *row.lower))
			cover(math.Min(roof, *row.upper))
		}
	}
	pad := 0.03 * (hi - lo)
	return axis{Lo: lo - pad, Hi: hi + pad, A: a, B: b}
}

func (r rowPlot) axisLine(s *scene, x axis, bottom float64) float64 {
	s.add(line(x.A, bottom, x.B, bottom, inkFaint, 1))
	for _, t := range x.thin(r.scale.ticks(x.Lo, x.Hi, map[bool]int{false: 6, true: 4}[r.o.narrow]), 11) {
		s.add(line(x.at(t.Value), bottom, x.at(t.Value), bottom+4, inkFaint, 1), label(x.at(t.Value), bottom+17, t.Text, inkSoft, 11).middle())
	}
	words, right := r.scale.direction()
	short, _ := clipText(words, x.B-x.A, 11, false)
	if right {
		s.add(label(x.B, bottom+33, short, inkSoft, 11).end())
	} else {
		s.add(label(x.A, bottom+33, short, inkSoft, 11))
	}
	if r.note != "" {
		note, _ := clipText(r.note, x.A-10, 11, false)
		s.add(label(0, bottom+17, note, inkSoft, 11))
	}
	return bottom + 38
}
