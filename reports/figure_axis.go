package reports

import (
	"math"
	"sort"
)

// axis maps values to a stretch of the scene, straight or by logarithm.
type axis struct {
	Lo, Hi float64 // values at the two ends
	A, B   float64 // their places
	Log    bool
}

// at is the place of a value. Values beyond the ends lie beyond the stretch: the caller cuts.
func (a axis) at(v float64) float64 {
	lo, hi := a.Lo, a.Hi
	if a.Log {
		lo, hi, v = math.Log(lo), math.Log(hi), math.Log(v)
	}
	if hi == lo {
		return (a.A + a.B) / 2
	}
	return a.A + (v-lo)/(hi-lo)*(a.B-a.A)
}

// cut is at, held inside the stretch.
func (a axis) cut(v float64) float64 {
	p := a.at(v)
	lo, hi := math.Min(a.A, a.B), math.Max(a.A, a.B)
	return math.Min(hi, math.Max(lo, p))
}

func (a axis) holds(v float64) bool { return v >= a.Lo && v <= a.Hi }

// tick is a marked value of an axis.
type tick struct {
	Value float64
	Text  string
}

// niceStep is the step of 1, 2 or 5 times a power of ten that gives about count steps over a span.
func niceStep(span float64, count int) float64 {
	raw := span / float64(count)
	power := math.Pow(10, math.Floor(math.Log10(raw)))
	for _, m := range []float64{1, 2, 5, 10} {
		if m*power >= raw*0.72 {
			return m * power
		}
	}
	return 10 * power
}

// linearTicks are round values inside [lo, hi], written with the decimals that the step needs.
func linearTicks(lo, hi float64, count int) []tick {
	if !(hi > lo) {
		return []tick{{lo, effectText(lo)}}
	}
	step := niceStep(hi-lo, count)
	decimals := int(math.Max(0, -math.Floor(math.Log10(step)+1e-9)))
	var out []tick
	for i := math.Ceil(lo/step - 1e-9); i*step <= hi+step*1e-9; i++ {
		out = append(out, tick{i * step, groupDigits(fixed(i*step, decimals))})
	}
	return out
}

// countTicks are round counts on a logarithmic axis: 1, 2 and 5 in each decade, thinned to at most count.
func countTicks(lo, hi float64, count int) []tick {
	for _, set := range [][]float64{{1, 2, 5}, {1, 3}, {1}} {
		var out []tick
		for p := math.Floor(math.Log10(lo)); p <= math.Ceil(math.Log10(hi)); p++ {
			for _, m := range set {
				v := m * math.Pow(10, p)
				if v >= lo*0.999999 && v <= hi*1.000001 && v >= 1 {
					out = append(out, tick{v, groupDigits(fixed(v, 0))})
				}
			}
		}
		if len(out) <= count || len(set) == 1 {
			return out
		}
	}
	return nil
}

// ratioTicks are round ratios for an axis in logarithms; lo and hi are logarithms, and so are the ticks' values.
func ratioTicks(lo, hi float64, count int) []tick {
	sets := [][]float64{
		{0.01, 0.02, 0.05, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1, 1.1, 1.2, 1.3, 1.4, 1.5, 1.6, 1.8, 2, 2.5, 3, 4, 5, 10, 20, 50, 100},
		{0.01, 0.02, 0.05, 0.1, 0.2, 0.4, 0.6, 0.8, 1, 1.25, 1.5, 2, 2.5, 3, 4, 5, 10, 20, 50, 100},
		{0.01, 0.02, 0.03, 0.05, 0.07, 0.1, 0.2, 0.3, 0.5, 0.7, 1, 1.5, 2, 3, 5, 7, 10, 20, 30, 50, 100},
		{0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 50, 100},
		{0.001, 0.01, 0.1, 1, 10, 100, 1000},
	}
	var out []tick
	for _, set := range sets {
		out = out[:0]
		for _, r := range set {
			if l := math.Log(r); l >= lo-1e-9 && l <= hi+1e-9 {
				out = append(out, tick{l, ratioTickText(r)})
			}
		}
		if len(out) <= count {
			break
		}
	}
	if len(out) < 2 { // a narrow or extreme stretch: equal steps of the ratio itself
		out = nil
		for _, t := range linearTicks(math.Exp(lo), math.Exp(hi), count) {
			if t.Value > 0 {
				out = append(out, tick{math.Log(t.Value), t.Text})
			}
		}
	}
	return out
}

// thin leaves ticks out, evenly, until their texts stand apart on an axis.
func (a axis) thin(ts []tick, size float64) []tick {
	for len(ts) > 1 {
		clash := false
		for i := 1; i < len(ts) && !clash; i++ {
			gap := math.Abs(a.at(ts[i].Value) - a.at(ts[i-1].Value))
			clash = gap < (textWidth(ts[i].Text, size, false)+textWidth(ts[i-1].Text, size, false))/2+6
		}
		if !clash {
			break
		}
		var kept []tick
		for i := 0; i < len(ts); i += 2 {
			kept = append(kept, ts[i])
		}
		ts = kept
	}
	return ts
}

func ratioTickText(r float64) string {
	switch {
	case r >= 10 || r == math.Trunc(r):
		return fixed(r, 0)
	case math.Abs(r*10-math.Round(r*10)) < 1e-9:
		return fixed(r, 1)
	case r < 0.01:
		return fixed(r, 3)
	}
	return fixed(r, 2)
}

// spread moves places apart so that neighbours stand at least gap apart inside [lo, hi], as little as it can, keeping
// their order: neighbours that clash are joined into blocks, each centred on the mean of what it holds.
func spread(want []float64, gap, lo, hi float64) []float64 {
	order := make([]int, len(want))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(a, b int) bool { return want[order[a]] < want[order[b]] })
	type block struct {
		sum   float64 // of want minus offset in the block
		n     int
		start float64
	}
	var blocks []block
	place := func(b *block) {
		b.start = b.sum / float64(b.n)
		b.start = math.Max(lo, math.Min(b.start, hi-gap*float64(b.n-1)))
	}
	for _, i := range order {
		b := block{sum: want[i], n: 1}
		place(&b)
		blocks = append(blocks, b)
		for len(blocks) > 1 {
			p, q := &blocks[len(blocks)-2], blocks[len(blocks)-1]
			if p.start+gap*float64(p.n) <= q.start {
				break
			}
			p.sum += q.sum - gap*float64(p.n*q.n)
			p.n += q.n
			place(p)
			blocks = blocks[:len(blocks)-1]
		}
	}
	out := make([]float64, len(want))
	k := 0
	for _, b := range blocks {
		for j := 0; j < b.n; j++ {
			out[order[k]] = b.start + gap*float64(j)
			k++
		}
	}
	return out
}
