package effect

import (
	"fmt"
	"math"

	"footing/internal/finding"
	"footing/internal/num"
)

// printed puts a printed effect (or a limit of its interval) on the analysed scale.
func (w *work) printed(f Figure) (value, halfUnit float64, ok bool) {
	s := w.opt.Scale
	if from := w.r.EstimateScale; from != "" && from != s && s != AsGiven {
		return 0, 0, false
	}
	half := 0.0
	if f.Decimals >= 0 {
		half = math.Pow(10, -float64(f.Decimals)) / 2
	}
	transformed := s.IsLog() || s == FisherZ || s == PartialFisherZ || s == LogitProportion || s == CronbachAlpha
	if !transformed || w.r.EstimateIsLog {
		if math.IsNaN(f.Value) || math.IsInf(f.Value, 0) {
			w.refuse(f, "not-a-number", "the figure is no finite number", "check the cell")
			return 0, 0, false
		}
		return f.Value, half, true
	}
	value, err := s.FromShown(f.Value)
	if err != nil {
		mend := "check the cell; if the sheet holds logarithms, say so in its heading (\"log " + s.Words() + "\")"
		w.refuse(f, "estimate-out-of-range", err.Error(), mend)
		return 0, 0, false
	}
	// half a unit of the printed figure on the analysed scale, by the derivative
	switch {
	case s.IsLog():
		half /= f.Value
	case s == LogitProportion:
		half /= f.Value * (1 - f.Value)
	case s == CronbachAlpha:
		half /= 1 - f.Value
	default:
		half /= 1 - f.Value*f.Value
	}
	return value, half, true
}

func (w *work) keepPeople() {
	if a, b := w.r.Treatment.N, w.r.Control.N; a.Given && b.Given {
		w.n = [2]float64{a.Value, b.Value}
	} else if w.r.N.Given {
		w.n = [2]float64{w.r.N.Value, 0}
	}
}

// fromEstimateSE: the estimate as printed; the standard error on the analysed scale (of the logarithm for ratios).
func fromEstimateSE(w *work) {
	if !w.r.Estimate.Given || !w.r.StandardError.Given || !w.need(w.r.Estimate, w.r.StandardError) {
		return
	}
	y, _, ok := w.printed(w.r.Estimate)
	se := w.r.StandardError
	if !ok {
		return
	}
	if !(se.Value > 0) || math.IsInf(se.Value, 0) {
		w.refuse(se, "se-not-positive", fmt.Sprintf("the standard error is %s, and must be above 0", se.text()), "check the cell")
		return
	}
	w.keepPeople()
	w.give(y, se.Value*se.Value, w.asPrinted()+fmt.Sprintf("; variance %s^2", se.text()))
}

// fromEstimateVariance: the estimate as printed with its variance.
func fromEstimateVariance(w *work) {
	if !w.r.Estimate.Given || !w.r.Variance.Given || !w.need(w.r.Estimate, w.r.Variance) {
		return
	}
	y, _, ok := w.printed(w.r.Estimate)
	v := w.r.Variance
	if !ok {
		return
	}
	if !(v.Value > 0) || math.IsInf(v.Value, 0) {
		w.refuse(v, "variance-not-positive", fmt.Sprintf("the variance is %s, and must be above 0", v.text()), "check the cell")
		return
	}
	w.keepPeople()
	w.give(y, v.Value, w.asPrinted()+fmt.Sprintf("; variance %s", v.text()))
}

func (w *work) asPrinted() string {
	s, e := w.opt.Scale, w.r.Estimate
	if w.r.EstimateIsLog {
		return e.text() + ", printed on its analysed scale"
	}
	switch {
	case s.IsLog():
		return "ln " + e.text()
	case s == FisherZ || s == PartialFisherZ:
		return "artanh " + e.text()
	case s == LogitProportion:
		return "logit " + e.text()
	}
	return e.text()
}

// fromEstimateCI: standard error = width of the interval on the analysed scale over twice the quantile of its own level: Student's t for a mean difference whose
// group sizes are known (n1 + n2 - 2 degrees of freedom), else the normal's. The interval must hold the estimate; where it is not symmetric
// around it beyond what the rounding of all three figures explains, that is a finding.
func fromEstimateCI(w *work) {
	r := w.r
	if !r.CILower.Given || !r.CIUpper.Given || !w.need(r.CILower, r.CIUpper) {
		return
	}
	lo, halfLo, ok1 := w.printed(r.CILower)
	hi, halfHi, ok2 := w.printed(r.CIUpper)
	if !ok1 || !ok2 {
		return
	}
	if !(hi > lo) {
		w.refuse(r.CIUpper, "ci-limits-swapped", fmt.Sprintf("the interval runs from %s to %s", r.CILower.text(), r.CIUpper.text()), "the lower limit must lie below the upper one")
		return
	}
	y := (lo + hi) / 2
	formula := fmt.Sprintf("middle of %s to %s", r.CILower.text(), r.CIUpper.text())
	if r.Estimate.Given {
		est, half, ok := w.printed(r.Estimate)
		if !ok || !w.need(r.Estimate) {
			return
		}
		if est < lo-halfLo-half || est > hi+halfHi+half {
			w.refuse(r.Estimate, "ci-does-not-hold-estimate", fmt.Sprintf("the estimate %s lies outside its own interval %s to %s", r.Estimate.text(), r.CILower.text(), r.CIUpper.text()), "check the three cells")
			return
		}
		if off := math.Abs(est - y); off > half+(halfLo+halfHi)/2+1e-9*(hi-lo) && off > 0.05*(hi-lo) {
			w.say(finding.Warning, r.Estimate, "ci-not-symmetric", fmt.Sprintf("the estimate %s is not in the middle of its interval %s to %s (middle %s), beyond what rounding explains", r.Estimate.text(), r.CILower.text(), r.CIUpper.text(), plain(w.opt.Scale.ToShown(y))),
				"check the three cells, and whether the interval belongs to a ratio or to its logarithm")
		}
		y, formula = est, w.asPrinted()
	} else {
		w.note("the estimate is the middle of its interval")
	}
	level := w.level()
	if !r.CILevel.Given {
		w.note("the interval is taken as a %s%% interval", plain(100*level))
	}
	q := num.NormalQuantileUpper((1 - level) / 2)
	law := "normal"
	w.keepPeople()
	if df := w.n[0] + w.n[1] - 2; w.opt.Scale == MeanDifference && w.n[1] > 0 && df >= 1 {
		q, law = num.StudentTQuantileUpper((1-level)/2, df), fmt.Sprintf("t with %s df", plain(df))
	}
	se := (hi - lo) / (2 * q)
	w.give(y, se*se, formula+fmt.Sprintf("; standard error (%s - %s)/(2 x %s), %s", plain(hi), plain(lo), plain(q), law))
}
