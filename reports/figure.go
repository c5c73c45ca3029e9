package reports

import (
	"bytes"
	"embed"
	"html/template"
	"strings"
	"sync"
)

// Figure is a drawing with what a reader who cannot see it needs: a text alternative and a table of its numbers.
type Figure struct {
	Name  string // short, for file names: "forest"
	Title string // what it shows, a few words
	Alt   string // the text alternative: what the drawing says, in sentences
	Table Table

	scene scene
	empty string // why there is nothing to draw
}

// Table is a table of a figure's numbers, as printed.
type Table struct {
	Head []string
	Rows [][]string
	Text int // the leading columns that hold text and stand left; the others are numbers and stand right
}

// Empty says why there is nothing to draw; "" when there is a drawing.
func (f Figure) Empty() string { return f.empty }

// Size is the width and height of the drawing in CSS pixels.
func (f Figure) Size() (width, height float64) { return f.scene.W, f.scene.H }

// FigureOption changes how a figure is drawn.
type FigureOption func(*figureOptions)

type figureOptions struct {
	narrow bool
}

// Narrow draws the figure for a telephone: 350 units wide, with fewer columns instead of smaller letters.
func Narrow() FigureOption { return func(o *figureOptions) { o.narrow = true } }

func options(os []FigureOption) figureOptions {
	var o figureOptions
	for _, f := range os {
		f(&o)
	}
	return o
}

// width is the scene's width: the page's main column, or a telephone's.
func (o figureOptions) width() float64 {
	if o.narrow {
		return 350
	}
	return 760
}

//go:embed templates/*.html templates/*.svg
var templateFiles embed.FS

// drawing is what the scene template writes: marks, and whether colours are written out (a figure alone) or left to
// the page's style sheet.
type drawing struct {
	Figure
	Alone         bool
	Width, Height float64
	Items         []element
}

var svgTemplate = sync.OnceValue(func() *template.Template {
	return template.Must(template.New("figure").Funcs(sceneFuncs).ParseFS(templateFiles, "templates/scene.svg"))
})

var sceneFuncs = template.FuncMap{
	"xy":     coordinate,
	"clean":  cleanText,
	"colour": func(i ink) string { return lightInks[i] },
	"alone":  func(alone bool, e element) loneElement { return loneElement{Alone: alone, element: e} },
}

// loneElement is an element with the way its colours are written.
type loneElement struct {
	element
	Alone bool
}

// SVG is the figure as a file of its own: light colours written out, no script, nothing fetched.
func (f Figure) SVG() ([]byte, error) {
	var b bytes.Buffer
	d := drawing{Figure: f, Alone: true, Width: f.scene.W, Height: f.scene.H, Items: f.scene.Items}
	if err := svgTemplate().ExecuteTemplate(&b, "alone", d); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// inPage is the figure as the page's template draws it.
func (f Figure) inPage() drawing {
	return drawing{Figure: f, Width: f.scene.W, Height: f.scene.H, Items: f.scene.Items}
}

// AltText is the title and the text alternative as one text.
func (d drawing) AltText() string {
	return strings.TrimSpace(d.Title + ". " + d.Alt)
}
