package effect

import (
	"fmt"
	"math"
)

// CombineArms makes one group of several (Cochrane Handbook 6.5.2.10): people and events add up; the mean is weighted by people, and the SD holds the scatter within and between the arms. Figures
// that not all arms have are left out. It needs at least one arm.
func CombineArms(arms []Arm) (Arm, error) {
	if len(arms) == 0 {
		return Arm{}, fmt.Errorf("there is no arm to combine")
	}
	out := arms[0]
	for _, b := range arms[1:] {
		out = combineTwo(out, b)
	}
	return out, nil
}

func combineTwo(a, b Arm) Arm {
	var out Arm
	if a.N.Given && b.N.Given {
		out.N = Of(a.N.Value + b.N.Value)
		out.N.Cell = a.N.Cell
	}
	if a.Events.Given && b.Events.Given {
		out.Events = Of(a.Events.Value + b.Events.Value)
		out.Events.Cell = a.Events.Cell
	}
	if a.PersonTime.Given && b.PersonTime.Given {
		out.PersonTime = Of(a.PersonTime.Value + b.PersonTime.Value)
	}
	if out.N.Given && a.Mean.Given && b.Mean.Given {
		n1, n2 := a.N.Value, b.N.Value
		m := (n1*a.Mean.Value + n2*b.Mean.Value) / (n1 + n2)
		out.Mean = Of(m)
		out.Mean.Cell = a.Mean.Cell
		if a.SD.Given && b.SD.Given && n1+n2 > 1 {
			gap := a.Mean.Value - b.Mean.Value
			ss := (n1-1)*a.SD.Value*a.SD.Value + (n2-1)*b.SD.Value*b.SD.Value + n1*n2/(n1+n2)*gap*gap
			out.SD = Of(math.Sqrt(ss / (n1 + n2 - 1)))
			out.SD.Cell = a.SD.Cell
		}
	}
	return out
}

// SplitShared divides a control group that several comparisons share into equal parts (Cochrane Handbook 23.3.4): people and events are divided, means and SDs stay. Whole numbers are kept: the first
// comparisons get the larger parts.
func SplitShared(control Arm, comparisons int) ([]Arm, error) {
	if comparisons < 1 {
		return nil, fmt.Errorf("a control group can't be split into %d parts", comparisons)
	}
	out := make([]Arm, comparisons)
	for i := range out {
		out[i] = control
		out[i].N = part(control.N, i, comparisons)
		out[i].Events = part(control.Events, i, comparisons)
		if control.PersonTime.Given {
			out[i].PersonTime = Of(control.PersonTime.Value / float64(comparisons))
		}
		if out[i].N.Given && out[i].N.Value < 2 && control.Mean.Given {
			return nil, fmt.Errorf("the control group of %g is too small to be split into %d", control.N.Value, comparisons)
		}
	}
	return out, nil
}

func part(f Figure, i, parts int) Figure {
	if !f.Given {
		return f
	}
	whole := math.Floor(f.Value / float64(parts))
	if float64(i) < f.Value-whole*float64(parts) {
		whole++
	}
	f.Value = whole
	return f
}

// SharedControlCovariance is the covariance of two standardized mean differences against the same control group of nc, when one SD is pooled over all arms of N people: 1/nc + g1 g2/(2N)
// (Gleser & Olkin 2009).
func SharedControlCovariance(g1, g2, nc, total float64) float64 { return 1/nc + g1*g2/(2*total) }

// Composite makes one estimate of several of the same study that correlate r with each other: their mean, with variance (1/m^2) [sum v + sum over pairs of r sqrt(v v')] (Borenstein et al. 2009, ch. 24). r lies from
// 0 to 1; all must be on one scale.
func Composite(es []Estimate, r float64) (Estimate, error) {
	if len(es) == 0 {
		return Estimate{}, fmt.Errorf("there is no estimate to combine")
	}
	if !(r >= 0 && r <= 1) {
		return Estimate{}, fmt.Errorf("the correlation of several outcomes of one study lies from 0 to 1; it is %g", r)
	}
	out := es[0]
	m := float64(len(es))
	value, sumV, sumS := 0.0, 0.0, 0.0
	out.Cells, out.Notes = nil, nil
	for _, e := range es {
		if e.Scale != out.Scale {
			return Estimate{}, fmt.Errorf("estimates on different scales can't be combined")
		}
		value += e.Value
		sumV += e.Variance
		sumS += math.Sqrt(e.Variance)
		out.Cells = append(out.Cells, e.Cells...)
		out.Notes = append(out.Notes, e.Notes...)
	}
	out.Value = value / m
	out.Variance = ((1-r)*sumV + r*sumS*sumS) / (m * m)
	out.Table = nil
	out.Route = "composite"
	out.Formula = fmt.Sprintf("mean of %d estimates of one study that correlate %s", len(es), plain(r))
	return out, nil
}
