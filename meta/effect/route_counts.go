package effect

import (
	"fmt"
	"math"

	"footing/internal/finding"
)

// fromCounts: a 2x2 table, events a of n1 and c of n2, with b = n1 - a and d = n2 - c.
//
// Log odds ratio: ln(ad/bc), variance 1/a + 1/b + 1/c + 1/d (Woolf 1955). Log risk ratio: ln[(a/n1)/(c/n2)], variance 1/a - 1/n1 + 1/c - 1/n2 (Katz et
// al. 1978). Risk difference: a/n1 - c/n2, variance ab/n1^3 + cd/n2^3. A table with a zero cell has 1/2 added to all four cells, that table only
// (Gart & Zweifel 1967). A table without events in both arms, or with events in all, carries no information on a ratio.
func fromCounts(w *work) {
	a, n1, ok1 := w.arm(w.r.Treatment)
	c, n2, ok2 := w.arm(w.r.Control)
	if !ok1 || !ok2 || w.refused {
		return
	}
	w.n = [2]float64{n1, n2}
	w.table = &Table{EventsTreatment: a, TotalTreatment: n1, EventsControl: c, TotalControl: n2}
	b, d := n1-a, n2-c
	ratio := w.opt.Scale != RiskDifference
	cell := w.r.Treatment.Events
	if ratio && (a == 0 && c == 0 || b == 0 && d == 0) {
		what := "no events in either group: the row says nothing about a ratio"
		if b == 0 {
			what = "events in all people of both groups: the row says nothing about a ratio"
		}
		w.refuse(cell, "no-information-on-ratio", what, "it is left out of a ratio; a risk difference could use it")
		w.findings[len(w.findings)-1].Severity = finding.Warning
		return
	}
	if a == 0 || b == 0 || c == 0 || d == 0 {
		if !ratio && (a == 0 || b == 0) && (c == 0 || d == 0) {
			w.refuse(cell, "variance-not-positive", "both groups are without events, or with events only: the risk difference has variance 0, which is no weight", "the row is left out")
			w.findings[len(w.findings)-1].Severity = finding.Warning
			return
		}
		if ratio {
			a, b, c, d = a+0.5, b+0.5, c+0.5, d+0.5
			n1, n2 = n1+1, n2+1
			w.note("a cell of the table is zero: 1/2 added to each of its four cells")
		}
	}
	switch w.opt.Scale {
	case LogOddsRatio:
		w.give(math.Log(a)+math.Log(d)-math.Log(b)-math.Log(c), 1/a+1/b+1/c+1/d,
			fmt.Sprintf("ln((%s/%s)/(%s/%s)); variance 1/%s + 1/%s + 1/%s + 1/%s", plain(a), plain(b), plain(c), plain(d), plain(a), plain(b), plain(c), plain(d)))
	case LogRiskRatio:
		w.give(math.Log(a/n1)-math.Log(c/n2), 1/a-1/n1+1/c-1/n2,
			fmt.Sprintf("ln((%s/%s)/(%s/%s)); variance 1/%s - 1/%s + 1/%s - 1/%s", plain(a), plain(n1), plain(c), plain(n2), plain(a), plain(n1), plain(c), plain(n2)))
	case RiskDifference:
		w.give(a/n1-c/n2, a*b/(n1*n1*n1)+c*d/(n2*n2*n2),
			fmt.Sprintf("%s/%s - %s/%s; variance %s*%s/%s^3 + %s*%s/%s^3", plain(a), plain(n1), plain(c), plain(n2), plain(a), plain(b), plain(n1), plain(c), plain(d), plain(n2)))
	}
}

// arm reads the events and people of one group; a printed proportion stands in for the events.
func (w *work) arm(arm Arm) (events, people float64, ok bool) {
	if !arm.N.Given || !arm.Events.Given && !arm.Proportion.Given {
		return 0, 0, false
	}
	if !w.need(arm.N) {
		return 0, 0, false
	}
	people = arm.N.Value
	if !(people >= 1) || people != math.Trunc(people) || people > 1e12 {
		w.refuse(arm.N, "people-not-whole", fmt.Sprintf("%s is no number of people", arm.N.text()), "give the number of people analysed, a whole number")
		return 0, 0, false
	}
	source := arm.Events
	if arm.Events.Given {
		if !w.need(arm.Events) {
			return 0, 0, false
		}
		events = arm.Events.Value
	} else {
		if !w.need(arm.Proportion) {
			return 0, 0, false
		}
		source = arm.Proportion
		events = math.Round(arm.Proportion.Value * people)
		w.note("events from the proportion %s of %s people, rounded to %s", arm.Proportion.text(), arm.N.text(), plain(events))
	}
	switch {
	case events > people:
		w.refuse(source, "events-above-total", fmt.Sprintf("%s events among %s people", source.text(), arm.N.text()), "give the people with the event, at most all of the group")
	case !(events >= 0):
		w.refuse(source, "events-negative", fmt.Sprintf("%s events", source.text()), "give the number of people with the event")
	case events != math.Trunc(events):
		w.refuse(source, "events-not-whole", fmt.Sprintf("%s is no whole number of events", source.text()), "give the number of people with the event")
	default:
		return events, people, true
	}
	return 0, 0, false
}
