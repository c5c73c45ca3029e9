package reports

import (
	"math"
	"strings"
)

// barRow is one row of a figure of changes in size: a bar from the planned size, and what it comes to.
type barRow struct {
	name    string
	detail  string // second line or last column, plain words
	from    float64
	to      float64 // from == to: a point
	left    string  // at the bar's left end
	right   string  // at its right end
	cells   []string
	why     string
	loud    bool // the plan's ink; else grey
	warning bool // over the limit: marked by a word in cells, and by bold
}

// barPlot is a list of bars around the planned size.
type barPlot struct {
	o       figureOptions
	rows    []barRow
	planned float64
	head    string // at the planned line
	xWords  string
	columns []string
	detail  string // heading of the detail column, "" when there is none
}

func (b barPlot) draw() scene {
	s := scene{W: b.o.width()}
	name, rowH, detailRoom := b.measure()
	columns := b.columnSet().within(s.W - name - detailRoom - 160)
	x := b.axis(name+42, s.W-columns.room-detailRoom-42)
	top := 26.0
	bottom := top + rowH*float64(len(b.rows)) + 4
	px := x.at(b.planned)
	s.add(label(math.Min(math.Max(px, textWidth(b.head, 12, true)/2), x.B), 14, b.head, inkPlan, 12).bold().middle())
	s.add(line(px, 20, px, bottom, inkPlan, 1.2).dash("4 3"))
	columns.draw(&s, x.B+42, 14, func(row int) float64 {
		y := top + rowH*(float64(row)+0.5) + 4
		if b.o.narrow {
			y += 8
		}
		return y
	})
	if detailRoom > 0 {
		s.add(label(s.W, 14, b.detail, inkSoft, 11).end())
	}
	for j, r := range b.rows {
		b.drawRow(&s, x, r, top+rowH*(float64(j)+0.5), name, detailRoom)
	}
	s.add(line(x.A, bottom, x.B, bottom, inkFaint, 1))
	for _, t := range x.thin(linearTicks(x.Lo, x.Hi, map[bool]int{false: 5, true: 3}[b.o.narrow]), 11) {
		s.add(line(x.at(t.Value), bottom, x.at(t.Value), bottom+4, inkFaint, 1), label(x.at(t.Value), bottom+17, t.Text, inkSoft, 11).middle())
	}
	s.add(label(math.Max(x.B, textWidth(b.xWords, 11, false)), bottom+33, b.xWords, inkSoft, 11).end())
	s.H = bottom + 38
	return s
}

// measure gives the room of the names, the height of a row and the room of the details; on a telephone the name
// stands above its bar and the details are left to the table.
func (b barPlot) measure() (name, rowH, detail float64) {
	if b.o.narrow {
		return 0, 40, 0
	}
	name, rowH = 60, 24
	for _, r := range b.rows {
		name = math.Max(name, textWidth(r.name, 12, false))
	}
	if b.detail != "" {
		rowH = 30
		for _, r := range b.rows {
			detail = math.Max(detail, textWidth(r.detail, 11, false))
		}
		detail = math.Min(detail, 175) + 14
	}
	return math.Min(name, 200), rowH, detail
}

// columnSet is the sizes at the right; on a telephone the number to enrol alone.
func (b barPlot) columnSet() columnSet {
	heads, skip := b.columns, 0
	if b.o.narrow && len(heads) > 1 {
		heads, skip = heads[1:2], 1
	}
	cells := make([][]string, len(b.rows))
	for i, r := range b.rows {
		if skip < len(r.cells) {
			cells[i] = r.cells[skip:]
		}
	}
	return measureColumns(heads, cells, func(row, column int) bool { return column == 0 || b.rows[row].warning })
}

// axis covers the planned size and every bar.
func (b barPlot) axis(from, to float64) axis {
	x := axis{Lo: b.planned, Hi: b.planned, A: from, B: to}
	for _, r := range b.rows {
		x.Lo, x.Hi = math.Min(x.Lo, math.Min(r.from, r.to)), math.Max(x.Hi, math.Max(r.from, r.to))
	}
	pad := math.Max(0.06*(x.Hi-x.Lo), 1)
	x.Lo, x.Hi = math.Max(0, x.Lo-pad), x.Hi+pad
	return x
}

func (b barPlot) drawRow(s *scene, x axis, r barRow, y, name, detailRoom float64) {
	if b.o.narrow {
		s.add(above(y-8, r.name, s.W, false))
		y += 8
	} else {
		s.add(clipped(0, y+4, r.name, name, inkText, 12, false))
	}
	if r.why != "" {
		text, _ := clipText(r.why, x.B-x.A, 11, false)
		s.add(label(x.A, y+4, text, inkSoft, 11))
		return
	}
	lo, hi := x.at(math.Min(r.from, r.to)), x.at(math.Max(r.from, r.to))
	fill, shade := inkFaint, 0.75
	if r.loud {
		fill, shade = inkPlan, 0.9
	}
	if hi-lo < 2 {
		lo, hi = lo-1, lo+1
	}
	s.add(rect(lo, y-6, hi-lo, 12, fill).faded(shade))
	if r.left != "" {
		s.add(label(lo-5, y+4, r.left, inkText, 11.5).bold().end())
	}
	if r.right != "" {
		s.add(label(hi+5, y+4, r.right, inkText, 11.5).bold())
	}
	if detailRoom > 0 && r.detail != "" {
		lines := wrapText(clipRunes(r.detail, 200), detailRoom-10, 11, 2, false)
		for i, text := range lines {
			e := label(s.W, y+4+11.5*(float64(i)-float64(len(lines)-1)/2), text, inkSoft, 11).end()
			if strings.HasSuffix(text, "…") {
				e.Title = clipRunes(r.detail, 300)
			}
			s.add(e)
		}
	}
}
