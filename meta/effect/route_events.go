package effect

import (
	"fmt"
	"math"
)

// fromObservedExpected: ln HR = (O - E)/V with variance 1/V, O - E of the treatment group (Peto; Parmar, Torri & Stewart 1998).
func fromObservedExpected(w *work) {
	o, v := w.r.ObservedMinusExpected, w.r.LogRankVariance
	if !o.Given || !v.Given || !w.need(o, v) {
		return
	}
	if !(v.Value > 0) {
		w.refuse(v, "variance-not-positive", fmt.Sprintf("a log-rank variance of %s is no weight", v.text()), "check the cell")
		return
	}
	w.keepPeople()
	w.give(o.Value/v.Value, 1/v.Value, fmt.Sprintf("%s/%s; variance 1/%s", o.text(), v.text(), v.text()))
}

// fromLogRank: the log-rank chi-square with the events: O - E = sqrt(chi2 V), V = D n1 n2/(n1 + n2)^2 (Tierney et al. 2007), signed by the direction. With a benefit
// events are fewer, so that a direction in words gives a negative ln HR for the treatment.
func fromLogRank(w *work) {
	x, d := w.r.LogRank, w.r.EventsTotal
	if !x.Given || !d.Given || !w.need(x, d) {
		return
	}
	if !(x.Value >= 0) || !(d.Value > 0) {
		w.refuse(x, "log-rank-out-of-range", fmt.Sprintf("a chi-square of %s with %s events is impossible", x.text(), d.text()), "check both cells")
		return
	}
	s, ok := w.signed(x, "log-rank")
	if !ok {
		return
	}
	share := 0.25
	if w.r.Treatment.N.Given && w.r.Control.N.Given {
		n1, n2, ok := w.people(1)
		if !ok {
			return
		}
		share = n1 * n2 / ((n1 + n2) * (n1 + n2))
	} else {
		w.note("group sizes are not given: equal groups are assumed")
	}
	v := d.Value * share
	w.give(s*math.Sqrt(x.Value/v), 1/v, fmt.Sprintf("sqrt(%s/%s), signed; variance 1/%s, V = %s x %s", x.text(), plain(v), plain(v), d.text(), plain(share)))
}

// fromMedianTimes: two median survival times under constant hazards: ln HR = ln(median of control/median of treatment), variance (1/O1 + 1/O2)/(ln 2)^2.
func fromMedianTimes(w *work) {
	t, c := w.r.Treatment, w.r.Control
	if !t.Median.Given || !c.Median.Given || !t.Events.Given || !c.Events.Given || !w.need(t.Median, c.Median, t.Events, c.Events) {
		return
	}
	if !(t.Median.Value > 0 && c.Median.Value > 0 && t.Events.Value > 0 && c.Events.Value > 0) {
		w.refuse(t.Median, "median-time-not-positive", "median times and events must be above 0", "check the cells "+joinCells(w.cells))
		return
	}
	w.keepPeople()
	w.note("from two median times: right if both hazards are constant")
	w.give(math.Log(c.Median.Value/t.Median.Value), (1/t.Events.Value+1/c.Events.Value)/(math.Ln2*math.Ln2), fmt.Sprintf("ln(%s/%s); variance (1/%s + 1/%s)/(ln 2)^2", c.Median.text(), t.Median.text(), t.Events.text(), c.Events.text()))
}

// fromPersonTime: events and person-time of two groups: log rate ratio with variance 1/e1 + 1/e2, rate difference with variance e1/t1^2 + e2/t2^2 (Rothman & Greenland). A group without
// events has 1/2 added to both.
func fromPersonTime(w *work) {
	e1, t1, ok1 := w.timed(w.r.Treatment)
	e2, t2, ok2 := w.timed(w.r.Control)
	if !ok1 || !ok2 {
		return
	}
	w.keepPeople()
	if w.opt.Scale == RateDifference {
		w.give(e1/t1-e2/t2, e1/(t1*t1)+e2/(t2*t2), fmt.Sprintf("%s/%s - %s/%s", plain(e1), plain(t1), plain(e2), plain(t2)))
		return
	}
	if e1 == 0 && e2 == 0 {
		w.refuse(w.r.Treatment.Events, "no-information-on-ratio", "no events in either group: the row says nothing about a ratio", "it is left out of a ratio; a rate difference could use it")
		return
	}
	if e1 == 0 || e2 == 0 {
		e1, e2 = e1+0.5, e2+0.5
		w.note("a group without events: 1/2 added to the events of both")
	}
	w.give(math.Log(e1/t1)-math.Log(e2/t2), 1/e1+1/e2, fmt.Sprintf("ln((%s/%s)/(%s/%s)); variance 1/%s + 1/%s", plain(e1), plain(t1), plain(e2), plain(t2), plain(e1), plain(e2)))
}

// timed reads events and person-time of one group; a printed rate stands in for the events.
func (w *work) timed(a Arm) (events, time float64, ok bool) {
	if !a.PersonTime.Given || !a.Events.Given && !a.Rate.Given || !w.need(a.PersonTime) {
		return 0, 0, false
	}
	time = a.PersonTime.Value
	source := a.Events
	if a.Events.Given {
		events = a.Events.Value
	} else {
		source = a.Rate
		events = math.Round(a.Rate.Value * time)
		w.note("events from the rate %s, rounded to %s", a.Rate.text(), plain(events))
	}
	if !w.need(source) {
		return 0, 0, false
	}
	if !(events >= 0) || !(time > 0) || math.IsInf(time, 0) {
		w.refuse(source, "rate-out-of-range", fmt.Sprintf("%s events in a person-time of %s are impossible", plain(events), a.PersonTime.text()), "events are at least 0, person-time is above 0")
		return 0, 0, false
	}
	return events, time, true
}
