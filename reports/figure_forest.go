package reports

import (
	"fmt"
	"math"
	"sort"

	"footing/plan/result"
)

// Rows of a forest plot: how many stand on one sheet of paper, and from how many on the rows lose their labels.
const (
	forestPage  = 44
	forestDense = 150
)

// ForestFigure draws every pooled study by year under the pooled mean, whose interval runs as a band through all
// rows. Area is weight, shape is risk of bias, a paler fill is lower relevance. From 151 studies on the rows carry
// no labels. Nothing is drawn without a pooled study.
func ForestFigure(p *result.Plan, o ...FigureOption) Figure {
	f := newForest(p, options(o))
	if f == nil {
		return emptyFigure("forest", "What the studies found", "no study could be pooled")
	}
	return f.figure(f.rows, true)
}

// ForestFigures is ForestFigure cut into drawings that each fit a sheet of paper; every one repeats the pooled band.
func ForestFigures(p *result.Plan, o ...FigureOption) []Figure {
	f := newForest(p, options(o))
	if f == nil {
		return []Figure{ForestFigure(p, o...)}
	}
	if f.dense || len(f.rows) <= forestPage {
		return []Figure{f.figure(f.rows, true)}
	}
	pages := (len(f.rows) + forestPage - 1) / forestPage
	each := (len(f.rows) + pages - 1) / pages
	var out []Figure
	for i := 0; i < len(f.rows); i += each {
		g := f.figure(f.rows[i:min(i+each, len(f.rows))], i == 0)
		if i > 0 {
			g.Title += fmt.Sprintf(", rows %d to %d", i+1, min(i+each, len(f.rows)))
		}
		out = append(out, g)
	}
	return out
}

func emptyFigure(name, title, why string) Figure {
	return Figure{Name: name, Title: title, Alt: "No drawing: " + why + ".", empty: why}
}

// forest holds what all sheets of one forest plot share.
type forest struct {
	p       *result.Plan
	pool    *result.Pool
	scale   effectScale
	rows    []result.Study
	x       axis
	o       figureOptions
	dense   bool
	rowH    float64
	columns forestColumns
	heavy   float64        // largest weight
	groups  map[string]int // place of each subgroup in the result; nil without subgroups
}

type forestColumns struct {
	label, year, people, row        float64 // label: its width; others: where they start or end
	plotA, plotB                    float64
	effect, interval, weight        float64
	hasYear, hasPeople, hasInterval bool
}

func newForest(p *result.Plan, o figureOptions) *forest {
	if p.Pool == nil {
		return nil
	}
	f := &forest{p: p, pool: p.Pool, scale: effectScale{p.Pool.Scale}, o: o}
	for _, s := range p.Pool.Studies {
		if s.Used && s.Estimate != nil && s.Interval != nil {
			f.rows = append(f.rows, s)
			if s.Weight != nil {
				f.heavy = math.Max(f.heavy, *s.Weight)
			}
		}
	}
	if len(f.rows) == 0 {
		return nil
	}
	byYear(f.rows)
	f.dense = len(f.rows) > forestDense
	f.bySubgroup()
	f.rowH = 22
	if len(f.rows) > 24 {
		f.rowH = 17
	}
	if f.dense {
		f.rowH = math.Max(0.4, 720/float64(len(f.rows)))
	}
	f.columns = f.layout()
	f.x = f.domain()
	return f
}

// bySubgroup gathers the rows of each subgroup, in the order of the result, where the plan asks for subgroups.
func (f *forest) bySubgroup() {
	if len(f.pool.Subgroups) < 2 || f.dense {
		return
	}
	f.groups = map[string]int{}
	for i, g := range f.pool.Subgroups {
		f.groups[g.Name] = i
	}
	place := func(s result.Study) int {
		if i, ok := f.groups[s.Subgroup]; ok {
			return i
		}
		return len(f.groups)
	}
	sort.SliceStable(f.rows, func(i, j int) bool { return place(f.rows[i]) < place(f.rows[j]) })
}

// byYear orders studies by year, those without one last, and by sheet row within a year.
func byYear(rows []result.Study) {
	key := func(s result.Study) int {
		if s.Year == nil {
			return math.MaxInt
		}
		return *s.Year
	}
	sort.SliceStable(rows, func(i, j int) bool {
		if a, b := key(rows[i]), key(rows[j]); a != b {
			return a < b
		}
		return rows[i].Row < rows[j].Row
	})
}

func (f *forest) layout() forestColumns {
	w := f.o.width()
	if f.dense {
		return forestColumns{label: 40, plotA: 60, plotB: w - 20}
	}
	widest := 60.0
	for _, s := range f.rows {
		widest = math.Max(widest, textWidth(clipRunes(s.Study, 60), 12, false))
	}
	if f.o.narrow {
		l := math.Min(widest, 112)
		return forestColumns{label: l, plotA: l + 8, plotB: w - 44, effect: w}
	}
	c := forestColumns{label: math.Min(widest, 172), hasInterval: true, weight: w, interval: w - 42}
	c.effect = c.interval - 98
	at := c.label + 10
	for _, s := range f.rows {
		c.hasYear = c.hasYear || s.Year != nil
		c.hasPeople = c.hasPeople || s.NTreatment != nil
	}
	if c.hasYear {
		c.year, at = at, at+36
	}
	if c.hasPeople {
		c.people = at + 66
		at = c.people + 6
	}
	c.row = at
	last := 0
	for _, s := range f.rows {
		last = max(last, s.Row)
	}
	c.plotA = at + 10 + textWidth("row "+fmt.Sprint(last), 10.5, false)
	c.plotB = c.effect - 42
	return c
}

