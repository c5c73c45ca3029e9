package plan

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/plan/result"
	"footing/power"
)

// assuranceLimit is the largest first group that a search for an assurance target considers.
const assuranceLimit = 1_000_000

// enumeratedLimit is the same for a test whose power is a sum over all tables.
const enumeratedLimit = 4000

// assurance averages power over the distributions of the effect and lets the assurance target decide where it asks for more.
func (s *sizer) assurance() {
	r := s.built
	out := &result.Assurance{Target: s.file.Target.Assurance, Uses: s.usedWords(), Curve: []result.AssurancePoint{}}
	s.out.Assurance = out
	if r.Unadjusted == nil {
		out.Why = "there is no distribution of the effect to average power over"
		return
	}
	a := power.Assurer{Design: s.design, Sign: s.sign}
	unadjusted, adjusted := s.scaled(r.Unadjusted), s.scaled(r.Adjusted)
	out.Ceiling = number(a.Ceiling(unadjusted))
	used := unadjusted
	if adjusted != nil {
		out.CeilingAdj = number(a.Ceiling(adjusted))
		if r.UsesAdjusted {
			used = adjusted
		}
	}
	if out.Target != nil {
		limit := assuranceLimit
		if s.design.Info().Saw {
			limit = enumeratedLimit
		}
		n, err := a.NForAssurance(used, *out.Target, limit)
		if err != nil {
			out.OutOfReach = err.Error()
		} else {
			groups := s.design.Groups(n)
			out.NForTarget = nOf(groups)
			if ch := s.out.Chosen; ch != nil && n > ch.N.Groups[0] {
				ch.Basis = "assurance"
				s.take(groups)
			}
		}
	}
	if ch := s.out.Chosen; ch != nil {
		v := s.averages(a, []int{ch.N.Groups[0]}, unadjusted, adjusted)[0]
		out.AtChosen, out.AtChosenAdj = number(v.Assurance), v.Adjusted
		out.ExpectedPower = fmt.Sprintf("averaged over what the next setting may hold, the chance of success is %s and can't exceed %s", percentWhole(v.Assurance), percentWhole(*out.Ceiling))
	}
	if !s.lean {
		out.Curve = s.averages(a, s.sizes(curvePointsOfN), unadjusted, adjusted)
	}
}

func percentWhole(p float64) string { return fmt.Sprintf("%.0f%%", 100*p) }

// averages is the assurance at several sizes, in parallel; each size is computed by itself, so that the answer does not depend on the cores.
func (s *sizer) averages(a power.Assurer, ns []int, unadjusted, adjusted power.Effects) []result.AssurancePoint {
	out := make([]result.AssurancePoint, len(ns))
	num.Chunks(len(ns), func(i int) {
		v := a.At(ns[i], unadjusted, adjusted)
		out[i] = result.AssurancePoint{N: ns[i], Total: nOf(s.design.Groups(ns[i])).Total, Assurance: v[0].Value}
		if adjusted != nil {
			out[i].Adjusted = number(v[1].Value)
		}
	})
	return out
}

// curvePointsOfN is how many sizes the assurance curve and the panel's grid have; they share them.
const curvePointsOfN = 22

// sizes are first groups spread over the axis that curves share: evenly in the square root, from the least to twice what the plan needs, the chosen one among them.
func (s *sizer) sizes(points int) []int {
	most, chosen := s.axis()
	// A fiftieth of the axis: nobody reads a curve below that, and the smallest studies take the longest to compute.
	least := float64(max(s.design.Info().MinN, most/50))
	seen := map[int]bool{}
	var out []int
	add := func(n int) {
		if !seen[n] {
			seen[n] = true
			out = append(out, n)
		}
	}
	for i := 0; i < points; i++ {
		x := math.Sqrt(least) + (math.Sqrt(float64(most))-math.Sqrt(least))*float64(i)/float64(points-1)
		n := int(math.Round(x * x))
		if chosen > 0 && n > chosen {
			add(chosen)
		}
		add(max(n, int(least)))
	}
	return out
}

// axis is the largest first group drawn, and the chosen one.
func (s *sizer) axis() (most, chosen int) {
	if ch := s.out.Chosen; ch != nil {
		chosen = ch.N.Groups[0]
	}
	most = chosen * 2
	for _, c := range s.out.Cases {
		if c.N != nil && chosen == 0 {
			most = max(most, c.N.Groups[0]*3/2)
		}
	}
	if most == 0 {
		most = 500
	}
	return max(most, s.design.Info().MinN+40), chosen
}
