package reports

import (
	"bytes"
	"image/png"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"
)

// golden compares with a file of testdata/figures; UPDATE_FIGURES=1 writes it anew.
func golden(t *testing.T, name string, got []byte) {
	t.Helper()
	file := filepath.Join("testdata", "figures", name)
	if os.Getenv("UPDATE_FIGURES") == "1" {
		if err := os.WriteFile(file, got, 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Errorf("%s has changed: look at it, then write it anew with UPDATE_FIGURES=1", file)
	}
}

func TestGoldenFigures(t *testing.T) {
	p := inventedPlan(12, false)
	for _, f := range []Figure{ForestFigure(p), NextFigure(p, Narrow()), PowerFigure(p)} {
		svg, err := f.SVG()
		if err != nil {
			t.Fatal(err)
		}
		golden(t, f.Name+".svg", svg)
	}
}

// Every figure, wide and narrow, is well-formed, says what it shows, has a table whose rows fit its head, and its
// picture has the drawing's size and is not empty.
func TestEveryFigure(t *testing.T) {
	for _, log := range []bool{false, true} {
		p := inventedPlan(12, log)
		for _, o := range [][]FigureOption{nil, {Narrow()}} {
			fs := Figures(p, o...)
			if len(fs) < 11 {
				t.Errorf("%d figures", len(fs))
			}
			names := map[string]bool{}
			for _, f := range fs {
				checkFigure(t, f, names)
			}
		}
	}
}

func checkFigure(t *testing.T, f Figure, names map[string]bool) {
	t.Helper()
	if names[f.Name] || f.Name == "" {
		t.Errorf("the name %q is not unique", f.Name)
	}
	names[f.Name] = true
	if len(f.Alt) < 20 || f.Title == "" {
		t.Errorf("%s: says little: %q", f.Name, f.Alt)
	}
	for _, r := range f.Table.Rows {
		if len(r) != len(f.Table.Head) {
			t.Errorf("%s: a row of %d cells under %d headings", f.Name, len(r), len(f.Table.Head))
		}
	}
	svg, err := f.SVG()
	if err != nil {
		t.Fatal(err)
	}
	wellFormed(t, f.Name, svg)
	for _, bad := range []string{"NaN", "Inf", "class=", "var(", "ZgotmplZ"} {
		if bytes.Contains(svg, []byte(bad)) {
			t.Errorf("%s holds %q", f.Name, bad)
		}
	}
	pic, err := f.PNG(1)
	if err != nil {
		t.Fatal(err)
	}
	if f.Name == "forest" {
		if again, _ := f.PNG(1); !bytes.Equal(pic, again) {
			t.Errorf("%s: the picture is not the same twice", f.Name)
		}
	}
	img, err := png.Decode(bytes.NewReader(pic))
	if err != nil {
		t.Fatal(err)
	}
	if w, h := f.Size(); float64(img.Bounds().Dx()) < w || float64(img.Bounds().Dy()) < h {
		t.Errorf("%s: the picture is %v, the drawing %v by %v", f.Name, img.Bounds(), w, h)
	}
	paper, marked := img.At(0, 0), 0
	for y := 0; y < img.Bounds().Dy(); y += 2 {
		for x := 0; x < img.Bounds().Dx(); x += 2 {
			if img.At(x, y) != paper {
				marked++
			}
		}
	}
	if marked < 500 {
		t.Errorf("%s: the picture has %d marked points", f.Name, marked)
	}
	if u := f.Unprintable(); u != "" {
		t.Errorf("%s: the font lacks %q", f.Name, u)
	}
}

func TestHostileTextInFigures(t *testing.T) {
	p := inventedPlan(len(hostile), false)
	for i := range hostile {
		p.Pool.Studies[i].Study = hostile[i]
	}
	f := ForestFigure(p) // straight from a result that nobody has cleaned
	svg, err := f.SVG()
	if err != nil {
		t.Fatal(err)
	}
	wellFormed(t, "forest", svg)
	if !utf8.Valid(svg) || strings.ContainsAny(string(svg), "\x00\x1b\a\u202e") {
		t.Error("control characters came through")
	}
	if bytes.Contains(svg, []byte("<script")) || bytes.Contains(svg, []byte("<img")) {
		t.Error("a label became markup")
	}
	if _, err := f.PNG(1); err != nil {
		t.Error(err)
	}
	p.Pool.Studies[0].Study = "学校"
	if got := ForestFigure(p).Unprintable(); !strings.Contains(got, "学校") {
		t.Errorf("the font's missing letters are %q", got)
	}
}

func TestPictureScale(t *testing.T) {
	f := PowerFigure(inventedPlan(12, false))
	for _, bad := range []float64{0, -1, 9, 0.1} {
		if _, err := f.PNG(bad); err == nil {
			t.Errorf("scale %v was taken", bad)
		}
	}
	if _, err := emptyFigure("x", "x", "nothing").PNG(1); err == nil {
		t.Error("nothing was drawn")
	}
}

// Every drawing fits a sheet of paper below its section's opening: at the width of A4 within its margins (180 mm),
// or Letter's (186 mm), it is no higher than 235 mm, so that none is cut.
func TestFiguresFitASheet(t *testing.T) {
	for _, k := range []int{1, 12, 44, 45, 80, 150, 151, 1000} {
		p := inventedPlan(k, false)
		for _, f := range append(ForestFigures(p), Figures(p)[1:]...) {
			if w, h := f.Size(); h/w*186 > 235 {
				t.Errorf("%d studies: %s would be %.0f mm high", k, f.Name, h/w*186)
			}
		}
	}
}