// domain covers every estimate, the pooled mean, the interval of the next effect, and intervals up to half the spread
// of the estimates beyond them; longer intervals are cut and end in an arrow.
func (f *forest) domain() axis {
	none := f.scale.NoEffect
	lo, hi := none, none
	cover := func(xs ...float64) {
		for _, x := range xs {
			lo, hi = math.Min(lo, x), math.Max(hi, x)
		}
	}
	for _, s := range f.rows {
		cover(*s.Estimate)
	}
	if i := f.pool.Random.Interval; i != nil {
		cover(i.Lower, i.Upper)
	}
	spread := hi - lo
	if spread == 0 {
		spread = 1
	}
	floor, roof := lo-0.5*spread, hi+0.5*spread
	for _, s := range f.rows {
		cover(math.Max(floor, s.Interval.Lower), math.Min(roof, s.Interval.Upper))
	}
	if i := f.pool.Prediction.Interval; i != nil {
		cover(math.Max(floor, i.Lower), math.Min(roof, i.Upper))
	}
	if w := f.worthwhile(); w != nil {
		cover(w.Effect)
	}
	pad := 0.03 * (hi - lo)
	return axis{Lo: lo - pad, Hi: hi + pad, A: f.columns.plotA, B: f.columns.plotB}
}

func (f *forest) worthwhile() *result.Worthwhile {
	if f.p.Range == nil {
		return nil
	}
	return f.p.Range.SmallestWorthwhile
}

func (f *forest) figure(rows []result.Study, legend bool) Figure {
	s := &scene{W: f.o.width()}
	y := 0.0
	if legend && !f.dense {
		y = f.legend(s)
	}
	top := y + 14
	pooledY := top + 34
	firstRow := pooledY + 40
	heads := f.headings(rows)
	bottom := firstRow + f.rowH*float64(len(rows)) + f.headH()*float64(len(heads)) - f.rowH/2 + 4
	f.backdrop(s, top, pooledY, bottom)
	f.pooledRow(s, top, pooledY)
	down := 0.0
	for i, r := range rows {
		if heads[i] {
			f.groupRow(s, r.Subgroup, firstRow+f.rowH*float64(i)+down+3)
			down += f.headH()
		}
		cy := firstRow + f.rowH*float64(i) + down
		if f.dense {
			f.denseRow(s, r, cy, i == 0 || !sameYear(rows[i-1], r))
		} else {
			f.row(s, r, cy)
		}
	}
	s.H = f.axisLine(s, bottom) + 2
	return Figure{Name: "forest", Title: "What the studies found, by year", Alt: f.alt(), Table: f.table(rows), scene: *s}
}

func sameYear(a, b result.Study) bool {
	return a.Year != nil && b.Year != nil && *a.Year == *b.Year
}

// backdrop draws what runs through all rows: the pooled band, its middle, no effect, the smallest worthwhile effect.
func (f *forest) backdrop(s *scene, top, pooledY, bottom float64) {
	if i := f.pool.Random.Interval; i != nil && f.pool.Random.Estimate != nil {
		a, b := f.x.cut(i.Lower), f.x.cut(i.Upper)
		s.add(rect(a, pooledY-14, b-a, bottom-pooledY+14, inkEvidenceWash))
		m := f.x.at(*f.pool.Random.Estimate)
		s.add(line(m, pooledY-14, m, bottom, inkEvidence, 1))
	}
	none := f.x.at(f.scale.NoEffect)
	s.add(line(none, pooledY-14, none, bottom, inkSoft, 1))
	if w := f.worthwhile(); w != nil && f.x.holds(w.Effect) {
		x := f.x.at(w.Effect)
		s.add(line(x, top+6, x, bottom, inkPlan, 2).dash("3 4"))
		text := "smallest worthwhile " + f.scale.text(w.Effect)
		e := label(x+5, top+10, text, inkPlan, 11)
		if x+5+textWidth(text, 11, false) > f.columns.plotB {
			e = label(x-5, top+10, text, inkPlan, 11).end()
		}
		s.add(e)
	}
}

func (f *forest) axisLine(s *scene, bottom float64) float64 {
	s.add(line(f.x.A, bottom, f.x.B, bottom, inkFaint, 1))
	count := 6
	if f.o.narrow {
		count = 4
	}
	for _, t := range f.x.thin(f.scale.ticks(f.x.Lo, f.x.Hi, count), 11) {
		x := f.x.at(t.Value)
		s.add(line(x, bottom, x, bottom+4, inkFaint, 1), label(x, bottom+17, t.Text, inkSoft, 11).middle())
	}
	words, right := f.scale.direction()
	y := bottom + 33
	room := f.x.B - f.x.A
	short, _ := clipText(words, room, 11, false)
	if right {
		s.add(label(f.x.B, y, short, inkSoft, 11).end())
	} else {
		s.add(label(f.x.A, y, short, inkSoft, 11))
	}
	if rest := f.scale.axisWords(); textWidth(short+rest, 11, false)+24 < room {
		if right {
			s.add(label(f.x.A, y, rest, inkSoft, 11))
		} else {
			s.add(label(f.x.B, y, rest, inkSoft, 11).end())
		}
		return y + 4
	}
	return y + 4
}
