package smallstudy

import (
	"fmt"
	"math"

	"footing/internal/num"
	"footing/meta"
)

// selectionCut is the one-sided level at which results count as significant in the favoured direction.
const selectionCut = 0.025

// SelectionResult is a selection model fitted to the studies.
type SelectionResult struct {
	Mean            Estimate
	TauSquared      float64
	Chance          float64 // publication of a result that misses the cut, relative to one that meets it
	ChanceLow       float64 // 95% limits on the log scale; 0 for a given chance
	ChanceHigh      float64
	LikelihoodRatio float64 // against the unselected model, 1 df; with P. 0 for a given chance
	P               float64
	Inside, Outside int // studies that meet and miss the cut
	Converged       bool
	Available       bool
	Why             string
}

// model is the likelihood of the step-function selection model (Vevea & Hedges 1995, eq. 5): a study is seen with weight 1 when its one-sided p in the favoured direction is at most the cut, else with
// weight omega. y is turned so that larger is favoured.
type model struct {
	y, v []float64
	cut  []float64 // the estimate at which p equals the cut: z sqrt(v)
	seen []bool    // y at or beyond it
	// typical is the harmonic mean of the variances, set by fit.
	typical float64
}

func newModel(d meta.Data, sign float64) *model {
	m := &model{v: d.V}
	z := num.NormalQuantileUpper(selectionCut)
	for i, y := range d.Y {
		m.y = append(m.y, sign*y)
		m.cut = append(m.cut, z*math.Sqrt(d.V[i]))
		m.seen = append(m.seen, sign*y >= m.cut[i])
	}
	return m
}

func (m *model) sides() (inside, outside int) {
	for _, s := range m.seen {
		if s {
			inside++
		} else {
			outside++
		}
	}
	return inside, outside
}

// minusLog is minus the log-likelihood without its constant.
func (m *model) minusLog(mu, tau2, omega float64) float64 {
	var sum num.Accumulator
	logOmega := math.Log(omega)
	for i, y := range m.y {
		s2 := m.v[i] + tau2
		s := math.Sqrt(s2)
		r := y - mu
		sum.Add(math.Log(s2)/2 + r*r/(2*s2))
		// the chance to be seen: S + omega (1 - S), S the chance to meet the cut
		z := (m.cut[i] - mu) / s
		sum.Add(math.Log(num.NormalSurvival(z) + omega*num.NormalCDF(z)))
		if !m.seen[i] {
			sum.Add(-logOmega)
		}
	}
	return sum.Value()
}

// Selection fits the step-function selection model (Vevea & Hedges 1995) with one cut at a one-sided p of .025 in the favoured direction (sign +1 where larger is favoured): standard errors from the observed
// information, the interval of the relative chance on the log scale, the likelihood-ratio test against the unselected maximum-likelihood model with 1 degree of freedom. It asks for 10 studies with 3 or more on each side of the cut.
func Selection(d meta.Data, sign, level float64) SelectionResult {
	m := newModel(d, sign)
	out := SelectionResult{}
	out.Inside, out.Outside = m.sides()
	if d.K() < 10 || out.Inside < 3 || out.Outside < 3 {
		out.Why = fmt.Sprintf("needs 10 studies with 3 or more on each side of its cut; there are %d, %d significant in the favoured direction and %d not", d.K(), out.Inside, out.Outside)
		return out
	}
	return m.result(d, sign, level, 0, out)
}

// SelectionGiven fits the same model with a given relative chance of publication (Vevea & Woods 2005), 0 < chance <= 1, for studies too few to estimate it.
func SelectionGiven(d meta.Data, sign, chance, level float64) SelectionResult {
	m := newModel(d, sign)
	out := SelectionResult{Chance: chance}
	out.Inside, out.Outside = m.sides()
	switch {
	case !(chance > 0 && chance <= 1):
		out.Why = fmt.Sprintf("a relative chance of publication lies above 0 and at most at 1; it is %g", chance)
		return out
	case d.K() < 2:
		out.Why = "needs at least 2 studies"
		return out
	}
	return m.result(d, sign, level, chance, out)
}

func (m *model) result(d meta.Data, sign, level, given float64, out SelectionResult) SelectionResult {
	ml, _ := meta.EstimatorByName("ml")
	tau := ml.Estimate(d)
	start := d.MeanAt(tau.Value)
	start.Estimate *= sign
	start.TauSquared = tau.Value
	mu, tau2, omega, value, converged := m.fit(start, given)
	varMean, varLogOmega, ok := m.information(mu, tau2, omega, given != 0)
	if !ok || !converged {
		out.Why = "its likelihood has no clear maximum here"
		return out
	}
	out.Mean = newEstimate(sign*mu, math.Sqrt(varMean), math.Inf(1), level, d.K())
	if !out.Mean.Available {
		out.Why = out.Mean.Why
		return out
	}
	out.TauSquared, out.Chance, out.Converged, out.Available = tau2, omega, true, true
	if given == 0 {
		z := num.NormalQuantileUpper((1 - level) / 2)
		s := math.Sqrt(varLogOmega)
		out.ChanceLow, out.ChanceHigh = omega*math.Exp(-z*s), omega*math.Exp(z*s)
		plain := m.minusLog(start.Estimate, tau.Value, 1)
		out.LikelihoodRatio = math.Max(0, 2*(plain-value))
		out.P = num.ChiSquaredSurvival(out.LikelihoodRatio, 1)
	}
	return out
}
