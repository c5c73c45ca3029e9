package reports

import "strconv"

// mark is an element with everything written, for the scene's template: which it is, its lengths and its paint.
type mark struct {
	Text, Line, Rect, Circle, Path, Group bool

	X, Y, X2, Y2, W, H, R, D   string
	Class                      string // on the page: the roles of fill and stroke
	Fill, Stroke               string // alone: their colours
	Width, Dash, Opacity       string
	Label, Title, Size, Anchor string
	Bold                       bool
	Items                      []mark
}

// marks writes elements for the template. Alone, colours are written out and a missing fill is said.
func marks(es []element, alone bool) []mark {
	out := make([]mark, len(es))
	for i := range es {
		e, m := &es[i], &out[i]
		m.Title = cleanText(e.Title)
		switch e.Kind {
		case "group":
			m.Group, m.Items = true, marks(e.Items, alone)
			if e.Opacity > 0 {
				m.Opacity = strconv.FormatFloat(e.Opacity, 'f', -1, 64)
			}
			continue
		case "text":
			m.Text, m.X, m.Y, m.Size = true, coordinate(e.X), coordinate(e.Y), coordinate(e.Size)
			m.Label, m.Anchor, m.Bold = cleanText(e.Text), e.Anchor, e.Bold
		case "line":
			m.Line, m.X, m.Y, m.X2, m.Y2 = true, coordinate(e.X), coordinate(e.Y), coordinate(e.X2), coordinate(e.Y2)
		case "rect":
			m.Rect, m.X, m.Y, m.W, m.H = true, coordinate(e.X), coordinate(e.Y), coordinate(e.W), coordinate(e.H)
		case "circle":
			m.Circle, m.X, m.Y, m.R = true, coordinate(e.X), coordinate(e.Y), coordinate(e.R)
		case "path":
			m.Path, m.D = true, e.D()
		}
		m.Dash = e.Dash
		if e.StrokeWidth > 0 {
			m.Width = coordinate(e.StrokeWidth)
		}
		if e.Opacity > 0 {
			m.Opacity = strconv.FormatFloat(e.Opacity, 'f', -1, 64)
		}
		if !alone {
			m.Class = e.Class()
			continue
		}
		m.Fill = "none"
		if e.Fill != inkNone {
			m.Fill = lightInks[e.Fill]
		}
		m.Stroke = lightInks[e.Stroke]
	}
	return out
}
