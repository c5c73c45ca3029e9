package reports

import (
	"math"
	"slices"
)

// need draws the people that each effect needs under the density, on a logarithmic axis; it gives the place of the
// lower edge.
func (f *nextStudy) need(base float64) float64 {
	lo, hi := f.needLo, f.needHi
	top := base + 34
	used := 0.0
	if f.chanceAt(f.scale.NoEffect) != nil && len(f.r.Curve) > 1 {
		used = 40
	}
	top += used
	bottom := top + 148
	y := axis{Lo: lo, Hi: hi, A: bottom, B: top, Log: true}
	f.s.add(label(0, top-12, groupWords(f.p)+" for "+percentText(f.p.Size.Study.PowerTarget)+" power", inkSoft, 11))
	for _, t := range countTicks(lo, hi, 7) {
		ty := y.at(t.Value)
		f.s.add(line(f.x.A, ty, f.x.B, ty, inkLine, 1), label(f.x.A-6, ty+4, t.Text, inkSoft, 11).end())
	}
	f.noSize(top, bottom)
	f.needCurve(y)
	f.s.add(line(f.x.A, bottom, f.x.B, bottom, inkFaint, 1))
	none := f.x.at(f.scale.NoEffect)
	f.s.add(line(none, top, none, bottom, inkSoft, 1))
	if c := f.p.Size.Chosen; c != nil && firstGroup(&c.N) > 0 {
		n := float64(firstGroup(&c.N))
		if n >= lo && n <= hi {
			py := y.at(n)
			f.s.add(line(f.x.A, py, f.x.B, py, inkPlan, 1.2).dash("4 3"))
			text := "planned " + wholeText(firstGroup(&c.N))
			if f.scale.HigherBetter {
				f.s.add(label(f.x.B, py-5, text, inkPlan, 12).bold().end())
			} else {
				f.s.add(label(f.x.A+4, py-5, text, inkPlan, 12).bold())
			}
		}
	}
	f.needMarks(base, y)
	return bottom
}

// needRange is the stretch of the size axis: from a third of the least size of a scenario to three times the largest.
func (f *nextStudy) needRange() (lo, hi float64) {
	lo, hi = math.Inf(1), 0
	for _, c := range f.p.Size.Cases {
		if n := firstGroup(c.N); n > 0 {
			lo, hi = math.Min(lo, float64(n)), math.Max(hi, float64(n))
		}
	}
	if c := f.p.Size.Chosen; c != nil && firstGroup(&c.N) > 0 {
		n := float64(firstGroup(&c.N))
		lo, hi = math.Min(lo, n), math.Max(hi, math.Min(n*8, hi))
		hi = math.Max(hi, n)
	}
	if hi == 0 {
		lo, hi = 10, 1000
	}
	return math.Max(2, lo/3), math.Min(hi*3, 1e7)
}

// noSize hatches the effects that no size can show.
func (f *nextStudy) noSize(top, bottom float64) {
	curve := f.p.Size.NeedCurve
	for i := 0; i < len(curve); i++ {
		if curve[i].N != nil {
			continue
		}
		j := i
		for j+1 < len(curve) && curve[j+1].N == nil {
			j++
		}
		a, b := curve[i].Effect, curve[j].Effect
		if i == 0 {
			a = f.x.Lo
		}
		if j == len(curve)-1 {
			b = f.x.Hi
		}
		if none := f.scale.NoEffect; math.Abs(a-none) < 0.08*(f.x.Hi-f.x.Lo) {
			a = none
		} else if math.Abs(b-none) < 0.08*(f.x.Hi-f.x.Lo) {
			b = none
		}
		xa, xb := f.x.cut(a), f.x.cut(b)
		if xb-xa > 3 {
			f.s.add(hatch(xa, top, xb-xa, bottom-top, 7, inkFaint).faded(0.55))
			text := "no size exists"
			w := textWidth(text, 11, false)
			if xb-xa > w+12 {
				m := (xa + xb) / 2
				f.s.add(rect(m-w/2-4, (top+bottom)/2-10, w+8, 17, inkPaper), label(m, (top+bottom)/2+3, text, inkSoft, 11).middle())
			}
		}
		i = j
	}
}

func (f *nextStudy) needCurve(y axis) {
	var run []point
	flush := func() {
		if len(run) > 1 {
			f.s.add(path(run, inkPlan, 1.8))
		}
		run = nil
	}
	for _, n := range f.p.Size.NeedCurve {
		if n.N == nil || *n.N < y.Lo || *n.N > y.Hi || !f.x.holds(n.Effect) {
			flush()
			continue
		}
		run = append(run, point{f.x.at(n.Effect), y.at(*n.N)})
	}
	flush()
}

// needMarks drop each scenario's line to the curve and write its size there: on the open side of the curve, or below
// it where two would meet.
func (f *nextStudy) needMarks(base float64, y axis) {
	side := 1.0
	if !f.scale.HigherBetter {
		side = -1
	}
	scenarios := f.shownScenarios()
	if side < 0 {
		slices.Reverse(scenarios)
	}
	var cluster []needMark
	for _, s := range scenarios {
		c := caseOf(f.p, s.Name)
		if c == nil || c.N == nil || firstGroup(c.N) == 0 {
			continue
		}
		m := needMark{x: f.x.at(s.Effect), y: y.cut(float64(firstGroup(c.N))), text: wholeText(firstGroup(c.N)), ink: f.pens[s.Name].ink}
		f.s.add(line(m.x, base, m.x, m.y, m.ink, 1).dash("2 3"))
		if len(cluster) > 0 && (math.Abs(m.x-cluster[len(cluster)-1].x) > 36 || math.Abs(m.y-cluster[len(cluster)-1].y) > 26) {
			f.markCluster(cluster, side)
			cluster = nil
		}
		cluster = append(cluster, m)
	}
	f.chanceLabels(base)
	f.markCluster(cluster, side)
}

type needMark struct {
	x, y float64
	text string
	ink  ink
}

// markCluster writes the sizes of marks that stand close together: one or two beside the curve, more as a stack on
// its open side, in the order of the marks.
func (f *nextStudy) markCluster(ms []needMark, side float64) {
	write := func(m needMark, x, y float64, end bool) {
		e := label(x, y, m.text, m.ink, 11.5).bold()
		if end {
			e = e.end()
		}
		w := textWidth(m.text, 11.5, true)
		left := x - 1
		if end {
			left = x - w - 1
		}
		f.s.add(rect(left, y-10, w+2, 13, inkPaper).faded(0.8), e)
	}
	for i, m := range ms {
		switch {
		case i == 0 && len(ms) > 1:
			write(m, m.x-side*7, m.y+14, side > 0)
		case len(ms) <= 2:
			write(m, m.x+side*7, m.y-6, side < 0)
		default:
			last := ms[len(ms)-1]
			write(m, last.x+side*8, last.y-6-13*float64(len(ms)-1-i), side < 0)
		}
	}
	for _, m := range ms {
		f.s.add(circle(m.x, m.y, 4, m.ink))
	}
}
