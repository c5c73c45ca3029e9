package effect

import (
	"fmt"
	"math"

	"footing/internal/finding"
)

// adjust applies what the options ask of every estimate: the design effect of a clustered study that was analysed as if people were independent, and the correction for
// attenuation.
func (w *work) adjust() {
	if !w.ok {
		return
	}
	w.clustered()
	if rel := w.opt.Reliability; rel > 0 && rel < 1 && correctable(w.opt.Scale) {
		// Spearman 1904: the effect over the root of the reliability, its variance over the reliability.
		w.note("corrected for attenuation by a reliability of %s", plain(rel))
		w.formula += fmt.Sprintf("; over sqrt %s", plain(rel))
		w.value /= math.Sqrt(rel)
		w.variance /= rel
	}
}

func correctable(s Scale) bool { return s == StandardizedMeanDifference || s == MeanDifference }

// clustered multiplies the variance by 1 + (m - 1) ICC (Cochrane Handbook 23.1.4), which is what effective sample sizes do.
func (w *work) clustered() {
	m, icc := w.r.ClusterSize, w.r.ICC
	if !m.Given || w.opt.Scale == ICC {
		return
	}
	rho := icc.Value
	if !icc.Given {
		if w.opt.ICC == nil {
			w.say(finding.Warning, m, "clusters-ignored", "the row has a cluster size and no intracluster correlation: its variance is computed as if people were independent", "give the correlation under a heading \"ICC\", or state one for the plan")
			return
		}
		rho = *w.opt.ICC
		w.say(finding.Warning, m, "icc-assumed", fmt.Sprintf("the intracluster correlation is not given; the plan's %s is used", plain(rho)), "give it under a heading \"ICC\"; the plan's sensitivity table varies it")
	}
	if !(rho >= 0 && rho < 1) || !(m.Value >= 1) {
		w.refuse(icc, "icc-out-of-range", fmt.Sprintf("an intracluster correlation of %s with clusters of %s is impossible here", plain(rho), m.text()), "the correlation lies from 0 to below 1, the cluster size is at least 1")
		w.ok = false
		return
	}
	w.use(m, icc)
	deff := 1 + (m.Value-1)*rho
	w.variance *= deff
	w.note("clusters of %s with ICC %s: variance times %s", m.text(), plain(rho), plain(deff))
	w.formula += fmt.Sprintf("; variance times 1 + (%s - 1) %s", m.text(), plain(rho))
}
