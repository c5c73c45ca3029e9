package reports

import (
	"fmt"
	"math"
	"sort"

	"footing/plan/result"
)

// NextFigure draws, over one effect axis, what the true effect in the next setting may be (above) and the people that
// each effect needs (below): the eye falls from belief to cost. Effects that no size can show are hatched.
func NextFigure(p *result.Plan, o ...FigureOption) Figure {
	const title = "The next setting's true effect, and the size that each effect needs"
	if p.Range == nil || len(p.Range.Curve) < 2 && len(p.Size.NeedCurve) < 2 {
		return emptyFigure("next-study", title, "there is no distribution of the next effect")
	}
	f := &nextStudy{p: p, r: p.Range, scale: effectScale{p.Size.Scale}, o: options(o), pens: scenarioPens(p.Range)}
	if p.Size.Scale.Name == "" && p.Pool != nil {
		f.scale = effectScale{p.Pool.Scale}
	}
	f.s = &scene{W: f.o.width()}
	f.needLo, f.needHi = f.needRange()
	f.x = f.domain()
	base := f.density()
	bottom := f.need(base)
	f.axisLine(bottom)
	return Figure{Name: "next-study", Title: title, Alt: f.alt(), Table: f.table(), scene: *f.s}
}

type nextStudy struct {
	p     *result.Plan
	r     *result.Range
	scale effectScale
	o     figureOptions
	pens  map[string]pen
	s     *scene
	x     axis
	// the stretch of the size axis
	needLo, needHi float64
}

// domain covers the middle 99% of the distribution, no effect, and every scenario.
func (f *nextStudy) domain() axis {
	lo, hi := math.Inf(1), math.Inf(-1)
	cover := func(x float64) { lo, hi = math.Min(lo, x), math.Max(hi, x) }
	for _, c := range f.r.Curve {
		if c.CDF >= 0.005 && c.CDF <= 0.995 {
			cover(c.Effect)
		}
	}
	if len(f.r.Curve) < 2 {
		for _, n := range f.p.Size.NeedCurve {
			cover(n.Effect)
		}
	}
	cover(f.scale.NoEffect)
	for _, s := range f.r.Scenarios {
		cover(s.Effect)
	}
	pad := 0.02 * (hi - lo)
	left, right := 40.0, 16.0
	if f.o.narrow {
		right = 6
	}
	for _, t := range countTicks(f.needLo, f.needHi, 7) {
		left = math.Max(left, textWidth(t.Text, 11, false)+8)
	}
	return axis{Lo: lo - pad, Hi: hi + pad, A: left, B: f.s.W - right}
}

// shownScenarios are those inside the axis, from left to right.
func (f *nextStudy) shownScenarios() []result.Scenario {
	out := append([]result.Scenario(nil), f.r.Scenarios...)
	sort.SliceStable(out, func(i, j int) bool { return out[i].Effect < out[j].Effect })
	return out
}

func (f *nextStudy) density() (base float64) {
	scenarios := f.shownScenarios()
	const step = 15.0
	if len(f.r.Curve) < 2 { // no evidence to draw: the scenarios' names stand over what they need
		base = 14 + step*float64(len(scenarios))
		for i, s := range scenarios {
			f.scenarioLabel(s, 12+step*float64(i), base)
		}
		return base
	}
	top := 8 + step*float64(len(scenarios))
	height := 112.0
	base = top + height + 8
	most := 0.0
	for _, c := range append(append([]result.DensityPoint(nil), f.r.Curve...), f.r.AdjustedCurve...) {
		most = math.Max(most, c.Density)
	}
	if most == 0 {
		most = 1
	}
	at := func(c result.DensityPoint) point { return point{f.x.at(c.Effect), base - height*c.Density/most} }
	f.shades(base, at)
	f.s.add(path(f.curvePoints(f.r.Curve, at), inkEvidence, 1.8))
	if len(f.r.AdjustedCurve) > 1 {
		f.s.add(path(f.curvePoints(f.r.AdjustedCurve, at), inkEvidence, 1.2).dash("6 3"))
	}
	f.s.add(line(f.x.A, base, f.x.B, base, inkFaint, 1))
	none := f.x.at(f.scale.NoEffect)
	f.s.add(line(none, base-height*0.7, none, base, inkSoft, 1))
	for i, s := range scenarios {
		f.scenarioLabel(s, 12+step*float64(i), base)
	}
	return base
}

