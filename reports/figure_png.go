package reports

import (
	"bytes"
	"errors"
	"image"
	"image/color"
	"image/draw"
	"image/png"
	"math"
	"strconv"
	"strings"
	"sync"

	"golang.org/x/image/font"
	"golang.org/x/image/font/gofont/gobold"
	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/opentype"
	fixedpoint "golang.org/x/image/math/fixed"
	"golang.org/x/image/vector"
)

// PNG is the figure as a picture in the light colours, scale pixels for each unit of the drawing (2 is sharp in a
// document; 0.25 to 8). Letters outside Latin, Greek and Cyrillic have no shape in the embedded font: Unprintable
// names them, and SVG draws them with the reader's own fonts.
func (f Figure) PNG(scale float64) ([]byte, error) {
	if f.empty != "" {
		return nil, errors.New("reports: there is nothing to draw: " + f.empty)
	}
	if !(scale >= 0.25 && scale <= 8) {
		return nil, errors.New("reports: a picture's scale is from 0.25 to 8")
	}
	w, h := int(math.Ceil(f.scene.W*scale)), int(math.Ceil(f.scene.H*scale))
	if w < 1 || h < 1 || w*h > 200_000_000 {
		return nil, errors.New("reports: the picture would have " + strconv.Itoa(w) + " by " + strconv.Itoa(h) + " pixels")
	}
	c := canvas{img: image.NewRGBA(image.Rect(0, 0, w, h)), k: scale, faces: map[faceKey]font.Face{}}
	draw.Draw(c.img, c.img.Bounds(), image.NewUniform(inkColour(inkPaper, 1)), image.Point{}, draw.Src)
	if err := c.all(f.scene.Items, 1); err != nil {
		return nil, err
	}
	var b bytes.Buffer
	if err := png.Encode(&b, c.img); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// Unprintable are the characters of the figure that its PNG shows as boxes, each once.
func (f Figure) Unprintable() string {
	var out strings.Builder
	seen := map[rune]bool{}
	regularWidths.load()
	var walk func([]element)
	walk = func(es []element) {
		for _, e := range es {
			for _, r := range cleanText(e.Text) {
				if r < 127 || seen[r] || r == thinSpaceRune || r == '\u2068' || r == '\u2069' {
					continue
				}
				seen[r] = true
				if i, err := regularWidths.font.GlyphIndex(nil, r); err != nil || i == 0 {
					out.WriteRune(r)
				}
			}
			walk(e.Items)
		}
	}
	walk(f.scene.Items)
	return out.String()
}

const thinSpaceRune = '\u202f'

type faceKey struct {
	size float64
	bold bool
}

// canvas is a picture under way.
type canvas struct {
	img   *image.RGBA
	k     float64 // pixels for a unit
	faces map[faceKey]font.Face
}

func (c *canvas) all(es []element, opacity float64) error {
	for _, e := range es {
		o := opacity
		if e.Opacity != 0 {
			o *= e.Opacity
		}
		switch e.Kind {
		case "group":
			if err := c.all(e.Items, o); err != nil {
				return err
			}
		case "text":
			if err := c.text(e, o); err != nil {
				return err
			}
		default:
			c.mark(e, o)
		}
	}
	return nil
}

// mark fills and strokes one shape.
func (c *canvas) mark(e element, opacity float64) {
	ps, closed := outline(e)
	if len(ps) == 0 {
		return
	}
	if e.Fill != inkNone && e.Kind != "line" {
		c.fill([][]point{ps}, inkColour(e.Fill, opacity))
	}
	if e.Stroke != inkNone && e.StrokeWidth > 0 {
		if closed {
			ps = append(ps, ps[0])
		}
		c.fill(strokes(ps, e.StrokeWidth, e.Dash), inkColour(e.Stroke, opacity))
	}
}

// outline is a shape as points.
func outline(e element) (ps []point, closed bool) {
	switch e.Kind {
	case "line":
		return []point{{e.X, e.Y}, {e.X2, e.Y2}}, false
	case "rect":
		return []point{{e.X, e.Y}, {e.X + e.W, e.Y}, {e.X + e.W, e.Y + e.H}, {e.X, e.Y + e.H}}, true
	case "circle":
		const n = 48
		for i := 0; i < n; i++ {
			s, t := math.Sincos(2 * math.Pi * float64(i) / n)
			ps = append(ps, point{e.X + e.R*t, e.Y + e.R*s})
		}
		return ps, true
	case "path":
		return e.Points, e.Closed
	}
	return nil, false
}

// strokes turns a line into one quadrilateral for each straight piece of each dash, with a small square at the joints.
func strokes(ps []point, width float64, dash string) [][]point {
	var out [][]point
	half := width / 2
	for _, run := range dashes(ps, dash) {
		for i := 0; i+1 < len(run); i++ {
			a, b := run[i], run[i+1]
			d := math.Hypot(b.X-a.X, b.Y-a.Y)
			if d == 0 {
				continue
			}
			ux, uy := (b.X-a.X)/d, (b.Y-a.Y)/d
			nx, ny := -uy*half, ux*half
			if i+2 < len(run) { // run a little into the next piece, so that a bend has no gap
				b = point{b.X + ux*half*0.6, b.Y + uy*half*0.6}
			}
			out = append(out, []point{{a.X + nx, a.Y + ny}, {b.X + nx, b.Y + ny}, {b.X - nx, b.Y - ny}, {a.X - nx, a.Y - ny}})
		}
	}
	return out
}

// dashes cuts a line into the pieces that a dash pattern leaves visible.
func dashes(ps []point, pattern string) [][]point {
	var lengths []float64
	for _, f := range strings.Fields(pattern) {
		if v, err := strconv.ParseFloat(f, 64); err == nil && v > 0 {
			lengths = append(lengths, v)
		}
	}
	if len(lengths) < 2 {
		return [][]point{ps}
	}
	var out [][]point
	run := []point{ps[0]}
	k, left, on := 0, lengths[0], true
	for i := 0; i+1 < len(ps); i++ {
		a, b := ps[i], ps[i+1]
		d := math.Hypot(b.X-a.X, b.Y-a.Y)
		for at := 0.0; d > 0; {
			step := math.Min(left, d-at)
			at += step
			left -= step
			q := point{a.X + (b.X-a.X)*at/d, a.Y + (b.Y-a.Y)*at/d}
			if on {
				run = append(run, q)
			}
			if left > 1e-9 {
				break
			}
			if on {
				out = append(out, run)
			}
			k = (k + 1) % len(lengths)
			left, on = lengths[k], !on
			run = []point{q}
			if at >= d {
				break
			}
		}
	}
	if on && len(run) > 1 {
		out = append(out, run)
	}
	return out
}

// fill paints polygons in one colour; where they meet they are painted once. Each is turned the same way round, since
// the rasterizer adds windings.
func (c *canvas) fill(polygons [][]point, colour color.Color) {
	x0, y0, x1, y1 := math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)
	for _, ps := range polygons {
		for _, p := range ps {
			x0, x1 = math.Min(x0, p.X*c.k), math.Max(x1, p.X*c.k)
			y0, y1 = math.Min(y0, p.Y*c.k), math.Max(y1, p.Y*c.k)
		}
	}
	if !(x1 >= x0) {
		return
	}
	box := image.Rect(int(math.Floor(x0)), int(math.Floor(y0)), int(math.Ceil(x1))+1, int(math.Ceil(y1))+1)
	if box.Intersect(c.img.Bounds()).Empty() {
		return
	}
	z := vector.NewRasterizer(box.Dx(), box.Dy())
	at := func(p point) (float32, float32) {
		return float32(p.X*c.k - float64(box.Min.X)), float32(p.Y*c.k - float64(box.Min.Y))
	}
	for _, ps := range polygons {
		if turn(ps) < 0 {
			flipped := make([]point, len(ps))
			for i, p := range ps {
				flipped[len(ps)-1-i] = p
			}
			ps = flipped
		}
		for i, p := range ps {
			x, y := at(p)
			if i == 0 {
				z.MoveTo(x, y)
			} else {
				z.LineTo(x, y)
			}
		}
		z.ClosePath()
	}
	z.Draw(c.img, box, image.NewUniform(colour), image.Point{})
}

