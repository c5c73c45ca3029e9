package edition

import (
	"fmt"
	"math"
	"path/filepath"
	"strings"

	"footing/plan/result"
)

// Rules are the revision rules of a plan. With none of them set the plan's own target stands in for them: assurance
// where the plan has such a target, else power.
type Rules struct {
	AssuranceBelow *float64 // assurance of the frozen n under the new evidence
	PowerBelow     *float64 // power of the frozen n at the scenario's new effect
	NMovesBy       float64  // share; 0: no such rule
	TauGrowsBy     float64  // share; 0: no such rule
	EffectCrosses  bool     // the pooled effect crosses the smallest worthwhile effect
	TargetOf       string   // "assurance" or "power": set when the rule is the plan's own target
}

// Frozen is what the frozen size achieves under the new evidence; nil where it can't be said, with Why.
type Frozen struct {
	Power, Assurance *float64
	Why              string
}

// Compare says what changed from edition a to b, and which revision rule is triggered. b may be a run that is not kept
// (Number 0). history are the editions for the drawn history, in order.
func Compare(a, b *Edition, rules Rules, frozen Frozen, history []*Edition) *result.Comparison {
	c := &result.Comparison{Schema: "footing/compare/1", Plan: filepath.Base(b.Plan.File), From: a.Ref(), To: b.Ref(),
		Added: []result.StudyChange{}, Dropped: []result.StudyChange{}, Changed: []result.StudyChange{}, Rules: []result.RuleOutcome{}}
	x, y := studies(a.Result), studies(b.Result)
	pairs, gone, come := matchStudies(x, y)
	for _, i := range gone {
		c.Dropped = append(c.Dropped, result.StudyChange{Study: x[i].Study, Place: x[i].Place, Cells: []result.ValueChange{}})
	}
	for _, j := range come {
		c.Added = append(c.Added, result.StudyChange{Study: y[j].Study, Place: y[j].Place, Cells: []result.ValueChange{}})
	}
	inOrder := make(map[int]int, len(pairs))
	for _, p := range pairs {
		inOrder[p[1]] = p[0]
	}
	for j := range y {
		if i, ok := inOrder[j]; ok {
			if cells := change(&x[i], &y[j]); len(cells) > 0 {
				c.Changed = append(c.Changed, result.StudyChange{Study: y[j].Study, Place: y[j].Place, Cells: cells})
			}
		}
	}
	c.Options = options(a.Options, b.Options)
	c.Figures = figures(a.Result, b.Result)
	if ch := a.Result.Size.Chosen; ch != nil {
		n := ch.N
		c.FrozenN, c.FrozenPower, c.FrozenAssurance = &n, frozen.Power, frozen.Assurance
	}
	judge(c, a.Result, b.Result, rules, frozen)
	c.History = points(history, b)
	c.Line = line(c, a.Result, b.Result)
	return c
}

func studies(p *result.Plan) []result.Study {
	if p.Pool == nil {
		return nil
	}
	return p.Pool.Studies
}

func percent(x float64) string { return fmt.Sprintf("%.0f%%", 100*x) }

// judge applies the revision rules.
func judge(c *result.Comparison, a, b *result.Plan, r Rules, frozen Frozen) {
	say := func(rule, text string, triggered bool) {
		c.Rules = append(c.Rules, result.RuleOutcome{Rule: rule, Text: text, Triggered: triggered})
		c.Triggered = c.Triggered || triggered
	}
	floor := func(what string, limit, have *float64) {
		if limit == nil {
			return
		}
		rule := fmt.Sprintf("%s of the frozen n below %s", what, percent(*limit))
		if r.TargetOf != "" {
			rule += " (the plan's own target)"
		}
		switch {
		case have != nil:
			// what was rounded up to a whole n is not below its own target by rounding noise
			say(rule, "it is "+percent(*have), *have < *limit-1e-9)
		case a.Size.Chosen == nil:
			say(rule, "the earlier edition has no size", false)
		default:
			say(rule, "it can't be said: "+frozen.Why, true)
		}
	}
	floor("assurance", r.AssuranceBelow, frozen.Assurance)
	floor("power", r.PowerBelow, frozen.Power)
	if r.NMovesBy > 0 {
		judgeN(a, b, r.NMovesBy, say)
	}
	if r.EffectCrosses {
		judgeCrossing(a, b, say)
	}
	if r.TauGrowsBy > 0 {
		judgeTau(a, b, r.TauGrowsBy, say)
	}
}

type sayRule func(rule, text string, triggered bool)

