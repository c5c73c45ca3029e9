package power

import (
	"fmt"
	"math"

	"footing/internal/num"
)

// Assurer averages power, in the intended direction only, over distributions of the effect (O'Hagan, Stevens & Campbell 2005). Counted both ways it would have no
// ceiling and take credit for wrong answers.
type Assurer struct {
	Design Design
	Sign   float64 // +1 where a larger effect favours the treatment, -1 where a smaller one does
}

// Ceiling is the assurance of an endless study: the chance that the true effect lies on the intended side.
func (a Assurer) Ceiling(e Effects) float64 {
	if a.Sign < 0 {
		return e.CDF(0)
	}
	return e.Survival(0)
}

// Averaged is an assurance with its numerical error.
type Averaged struct {
	Value     float64
	Error     float64
	Converged bool
}

// At is the assurance over each of several distributions with n people in the first group, to about 1e-8.
//
// Power in the intended direction runs from 0 to 1 within a few standard errors; that stretch is integrated by adaptive quadrature, with the distribution's own middle
// as a break; below it power is nothing, beyond it the distribution's own tail is the integral. All distributions share the power curve.
func (a Assurer) At(n int, es ...Effects) []Averaged {
	quick := quickly(a.Design, n, int(math.Copysign(1, a.Sign)))
	from, to := a.stretch(quick, n)
	// u runs along the intended direction.
	power := newPowerCurve(func(u float64) float64 { return quick(a.Sign * u).Toward(a.Sign) }, from, to)
	out := make([]Averaged, len(es))
	for i, e := range es {
		if e == nil {
			continue
		}
		density := func(u float64) float64 { return e.Density(a.Sign * u) }
		tail := e.Survival(to)
		if a.Sign < 0 {
			tail = e.CDF(-to)
		}
		var breaks []float64
		for _, p := range [...]float64{0.02, 0.5, 0.98} {
			if a.Sign < 0 {
				p = 1 - p
			}
			if u := a.Sign * e.Quantile(p); u > from && u < to {
				breaks = append(breaks, u)
			}
		}
		r := num.Integrate(func(u float64) float64 { return power.at(u) * density(u) }, from, to, num.IntegrateOptions{Absolute: 1e-9, Relative: 1e-9, Breaks: breaks})
		out[i] = Averaged{Value: math.Min(1, r.Value+tail), Error: r.Error, Converged: r.Converged}
	}
	return out
}

// stretch is the range of effects, along the intended direction, in which power is neither nothing (below 1e-11) nor all (above 1 - 1e-11).
func (a Assurer) stretch(quick func(float64) Rejections, n int) (from, to float64) {
	at := func(u float64) float64 { return quick(a.Sign * u).Toward(a.Sign) }
	se := a.Design.StandardError(0, n)
	if !(se > 0) || math.IsInf(se, 0) {
		se = 1
	}
	from, to = -6*se, 9*se
	for i := 0; i < 40 && at(from) > 1e-11; i++ {
		from -= 2 * se
	}
	for i := 0; i < 60 && at(to) < 1-1e-11; i++ {
		to += 2 * se
	}
	return from, to
}

// NForAssurance is the smallest first group whose assurance reaches a target, or the statement that none does: the ceiling lies below it, or no size up to limit reaches it.
func (a Assurer) NForAssurance(e Effects, target float64, limit int) (int, error) {
	ceiling := a.Ceiling(e)
	if target >= ceiling {
		return 0, fmt.Errorf("no size reaches an assurance of %s: its ceiling, the chance that the effect is on the favoured side at all, is %s", percent(target), percent(ceiling))
	}
	info := a.Design.Info()
	holds := func(n int) bool { return a.At(n, e)[0].Value >= target }
	if !holds(limit) {
		return 0, fmt.Errorf("no size up to %d in the first group reaches an assurance of %s; its ceiling is %s", limit, percent(target), percent(ceiling))
	}
	n, _ := firstTrue(func(n int) bool { return n >= limit || holds(n) }, info.MinN, 40)
	return n, nil
}

func percent(p float64) string {
	switch {
	case p > 0.995 && p < 1:
		return fmt.Sprintf("%.2f%%", 100*p)
	}
	return fmt.Sprintf("%.0f%%", 100*p)
}
