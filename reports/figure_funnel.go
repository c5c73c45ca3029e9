package reports

import (
	"fmt"
	"math"

	"footing/plan/result"
)

// FunnelFigure draws each study's effect against its standard error, precise studies on top, with the borders at
// which a study of that precision is just significant. Studies that an adjustment filled in are crosses.
func FunnelFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "Effects by precision, with the borders of significance"
	if p.Pool == nil {
		return emptyFigure("funnel", title, "there is no evidence sheet")
	}
	f := funnel{scale: effectScale{p.Pool.Scale}, o: options(o), pool: p.Pool}
	for _, s := range p.Pool.Studies {
		if s.Used && s.Estimate != nil && s.StandardError != nil && *s.StandardError > 0 {
			f.rows = append(f.rows, s)
		}
	}
	if len(f.rows) < 3 {
		return emptyFigure("funnel", title, "fewer than three studies have a standard error")
	}
	for _, m := range p.Pool.SmallStudy {
		if len(m.Points) > 0 {
			f.filled, f.filledBy = m.Points, m.Words
			break
		}
	}
	return Figure{Name: "funnel", Title: title, Alt: f.alt(), Table: f.table(), scene: f.draw()}
}

type funnel struct {
	scale    effectScale
	o        figureOptions
	pool     *result.Pool
	rows     []result.Study
	filled   []result.FunnelPoint
	filledBy string
}

// The normal deviates of two-sided p = .10, .05 and .01: borders of the drawing, not results.
var borders = []struct {
	z    float64
	text string
}{{1.6448536, "p = .10"}, {1.9599640, "p = .05"}, {2.5758293, "p = .01"}}

// frame is the two axes: every point, and the borders as far down as the least precise study; the standard error runs
// downwards.
func (f *funnel) frame(width float64) (x, y axis) {
	none := f.scale.NoEffect
	lo, hi, most := none, none, 0.0
	for _, r := range f.rows {
		lo, hi = math.Min(lo, *r.Estimate), math.Max(hi, *r.Estimate)
		most = math.Max(most, *r.StandardError)
	}
	for _, q := range f.filled {
		lo, hi = math.Min(lo, q.Estimate), math.Max(hi, q.Estimate)
		most = math.Max(most, q.StandardError)
	}
	most *= 1.06
	reach := 1.2 * most
	lo, hi = math.Min(lo, none-reach), math.Max(hi, none+reach)
	pad := 0.04 * (hi - lo)
	left, right := 54.0, width-120
	if f.o.narrow {
		left, right = 40, width-8
	}
	return axis{Lo: lo - pad, Hi: hi + pad, A: left, B: right}, axis{Lo: 0, Hi: most, A: 30, B: 270}
}

func (f *funnel) draw() scene {
	s := scene{W: f.o.width()}
	x, y := f.frame(s.W)
	f.zones(&s, x, y)
	for _, t := range linearTicks(0, y.Hi, 5) {
		ty := y.at(t.Value)
		s.add(label(x.A-6, ty+4, t.Text, inkSoft, 11).end(), line(x.A, ty, x.A+4, ty, inkFaint, 1))
	}
	s.add(label(0, 14, "standard error (precise studies on top)", inkSoft, 11))
	if e := f.pool.Random.Estimate; e != nil {
		s.add(line(x.at(*e), y.A, x.at(*e), y.B, inkEvidence, 1.4), label(x.at(*e)+5, y.A-3, "pooled "+f.scale.text(*e), inkEvidence, 11).bold())
	}
	for _, r := range f.rows {
		s.add(biasMark(r.RiskOfBias, x.at(*r.Estimate), y.at(*r.StandardError), 4.2, 1))
	}
	for _, q := range f.filled {
		a, b := x.at(q.Estimate), y.at(q.StandardError)
		s.add(line(a-4, b-4, a+4, b+4, inkText, 1.5), line(a-4, b+4, a+4, b-4, inkText, 1.5))
	}
	s.add(line(x.A, y.B, x.B, y.B, inkFaint, 1))
	for _, t := range x.thin(f.scale.ticks(x.Lo, x.Hi, map[bool]int{false: 7, true: 5}[f.o.narrow]), 11) {
		s.add(line(x.at(t.Value), y.B, x.at(t.Value), y.B+4, inkFaint, 1), label(x.at(t.Value), y.B+17, t.Text, inkSoft, 11).middle())
	}
	words, _ := f.scale.direction()
	short, _ := clipText(words, x.B-x.A, 11, false)
	if f.scale.HigherBetter {
		s.add(label(x.B, y.B+33, short, inkSoft, 11).end())
	} else {
		s.add(label(x.A, y.B+33, short, inkSoft, 11))
	}
	s.H = y.B + 38
	if len(f.filled) > 0 {
		a := x.A + 5
		b := s.H + 10
		s.add(line(a-4, b-4, a+4, b+4, inkText, 1.5), line(a-4, b+4, a+4, b-4, inkText, 1.5))
		text, _ := clipText("added by: "+f.filledBy, s.W-a-16, 11, false)
		s.add(label(a+10, b+4, text, inkSoft, 11))
		s.H += 20
	}
	return s
}