func judgeN(a, b *result.Plan, by float64, say sayRule) {
	rule := "required n moves by " + percent(by)
	x, y := a.Size.Chosen, b.Size.Chosen
	switch {
	case x == nil && y == nil:
		say(rule, "neither has a size", false)
	case x == nil:
		say(rule, fmt.Sprintf("there was none, now it is %d", y.N.Total), true)
	case y == nil:
		say(rule, "no size exists any more", true)
	case x.N.Total == y.N.Total:
		say(rule, fmt.Sprintf("it is %d as before", y.N.Total), false)
	default:
		move := float64(y.N.Total)/float64(x.N.Total) - 1
		say(rule, fmt.Sprintf("it moved from %d to %d (%+.0f%%)", x.N.Total, y.N.Total, 100*move), math.Abs(move) >= by-1e-12)
	}
}

func judgeCrossing(a, b *result.Plan, say sayRule) {
	const rule = "pooled effect crosses the smallest worthwhile effect"
	if a.Pool == nil || b.Pool == nil || a.Pool.Random.Estimate == nil || b.Pool.Random.Estimate == nil || b.Range == nil || b.Range.SmallestWorthwhile == nil {
		say(rule, "one of the two is not given", false)
		return
	}
	limit := b.Range.SmallestWorthwhile.Effect
	was, is := *a.Pool.Random.Estimate >= limit, *b.Pool.Random.Estimate >= limit
	if was == is {
		say(rule, "it did not", false)
		return
	}
	say(rule, "it did", true)
}

func judgeTau(a, b *result.Plan, by float64, say sayRule) {
	rule := "tau grows by " + percent(by)
	x, y := tau(a), tau(b)
	switch {
	case x == nil || y == nil:
		say(rule, "one of the two is not given", false)
	case *x == 0:
		say(rule, fmt.Sprintf("it was 0, now it is %.3f", *y), *y > 0)
	default:
		grown := *y / *x - 1
		say(rule, fmt.Sprintf("it went from %.3f to %.3f (%+.0f%%)", *x, *y, 100*grown), grown >= by-1e-12)
	}
}

// points is the drawn history up to and with b.
func points(history []*Edition, b *Edition) []result.HistoryPoint {
	out := []result.HistoryPoint{}
	for _, e := range history {
		if b.Number == 0 || e.Number < b.Number {
			out = append(out, point(e))
		}
	}
	return append(out, point(b))
}

func point(e *Edition) result.HistoryPoint {
	h := result.HistoryPoint{Edition: e.Ref()}
	if p := e.Result.Pool; p != nil {
		h.K, h.Estimate = p.K, p.Random.Estimate
		if iv := p.Random.Interval; iv != nil {
			h.Lower, h.Upper = &iv.Lower, &iv.Upper
		}
	}
	if c := e.Result.Size.Chosen; c != nil {
		n, enrol := c.N, c.ToEnrol
		h.N, h.ToEnrol = &n, &enrol
	}
	return h
}

// line is the comparison in one line.
func line(c *result.Comparison, a, b *result.Plan) string {
	var parts []string
	count := func(n int, what string) {
		if n == 1 {
			parts = append(parts, "1 study "+what)
		} else if n > 1 {
			parts = append(parts, fmt.Sprintf("%d studies %s", n, what))
		}
	}
	count(len(c.Added), "added")
	count(len(c.Dropped), "dropped")
	count(len(c.Changed), "changed")
	if n := len(c.Options); n == 1 {
		parts = append(parts, "1 option changed")
	} else if n > 1 {
		parts = append(parts, fmt.Sprintf("%d options changed", n))
	}
	if len(parts) == 0 {
		parts = append(parts, "nothing changed in studies and options")
	}
	out := strings.Join(parts, ", ")
	for _, f := range c.Figures {
		from, to := f.From, f.To
		if f.FromShown != nil && f.ToShown != nil {
			from, to = f.FromShown, f.ToShown
		}
		if f.Name == "pooled" && from != nil && to != nil {
			if x, y := fmt.Sprintf("%.2f", *from), fmt.Sprintf("%.2f", *to); x != y {
				out += "; average " + x + " to " + y
			} else {
				out += "; average " + x + " as before"
			}
		}
	}
	x, y := a.Size.Chosen, b.Size.Chosen
	switch {
	case x != nil && y != nil && x.ToEnrol.Total == y.ToEnrol.Total:
		out += fmt.Sprintf("; to enrol %d as before", x.ToEnrol.Total)
	case x != nil && y != nil:
		out += fmt.Sprintf("; to enrol %d to %d (%+.0f%%)", x.ToEnrol.Total, y.ToEnrol.Total, 100*(float64(y.ToEnrol.Total)/float64(x.ToEnrol.Total)-1))
	case x != nil:
		out += fmt.Sprintf("; to enrol was %d, now no size exists", x.ToEnrol.Total)
	}
	if c.Triggered {
		var which []string
		for _, r := range c.Rules {
			if r.Triggered {
				which = append(which, r.Rule)
			}
		}
		return out + "; revision rule triggered: " + strings.Join(which, "; ")
	}
	return out + "; no revision rule triggered"
}