// curvePoints are the points of a density inside the axis.
func (f *nextStudy) curvePoints(curve []result.DensityPoint, at func(result.DensityPoint) point) []point {
	var out []point
	for _, c := range curve {
		if f.x.holds(c.Effect) {
			out = append(out, at(c))
		}
	}
	return out
}

// shades fills the density in up to three parts, deeper towards what is worth having: beyond no effect, too small,
// worthwhile.
func (f *nextStudy) shades(base float64, at func(result.DensityPoint) point) {
	cuts := []float64{f.scale.NoEffect}
	if w := f.r.SmallestWorthwhile; w != nil {
		cuts = append(cuts, w.Effect)
	}
	fills := []element{{Fill: inkFaint, Opacity: 0.3}, {Fill: inkEvidenceWash, Opacity: 1}, {Fill: inkEvidence, Opacity: 0.35}}
	if len(cuts) == 1 {
		fills = []element{fills[0], fills[2]}
	}
	if !f.better(1, 0) {
		for i, j := 0, len(fills)-1; i < j; i, j = i+1, j-1 {
			fills[i], fills[j] = fills[j], fills[i]
		}
	}
	sort.Float64s(cuts)
	edges := append(append([]float64{f.x.Lo}, cuts...), f.x.Hi)
	for i := 0; i+1 < len(edges); i++ {
		var ps []point
		a, b := edges[i], edges[i+1]
		for j, c := range f.r.Curve {
			if j > 0 {
				prev := f.r.Curve[j-1]
				for _, e := range []float64{a, b} {
					if prev.Effect < e && e < c.Effect {
						ps = append(ps, at(between(prev, c, e)))
					}
				}
			}
			if c.Effect >= a && c.Effect <= b {
				ps = append(ps, at(c))
			}
		}
		if len(ps) < 2 {
			continue
		}
		ps = append(ps, point{ps[len(ps)-1].X, base}, point{ps[0].X, base})
		f.s.add(area(ps, fills[i].Fill).faded(fills[i].Opacity))
	}
}

// between reads the density at an effect between two computed points, for the edge of a shaded part.
func between(a, b result.DensityPoint, e float64) result.DensityPoint {
	t := (e - a.Effect) / (b.Effect - a.Effect)
	return result.DensityPoint{Effect: e, Density: a.Density + t*(b.Density-a.Density), CDF: a.CDF + t*(b.CDF-a.CDF)}
}

// better says whether a is the more favourable of two effects.
func (f *nextStudy) better(a, b float64) bool { return (a > b) == f.scale.HigherBetter }

// chanceLabels write the share of each part of the distribution under it, between thin brackets, where the result
// holds it; it gives the height used.
func (f *nextStudy) chanceLabels(base float64) float64 {
	none := f.chanceAt(f.scale.NoEffect)
	if none == nil || len(f.r.Curve) < 2 {
		return 0
	}
	type part struct {
		from, to float64
		share    float64
		words    string
		ink      ink
	}
	far, near := f.x.Hi, f.x.Lo
	if !f.scale.HigherBetter {
		far, near = near, far
	}
	parts := []part{{near, f.scale.NoEffect, 1 - *none, "no help, or harm", inkSoft}}
	w := f.r.SmallestWorthwhile
	if w != nil && f.better(w.Effect, f.scale.NoEffect) && f.chanceAt(w.Effect) != nil {
		worth := *f.chanceAt(w.Effect)
		parts = append(parts, part{f.scale.NoEffect, w.Effect, *none - worth, "too small", inkSoft}, part{w.Effect, far, worth, "worthwhile", inkEvidence})
	} else {
		parts = append(parts, part{f.scale.NoEffect, far, *none, "some help", inkEvidence})
	}
	if !f.scale.HigherBetter {
		for i, j := 0, len(parts)-1; i < j; i, j = i+1, j-1 {
			parts[i], parts[j] = parts[j], parts[i]
		}
	}
	want := make([]float64, len(parts))
	widest := 0.0
	for i, q := range parts {
		a, b := f.x.at(q.from), f.x.at(q.to)
		want[i] = (a + b) / 2
		widest = math.Max(widest, math.Max(textWidth(q.words, 11, false), textWidth(inHundred(q.share), 11.5, true)))
		a, b = math.Min(a, b)+2, math.Max(a, b)-2
		if b > a {
			f.s.add(path([]point{{a, base + 5}, {a, base + 9}, {b, base + 9}, {b, base + 5}}, q.ink, 1))
		}
	}
	for i, x := range spread(want, widest+8, widest/2, f.s.W-widest/2) {
		q := parts[i]
		f.s.add(rect(x-widest/2, base+11, widest, 29, inkPaper),
			label(x, base+22, inHundred(q.share), q.ink, 11.5).bold().middle(), label(x, base+36, q.words, q.ink, 11).middle())
	}
	return 40
}