// turn is twice the signed area of a polygon.
func turn(ps []point) float64 {
	var s float64
	for i, p := range ps {
		q := ps[(i+1)%len(ps)]
		s += p.X*q.Y - q.X*p.Y
	}
	return s
}

var parsedFonts = sync.OnceValues(func() ([2]*opentype.Font, error) {
	var out [2]*opentype.Font
	for i, data := range [][]byte{goregular.TTF, gobold.TTF} {
		f, err := opentype.Parse(data)
		if err != nil {
			return out, err
		}
		out[i] = f
	}
	return out, nil
})

func (c *canvas) face(size float64, bold bool) (font.Face, error) {
	key := faceKey{size, bold}
	if f, ok := c.faces[key]; ok {
		return f, nil
	}
	fonts, err := parsedFonts()
	if err != nil {
		return nil, err
	}
	i := 0
	if bold {
		i = 1
	}
	f, err := opentype.NewFace(fonts[i], &opentype.FaceOptions{Size: size * c.k, DPI: 72, Hinting: font.HintingNone})
	if err == nil {
		c.faces[key] = f
	}
	return f, err
}

func (c *canvas) text(e element, opacity float64) error {
	face, err := c.face(e.Size, e.Bold)
	if err != nil {
		return err
	}
	s := strings.NewReplacer("\u2068", "", "\u2069", "", thinSpace, "\u2009").Replace(cleanText(e.Text))
	d := font.Drawer{Dst: c.img, Src: image.NewUniform(inkColour(e.Fill, opacity)), Face: face}
	width := c.measure(&d, s, e.Size)
	x := e.X * c.k
	switch e.Anchor {
	case "end":
		x -= width
	case "middle":
		x -= width / 2
	}
	d.Dot = fixedpoint.Point26_6{X: fixedpoint.Int26_6(math.Round(x * 64)), Y: fixedpoint.Int26_6(math.Round(e.Y * c.k * 64))}
	for i, part := range strings.Split(s, "\u2009") { // the font has no thin space: move on instead
		if i > 0 {
			d.Dot.X += fixedpoint.Int26_6(0.18 * e.Size * c.k * 64)
		}
		d.DrawString(part)
	}
	return nil
}

func (c *canvas) measure(d *font.Drawer, s string, size float64) float64 {
	spaces := strings.Count(s, "\u2009")
	return float64(d.MeasureString(strings.ReplaceAll(s, "\u2009", "")))/64 + float64(spaces)*0.18*size*c.k
}

// inkColour is a light ink as a colour, paler with less opacity.
func inkColour(i ink, opacity float64) color.Color {
	hex := lightInks[i]
	v, err := strconv.ParseUint(strings.TrimPrefix(hex, "#"), 16, 32)
	if err != nil {
		return color.Black
	}
	return color.NRGBA{uint8(v >> 16), uint8(v >> 8), uint8(v), uint8(math.Round(255 * math.Max(0, math.Min(1, opacity))))}
}
