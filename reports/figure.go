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

// drawing is what the scene's template writes.
type drawing struct {
	Title, Alt    string
	Width, Height string
	Paper         string // alone: the colour under everything
	Marks         []mark
}

var svgTemplate = sync.OnceValue(func() *template.Template {
	return template.Must(template.New("figure").ParseFS(templateFiles, "templates/scene.svg"))
})

// SVG is the figure as a file of its own: light colours written out, no script, nothing fetched.
func (f Figure) SVG() ([]byte, error) {
	var b bytes.Buffer
	if err := svgTemplate().ExecuteTemplate(&b, "alone", f.drawing(true)); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// drawing writes the figure for the template, alone or for the page.
func (f Figure) drawing(alone bool) drawing {
	return drawing{Title: cleanText(f.Title), Alt: cleanText(f.Alt), Width: coordinate(f.scene.W), Height: coordinate(f.scene.H), Paper: lightInks[inkPaper], Marks: marks(f.scene.Items, alone)}
}

// AltText is the title and the text alternative as one text.
func (d drawing) AltText() string {
	return strings.TrimSpace(d.Title + ". " + d.Alt)
}