func (f *nextStudy) chanceAt(effect float64) *float64 {
	for _, c := range f.r.Chances {
		if math.Abs(c.Effect-effect) <= 1e-9*(1+math.Abs(effect)) {
			return &c.Chance
		}
	}
	return nil
}

// scenarioLabel names a scenario at its place: labels step down from left to right, so that no line crosses a name.
func (f *nextStudy) scenarioLabel(s result.Scenario, y, base float64) {
	pn := f.pens[s.Name]
	x := f.x.at(s.Effect)
	text := clipRunes(s.Words, 40) + " " + f.scale.text(s.Effect)
	f.s.add(line(x, y-8, x, base, pn.ink, 1).dash("2 3"))
	w := textWidth(text, 11, s.Target)
	e := label(x+5, y, text, pn.ink, 11)
	e.Bold = s.Target
	if x+5+w > f.s.W {
		e.X, e.Anchor = math.Max(x-5, w), "end"
		if e.X > x-5 {
			e.X = math.Min(f.s.W, math.Max(w, x+w/2))
		}
		f.s.add(rect(e.X-2-w, y-10, w+4, 13, inkPaper))
	}
	f.s.add(e)
}

func (f *nextStudy) axisLine(bottom float64) {
	count := 8
	if f.o.narrow {
		count = 5
	}
	for _, t := range f.x.thin(f.scale.ticks(f.x.Lo, f.x.Hi, count), 11) {
		x := f.x.at(t.Value)
		f.s.add(line(x, bottom, x, bottom+4, inkFaint, 1), label(x, bottom+17, t.Text, inkSoft, 11).middle())
	}
	words := "true effect in the next setting, " + f.scale.axisWords()
	if f.o.narrow {
		words = "true effect, " + f.scale.axisWords()
	}
	short, _ := clipText(words, f.x.B-f.x.A, 11, false)
	f.s.add(label(f.x.B, bottom+33, short, inkSoft, 11).end())
	f.s.H = bottom + 38
}

func (f *nextStudy) alt() string {
	text := "The people that each effect needs."
	if len(f.r.Curve) > 1 {
		text = "Above, the distribution of the true effect in the next setting"
		if d := f.r.Distribution; d != nil && d.Location != nil {
			text += ", centred at " + f.scale.text(*d.Location)
		}
		text += ". Below, the people that each effect needs."
	}
	for _, s := range f.shownScenarios() {
		n := "no size exists"
		if c := caseOf(f.p, s.Name); c != nil && c.N != nil {
			n = fmt.Sprintf("%s (%s in all)", groupsText(c.N), totalText(c.N))
		}
		text += fmt.Sprintf(" %s %s: %s.", clipRunes(s.Words, 60), f.scale.text(s.Effect), n)
	}
	return text
}

func (f *nextStudy) table() Table {
	t := Table{Head: []string{"chance that the true effect is …", "effect", "chance", "allowing for missing studies"}, Text: 1}
	for _, c := range f.r.Chances {
		adj := "–"
		if c.Adjusted != nil {
			adj = percentCell(*c.Adjusted)
		}
		t.Rows = append(t.Rows, []string{c.Words, f.scale.text(c.Effect), percentCell(c.Chance), adj})
	}
	if d := f.r.Distribution; d != nil {
		for i, q := range d.Quantiles {
			adj := "–"
			if a := f.r.Adjusted; a != nil && i < len(a.Quantiles) {
				adj = "(" + f.scale.text(a.Quantiles[i].Value) + ")"
			}
			t.Rows = append(t.Rows, []string{"quantile", f.scale.text(q.Value), percentCell(q.P), adj})
		}
	}
	return t
}

// caseOf finds the sized case of a scenario.
func caseOf(p *result.Plan, name string) *result.Case {
	for i := range p.Size.Cases {
		if p.Size.Cases[i].Scenario == name {
			return &p.Size.Cases[i]
		}
	}
	return nil
}
