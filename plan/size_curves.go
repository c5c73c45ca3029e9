package plan

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/plan/result"
	"footing/power"
)

// curves tabulates power over n for every scenario that has a size, and the n that each effect needs.
func (s *sizer) curves() {
	ns := s.sizes(48)
	if s.design.Info().Saw {
		ns = s.sizes(24)
	}
	for _, c := range s.out.Cases {
		if c.N != nil {
			s.out.Curves = append(s.out.Curves, result.PowerCurve{Scenario: c.Scenario, Points: make([]result.PowerPoint, len(ns))})
		}
	}
	num.Chunks(len(ns), func(i int) {
		quick := power.Quick(s.design, ns[i])
		at := 0
		for _, c := range s.out.Cases {
			if c.N != nil {
				s.out.Curves[at].Points[i] = result.PowerPoint{N: ns[i], Total: nOf(s.design.Groups(ns[i])).Total, Power: quick(c.Effect / s.unit).Any()}
				at++
			}
		}
	})
	s.needCurve()
}

// needLimit is the largest n that the need curve gives; beyond it the curve has left any drawing.
const needLimit = 1e6

// needCurve is the n of the first group that each effect of the drawn range needs.
func (s *sizer) needCurve() {
	lo, hi := 0.0, 0.0
	if c := s.built.Curve; len(c) > 1 {
		lo, hi = c[0].Effect, c[len(c)-1].Effect
	} else {
		for _, sc := range s.built.Scenarios {
			lo, hi = math.Min(lo, sc.Effect*1.5), math.Max(hi, sc.Effect*1.5)
		}
	}
	const points = 49
	s.out.NeedCurve = make([]result.NeedPoint, points)
	num.Chunks(points, func(i int) {
		x := lo + (hi-lo)*float64(i)/(points-1)
		p := result.NeedPoint{Effect: x}
		if s.sign*x > 0 && s.impossible(s.set, x) == "" && s.design.Guess(x/s.unit, s.set.target) < s.needMost() {
			// Whole sizes are as good in the drawing, but for the smallest, where their steps would show.
			size := power.WholeSizeFor
			if s.design.Guess(x/s.unit, s.set.target) < 40 {
				size = power.SizeFor
			}
			if z, err := size(s.design, x/s.unit, s.set.target); err == nil {
				if p.N = number(z.Continuous); p.N == nil {
					p.N = number(float64(z.N))
				}
			}
		}
		s.out.NeedCurve[i] = p
	})
}

// needMost bounds the need curve; an exact test on counts is not enumerated beyond a few thousand for a drawing.
func (s *sizer) needMost() float64 {
	if s.design.Info().Saw {
		return 2000
	}
	return needLimit
}

// grid tabulates power and assurance for the interactive panel.
func (s *sizer) grid() {
	ch := s.out.Chosen
	if ch == nil || s.design.Info().Saw {
		return
	}
	far := 0.0
	for _, sc := range s.built.Scenarios {
		far = math.Max(far, s.sign*sc.Effect)
	}
	g := &result.Grid{Ns: s.sizes(curvePointsOfN)}
	const effects = 21
	for i := 0; i < effects; i++ {
		x := s.sign * far * 1.4 * (0.04 + 0.96*float64(i)/(effects-1))
		if s.impossible(s.set, x) == "" {
			g.Effects = append(g.Effects, x)
		}
	}
	if s.sign < 0 {
		for i, j := 0, len(g.Effects)-1; i < j; i, j = i+1, j-1 {
			g.Effects[i], g.Effects[j] = g.Effects[j], g.Effects[i]
		}
	}
	if len(g.Effects) < 2 || len(g.Ns) < 2 {
		return
	}
	s.layers(g)
	worst := s.gridError(g)
	g.AccuracyValue = worst
	g.Accuracy = fmt.Sprintf("read between computed points: power within %.1f points of 100 of the exact value (measured at the middles of the grid's cells)", 100*worst+0.05)
	s.out.Grid = g
}

// layers computes the grid for the plan's own setting and for others that readers ask about.
func (s *sizer) layers(g *result.Grid) {
	type setting struct {
		alpha float64
		sides int
		ratio power.Allocation
	}
	own := setting{s.set.study.Alpha, s.set.study.Sides, s.set.study.Allocation}
	list := []setting{own}
	other := power.Allocation{Treatment: 2, Control: 1}
	if own.ratio.String() != "1:1" {
		other = power.Allocation{Treatment: 1, Control: 1}
	}
	for _, ratio := range []power.Allocation{own.ratio, other} {
		for _, a := range []setting{{own.alpha, own.sides, ratio}, {0.05, 2, ratio}, {0.01, 2, ratio}} {
			known := false
			for _, l := range list {
				known = known || l.alpha == a.alpha && l.sides == a.sides && l.ratio.String() == a.ratio.String()
			}
			if !known {
				list = append(list, a)
			}
		}
	}
	g.Layers = make([]result.GridLayer, len(list))
	num.Chunks(len(list), func(i int) {
		set := s.set
		set.study.Alpha, set.study.Sides, set.study.Allocation = list[i].alpha, list[i].sides, list[i].ratio
		l := result.GridLayer{Alpha: set.study.Alpha, Sides: set.study.Sides, Allocation: set.study.Allocation.String(), Assurance: []float64{}, AssuranceAdjusted: []float64{}}
		d, _, err := s.resolve(set)
		if err != nil {
			return
		}
		for range g.Effects {
			l.Power = append(l.Power, make([]float64, len(g.Ns)))
		}
		for j, n := range g.Ns {
			quick := power.Quick(d, max(n, d.Info().MinN))
			for k, x := range g.Effects {
				l.Power[k][j] = quick(x / s.unit).Any()
			}
		}
		g.Layers[i] = l
	})
	kept := g.Layers[:0]
	for _, l := range g.Layers {
		if l.Power != nil {
			kept = append(kept, l)
		}
	}
	g.Layers = kept
	s.gridAssurance(g)
}

// gridAssurance gives the plan's own layer the assurance over the same sizes.
func (s *sizer) gridAssurance(g *result.Grid) {
	if s.built.Unadjusted == nil || len(g.Layers) == 0 {
		return
	}
	for _, p := range s.out.Assurance.Curve {
		g.Layers[0].Assurance = append(g.Layers[0].Assurance, p.Assurance)
		if p.Adjusted != nil {
			g.Layers[0].AssuranceAdjusted = append(g.Layers[0].AssuranceAdjusted, *p.Adjusted)
		}
	}
}

// gridError measures what reading between the points costs: straight in the effect and in the square root of n, at the middle of every cell of the plan's own layer.
func (s *sizer) gridError(g *result.Grid) float64 {
	worst := make([]float64, len(g.Ns)-1)
	own := g.Layers[0].Power
	num.Chunks(len(worst), func(j int) {
		low, high := math.Sqrt(float64(g.Ns[j])), math.Sqrt(float64(g.Ns[j+1]))
		n := int(math.Round((low + high) * (low + high) / 4))
		t := (math.Sqrt(float64(n)) - low) / (high - low)
		quick := power.Quick(s.design, n)
		for i := 0; i+1 < len(g.Effects); i++ {
			read := (own[i][j]+own[i+1][j])/2*(1-t) + (own[i][j+1]+own[i+1][j+1])/2*t
			exact := quick((g.Effects[i] + g.Effects[i+1]) / 2 / s.unit).Any()
			worst[j] = math.Max(worst[j], math.Abs(read-exact))
		}
	})
	out := 0.0
	for _, w := range worst {
		out = math.Max(out, w)
	}
	return out
}