// zones draws the borders of significance as lines from the top of the funnel and washes what is not significant.
func (f *funnel) zones(s *scene, x, y axis) {
	none := f.scale.NoEffect
	cutLine := func(z float64) (point, point) { // from the top along none + z se, cut at the frame
		se := y.Hi
		if v := none + z*se; v > x.Hi {
			se = (x.Hi - none) / z
		} else if v < x.Lo {
			se = (x.Lo - none) / z
		}
		return point{x.at(none), y.at(0)}, point{x.at(none + z*se), y.at(se)}
	}
	wash := borders[1].z
	_, a := cutLine(-wash)
	_, b := cutLine(wash)
	shape := []point{{x.at(none), y.A}, b}
	if b.Y < y.B-0.01 {
		shape = append(shape, point{b.X, y.B})
	}
	if a.Y < y.B-0.01 {
		shape = append(shape, point{a.X, y.B})
	}
	s.add(area(append(shape, a), inkLine).faded(0.55))
	want := []float64{}
	ends := []point{}
	for i, bd := range borders {
		for _, side := range []float64{-1, 1} {
			from, to := cutLine(side * bd.z)
			l := line(from.X, from.Y, to.X, to.Y, inkFaint, 1)
			l.Dash = []string{"1 3", "", "5 3"}[i]
			s.add(l)
			if side > 0 {
				want, ends = append(want, to.Y), append(ends, to)
			}
		}
	}
	if !f.o.narrow {
		for i, at := range spread(want, 13, y.A, y.B-2) {
			s.add(line(ends[i].X+2, ends[i].Y, x.B+8, at, inkFaint, 0.8).faded(0.6), label(x.B+12, at+4, borders[i].text, inkSoft, 11))
		}
	} else {
		s.add(label(x.B, y.B-6, "p: dots .10, line .05, dashes .01", inkSoft, 10).end())
	}
	s.add(line(x.at(none), y.A, x.at(none), y.B, inkSoft, 1))
}

func (f *funnel) alt() string {
	text := fmt.Sprintf("%s studies; standard errors from %s to %s.", countWord(len(f.rows)), fixed(f.extreme(false), 2), fixed(f.extreme(true), 2))
	if len(f.filled) > 0 {
		text += fmt.Sprintf(" %s more added by: %s.", countWord(len(f.filled)), f.filledBy)
	}
	return text
}

func (f *funnel) extreme(largest bool) float64 {
	v := *f.rows[0].StandardError
	for _, r := range f.rows {
		if (*r.StandardError > v) == largest {
			v = *r.StandardError
		}
	}
	return v
}

func (f *funnel) table() Table {
	t := Table{Head: []string{"study", "effect", "standard error"}, Text: 1}
	for _, r := range f.rows {
		t.Rows = append(t.Rows, []string{r.Study, f.scale.text(*r.Estimate), fixed(*r.StandardError, 3)})
	}
	for _, q := range f.filled {
		t.Rows = append(t.Rows, []string{"added: " + f.filledBy, f.scale.text(q.Estimate), fixed(q.StandardError, 3)})
	}
	return t
}
