package reports

import (
	"math"
	"strconv"
	"strings"
)

// ink is a colour by its role. The page gives roles their colours as CSS variables, light and dark; a figure written
// alone takes the light ones (inks.go).
type ink string

// The roles: two inks that carry meaning, evidence and plan, and grey furniture.
const (
	inkNone         ink = ""
	inkText         ink = "ink"
	inkSoft         ink = "soft"
	inkFaint        ink = "faint"
	inkLine         ink = "line"
	inkPaper        ink = "paper"
	inkEvidence     ink = "evidence"
	inkEvidenceWash ink = "evidence-wash"
	inkPlan         ink = "plan"
	inkPlanWash     ink = "plan-wash"
)

// element is one mark of a scene. Which fields count depends on Kind.
type element struct {
	Kind        string  // line, rect, circle, path, text, group
	X, Y        float64 // first end, upper left corner, centre, or baseline point of a text
	X2, Y2      float64 // second end of a line
	W, H        float64 // of a rect
	R           float64 // of a circle
	Points      []point // of a path
	Closed      bool    // of a path
	Fill        ink
	Stroke      ink
	StrokeWidth float64
	Dash        string  // as in SVG: "3 4"
	Opacity     float64 // 0 means 1
	Text        string
	Size        float64 // of a text, in scene units (CSS pixels at full width)
	Bold        bool
	Anchor      string    // start (default), middle, end
	Title       string    // the whole of a clipped label, or what a mark is
	Items       []element // of a group
}

type point struct{ X, Y float64 }

// scene is a drawing in its own units, origin at the upper left.
type scene struct {
	W, H  float64
	Items []element
}

func (s *scene) add(es ...element) { s.Items = append(s.Items, es...) }

func line(x1, y1, x2, y2 float64, stroke ink, width float64) element {
	return element{Kind: "line", X: x1, Y: y1, X2: x2, Y2: y2, Stroke: stroke, StrokeWidth: width}
}

func rect(x, y, w, h float64, fill ink) element {
	return element{Kind: "rect", X: x, Y: y, W: math.Max(0, w), H: math.Max(0, h), Fill: fill}
}

func circle(x, y, r float64, fill ink) element {
	return element{Kind: "circle", X: x, Y: y, R: r, Fill: fill}
}

func path(ps []point, stroke ink, width float64) element {
	return element{Kind: "path", Points: ps, Stroke: stroke, StrokeWidth: width}
}

func area(ps []point, fill ink) element {
	return element{Kind: "path", Points: ps, Closed: true, Fill: fill}
}

func label(x, y float64, text string, fill ink, size float64) element {
	return element{Kind: "text", X: x, Y: y, Text: text, Fill: fill, Size: size}
}

func group(title string, items ...element) element {
	return element{Kind: "group", Title: title, Items: items}
}

func (e element) end() element            { e.Anchor = "end"; return e }
func (e element) middle() element         { e.Anchor = "middle"; return e }
func (e element) bold() element           { e.Bold = true; return e }
func (e element) dash(d string) element   { e.Dash = d; return e }
func (e element) faded(o float64) element { e.Opacity = o; return e }
func (e element) outline(s ink, w float64) element {
	e.Stroke, e.StrokeWidth = s, w
	return e
}

// D is the path data of a path, to a tenth of a unit.
func (e element) D() string {
	var b strings.Builder
	for i, p := range e.Points {
		if i == 0 {
			b.WriteByte('M')
		} else {
			b.WriteByte('L')
		}
		b.WriteString(coordinate(p.X))
		b.WriteByte(' ')
		b.WriteString(coordinate(p.Y))
	}
	if e.Closed {
		b.WriteByte('Z')
	}
	return b.String()
}

// Class names the roles of fill and stroke for the page's style sheet.
func (e element) Class() string {
	var parts []string
	if e.Fill != inkNone {
		parts = append(parts, "f-"+string(e.Fill))
	} else if e.Kind == "path" || e.Kind == "rect" || e.Kind == "circle" {
		parts = append(parts, "f-none")
	}
	if e.Stroke != inkNone {
		parts = append(parts, "s-"+string(e.Stroke))
	}
	return strings.Join(parts, " ")
}

// coordinate writes a length to a tenth of a unit, shortest form.
func coordinate(x float64) string {
	r := math.Round(x*10) / 10
	if r == 0 {
		return "0"
	}
	return strconv.FormatFloat(r, 'f', -1, 64)
}

// hatch fills a rectangle with thin slanted lines: the sign for 'no size exists'. The lines are cut to the rectangle
// by arithmetic, so that no clip path or pattern needs an identifier.
func hatch(x, y, w, h, step float64, stroke ink) element {
	g := group("")
	for s := step; s < w+h; s += step {
		x1, y1 := x+s, y
		if s > w {
			x1, y1 = x+w, y+s-w
		}
		x2, y2 := x, y+s
		if s > h {
			x2, y2 = x+s-h, y+h
		}
		g.Items = append(g.Items, line(x1, y1, x2, y2, stroke, 1))
	}
	return g
}
