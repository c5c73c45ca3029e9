package meta

import (
	"math"

	"footing/internal/num"
)

// dersimonianLaird: (Q - df)/(sum w - sum w^2/sum w), cut at 0 (DerSimonian & Laird 1986, eq. 8).
func dersimonianLaird(d Data) TauSquared {
	if t, only := single(d); only {
		return t
	}
	return closedForm((d.MeanAt(0).Q - float64(d.K()-1)) / d.spread())
}

// spread is sum w - sum w^2/sum w, written as sum w (1 - w/sum w) so that one dominating study costs no digits.
func (d Data) spread() float64 {
	w1, _, _ := d.powers()
	var s num.Accumulator
	for i, v := range d.V {
		// 1 - w_i/sum w = (sum of the others)/sum w
		others := w1 - 1/v
		if others < 1e-3*w1 {
			var o num.Accumulator
			for j, u := range d.V {
				if j != i {
					o.Add(1 / u)
				}
			}
			others = o.Value()
		}
		s.Add(others / v / w1)
	}
	return s.Value()
}

// generalMoments is the method of moments with fixed weights a: [sum a (y - ybar)^2 - (sum a v - sum a^2 v/sum a)]/(sum a - sum a^2/sum a)
// (DerSimonian & Kacker 2007, eq. 6).
func generalMoments(d Data, a []float64) float64 {
	var sa, say, sa2, sav, sa2v num.Accumulator
	for i := range a {
		sa.Add(a[i])
		say.Add(a[i] * d.Y[i])
		sa2.Add(a[i] * a[i])
		sav.Add(a[i] * d.V[i])
		sa2v.Add(a[i] * a[i] * d.V[i])
	}
	mean := say.Value() / sa.Value()
	var q num.Accumulator
	for i := range a {
		r := d.Y[i] - mean
		q.Add(a[i] * r * r)
	}
	return (q.Value() - (sav.Value() - sa2v.Value()/sa.Value())) / (sa.Value() - sa2.Value()/sa.Value())
}

// twoStepDersimonianLaird: the method of moments with the weights that the first step's (cut) estimate gives (DerSimonian & Kacker 2007).
func twoStepDersimonianLaird(d Data) TauSquared {
	if t, only := single(d); only {
		return t
	}
	first := dersimonianLaird(d).Value
	a := make([]float64, d.K())
	for i, v := range d.V {
		a[i] = 1 / (v + first)
	}
	return closedForm(generalMoments(d, a))
}

// hedgesOlkin: the variance of the estimates less the mean of their variances (Cochran 1954; Hedges & Olkin 1985).
func hedgesOlkin(d Data) TauSquared {
	if t, only := single(d); only {
		return t
	}
	k := float64(d.K())
	return closedForm(meanSquare(d.Y, k-1) - num.Sum(d.V)/k)
}

// meanSquare is the sum of squared deviations from the plain mean over a divisor.
func meanSquare(y []float64, divisor float64) float64 {
	mean := num.Sum(y) / float64(len(y))
	var s num.Accumulator
	for _, x := range y {
		s.Add((x - mean) * (x - mean))
	}
	return s.Value() / divisor
}

// hunterSchmidt: (Q - k)/sum w, cut at 0 (Hunter & Schmidt 2004).
func hunterSchmidt(d Data) TauSquared {
	if t, only := single(d); only {
		return t
	}
	w1, _, _ := d.powers()
	return closedForm((d.MeanAt(0).Q - float64(d.K())) / w1)
}

// sidikJonkman: from a rough tau0 (mean squared deviation, divisor k), the weighted residual variance with weights 1/(v/tau0 + 1) (Sidik & Jonkman 2005,
// eq. 5). It is never 0 unless all estimates are equal.
func sidikJonkman(d Data) TauSquared {
	if t, only := single(d); only {
		return t
	}
	if d.equal() {
		return TauSquared{Converged: true, Why: "all estimates are equal"}
	}
	rough := meanSquare(d.Y, float64(d.K()))
	scaled := Data{Y: d.Y, V: make([]float64, d.K())}
	for i, v := range d.V {
		scaled.V[i] = v/rough + 1
	}
	return TauSquared{Value: scaled.MeanAt(0).Q / float64(d.K()-1), Converged: true}
}

// pauleMandel: the tau2 at which the generalised Q equals its expectation k - 1, by a bracketed root (Paule & Mandel 1982).
func pauleMandel(d Data) TauSquared {
	if t, only := single(d); only {
		return t
	}
	target := float64(d.K() - 1)
	if d.MeanAt(0).Q <= target {
		return TauSquared{Truncated: d.MeanAt(0).Q < target, Converged: true}
	}
	return d.solveQ(target)
}

// solveQ finds tau2 > 0 with Q(tau2) = target; Q falls with tau2, and Q(0) lies above the target.
func (d Data) solveQ(target float64) TauSquared {
	// Q(tau2) <= sum (y - ybar)^2/tau2, which bounds the root.
	upper := math.Max(meanSquare(d.Y, 1)/target*1.01, 1e-300)
	r := num.Root(func(t float64) float64 { return d.MeanAt(t).Q - target }, 0, upper, num.RootOptions{Tolerance: 1e-14 * upper})
	return TauSquared{Value: r.X, Converged: r.Converged, Iterations: r.Iterations}
}
