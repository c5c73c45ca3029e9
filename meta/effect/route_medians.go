package effect

import "footing/internal/finding"

// fromMedians: means and SDs rebuilt from medians, then as for means. The rebuilding carries more error than the variance shows.
func fromMedians(w *work) {
	t, c := w.r.Treatment, w.r.Control
	if t.Mean.Given && c.Mean.Given || !t.Median.Given && !c.Median.Given {
		return
	}
	rebuilt := *w.r
	for _, x := range []struct {
		from Arm
		to   *Arm
	}{{t, &rebuilt.Treatment}, {c, &rebuilt.Control}} {
		if x.from.Mean.Given {
			continue
		}
		if !w.rebuild(x.from, x.to) {
			return
		}
	}
	inner := &work{r: &rebuilt, opt: w.opt, study: w.study}
	fromMeans(inner)
	w.findings = append(w.findings, inner.findings...)
	w.refused = inner.refused
	if !inner.ok {
		return
	}
	for _, cell := range inner.cells {
		if !contains(w.cells, cell) && cell != "" {
			w.cells = append(w.cells, cell)
		}
	}
	w.n, w.notes = inner.n, append(w.notes, inner.notes...)
	w.say(finding.Warning, Figure{Cell: first(w.cells)}, "rebuilt-from-medians", "means and SDs are rebuilt from medians: the true variance of such an effect is up to 1.5 times what the formula shows", "see the plan without this row, or ask the authors for means")
	w.give(inner.value, inner.variance, inner.formula)
}

// rebuild fills mean and SD of one arm from its median.
func (w *work) rebuild(from Arm, to *Arm) bool {
	s := Summary{N: from.N.Value, Median: from.Median.Value, Min: from.Min.Value, Max: from.Max.Value, Q1: from.Q1.Value, Q3: from.Q3.Value,
		HasRange: from.Min.Given && from.Max.Given, HasQuarters: from.Q1.Given && from.Q3.Given}
	if !s.HasRange && !s.HasQuarters || !w.need(from.Median, from.N) {
		return false
	}
	w.use(from.Q1, from.Q3, from.Min, from.Max)
	mean, sd, skewed, ok := s.MeanAndSD()
	if !ok {
		w.refuse(from.Median, "median-out-of-order", "median, quartiles and range do not stand in ascending order, or there are too few people", "check the cells "+joinCells(w.cells))
		return false
	}
	if skewed {
		w.say(finding.Warning, from.Median, "skewed-summary", "median, quartiles and range are too lopsided for a normal sample (Shi et al. 2020): mean and SD rebuilt from them mislead", "ask the authors for means, or leave the row out")
	}
	w.note("mean %s and SD %s from the median %s of %s people", plain(mean), plain(sd), from.Median.text(), plain(s.N))
	to.Mean, to.SD = Of(mean), Of(sd)
	to.Mean.Cell, to.SD.Cell = from.Median.Cell, from.Median.Cell
	return true
}
