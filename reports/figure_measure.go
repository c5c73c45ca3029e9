package reports

import (
	"math"
	"strings"
	"sync"
	"unicode"
	"unicode/utf8"

	"golang.org/x/image/font"
	"golang.org/x/image/font/gofont/gobold"
	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/sfnt"
	fixedpoint "golang.org/x/image/math/fixed"
)

// Measured text is widened: the page is set in the reader's own sans-serif, and the widest of the usual ones, DejaVu
// Sans, is 1.11 to 1.17 times as wide as the Go fonts on the labels of a report, its bold 1.17 to 1.28 times.
const (
	spare     = 1.16
	spareBold = 1.24
)

type faceWidths struct {
	once  sync.Once
	data  []byte
	font  *sfnt.Font
	ascii [128]float64
}

var (
	regularWidths = faceWidths{data: goregular.TTF}
	boldWidths    = faceWidths{data: gobold.TTF}
)

func (f *faceWidths) load() {
	f.once.Do(func() {
		parsed, err := sfnt.Parse(f.data)
		if err != nil {
			panic("reports: the embedded font is damaged: " + err.Error())
		}
		f.font = parsed
		for r := rune(32); r < 127; r++ {
			f.ascii[r] = f.glyph(r)
		}
	})
}

// glyph is the advance of a character in em.
func (f *faceWidths) glyph(r rune) float64 {
	var b sfnt.Buffer
	i, err := f.font.GlyphIndex(&b, r)
	if err != nil || i == 0 {
		if unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf) {
			return 0
		}
		if r == '\u202f' || r == '\u2009' {
			return 0.2
		}
		return 1 // scripts outside the font: a full square
	}
	adv, err := f.font.GlyphAdvance(&b, i, fixedpoint.I(1000), font.HintingNone)
	if err != nil {
		return 1
	}
	return float64(adv) / 64 / 1000
}

// textWidth is the width that a text may take on the page, in units of the scene.
func textWidth(s string, size float64, bold bool) float64 {
	f, wider := &regularWidths, spare
	if bold {
		f, wider = &boldWidths, spareBold
	}
	f.load()
	var em float64
	for _, r := range s {
		if r >= 32 && r < 127 {
			em += f.ascii[r]
		} else {
			em += f.glyph(r)
		}
	}
	return em * size * wider
}

// clipText cuts a text to a width and ends it in an ellipsis; cut says that something was lost.
func clipText(s string, width, size float64, bold bool) (short string, cut bool) {
	if len(s) < 400 && textWidth(s, size, bold) <= width {
		return s, false
	}
	room := width - textWidth("…", size, bold)
	used := 0.0
	for i, r := range s {
		w := textWidth(string(r), size, bold)
		if used+w > room {
			return s[:i] + "…", true
		}
		used += w
	}
	return s, false
}

// clipped is a label cut to a width, with the whole text as its title when it was cut.
func clipped(x, y float64, text string, width float64, fill ink, size float64, bold bool) element {
	short, cut := clipText(text, width, size, bold)
	e := label(x, y, short, fill, size)
	e.Bold = bold
	if cut {
		e.Title = clipRunes(text, 300)
	}
	return e
}

// above is a name over its row on a telephone: on paper, so that lines through all rows do not strike it out.
func above(y float64, text string, width float64, bold bool) element {
	e := clipped(0, y, text, width, inkText, 12, bold)
	return group("", rect(-1, y-10.5, math.Min(width, textWidth(e.Text, 12, bold)+2), 14, inkPaper).faded(0.88), e)
}

// twoLines is a name at the left of its row, on two lines of smaller letters where one is too short for it.
func twoLines(y float64, text string, width float64, bold bool) []element {
	if textWidth(clipRunes(text, 200), 12, bold) <= width {
		return []element{clipped(0, y+4, text, width, inkText, 12, bold)}
	}
	var out []element
	lines := wrapText(clipRunes(text, 200), width, 11.5, 2, bold)
	for i, l := range lines {
		e := label(0, y+4+13*(float64(i)-float64(len(lines)-1)/2), l, inkText, 11.5)
		e.Bold = bold
		if strings.HasSuffix(l, "…") {
			e.Title = clipRunes(text, 300)
		}
		out = append(out, e)
	}
	return out
}

// clipRunes cuts a text to a number of characters, visibly.
func clipRunes(s string, most int) string {
	if utf8.RuneCountInString(s) <= most {
		return s
	}
	n := 0
	for i := range s {
		if n == most-1 {
			return s[:i] + "…"
		}
		n++
	}
	return s
}

// wrapText breaks a text into lines of at most a width, at spaces; what is longer than a line is clipped.
func wrapText(s string, width, size float64, most int, bold bool) []string {
	var lines []string
	current := ""
	for _, word := range splitWords(s) {
		next := word
		if current != "" {
			next = current + " " + word
		}
		if current != "" && textWidth(next, size, bold) > width {
			lines = append(lines, current)
			next = word
			if len(lines) == most {
				last, _ := clipText(lines[most-1]+" "+word, width, size, bold)
				lines[most-1] = last
				return lines
			}
		}
		current = next
	}
	if current != "" {
		lines = append(lines, current)
	}
	for i := range lines {
		lines[i], _ = clipText(lines[i], width, size, bold)
	}
	return lines
}

// splitWords splits at ordinary spaces only, so that thin spaces stay inside numbers.
func splitWords(s string) []string {
	var words []string
	start := -1
	for i, r := range s {
		if r == ' ' {
			if start >= 0 {
				words = append(words, s[start:i])
				start = -1
			}
		} else if start < 0 {
			start = i
		}
	}
	if start >= 0 {
		words = append(words, s[start:])
	}
	return words
}
