package reports

import "math"

// columnSet is the numbers at the right of a list of rows, right-aligned under their headings.
type columnSet struct {
	heads  []string
	cells  [][]string // for each row
	bold   func(row, column int) bool
	widths []float64
	room   float64 // all widths together
}

// measureColumns gives each column the width of its widest text; together they take at most a room, which only
// hostile or very long cells reach.
func measureColumns(heads []string, cells [][]string, bold func(row, column int) bool) columnSet {
	c := columnSet{heads: heads, cells: cells, bold: bold, widths: make([]float64, len(heads))}
	for i, h := range heads {
		c.widths[i] = textWidth(h, 11, false)
		for j := range cells {
			c.widths[i] = math.Max(c.widths[i], textWidth(c.cell(j, i), 12, bold(j, i)))
		}
		c.widths[i] += 16
		c.room += c.widths[i]
	}
	return c
}

// within cuts the columns to a room.
func (c columnSet) within(most float64) columnSet {
	if c.room <= most {
		return c
	}
	c.room = most
	widths := make([]float64, len(c.widths))
	for i := range widths {
		widths[i] = most / float64(len(widths))
	}
	c.widths = widths
	return c
}

func (c columnSet) cell(row, column int) string {
	if column < len(c.cells[row]) {
		return c.cells[row][column]
	}
	return ""
}

// draw writes the columns from a left edge on; baseline gives the place of a row's texts.
func (c columnSet) draw(s *scene, left, headY float64, baseline func(row int) float64) {
	at := left
	for i, h := range c.heads {
		at += c.widths[i]
		short, _ := clipText(h, c.widths[i], 11, false)
		s.add(label(at, headY, short, inkSoft, 11).end())
		for j := range c.cells {
			text, _ := clipText(c.cell(j, i), c.widths[i], 12, c.bold(j, i))
			if text == "" {
				continue
			}
			e := label(at, baseline(j), text, inkText, 12).end()
			e.Bold = c.bold(j, i)
			s.add(e)
		}
	}
}
